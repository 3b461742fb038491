package filled

import (
	"errors"
	"fmt"
	"strings"

	"driploop/bom"
	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/cmd/driploop/show"
)

// The columns of a table that says what was taken, and the words of its first one.
const (
	columnWhat  = "what"
	columnThing = "tag or part"
	columnQty   = "qty"

	wordTaken = "taken"
	wordCut   = "cut"
	wordLeft  = "left"
)

var (
	takenColumns = []string{columnWhat, columnThing, columnQty, show.ColumnWhere, show.ColumnNote}
	takenWords   = []string{wordTaken, wordCut, wordLeft}
)

// Pick takes a pick sheet back: what was taken for a job, whose demand is d and whose
// list is p. A row is a bin, a cut, or what was left on a reel; what is blank was not
// taken.
func Pick(b bom.FilledBook, g *Ground, p *bom.Pick, d *bom.Demand) (*show.Taken, error) {
	t := &taker{Ground: g, demand: d, out: &show.Taken{Pick: p, By: g.By, Stock: g.Stock}, seen: map[string]string{}}
	s, err := b.Sheet("")
	if err == nil {
		err = t.table(s)
	} else if s, err = b.Sheet(show.PickKey); err == nil {
		err = t.sheet(s, feet(b, g.Feet))
	}
	if err != nil {
		return nil, err
	}
	if err := t.faults.all(); err != nil {
		return nil, err
	}
	if o := t.out; len(o.Bins)+len(o.Cuts)+len(o.Left)+len(o.Unbooked) == 0 {
		return nil, errors.New("nothing was filled in as taken")
	}
	if t.out.By == "" {
		return nil, errors.New("who took the goods? The sheet does not say it; --by has the initials")
	}
	return t.out, nil
}

// taker reads the rows of a pick sheet.
type taker struct {
	*Ground
	faults Faults
	demand *bom.Demand
	out    *show.Taken
	seen   map[string]string
}

// table reads the table of five columns that a telephone can write.
func (t *taker) table(s *bom.FilledSheet) error {
	if err := titles(s, takenColumns...); err != nil {
		return err
	}
	if err := s.Has(takenColumns[:4]...); err != nil {
		return err
	}
	for i := range s.Rows {
		r := &s.Rows[i]
		at := fmt.Sprintf("line %d", r.Line)
		what, thing := strings.ToLower(words(&t.faults, r.Entry(columnWhat))), words(&t.faults, r.Entry(columnThing))
		where, note, qty := words(&t.faults, r.Entry(show.ColumnWhere)), words(&t.faults, r.Entry(show.ColumnNote)), r.Entry(columnQty)
		switch {
		case qty.Blank():
		case thing == "":
			t.faults.add("%s: the row names no tag and no part", at)
		case what == wordTaken:
			n, err := qty.Count()
			t.faults.err(err)
			if err == nil {
				t.bin(at, thing, where, note, n)
			}
		case what == wordCut, what == wordLeft:
			l, err := qty.Length(t.Feet)
			t.faults.err(err)
			switch {
			case err != nil:
			case what == wordCut:
				t.cut(at, thing, where, "", note, l)
			default:
				t.left(at, thing, where, note, l)
			}
		default:
			t.faults.add("%s", unknown(at, "kind of row", what, takenWords)+" It is taken, cut or left; what came back is a sheet of its own.")
		}
	}
	return nil
}

// sheet reads the pick sheet of a workbook. A length that was laid left its reel with
// the allowance that the list had for it.
func (t *taker) sheet(s *bom.FilledSheet, feet bool) error {
	if e := s.Fact("job"); e.Text != t.demand.Job {
		return fmt.Errorf("%s: the sheet is for %s, not for %s", e.Where, source.Quote(e.Text), t.demand.Job)
	}
	if err := s.Has(show.ColumnPart, show.ColumnTake, show.ColumnToLay, show.ColumnTaken, show.ColumnLaid, show.ColumnLeft, show.ColumnNote); err != nil {
		return err
	}
	t.dayOf(&t.faults, s.Fact("on"))
	if by := initials(&t.faults, s.Fact("by")); by != "" {
		if t.By != "" && t.By != by {
			t.faults.add("%s: the goods were taken by %s, and --by says %s", s.Fact("by").Where, by, t.By)
		}
		t.out.By = by
	}
	for i := range s.Rows {
		r := &s.Rows[i]
		at := fmt.Sprintf("%s, row %d", s.Name, r.Line)
		key, note := strings.Split(r.Key, " "), words(&t.faults, r.Entry(show.ColumnNote))
		switch {
		case r.Entry(show.ColumnTaken).Blank() && r.Entry(show.ColumnLaid).Blank() && r.Entry(show.ColumnLeft).Blank():
		case len(key) == 3 && key[0] == "bin":
			n, err := r.Entry(show.ColumnTaken).Count()
			t.faults.err(err)
			if err == nil {
				t.bin(at, key[2], key[1], note, n)
			}
		case len(key) >= 3 && key[0] == "cut":
			t.laid(at, r, key[1], key[2], strings.Join(key[3:], " "), note, feet)
		default:
			t.added(at, r, note)
		}
	}
	return nil
}

