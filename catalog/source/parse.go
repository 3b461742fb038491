package source

import (
	"bytes"
	"fmt"
)

var byteOrderMark = []byte("\xEF\xBB\xBF")

// NewFile makes the file of that path from its bytes as they were read. A byte
// order mark is taken off, and reported because other readers choke on it. All
// else that is wrong with the bytes is for Parse to say.
func NewFile(path string, src []byte) (*File, []Problem) {
	rest, marked := bytes.CutPrefix(src, byteOrderMark)
	f := &File{Path: path, Src: rest}
	if !marked {
		return f, nil
	}
	return f, []Problem{{Kind: Syntax, At: f.Start(),
		Says: "the file begins with a byte order mark",
		Do:   "save it as UTF-8 without a byte order mark"}}
}

// Parse reads a file into a tree in which every key and value knows its place.
// It returns a Doc whatever the file holds: with a syntax problem the tree goes
// as far as could be read, and Partial says that something is left out.
//
// The problems are in document order, MaxProblems at most. Their kinds are
// Syntax, Merge, and Value for numbers that no plan can mean (nan, inf, out of
// range). A file that holds anything but plain keys, one-line strings without
// escapes, plain numbers, days and tables is read by a second
// parser, and the two must agree on it. On plain files they always do: tests and
// fuzzing hold both against each other on any file.
func Parse(f *File) (*Doc, []Problem) {
	f.index()
	if found := unreadable(f); found != nil {
		return &Doc{File: f, Root: &Node{Kind: Table, At: f.Start()}, Partial: true, Ended: true}, found
	}
	x := newIndexer(f)
	x.run()
	problems := append(longLines(f), withConflicts(f, x.problems)...)
	doc := &Doc{File: f, Root: x.root, Partial: x.partial, Ended: x.stopped}
	if len(problems) == 0 && (x.odd || bytes.IndexByte(f.Src, '\r') >= 0) {
		problems = disagreement(doc)
	}
	SortProblems(problems)
	return doc, firstOf(problems, x.uncounted)
}

// firstOf keeps MaxProblems and says in the last of them how many were left out.
func firstOf(problems []Problem, uncounted int) []Problem {
	left := len(problems) + uncounted - MaxProblems
	if left <= 0 {
		return problems
	}
	kept := problems[:MaxProblems]
	last := &kept[MaxProblems-1]
	last.Says = fmt.Sprintf("%s; the file has %d more problems", last.Says, left)
	return kept
}
