package catalog

import (
	"fmt"
	"path"
	"strings"
	"time"

	"driploop/catalog/source"
	"driploop/catalog/unit"
)

// The ends of a move that are no shelf.
const (
	ToJob   = "job"
	ToScrap = "scrap"
)

// Moment is when something happened: a day, or a day with the time of day as it
// was written down, without a zone.
type Moment struct {
	Day   unit.Date
	Clock bool // a time of day was given
	Sec   int  // seconds since midnight, 0 without a clock
}

// String prints "2026-11-20" or "2026-11-20 16:00".
func (m Moment) String() string {
	if !m.Clock {
		return m.Day.String()
	}
	s := fmt.Sprintf("%s %02d:%02d", m.Day, m.Sec/3600, m.Sec/60%60)
	if m.Sec%60 != 0 {
		s += fmt.Sprintf(":%02d", m.Sec%60)
	}
	return s
}

var moment = source.Either(source.IsDay,
	source.Map(source.Day, func(d unit.Date) (Moment, error) { return Moment{Day: d}, nil }),
	source.Map(source.When, func(t time.Time) (Moment, error) {
		return Moment{Day: unit.DateOf(t), Clock: true, Sec: t.Hour()*3600 + t.Minute()*60 + t.Second()}, nil
	}), "date or local time")

// Sheet is one event of the store: a count, a delivery, an issue, a return. The
// file's name is its ID.
type Sheet struct {
	ID   string
	File *source.File
	Head Head

	Counts []Count
	Reels  []Reel
	Moves  []Move
	Cuts   []Cut
}

// Head is the [sheet] table: what holds for every row that does not say otherwise.
type Head struct {
	At       source.Place
	On       source.Val[Moment]
	By       source.Val[string] // initials of who was there
	Order    source.Val[string] // the rows arrived under it
	Job      source.Val[string]
	Where    source.Val[string]
	Complete source.Val[bool] // what is not listed at Where is not there
	Void     source.Val[string]
	Because  source.Val[string]
}

// Row is what every row of a sheet carries. On is the head's where the row has none.
type Row struct {
	At      source.Place
	On      source.Val[Moment]
	By      source.Val[string]
	Because source.Val[string]
}

// Count says how many pieces of a part were counted in a bin.
type Count struct {
	Row
	Part    source.Val[string]
	Where   source.Val[string]
	Qty     source.Val[int]
	Serials source.Val[Words]
}

// Reel is a reading of one tagged piece of cut stock.
type Reel struct {
	Row
	Tag     source.Val[string]
	Part    source.Val[string]
	Where   source.Val[string]
	Left    source.Val[unit.MM]
	How     source.Val[string] // marks, tape, label, guess
	Sealed  source.Val[bool]
	Of      source.Val[string] // the tag it was cut from
	Order   source.Val[string]
	Job     source.Val[string] // of a remnant: the job that gives it back
	ForPart source.Val[string] // the ordered part in whose place it came
}

// Birth reports whether the reading is the first of its piece: it arrived under an
// order or was cut from another.
func (r *Reel) Birth() bool { return r.Order.Set || r.Of.Set }

// Move is goods that go from one end to another: a number of pieces, or a tag with
// all that is on it. Ends are a shelf, ToJob or ToScrap; an arrival under an order
// comes from the vendor and has no From.
type Move struct {
	Row
	Part    source.Val[string]
	Tag     source.Val[string]
	Qty     source.Val[int]
	From    source.Val[string]
	To      source.Val[string]
	Job     source.Val[string]
	Order   source.Val[string]
	ForPart source.Val[string]
	Serials source.Val[Words]
}

// Arrival reports goods that come from a vendor.
func (m *Move) Arrival() bool { return m.Order.Set && !m.From.Set }

// Cut is a length that left a reel, waste included; the piece goes to the job.
type Cut struct {
	Row
	Tag    source.Val[string]
	Length source.Val[unit.MM]
	Job    source.Val[string] // absent: waste, with Because
	Cable  source.Val[string] // a line of the job's plan
}