// laid reads the row of a cut.
func (t *taker) laid(at string, r *bom.FilledRow, tag, line, number, note string, feet bool) {
	read := func(title string) (unit.MM, bool) {
		l, err := r.Entry(title).Length(feet)
		t.faults.err(err)
		return l, err == nil
	}
	if !r.Entry(show.ColumnLaid).Blank() {
		laid, ok := read(show.ColumnLaid)
		cut, ok2 := read(show.ColumnTake)
		bare, ok3 := read(show.ColumnToLay)
		switch {
		case !ok || !ok2 || !ok3:
		case cut < bare:
			t.faults.add("%s: the list has more to lay than to cut", at)
		case laid > 0:
			t.cut(at, tag, line, number, note, laid+cut-bare)
		}
	}
	if left, ok := read(show.ColumnLeft); ok {
		t.left(at, tag, "", note, left)
	}
}

// added is a row that the list did not have. It is known what was taken, and not from
// where; what nobody books may stand anywhere.
func (t *taker) added(at string, r *bom.FilledRow, note string) {
	id := words(&t.faults, r.Entry(show.ColumnPart))
	if p := t.Catalog.Look(id); p != nil && p.Expendable.V {
		if n, err := r.Entry(show.ColumnTaken).Count(); err != nil {
			t.faults.err(err)
		} else {
			t.bin(at, id, "", note, n)
		}
		return
	}
	t.faults.add("%s: the row was added by hand, and does not say from which shelf; a table with the columns %s can", at, strings.Join(takenColumns, ", "))
}

// once refuses what stands there twice.
func (t *taker) once(at, what string) bool {
	if before := t.seen[what]; before != "" {
		t.faults.add("%s: %s stands in %s already; add the two up", at, what, before)
		return false
	}
	t.seen[what] = at
	return true
}

func (t *taker) bin(at, part, where, note string, n int64) {
	p, good := t.part(&t.faults, at, part)
	switch {
	case !good || n == 0:
		return
	case p != nil && p.CutStock():
		t.faults.add("%s: %s is cut stock and leaves by its tag, as a cut", at, part)
		return
	case p != nil && p.Expendable.V:
		if t.once(at, part) {
			t.out.Unbooked = append(t.out.Unbooked, show.TakenBin{Part: part, Qty: n})
		}
		return
	case where == "":
		if where = t.only(part); where == "" {
			t.faults.add("%s: from which shelf %s was taken is not said", at, part)
			return
		}
	}
	if t.shelf(&t.faults, at, where) && t.once(at, part+" from "+where) {
		t.out.Bins = append(t.out.Bins, show.TakenBin{Part: part, Where: where, Note: note, Qty: n, Book: t.onShelf(part, where).Each})
	}
}

// only is the one shelf that the list takes a part from, or "".
func (t *taker) only(part string) string {
	var out []string
	for _, b := range t.out.Pick.Bins {
		if b.Part.ID == part {
			out = append(out, b.Where)
		}
	}
	if len(out) != 1 {
		return ""
	}
	return out[0]
}

// cut books a piece. Of pieces that are alike, as extras may be, the list numbers the
// further ones.
func (t *taker) cut(at, id, line, number, note string, l unit.MM) {
	tag := t.tag(&t.faults, at, id)
	if tag == nil || l == 0 {
		return
	}
	if line == "" {
		if line = t.onlyLine(id); line == "" {
			t.faults.add("%s: for which line the piece was cut from %s is not said; it stands under %s", at, id, show.ColumnWhere)
			return
		}
	}
	planned, known := t.planned(line, tag.Part)
	if planned == "" {
		t.faults.add("%s", unknown(at, "line of "+t.demand.Job, line, known))
		return
	}
	if t.once(at, strings.TrimSpace("the cut for "+line+" from "+id+" "+number)) {
		t.out.Cuts = append(t.out.Cuts, show.TakenCut{Tag: id, Line: line, Note: note, Part: tag.Part, Planned: planned, Length: l})
	}
}

// planned is the part that the job takes for a line; what it takes as an extra is of
// any part. known are its lines.
func (t *taker) planned(line, part string) (planned string, known []string) {
	for i := range t.demand.Needs {
		n := &t.demand.Needs[i]
		for _, p := range n.Pieces {
			switch known = append(known, p.Line); {
			case p.Line != line:
			case planned == "" || n.Part.ID == part:
				planned = n.Part.ID
			}
		}
	}
	return planned, known
}

// onlyLine is the one line that the list cuts from a reel, or "".
func (t *taker) onlyLine(tag string) string {
	for _, r := range t.out.Pick.Reels {
		if r.Tag.ID == tag && len(r.Cuts) == 1 {
			return r.Cuts[0].Line
		}
	}
	return ""
}

func (t *taker) left(at, id, where, note string, l unit.MM) {
	tag := t.tag(&t.faults, at, id)
	if tag == nil {
		return
	}
	if where == "" {
		where = tag.Where
	}
	switch {
	case where == "":
		t.faults.add("%s: the book has %s on no shelf, and where it was is not said", at, id)
	case t.shelf(&t.faults, at, where) && t.once(at, "what is left on "+id):
		t.out.Left = append(t.out.Left, show.TakenRead{Tag: id, Part: tag.Part, Where: where, Note: note, Left: l})
	}
}
