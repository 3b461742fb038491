package rules

import (
	"context"
	"fmt"
	"maps"
	"runtime"
	"slices"
	"sync/atomic"

	"golang.org/x/sync/errgroup"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
)

// Result is what an inspection of a workspace found.
type Result struct {
	Origin
	Today     string
	Overrides []string
	Weights   []Override // what the workspace makes plain failures weigh
	Notices   []string   // what was left out, and why
	NoShelf   bool       // the rules of scope firm were left out
	Workspace []*Finding
	Plans     []*PlanResult
	Counts
}

// PlanResult is what an inspection of one plan found.
type PlanResult struct {
	Path, Job     string
	Title, Stage  string
	Profile, Code string
	Findings      []*Finding
	Runs          []Runs   // gain that runs, per band
	Parts         []string // parts that the plan stands on, by ID
	Cautions      []string
	FilesOnly     string // why only the rules on its file looked at it, or ""
	Counts
}

// Runs is the gain that runs in one band, each way.
type Runs struct {
	Device, Band string
	Up, Down     RunsAt
}

// RunsAt is the gain that runs and what binds it. Without either it is not
// assessed; what is not On has no gain, and what binds it leaves the band off.
type RunsAt struct {
	On   bool
	Gain float64 // dB
	By   string  // set, output, protection, isolation
}

// Counts counts findings by weight; what a waiver covers is counted apart.
type Counts struct {
	Holds, Punch, Notes, Waived int
	Unknown                     int // of all, how many are not assessed
}

// Count adds a finding.
func (n *Counts) Count(f *Finding) {
	if f.Outcome == Unknown {
		n.Unknown++
	}
	switch {
	case f.Waived != nil:
		n.Waived++
	case f.Weight == Hold:
		n.Holds++
	case f.Weight == Punch:
		n.Punch++
	default:
		n.Notes++
	}
}

func (n *Counts) add(m Counts) {
	n.Holds += m.Holds
	n.Punch += m.Punch
	n.Notes += m.Notes
	n.Waived += m.Waived
	n.Unknown += m.Unknown
}

// sideBySide is how many files are worked on at a time.
func sideBySide() int { return max(1, runtime.GOMAXPROCS(0)) }

// eachSideBySide does something for each of n, in no order. A few goroutines take
// one after the other: with one for each, every stack would have to grow anew.
func eachSideBySide(ctx context.Context, n int, do func(i int)) error {
	g, ctx := errgroup.WithContext(ctx)
	var taken atomic.Int64
	for range sideBySide() {
		g.Go(func() error {
			for i := int(taken.Add(1)) - 1; i < n && ctx.Err() == nil; i = int(taken.Add(1)) - 1 {
				do(i)
			}
			return ctx.Err()
		})
	}
	return g.Wait()
}

// Inspect runs the rules over the named plans, or over all where none is named. Of
// the findings on the workspace's own files, those in changed files are always kept.
// The same workspace and day give the same result, in the same order.
func (f *Firm) Inspect(ctx context.Context, plans []source.Entry, changed ...string) (*Result, error) {
	whole := plans == nil
	if whole {
		plans = f.PlanFiles
	}
	r := &Result{Origin: f.Origin(), Today: f.Today.String(), Overrides: f.Overrides(), Weights: f.Workspace.Weights, NoShelf: f.noShelf}
	r.Plans = make([]*PlanResult, len(plans))
	kept := make([]shelfPlan, len(plans))
	err := f.eachPlan(ctx, len(plans), func(i int) { r.Plans[i], kept[i] = f.inspectPlan(plans[i], !whole) })
	if err != nil {
		return nil, err
	}
	r.Workspace = f.inspectFiles()
	others, unread, err := f.otherDemands(ctx, plans)
	if err != nil {
		return nil, err
	}
	f.inspectShelf(r, kept, others)
	for _, path := range unread {
		r.Notices = append(r.Notices, path+" cannot be read whole; what it claims of the shelf is not known and not kept for it")
	}
	if !whole {
		r.keepTouched(changed)
	}
	for _, e := range f.Skipped {
		r.Notices = append(r.Notices, fmt.Sprintf("%s is not read: it %s", e.Path, e.Skip))
	}
	for _, w := range r.Workspace {
		r.Counts.Count(w)
	}
	for _, p := range r.Plans {
		for _, x := range p.Findings {
			p.Count(x)
		}
		r.Counts.add(p.Counts)
	}
	return r, nil
}

// keepTouched drops the findings on the workspace's own files that stand neither on
// the plans at hand nor in the changed files, and says how many.
func (r *Result) keepTouched(changed []string) {
	used, holes, stands := map[string]bool{}, false, map[*Finding]bool{}
	for _, p := range r.Plans {
		for _, id := range p.Parts {
			used[id] = true
		}
		for _, f := range p.Findings {
			holes = holes || f.Rule.Name == "part/unknown"
			stands[f.row] = true
		}
	}
	var kept []*Finding
	for _, f := range r.Workspace {
		concerns := used[f.Part] || f.Part == "" && (holes || f.At.Path() == WorkspaceFile)
		if f.Rule.Firm() {
			concerns = stands[f]
		}
		if concerns || slices.Contains(changed, f.At.Path()) {
			kept = append(kept, f)
		}
	}
	if n := len(r.Workspace) - len(kept); n > 0 {
		r.Notices = append(r.Notices, fmt.Sprintf("%s on the workspace's own files, in nothing that these plans need; inspect without naming a plan shows them", count(n, "finding", "findings")))
	}
	r.Workspace = kept
}

