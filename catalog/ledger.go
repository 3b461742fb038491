package catalog

import (
	"cmp"
	"slices"
	"strings"

	"driploop/catalog/source"
	"driploop/catalog/unit"
)

// Book adds up sheets and orders as of the end of today. Rows after today do not
// count, nor do void sheets, nor rows that could not be read in full. look finds a
// part by ID, or nil.
func Book(premises *Premises, sheets []*Sheet, orders []*Order, look func(string) *Part, today unit.Date) *Stock {
	b := &book{
		premises: premises, look: look, today: today, stock: &Stock{Today: today},
		bins: map[binKey]*binLog{}, tags: map[string]*tagLog{}, serials: map[string]*serialLog{},
		issues: map[[2]string]*Issue{}, arrived: map[string]*arrivals{},
	}
	b.gather(sheets)
	b.completes()
	b.replayBins()
	b.replayTags()
	b.replaySerials()
	b.fillOrders(orders)
	b.unknowns()
	b.finish()
	return b.stock
}

// book is a ledger while it is being added up.
type book struct {
	premises *Premises
	look     func(string) *Part
	today    unit.Date
	stock    *Stock

	bins     map[binKey]*binLog
	tags     map[string]*tagLog
	serials  map[string]*serialLog // by part
	issues   map[[2]string]*Issue  // by job and part
	arrived  map[string]*arrivals  // by order
	complete []*Sheet
	doubts   []doubt
}

type binKey struct{ part, where string }

// stamp orders instants: days, and seconds within them. A bare date is either the
// first second of its day or one past the last, which still lies before the next.
type stamp int64

const wholeDay = 24 * 60 * 60

func stampOf(m Moment, evening bool) stamp {
	day := stamp((m.Day.Year*16+m.Day.Month)*32 + m.Day.Day)
	sec := m.Sec
	if !m.Clock && evening {
		sec = wholeDay
	}
	return day*(wholeDay+1) + stamp(sec)
}

// sameDay reports two moments of one day that do not both say at what time: nothing
// but the rule tells which of the two events came first.
func (m Moment) sameDay(n Moment) bool { return !(m.Clock && n.Clock) && m.Day == n.Day }

// gather spreads the rows of all sheets over the bins, tags and serial numbers
// they touch.
func (b *book) gather(sheets []*Sheet) {
	sheets = slices.Clone(sheets)
	slices.SortStableFunc(sheets, func(s, t *Sheet) int { return strings.Compare(s.File.Path, t.File.Path) })
	for _, s := range sheets {
		if s.Head.Void.Set {
			continue
		}
		if h := &s.Head; h.Complete.V && h.Where.Set && h.On.Set && b.past(h.At, h.On, "", "") {
			b.complete = append(b.complete, s)
		}
		for i := range s.Counts {
			b.count(&s.Counts[i])
		}
		for i := range s.Reels {
			b.reel(&s.Reels[i])
		}
		for i := range s.Moves {
			b.move(&s.Moves[i])
		}
		for i := range s.Cuts {
			b.cut(&s.Cuts[i])
		}
	}
}

// past reports whether a row, about a part or a tag, has happened by today, and
// notes one that has not.
func (b *book) past(at source.Place, on source.Val[Moment], part, tag string) bool {
	if on.V.Day.After(b.today) {
		b.note(Note{Kind: NoteFuture, At: at, Part: part, Tag: tag, On: on.V})
		return false
	}
	if on.V.Clock && on.V.Day == b.today && on.V.Sec >= b.stock.Latest.Sec {
		b.stock.Latest = on.V
	}
	return true
}

func (b *book) note(n Note) { b.stock.Notes = append(b.stock.Notes, n) }

func (b *book) count(c *Count) {
	if !c.On.Set || !c.Part.Set || !c.Where.Set || !c.Qty.Set || b.byLength(c.Part.V) || !b.past(c.At, c.On, c.Part.V, "") {
		return
	}
	key, when := binKey{c.Part.V, c.Where.V}, stampOf(c.On.V, true)
	b.bin(key).add(binEvent{when: when, on: c.On.V, count: true, qty: int64(c.Qty.V), at: c.At})
	b.serial(c.Part.V, c.Serials).add(serialEvent{when: when, count: true, to: Spot{Shelf: c.Where.V}, qty: c.Qty.V, numbers: c.Serials.V, at: c.At})
	b.doubt(when, "", key).part(c.Part).shelf(c.Where)
}

func (b *book) move(m *Move) {
	if m.Tag.Set {
		b.tagMove(m)
		return
	}
	from, known := b.from(m)
	if !known || !m.On.Set || !m.Part.Set || !m.To.Set || !m.Qty.Set || b.byLength(m.Part.V) || !b.past(m.At, m.On, m.Part.V, "") {
		return
	}
	to, qty, when := end(m.To.V, m.Job.V), int64(m.Qty.V), stampOf(m.On.V, false)
	var bins []binKey
	for _, e := range []struct {
		spot Spot
		qty  int64
	}{{from, -qty}, {to, qty}} {
		if e.spot.Shelf == "" {
			continue
		}
		key := binKey{m.Part.V, e.spot.Shelf}
		b.bin(key).add(binEvent{when: when, on: m.On.V, qty: e.qty, at: m.At})
		bins = append(bins, key)
	}
	b.handed(m, from, to, qty, when)
	b.serial(m.Part.V, m.Serials).add(serialEvent{when: when, from: from, to: to, arrives: m.Arrival(), numbers: m.Serials.V, at: m.At})
	d := b.doubt(when, "", bins...).part(m.Part).shelf(m.From).shelf(m.To)
	if m.Arrival() {
		b.arrivalOf(m.Order.V).pieces(m)
		d.order(m.Order).part(m.ForPart)
	}
}

