package source

import (
	"errors"
	"strings"
	"testing"

	"github.com/pelletier/go-toml/v2/unstable"
)

// For every wording a text that leads to it, and where the problem stands.
var unreadableTexts = []struct{ wording, src, at string }{
	{"carriage return", "# a\rb", "1:4 \r"},
	{"control characters", "a = 'x\x07'", "1:7 \x07"},
	{"cannot have new lines", "a = 'x\nb = 1", "1:7 \n"},
	{"unterminated", "a = \"x", "1:6 x"},
	{"string not terminated", "# one\n\na = '''x\n\n", "3:1 "},
	{"too many quotes", "a = '''x''''''", "1:9 ''''''"},
	{"need a character after", "a = \"\"\"x\\", "1:9 \\"},
	{"invalid escape", `a = "C:\qdir"`, "1:8 \\q"},
	{"escape sequence", `a = "\u00G0"`, "1:10 G"},
	{"to close table name", "[a\nb = 1", "1:3 \n"},
	{"to close array table name", "[[a]", "1:4 ]"},
	{"expected '=' after key", "gain dbi = 1", "1:6 d"},
	{"expected key but reached end", "a.", "1:2 ."},
	{"start of key", "é = 1", "1:1 é"},
	{"expected value, not end of input", "a =", "1:3 ="},
	{"expected value but got", "a = [1,,2]", "1:8 ,"},
	{"at start of value", "a = N male", "1:5 N"},
	{"expected keyword", "a = fals", "1:5 fals"},
	{"expected \"", "a = +ix", "1:6 i"},
	{"nested more than", "a = " + strings.Repeat("[", 10001), "1:10005 ["},
	{"array is incomplete", "x = 1\na = [1,\n2,\n", "2:1 "},
	{"inline table is incomplete", "a = {b = 1", "1:1 "},
	{"unexpected comma", "a = {b = 1,, c = 2}", "1:12 ,"},
	{"after array value", "a = [\"N male\" \"N male\"]", "1:15 \""},
	{"after inline table key-value", "a = {b = 1 c = 2}", "1:12 c"},
	{"strings must be quoted", "a = 18.5m", "1:9 m"},
	{"leading zeroes", "a = 007", "1:5 00"},
	{"underscore", "a = 1__0", "1:6 __"},
	{"decimal point", "a = 1.", "1:6 ."},
	{"exponent", "a = 1e", "1:6 e"},
	{"radix prefix", "a = 0xg", "1:5 0x"},
	{"after sign", "a = -", "1:5 -"},
	{"expected digit", "a = -x", "1:6 x"},
	{"expected newline", "a = 1 b = 2", "1:7 b"},
}

func TestSyntaxWordings(t *testing.T) {
	tested := map[string]bool{}
	for _, c := range unreadableTexts {
		tested[c.wording] = true
		if got := wordingOf(c.src); got != c.wording {
			t.Errorf("%.40q leads to the wording for %q, want %q", c.src, got, c.wording)
		}
		d, found := parseBytes([]byte(c.src))
		checkPlaces(t, d, found)
		p := found[len(found)-1]
		if p.Kind != Syntax || where(p.At) != c.at {
			t.Errorf("%.40q is reported at %q, want %q", c.src, where(p.At), c.at)
		}
		if strings.Contains(p.Says, "this is not TOML") || strings.Contains(p.Says, "{c}") || strings.Contains(p.Says, "{next}") {
			t.Errorf("%.40q has no words of its own: %s", c.src, p.Says)
		}
	}
	for _, w := range wordings {
		if !tested[w.parser] {
			t.Errorf("no text leads to the wording for %q", w.parser)
		}
	}
}

// wordingOf is the parser text of the wording that a text leads to.
func wordingOf(src string) string {
	var p unstable.Parser
	p.Reset([]byte(src))
	for p.NextExpression() {
	}
	var e *unstable.ParserError
	if !errors.As(p.Error(), &e) {
		return ""
	}
	for _, w := range wordings {
		if strings.Contains(e.Message, w.parser) {
			return w.parser
		}
	}
	return "none: " + e.Message
}

