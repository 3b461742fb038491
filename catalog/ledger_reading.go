package catalog

import (
	"cmp"
	"slices"

	"driploop/catalog/source"
	"driploop/catalog/unit"
)

// read takes all readings of one instant, and complete counts that should have
// found the tag. The lowest holds, and it settles whatever was doubtful before.
func (r *tagReplay) read(events, before []tagEvent) {
	n := 0 // readings come before complete counts
	for n < len(events) && events[n].kind == tagRead {
		n++
	}
	if n > 0 {
		r.readings(events[:n], before)
	}
	for _, e := range events[n:] {
		if r.known && e.to == r.spot() {
			r.miss(e, events[:n])
		}
	}
}

// miss takes the tag off a shelf on which a complete count did not find it. Where
// another sheet read it there at that very time, that is none until settled.
func (r *tagReplay) miss(e tagEvent, reads []tagEvent) {
	n := r.jump(e, 0)
	if len(reads) > 0 {
		n.Kind, n.Also = NoteCountedTwice, placesOf(e.at, tagPlaces(reads)...)
	} else {
		r.notes, r.taken = nil, nil
	}
	if r.tag.Left > 0 {
		r.notes = append(r.notes, n)
	}
	r.tag.Left, r.tag.Where, r.tag.Read, r.tag.At = 0, "", e.on, e.at
	r.log.newest = max(r.log.newest, e.when)
}

func (r *tagReplay) readings(reads, before []tagEvent) {
	low, high := slices.MinFunc(reads, byLeft), slices.MaxFunc(reads, byLeft)
	r.notes, r.taken = nil, nil
	also := placesOf(low.at, tagPlaces(reads)...)
	for _, e := range reads {
		if e.to != low.to {
			r.notes = append(r.notes, Note{Kind: NoteClash, At: low.at, Also: also, Part: r.tag.Part, Tag: r.tag.ID, What: ClashPlace, Where: low.to.Shelf, Was: e.to.Shelf, On: low.on})
			break
		}
	}
	if low.reel.Left.V != high.reel.Left.V {
		r.notes = append(r.notes, Note{Kind: NoteCountedTwice, At: low.at, Also: also, Part: r.tag.Part, Tag: r.tag.ID, Where: low.to.Shelf,
			Book: Quantity{Length: high.reel.Left.V}, Read: Quantity{Length: low.reel.Left.V}, On: low.on})
	} else if r.known {
		r.compare(low)
	}
	r.comeBack(low)
	r.set(low)
	r.sameDay(low, before)
}

// comeBack charges a job with what it used of a tag that it had whole. The move
// back takes all of it off the job again; only the reading after it tells what was
// left. A tag that is read on a shelf without such a move has come back as well.
func (r *tagReplay) comeBack(e tagEvent) {
	left := e.reel.Left.V
	switch {
	case r.tag.Job != "":
		r.give(r.tag.Job, -left, e)
	case r.lender != "" && left < r.tag.Left:
		r.give(r.lender, r.tag.Left-left, e)
	}
}

// compare holds a reading against the book.
func (r *tagReplay) compare(e tagEvent) {
	if r.spot() != e.to {
		r.notes = append(r.notes, r.jump(e, e.reel.Left.V))
		if r.spot() == (Spot{}) {
			return // it was given up for lost, and its length with it
		}
	}
	kind := NoteLost
	switch book := r.tag.Left; {
	case e.reel.Left.V == book, e.reel.Left.V < book && (r.tag.Job != "" || r.lender != ""):
		return
	case e.reel.Left.V > book:
		kind = NoteGrew
	}
	n := r.jump(e, e.reel.Left.V)
	n.Kind = kind
	r.notes = append(r.notes, n)
}

func (r *tagReplay) jump(e tagEvent, left unit.MM) Note {
	return Note{Kind: NoteJump, At: e.at, Also: placesOf(e.at, r.tag.At), Part: r.tag.Part, Tag: r.tag.ID, Where: e.to.Shelf, Was: r.whereabouts(),
		Book: Quantity{Length: r.tag.Left}, Read: Quantity{Length: left}, On: e.on}
}

// sameDay notes cuts and moves on the day of the reading where not both say at what
// time.
func (r *tagReplay) sameDay(read tagEvent, before []tagEvent) {
	var same []source.Place
	for i := len(before) - 1; i >= 0 && before[i].on.Day == read.on.Day; i-- {
		if e := before[i]; (e.kind == tagCut || e.kind == tagMove) && e.on.sameDay(read.on) {
			same = append(same, e.at)
		}
	}
	if same != nil {
		r.notes = append(r.notes, Note{Kind: NoteSameDay, At: read.at, Also: placesOf(read.at, same...), Part: r.tag.Part, Tag: r.tag.ID, Where: r.tag.Where, On: read.on})
	}
}

func byLeft(x, y tagEvent) int { return cmp.Compare(x.reel.Left.V, y.reel.Left.V) }

func tagPlaces(events []tagEvent) []source.Place {
	var out []source.Place
	for _, e := range events {
		out = append(out, e.at)
	}
	return out
}
