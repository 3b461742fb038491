package filled

import (
	"fmt"
	"strings"
	"testing"

	"driploop/bom"
	"driploop/cmd/driploop/show"
	"driploop/rules"
)

// listOf is the pick list of quay-lane, with what the job takes in all.
func listOf(t *testing.T, firm *rules.Firm) (*bom.Pick, *bom.Demand) {
	t.Helper()
	d, err := firm.Demands(t.Context())
	if err != nil {
		t.Fatal(err)
	}
	for _, e := range firm.PlanFiles {
		if bom.JobOf(e.Path) == "quay-lane" {
			cs, _ := firm.Case(e)
			demand := d.Find("quay-lane")
			return bom.PickFor(firm.Allocate(d), demand, cs.Graph), demand
		}
	}
	t.Fatal("the demo has no quay-lane")
	return nil, nil
}

func shownTaken(x *show.Taken) string {
	out := x.By
	for _, b := range x.Bins {
		out += fmt.Sprintf(" %d %s from %s (%d)", b.Qty, b.Part, b.Where, b.Book)
	}
	for _, c := range x.Cuts {
		out += fmt.Sprintf(" %s of %s for %s", c.Length, c.Tag, c.Line)
	}
	for _, r := range x.Left {
		out += fmt.Sprintf(" %s left on %s at %s", r.Left, r.Tag, r.Where)
	}
	for _, u := range x.Unbooked {
		out += fmt.Sprintf(" %d %s not booked", u.Qty, u.Part)
	}
	return out
}

func TestPick(t *testing.T) {
	firm := demo(t)
	list, demand := listOf(t, firm)
	g := groundOf(firm, "jo")
	for _, c := range []struct{ name, rows, want string }{
		{"as listed", "taken,DOME-NF,3,shop,", "jo 3 DOME-NF from shop (9)"},
		{"the one shelf of the list", "taken,DOME-NF,3,,", "jo 3 DOME-NF from shop (9)"},
		{"beyond the list", "taken,SPL-2,1,shop,", "jo 1 SPL-2 from shop (1)"},
		{"more than there is", "Taken,SPL-3,5,shop,", "jo 5 SPL-3 from shop (2)"},
		{"none", "taken,DOME-NF,0,shop,\ntaken,SPL-3,1,shop,", "jo 1 SPL-3 from shop (2)"},
		{"a cut, and what is left", "cut,R-121,4.4,G3,\nleft,R-121,26.1,,", "jo 4.4 m of R-121 for G3 26.1 m left on R-121 at shop"},
		{"the one line of the reel", "cut,R-121,4.4 m,,", "jo 4.4 m of R-121 for G3"},
		{"from another reel", "cut,R-107,18.8,C1,", "jo 18.8 m of R-107 for C1"},
		{"what nobody books", "taken,TAPE-SA,1,shop,", "jo 1 TAPE-SA not booked"},
		{"blank is not taken", "taken,DOME-NF,,shop,\ncut,R-121,4.4,G3,", "jo 4.4 m of R-121 for G3"},
	} {
		x, err := Pick(table(t, "what,tag or part,qty,where,note\n"+c.rows+"\n"), g, list, demand)
		if err != nil {
			t.Errorf("%s: %v", c.name, err)
		} else if got := shownTaken(x); got != c.want {
			t.Errorf("%s:\n%s want\n%s", c.name, got, c.want)
		}
	}
}

func TestPickRefuses(t *testing.T) {
	firm := demo(t)
	list, demand := listOf(t, firm)
	for _, c := range []struct{ name, rows, want string }{
		{"blank", "taken,DOME-NF,,shop,", "nothing was filled in as taken"},
		{"word", "takn,DOME-NF,1,shop,", `there is no kind of row "takn"; did you mean taken?`},
		{"what came back", "returned,DOME-NF,1,van-1,", "what came back is a sheet of its own"},
		{"part", "taken,DOME-FN,1,shop,", `there is no part "DOME-FN"; did you mean DOME-NF?`},
		{"shelf", "taken,DOME-NF,1,shp,", `there is no shelf "shp"; did you mean shop?`},
		{"shelf of two", "taken,NC-10-NM,1,,", "from which shelf NC-10-NM was taken is not said"},
		{"quantity", "taken,DOME-NF,1.5,shop,", "line 2, qty: a whole number"},
		{"negative", "taken,DOME-NF,-1,shop,", "line 2, qty: a whole number"},
		{"cut stock", "taken,CX-10,1,shop,", "CX-10 is cut stock and leaves by its tag"},
		{"reel", "cut,R-12,1,G3,", `there is no reel "R-12"`},
		{"line", "cut,R-121,4.4,G9,", `there is no line of quay-lane "G9"; did you mean G1?`},
		{"line of two", "cut,R-122,4.4,,", "for which line the piece was cut from R-122 is not said"},
		{"length", "cut,R-121,4.4 V,G3,", "a length in metres is wanted"},
		{"twice", "taken,DOME-NF,1,shop,\ntaken,DOME-NF,2,,", "line 3: DOME-NF from shop stands in line 2 already; add the two up"},
		{"cut twice", "cut,R-121,1,G3,\ncut,R-121,2,G3,", "add the two up"},
		{"nameless", "taken,,1,shop,", "line 2: the row names no tag and no part"},
	} {
		if _, err := Pick(table(t, "what,tag or part,qty,where,note\n"+c.rows+"\n"), groundOf(firm, "jo"), list, demand); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: the error is %v, want %s", c.name, err, c.want)
		}
	}
	if _, err := Pick(table(t, "what,tag or part,amount,where\ntaken,DOME-NF,1,shop\n"), groundOf(firm, "jo"), list, demand); err == nil || !strings.Contains(err.Error(), `there is no column "amount"`) {
		t.Error(err)
	}
	if _, err := Pick(table(t, "what,tag or part,qty,where\ntaken,DOME-NF,1,shop\n"), groundOf(firm, ""), list, demand); err == nil || !strings.Contains(err.Error(), "who took the goods?") {
		t.Error(err)
	}
}
