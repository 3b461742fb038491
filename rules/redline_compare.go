package rules

import (
	"context"
	"errors"
	"fmt"
	"slices"
	"strings"
	"sync"

	"driploop/bom"
	"driploop/catalog/source"
)

// Compare says what a change means: what is other in head than in base, which of it
// is work, which facts, which rulers, and what follows from each. Both are looked at
// with the same day and the same tool. Errors: where one of the two is no workspace.
func Compare(ctx context.Context, base, head source.Tree, o Options) (*Redline, error) {
	c := &comparison{ctx: ctx, out: &Redline{Base: base.Name(), Head: head.Name(), Today: o.Today.String()}}
	o.docs = &docs{}
	for side, t := range []source.Tree{base, head} {
		f, err := Load(t, o)
		if errors.Is(err, ErrNoWorkspace) && side == atBase {
			f, err = Load(without{t}, o)
			c.out.Notices = append(c.out.Notices, t.Name()+" has no "+WorkspaceFile+"; all is new")
		}
		if err != nil {
			return nil, fmt.Errorf("reading the workspace at %s: %w", t.Name(), err)
		}
		c.firms[side] = f
	}
	c.out.Feet = c.firms[atHead].Workspace.Lengths.V == "ft"
	for _, e := range c.firms[atHead].Skipped {
		c.out.Notices = append(c.out.Notices, fmt.Sprintf("%s is not read in the head: it %s", e.Path, e.Skip))
	}
	c.pairUp()
	if err := c.ownFiles(); err != nil {
		return nil, err
	}
	if err := c.findConcerned(); err != nil {
		return nil, err
	}
	if err := c.lookAtPairs(); err != nil {
		return nil, err
	}
	c.compareShelf()
	c.compareFiles()
	c.judge()
	c.costs()
	c.private()
	return c.out, nil
}

// without is a tree in which no workspace is, as one with nothing in it.
type without struct{ source.Tree }

func (w without) Files() ([]source.Entry, error) {
	return []source.Entry{{Path: WorkspaceFile}}, nil
}

func (w without) Read(source.Entry) ([]byte, error) { return nil, nil }

// comparison is a redline while it is being made.
type comparison struct {
	ctx    context.Context
	out    *Redline
	firms  sideOf[*Firm]
	mu     sync.Mutex
	mixes  map[mix]*Firm
	moved  moves           // of what plans and shelf have in common
	goods  moves           // of what only the shelf depends on
	parts  map[string]bool // of the catalog, that differ
	names  map[string]bool // of profiles and codes that differ
	all    bool            // every plan is concerned
	pairs  []*pair         // those concerned, in order of path
	same   []source.Entry  // plan files that did not change, in the head
	others []shelfPlan     // of plans that are not concerned

	first, final, under *shelfState // of the base, of the head, and of the head under the base's rulers
	compared            map[string]bool
}

// pair is a plan as it was and as it is; one of the two may be missing.
type pair struct {
	entry   sideOf[*source.Entry]
	doc     sideOf[*source.Doc]
	plan    sideOf[*bom.Plan] // the base's under the names of the head
	was     *bom.Plan         // the base's under its own names
	faults  sideOf[[]source.Problem]
	broken  sideOf[bool]
	renames bom.Renames
	numbers map[string]string // of rows that have no name, "signal.3" to "signal.4"
	moved   moves
	changes []Change
	seen    map[mix]*seen
	job     *JobChange
}

func (p *pair) isNew() bool  { return p.entry[atBase] == nil }
func (p *pair) isGone() bool { return p.entry[atHead] == nil }

// path is where the plan is, or was.
func (p *pair) path() string {
	if p.isGone() {
		return p.entry[atBase].Path
	}
	return p.entry[atHead].Path
}

// pairUp finds the plan files that differ. Files of the same bytes are not read.
func (c *comparison) pairUp() {
	a, b := c.firms[atBase].PlanFiles, c.firms[atHead].PlanFiles
	var gone, fresh []*pair
	for len(a) > 0 || len(b) > 0 {
		switch {
		case len(b) == 0 || len(a) > 0 && a[0].Path < b[0].Path:
			gone, a = append(gone, &pair{entry: sideOf[*source.Entry]{&a[0], nil}}), a[1:]
		case len(a) == 0 || b[0].Path < a[0].Path:
			fresh, b = append(fresh, &pair{entry: sideOf[*source.Entry]{nil, &b[0]}}), b[1:]
		default:
			if sameFile(c.firms[atBase].Tree, c.firms[atHead].Tree, a[0], b[0]) {
				c.same = append(c.same, b[0])
			} else {
				c.pairs = append(c.pairs, &pair{entry: sideOf[*source.Entry]{&a[0], &b[0]}})
			}
			a, b = a[1:], b[1:]
		}
	}
	for _, p := range slices.Concat(c.pairs, gone, fresh) {
		c.read(p)
	}
	c.followJobs(gone, fresh)
}

