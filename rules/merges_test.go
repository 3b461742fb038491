package rules_test

import (
	"fmt"
	"maps"
	"os"
	"os/exec"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"driploop/catalog/source"
	"driploop/rules"
)

// Two branches that each make sense, and what is there once both are merged. git finds
// most of it clean; what it cannot see has to be found afterwards, whichever branch
// was merged first.
type mergeCase struct {
	name        string
	base        map[string]string // beside mergeBase
	left, right map[string]string // files written; "" removes one
	conflict    string            // the file in which git itself finds a conflict
	both        bool              // the conflict is resolved by taking both sides
	want        []string          // rule, weight, file; a rule that is awaited is not looked for yet
	check       func(*testing.T, *rules.Firm)
}

// mergeBase is the store from which the branches start: 22 connectors and one reel of
// 52 m, for two jobs.
var mergeBase = map[string]string{
	"driploop.toml":                        "[shelf]\nshop = { kind = \"shop\" }\nvan-1 = { kind = \"van\" }\nvan-2 = { kind = \"van\" }\n",
	"plans/quay-lane.toml":                 "[job]\nstage = \"construction\"\n\n[cable.C1]\npart = \"GEN-CX-10\"\nlength = \"41 m\"\n\n[[extra]]\npart = \"GEN-NM-CX10-CRIMP\"\nqty = 14\n",
	"plans/mill-cottage.toml":              "[job]\nstage = \"construction\"\n\n[cable.C1]\npart = \"GEN-CX-10\"\nlength = \"22.1 m\"\n\n[[extra]]\npart = \"GEN-NM-CX10-CRIMP\"\nqty = 14\n",
	"stock/counts/2026-11-20-shop-jo.toml": "[sheet]\non = 2026-11-20\nwhere = \"shop\"\n[[count]]\npart = \"GEN-NM-CX10-CRIMP\"\nqty = 22\n[[reel]]\ntag = \"R-107\"\npart = \"GEN-CX-10\"\nleft = \"52 m\"\nhow = \"tape\"\n",
}

const (
	quayLane    = "plans/quay-lane.toml"
	millCottage = "plans/mill-cottage.toml"
)

// issue is a sheet of one day for one job.
func issue(day int, job, rows string) string {
	return fmt.Sprintf("[sheet]\non = 2026-11-%02d\njob = %q\n%s", day, job, rows)
}

func taken(n int) string {
	return fmt.Sprintf("[[move]]\npart = \"GEN-NM-CX10-CRIMP\"\nfrom = \"shop\"\nto = \"job\"\nqty = %d\n", n)
}

func cutOff(tag, length, line string) string {
	return fmt.Sprintf("[[cut]]\ntag = %q\nlength = %q\ncable = %q\n", tag, length, line)
}

func countOf(n int, more string) string {
	return fmt.Sprintf("[sheet]\non = 2026-11-25\nwhere = \"shop\"\n%s[[count]]\npart = \"GEN-NM-CX10-CRIMP\"\nqty = %d\n", more, n)
}

func reelOf(tag, where, left, more string) string {
	return fmt.Sprintf("[[reel]]\ntag = %q\npart = \"GEN-CX-10\"\nwhere = %q\nleft = %q\n%s", tag, where, left, more)
}

const back2 = "[[move]]\npart = \"GEN-NM-CX10-CRIMP\"\nfrom = \"job\"\nto = \"shop\"\nqty = 2\n"

