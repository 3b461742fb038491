package book

import (
	"fmt"
	"strconv"
	"strings"

	"github.com/xuri/excelize/v2"

	"driploop/bom"
)

// formula is text that a workbook computes. It is made of our own words and of
// references only.
type formula string

// formula writes how a value follows from others: of the cell in a row and column
// of the sheet.
func (b *builder) formula(l *layout, row, column int, live *bom.Live) (formula, error) {
	refs := make([]string, 0, len(live.Of))
	if live.How != bom.LiveSame {
		for _, title := range live.Of {
			at := l.Column(title)
			if at < 0 {
				return "", fmt.Errorf("the sheet %q has no column %q to compute with", l.name, title)
			}
			refs = append(refs, ref(at+1, row))
		}
	}
	switch live.How {
	case bom.LiveProduct:
		if len(refs) == 2 {
			return formula("ROUND(" + refs[0] + "*" + refs[1] + ",2)"), nil
		}
	case bom.LivePlus:
		if len(refs) > 0 {
			return formula("SUM(" + strings.Join(refs, ",") + ")"), nil
		}
	case bom.LivePacks:
		if len(refs) > 0 && len(live.Per) == len(refs) {
			return packs(refs, live.Per), nil
		}
	case bom.LiveSum:
		if live.Rows == 0 {
			return "0", nil
		}
		return formula("SUBTOTAL(9," + ref(column, row-live.Rows) + ":" + ref(column, row-1) + ")"), nil
	case bom.LiveSame:
		return b.elsewhere(l, live)
	}
	return "", fmt.Errorf("the sheet %q computes a value from %d columns", l.name, len(refs))
}

// packs counts what was counted in packs of several sizes; nothing counted is blank.
func packs(refs []string, per []int64) formula {
	var sum []string
	for i, r := range refs {
		if per[i] != 1 {
			r = "N(" + r + ")*" + strconv.FormatInt(per[i], 10)
		} else {
			r = "N(" + r + ")"
		}
		sum = append(sum, r)
	}
	return formula("IF(COUNT(" + strings.Join(refs, ",") + `)=0,"",` + strings.Join(sum, "+") + ")")
}

// elsewhere refers to a cell of another sheet.
func (b *builder) elsewhere(l *layout, live *bom.Live) (formula, error) {
	for _, other := range b.layouts {
		if other.Key != live.Sheet || len(live.Of) != 1 {
			continue
		}
		row, column := other.RowOf(live.Row), other.Column(live.Of[0])
		if row >= 0 && column >= 0 {
			return formula("'" + other.name + "'!" + ref(column+1, other.rowOf(row))), nil
		}
	}
	return "", fmt.Errorf("the sheet %q refers to %s of %s in the sheet %q, which is not there", l.name, strings.Join(live.Of, ", "), live.Row, live.Sheet)
}

// ref names a cell: A1.
func ref(column, row int) string {
	name, err := excelize.CoordinatesToCellName(column, row)
	if err != nil {
		return "#REF!" // beyond the last column or row, of which layOut has told
	}
	return name
}
