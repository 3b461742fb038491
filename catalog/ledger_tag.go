package catalog

import (
	"cmp"
	"slices"
	"strings"

	"driploop/catalog/source"
	"driploop/catalog/unit"
)

// tagLog is what happened to one piece of cut stock.
type tagLog struct {
	id     string
	part   string // "" where nothing was ever read under the tag
	first  source.Place
	reads  []*Reel
	events []tagEvent
	newest stamp // of the newest reading
	born   stamp // of the birth; 0 without one
}

// The kinds of event, in the order in which they come at one instant. Cuts and
// moves of one instant commute: a reel that goes to a job is issued with what the
// cuts left, and the cuts are issued by themselves.
const (
	tagBirth = iota
	tagCut
	tagMove
	tagRead
	tagMissed // a complete count did not find it
)

type tagEvent struct {
	kind   int
	when   stamp
	on     Moment
	at     source.Place
	reel   *Reel
	length unit.MM // of a cut
	job    string  // of a cut; "" for waste and for what was split off as a piece of its own
	from   Spot    // of a move
	to     Spot    // of a move; the shelf of a reading or complete count
}

func (e tagEvent) before(f tagEvent) int {
	return cmp.Or(cmp.Compare(e.when, f.when), cmp.Compare(e.kind, f.kind), byPlace(e.at, f.at))
}

func (l *tagLog) add(e tagEvent) { l.events = append(l.events, e) }

// touches reports whether the tag was ever on a shelf.
func (l *tagLog) touches(shelf string) bool {
	return slices.ContainsFunc(l.events, func(e tagEvent) bool { return e.kind != tagMissed && e.to.Shelf == shelf }) ||
		slices.ContainsFunc(l.reads, func(r *Reel) bool { return r.Where.V == shelf })
}

func (b *book) tag(id string) *tagLog {
	l := b.tags[id]
	if l == nil {
		l = &tagLog{id: id}
		b.tags[id] = l
	}
	return l
}

func (b *book) reel(r *Reel) {
	if !r.On.Set || !r.Tag.Set || !r.Part.Set || !r.Where.Set || !r.Left.Set || !b.past(r.At, r.On, r.Part.V, r.Tag.V) {
		return
	}
	if p := b.look(r.Part.V); p != nil && !p.CutStock() {
		return // a fault of its file, see CheckStock
	}
	l := b.tag(r.Tag.V)
	l.reads = append(l.reads, r)
	when := stampOf(r.On.V, !r.Birth())
	d := b.doubt(when, r.Tag.V, binKey{r.Part.V, r.Where.V}).part(r.Part).part(r.ForPart).shelf(r.Where)
	if r.Order.Set && !r.Of.Set {
		d.order(r.Order)
	}
	if r.Of.Set {
		d.named(r.Of)
	}
}

func (b *book) tagMove(m *Move) {
	from, known := b.from(m)
	if !known || m.Arrival() || !m.On.Set || !m.To.Set || !b.past(m.At, m.On, "", m.Tag.V) {
		return
	}
	when := stampOf(m.On.V, false)
	b.tag(m.Tag.V).add(tagEvent{kind: tagMove, when: when, on: m.On.V, at: m.At, from: from, to: end(m.To.V, m.Job.V)})
	b.doubt(when, m.Tag.V).named(m.Tag).shelf(m.From).shelf(m.To)
}

func (b *book) cut(c *Cut) {
	if !c.On.Set || !c.Tag.Set || !c.Length.Set || !b.past(c.At, c.On, "", c.Tag.V) {
		return
	}
	when := stampOf(c.On.V, false)
	b.tag(c.Tag.V).add(tagEvent{kind: tagCut, when: when, on: c.On.V, at: c.At, length: c.Length.V, job: c.Job.V})
	b.doubt(when, c.Tag.V).named(c.Tag)
	if c.Job.Set && c.Cable.Set {
		b.stock.Pieces = append(b.stock.Pieces, Piece{Job: c.Job.V, Cable: c.Cable.V, Tag: c.Tag.V, Length: c.Length.V, On: c.On.V, At: c.At})
	}
}

// replayTags settles first which part each tag belongs to and which reading is its
// birth, then follows each tag through its events.
func (b *book) replayTags() {
	ids := make([]string, 0, len(b.tags))
	for id := range b.tags {
		ids = append(ids, id)
	}
	slices.Sort(ids)
	for _, id := range ids {
		b.readings(b.tags[id])
	}
	b.orderPieces()
	for _, id := range ids {
		b.births(b.tags[id])
	}
	for _, id := range ids {
		b.replayTag(b.tags[id])
	}
	b.cutBins()
}

func (b *book) orderPieces() {
	for i := range b.stock.Pieces {
		if l := b.tags[b.stock.Pieces[i].Tag]; l != nil {
			b.stock.Pieces[i].Part = l.part
		}
	}
	slices.SortFunc(b.stock.Pieces, func(p, q Piece) int {
		return cmp.Or(strings.Compare(p.Job, q.Job), strings.Compare(p.Cable, q.Cable),
			cmp.Compare(stampOf(p.On, false), stampOf(q.On, false)), byPlace(p.At, q.At))
	})
}

