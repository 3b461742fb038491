package show

import (
	"fmt"
	"slices"
	"strings"

	"driploop/bom"
	"driploop/catalog"
)

// Sheets lays the stock out: what is where, reels, what is short.
func (s *Stock) Sheets() []bom.Sheet {
	out := []bom.Sheet{s.standingSheet(), s.reelSheet()}
	if short := s.shortSheet(); len(short.Rows) > 0 {
		out = append(out, short)
	}
	return out
}

func (s *Stock) standingSheet() bom.Sheet {
	out := bom.Sheet{Key: "stock", Name: "Stock", Title: "Stock", Wide: true, Filter: true, Feet: s.Feet,
		Columns: []bom.Column{bom.TextColumn("part"), bom.TextColumn("name"), bom.TextColumn("where"), bom.TextColumn("kind of shelf"), bom.CountColumn("on hand"), bom.CountColumn("inbound"),
			bom.CountColumn("claimed"), bom.CountColumn("free"), bom.LengthColumn("longest piece"), bom.TextColumn("counted")}}
	if len(s.Broken) > 0 {
		out.Notes = append(out.Notes, "Not counted, for their files cannot be read whole: "+strings.Join(s.Broken, ", ")+".")
	}
	for _, r := range s.rows() {
		counted := ""
		if r.Counted != (catalog.Moment{}) {
			counted = r.Counted.String()
		}
		longest := bom.Cell{}
		if s.cutStock(r.Part) {
			longest = bom.LengthCell(r.Longest)
		}
		out.Row("", bom.WordsCell(r.Part), bom.WordsCell(s.name(r.Part)), bom.WordsCell(r.Where), bom.WordsCell(r.Kind), bom.QuantityCell(r.OnHand), quantityOrBlank(r.Inbound),
			quantityOrBlank(r.Claimed), bom.QuantityCell(r.Free), longest, bom.WordsCell(counted))
	}
	return out
}

func (s *Stock) name(part string) string {
	if p := s.Look(part); p != nil {
		return p.Name.V
	}
	return ""
}

func (s *Stock) reelSheet() bom.Sheet {
	out := bom.Sheet{Key: "reels", Name: "Reels", Title: "Reels and remnants", Filter: true, Feet: s.Feet,
		Columns: []bom.Column{bom.TextColumn("tag"), bom.TextColumn("part"), bom.TextColumn("where"), bom.LengthColumn("left"), bom.LengthColumn("free"), bom.TextColumn("how it is known"), bom.TextColumn("read")}}
	for _, r := range s.reels() {
		out.Row("", bom.WordsCell(r.ID), bom.WordsCell(r.Part), bom.WordsCell(r.Where), bom.LengthCell(r.Left), bom.LengthCell(r.Free), bom.WordsCell(r.How), bom.WordsCell(r.Read.String()))
	}
	return out
}

func (s *Stock) shortSheet() bom.Sheet {
	out := bom.Sheet{Key: "short", Name: "Short", Title: "Short", Wide: true, Filter: true, Feet: s.Feet,
		Columns: []bom.Column{bom.TextColumn("part"), bom.TextColumn("job"), bom.CountColumn("short of"), bom.DayColumn("needed on"), bom.TextColumn("why")}}
	for _, c := range s.claims() {
		if c.IsShort() {
			out.Row("", bom.WordsCell(c.Part().ID), bom.WordsCell(c.Job()), bom.QuantityCell(c.ShortBy()), bom.DayCell(c.Needed), bom.WordsCell(s.shortage(c)))
		}
	}
	return out
}

// The titles of the columns of a count sheet that are filled in, beside those for
// bags.
const (
	ColumnLoose = "loose"
	ColumnAll   = "in all"
	ColumnRead  = "left"
	ColumnHow   = "how"
)

// CountKey and ReelsKey are the keys of the sheets on which a shelf is counted.
func CountKey(shelf string) string { return "count " + shelf }

// ReelsKey is the key of the sheet on which the reels of a shelf are read.
func ReelsKey(shelf string) string { return "reels " + shelf }

// BagColumn is the title of the column for bags of a size.
func BagColumn(size int) string { return fmt.Sprintf("bags of %d", size) }