var mergeCases = []mergeCase{
	{name: "two jobs cut more from one reel than there is",
		left:  map[string]string{"stock/issue/quay-lane-1.toml": issue(21, "quay-lane", cutOff("R-107", "41.3 m", "C1"))},
		right: map[string]string{"stock/issue/mill-cottage-1.toml": issue(22, "mill-cottage", cutOff("R-107", "22.4 m", "C1"))},
		want:  []string{"stock/below hold stock/issue/mill-cottage-1.toml", "stock/below hold " + quayLane, "stock/below hold " + millCottage}},
	{name: "two jobs take 28 of 22",
		left:  map[string]string{"stock/issue/quay-lane-1.toml": issue(21, "quay-lane", taken(14))},
		right: map[string]string{"stock/issue/mill-cottage-1.toml": issue(22, "mill-cottage", taken(14))},
		want:  []string{"stock/below punch stock/issue/mill-cottage-1.toml", "stock/below punch " + quayLane, "stock/below punch " + millCottage}},
	{name: "one job issued twice, in files named by day",
		left:  map[string]string{"stock/issue/2026-11-21-quay-lane.toml": issue(21, "quay-lane", taken(10))},
		right: map[string]string{"stock/issue/2026-11-22-quay-lane.toml": issue(22, "quay-lane", taken(10))},
		want:  []string{"stock/issued punch " + quayLane}},
	{name: "one job issued twice, in the file that the job's name gives",
		left:     map[string]string{"stock/issue/quay-lane-1.toml": issue(21, "quay-lane", taken(10))},
		right:    map[string]string{"stock/issue/quay-lane-1.toml": issue(22, "quay-lane", taken(10))},
		conflict: "stock/issue/quay-lane-1.toml"},
	{name: "a piece is cut while the plan asks for a longer one",
		left:  map[string]string{"stock/issue/mill-cottage-1.toml": issue(21, "mill-cottage", cutOff("R-107", "22.4 m", "C1"))},
		right: map[string]string{millCottage: strings.Replace(mergeBase[millCottage], "22.1 m", "26 m", 1)},
		want:  []string{"stock/cut-was hold " + millCottage}},
	{name: "two counts of one bin",
		left:  map[string]string{"stock/counts/2026-11-25-shop-kit.toml": countOf(20, "")},
		right: map[string]string{"stock/counts/2026-11-25-shop-el.toml": countOf(22, "")},
		want:  []string{"stock/counted-twice punch stock/counts/2026-11-25-shop-kit.toml", "stock/counted-twice punch " + quayLane, "stock/counted-twice punch " + millCottage}},
	{name: "both sides of a conflict in a shared file are taken",
		base:     map[string]string{"stock/issue/quay-lane.toml": issue(21, "quay-lane", taken(1))},
		left:     map[string]string{"stock/issue/quay-lane.toml": issue(21, "quay-lane", taken(1)+"on = 2026-11-22\nby = \"kit\"\n")},
		right:    map[string]string{"stock/issue/quay-lane.toml": issue(21, "quay-lane", taken(1)+"on = 2026-11-23\nby = \"el\"\n")},
		conflict: "stock/issue/quay-lane.toml", both: true,
		want: []string{"file/merge hold stock/issue/quay-lane.toml"}},
	{name: "one tag for two reels",
		base: map[string]string{"stock/orders/PO-31.toml": "order = { vendor = \"tern\", sent = 2026-11-01 }\nline = [{ part = \"GEN-CX-10\", pack = \"30 m\", packs = 2, due = 2026-12-09 }]\n",
			"stock/orders/PO-32.toml": "order = { vendor = \"tern\", sent = 2026-11-01 }\nline = [{ part = \"GEN-CX-10\", pack = \"40 m\", packs = 2, due = 2026-12-09 }]\n"},
		left:  map[string]string{"stock/in/PO-31-1.toml": "[sheet]\non = 2026-11-23\norder = \"PO-31\"\n" + reelOf("R-108", "shop", "30 m", "")},
		right: map[string]string{"stock/in/PO-32-1.toml": "[sheet]\non = 2026-11-24\norder = \"PO-32\"\n" + reelOf("R-108", "van-1", "40 m", "")},
		want:  []string{"stock/tag hold stock/in/PO-32-1.toml", "stock/tag hold " + quayLane, "stock/tag hold " + millCottage}},
	{name: "one reel goes to two vans",
		left:  map[string]string{"stock/move/2026-11-23-shop-van-1-kit.toml": "[sheet]\non = 2026-11-23\n[[move]]\ntag = \"R-107\"\nfrom = \"shop\"\nto = \"van-1\"\n"},
		right: map[string]string{"stock/move/2026-11-24-shop-van-2-el.toml": "[sheet]\non = 2026-11-24\n[[move]]\ntag = \"R-107\"\nfrom = \"shop\"\nto = \"van-2\"\n"},
		want:  []string{"stock/tag hold stock/move/2026-11-24-shop-van-2-el.toml", "stock/tag hold " + quayLane, "stock/tag hold " + millCottage}},
	{name: "two true returns of 2 on one day",
		base:  map[string]string{"stock/issue/quay-lane-1.toml": issue(21, "quay-lane", taken(14))},
		left:  map[string]string{"stock/back/2026-11-23-quay-lane-kit.toml": issue(23, "quay-lane", back2)},
		right: map[string]string{"stock/back/2026-11-23-quay-lane-el.toml": issue(23, "quay-lane", back2)},
		check: func(t *testing.T, f *rules.Firm) {
			if got := f.Stock.Issued("quay-lane", "GEN-NM-CX10-CRIMP"); got.Each != 10 {
				t.Errorf("quay-lane has %s, want 14 less two returns of 2", got)
			}
		}},
	{name: "a job is renamed while it is issued to",
		left:  map[string]string{millCottage: "", "plans/tide-mill.toml": mergeBase[millCottage]},
		right: map[string]string{"stock/issue/mill-cottage-1.toml": issue(22, "mill-cottage", taken(4))},
		want:  []string{"stock/unknown hold stock/issue/mill-cottage-1.toml", "stock/unknown hold plans/tide-mill.toml", "stock/unknown hold " + quayLane}},
	{name: "the next free number for a remnant",
		left:  map[string]string{"stock/back/2026-11-23-quay-lane-kit.toml": issue(23, "quay-lane", reelOf("R-108", "shop", "4 m", "of = \"R-107\"\n"))},
		right: map[string]string{"stock/back/2026-11-24-mill-cottage-el.toml": issue(24, "mill-cottage", reelOf("R-108", "van-1", "5 m", "of = \"R-107\"\n"))},
		want:  []string{"stock/tag hold stock/back/2026-11-24-mill-cottage-el.toml", "stock/tag hold " + quayLane, "stock/tag hold " + millCottage}},
	{name: "a job is as-built while more is issued to it",
		base:  map[string]string{"stock/issue/quay-lane-1.toml": issue(21, "quay-lane", taken(14))},
		left:  map[string]string{quayLane: strings.Replace(mergeBase[quayLane], "construction", "as-built", 1)},
		right: map[string]string{"stock/issue/quay-lane-2.toml": issue(23, "quay-lane", taken(3))},
		want:  []string{"stock/issued punch " + quayLane}},
	{name: "one delivery booked by two people",
		base:  map[string]string{"stock/orders/PO-31.toml": "order = { vendor = \"tern\", sent = 2026-11-01 }\nline = [{ part = \"GEN-NM-CX10-CRIMP\", pack = 25, packs = 1, due = 2026-12-09 }]\n"},
		left:  map[string]string{"stock/in/PO-31-1.toml": "[sheet]\non = 2026-11-23\norder = \"PO-31\"\n[[move]]\npart = \"GEN-NM-CX10-CRIMP\"\nto = \"shop\"\nqty = 25\n"},
		right: map[string]string{"stock/in/PO-31-2.toml": "[sheet]\non = 2026-11-23\norder = \"PO-31\"\n[[move]]\npart = \"GEN-NM-CX10-CRIMP\"\nto = \"shop\"\nqty = 25\n"},
		want:  []string{"stock/over punch stock/in/PO-31-2.toml", "stock/over punch " + quayLane, "stock/over punch " + millCottage}},
	{name: "a shelf is renamed while it is counted",
		left:  map[string]string{"driploop.toml": strings.Replace(mergeBase["driploop.toml"], "van-1", "van-9", 1)},
		right: map[string]string{"stock/counts/2026-11-25-van-1-kit.toml": "[sheet]\non = 2026-11-25\nwhere = \"van-1\"\n[[count]]\npart = \"GEN-NM-CX10-CRIMP\"\nqty = 3\n"},
		want:  []string{"stock/unknown hold stock/counts/2026-11-25-van-1-kit.toml", "stock/unknown hold " + quayLane, "stock/unknown hold " + millCottage}},
	{name: "a complete count while goods are read elsewhere",
		left:  map[string]string{"stock/counts/2026-11-25-shop-el.toml": countOf(22, "complete = true\n")},
		right: map[string]string{"stock/counts/2026-11-25-van-1-kit.toml": "[sheet]\non = 2026-11-25\n" + reelOf("R-107", "van-1", "52 m", "")},
		want:  []string{"stock/jump note stock/counts/2026-11-25-van-1-kit.toml", "stock/jump note " + quayLane, "stock/jump note " + millCottage}},
}

