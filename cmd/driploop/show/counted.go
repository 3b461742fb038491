package show

import (
	"fmt"
	"strconv"
	"strings"

	"driploop/catalog/unit"
)

// Counted is a shelf as somebody counted it, held against the book.
type Counted struct {
	Shelf string
	On    unit.Date
	By    string // initials of who counted what does not name somebody else
	Bins  []CountedBin
	Reels []CountedReel
	Feet  bool
	File  string // where it was written; "" before that
}

// CountedBin is what was counted in one bin. Bag is not 0 where the count is too low by
// just that size of bag, as when bags were written down for pieces.
type CountedBin struct {
	Part, By, Note string
	Qty, Book      int64
	Bag            int
}

// CountedReel is the reading of one reel.
type CountedReel struct {
	Tag, Part, By, Note string
	Left, Book          unit.MM
	How                 string // "" where nobody wrote it
	Was                 string // where the book has it; "" nowhere
}

// TOML writes the stock sheet of the count, laid out as dress lays it.
func (c *Counted) TOML() []byte {
	b := &paste{}
	b.line("[sheet]")
	b.line("on    = " + c.On.String())
	b.line("by    = " + tomlString(c.By))
	b.line("where = " + tomlString(c.Shelf))
	for _, x := range c.Bins {
		b.line("")
		b.row("count", c.by(x.By), [2]string{"because", tomlWord(x.Note)}, [2]string{"part", tomlString(x.Part)}, [2]string{"qty", strconv.FormatInt(x.Qty, 10)})
	}
	for _, r := range c.Reels {
		b.line("")
		b.row("reel", c.by(r.By), [2]string{"because", tomlWord(r.Note)}, [2]string{"tag", tomlString(r.Tag)}, [2]string{"part", tomlString(r.Part)},
			[2]string{"left", tomlString(r.Left.String())}, [2]string{"how", tomlWord(r.How)})
	}
	return []byte(b.out.String())
}

// by names who counted a row, where that is not who counted the others.
func (c *Counted) by(who string) [2]string {
	if who == c.By {
		who = ""
	}
	return [2]string{"by", tomlWord(who)}
}

// tomlWord is a string for TOML, or nothing where there is nothing to write.
func tomlWord(s string) string {
	if s == "" {
		return ""
	}
	return tomlString(s)
}

// row writes a row of a list.
func (b *paste) row(list string, keys ...[2]string) {
	b.line("[[" + list + "]]")
	b.keys(keys)
}

// keys writes keys with their values, without those that have none, the equal signs
// below each other.
func (b *paste) keys(keys [][2]string) {
	wide := 0
	for _, k := range keys {
		if k[1] != "" {
			wide = max(wide, len(k[0]))
		}
	}
	for _, k := range keys {
		if k[1] != "" {
			b.line(k[0] + strings.Repeat(" ", wide-len(k[0])) + " = " + k[1])
		}
	}
}

// CountedText says what was read of shelves, and how it differs from the book.
func CountedText(page Page, counts []*Counted, files bool) ([]byte, error) {
	d := &Document{Title: "Counted, and held against the book of " + counts[0].On.String()}
	for _, c := range counts {
		d.Blocks = append(d.Blocks, c.block())
	}
	if files {
		d.Blocks = append(d.Blocks, Block{Text: []string{"A count holds for the evening of its day: what is taken after it on that day is missing from it."}})
	}
	return d.Text(page)
}

func (c *Counted) block() Block {
	b := Block{Head: strings.ToUpper(c.Shelf)}
	var rows [][]string
	for _, x := range c.Bins {
		if x.Qty != x.Book {
			rows = append(rows, []string{clip(x.Part, 24), strconv.FormatInt(x.Qty, 10), strconv.FormatInt(x.Book, 10), fmt.Sprintf("%+d", x.Qty-x.Book)})
		}
		if x.Bag > 0 {
			b.Items = append(b.Items, Item{x.Part, fmt.Sprintf("%d counted, and the book has %d, as many bags of %d", x.Qty, x.Book, x.Bag)})
		}
	}
	for _, r := range c.Reels {
		if r.Left != r.Book {
			sign, by := "+", r.Left-r.Book
			if by < 0 {
				sign, by = "-", -by
			}
			rows = append(rows, []string{r.Tag, r.Left.String(), r.Book.String(), sign + by.String()})
		}
		switch {
		case r.Was == "":
			b.Items = append(b.Items, Item{r.Tag, "the book has it on no shelf; book how it came back"})
		case r.Was != c.Shelf:
			b.Items = append(b.Items, Item{r.Tag, "the book has it at " + r.Was + "; book the move"})
		}
	}
	text := fmt.Sprintf("%s and %s by %s", words(len(c.Bins), "bin", "bins"), words(len(c.Reels), "reel", "reels"), c.By)
	switch {
	case rows == nil:
		text += ", all as the book has them"
	default:
		text += fmt.Sprintf(", %d not as the book has them", len(rows))
		b.Table = &Grid{Columns: []string{"part or tag", "counted", "book", "difference"}, Rows: rows}
	}
	if c.File != "" {
		text += ", in " + c.File
	}
	b.Text = []string{text + "."}
	return b
}

// CountOut says what a sheet is for that was written to count on.
func CountOut(shelves []string, file string) []byte {
	return []byte(string(Terms("To count %s: %s. Blank is not counted, 0 is none.", strings.Join(shelves, ", "), file)) + "\n")
}
