package show

import (
	"fmt"
	"strings"
	"testing"
	"unicode"
	"unicode/utf8"
)

func TestClean(t *testing.T) {
	for _, c := range []struct{ name, in, want string }{
		{"plain text stays", "Quay Lane bakery — 0.3 m, 50 Ω, 日本, é", "Quay Lane bakery — 0.3 m, 50 Ω, 日本, é"},
		{"terminal colour", "\x1b[31mred", `\x1b[31mred`},
		{"title of a terminal", "\x1b]0;x\a", `\x1b]0;x\x07`},
		{"eight-bit control", "\u009b31m", `\x9b31m`},
		{"delete and backspace", "a\x7fb\b", `a\x7fb\x08`},
		{"line breaks", "a\r\nb\tc\vd", `a\x0d\nb\tc\x0bd`},
		{"bytes that are no UTF-8", "a\xff\xc3(", `a\xff\xc3(`},
		{"the replacement character itself", "a\uFFFDb", "a\uFFFDb"},
		{"a turned line", "a\u202etxt.exe", `a\u202etxt.exe`},
		{"an isolated turn", "a\u2066b\u2069", `a\u2066b\u2069`},
		{"hidden between letters", "pay\u200bload\u2060\u00ad", `pay\u200bload\u2060\xad`},
		{"a joiner of graphemes, an empty letter", "a\u034fb\u3164", `a\u034fb\u3164`},
		{"Khmer and Mongolian marks that show nothing", "\u17b4\u180b\u180e", `\u17b4\u180b\u180e`},
		{"picked variants", "a\ufe0fb\U000e0100", `a\ufe0fb\U000e0100`},
		{"tags", "a\U000e0041", `a\U000e0041`},
		{"separators of lines and paragraphs", "a\u2028b\u2029", `a\u2028b\u2029`},
		{"a command to a build runner", "::error file=a::b", `:\x3aerror file=a:\x3ab`},
		{"many colons", "a:::::b:c", `a:\x3a:\x3a:b:c`},
		{"an older command, anywhere in the line", "a ##[error]b", `a #\x23[error]b`},
		{"many hashes", "###[x] #1", `#\x23#[x] #1`},
	} {
		if got := Clean(c.in); string(got) != c.want {
			t.Errorf("%s: %q became %q, want %q", c.name, c.in, got, c.want)
		}
	}
}

// harmlessText says what of a page of text does more than show itself, or "".
func harmlessText(page string) string {
	if !utf8.ValidString(page) {
		return "it is no UTF-8"
	}
	for _, r := range page {
		if r != '\n' && (unicode.IsControl(r) || unicode.Is(unicode.Cf, r) || r == '\u2028' || r == '\u2029') {
			return fmt.Sprintf("it has the character %U", r)
		}
	}
	for line := range strings.Lines(page) {
		if strings.HasPrefix(strings.TrimSpace(line), "::") {
			return "a line begins with ::, " + line
		}
		if strings.Contains(line, "##[") {
			return "a line holds ##[, " + line
		}
	}
	return ""
}

// Whatever a text is and however it is broken, the page it stands on shows it and
// does nothing else.
func FuzzTerm(f *testing.F) {
	for _, s := range hostileTexts {
		f.Add(s, 40)
	}
	f.Add(strings.Repeat("x", 75)+"::error::y", 80)
	f.Add(": : :: :", 16)
	f.Add("a: :error", 3)
	f.Fuzz(func(t *testing.T, text string, width int) {
		width = 1 + (width%120+120)%120
		s := &sheet{page: Page{Width: width}}
		s.line(0, plain, Clean(text))
		s.para("", strong, Clean(text))
		s.para("  do ", plain, Clean(text+text))
		s.hang(Clean(text)+" ", plain, 4, plain, Clean(text))
		cells, err := table(0, []column{{"a", false}, {"b", true}}, [][]Term{{Clean(text), Clean(text)}, {"", Clean(text)}})
		if err != nil {
			t.Fatal(err)
		}
		s.b.WriteString(string(cells))
		if bad := harmlessText(s.b.String()); bad != "" {
			t.Errorf("%q at width %d: %s", text, width, bad)
		}
	})
}

// hostileTexts are what strangers may write where a name is expected.
var hostileTexts = []string{
	"", " ", ":", "::", "::error file=a.toml,line=1::gotcha", "x\n::add-mask::secret", "  ::warning::x", "##[error]x", "##vso[task.setvariable variable=x]y",
	"\x1b[2J\x1b]0;owned\a", "\u009b2J", "a\u202eb\u2066c\u2069", "a\u200bb\ufeff", "\xff\xfe", "a\x00b", "\u2028::error::x",
	"=HYPERLINK(\"http://h.example\";\"x\")", "+1+1", "-1", "@SUM(A1)", "\t=1", "\r=1", " =1", "a\n=1", "\"\"\n=1", "a,b\"c",
	"a|b", "a\\|b", "`", "``` x", "`a` `b", "<script>alert(1)</script>", "<img src=x onerror=y>", "<!-- x", "&lt;b&gt;", "&#64;x",
	"[x](http://h.example)", "![x](http://h.example/p.png)", "[x]: http://h.example", "[x][y]", "[^1]", "<http://h.example>", "http://h.example/a_b", "www.h.example", "a@h.example",
	"@someone", "x@someone", "#123", "GH-12", "a/b#1", "- x", "+ x", "* x", "1. x", "12) x", "# x", "> x", "---", "===", "~~~", "    x", "*a* _b_ **c** ~d~ ~~e~~",
	"- [ ] x", "a\\", "\\", "$x$", "| a | b |", "|---|", "\n\n# x\n\n- y", ":smile:", "a  \nb",
}
