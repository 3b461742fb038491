package source

import (
	"bytes"
	"cmp"
	"slices"
	"sort"
	"unicode/utf8"
)

// File is one file of a tree with its bytes. Src has no byte order mark.
type File struct {
	Path string // slash-separated, relative to the root of the tree
	Src  []byte

	lines   []int32   // offset of the first byte of each line, filled on first use
	settled []settled // in order, of a file whose text was let go
}

// settled is line and column of a place whose text was let go.
type settled struct{ at, line, col int32 }

// Settled is the file without its text: of the places at the given offsets it
// still knows line and column, and nothing else. Places that outlive the work on
// their file are moved to it, so that a thousand findings do not keep a thousand
// files in memory.
func (f *File) Settled(offsets []int32) *File {
	offsets = slices.Compact(slices.Sorted(slices.Values(offsets)))
	out := &File{Path: f.Path, settled: make([]settled, len(offsets))}
	for i, o := range offsets {
		p := Place{f, o, o}
		out.settled[i] = settled{o, int32(p.Line()), int32(p.Col())}
	}
	return out
}

// known is line and column of a place whose text was let go, 0 for any other.
func (f *File) known(at int32) settled {
	i, ok := slices.BinarySearchFunc(f.settled, at, func(s settled, at int32) int { return cmp.Compare(s.at, at) })
	if !ok {
		return settled{}
	}
	return f.settled[i]
}

// Place is a stretch of bytes in a file. The zero Place is nowhere.
type Place struct {
	File     *File
	From, To int32
}

// IsZero reports whether the place is nowhere.
func (p Place) IsZero() bool { return p.File == nil }

// Text is the bytes at the place, "" where the file was let go.
func (p Place) Text() string {
	if p.File == nil || p.File.settled != nil {
		return ""
	}
	return string(p.File.Src[p.From:p.To])
}

// Path is the file's path, or "" for nowhere.
func (p Place) Path() string {
	if p.File == nil {
		return ""
	}
	return p.File.Path
}

// Line is the 1-based line on which the place starts, or 0 for nowhere.
func (p Place) Line() int {
	if p.File == nil {
		return 0
	}
	if p.File.settled != nil {
		return int(p.File.known(p.From).line)
	}
	return p.File.line(p.From)
}

// Col is the 1-based column on which the place starts, counted in characters
// (Unicode code points), or 0 for nowhere.
func (p Place) Col() int {
	if p.File == nil {
		return 0
	}
	if p.File.settled != nil {
		return int(p.File.known(p.From).col)
	}
	start := p.File.lineStart(p.Line())
	return utf8.RuneCount(p.File.Src[start:p.From]) + 1
}

// Before orders places by file and offset; nowhere comes first.
func (p Place) Before(q Place) bool {
	if a, b := p.Path(), q.Path(); a != b {
		return a < b
	}
	return p.From < q.From
}

// Start is the very beginning of the file, for what has no better place.
func (f *File) Start() Place { return Place{f, 0, 0} }

// LineText is the text of the 1-based line n without its line end.
func (f *File) LineText(n int) string {
	f.index()
	if n < 1 || n > len(f.lines) {
		return ""
	}
	from := int(f.lines[n-1])
	to := len(f.Src)
	if n < len(f.lines) {
		to = int(f.lines[n]) - 1
	}
	if to > from && f.Src[to-1] == '\r' {
		to--
	}
	return string(f.Src[from:to])
}

func (f *File) line(at int32) int {
	f.index()
	return sort.Search(len(f.lines), func(i int) bool { return f.lines[i] > at })
}

func (f *File) lineStart(n int) int32 {
	f.index()
	return f.lines[n-1]
}

func (f *File) index() {
	if f.lines != nil {
		return
	}
	f.lines = append(make([]int32, 0, 1+bytes.Count(f.Src, []byte("\n"))), 0)
	for i, b := range f.Src {
		if b == '\n' {
			f.lines = append(f.lines, int32(i+1))
		}
	}
}
