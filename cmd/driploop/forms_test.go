package main

import (
	"bytes"
	"encoding/csv"
	"encoding/json"
	"fmt"
	"regexp"
	"strings"
	"testing"
	"time"
	"unicode"
	"unicode/utf8"

	"github.com/yuin/goldmark"
	"github.com/yuin/goldmark/ast"
	"github.com/yuin/goldmark/extension"
	"github.com/yuin/goldmark/text"

	"driploop/catalog/source"
)

// call is a command with its arguments in one of its forms.
type call struct {
	form string
	args []string
}

func (c call) String() string { return strings.Join(c.args, " ") }

// formless are the commands that print nothing of a workspace in a form of its own.
var formless = map[string]bool{
	"help":       true,
	"completion": true,
	"start":      true, // writes files, and names them
}

// allCalls lists every form of every command. samples are arguments by command; a
// command without a sample fails the test, so that none is forgotten.
func allCalls(t *testing.T, samples map[string][][]string, common ...string) []call {
	t.Helper()
	var out []call
	for _, cmd := range (&Command{}).tree().Commands() {
		if formless[cmd.Name()] {
			continue
		}
		if len(samples[cmd.Name()]) == 0 {
			t.Errorf("the command %s has no sample call here", cmd.Name())
		}
		for _, args := range samples[cmd.Name()] {
			args = append(append([]string{cmd.Name()}, args...), common...)
			for _, form := range formsOf(t, args) {
				out = append(out, call{form, append(append([]string{}, args...), "--as", form)})
			}
		}
	}
	return out
}

var tellsForms = regexp.MustCompile(`this command has (.*)\n`)

// formsOf asks the program for the forms of a command.
func formsOf(t *testing.T, args []string) []string {
	t.Helper()
	_, messages, _ := run(append(append([]string{}, args...), "--as", "?"))
	m := tellsForms.FindStringSubmatch(messages)
	if m == nil {
		t.Fatalf("%v does not tell its forms: %s", args, messages)
	}
	return strings.FieldsFunc(strings.ReplaceAll(m[1], " and ", ","), func(r rune) bool { return r == ',' || r == ' ' })
}

// run is one call within the test.
func run(args []string) (out, messages string, status int) {
	var o, e bytes.Buffer
	c := &Command{Stdin: strings.NewReader(""), Stdout: &o, Stderr: &e,
		Now: func() time.Time { return time.Date(2026, 12, 1, 12, 0, 0, 0, time.UTC) }, Env: func(string) string { return "" }}
	status = c.Main(args)
	return o.String(), e.String(), status
}

// readers say what in a result does more than show itself, by the form's own reader.
var readers = map[string]func(string) string{
	"text":        inLog,
	"json":        inJSON,
	"csv":         inCSV,
	"markdown":    inMarkdown,
	"toml":        inTOML,
	"sarif":       inSARIF,
	"annotations": inAnnotations,
	"junit":       inJUnit,
}

// inLog reads a page as a terminal and a build runner do.
func inLog(page string) string {
	if !utf8.ValidString(page) {
		return "it is no UTF-8"
	}
	for _, r := range page {
		if r != '\n' && (unicode.IsControl(r) || unicode.Is(unicode.Cf, r) || unicode.Is(unicode.Variation_Selector, r)) {
			return fmt.Sprintf("it has the character %U", r)
		}
	}
	for line := range strings.Lines(page) {
		if strings.HasPrefix(strings.TrimSpace(line), "::") || strings.Contains(line, "##[") || strings.Contains(line, "##vso[") {
			return "a runner finds a command in: " + line
		}
	}
	return ""
}

func inJSON(page string) string {
	if !json.Valid([]byte(page)) {
		return "it is no JSON"
	}
	return inLog(page)
}

func inCSV(page string) string {
	rows, err := csv.NewReader(strings.NewReader(page)).ReadAll()
	if err != nil {
		return err.Error()
	}
	for _, r := range rows {
		for _, c := range r {
			if c = strings.TrimSpace(c); c != "" && strings.ContainsRune("=+-@", rune(c[0])) && !plainFigure.MatchString(c) {
				return "a formula: " + c
			}
		}
	}
	if strings.Count(page, "\n") != len(rows) {
		return "a row takes more than one line"
	}
	return inLog(strings.ReplaceAll(page, "\r\n", "\n"))
}

var plainFigure = regexp.MustCompile(`^-?\d+(\.\d+)?$`)

// ownHTML is the HTML of our own: what is folded, behind words that hold nothing from
// a file.
var ownHTML = regexp.MustCompile(`^(<details>\n<summary>[A-Za-z0-9 ,]+</summary>|</details>)\n?$`)

// ownMark is the mark by which a comment is found again; it ends the page.
var ownMark = regexp.MustCompile(`\n<!-- driploop-redline [0-9a-f]{24} -->\n$`)

func inMarkdown(page string) string {
	page = ownMark.ReplaceAllString(page, "")
	src := []byte(page)
	found := ""
	doc := goldmark.New(goldmark.WithExtensions(extension.GFM, extension.Footnote)).Parser().Parse(text.NewReader(src))
	ast.Walk(doc, func(n ast.Node, entering bool) (ast.WalkStatus, error) {
		switch n := n.(type) {
		case *ast.HTMLBlock:
			if block := string(n.Lines().Value(src)); !ownHTML.MatchString(block) || n.HasClosure() {
				found = "HTML: " + block
			}
		case *ast.Link, *ast.Image, *ast.AutoLink, *ast.RawHTML:
			found = "a " + n.Kind().String()
		case *ast.Text:
			shown := strings.ReplaceAll(string(n.Segment.Value(src)), "&#124;", "|")
			if _, code := n.Parent().(*ast.CodeSpan); !code && (strings.ContainsAny(shown, "@#") || strings.Contains(shown, ":/")) {
				found = "a mention or reference: " + shown
			}
		}
		return ast.WalkContinue, nil
	})
	if found != "" {
		return found
	}
	if strings.Count(page, "<details>") != strings.Count(page, "</details>") {
		return "what is unfolded is not folded again"
	}
	return inLog(page)
}

func inTOML(page string) string {
	file, problems := source.NewFile("pasted.toml", []byte(page))
	_, more := source.Parse(file)
	for _, p := range append(problems, more...) {
		return "line " + fmt.Sprint(p.At.Line()) + ": " + p.Says
	}
	return inLog(page)
}
