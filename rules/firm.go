package rules

import (
	"errors"
	"fmt"
	"sort"
	"strings"
	"sync"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/rules/limits"
)

// Firm is a workspace without its plans: what all plans have in common, read once.
type Firm struct {
	Tree      source.Tree
	Today     unit.Date
	Workspace Workspace
	Catalog   *catalog.Catalog
	Offers    *catalog.Offers
	Stock     *catalog.Stock
	Limits    *limits.Set
	Problems  []FileProblem // of the workspace's own files
	PlanFiles []source.Entry
	Skipped   []source.Entry // files that a pattern names and that are not read

	noShelf  bool
	progress Progress   // or nil
	docs     *docs      // shared with another revision of the workspace, or nil
	books    stockFiles // that Stock was added up from
	origin   Origin
	weights  map[string]*Override
	fits     sync.Map // *catalog.Part to its fitted curve
	texts    sync.Map // of cautions to themselves
	jobsOnce sync.Once
	jobs     map[string][]string // the plan files of a job, by its ID in lower case
}

// FileProblem is a problem of one of the workspace's own files, with the part in
// whose table it stands, if any.
type FileProblem struct {
	source.Problem
	On, Part string
}

// Options says how a workspace is read. A revision of the workspace whose limits
// or stock are used instead of its own keeps a change from moving its own ruler.
type Options struct {
	Today      unit.Date
	NoShelf    bool        // inspections leave the rules of scope firm out
	LimitsFrom source.Tree // or nil: whose profiles, codes, house figures, weights and defaults hold
	StockFrom  source.Tree // or nil: whose stock sheets and orders are the shelf
	Progress   Progress    // or nil

	docs *docs // what several revisions share, or nil
}

// ErrNoWorkspace is returned where a tree has no driploop.toml.
var ErrNoWorkspace = errors.New("there is no " + WorkspaceFile + " here; a workspace begins with one")

// Load reads a workspace. What is wrong with its files is in Problems; an error
// means that a tree cannot be read or is no workspace.
func Load(t source.Tree, o Options) (*Firm, error) {
	f := &Firm{Tree: t, Today: o.Today, noShelf: o.NoShelf, progress: o.Progress, docs: o.docs, Offers: &catalog.Offers{},
		origin: Origin{At: t.Name(), LimitsFrom: t.Name(), StockFrom: t.Name()}}
	own, err := f.open(t, "")
	if err != nil {
		return nil, err
	}
	f.Workspace = own.workspace
	own.parts()
	own.offers()
	own.plans()
	f.Limits = own.limits()
	f.note(f.Workspace.Premises.Check(f.Catalog.Look))
	stock := own.stock()
	f.note(f.unknownNames())
	if o.LimitsFrom != nil {
		if err := f.measureBy(own, o.LimitsFrom); err != nil {
			return nil, unusable("limits", o.LimitsFrom, err)
		}
	}
	if o.StockFrom != nil {
		if stock, err = f.stockOf(own, o.StockFrom); err != nil {
			return nil, unusable("stock", o.StockFrom, err)
		}
	}
	f.weights = map[string]*Override{}
	for i := range f.Workspace.Weights {
		w := &f.Workspace.Weights[i]
		f.weights[w.Rule] = w
	}
	f.books = stock
	f.Stock = catalog.Book(&f.Workspace.Premises, stock.sheets, stock.orders, f.Catalog.Look, f.Today)
	return f, nil
}

// unusable says that another tree's limits or stock cannot be used. That it is no
// workspace says nothing of the firm's own tree, so the cause is not wrapped.
func unusable(what string, from source.Tree, cause error) error {
	return fmt.Errorf("the %s of %s cannot be used: %v", what, from.Name(), cause)
}

// parse makes a document of the bytes of a file.
func parse(path string, src []byte) (*source.Doc, []source.Problem) {
	file, problems := source.NewFile(path, src)
	doc, more := source.Parse(file)
	return doc, append(problems, more...)
}

// note keeps problems of the workspace's own files.
func (f *Firm) note(problems []source.Problem) {
	for _, p := range problems {
		f.Problems = append(f.Problems, FileProblem{Problem: p, On: "file"})
	}
}

// unknownNames are the problems of a profile and a code that the workspace names and
// that there are not.
func (f *Firm) unknownNames() []source.Problem {
	var out []source.Problem
	w := &f.Workspace
	if p, bad := unknownName(w.Profile, "profile", f.Limits.ProfileIDs()); bad {
		out = append(out, p)
	}
	if p, bad := unknownName(w.Code, "code", f.Limits.CodeIDs()); bad {
		out = append(out, p)
	}
	return out
}

// unknownName is the problem of a name that none of the known ones is.
func unknownName(v source.Val[string], what string, known []string) (source.Problem, bool) {
	if !v.Set {
		return source.Problem{}, false
	}
	for _, k := range known {
		if k == v.V {
			return source.Problem{}, false
		}
	}
	do := "name one of " + strings.Join(known, ", ")
	if len(known) == 0 {
		do = "describe it in driploop.toml, or leave the key out"
	}
	if near := source.Nearest(v.V, known); near != "" {
		do = "did you mean " + near + "?"
	}
	return source.Problem{Kind: source.Value, At: v.At, Says: "there is no " + what + " " + source.Quote(v.V), Do: do}, true
}

// plansOf lists the plan files that are one job: names that differ in case alone are
// one on some disks.
func (f *Firm) plansOf(job string) []string {
	f.jobsOnce.Do(func() {
		f.jobs = map[string][]string{}
		for _, e := range f.PlanFiles {
			id := strings.ToLower(bom.JobOf(e.Path))
			f.jobs[id] = append(f.jobs[id], e.Path)
		}
	})
	return f.jobs[strings.ToLower(job)]
}

// ReadsStock reports whether a file of that path would be read as a stock sheet.
func (f *Firm) ReadsStock(path string) bool {
	return anyMatch(patterns(f.Workspace.Stock, "stock"), path)
}

// Override is the weight that the workspace gives a rule, or nil.
func (f *Firm) Override(rule string) *Override { return f.weights[rule] }

// Overrides lists what the workspace changes of what the tool brings along, in
// words that every output prints.
func (f *Firm) Overrides() []string {
	var out []string
	for _, w := range f.Workspace.Weights {
		if w.Weight.Set {
			out = append(out, fmt.Sprintf("%s weighs %s here: %s", w.Rule, w.Weight.V, w.Because.Or("no reason given")))
		}
	}
	for _, name := range f.Limits.Overrides() {
		out = append(out, name+" is the workspace's own, not the embedded one")
	}
	for _, id := range f.Catalog.Overridden() {
		out = append(out, "part "+id+" is the workspace's own, not the generic one")
	}
	sort.Strings(out)
	return out
}

func unknownRule(name string) error {
	if near := source.Nearest(name, Names()); near != "" {
		return fmt.Errorf("there is no rule %s; %s is one", source.Quote(name), near)
	}
	return fmt.Errorf("there is no rule %s", source.Quote(name))
}

// OnHand is how many of a part lie on the shelf, in words for a finding: "NC-10-NM
// (26 on hand)".
func (f *Firm) OnHand(p *catalog.Part) string {
	qty, _ := f.Stock.OnHand(p.ID)
	if qty.IsZero() {
		return p.ID + " (none on hand)"
	}
	return p.ID + " (" + qty.String() + " on hand)"
}
