package catalog

import (
	"cmp"
	"slices"
	"strings"

	"driploop/catalog/source"
)

// NoteKind says what about the stock does not add up.
type NoteKind int

const (
	NoteBelow        NoteKind = iota + 1 // more was taken than there was; of a tag where Tag is set
	NoteClash                            // one tag or serial number in two places, or for two parts
	NoteCountedTwice                     // two counts of one bin or tag at one time that differ; the lower holds
	NoteOver                             // more arrived than was ordered
	NoteUnknown                          // a part, shelf, order or tag that nothing defines
	NoteOverdue                          // an order line should have come
	NoteJump                             // a count, or the shelf of a tag, is not what the book says
	NoteLost                             // a reel is shorter than its cuts explain
	NoteGrew                             // a reel is longer than it can be
	NoteSameDay                          // a count and a move on one bare date
	NoteFuture                           // dated after today, not counted
)

// Note is one thing about the stock that does not add up. What weighs how much is
// for the rules to say. A note that a newer count or reading has settled is not
// kept.
type Note struct {
	Kind NoteKind
	At   source.Place
	Also []source.Place // the other rows that belong to it

	Part, Tag, Serial string
	Where             string   // the shelf
	Was               string   // where the book has it, if elsewhere
	Order             string   // of NoteOver and NoteOverdue
	What, Name        string   // of NoteUnknown: part, shelf, order or tag, and the name that leads nowhere; of NoteClash one of the Clash words
	Book, Read        Quantity // what the book says, and what was read, taken or arrived
	Bag               int      // of NoteJump: the count is the book divided by this size of bag
	Baseless          bool     // of NoteBelow: nothing was ever counted or put there, so that Book is no figure
	On                Moment
}

// What a NoteClash is about.
const (
	ClashPart   = "part"   // the row has another part, Name, under the tag
	ClashParent = "parent" // the tag it was cut from is another part, Name
	ClashBirth  = "birth"  // it arrived, or was cut from another, more than once
	ClashPlace  = "place"  // it is at Where and at Was
)

// order is the order in which notes are listed.
func (n Note) order(m Note) int {
	return cmp.Or(byPlace(n.At, m.At), cmp.Compare(n.Kind, m.Kind), strings.Compare(n.Part, m.Part),
		strings.Compare(n.Tag, m.Tag), strings.Compare(n.Serial, m.Serial), strings.Compare(n.Where, m.Where),
		strings.Compare(n.What, m.What), strings.Compare(n.Name, m.Name))
}

// doubt is a name in a row that may lead nowhere. Whether that still matters is
// only known when all rows are read: what a newer count of the bin, or a newer
// reading of the tag, has overtaken is old news.
type doubt struct {
	when stamp
	bins []binKey
	tag  string
	note Note
}

// doubter looks names of one row up.
type doubter struct {
	b *book
	doubt
}

// doubt begins the look-ups of a row that touches the bins or the tag; the first
// bin is the one that its notes name.
func (b *book) doubt(when stamp, tag string, bins ...binKey) doubter {
	n := Note{Kind: NoteUnknown, Tag: tag}
	if len(bins) > 0 {
		n.Part, n.Where = bins[0].part, bins[0].where
	}
	return doubter{b, doubt{when, bins, tag, n}}
}

func (d doubter) add(what string, v source.Val[string]) {
	d.note.At, d.note.What, d.note.Name = v.At, what, v.V
	d.b.doubts = append(d.b.doubts, d.doubt)
}

func (d doubter) part(v source.Val[string]) doubter {
	if v.Set && d.b.look(v.V) == nil {
		d.add("part", v)
	}
	return d
}

func (d doubter) shelf(v source.Val[string]) doubter {
	if v.Set && v.V != ToJob && v.V != ToScrap && d.b.premises.Shelf(v.V) == nil {
		d.add("shelf", v)
	}
	return d
}

// order and named are looked up when everything is gathered.
func (d doubter) order(v source.Val[string]) doubter {
	d.add("order", v)
	return d
}

func (d doubter) named(v source.Val[string]) doubter {
	d.add("tag", v)
	return d
}

// unknowns keeps the doubts that are true and that nothing has settled. A name in
// the head of a sheet is doubted by each of its rows and noted once for each part.
func (b *book) unknowns() {
	type once struct {
		at         source.Place
		what, part string
	}
	seen := map[once]bool{}
	for _, d := range b.doubts {
		key := once{d.note.At, d.note.What, d.note.Part}
		if seen[key] || b.leads(d.note.What, d.note.Name) || b.settled(d.when, d.tag, d.bins...) {
			continue
		}
		seen[key] = true
		b.note(d.note)
	}
}

// leads reports whether the name of a tag or order leads somewhere after all.
func (b *book) leads(what, name string) bool {
	switch what {
	case "tag":
		l := b.tags[name]
		return l != nil && l.part != ""
	case "order":
		a := b.arrived[name]
		return a != nil && a.order != nil
	}
	return false
}

// placesOf lists the places of the other rows in their order, without the first.
func placesOf(first source.Place, more ...source.Place) []source.Place {
	var out []source.Place
	for _, p := range more {
		if !p.IsZero() && p != first && !slices.Contains(out, p) {
			out = append(out, p)
		}
	}
	slices.SortStableFunc(out, byPlace)
	return out
}
