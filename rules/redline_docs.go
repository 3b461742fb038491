package rules

import (
	"sync"

	"driploop/catalog/source"
)

// docs keeps what was parsed of the workspace's own files, so that two revisions that
// share a file parse it once. Files are the same where path and ID of their content
// are; without an ID they are read each time.
type docs struct {
	mu   sync.Mutex
	byID map[source.Entry]parsed
}

type parsed struct {
	doc      *source.Doc
	problems []source.Problem
}

// read is readDoc, once for equal files. Of nil docs it is readDoc itself.
func (d *docs) read(t source.Tree, e source.Entry) (*source.Doc, []source.Problem) {
	if d == nil || e.ID == "" {
		return readDoc(t, e)
	}
	d.mu.Lock()
	p, known := d.byID[e]
	d.mu.Unlock()
	if known {
		return p.doc, p.problems
	}
	p.doc, p.problems = readDoc(t, e)
	d.mu.Lock()
	defer d.mu.Unlock()
	if d.byID == nil {
		d.byID = map[source.Entry]parsed{}
	}
	d.byID[e] = p
	return p.doc, p.problems
}