func TestSyntaxMessage(t *testing.T) {
	p := parseBad(t, "[cable.C1]\nends = [\"N male\", \"N male\"\nway  = [\"roof\"]")
	if where(p.At) != "3:1 w" || !strings.HasPrefix(p.Says, `"w" was read, a comma or ] is expected`) {
		t.Errorf("unexpected problem:%s", listed([]Problem{p}))
	}
	if len(p.Also) != 1 || where(p.Also[0]) != "2:1 " {
		t.Errorf("the line that began it is not named: %v", p.Also)
	}
}

func TestNewerSyntax(t *testing.T) {
	for _, c := range []struct{ src, at string }{
		{"a = {b = 1,\nc = 2}", "1:5 {"},
		{"a = {\n}", "1:5 {"},
		{"a = {b = 1 # c\n}", "1:5 {"},
		{"a = [{b = {\n}}]", "1:11 {"},
		{"a = {b = 1, }", "1:11 ,"},
		{"a = {b = [1,], c = 2,}", "1:21 ,"},
		{`a = "\x41"`, `1:6 \x`},
		{`a = "\\\e"`, `1:8 \e`},
		{`"\x41" = 1`, `1:2 \x`},
		{`a = {"\e" = 1}`, `1:7 \e`},
		{`["\e"]`, `1:3 \e`},
		{"a = \"\"\"\n\\e\"\"\"", `2:1 \e`},
		{"a = 07:30", "1:5 07:30"},
		{"a = 2026-12-01T07:30", "1:5 2026-12-01T07:30"},
		{"a = 2026-12-01 07:30Z", "1:5 2026-12-01 07:30Z"},
		{"a = 2026-12-01 07:30+01:00", "1:5 2026-12-01 07:30+01:00"},
	} {
		if p := parseBad(t, c.src); p.Kind != Syntax || where(p.At) != c.at {
			t.Errorf("%q is reported at %q, want %q", c.src, where(p.At), c.at)
		}
	}
	if _, found := parseBytes([]byte("a = {b = 1 # one, two\n,}")); len(found) != 2 {
		t.Errorf("want the line end and the comma:%s", listed(found))
	}
	for _, src := range []string{
		`a = "\\x41 \\e"`, `a = '\x41\e'`, `'\e' = 1`, "a = [\n1,\n]", "a = {b = [\n1,\n]}",
		"a = {b = '''\n''', c = 1}", "a = {b = ','}", "a = {b = \"}#,\"}",
	} {
		parseGood(t, src)
	}
}

func TestDates(t *testing.T) {
	for _, src := range []string{
		"2026-13-01", "2026-02-29", "2026-00-01", "2026-1-01", "24:00:00", "12:60:00", "12:00:60", "12:00:00.",
		"2026-12-01T25:00:00", "2026-12-01T07:30:00+24:00", "2026-12-01T07:30:00+01:60", "2026-12-01T07:30:00-1:00",
		"2026-12-01T07:30:00+0100", "2026-12-01T07:30:00Z1", "2026-12-01T", "2026-12-01TZ", "1:00:00",
		"2026-12-01T07:30:00.5.5", "07:30:00Z", "2026-12-01Z", "2026-12-01 07:30:00 01:00", "2026-12-017",
	} {
		if p := parseBad(t, "a = "+src); p.Kind != Syntax || p.At.Line() != 1 || p.At.Col() < 5 {
			t.Errorf("%s: reported at %q", src, where(p.At))
		}
	}
	for _, src := range []string{
		"2024-02-29", "0001-01-01", "23:59:59.999999999", "2026-12-01t07:30:00z", "2026-12-01T07:30:00+23:59", "2026-12-01T07:30:00.123456789012-00:00",
	} {
		parseGood(t, "a = "+src)
	}
}