// inspectFiles runs the rules over the workspace's own files.
func (f *Firm) inspectFiles() []*Finding {
	var out []*Finding
	for _, rule := range Rules {
		if rule.CheckFiles == nil {
			continue
		}
		r := &Report{rule: rule}
		rule.CheckFiles(f, r)
		out = append(out, f.weigh(r, "")...)
	}
	sortFindings(out)
	return out
}

// inspectPlan runs the rules over one plan and lets go of it. Its parts are listed
// where findings on the workspace's own files have to be told apart by them.
func (f *Firm) inspectPlan(e source.Entry, withParts bool) (*PlanResult, shelfPlan) {
	c, broken := f.Case(e)
	res := &PlanResult{Path: e.Path, Job: bom.JobOf(e.Path)}
	if c.Plan != nil {
		res.Title, res.Stage = c.Plan.Job.Title.V, c.Stage()
		res.Profile, res.Code = c.ProfileName(), c.CodeName()
	}
	switch {
	case broken:
		res.FilesOnly = "the plan file cannot be read whole"
	case c.Stage() == "cancelled":
		res.FilesOnly = "the job is cancelled"
	}
	res.Findings = c.run(res.FilesOnly != "")
	kept := shelfPlan{}
	if !broken {
		if !f.noShelf {
			kept = c.forShelf()
		}
		if withParts {
			res.Parts = c.parts()
		}
		res.Runs = c.runs()
		res.Cautions = c.Firm.alike(c.cautions(res.Findings))
	}
	letGo(c.Plan.File, res.Findings, kept.places())
	return res, kept
}

// letGo moves what outlives the work on a plan off the plan's text: the places of
// its findings and of the waivers that cover them, and those that the shelf needs.
func letGo(f *source.File, findings []*Finding, places []*source.Place) {
	note := func(p *source.Place) {
		if p.File == f {
			places = append(places, p)
		}
	}
	waivers := map[*Settled]*Settled{}
	for _, x := range findings {
		note(&x.At)
		for i := range x.Related {
			note(&x.Related[i].At)
		}
		if x.Waived == nil {
			continue
		}
		if waivers[x.Waived] == nil {
			waivers[x.Waived] = x.Waived.alone()
		}
		x.Waived = waivers[x.Waived]
	}
	moveOff(f, places)
}

// moveOff moves those of the places that lie in the file off its text.
func moveOff(f *source.File, places []*source.Place) {
	offsets := make([]int32, 0, len(places))
	for _, p := range places {
		if p.File == f {
			offsets = append(offsets, p.From)
		}
	}
	if len(offsets) == 0 {
		return
	}
	settled := f.Settled(offsets)
	for _, p := range places {
		if p.File == f {
			p.File = settled
		}
	}
}

// Case reads one plan into a case. broken says that the file could not be read
// whole; then only its own problems stand on it.
func (f *Firm) Case(e source.Entry) (c *Case, broken bool) {
	doc, problems := readDoc(f.Tree, e)
	if doc == nil {
		plan := &bom.Plan{ID: bom.JobOf(e.Path), File: &source.File{Path: e.Path}}
		return &Case{Firm: f, Plan: plan, Problems: problems}, true
	}
	plan, more := bom.ReadPlan(doc)
	problems = append(problems, more...)
	if doc.Ended {
		return &Case{Firm: f, Plan: plan, Problems: problems}, true
	}
	return newCase(f, plan, problems), false
}

// run lets every rule look at the case, settles the waivers, and returns the
// findings in their order. filesOnly leaves all but the file rules out.
func (c *Case) run(filesOnly bool) []*Finding {
	var out []*Finding
	var r Report
	check := func(rule *Rule) {
		r = Report{rule: rule}
		rule.Check(c, &r)
		out = append(out, c.Firm.weigh(&r, c.Stage())...)
	}
	for _, rule := range Rules {
		if rule.Check != nil && rule != paperWaiver && (!filesOnly || rule.Area() == "file") {
			check(rule)
		}
	}
	sortFindings(out)
	if !filesOnly {
		here, _ := c.waivers()
		c.Waivers = settle(here, out, c.Today())
		check(paperWaiver)
		sortFindings(out)
	}
	return out
}

// weigh gives the findings of a report their weights; what weighs nothing drops out.
func (f *Firm) weigh(r *Report, stage string) []*Finding {
	var out []*Finding
	own := f.Override(r.rule.Name)
	for _, x := range r.merged() {
		if own != nil && own.Weight.Set {
			w := WeightNamed(own.Weight.V)
			x.override = &w
		}
		if x.Weight = r.rule.weigh(x, stage); x.override != nil && *x.override == Off {
			continue
		}
		out = append(out, x)
	}
	return out
}

// WeightNamed is the weight of that word, and the heaviest for an unknown one.
func WeightNamed(word string) Weight {
	for w, s := range weightWords {
		if s == word {
			return Weight(w)
		}
	}
	return Hold
}

// parts lists the parts that the plan names, and the cables that its jumpers and
// captive leads are made of, by ID.
func (c *Case) parts() []string {
	seen := map[string]bool{}
	for _, u := range c.partUses() {
		seen[u.id.V] = true
		if p := c.Firm.Catalog.Look(u.id.V); p != nil {
			for _, of := range madeOf(p) {
				seen[of] = true
			}
		}
	}
	return slices.Sorted(maps.Keys(seen))
}

// madeOf lists the cables that a jumper or a captive lead is made of.
func madeOf(p *catalog.Part) []string {
	var out []string
	if p.Jumper != nil && p.Jumper.Cable.Set {
		out = append(out, p.Jumper.Cable.V)
	}
	for i := range p.Ports {
		if l := p.Ports[i].Lead; l != nil && l.Cable.Set {
			out = append(out, l.Cable.V)
		}
	}
	return out
}
