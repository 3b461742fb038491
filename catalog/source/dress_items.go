package source

import (
	"bytes"
	"fmt"
	"slices"
	"strings"

	"github.com/pelletier/go-toml/v2/unstable"
)

// item is a key with its value, or a header, and the comments that belong to it.
type item struct {
	header *Node  // the table that a header opens, nil for a key
	name   string // the first part of the key or header
	text   string // its lines, with the comment behind it

	gap   bool       // a blank line stands above it and its comments
	apart [][]string // comments above it that touch nothing
	lead  []string   // the comment that touches it from above
	foot  []string   // the comment that touches it from below
}

// expression is where an item stands: the 1-based line on which it begins, and the
// offset up to which it reaches.
type expression struct {
	header bool
	name   string
	line   int
	to     int
}

// takeApart finds the items of the file with their comments.
func (d *draft) takeApart() error {
	list, err := d.expressions()
	if err != nil {
		return err
	}
	f := d.doc.File
	headers := map[int32]*Node{}
	findHeaders(d.doc.Root, headers)
	edits := d.edits()
	end := 0 // the last line of what was read
	for _, e := range list {
		it := item{name: e.name}
		from := f.skip(int(f.lineStart(e.line)), " \t")
		if e.header {
			it.header = headers[int32(from)]
			if it.header == nil {
				return fmt.Errorf("the header on line %d was not found again", e.line)
			}
		}
		d.giveComments(&it, end, e.line)
		end = f.line(int32(e.to - 1))
		indent := string(f.Src[f.lineStart(e.line):from])
		it.text = dedent(edits.apply(f, from, f.lineEnd(end)), indent)
		d.items = append(d.items, it)
	}
	d.giveTail(f.groups(end+1, len(f.lines)), end)
	d.lineEnd = f.lineBreak(list)
	return nil
}

// giveComments divides what stands between the last item, which ends on a line, and
// the one that begins on another.
func (d *draft) giveComments(it *item, end, line int) {
	groups := d.doc.File.groups(end+1, line-1)
	if n := len(groups); n > 0 && groups[n-1].last == line-1 {
		it.lead = groups[n-1].lines
		groups = groups[:n-1]
	}
	switch n := len(d.items); {
	case n == 0 && len(groups) == 0:
		d.head, it.lead = cutDirectives(it.lead)
	case len(groups) == 0:
	case n == 0:
		d.head, groups = groups[0].lines, groups[1:]
	case groups[0].first == end+1:
		d.items[n-1].foot, end = groups[0].lines, groups[0].last
		groups = groups[1:]
	}
	it.apart = linesOf(groups)
	it.gap = line-len(it.lead) > end+1
}

// lineBreak is how the first line of the file ends that holds anything and does not
// end within a value.
func (f *File) lineBreak(list []expression) string {
	begin, line := len(f.lines)+1, len(f.lines)
	if len(list) > 0 {
		begin, line = list[0].line, f.line(int32(list[0].to-1))
	}
	if above := f.groups(1, begin-1); len(above) > 0 {
		line = above[0].first
	}
	if bytes.HasPrefix(f.Src[f.lineEnd(line):], []byte("\r\n")) {
		return "\r\n"
	}
	return "\n"
}

// cutDirectives divides a comment behind the lines at its top that speak to editors
// and count only at the top of a file: "#:schema plan.json".
func cutDirectives(lines []string) (directives, rest []string) {
	n := 0
	for n < len(lines) && strings.HasPrefix(lines[n], "#:") {
		n++
	}
	return lines[:n], lines[n:]
}

// giveTail keeps the comments behind the last item, which ends on a line.
func (d *draft) giveTail(groups []group, end int) {
	switch n := len(d.items); {
	case len(groups) == 0:
		return
	case n == 0:
		d.head, groups = groups[0].lines, groups[1:]
	case groups[0].first == end+1:
		d.items[n-1].foot, groups = groups[0].lines, groups[1:]
	}
	d.tail = linesOf(groups)
}

