package book

import (
	"fmt"

	"github.com/xuri/excelize/v2"

	"driploop/bom"
)

// a4 is the number of the size of paper.
const a4 = 9

// print sets how a sheet is filtered and printed: as wide as a page, titles on every
// page, pages counted. Filters come first, because setting one makes the library
// forget the rest.
func (b *builder) print(l *layout) error {
	f := b.file
	if last := l.lastPlain(); l.Filter && last >= 0 {
		area := ref(1, l.head) + ":" + ref(len(l.Columns), l.rowOf(last))
		if err := f.AutoFilter(l.name, area, nil); err != nil {
			return err
		}
	}
	fit, orientation, size, width, height := true, "portrait", a4, 1, 0
	if l.Wide {
		orientation = "landscape"
	}
	if err := f.SetSheetProps(l.name, &excelize.SheetPropsOptions{FitToPage: &fit}); err != nil {
		return err
	}
	if err := f.SetPageLayout(l.name, &excelize.PageLayoutOptions{Size: &size, Orientation: &orientation, FitToWidth: &width, FitToHeight: &height}); err != nil {
		return err
	}
	side, end, edge := 0.5, 0.6, 0.3 // inches
	if err := f.SetPageMargins(l.name, &excelize.PageLayoutMarginsOptions{Left: &side, Right: &side, Top: &end, Bottom: &end, Header: &edge, Footer: &edge}); err != nil {
		return err
	}
	if err := f.SetHeaderFooter(l.name, &excelize.HeaderFooterOptions{OddFooter: "&L&A&RPage &P of &N"}); err != nil {
		return err
	}
	if err := f.SetSheetDimension(l.name, "A1:"+ref(l.key, max(l.rowOf(len(l.Rows)-1), 1))); err != nil || l.head == 0 {
		return err
	}
	return f.SetDefinedName(&excelize.DefinedName{Name: "_xlnm.Print_Titles", Scope: l.name,
		RefersTo: fmt.Sprintf("'%s'!$%d:$%d", l.name, l.head, l.head)})
}

// lastPlain is the last row that is no sum: sums stay in sight whatever is chosen.
func (l *layout) lastPlain() int {
	last := len(l.Rows) - 1
	for last >= 0 && l.Rows[last].Role == bom.SumRow {
		last--
	}
	return last
}
