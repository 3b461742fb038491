package source

import (
	"fmt"
	"strings"
	"testing"
)

// Of a list with faults the good items stay, in their places; a list without a good
// one does not count as given, and one that is too long is none.
func TestSome(t *testing.T) {
	for _, c := range []struct{ text, want string }{
		{`bands = ["a", "b"]`, "true a b; "},
		{`bands = ["a", 5, "b"]`, "true a - b; bands: the number 5 was read, text is expected"},
		{`bands = [5]`, "false -; bands: the number 5 was read, text is expected"},
		{`bands = []`, "true; "},
		{`bands = "a"`, "false; bands: the text \"a\" was read, a list is expected"},
		{`bands = ["a", "b", "c", "d"]`, "false; bands: 4 names were read, 3 are the most"},
		{``, "false; "},
	} {
		file, problems := NewFile("x.toml", []byte(c.text))
		if len(problems) > 0 {
			t.Fatal(problems)
		}
		doc, problems := Parse(file)
		if len(problems) > 0 {
			t.Fatal(problems)
		}
		var v Val[[]Val[string]]
		var says []string
		for _, p := range Read(doc, func(k *Keys) { Some(k, &v, "bands", AtMost(3, ListOf(Text), "names"), "x") }) {
			says = append(says, p.Says)
		}
		got := fmt.Sprint(v.Set)
		for _, i := range v.V {
			if i.Set {
				got += " " + i.V
			} else {
				got += " -"
			}
		}
		if got += "; " + strings.Join(says, ", "); got != c.want {
			t.Errorf("%s: %s, wanted %s", c.text, got, c.want)
		}
	}
}