// expressions lists the keys and headers of the file in order, and notes all its
// comments. The file was parsed already.
func (d *draft) expressions() (list []expression, err error) {
	defer func() {
		if r := recover(); r != nil {
			err = fmt.Errorf("it cannot be taken apart: %v", r)
		}
	}()
	f := d.doc.File
	p := unstable.Parser{KeepComments: true}
	p.Reset(f.Src)
	for p.NextExpression() {
		e := p.Expression()
		for n := e; n != nil; n = n.Next() {
			d.noteComments(n)
		}
		if e.Kind == unstable.Comment {
			continue
		}
		parts := e.Key()
		parts.Next()
		first := parts.Node()
		from := int32(first.Raw.Offset)
		x := expression{header: e.Kind != unstable.KeyValue, name: string(first.Data), line: f.line(from), to: int(from) + 1}
		if !x.header {
			x.to = int(e.Raw.Offset + e.Raw.Length)
		}
		list = append(list, x)
	}
	return list, p.Error()
}

func (d *draft) noteComments(n *unstable.Node) {
	if n.Kind == unstable.Comment {
		d.comments = append(d.comments, strings.TrimRight(string(n.Data), " \t\r"))
	}
	for it := n.Children(); it.Next(); {
		d.noteComments(it.Node())
	}
}

// findHeaders finds the tables that have a header, by its offset.
func findHeaders(n *Node, found map[int32]*Node) {
	if n.Kind == Table && n.made == byHeader {
		found[n.At.From] = n
	}
	for _, k := range n.Keys {
		findHeaders(k.Value, found)
	}
	for _, item := range n.Items {
		findHeaders(item, found)
	}
}

// group is lines of comment that touch each other.
type group struct {
	first, last int
	lines       []string
}

// groups finds the comments between two lines, both inside, that hold nothing else.
func (f *File) groups(from, to int) []group {
	var out []group
	for n := from; n <= to; n++ {
		text := strings.Trim(f.LineText(n), " \t")
		if text == "" {
			continue
		}
		if len(out) == 0 || out[len(out)-1].last != n-1 {
			out = append(out, group{first: n})
		}
		g := &out[len(out)-1]
		g.last, g.lines = n, append(g.lines, text)
	}
	return out
}

func linesOf(groups []group) [][]string {
	var out [][]string
	for _, g := range groups {
		out = append(out, g.lines)
	}
	return out
}

// lineEnd is the offset behind the text of a 1-based line, its line end left out.
func (f *File) lineEnd(n int) int { return int(f.lineStart(n)) + len(f.LineText(n)) }

// edit replaces a value by its usual spelling.
type edit struct {
	at   Place
	text string
}

type edits []edit

// edits lists what is spelled otherwise, in order of place.
func (d *draft) edits() edits {
	var out edits
	for n, s := range d.layout.spells {
		out = append(out, edit{n.At, `"` + s.text + `"`})
	}
	slices.SortFunc(out, func(a, b edit) int { return int(a.at.From - b.at.From) })
	return out
}

// apply is the text between two offsets with the edits in it made, and without
// blanks behind it.
func (all edits) apply(f *File, from, to int) string {
	var b bytes.Buffer
	at, _ := slices.BinarySearchFunc(all, int32(from), func(e edit, from int32) int { return int(e.at.From - from) })
	for _, e := range all[at:] {
		if int(e.at.From) >= to {
			break
		}
		b.Write(f.Src[from:e.at.From])
		b.WriteString(e.text)
		from = int(e.at.To)
	}
	b.Write(f.Src[from:to])
	return string(bytes.TrimRight(b.Bytes(), " \t"))
}

// dedent takes the indent of an item's first line off its other lines, but not where
// text over several lines may hold it.
func dedent(text, indent string) string {
	if indent == "" || strings.Contains(text, `"""`) || strings.Contains(text, "'''") {
		return text
	}
	return strings.ReplaceAll(text, "\n"+indent, "\n")
}