// ReadStock reads one file of the stock folder: an order where it has [order],
// else a sheet. The other of the two is nil.
func ReadStock(d *source.Doc) (*Sheet, *Order, []source.Problem) {
	if d.Root.Get("order") != nil {
		o, ps := ReadOrder(d)
		return nil, o, ps
	}
	s, ps := ReadSheet(d)
	return s, nil, ps
}

// ReadSheet reads a sheet. Rows that lack what they need are kept as they are and
// reported; the ledger passes over them.
func ReadSheet(d *source.Doc) (*Sheet, []source.Problem) {
	s := &Sheet{ID: nameOf(d.File), File: d.File}
	return s, source.Read(d, s.keys)
}

// DescribeSheet documents the format of stock sheets.
func DescribeSheet() *source.Record { return source.Describe(new(Sheet).keys) }

func nameOf(f *source.File) string { return strings.TrimSuffix(path.Base(f.Path), ".toml") }

func (s *Sheet) keys(k *source.Keys) {
	h := &s.Head
	source.One(k, h, "sheet", (*Head).keys, "defaults for the rows")
	source.Rows(k, &s.Counts, "count", func(c *Count, k *source.Keys) { c.keys(k, h) }, "pieces counted in a bin")
	source.Rows(k, &s.Reels, "reel", func(r *Reel, k *source.Keys) { r.keys(k, h) }, "a reading of a tagged piece of cut stock")
	source.Rows(k, &s.Moves, "move", func(m *Move, k *source.Keys) { m.keys(k, h) }, "goods that go from one end to another")
	source.Rows(k, &s.Cuts, "cut", func(c *Cut, k *source.Keys) { c.keys(k, h) }, "a length that left a reel")
	on, where, order := source.Given("on"), source.Given("where"), source.Given("order")
	k.Demand(fromHead([]string{"count", "reel", "move", "cut"}, on, on),
		fromHead([]string{"count", "reel"}, where, where),
		fromHead([]string{"move"}, order, source.Given("from"), order),
		fromHead([]string{"move"}, where, source.Given("to")))
}

// fromHead is a need of rows that a key of the head meets for all of them.
func fromHead(rows []string, head source.State, of ...source.State) source.Condition {
	return source.Condition{Rows: rows, Any: of, Head: "sheet", HeadAny: []source.State{head}}
}

func (h *Head) keys(k *source.Keys) {
	h.At = k.At()
	source.Opt(k, &h.On, "on", moment, "when it happened, not when it was typed")
	source.Opt(k, &h.By, "by", source.Text, "initials of who was there")
	source.Opt(k, &h.Order, "order", source.Name, "the rows arrived under this order")
	source.Opt(k, &h.Job, "job", source.Name, "job of the rows")
	source.Opt(k, &h.Where, "where", source.Name, "shelf of the counts and readings, and of what arrived")
	source.Opt(k, &h.Complete, "complete", source.Flag, "everything at where is listed; what is not is none")
	source.Opt(k, &h.Void, "void", source.Text, "why the sheet counts no longer")
	source.Opt(k, &h.Because, "because", source.Text, "what should be known about it")
	complete := source.Holds("complete", true)
	k.Demand(source.Condition{When: &complete, Any: []source.State{source.Given("where")}},
		source.Condition{When: &complete, Any: []source.State{source.Given("on")}})
	if h.Complete.V {
		needs(k, k.Has("where"), "where", "a complete count is complete for one shelf")
		needs(k, k.Has("on"), "on", "a complete count holds for one time")
	}
}

// needs reports a key whose need follows from other keys.
func needs(k *source.Keys, have bool, name, doc string) {
	if !have && !k.Recording() {
		k.Missing(name, doc)
	}
}

// inherit gives a row what its head says where the row itself says nothing.
func inherit[T any](k *source.Keys, v *source.Val[T], name string, head source.Val[T]) {
	if !k.Has(name) {
		*v = head
	}
}

