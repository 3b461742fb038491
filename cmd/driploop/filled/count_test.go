package filled

import (
	"errors"
	"fmt"
	"strings"
	"testing"

	"driploop/bom"
	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/cmd/driploop/book"
	"driploop/cmd/driploop/show"
	"driploop/rules"
)

// demo is the demo workspace on a day on which the shop has 34 NC-10-NM, the van 7.
func demo(t *testing.T) *rules.Firm {
	t.Helper()
	tree, err := source.Disk("../../../testdata/saltmarsh")
	if err != nil {
		t.Fatal(err)
	}
	firm, err := rules.Load(tree, rules.Options{Today: unit.Date{Year: 2026, Month: 12, Day: 1}})
	if err != nil {
		t.Fatal(err)
	}
	return firm
}

func groundOf(firm *rules.Firm, by string) *Ground {
	return &Ground{Catalog: firm.Catalog, Premises: &firm.Workspace.Premises, Stock: firm.Stock, Today: firm.Today, By: by}
}

func table(t *testing.T, text string) bom.FilledBook {
	t.Helper()
	s, err := book.ReadTable([]byte(text))
	if err != nil {
		t.Fatal(err)
	}
	return bom.FilledBook{s}
}

// shownCounts is what was counted on a few lines.
func shownCounts(counts []*show.Counted) string {
	out := ""
	for _, c := range counts {
		out += fmt.Sprintf("[%s %s]", c.Shelf, c.By)
		for _, b := range c.Bins {
			out += fmt.Sprintf(" %s %d/%d", b.Part, b.Qty, b.Book)
			if b.Bag > 0 {
				out += fmt.Sprintf(" bag %d", b.Bag)
			}
			if b.By != c.By {
				out += " by " + b.By
			}
			if b.Note != "" {
				out += " (" + b.Note + ")"
			}
		}
		for _, r := range c.Reels {
			out += fmt.Sprintf(" %s %s/%s %s", r.Tag, r.Left, r.Book, r.How)
			if r.Was != c.Shelf {
				out += " was " + r.Was
			}
		}
	}
	return out
}

const head = "where,part,tag,bags of 25,bags of 10,loose,in all,left m,how,by,note\n"

func TestCount(t *testing.T) {
	g := groundOf(demo(t), "jo")
	for _, c := range []struct{ name, rows, want string }{
		{"loose", "shop,NC-10-NM,,,,34,,,,,", "[shop jo] NC-10-NM 34/34"},
		{"bags and loose", "shop,NC-10-NM,,1,,9,,,,,", "[shop jo] NC-10-NM 34/34"},
		{"bags alone", "shop,NC-10-NM,,1,1,,,,,,", "[shop jo] NC-10-NM 35/34"},
		{"the sum alone", "shop,NC-10-NM,,,,,33,,,,", "[shop jo] NC-10-NM 33/34"},
		{"all agree", "shop,NC-10-NM,,1,,9,34,,,,", "[shop jo] NC-10-NM 34/34"},
		{"none is a count, blank is not", "shop,NC-10-NM,,,,0,,,,,\nshop,NC-5-NM,,,,,,,,,look again", "[shop jo] NC-10-NM 0/34"},
		{"a bag for pieces", "shop,NC-10-NM-CRIMP,,,,1,,,,,", "[shop jo] NC-10-NM-CRIMP 1/25 bag 25"},
		{"not a bag", "shop,NC-10-NM-CRIMP,,,,5,,,,,", "[shop jo] NC-10-NM-CRIMP 5/25"},
		{"a reel", "shop,CX-10,R-107,,,,,61.35,tape,,", "[shop jo] R-107 61.35 m/61.4 m tape"},
		{"a reel with its unit", "shop,,R-107,,,,,200 ft,,,", "[shop jo] R-107 60.96 m/61.4 m "},
		{"a reel that is gone", "shop,,R-107,,,,,0,,,", "[shop jo] R-107 0 m/61.4 m "},
		{"a reel from elsewhere", "shop,,R-112,,,,,14.6,,,", "[shop jo] R-112 14.6 m/14.6 m  was van-1"},
		{"a part that is new there", "van-1,SPL-2,,,,1,,,,,", "[van-1 jo] SPL-2 1/0"},
		{"two shelves", "van-1,NC-10-NM,,,,7,,,,,\nshop,NC-10-NM,,,,34,,,,,", "[van-1 jo] NC-10-NM 7/7[shop jo] NC-10-NM 34/34"},
		{"somebody else", "shop,NC-10-NM,,,,34,,,,kit,torn\nshop,SPL-3,,,,2,,,,,", "[shop jo] NC-10-NM 34/34 by kit (torn) SPL-3 2/2"},
		{"one for all", "shop,NC-10-NM,,,,34,,,,kit,", "[shop kit] NC-10-NM 34/34"},
	} {
		counts, err := Count(table(t, head+c.rows+"\n"), g, "")
		if err != nil {
			t.Errorf("%s: %v", c.name, err)
		} else if got := shownCounts(counts); got != c.want {
			t.Errorf("%s:\n%s want\n%s", c.name, got, c.want)
		}
	}
}

