package catalog

import (
	"cmp"
	"slices"

	"driploop/catalog/source"
)

// binLog is what happened to one part on one shelf.
type binLog struct {
	events []binEvent
	newest stamp // of the newest count
}

// binEvent is a count of the bin, or what a move put in (or, below zero, took out).
type binEvent struct {
	when  stamp
	on    Moment
	count bool
	qty   int64
	at    source.Place
}

func (l *binLog) add(e binEvent) { l.events = append(l.events, e) }

// before orders events: by time, and at one instant moves before counts, because
// the count has seen them.
func (e binEvent) before(f binEvent) int {
	return cmp.Or(cmp.Compare(e.when, f.when), cmp.Compare(rank(e.count), rank(f.count)), byPlace(e.at, f.at))
}

func rank(late bool) int {
	if late {
		return 1
	}
	return 0
}

func (b *book) replayBins() {
	for key, l := range b.bins {
		slices.SortFunc(l.events, binEvent.before)
		r := binReplay{bin: Bin{Part: key.part, Where: key.where, Kind: b.kindOf(key.where)}, bags: b.bagsOf(key.part)}
		for i := 0; i < len(l.events); {
			j := i + 1
			for j < len(l.events) && l.events[j].when == l.events[i].when && l.events[j].count == l.events[i].count {
				j++
			}
			if l.events[i].count {
				r.counted(l.events[i:j], l.events[:i])
				l.newest = l.events[i].when
			} else {
				r.moved(l.events[i:j])
			}
			i = j
		}
		b.stock.Bins = append(b.stock.Bins, r.bin)
		if r.bin.Kind != "" { // a shelf that nobody describes is the only thing to say of such a bin
			b.stock.Notes = append(b.stock.Notes, r.notes...)
		}
	}
}

func (b *book) bagsOf(part string) []int {
	var out []int
	if p := b.look(part); p != nil {
		for _, size := range p.Bags.V {
			out = append(out, size.V)
		}
	}
	return out
}

// binReplay is a bin on its way through its events.
type binReplay struct {
	bin   Bin
	bags  []int
	known bool           // the balance rests on something
	taken []source.Place // rows that took something since the newest count
	notes []Note         // that no count has settled yet
}

// counted takes all counts of one instant: the lowest holds, and it settles
// whatever was doubtful before.
func (r *binReplay) counted(counts, before []binEvent) {
	low := slices.MinFunc(counts, func(x, y binEvent) int { return cmp.Compare(x.qty, y.qty) })
	high := slices.MaxFunc(counts, func(x, y binEvent) int { return cmp.Compare(x.qty, y.qty) })
	r.notes, r.taken = nil, nil
	note := Note{At: low.at, Part: r.bin.Part, Where: r.bin.Where, Read: Quantity{Each: low.qty}, On: low.on}
	switch {
	case low.qty != high.qty:
		note.Kind, note.Book = NoteCountedTwice, Quantity{Each: high.qty}
		note.Also = placesOf(low.at, eventPlaces(counts)...)
		r.notes = append(r.notes, note)
	case r.known && r.bin.Qty.Each != low.qty:
		note.Kind, note.Book, note.Bag = NoteJump, r.bin.Qty, r.bagOf(r.bin.Qty.Each, low.qty)
		note.Also = placesOf(low.at, r.bin.At)
		r.notes = append(r.notes, note)
	}
	r.bin.Qty, r.bin.Counted, r.bin.At, r.known = Quantity{Each: low.qty}, low.on, low.at, true
	if r.bin.Began.IsZero() {
		r.bin.Began, r.bin.BeganOn = low.at, low.on
	}
	r.sameDay(low, before)
}

// sameDay notes moves on the day of the count where not both say at what time.
func (r *binReplay) sameDay(count binEvent, before []binEvent) {
	var same []source.Place
	for i := len(before) - 1; i >= 0 && before[i].on.Day == count.on.Day; i-- {
		if !before[i].count && before[i].on.sameDay(count.on) {
			same = append(same, before[i].at)
		}
	}
	if same != nil {
		r.notes = append(r.notes, Note{Kind: NoteSameDay, At: count.at, Also: placesOf(count.at, same...), Part: r.bin.Part, Where: r.bin.Where, On: count.on})
	}
}

func (r *binReplay) bagOf(book, count int64) int { return BagsCounted(r.bags, book, count) }

// BagsCounted is the size of bag by which a count is too low, as when somebody wrote
// down bags for pieces; 0 where it is not.
func BagsCounted(sizes []int, book, count int64) int {
	for _, size := range sizes {
		if size > 1 && count > 0 && book == count*int64(size) {
			return size
		}
	}
	return 0
}

// moved takes all moves of one instant: what came in is there before anything
// leaves. A bin never goes below zero; where it would, it goes on from none.
func (r *binReplay) moved(moves []binEvent) {
	var in, out int64
	var last source.Place
	earlier := r.taken
	for _, m := range moves {
		if m.qty >= 0 {
			if in += m.qty; r.bin.Began.IsZero() {
				r.bin.Began, r.bin.BeganOn = m.at, m.on
			}
			continue
		}
		out -= m.qty
		r.taken = append(r.taken, m.at)
		last = m.at
	}
	have, baseless := r.bin.Qty.Each+in, !r.known && in == 0
	r.known = true
	if out <= have {
		r.bin.Qty.Each = have - out
		return
	}
	also := append([]source.Place{r.bin.At}, earlier...)
	r.notes = append(r.notes, Note{Kind: NoteBelow, At: last, Also: placesOf(last, append(also, r.taken...)...), Part: r.bin.Part, Where: r.bin.Where,
		Book: Quantity{Each: have}, Read: Quantity{Each: out}, Baseless: baseless, On: moves[0].on})
	r.bin.Qty.Each = 0
	r.known = !r.bin.At.IsZero() // never counted: what it began with is anybody's guess
}

func eventPlaces(events []binEvent) []source.Place {
	var out []source.Place
	for _, e := range events {
		out = append(out, e.at)
	}
	return out
}