func (r *Row) keys(k *source.Keys, h *Head) {
	r.At = k.At()
	source.Opt(k, &r.On, "on", moment, "when; absent: as the sheet")
	source.Opt(k, &r.By, "by", source.Text, "who; absent: as the sheet")
	source.Opt(k, &r.Because, "because", source.Text, "what should be known about the row")
	inherit(k, &r.On, "on", h.On)
	inherit(k, &r.By, "by", h.By)
	needs(k, k.Has("on") || h.On.Set, "on", "a row has its day, or its sheet has")
}

func (c *Count) keys(k *source.Keys, h *Head) {
	c.Row.keys(k, h)
	source.Need(k, &c.Part, "part", source.Name, "what was counted")
	source.Opt(k, &c.Where, "where", source.Name, "on which shelf; absent: as the sheet")
	source.Need(k, &c.Qty, "qty", source.Count(0, 10000000), "pieces, not bags; 0 is none")
	source.Opt(k, &c.Serials, "serials", source.ListOf(source.Text), "serial numbers seen")
	inherit(k, &c.Where, "where", h.Where)
	needs(k, k.Has("where") || h.Where.Set, "where", "a count has its shelf, or its sheet has")
	serialsFit(k, c.Serials, c.Qty)
}

func (r *Reel) keys(k *source.Keys, h *Head) {
	r.Row.keys(k, h)
	source.Need(k, &r.Tag, "tag", source.Name, "the tag on it; it belongs to one part for ever")
	source.Need(k, &r.Part, "part", source.Name, "what is on it")
	source.Opt(k, &r.Where, "where", source.Name, "on which shelf; absent: as the sheet")
	source.Need(k, &r.Left, "left", source.Length, "what is left on it")
	source.Opt(k, &r.How, "how", source.OneOf("marks", "tape", "label", "guess"), "how the length is known")
	source.Opt(k, &r.Sealed, "sealed", source.Flag, "not opened yet")
	source.Opt(k, &r.Of, "of", source.Name, "of a remnant: the tag it was cut from")
	source.Opt(k, &r.Order, "order", source.Name, "arrived under it; absent: as the sheet")
	source.Opt(k, &r.Job, "job", source.Name, "of a remnant: the job that gives it back; absent: as the sheet")
	source.Opt(k, &r.ForPart, "for_part", source.Name, "the ordered part in whose place it came")
	inherit(k, &r.Where, "where", h.Where)
	inherit(k, &r.Order, "order", h.Order)
	inherit(k, &r.Job, "job", h.Job)
	needs(k, k.Has("where") || h.Where.Set, "where", "a reading has its shelf, or its sheet has")
	needs(k, !k.Has("for_part") || r.Order.Set, "order", "for_part closes the line of an order")
	if r.Of.Set && r.Of.V == r.Tag.V {
		k.Fault(r.Of.At, "the piece "+source.Quote(r.Tag.V)+" is said to be cut from itself", "name the reel it was cut from", r.Tag.At)
	}
}

func (m *Move) keys(k *source.Keys, h *Head) {
	m.Row.keys(k, h)
	source.Opt(k, &m.Part, "part", source.Name, "what moves; or tag")
	source.Opt(k, &m.Tag, "tag", source.Name, "a piece of cut stock with all that is on it")
	source.Opt(k, &m.Qty, "qty", source.Count(1, 10000000), "pieces, always positive")
	source.Opt(k, &m.From, "from", source.Name, "a shelf, or job; absent under an order: the vendor")
	source.Opt(k, &m.To, "to", source.Name, "a shelf, job or scrap")
	source.Opt(k, &m.Job, "job", source.Name, "the job at either end; absent: as the sheet")
	source.Opt(k, &m.Order, "order", source.Name, "arrived under it; absent: as the sheet")
	source.Opt(k, &m.ForPart, "for_part", source.Name, "the ordered part in whose place it came")
	source.Opt(k, &m.Serials, "serials", source.ListOf(source.Text), "serial numbers that move")
	inherit(k, &m.Job, "job", h.Job)
	inherit(k, &m.Order, "order", h.Order)
	if m.Order.Set && !k.Has("from") {
		inherit(k, &m.To, "to", h.Where)
	}
	part := source.Given("part")
	k.Demand(source.OneOfTwo("part", "tag")...)
	k.Demand(source.Condition{When: &part, Any: []source.State{source.Given("qty")}},
		source.Condition{Not: []source.State{source.Given("tag"), source.Given("qty")}},
		source.Condition{Not: []source.State{source.Holds("from", ToScrap)}})
	m.what(k)
	m.ends(k)
	serialsFit(k, m.Serials, m.Qty)
}

