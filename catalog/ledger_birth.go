package catalog

import (
	"cmp"
	"slices"
	"strings"
)

// readings orders the readings of a tag and drops those for another part: a tag
// belongs to one part for ever, and the first one has it.
func (b *book) readings(l *tagLog) {
	slices.SortFunc(l.reads, func(x, y *Reel) int {
		return cmp.Or(cmp.Compare(stampOf(x.On.V, !x.Birth()), stampOf(y.On.V, !y.Birth())), byPlace(x.At, y.At))
	})
	kept := l.reads[:0]
	for _, r := range l.reads {
		switch {
		case l.part == "":
			l.part, l.first = r.Part.V, r.At
		case l.part != r.Part.V:
			b.note(Note{Kind: NoteClash, At: r.At, Also: placesOf(r.At, l.first), Part: l.part, Tag: l.id, Name: r.Part.V, What: ClashPart, On: r.On.V})
			continue
		}
		kept = append(kept, r)
	}
	l.reads = kept
}

// births turns the readings of a tag into events. Its first arrival, or the first
// reading that says what it was cut from, is its birth; one that says the same
// again later is a reading like any other, and one that tells another story is a
// second piece under the same tag.
func (b *book) births(l *tagLog) {
	var birth *Reel
	for _, r := range l.reads {
		e := tagEvent{kind: tagRead, when: stampOf(r.On.V, true), on: r.On.V, at: r.At, reel: r, to: Spot{Shelf: r.Where.V}}
		again := birth != nil && birth.Order.V == r.Order.V && birth.Of.V == r.Of.V && !(birth.Job.Set && r.Job.Set && birth.Job.V != r.Job.V)
		if r.Birth() && (!again || birth.On.V == r.On.V) {
			e.kind, e.when = tagBirth, stampOf(r.On.V, false)
			l.born = max(l.born, e.when)
			if !again {
				b.born(l, r, e.when)
			}
			if birth != nil {
				b.twins(l, birth, r, again)
			} else {
				birth = r
			}
		}
		l.newest = max(l.newest, e.when)
		l.add(e)
	}
}

// twins says what two births of one tag make of it: two pieces, or one whose birth
// was written down twice, perhaps differently.
func (b *book) twins(l *tagLog, first, second *Reel, same bool) {
	n := Note{At: second.At, Also: placesOf(second.At, first.At), Part: l.part, Tag: l.id, Where: second.Where.V, Was: first.Where.V, On: second.On.V,
		Book: Quantity{Length: first.Left.V}, Read: Quantity{Length: second.Left.V}}
	switch {
	case !same:
		n.Kind, n.What = NoteClash, ClashBirth
	case first.Where.V != second.Where.V:
		n.Kind, n.What = NoteClash, ClashPlace
	case first.Left.V != second.Left.V:
		n.Kind = NoteCountedTwice
	default:
		return
	}
	b.note(n)
}

// born books where a new piece came from: a vendor, a job that gives a remnant
// back, or the reel that it was split off.
func (b *book) born(l *tagLog, r *Reel, when stamp) {
	if !r.Of.Set {
		b.arrivalOf(r.Order.V).reels = append(b.arrivalOf(r.Order.V).reels, r)
		return
	}
	parent := b.tags[r.Of.V]
	if parent != nil && parent.part != "" && parent.part != l.part {
		b.note(Note{Kind: NoteClash, At: r.At, Also: placesOf(r.At, parent.first), Part: l.part, Tag: l.id, Name: parent.part, What: ClashParent, On: r.On.V})
	}
	job, piece := b.giver(r)
	switch {
	case job != "":
		b.issue(job, l.part, IssueRow{At: r.At, Qty: Quantity{Length: -r.Left.V}, when: when, tag: l.id})
		if piece != nil {
			piece.Back += r.Left.V
		}
	case parent != nil:
		parent.add(tagEvent{kind: tagCut, when: when, on: r.On.V, at: r.At, length: r.Left.V})
	}
}

// giver is the job that a remnant comes back from, and the piece it is left of if
// one was cut. The remnant's row names the job, or its tag does: JOB-CABLE, with
// -2, -3 … for further ones. Without either it was split off its parent on the
// shelf.
func (b *book) giver(r *Reel) (string, *Piece) {
	short := r.Tag.V
	if i := strings.LastIndexByte(short, '-'); i > 0 && isNumber(short[i+1:]) {
		short = short[:i]
	}
	for _, name := range []string{r.Tag.V, short} {
		for i := len(b.stock.Pieces) - 1; i >= 0; i-- {
			p := &b.stock.Pieces[i]
			if p.Tag == r.Of.V && p.Job+"-"+p.Cable == name && (!r.Job.Set || r.Job.V == p.Job) {
				return p.Job, p
			}
		}
	}
	if r.Job.Set {
		return r.Job.V, nil
	}
	if parent := b.tags[r.Of.V]; parent != nil {
		for _, e := range parent.events {
			if e.kind == tagMove && e.to.Job != "" && strings.HasPrefix(r.Tag.V, e.to.Job+"-") {
				return e.to.Job, nil
			}
		}
	}
	return "", nil
}

func isNumber(s string) bool {
	return s != "" && strings.Trim(s, "0123456789") == ""
}
