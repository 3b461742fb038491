package source

import (
	"fmt"
	"strings"
	"unicode"
	"unicode/utf8"

	"github.com/pelletier/go-toml/v2/unstable"
)

// wording says in the project's words what the parser means.
type wording struct{ parser, says, do string }

// wordings are searched from the top for one whose parser text is part of the
// parser's message. {c} stands for the character at the place.
var wordings = []wording{
	{"carriage return", "a carriage return stands without a line feed", "save the file with the line ends of one system"},
	{"control characters", "{c} stands in a text or comment", "take it out, or write it as an escape such as \\u001B"},
	{"cannot have new lines", "the text is not closed on its line", "add the closing quote; text over several lines stands between three quotes"},
	{"unterminated", "the text is not closed on its line", "add the closing quote"},
	{"string not terminated", "the text between three quotes that begins here is never closed", "add the three closing quotes"},
	{"too many quotes", "too many quotes in a row", "close the text with three quotes"},
	{"need a character after", "the backslash at the end escapes nothing", "double it"},
	{"invalid escape", "the escape \\{next} is not TOML", "double the backslash, or put the text between single quotes"},
	{"escape sequence", "the escape is not a character", "write \\u and four hexadecimal digits"},
	{"to close table name", "the header is not closed in the way it was opened", "write it as [name] or [[name]] on one line"},
	{"to close array table name", "the header is not closed in the way it was opened", "write it as [[name]] on one line"},
	{"expected '=' after key", "the key is followed by {c}, an equals sign is expected", "write it as key = value; a key with other characters than letters, digits, - and _ needs quotes"},
	{"expected key but reached end", "the file ends where a key is expected", "finish the line or take it out"},
	{"start of key", "{c} was read, a key is expected", "begin a key with a letter, digit, - or _, or put it into quotes"},
	{"expected value, not end of input", "the file ends where a value is expected", "finish the line or take it out"},
	{"expected value but got", "{c} was read, a value is expected", "take one comma out, or add the value"},
	{"at start of value", "{c} was read, a value is expected", "add a number, or text in quotes"},
	{"expected keyword", "this is no value", "put text into quotes; write true and false in small letters"},
	{"expected \"", "this is no value", "put text into quotes"},
	{"nested more than", "the value lies too deep", "nest less"},
	{"array is incomplete", "the list that begins here is never closed", "add the closing ]"},
	{"inline table is incomplete", "the table in braces that begins here is never closed", "add the closing }"},
	{"unexpected comma", "a comma stands where a key is expected", "take one comma out"},
	{"after array value", "{c} was read, a comma or ] is expected", "separate the values of a list by commas, and close it"},
	{"after inline table key-value", "{c} was read, a comma or } is expected", "separate the keys of a table in braces by commas, and close it"},
	{"strings must be quoted", "a number runs into {c}", "put text, and figures with a unit, into quotes"},
	{"leading zeroes", "the number begins with a needless zero", "take the zero out, or put it into quotes"},
	{"underscore", "an underscore in a number stands between two digits only", "take it out"},
	{"decimal point", "no digit follows the decimal point", "add one"},
	{"exponent", "no digit follows the exponent", "add one"},
	{"radix prefix", "this is no number", "write 0x, 0o or 0b and digits, without a sign"},
	{"after sign", "the sign is not followed by a number", "add the number, or put text into quotes"},
	{"expected digit", "the sign is not followed by a number", "add the number, or put text into quotes"},
	{"expected newline", "{c} was read behind the end of the line's value", "one line holds one key and its value; put text into quotes"},
}

// unclosed are messages about something that is missed at the end of the file but
// is to be mended where it begins.
var unclosed = []string{"string not terminated", "is incomplete"}

// syntaxProblem is the one problem at which the parser gave up.
func (x *indexer) syntaxProblem(e *unstable.ParserError) Problem {
	f := x.file
	from := min(max(cap(f.Src)-cap(e.Highlight), 0), len(f.Src)) // the highlight is a slice of Src
	_, char := utf8.DecodeRune(f.Src[from:])
	to := min(from+max(len(e.Highlight), char), len(f.Src))
	p := Problem{Kind: Syntax, At: f.stretch(from, to)}
	begin := min(f.skipBetween(x.end), from)
	line := f.stretch(begin, begin)
	for _, u := range unclosed {
		if strings.Contains(e.Message, u) {
			p.At = line
		}
	}
	if line.Line() < p.At.Line() {
		p.Also = []Place{line}
	}
	p.Says, p.Do = "this is not TOML: "+e.Message, "see how the lines around it are written"
	for _, w := range wordings {
		if strings.Contains(e.Message, w.parser) {
			p.Says, p.Do = f.fill(w.says, from), w.do
			break
		}
	}
	return p
}

// fill puts the character at an offset in place of {c}, and the one behind it in
// place of {next}, into a message.
func (f *File) fill(says string, at int) string {
	says = strings.ReplaceAll(says, "{c}", f.character(at))
	return strings.ReplaceAll(says, "{next}", strings.Trim(f.character(at+1), `"`))
}

// character is how a message speaks of the character at an offset.
func (f *File) character(at int) string {
	if at >= len(f.Src) {
		return "the end of the file"
	}
	switch r, _ := utf8.DecodeRune(f.Src[at:]); {
	case r == '\n', r == '\r' && at+1 < len(f.Src) && f.Src[at+1] == '\n':
		return "the end of the line"
	case r == '"':
		return "a quote"
	case !unicode.IsPrint(r):
		return fmt.Sprintf("the character U+%04X", r)
	default:
		return Quote(string(r))
	}
}
