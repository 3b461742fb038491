package book

import (
	"strings"

	"github.com/xuri/excelize/v2"

	"driploop/bom"
)

// role is what a cell is in its sheet.
type role int

const (
	ofTable role = iota
	ofHeading
	ofSum
	ofTitle
	ofNote
	ofHead  // the title of a column
	ofLabel // of a fact
	ofFact
	ofKey
)

// look is how a cell looks. Equal looks share one style of the workbook.
type look struct {
	role   role
	kind   bom.CellKind
	digits int
	feet   bool
	clerk  bool // filled in by hand
}

// Colours of our own, light enough for a printer that has none.
const (
	inkFaint   = "5F6B66"
	lineFaint  = "C9D1CD"
	lineStrong = "3C4A44"
	fillHead   = "E4ECE8"
	fillGroup  = "F2F5F3"
	fillClerk  = "FDF6DC"
)

// styles keeps the styles of a workbook.
type styles struct {
	file *excelize.File
	ids  map[look]int
}

func (s *styles) of(k look) (int, error) {
	if id, known := s.ids[k]; known {
		return id, nil
	}
	id, err := s.file.NewStyle(k.style())
	if err == nil {
		s.ids[k] = id
	}
	return id, err
}

func (k look) style() *excelize.Style {
	st := &excelize.Style{
		Font:      &excelize.Font{Family: "Calibri", Size: 11},
		Alignment: &excelize.Alignment{Vertical: "center", WrapText: k.kind == bom.KindWords},
	}
	k.figures(st)
	switch k.role {
	case ofTitle:
		st.Font.Size, st.Font.Bold, st.Alignment.WrapText = 15, true, false
	case ofNote:
		st.Font.Color = inkFaint
	case ofLabel:
		st.Font.Color, st.Alignment.WrapText = inkFaint, false
	case ofFact:
		st.Alignment.Horizontal, st.Alignment.WrapText, st.Alignment.Indent = "left", false, 0
	case ofHead:
		st.Font.Bold, st.Alignment.Vertical, st.Alignment.WrapText = true, "bottom", true
		st.Fill = fill(fillHead)
		st.Border = []excelize.Border{{Type: "bottom", Style: 2, Color: lineStrong}}
	case ofHeading:
		st.Font.Bold = true
		st.Fill = fill(fillGroup)
	case ofSum:
		st.Font.Bold, st.Alignment.WrapText = true, false
		st.Border = []excelize.Border{{Type: "top", Style: 1, Color: lineStrong}}
	case ofTable:
		st.Border = []excelize.Border{{Type: "bottom", Style: 1, Color: lineFaint}}
	}
	if k.clerk {
		st.Fill = fill(fillClerk)
		st.Protection = &excelize.Protection{Locked: false}
		if k.role != ofHead {
			st.Border = nil
			for _, side := range []string{"left", "right", "top", "bottom"} {
				st.Border = append(st.Border, excelize.Border{Type: side, Style: 1, Color: lineStrong})
			}
		}
	}
	return st
}

func fill(color string) excelize.Fill {
	return excelize.Fill{Type: "pattern", Pattern: 1, Color: []string{color}}
}

// textFormat keeps what is typed into a cell a text, whatever it begins with.
const textFormat = 49

// figures sets the form of numbers and on which side they stand.
func (k look) figures(st *excelize.Style) {
	format := ""
	switch k.kind {
	case bom.KindWords, bom.KindBlank:
		st.NumFmt = textFormat
		return
	case bom.KindCount:
		format = "#,##0"
	case bom.KindDay:
		format = "yyyy-mm-dd"
	case bom.KindMoney:
		format = "#,##0." + strings.Repeat("0", min(k.digits, 2)) + strings.Repeat("?", k.digits-min(k.digits, 2))
	case bom.KindLength:
		format = "#,##0." + strings.Repeat("0", k.digits) + `" m"`
		if k.feet {
			format = `#,##0.0" ft"`
		}
	}
	st.CustomNumFmt = &format
	st.Alignment.Horizontal, st.Alignment.Indent = "right", 1
	if k.kind == bom.KindDay {
		st.Alignment.Horizontal, st.Alignment.Indent = "center", 0
	}
	if k.role == ofHead {
		st.CustomNumFmt, st.NumFmt = nil, textFormat
	}
}