// followJobs pairs a plan that is gone with a new one that says the same.
func (c *comparison) followJobs(gone, fresh []*pair) {
	for _, p := range gone {
		for _, q := range fresh {
			if q.isNew() && !p.broken[atBase] && !q.broken[atHead] && sameJob(p.plan[atBase], q.plan[atHead]) {
				q.entry[atBase], q.doc[atBase], q.plan[atBase], q.faults[atBase] = p.entry[atBase], p.doc[atBase], p.plan[atBase], p.faults[atBase]
				p.entry[atBase] = nil
				break
			}
		}
		if p.entry[atBase] != nil {
			c.pairs = append(c.pairs, p)
		}
	}
	c.pairs = append(c.pairs, fresh...)
	slices.SortStableFunc(c.pairs, func(p, q *pair) int { return strings.Compare(p.path(), q.path()) })
}

// sameJob reports two plans of one content: the same meaning, or nothing but the
// title, the stage and the day other.
func sameJob(a, b *bom.Plan) bool {
	x, y := *a, *b
	y.Job.Title, y.Job.Stage, y.Job.InstallOn = x.Job.Title, x.Job.Stage, x.Job.InstallOn
	return len(a.Devices)+len(a.Cables)+len(a.Extras) > 0 && bom.SameMeaning(&x, &y)
}

// read reads the files of a pair.
func (c *comparison) read(p *pair) {
	for side, e := range p.entry {
		if e == nil {
			continue
		}
		p.doc[side], p.faults[side] = readDoc(c.firms[side].Tree, *e)
		if p.doc[side] == nil || p.doc[side].Ended {
			p.broken[side] = true
			if p.doc[side] == nil {
				continue
			}
		}
		plan, more := bom.ReadPlan(p.doc[side])
		p.plan[side], p.faults[side] = plan, append(p.faults[side], more...)
	}
}

// firm is the firm of a mix.
func (c *comparison) firm(x mix) *Firm {
	c.mu.Lock()
	defer c.mu.Unlock()
	if c.mixes == nil {
		c.mixes = map[mix]*Firm{}
	}
	f := c.mixes[x]
	if f == nil {
		f = mixed(c.firms[x.work], c.firms[x.facts], c.firms[x.rulers])
		c.mixes[x] = f
	}
	return f
}

// findConcerned adds to the plans that changed those that changed parts or rulers
// concern, and keeps of all others what they take of the shelf.
func (c *comparison) findConcerned() error {
	head := c.firms[atHead]
	kept := make([]shelfPlan, len(c.same))
	concerned := make([]bool, len(c.same))
	err := head.eachPlan(c.ctx, len(c.same), func(i int) {
		if c.all {
			concerned[i] = true
			return
		}
		x, broken := head.Case(c.same[i])
		switch {
		case broken:
		case c.concerns(x):
			concerned[i] = true
		default:
			kept[i] = x.forShelf()
			moveOff(x.Plan.File, kept[i].places())
		}
	})
	if err != nil {
		return err
	}
	was := map[string]*source.Entry{}
	for i := range c.firms[atBase].PlanFiles {
		e := &c.firms[atBase].PlanFiles[i]
		was[e.Path] = e
	}
	for i := range c.same {
		if !concerned[i] {
			c.others = append(c.others, kept[i])
			continue
		}
		p := &pair{entry: sideOf[*source.Entry]{was[c.same[i].Path], &c.same[i]}}
		p.job = &JobChange{How: "concerned"}
		c.pairs = append(c.pairs, p)
	}
	slices.SortStableFunc(c.pairs, func(p, q *pair) int { return strings.Compare(p.path(), q.path()) })
	c.out.Untouched = len(c.others)
	return nil
}

// concerns reports whether a plan stands on a part or a ruler that differs.
func (c *comparison) concerns(x *Case) bool {
	if c.names[x.ProfileName()] || c.names[x.CodeName()] {
		return true
	}
	if len(c.parts) == 0 {
		return false
	}
	return slices.ContainsFunc(x.parts(), func(id string) bool { return c.parts[id] })
}

// lookAtPairs compares each plan that is concerned. What is seen is kept; the plans'
// text is let go.
func (c *comparison) lookAtPairs() error {
	err := c.firms[atHead].eachPlan(c.ctx, len(c.pairs), func(i int) { c.comparePlans(c.pairs[i]) })
	if err != nil {
		return err
	}
	for _, p := range c.pairs {
		c.out.Jobs = append(c.out.Jobs, p.job)
	}
	return nil
}