// CountSheets are the sheets on which a shelf is counted: bins in bags and loose
// pieces, and reels. What stays blank was not counted; 0 is none. Blind sheets leave
// out what the book says, for people copy it.
func (s *Stock) CountSheets(shelf string, blind bool) []bom.Sheet {
	var out []bom.Sheet
	for _, sheet := range []bom.Sheet{s.binSheet(shelf, blind), s.readingSheet(shelf, blind)} {
		if len(sheet.Rows) > 0 {
			out = append(out, sheet)
		}
	}
	return out
}

func countFacts(shelf string) []bom.Fact {
	return []bom.Fact{{Key: "where", Label: "shelf", Cell: bom.WordsCell(shelf)},
		{Key: "by", Label: "counted by (initials)", Kind: bom.KindWords, Ask: &bom.Ask{}},
		{Key: "on", Label: "counted on", Kind: bom.KindDay, Ask: &bom.Ask{}}}
}

func (s *Stock) binSheet(shelf string, blind bool) bom.Sheet {
	var bins []bom.Standing
	for _, r := range s.Standings() {
		if r.Where == shelf && !s.cutStock(r.Part) {
			bins = append(bins, r)
		}
	}
	sizes := s.sizesOn([]string{shelf})
	out := bom.Sheet{Key: CountKey(shelf), Name: "Count " + shelf, Title: "Count of " + shelf, Facts: countFacts(shelf),
		Notes:   []string{"Blank: not counted. 0: none there. Count bags and loose pieces; the sheet adds them up."},
		Columns: []bom.Column{bom.TextColumn(ColumnPart), bom.TextColumn(ColumnName)}}
	if !blind {
		out.Columns = append(out.Columns, bom.CountColumn(ColumnBook))
	}
	for _, n := range sizes {
		out.Columns = append(out.Columns, bom.CountColumn(BagColumn(n)).Asked(bom.Ask{}))
	}
	out.Columns = append(out.Columns, bom.CountColumn(ColumnLoose).Asked(bom.Ask{}), bom.CountColumn(ColumnAll), bom.TextColumn(ColumnNote).Asked(bom.Ask{}))
	for _, r := range bins {
		cells := []bom.Cell{bom.WordsCell(r.Part), bom.WordsCell(s.name(r.Part))}
		if !blind {
			cells = append(cells, bom.CountCell(r.OnHand.Each))
		}
		all := bom.Live{How: bom.LivePacks}
		for _, n := range sizes {
			if !slices.Contains(s.bags(r.Part), n) {
				cells = append(cells, bom.ShutCell())
				continue
			}
			cells = append(cells, bom.Cell{})
			all.Of, all.Per = append(all.Of, BagColumn(n)), append(all.Per, int64(n))
		}
		all.Of, all.Per = append(all.Of, ColumnLoose), append(all.Per, 1)
		out.Row(r.Part, append(cells, bom.Cell{}, bom.Cell{}.By(all))...)
	}
	return out
}

// bags are the sizes in which a part is bagged.
func (s *Stock) bags(part string) []int {
	p := s.Look(part)
	if p == nil {
		return nil
	}
	var out []int
	for _, n := range p.Bags.V {
		out = append(out, n.V)
	}
	return out
}

func (s *Stock) readingSheet(shelf string, blind bool) bom.Sheet {
	out := bom.Sheet{Key: ReelsKey(shelf), Name: "Reels " + shelf, Title: "Reels on " + shelf, Facts: countFacts(shelf), Feet: s.Feet,
		Notes:   []string{"Blank: not read. 0: nothing is left."},
		Columns: []bom.Column{bom.TextColumn(ColumnTag), bom.TextColumn(ColumnPart), bom.TextColumn(ColumnName)}}
	if !blind {
		out.Columns = append(out.Columns, bom.LengthColumn(ColumnBook))
	}
	out.Columns = append(out.Columns, bom.LengthColumn(ColumnRead).Asked(bom.Ask{}), bom.TextColumn(ColumnHow).Asked(bom.Ask{Choice: []string{"marks", "tape", "label", "guess"}}),
		bom.TextColumn(ColumnNote).Asked(bom.Ask{}))
	for _, r := range s.Reels() {
		if r.Where != shelf {
			continue
		}
		cells := []bom.Cell{bom.WordsCell(r.ID), bom.WordsCell(r.Part), bom.WordsCell(s.name(r.Part))}
		if !blind {
			cells = append(cells, bom.LengthCell(r.Left))
		}
		out.Row(r.ID, cells...)
	}
	return out
}
