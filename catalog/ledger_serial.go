package catalog

import (
	"cmp"
	"maps"
	"slices"
	"strings"

	"driploop/catalog/source"
)

// serialLog is what happened to the numbered pieces of one part.
type serialLog struct {
	part   string
	events []serialEvent
}

// serialEvent is a count or a move that names serial numbers.
type serialEvent struct {
	when    stamp
	count   bool
	arrives bool // from a vendor
	from    Spot
	to      Spot // the shelf of a count
	qty     int  // of a count
	numbers Words
	at      source.Place
}

func (e serialEvent) before(f serialEvent) int {
	return cmp.Or(cmp.Compare(e.when, f.when), cmp.Compare(rank(e.count), rank(f.count)), byPlace(e.at, f.at))
}

// serial is the log of a part whose row names serial numbers, or that is known to
// have them; for all other rows it is nil and takes nothing.
func (b *book) serial(part string, numbers source.Val[Words]) *serialLog {
	l := b.serials[part]
	if p := b.look(part); l == nil && (numbers.Set || p != nil && p.Serials.V) {
		l = &serialLog{part: part}
		b.serials[part] = l
	}
	return l
}

func (l *serialLog) add(e serialEvent) {
	if l != nil {
		l.events = append(l.events, e)
	}
}

func (b *book) replaySerials() {
	for _, part := range slices.Sorted(maps.Keys(b.serials)) {
		l := b.serials[part]
		slices.SortFunc(l.events, serialEvent.before)
		r := serialReplay{spots: map[string]map[Spot]source.Place{}}
		for i := 0; i < len(l.events); {
			j := i + 1
			for j < len(l.events) && l.events[j].when == l.events[i].when && l.events[j].count == l.events[i].count {
				j++
			}
			if l.events[i].count {
				r.counted(l.events[i:j])
			} else {
				r.moved(l.events[i:j])
			}
			i = j
		}
		r.close(b, part)
	}
}

// serialReplay keeps, for each number, every spot where the sheets have it, with
// the row that says so. More than one spot is a contradiction that stands until a
// count that lists all its pieces, or a move, clears it.
type serialReplay struct {
	spots map[string]map[Spot]source.Place
}

func (r *serialReplay) put(number string, at Spot, row source.Place) {
	if r.spots[number] == nil {
		r.spots[number] = map[Spot]source.Place{}
	}
	r.spots[number][at] = row
}

// counted takes the counts of one instant. A count that names as many numbers as
// pieces says that no other number is there.
func (r *serialReplay) counted(counts []serialEvent) {
	for _, c := range counts {
		if len(c.numbers) == c.qty {
			for _, spots := range r.spots {
				delete(spots, c.to)
			}
		}
	}
	for _, c := range counts {
		for _, n := range c.numbers {
			r.put(n.V, c.to, c.at)
		}
	}
}

// moved takes the moves of one instant, each number's in the order in which they
// follow each other.
func (r *serialReplay) moved(moves []serialEvent) {
	hops := map[string][]hop{}
	for i, m := range moves {
		for _, n := range m.numbers {
			hops[n.V] = append(hops[n.V], hop{m.from, m.to, i})
		}
	}
	for _, number := range slices.Sorted(maps.Keys(hops)) {
		for _, h := range chain(r.start(number, hops[number]), hops[number]) {
			if !moves[h.i].arrives {
				delete(r.spots[number], h.from)
			}
			r.put(number, h.to, moves[h.i].at)
		}
	}
}

// start is where a number is before it moves: an arrival begins nowhere, else the
// spot the book has, the first of several that one of the moves leaves.
func (r *serialReplay) start(number string, hops []hop) Spot {
	for _, h := range hops {
		if _, there := r.spots[number][h.from]; there {
			return h.from
		}
	}
	return Spot{}
}

// close lists where each number ended and notes those in more than one spot.
func (r *serialReplay) close(b *book, part string) {
	for _, number := range slices.Sorted(maps.Keys(r.spots)) {
		spots := r.spots[number]
		if len(spots) == 0 {
			continue
		}
		names := slices.SortedFunc(maps.Keys(spots), func(s, t Spot) int {
			return cmp.Or(byPlace(spots[t], spots[s]), strings.Compare(s.String(), t.String()))
		})
		b.stock.Serials = append(b.stock.Serials, Serial{part, number, names})
		if len(names) > 1 {
			at := spots[names[0]]
			b.note(Note{Kind: NoteClash, At: at, Also: placesOf(at, slices.Collect(maps.Values(spots))...), Part: part, Serial: number,
				What: ClashPlace, Where: names[0].String(), Was: names[1].String()})
		}
	}
}
