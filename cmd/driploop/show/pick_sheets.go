package show

import (
	"fmt"
	"strings"

	"driploop/bom"
)

// The titles of the columns of a pick sheet that are filled in, and of what was asked
// for beside them.
const (
	ColumnTake  = "take"
	ColumnToLay = "to lay"
	ColumnTaken = "taken"
	ColumnLaid  = "laid"
	ColumnLeft  = "left on reel"
)

// PickKey is the key of the sheet of a job that is taken along and comes back filled in.
const PickKey = "pick"

// Sheets lays the pick list out: one page to take along and to fill in, and the
// labels for both ends of each line.
func (p *Pick) Sheets() []bom.Sheet {
	out := []bom.Sheet{p.sheet()}
	if len(p.Labels) > 0 {
		out = append(out, p.labelSheet())
	}
	return out
}

func (p *Pick) sheet() bom.Sheet {
	s := bom.Sheet{Key: PickKey, Name: "Pick", Title: "Pick list for " + p.Job + dash(p.Title), Feet: p.Feet,
		Notes: append(p.when(), p.remarks()...),
		Facts: []bom.Fact{{Key: "job", Label: "job", Cell: bom.WordsCell(p.Job)},
			{Key: "by", Label: "taken by (initials)", Kind: bom.KindWords, Ask: &bom.Ask{}},
			{Key: "on", Label: "taken on", Kind: bom.KindDay, Ask: &bom.Ask{}}},
		Columns: []bom.Column{bom.TextColumn(ColumnPart), bom.TextColumn("what it is"), bom.TextColumn("line"), bom.CountColumn(ColumnTake), bom.LengthColumn(ColumnToLay),
			bom.CountColumn(ColumnTaken).Asked(bom.Ask{Hint: "blank: not taken"}), bom.LengthColumn(ColumnLaid).Asked(bom.Ask{}),
			bom.LengthColumn(ColumnLeft).Asked(bom.Ask{Hint: "measured, after the last cut"}), bom.TextColumn(ColumnNote).Asked(bom.Ask{})}}
	for _, where := range p.Shelves() {
		s.Heading("FROM " + strings.ToUpper(where))
		for _, b := range p.Bins {
			if b.Where == where {
				s.Row("bin "+where+" "+b.Part.ID, bom.WordsCell(b.Part.ID), bom.WordsCell(p.describe(b.Part, b.CountFirst)), bom.Cell{}, bom.CountCell(int64(b.Qty)), bom.Cell{},
					bom.Cell{}, bom.ShutCell(), bom.ShutCell())
			}
		}
		for _, r := range p.Reels {
			if r.Where == where {
				p.reelRows(&s, r)
			}
		}
	}
	if len(p.Loose) > 0 {
		s.Heading("ALSO TO BRING, NOT BOOKED")
	}
	for _, b := range p.Loose {
		s.Fixed("", bom.WordsCell(b.Part.ID), bom.WordsCell(p.describe(b.Part, false)), bom.Cell{}, bom.CountCell(int64(b.Qty)))
	}
	return s
}

// reelRows are the cuts of a reel; behind the last one stands what is left on it.
func (p *Pick) reelRows(s *bom.Sheet, r bom.PickReel) {
	for i, c := range r.Cuts {
		left, what := bom.ShutCell(), "cut from reel "+r.Tag.ID
		if i == 0 {
			what += ", " + p.known(r)
			if r.CountFirst {
				what += "; measure it first, it is not put away"
			}
		}
		if i == len(r.Cuts)-1 {
			left = bom.Cell{}
		}
		s.Row(cutKey(s, r.Tag.ID, c.Line), bom.WordsCell(r.Part.ID), bom.WordsCell(what), bom.WordsCell(c.Line), bom.LengthCell(c.Length), bom.LengthCell(c.Bare),
			bom.ShutCell(), bom.Cell{}, left)
	}
}

// cutKey is the key of a cut. Of pieces that are alike, as extras may be, the further
// ones have their number.
func cutKey(s *bom.Sheet, tag, line string) string {
	key := "cut " + tag + " " + line
	for n := 2; s.RowOf(key) >= 0; n++ {
		key = fmt.Sprintf("cut %s %s %d", tag, line, n)
	}
	return key
}

// remarks say what the crew needs, what is not all there and what is still to come.
func (p *Pick) remarks() []string {
	var out []string
	for _, t := range p.tools() {
		out = append(out, "Tool: "+t.Name+" "+t.Text+".")
	}
	for _, m := range p.missing() {
		out = append(out, "NOT ALL THERE: "+m.Name+", "+m.Text+".")
	}
	var coming []string
	for _, c := range p.coming() {
		coming = append(coming, c.Name+" "+c.Text)
	}
	if coming != nil {
		out = append(out, "On order for this job: "+strings.Join(coming, "; ")+".")
	}
	return out
}

func (p *Pick) labelSheet() bom.Sheet {
	s := bom.Sheet{Key: "labels", Name: "Labels", Title: "Labels, one for each end", Feet: p.Feet,
		Columns: []bom.Column{bom.TextColumn("line"), bom.TextColumn("part"), bom.LengthColumn("to lay"), bom.TextColumn("from"), bom.TextColumn("to")}}
	for _, l := range p.Labels {
		length := bom.Cell{}
		if l.Length > 0 {
			length = bom.LengthCell(l.Length)
		}
		s.Row("", bom.WordsCell(l.Line), bom.WordsCell(l.Part), length, bom.WordsCell(l.From), bom.WordsCell(l.To))
	}
	return s
}
