package rules

import (
	"fmt"
	"strconv"
	"strings"

	"driploop/catalog/unit"
	"driploop/rules/rf"
)

// Messages are written by these rules. The thing comes first, by its name in the
// plan; then what was read and what was expected, both with their unit; a sum
// shows its addends. What to do about it is apart, in Do. Names from a file stand
// bare, text from a file in quotes. Nothing is called legal, safe or compliant;
// what could not be looked at is "not assessed".

// plainFigure prints a figure without needless zeros.
func plainFigure(v float64) string {
	return strings.Replace(strconv.FormatFloat(v, 'f', -1, 64), "-", "−", 1)
}

// count prints a number with the right word.
func count(n int, one, many string) string {
	if n == 1 {
		return "1 " + one
	}
	return fmt.Sprint(n) + " " + many
}

// list joins words: "a", "a and b", "a, b and c".
func list(words []string) string {
	switch n := len(words); n {
	case 0:
		return ""
	case 1:
		return words[0]
	default:
		return strings.Join(words[:n-1], ", ") + " and " + words[n-1]
	}
}

// lackWords names what is missing, in the words of the plan.
func lackWords(lacks []Lack) string {
	var out []string
	for _, l := range dedupe(lacks) {
		out = append(out, l.What)
	}
	return list(out)
}

// spans prints stretches of spectrum.
func spans(list []unit.Span) string {
	var out []string
	for _, s := range list {
		out = append(out, s.String())
	}
	return strings.Join(out, ", ")
}

// addends prints a sum of losses with its terms, by one of the three figures.
func addends(s LineSum, of func(rf.Loss) unit.DB) string {
	var out []string
	for _, t := range s.Terms() {
		out = append(out, fmt.Sprintf("%s %s", t.What, unit.Fixed(float64(of(t.Loss)), 2)))
	}
	return strings.Join(out, " + ")
}

func greatest(l rf.Loss) unit.DB { return l.Greatest }