func TestMerges(t *testing.T) {
	if _, err := exec.LookPath("git"); err != nil {
		if os.Getenv("CI") != "" {
			t.Fatal(err)
		}
		t.Skip("git is not here")
	}
	for _, c := range mergeCases {
		t.Run(c.name, func(t *testing.T) {
			t.Parallel()
			r := newRepository(t)
			r.commit("main", maps.Collect(func(yield func(string, string) bool) {
				maps.All(mergeBase)(yield)
				maps.All(c.base)(yield)
			}))
			r.git("branch", "left")
			r.git("branch", "right")
			r.commit("left", c.left)
			r.commit("right", c.right)
			first := r.inspect(c, "left", "right")
			second := r.inspect(c, "right", "left")
			if !slices.Equal(first, second) {
				t.Errorf("the order of merging makes a difference:\n%s\nand\n%s", strings.Join(first, "\n"), strings.Join(second, "\n"))
			}
		})
	}
}

// repository is a repository in which a test merges.
type repository struct {
	t   *testing.T
	dir string
}

func newRepository(t *testing.T) *repository {
	r := &repository{t, t.TempDir()}
	r.git("init", "-q", "-b", "main")
	r.git("commit", "-q", "--allow-empty", "-m", "begin")
	return r
}

func (r *repository) try(args ...string) (string, error) {
	cmd := exec.Command("git", append([]string{"-C", r.dir, "-c", "user.name=kit", "-c", "user.email=kit@saltmarsh.example", "-c", "commit.gpgsign=false"}, args...)...)
	cmd.Env = append(os.Environ(), "GIT_CONFIG_GLOBAL=/dev/null", "GIT_CONFIG_SYSTEM=/dev/null", "LC_ALL=C")
	out, err := cmd.CombinedOutput()
	return string(out), err
}

