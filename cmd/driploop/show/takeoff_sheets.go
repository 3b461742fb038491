package show

import (
	"strings"

	"driploop/bom"
	"driploop/catalog/unit"
)

// Sheets lays the takeoff out for printing: quantities by part, the same by job, the
// pieces to cut, and what could not be counted.
func (t *Takeoff) Sheets() []bom.Sheet {
	out := []bom.Sheet{t.byPart(), t.byJob()}
	if s := t.pieces(); len(s.Rows) > 0 {
		out = append(out, s)
	}
	if len(t.Gaps) > 0 {
		out = append(out, t.notCounted())
	}
	return out
}

// piecesKey is the sheet of pieces, to which others refer.
const piecesKey = "pieces"

func (t *Takeoff) byPart() bom.Sheet {
	s := bom.Sheet{Key: "takeoff", Name: "Takeoff", Title: "Takeoff", Wide: true, Filter: true, Feet: t.Feet,
		Columns: []bom.Column{bom.TextColumn("part"), bom.TextColumn("kind"), bom.TextColumn("name"), bom.CountColumn("pieces"),
			bom.LengthColumn("length to bring"), bom.LengthColumn("length installed"), bom.TextColumn("for")},
		Notes: []string{"Lengths to bring have the allowance of every cut; packages of consumables are rounded up once, over all jobs."}}
	if len(t.Gaps) > 0 {
		s.Notes = append(s.Notes, "Not counted, on a sheet of its own: "+words(len(t.Gaps), "thing", "things")+".")
	}
	for _, r := range t.Rows {
		each, length, bare := quantities(r.Each, r.Length, r.Bare)
		if r.Length > 0 {
			length = length.By(bom.Live{How: bom.LiveSame, Sheet: piecesKey, Row: r.Part.ID, Of: []string{"to cut"}})
			bare = bare.By(bom.Live{How: bom.LiveSame, Sheet: piecesKey, Row: r.Part.ID, Of: []string{"installed"}})
		}
		s.Row(r.Part.ID, bom.WordsCell(r.Part.ID), bom.WordsCell(r.Part.Kind.V), bom.WordsCell(r.Part.Name.V), each, length, bare, bom.WordsCell(t.jobs(r)))
	}
	return s
}

// quantities are the cells of a number of pieces or of lengths.
func quantities(each int, length, bare unit.MM) (pieces, cut, installed bom.Cell) {
	if length > 0 {
		return bom.Cell{}, bom.LengthCell(length), bom.LengthCell(bare)
	}
	return bom.CountCell(int64(each)), bom.Cell{}, bom.Cell{}
}

func (t *Takeoff) byJob() bom.Sheet {
	s := bom.Sheet{Key: "jobs", Name: "By job", Title: "Takeoff by job", Filter: true, Feet: t.Feet,
		Columns: []bom.Column{bom.TextColumn("job"), bom.TextColumn("part"), bom.TextColumn("kind"), bom.TextColumn("name"), bom.CountColumn("pieces"),
			bom.LengthColumn("length to bring"), bom.LengthColumn("length installed")}}
	for _, r := range t.Rows {
		for _, j := range r.Jobs {
			var installed unit.MM
			for _, p := range j.Pieces {
				installed += p.Bare
			}
			each, length, bare := quantities(j.Each, j.Length, installed)
			s.Row(j.Job+" "+r.Part.ID, bom.WordsCell(j.Job), bom.WordsCell(r.Part.ID), bom.WordsCell(r.Part.Kind.V), bom.WordsCell(r.Part.Name.V), each, length, bare)
		}
	}
	return s
}

func (t *Takeoff) pieces() bom.Sheet {
	s := bom.Sheet{Key: piecesKey, Name: "Pieces", Title: "Pieces to cut", Feet: t.Feet,
		Columns: []bom.Column{bom.TextColumn("job"), bom.TextColumn("line"), bom.LengthColumn("installed"), bom.LengthColumn("to cut")}}
	for _, r := range t.Rows {
		if r.Length == 0 {
			continue
		}
		s.Heading(strings.TrimSuffix(r.Part.ID+"  "+r.Part.Name.V, "  "))
		for _, j := range r.Jobs {
			for _, p := range j.Pieces {
				s.Row(j.Job+" "+p.Line+" "+r.Part.ID, bom.WordsCell(j.Job), bom.WordsCell(p.Line), bom.LengthCell(p.Bare), bom.LengthCell(p.Length))
			}
		}
		s.Sum(r.Part.ID, "together", "installed", "to cut")
	}
	return s
}

func (t *Takeoff) notCounted() bom.Sheet {
	s := bom.Sheet{Key: "gaps", Name: "Not counted", Title: "Not counted", Filter: true,
		Columns: []bom.Column{bom.TextColumn("job"), bom.TextColumn("thing"), bom.TextColumn("why"), bom.CountColumn("line")}}
	for _, g := range t.Gaps {
		s.Row("", bom.WordsCell(g.Job), bom.WordsCell(strings.Replace(g.On, ".", " ", 1)), bom.WordsCell(g.Says), bom.CountCell(int64(g.At.Line())))
	}
	return s
}
