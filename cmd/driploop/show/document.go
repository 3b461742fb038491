package show

import (
	"strings"
	"unicode/utf8"
)

// Document is a page for reading. It is put together once, from plain strings, and
// laid out as text or as Markdown; each layout makes the strings harmless for itself.
type Document struct {
	Title  string
	Blocks []Block
}

// Block is what stands under one heading: sentences, then items, then a table.
type Block struct {
	Head  string // "" for what goes on from the title
	Text  []string
	Items []Item
	Table *Grid
	how   ink // of the sentences, on a terminal
}

// Item is a line with a name to look it up by; without one it is a bullet.
type Item struct{ Name, Text string }

// Grid is a table of short cells. The first column names the row.
type Grid struct {
	Columns []string
	Rows    [][]string
	Words   int // how many columns hold words, from the first on; 0 is one. The others hold figures
}

// isWords reports a column that holds words.
func (g *Grid) isWords(i int) bool { return i < max(1, g.Words) }

// Text lays the page out for a terminal or a log.
func (d *Document) Text(page Page) ([]byte, error) {
	s := &sheet{page: page}
	s.para("", strong, Clean(d.Title))
	for _, b := range d.Blocks {
		s.gap()
		if b.Head != "" {
			s.para("", fine, Clean(b.Head))
		}
		for _, t := range b.Text {
			s.para("", b.how, Clean(t))
		}
		s.items(b.Items)
		if err := s.grid(b.Table); err != nil {
			return nil, err
		}
	}
	return []byte(s.b.String()), nil
}

// items writes names in one column and texts in another. On a narrow page, and
// beside a name that is too long for its column, the text stands below.
func (s *sheet) items(items []Item) {
	const most = 22
	column := 0
	for _, it := range items {
		if n := utf8.RuneCountInString(it.Name); n <= most {
			column = max(column, n)
		}
	}
	for _, it := range items {
		name := Clean(it.Name)
		n := utf8.RuneCountInString(string(name))
		switch {
		case name == "":
			s.para("  · ", plain, Clean(it.Text))
		case s.page.Width < 60 || n > most:
			s.hang("  ", plain, 4, strong, name)
			if it.Text != "" {
				s.para("      ", plain, Clean(it.Text))
			}
		default:
			lead := "  " + string(name) + strings.Repeat(" ", column-n+2)
			s.hang(Term(lead), strong, column+4, plain, Clean(it.Text))
		}
	}
}

// grid writes a table; where the page is too narrow for it, each row is a line under
// the title of the first column.
func (s *sheet) grid(g *Grid) error {
	if g == nil {
		return nil
	}
	var columns []column
	for i, c := range g.Columns {
		columns = append(columns, column{c, !g.isWords(i)})
	}
	rows := make([][]Term, len(g.Rows))
	for i, r := range g.Rows {
		for _, c := range r {
			rows[i] = append(rows[i], Clean(c))
		}
	}
	text, err := table(2, columns, rows)
	if err != nil {
		return err
	}
	if s.fits(string(text)) {
		s.b.WriteString(string(text))
		return nil
	}
	s.hang("  ", plain, 2, plain, Clean(g.Columns[0]))
	for _, r := range g.Rows {
		var cells []string
		for i, c := range r[1:] {
			switch {
			case c == "":
			case g.isWords(i + 1):
				cells = append(cells, c)
			default:
				cells = append(cells, g.Columns[i+1]+" "+c)
			}
		}
		s.hang("    ", plain, 6, plain, Terms("%s: %s", r[0], strings.Join(cells, ", ")))
	}
	return nil
}

func (s *sheet) fits(text string) bool {
	for line := range strings.Lines(text) {
		if utf8.RuneCountInString(strings.TrimRight(line, "\n")) > s.page.Width {
			return false
		}
	}
	return true
}

// Markdown lays the page out for a code host or a handbook.
func (d *Document) Markdown() []byte {
	var b strings.Builder
	b.WriteString("# " + string(Prose(d.Title)) + "\n")
	for _, block := range d.Blocks {
		if block.Head != "" {
			b.WriteString("\n## " + string(Prose(block.Head)) + "\n")
		}
		for _, t := range block.Text {
			b.WriteString("\n" + string(Prose(t)) + "\n")
		}
		b.WriteString(itemsMD(block.Items))
		b.WriteString(gridMD(block.Table))
	}
	return []byte(b.String())
}

func itemsMD(items []Item) string {
	if len(items) == 0 {
		return ""
	}
	out := "\n"
	for _, it := range items {
		switch name, text := Code(it.Name), Prose(it.Text); {
		case name == "":
			out += "- " + string(text) + "\n"
		case text == "":
			out += "- " + string(name) + "\n"
		default:
			out += "- " + string(name) + " — " + string(text) + "\n"
		}
	}
	return out
}

func gridMD(g *Grid) string {
	if g == nil {
		return ""
	}
	out := "\n" + rowMD(g.Columns)
	for i := range g.Columns {
		if g.isWords(i) {
			out += "|---"
		} else {
			out += "|---:"
		}
	}
	out += "|\n"
	for _, r := range g.Rows {
		out += rowMD(r)
	}
	return out
}

func rowMD(cells []string) string {
	out := "|"
	for _, c := range cells {
		out += " " + string(Prose(c)) + " |"
	}
	return out + "\n"
}