func (r *repository) git(args ...string) {
	r.t.Helper()
	if out, err := r.try(args...); err != nil {
		r.t.Fatalf("git %s: %v\n%s", strings.Join(args, " "), err, out)
	}
}

// commit writes files on a branch; a file without text goes away.
func (r *repository) commit(branch string, files map[string]string) {
	r.t.Helper()
	r.git("checkout", "-q", branch)
	for path, text := range files {
		name := filepath.Join(r.dir, filepath.FromSlash(path))
		if text == "" {
			if err := os.Remove(name); err != nil {
				r.t.Fatal(err)
			}
			continue
		}
		if err := os.MkdirAll(filepath.Dir(name), 0o755); err != nil {
			r.t.Fatal(err)
		}
		if err := os.WriteFile(name, []byte(text), 0o644); err != nil {
			r.t.Fatal(err)
		}
	}
	r.git("add", "-A")
	r.git("commit", "-q", "--allow-empty", "-m", branch)
}

// inspect merges two branches in their order, looks for what the case wants, and lists
// all that the stock rules say.
func (r *repository) inspect(c mergeCase, first, second string) []string {
	r.t.Helper()
	r.git("checkout", "-q", "-B", "merged", "main")
	r.git("merge", "-q", "--no-edit", first)
	out, err := r.try("merge", "--no-edit", second)
	switch {
	case c.conflict == "" && err != nil:
		r.t.Fatalf("git finds a conflict: %s", out)
	case c.conflict != "" && !strings.Contains(out, c.conflict):
		r.t.Fatalf("git finds no conflict in %s: %s", c.conflict, out)
	case c.conflict != "" && !c.both:
		r.git("merge", "--abort")
		return nil
	case c.both:
		r.takeBoth(c.conflict)
	}
	tree, err := source.Disk(r.dir)
	if err != nil {
		r.t.Fatal(err)
	}
	firm, err := rules.Load(tree, rules.Options{Today: today(r.t, "")})
	if err != nil {
		r.t.Fatal(err)
	}
	found := findings(r.t, tree, today(r.t, ""))
	for _, w := range c.want {
		rule, _, _ := strings.Cut(w, " ")
		there := slices.ContainsFunc(found, func(f *rules.Finding) bool { return f.Rule.Name+" "+f.Weight.String()+" "+f.At.Path() == w })
		switch known := rules.Find(rule) != nil; {
		case known && !there:
			r.t.Errorf("after %s and %s nothing says %s", first, second, w)
		case !known && !slices.Contains(awaitedAfterMerges, rule):
			r.t.Errorf("there is no rule %s", rule)
		}
	}
	if c.check != nil {
		c.check(r.t, firm)
	}
	var all []string
	for _, f := range found {
		if f.Rule.Area() == "stock" {
			all = append(all, f.Rule.Name+" "+f.Weight.String()+" "+f.At.Path()+": "+f.Says)
		}
	}
	slices.Sort(all)
	return all
}

// takeBoth resolves a conflict as people do in a hurry: both sides, without the marks.
func (r *repository) takeBoth(path string) {
	r.t.Helper()
	name := filepath.Join(r.dir, filepath.FromSlash(path))
	text, err := os.ReadFile(name)
	if err != nil {
		r.t.Fatal(err)
	}
	var kept []string
	for _, line := range strings.SplitAfter(string(text), "\n") {
		if !strings.HasPrefix(line, "<<<<<<<") && !strings.HasPrefix(line, "=======") && !strings.HasPrefix(line, ">>>>>>>") {
			kept = append(kept, line)
		}
	}
	if err := os.WriteFile(name, []byte(strings.Join(kept, "")), 0o644); err != nil {
		r.t.Fatal(err)
	}
	r.git("add", "-A")
	r.git("commit", "-q", "-m", "both")
}

// awaitedAfterMerges lists the rules that two of the merges need and that are still to
// come. One that is there is taken off.
var awaitedAfterMerges = []string{}

func TestAwaitedAfterMerges(t *testing.T) {
	for _, name := range awaitedAfterMerges {
		if rules.Find(name) != nil {
			t.Errorf("%s is there: take it off the list", name)
		}
	}
}
