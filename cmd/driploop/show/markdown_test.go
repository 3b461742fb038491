package show

import (
	"bytes"
	"strings"
	"testing"

	"github.com/yuin/goldmark"
	"github.com/yuin/goldmark/ast"
	"github.com/yuin/goldmark/extension"
	east "github.com/yuin/goldmark/extension/ast"
	"github.com/yuin/goldmark/text"
)

func TestProse(t *testing.T) {
	for _, c := range []struct{ in, want string }{
		{"G ≤ 6.5 dB, as 47 CFR 20.21(e)(8) has it", "G ≤ 6.5 dB, as 47 CFR 20.21(e)(8) has it"},
		{"two\nlines\tand  more", "two lines and more"},
		{"feed_loss_db *or* `x`", "feed\\_loss\\_db \\*or\\* \\`x\\`"},
		{"[a](b) <b> a|b c\\d", "\\[a\\](b) \\<b> a&#124;b c\\\\d"},
		{"ask @jo about #12", "ask `@jo` about `#12`"},
		{"see http://h.example and www.h.example", "see `http://h.example` and `www.h.example`"},
		{"- x", "\\- x"},
		{"12. x", "12\\. x"},
		{"# x", "`#` x"},
		{"\x1b[31m", "\\\\x1b\\[31m"},
	} {
		if got := Prose(c.in); string(got) != c.want {
			t.Errorf("%q became %q, want %q", c.in, got, c.want)
		}
	}
}

func TestCode(t *testing.T) {
	for _, c := range []struct{ in, want string }{
		{"us-nec-2020", "`us-nec-2020`"},
		{"a`b", "``a`b``"},
		{"``", "``` `` ```"},
		{"a|b", "`a`&#124;`b`"},
		{"a\nb", "`a b`"},
		{"", ""},
	} {
		if got := Code(c.in); string(got) != c.want {
			t.Errorf("%q became %q, want %q", c.in, got, c.want)
		}
	}
}

var commonMark = goldmark.New(goldmark.WithExtensions(extension.GFM, extension.Footnote, extension.DefinitionList))

// markdownText reads Markdown as code hosts do and returns the text that it shows
// by blocks, and what in it is more than text, or "".
func markdownText(src string) (blocks []string, active string) {
	b := []byte(src)
	doc := commonMark.Parser().Parse(text.NewReader(b))
	var words strings.Builder
	ast.Walk(doc, func(n ast.Node, entering bool) (ast.WalkStatus, error) {
		switch n := n.(type) {
		case *ast.Link, *ast.Image, *ast.AutoLink, *ast.RawHTML, *ast.HTMLBlock, *ast.Emphasis, *east.Strikethrough, *east.TaskCheckBox, *east.FootnoteLink, *ast.Blockquote, *ast.CodeBlock, *ast.FencedCodeBlock, *ast.ThematicBreak:
			active = n.Kind().String()
		case *ast.Text:
			if entering {
				shown := resolved(n, b)
				words.Write(shown)
				if _, code := n.Parent().(*ast.CodeSpan); !code && (bytes.ContainsAny(shown, "@#") || bytes.Contains(shown, []byte(":/"))) {
					active = "mention or reference"
				}
				if n.SoftLineBreak() || n.HardLineBreak() {
					words.WriteByte('\n')
				}
			}
		case *ast.Paragraph, *ast.Heading, *ast.TextBlock, *east.TableCell:
			if !entering {
				blocks = append(blocks, words.String())
				words.Reset()
			}
		}
		return ast.WalkContinue, nil
	})
	return blocks, active
}

// resolved is the text of a node as a reader sees it: without backslashes and
// entities, but in code as it stands.
func resolved(n *ast.Text, src []byte) []byte {
	raw := n.Segment.Value(src)
	if _, code := n.Parent().(*ast.CodeSpan); code {
		return raw
	}
	out := strings.ReplaceAll(string(raw), bar, "|")
	var b strings.Builder
	for i := 0; i < len(out); i++ {
		if out[i] == '\\' && i+1 < len(out) && strings.IndexByte("\\`*_~<[]&$-+=>.)", out[i+1]) >= 0 {
			i++
		}
		b.WriteByte(out[i])
	}
	return []byte(b.String())
}

// A stranger's text in a paragraph, a list, a heading and a table shows as the same
// text and as nothing else, and mentions and references stand in code.
func FuzzMarkdown(f *testing.F) {
	for _, s := range hostileTexts {
		f.Add(s)
	}
	f.Add("a `b` | c \\| d\\\\| e")
	f.Add("` | `` | `")
	f.Fuzz(func(t *testing.T, s string) {
		want := string(Clean(strings.Join(strings.Fields(s), " ")))
		for _, c := range []struct {
			md    MD
			words string
		}{{Prose(s), proseWords(s)}, {Code(s), want}} {
			if strings.ContainsAny(string(c.md), "\n\r") {
				t.Fatalf("%q became %q, which is not one line", s, c.md)
			}
			if bad := harmlessText(string(c.md)); bad != "" {
				t.Errorf("%q became %q: %s", s, c.md, bad)
			}
			if c.words == "" {
				continue
			}
			page := string(c.md) + "\n\n- " + string(c.md) + "\n\n# " + string(c.md) + "\n\n| a | b |\n|---|---|\n| " + string(c.md) + " | " + string(c.md) + " |\n"
			blocks, active := markdownText(page)
			if active != "" {
				t.Errorf("%q became %q, which holds a %s", s, c.md, active)
			}
			wantBlocks := []string{c.words, c.words, c.words, "a", "b", c.words, c.words}
			if strings.Join(blocks, "\n") != strings.Join(wantBlocks, "\n") {
				t.Errorf("%q became %q, which shows %q, want %q", s, c.md, blocks, c.words)
			}
		}
	})
}

// proseWords is what Prose shows: each word made harmless by itself.
func proseWords(s string) string {
	words := strings.Fields(s)
	for i, w := range words {
		words[i] = string(Clean(w))
	}
	return strings.Join(words, " ")
}
