package rules_test

import (
	"math"
	"strings"
	"testing"
)

// TestPublishedTellsWhatIsWrong holds that each check of a table can fail.
func TestPublishedTellsWhatIsWrong(t *testing.T) {
	table := publishedTable{name: "small", quantities: figures(map[string]func(*inputs) (float64, bool){
		"twice": func(in *inputs) (float64, bool) { return 2 * in.num("x"), true },
		"count": func(in *inputs) (float64, bool) { return float64(in.count("x")), true },
		"none":  func(in *inputs) (float64, bool) { return 0, in.num("x") > 0 },
		"leaky": func(in *inputs) (float64, bool) { return in.num("x"), false },
		"nan":   func(in *inputs) (float64, bool) { return math.NaN(), in.num("x") > 0 },
	})}
	const header = "id,quantity,inputs,expected,tolerance,unit,source,proof\n"
	for _, c := range []struct{ rows, want string }{
		{"a,twice,x=2,4.1,0.11,,book,read", ""},
		{"a,twice,x=2;published=5,refused,0.5,,book,copy", ""},
		{"a,none,x=0,unknown,,,book,common practice", ""},
		{"", "0 published values hold"},
		{"a,twice,x=2,4.1,0.09,,book,read", "gives 4, published 4.1"},
		{"a,twice,x=2,4,,,book,read", `tolerance "" is no number`},
		{"a,twice,x=2,4,-1,,book,read", `tolerance "-1" is no number`},
		{"a,twice,x=2,4,NaN,,book,read", `tolerance "NaN" is no number`},
		{"a,twice,x=2,4,Inf,,book,read", `tolerance "Inf" is no number`},
		{"a,none,x=0,unknown,some,,book,read", `tolerance "some" is no number`},
		{"a,nan,x=1,1,9,,book,read", "gives NaN"},
		{"a,nan,x=1;published=1,refused,0,,book,read", "agrees with 1"},
		{"a,none,x=0,1,9,,book,read", `gives "unknown", where a figure is known`},
		{"a,none,x=1,unknown,,,book,read", `gives "0", expected "unknown"`},
		{"a,leaky,x=1,unknown,,,book,read", `gives "unknown, yet 1"`},
		{"a,twice,x=2,open x,,,book,read", `gives "4", expected "open x"`},
		{"a,twice,x=2;published=4.1,refused,0.5,,book,read", "agrees with 4.1"},
		{"a,twice,x=2,refused,0.5,,book,read", `gives "4", expected "refused"`},
		{"a,thrice,x=2,6,0,,book,read", "no such quantity"},
		{"a,twice,x=2,4,0,,,read", "has a source"},
		{"a,twice,x=2,4,0,,book,hearsay", "one of the proofs"},
		{"a,twice,x=2;y=3,4,0,,book,read", `"y" is not used`},
		{"a,twice,y=3,4,0,,book,read", `"x" is missing`},
		{"a,twice,x=2;x=2,4,0,,book,read", "given twice"},
		{"a,twice,x=2 3,4,0,,book,read", "one too many"},
		{"a,twice,x=two,4,0,,book,read", "invalid syntax"},
		{"a,count,x=2.5,2,0,,book,read", "invalid syntax"},
		{",twice,x=2,4,0,,book,read", "an ID is given once"},
		{"a,twice,x=2,4,0,,book,read\na,twice,x=3,6,0,,book,read", "an ID is given once"},
		{"other,twice,x=2,4,0,,book,read", "an ID is given once"},
	} {
		held, complaints := table.hold(t, header+c.rows, map[string]bool{"other": true})
		got := strings.Join(complaints, "; ")
		if c.want == "" && (got != "" || held != 1) || !strings.Contains(got, c.want) {
			t.Errorf("%s: %d hold, %q, want %q", c.rows, held, got, c.want)
		}
	}
	if _, complaints := table.hold(t, "id,quantity\na,twice\n", map[string]bool{}); len(complaints) == 0 {
		t.Error("any header will do")
	}
	if claimed("stray.csv") || claimed("rf.md") || !claimed("rf.csv") {
		t.Error("a file of the folder is claimed by its table")
	}
	if comesOut("unknown") || comesOut("open f") || !comesOut("0") || !comesOut("NaN") || !comesOut(unknownYet+"NaN") || !comesOut("inside") {
		t.Error("figures, NaN and passes come out, and nothing else")
	}
}