// what holds the keys that say what moves against each other.
func (m *Move) what(k *source.Keys) {
	switch part, tag := k.Has("part"), k.Has("tag"); {
	case part && tag:
		k.Fault(m.Tag.At, "the move names a part and a tag", "keep tag for cut stock, part and qty for all else", m.Part.At)
	case !part && !tag:
		needs(k, false, "part", "or tag: what moves")
	case tag && k.Has("qty"):
		k.Fault(m.Qty.At, "a tag moves with all that is on it and has no qty", "take qty out; a part of the length is a [[cut]]", m.Tag.At)
	case part:
		needs(k, k.Has("qty"), "qty", "how many pieces move")
	}
}

// ends holds the two ends of a move against each other.
func (m *Move) ends(k *source.Keys) {
	needs(k, k.Has("from") || m.Order.Set, "from", "a move has two ends; only what arrives under an order has none here")
	needs(k, k.Has("to") || m.To.Set, "to", "a move has two ends")
	job := m.From.V == ToJob || m.To.V == ToJob
	needs(k, !job || k.Has("job") || m.Job.Set, "job", "which job it goes to or comes from")
	needs(k, !k.Has("for_part") || m.Arrival(), "order", "for_part closes the line of an order")
	if m.Arrival() && k.Has("tag") {
		k.Fault(m.Tag.At, "a tagged piece arrives by its first reading, not by a move", "write it as [[reel]]")
	}
	if m.From.Set && m.From.V == m.To.V {
		k.Fault(m.To.At, "the move ends where it begins, at "+source.Quote(m.To.V), "name the other end", m.From.At)
	}
	if m.From.V == ToScrap {
		k.Fault(m.From.At, "nothing comes back from scrap", "count it on the shelf where it was found")
	}
}

// serialsFit says where a row lists more serial numbers than pieces, or one twice.
func serialsFit(k *source.Keys, serials source.Val[Words], qty source.Val[int]) {
	if serials.Set && qty.Set && len(serials.V) > qty.V {
		k.Fault(serials.At, fmt.Sprintf("%d serial numbers stand for %d pieces", len(serials.V), qty.V), "make qty and serials agree", qty.At)
	}
	seen := map[string]source.Place{}
	for _, s := range serials.V {
		if first, twice := seen[s.V]; twice {
			k.Fault(s.At, "the serial number "+source.Quote(s.V)+" stands twice in one row", "keep it once", first)
			continue
		}
		seen[s.V] = s.At
	}
}

func (c *Cut) keys(k *source.Keys, h *Head) {
	c.Row.keys(k, h)
	source.Need(k, &c.Tag, "tag", source.Name, "the reel")
	source.Need(k, &c.Length, "length", source.Length, "what left it, waste included")
	source.Opt(k, &c.Job, "job", source.Name, "who the piece is for; absent: waste, with because")
	source.Opt(k, &c.Cable, "cable", source.Name, "the line of the job's plan")
	inherit(k, &c.Job, "job", h.Job)
	if c.Job.Set {
		needs(k, k.Has("cable"), "cable", "which line of the plan the piece is for")
		return
	}
	needs(k, k.Has("job") || k.Has("because"), "because", "a cut for no job says why")
	if c.Cable.Set && !k.Has("job") {
		k.Fault(c.Cable.At, "the cut names the line "+source.Quote(c.Cable.V)+" but no job", "add job")
	}
}
