package rules

import (
	"context"
	"errors"
	"fmt"
	"slices"
	"sort"

	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/rules/limits"
)

// loader reads the files of one tree sort by sort, for a firm that may also read
// others.
type loader struct {
	firm      *Firm
	tree      source.Tree
	as        string // what problems of its files are marked with; "" for the firm's own tree
	entries   []source.Entry
	workspace Workspace
	head      *source.Doc // driploop.toml
}

// open lists a tree and reads its driploop.toml.
func (f *Firm) open(t source.Tree, as string) (*loader, error) {
	entries, err := t.Files()
	if err != nil {
		return nil, err
	}
	l := &loader{firm: f, tree: t, as: as, entries: entries}
	for _, e := range entries {
		if e.Path != WorkspaceFile {
			continue
		}
		if e.Skip != "" {
			return nil, fmt.Errorf("%s %s", WorkspaceFile, e.Skip)
		}
		src, err := t.Read(e)
		if err != nil {
			return nil, err
		}
		doc, problems := parse(e.Path, src)
		l.head = doc
		l.note(append(problems, source.Read(doc, l.workspace.keys)...))
		return l, nil
	}
	return nil, ErrNoWorkspace
}

// note keeps problems of the tree's files. Those of another tree than the firm's own
// say so, and are left out where the firm's own files have them too.
func (l *loader) note(problems []source.Problem) {
	if l.as == "" {
		l.firm.note(problems)
		return
	}
	for _, p := range problems {
		same := func(q FileProblem) bool {
			return q.At.Path() == p.At.Path() && q.At.Line() == p.At.Line() && q.Says == p.Says
		}
		if !slices.ContainsFunc(l.firm.Problems, same) {
			p.Says += " (at " + l.as + ")"
			l.firm.note([]source.Problem{p})
		}
	}
}

// matching lists the entries of one sort of file; those that cannot be read are
// kept apart.
func (l *loader) matching(patterns []string) []source.Entry {
	var out []source.Entry
	for _, e := range l.entries {
		if e.Path == WorkspaceFile || !anyMatch(patterns, e.Path) {
			continue
		}
		if e.Skip == "" {
			out = append(out, e)
		} else if !slices.ContainsFunc(l.firm.Skipped, func(s source.Entry) bool { return s.Path == e.Path }) {
			l.firm.Skipped = append(l.firm.Skipped, e)
		}
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
	eachSideBySide(context.Background(), len(entries), func(i int) {
		docs[i], problems[i] = l.firm.docs.read(l.tree, entries[i])
	})
	var out []*source.Doc
	for i := range docs {
		l.note(problems[i])
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
	for _, d := range l.read(l.matching(patterns(l.workspace.Catalog, "catalog"))) {
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

func (l *loader) limits() *limits.Set {
	set, problems := limits.Load(l.read(l.profileFiles())...)
	l.note(problems)
	return set
}

func (l *loader) profileFiles() []source.Entry {
	return l.matching(patterns(l.workspace.Profiles, "profiles"))
}

func (l *loader) offers() {
	for _, d := range l.read(l.matching(patterns(l.workspace.Offers, "offers"))) {
		o, problems := catalog.ReadOffers(d)
		l.note(problems)
		l.firm.Offers.Add(o)
	}
	l.note(l.firm.Offers.Check(l.firm.Catalog.Look))
}

// stockFiles are stock sheets and orders as they were read.
type stockFiles struct {
	sheets []*catalog.Sheet
	orders []*catalog.Order
}

func (l *loader) stock() stockFiles {
	var out stockFiles
	for _, d := range l.read(l.shelfFiles()) {
		s, o, problems := catalog.ReadStock(d)
		l.note(problems)
		if s != nil {
			out.sheets = append(out.sheets, s)
		}
		if o != nil {
			out.orders = append(out.orders, o)
		}
	}
	l.note(catalog.CheckStock(out.sheets, out.orders, l.firm.Catalog.Look))
	return out
}

func (l *loader) shelfFiles() []source.Entry {
	return l.matching(patterns(l.workspace.Stock, "stock"))
}

func (l *loader) plans() {
	l.firm.PlanFiles = l.matching(patterns(l.workspace.Plans, "plans"))
}
