package rules

import (
	"errors"
	"sort"

	"golang.org/x/sync/errgroup"

	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/rules/limits"
)

// loader reads the files of a workspace sort by sort.
type loader struct {
	firm    *Firm
	entries []source.Entry
}

// matching lists the entries of one sort of file; those that cannot be read are
// kept apart.
func (l *loader) matching(patterns []string) []source.Entry {
	var out []source.Entry
	for _, e := range l.entries {
		if e.Path == WorkspaceFile || !anyMatch(patterns, e.Path) {
			continue
		}
		if e.Skip != "" {
			l.firm.Skipped = append(l.firm.Skipped, e)
			continue
		}
		out = append(out, e)
	}
	return out
}

func anyMatch(patterns []string, path string) bool {
	for _, p := range patterns {
		if source.Match(p, path) {
			return true
		}
	}
	return false
}

// read parses files side by side and returns the documents in their order. A file
// that cannot be read whole leaves a problem and no document.
func (l *loader) read(entries []source.Entry) []*source.Doc {
	docs := make([]*source.Doc, len(entries))
	problems := make([][]source.Problem, len(entries))
	var g errgroup.Group
	g.SetLimit(sideBySide())
	for i, e := range entries {
		g.Go(func() error {
			doc, found := readDoc(l.firm.Tree, e)
			problems[i] = found
			if doc != nil {
				docs[i] = doc
			}
			return nil
		})
	}
	g.Wait()
	var out []*source.Doc
	for i := range docs {
		l.firm.note(problems[i])
		if docs[i] != nil {
			out = append(out, docs[i])
		}
	}
	return out
}

// readDoc reads and parses one file of a tree; what keeps it from being read is a
// problem of that file.
func readDoc(t source.Tree, e source.Entry) (*source.Doc, []source.Problem) {
	src, err := t.Read(e)
	if err != nil {
		file := &source.File{Path: e.Path}
		do := "see that the file can be read"
		if big := (*source.TooBig)(nil); errors.As(err, &big) {
			do = "split it into several files"
		}
		return nil, []source.Problem{{Kind: source.Syntax, At: file.Start(), Says: "the file cannot be read: " + err.Error(), Do: do}}
	}
	return parse(e.Path, src)
}

func (l *loader) parts() {
	var own []*catalog.Part
	for _, d := range l.read(l.matching(patterns(l.firm.Workspace.Catalog, "catalog"))) {
		parts, problems := catalog.ReadParts(d)
		l.notePart(problems, parts)
		own = append(own, parts...)
	}
	l.firm.Catalog = catalog.New(own)
}

// notePart keeps the problems of a catalog file, each with the part in whose table
// it stands: the last one that begins before it.
func (l *loader) notePart(problems []source.Problem, parts []*catalog.Part) {
	byPlace := append([]*catalog.Part(nil), parts...)
	sort.Slice(byPlace, func(i, j int) bool { return byPlace[i].At.From < byPlace[j].At.From })
	for _, p := range problems {
		fp := FileProblem{Problem: p, On: "file"}
		for _, part := range byPlace {
			if part.At.From <= p.At.From {
				fp.On, fp.Part = "part."+part.ID, part.ID
			}
		}
		l.firm.Problems = append(l.firm.Problems, fp)
	}
}

func (l *loader) limits() {
	set, problems := limits.Load(l.read(l.matching(patterns(l.firm.Workspace.Profiles, "profiles")))...)
	l.firm.Limits = set
	l.firm.note(problems)
}

func (l *loader) offers() {
	for _, d := range l.read(l.matching(patterns(l.firm.Workspace.Offers, "offers"))) {
		o, problems := catalog.ReadOffers(d)
		l.firm.note(problems)
		l.firm.Offers.Add(o)
	}
	l.firm.note(l.firm.Offers.Check(l.firm.Catalog.Look))
}

func (l *loader) stock() {
	var sheets []*catalog.Sheet
	var orders []*catalog.Order
	for _, d := range l.read(l.matching(patterns(l.firm.Workspace.Stock, "stock"))) {
		s, o, problems := catalog.ReadStock(d)
		l.firm.note(problems)
		if s != nil {
			sheets = append(sheets, s)
		}
		if o != nil {
			orders = append(orders, o)
		}
	}
	f := l.firm
	f.note(f.Workspace.Premises.Check(f.Catalog.Look))
	f.note(catalog.CheckStock(sheets, orders, f.Catalog.Look))
	f.Stock = catalog.Book(&f.Workspace.Premises, sheets, orders, f.Catalog.Look, f.Today)
}

func (l *loader) plans() {
	l.firm.PlanFiles = l.matching(patterns(l.firm.Workspace.Plans, "plans"))
}