// handed books what a move gives to a job or takes back from it.
func (b *book) handed(m *Move, from, to Spot, qty int64, when stamp) {
	if from.Job != "" {
		b.issue(from.Job, m.Part.V, IssueRow{At: m.At, Qty: Quantity{Each: -qty}, when: when, bin: binKey{m.Part.V, to.Shelf}})
	}
	if to.Job != "" {
		b.issue(to.Job, m.Part.V, IssueRow{At: m.At, Qty: Quantity{Each: qty}, when: when, bin: binKey{m.Part.V, from.Shelf}})
	}
}

func (b *book) issue(job, part string, row IssueRow) {
	key := [2]string{job, part}
	is := b.issues[key]
	if is == nil {
		is = &Issue{Job: job, Part: part}
		b.issues[key] = is
	}
	is.Net = is.Net.Plus(row.Qty)
	is.Rows = append(is.Rows, row)
}

// from is the spot that a move leaves; false where it should name one and does not.
func (b *book) from(m *Move) (Spot, bool) {
	if m.Arrival() {
		return Spot{}, true
	}
	return end(m.From.V, m.Job.V), m.From.Set
}

// end is the spot that one end of a move names.
func end(name, job string) Spot {
	switch name {
	case ToJob:
		return Spot{Job: job}
	case ToScrap:
		return Spot{}
	}
	return Spot{Shelf: name}
}

// byLength reports a part of which only tags count. Rows that count it in pieces
// are a fault of their file, see CheckStock, and mean nothing here.
func (b *book) byLength(part string) bool {
	p := b.look(part)
	return p != nil && p.CutStock()
}

func (b *book) bin(k binKey) *binLog {
	l := b.bins[k]
	if l == nil {
		l = &binLog{}
		b.bins[k] = l
	}
	return l
}

// completes adds what a complete count says without writing it: whatever else the
// book has on the shelf is not there.
func (b *book) completes() {
	for _, s := range b.complete {
		h := &s.Head
		when, listed := stampOf(h.On.V, true), listedAt(s)
		for key, l := range b.bins {
			if key.where == h.Where.V && !listed[key.part] {
				l.add(binEvent{when: when, on: h.On.V, count: true, at: h.At})
				if sl := b.serials[key.part]; sl != nil {
					sl.add(serialEvent{when: when, count: true, to: Spot{Shelf: key.where}, at: h.At})
				}
			}
		}
		for _, l := range b.tags {
			if l.touches(h.Where.V) && !listed["tag "+l.id] {
				l.add(tagEvent{kind: tagMissed, when: when, on: h.On.V, to: Spot{Shelf: h.Where.V}, at: h.At})
			}
		}
		b.doubt(when, "").shelf(h.Where)
	}
}

func listedAt(s *Sheet) map[string]bool {
	listed := map[string]bool{}
	for i := range s.Counts {
		if s.Counts[i].Where.V == s.Head.Where.V {
			listed[s.Counts[i].Part.V] = true
		}
	}
	for i := range s.Reels {
		if s.Reels[i].Where.V == s.Head.Where.V {
			listed["tag "+s.Reels[i].Tag.V] = true
		}
	}
	return listed
}

// finish puts every list into its order.
func (b *book) finish() {
	s := b.stock
	slices.SortFunc(s.Bins, func(x, y Bin) int {
		return cmp.Or(strings.Compare(x.Part, y.Part), strings.Compare(x.Where, y.Where))
	})
	for _, is := range b.issues {
		for i := range is.Rows {
			is.Rows[i].Settled = b.settled(is.Rows[i].when, is.Rows[i].tag, is.Rows[i].bin)
		}
		slices.SortStableFunc(is.Rows, func(x, y IssueRow) int { return byPlace(x.At, y.At) })
		s.Issues = append(s.Issues, *is)
	}
	slices.SortFunc(s.Issues, func(x, y Issue) int {
		return cmp.Or(strings.Compare(x.Job, y.Job), strings.Compare(x.Part, y.Part))
	})
	for i := range s.Notes {
		if n := &s.Notes[i]; n.Part == "" && b.tags[n.Tag] != nil {
			n.Part = b.tags[n.Tag].part
		}
	}
	slices.SortStableFunc(s.Notes, Note.order)
}

// settled reports whether one of the bins was counted, or the tag read, after an
// instant.
func (b *book) settled(when stamp, tag string, bins ...binKey) bool {
	for _, key := range bins {
		if l := b.bins[key]; l != nil && l.newest > when {
			return true
		}
	}
	l := b.tags[tag]
	return l != nil && l.newest > when
}

func byPlace(p, q source.Place) int {
	return cmp.Or(strings.Compare(p.Path(), q.Path()), cmp.Compare(p.From, q.From))
}

// kindOf is the kind of a shelf, or "".
func (b *book) kindOf(shelf string) string {
	if s := b.premises.Shelf(shelf); s != nil {
		return s.Kind.V
	}
	return ""
}