func (b *book) replayTag(l *tagLog) {
	if l.part == "" {
		return // a name that leads nowhere; the doubts say so
	}
	slices.SortFunc(l.events, tagEvent.before)
	r := tagReplay{b: b, log: l, tag: Tag{ID: l.id, Part: l.part}}
	for i := 0; i < len(l.events); {
		j := i + 1
		for j < len(l.events) && l.events[j].when == l.events[i].when && r.phase(l.events[j].kind) == r.phase(l.events[i].kind) {
			j++
		}
		r.step(l.events[i:j], l.events[:i])
		i = j
	}
	r.tag.Kind = b.kindOf(r.tag.Where)
	b.stock.Tags = append(b.stock.Tags, r.tag)
	b.stock.Notes = append(b.stock.Notes, r.notes...)
}

// cutBins adds a bin for each part and shelf that holds tags.
func (b *book) cutBins() {
	sums := map[binKey]int{}
	for _, t := range b.stock.Tags {
		if t.Where == "" || t.Left == 0 {
			continue
		}
		key := binKey{t.Part, t.Where}
		i, known := sums[key]
		if !known {
			i = len(b.stock.Bins)
			sums[key] = i
			b.stock.Bins = append(b.stock.Bins, Bin{Part: t.Part, Where: t.Where, Kind: t.Kind})
		}
		b.stock.Bins[i].Qty.Length += t.Left
	}
}

// tagReplay is a tag on its way through its events.
type tagReplay struct {
	b      *book
	log    *tagLog
	tag    Tag
	known  bool           // it was read at least once
	lender string         // the job it came back from since the newest reading
	taken  []source.Place // cuts since the newest reading
	notes  []Note         // that no reading has settled yet
}

// phase joins readings and complete counts, which speak of the same instant.
func (r *tagReplay) phase(kind int) int { return min(kind, tagRead) }

func (r *tagReplay) step(events, before []tagEvent) {
	switch events[0].kind {
	case tagBirth:
		r.set(slices.MinFunc(events, byLeft))
	case tagCut:
		for _, e := range events {
			r.cut(e)
		}
	case tagMove:
		hops := make([]hop, len(events))
		for i, e := range events {
			hops[i] = hop{e.from, e.to, i}
		}
		for _, h := range chain(r.spot(), hops) {
			r.move(events[h.i])
		}
	default:
		r.read(events, before)
	}
}

func (r *tagReplay) spot() Spot { return Spot{r.tag.Where, r.tag.Job} }

// set takes over what a reading says.
func (r *tagReplay) set(e tagEvent) {
	r.known, r.lender = true, ""
	r.tag.Where, r.tag.Job, r.tag.Left = e.reel.Where.V, "", e.reel.Left.V
	r.tag.How, r.tag.Sealed = e.reel.How.V, e.reel.Sealed.V
	if e.kind == tagBirth {
		r.tag.Of, r.tag.Order = e.reel.Of.V, ""
		if !e.reel.Of.Set {
			r.tag.Order = e.reel.Order.V
		}
	}
	r.tag.Read, r.tag.At = e.on, e.at
}

// cut takes a length off. What is cut for a job is issued to it; from a reel that
// a job already holds whole, only another job's piece changes hands.
func (r *tagReplay) cut(e tagEvent) {
	if e.job != "" && e.job != r.tag.Job {
		r.give(e.job, e.length, e)
		if r.tag.Job != "" {
			r.give(r.tag.Job, -e.length, e)
		}
	}
	if !r.known {
		if r.log.born > e.when { // taken before it was there, and its birth gives its full length
			r.below(e)
		}
		return
	}
	if e.length > r.tag.Left {
		r.below(e)
	}
	r.tag.Left, r.tag.Sealed = max(0, r.tag.Left-e.length), false
	r.taken = append(r.taken, e.at)
}

func (r *tagReplay) below(e tagEvent) {
	r.notes = append(r.notes, Note{Kind: NoteBelow, At: e.at, Also: placesOf(e.at, append([]source.Place{r.tag.At}, r.taken...)...), Part: r.tag.Part, Tag: r.tag.ID,
		Where: r.tag.Where, Book: Quantity{Length: r.tag.Left}, Read: Quantity{Length: e.length}, On: e.on})
}

func (r *tagReplay) give(job string, l unit.MM, e tagEvent) {
	r.b.issue(job, r.tag.Part, IssueRow{At: e.at, Qty: Quantity{Length: l}, when: e.when, tag: r.tag.ID})
}

// move takes the tag with all that is on it. Before its first reading nobody knows
// how much that was.
func (r *tagReplay) move(e tagEvent) {
	if !r.known {
		return
	}
	if r.spot() != e.from {
		r.notes = append(r.notes, Note{Kind: NoteClash, At: e.at, Also: placesOf(e.at, r.tag.At), Part: r.tag.Part, Tag: r.tag.ID, What: ClashPlace, Where: e.from.String(), Was: r.whereabouts(), On: e.on})
	}
	if r.tag.Job != e.to.Job {
		if r.lender = r.tag.Job; r.lender != "" {
			r.give(r.lender, -r.tag.Left, e)
		}
		if e.to.Job != "" {
			r.give(e.to.Job, r.tag.Left, e)
		}
	}
	r.tag.Where, r.tag.Job = e.to.Shelf, e.to.Job
	if e.to == (Spot{}) {
		r.tag.Left = 0
	}
}

// whereabouts names where the book has the tag, "" where it is gone.
func (r *tagReplay) whereabouts() string {
	if r.spot() == (Spot{}) {
		return ""
	}
	return r.spot().String()
}
