package show

import (
	"bytes"
	"strings"

	"github.com/olekukonko/tablewriter"
	"github.com/olekukonko/tablewriter/tw"
)

// column is one column of a text table.
type column struct {
	title string
	right bool // figures stand flush right
}

// table lays rows out in columns behind an indent, without borders; a rule stands under the
// titles. The library's own formatting of titles and its look at the environment
// are off, so that the same rows give the same bytes.
func table(indent int, columns []column, rows [][]Term) (Term, error) {
	var b bytes.Buffer
	align := make([]tw.Align, len(columns))
	titles := make([]string, len(columns))
	for i, c := range columns {
		titles[i], align[i] = c.title, tw.AlignLeft
		if c.right {
			align[i] = tw.AlignRight
		}
	}
	none := tw.Padding{Left: "", Right: "  ", Overwrite: true}
	t := tablewriter.NewTable(&b,
		tablewriter.WithHeaderAutoFormat(tw.Off),
		tablewriter.WithRowAutoWrap(tw.WrapNone),
		tablewriter.WithHeaderAutoWrap(tw.WrapNone),
		tablewriter.WithEastAsian(tw.Off),
		tablewriter.WithPadding(none),
		tablewriter.WithAlignment(align),
		tablewriter.WithHeaderAlignmentConfig(tw.CellAlignment{PerColumn: align}),
		tablewriter.WithSymbols(tw.NewSymbols(tw.StyleASCII)),
		tablewriter.WithRendition(tw.Rendition{
			Borders:  tw.BorderNone,
			Settings: tw.Settings{Lines: tw.LinesNone, Separators: tw.SeparatorsNone},
		}),
	)
	t.Header(titles)
	for _, r := range rows {
		cells := make([]string, len(r))
		for i, c := range r {
			cells[i] = string(c)
		}
		if err := t.Append(cells); err != nil {
			return "", err
		}
	}
	if err := t.Render(); err != nil {
		return "", err
	}
	var out strings.Builder
	for _, line := range strings.Split(strings.TrimRight(b.String(), "\n"), "\n") {
		out.WriteString(strings.TrimRight(strings.Repeat(" ", indent)+line, " "))
		out.WriteByte('\n')
	}
	return Term(out.String()), nil
}