// countRefusals are rows that are not taken, and what is said of them.
var countRefusals = []struct{ name, rows, want string }{
	{"blank", "shop,NC-10-NM,,,,,,,,,", "nothing was filled in"},
	{"unknown part", "shop,NC-10-MN,,,,1,,,,,", `line 2: there is no part "NC-10-MN"; did you mean NC-10-NM?`},
	{"unknown shelf", "shopp,NC-10-NM,,,,1,,,,,", `there is no shelf "shopp"; did you mean shop?`},
	{"unknown reel", "shop,CX-10,R-117,,,,,1,,,", `there is no reel "R-117"; did you mean R-107?`},
	{"no shelf", ",NC-10-NM,,,,1,,,,,", "line 2: the row names no shelf"},
	{"no part", "shop,,,,,1,,,,,", "line 2: the row names no part"},
	{"negative", "shop,NC-10-NM,,,,-1,,,,,", `line 2, loose: a whole number, 0 or more, is wanted, not "-1"`},
	{"half", "shop,NC-10-NM,,,,1.5,,,,,", `not "1.5"`},
	{"words", "shop,NC-10-NM,,,,a few,,,,,", `not "a few"`},
	{"formula", "shop,NC-10-NM,,,,=1+1,,,,,", "line 2, loose: a whole number, 0 or more, is wanted, not a formula"},
	{"huge", "shop,NC-10-NM,,,,99999999999,,,,,", "is wanted, not"},
	{"huge in bags", "shop,NC-10-NM,,1000000,,,,,,,", "25000000 pieces are more than a bin may have"},
	{"sum that is another", "shop,NC-10-NM,,1,,9,33,,,,", "line 2, in all: 33 in all, and bags and loose pieces make 34"},
	{"no such bag", "shop,NC-10-NM-CRIMP,,,2,,,,,,", "NC-10-NM-CRIMP does not come in bags of 10"},
	{"twice", "shop,NC-10-NM,,,,1,,,,,\nshop,NC-10-NM,,,,2,,,,,", "line 3: the bin NC-10-NM at shop was counted already, in line 2"},
	{"a reel twice", "shop,,R-107,,,,,1,,,\nvan-1,,R-107,,,,,2,,,", "line 3: the reel R-107 was counted already"},
	{"a reel counted", "shop,CX-10,R-107,,,3,,,,,", "a reel is read by its length, and has no pieces"},
	{"cut stock counted", "shop,CX-10,,,,3,,,,,", "CX-10 is cut stock and is read by its tag"},
	{"length of a bin", "shop,NC-10-NM,,,,,,3,,,", "a length stands here, and the row names no reel"},
	{"other part on the reel", "shop,CX-5,R-107,,,,,3,,,", "on the reel R-107 is CX-10, and not CX-5"},
	{"negative length", "shop,CX-10,R-107,,,,,-3,,,", `line 2, left m: a length in metres is wanted, not "-3"`},
	{"way", "shop,CX-10,R-107,,,,,3,tap,,", `there is no way to know a length "tap"; did you mean tape?`},
	{"way without length", "shop,CX-10,R-107,,,,,,tape,,", "how long the reel is does not stand here"},
	{"initials", "shop,NC-10-NM,,,,1,,,,../x,", "initials are letters and digits"},
	{"note", "shop,NC-10-NM,,,,1,,,,,a\u202eb", "line 2, note: a text on one line is wanted"},
	{"all at once", "shop,NC-10-NM,,,,-1,,,,,\nshop,DOME,,,,1,,,,,", "and 1 more"},
}

func TestCountRefuses(t *testing.T) {
	g := groundOf(demo(t), "jo")
	for _, c := range countRefusals {
		if _, err := Count(table(t, head+c.rows+"\n"), g, ""); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: the error is %v, want %s", c.name, err, c.want)
		}
	}
}

func TestCountTitles(t *testing.T) {
	g := groundOf(demo(t), "jo")
	for _, c := range []struct{ name, text, want string }{
		{"slip", "where,part,lose\nshop,NC-10-NM,1\n", `the file: there is no column "lose"; did you mean loose?`},
		{"another table", "invoice,amount due\n1,2\n", `there is no column "invoice"; the columns are where, part,`},
		{"bag of none", "where,part,bags of 0\nshop,NC-10-NM,1\n", `there is no column "bags of 0"`},
		{"no shelf", "part,loose\nNC-10-NM,1\n", `the column "where" is missing`},
		{"two of lengths", "where,part,tag,left m,left ft\nshop,,R-107,1,\n", "the columns left m and left ft are for the same"},
	} {
		if _, err := Count(table(t, c.text), g, ""); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: the error is %v, want %s", c.name, err, c.want)
		}
	}
	feet := "where,part,tag,left ft\nshop,,R-107,200\n"
	if counts, err := Count(table(t, feet), g, ""); err != nil || counts[0].Reels[0].Left != 60_960 {
		t.Errorf("200 ft: %v, %v", counts, err)
	}
}

func TestCountOfOneShelf(t *testing.T) {
	both := head + "van-1,NC-10-NM,,,,7,,,,,\nshop,NC-10-NM,,,,34,,,,,\n"
	counts, err := Count(table(t, both), groundOf(demo(t), "jo"), "van-1")
	if err != nil || shownCounts(counts) != "[van-1 jo] NC-10-NM 7/7" {
		t.Error(shownCounts(counts), err)
	}
	if _, err := Count(table(t, both), groundOf(demo(t), "jo"), "van"); err == nil || !strings.Contains(err.Error(), "did you mean van-1?") {
		t.Error(err)
	}
	if _, err := Count(table(t, both), groundOf(demo(t), ""), ""); err == nil || !strings.Contains(err.Error(), "who counted van-1?") {
		t.Error(err)
	}
	var f Faults
	if _, err := Count(table(t, head+strings.Repeat("shop,NO,,,,1,,,,,\n", 100)), groundOf(demo(t), "jo"), ""); !errors.As(err, &f) || len(f) != mostFaults {
		t.Errorf("%d faults: %v", len(f), err)
	}
}
