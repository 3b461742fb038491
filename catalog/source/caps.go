package source

import (
	"bytes"
	"fmt"
	"unicode/utf8"
)

// The caps bound the work that a hostile file can cause: time and memory of
// either parser grow faster than the file where nesting or keys are unbounded.
// Plans stay far below all of them.
const (
	MaxDepth = 16      // steps from the root to a value
	MaxParts = 16      // parts of a dotted key or header
	MaxKey   = 128     // bytes of one part of a key
	MaxNodes = 20_000  // values of a file, tables included
	MaxLine  = 8 << 10 // bytes of a line
)

// unreadable reports what forbids parsing at all: the size, or bytes that are no
// text. Nothing is reported for a file that can be parsed.
func unreadable(f *File) []Problem {
	if len(f.Src) > MaxFile {
		return []Problem{{Kind: Syntax, At: f.Start(),
			Says: fmt.Sprintf("the file has %d bytes, more than the %d KiB that are read", len(f.Src), MaxFile>>10),
			Do:   "split it into several files; a stock sheet can be one file per place and day"}}
	}
	if i := bytes.IndexByte(f.Src, 0); i >= 0 {
		return []Problem{{Kind: Syntax, At: f.stretch(i, i+1),
			Says: "the file has a NUL byte here, so it is no text in UTF-8",
			Do:   "save the file as UTF-8"}}
	}
	if i := invalidUTF8(f.Src); i >= 0 {
		return []Problem{{Kind: Syntax, At: f.stretch(i, i+1),
			Says: fmt.Sprintf("the byte 0x%02X here is not UTF-8", f.Src[i]),
			Do:   "save the file as UTF-8"}}
	}
	return nil
}

// invalidUTF8 is the offset of the first byte that is not part of a character,
// or -1.
func invalidUTF8(src []byte) int {
	if utf8.Valid(src) {
		return -1
	}
	for i := 0; i < len(src); {
		r, n := utf8.DecodeRune(src[i:])
		if r == utf8.RuneError && n == 1 {
			return i
		}
		i += n
	}
	return -1
}

// longLines reports the lines above MaxLine. The file is read all the same.
func longLines(f *File) []Problem {
	var found []Problem
	for i, from := range f.lines {
		to := len(f.Src)
		if i+1 < len(f.lines) {
			to = int(f.lines[i+1]) - len("\n")
		}
		if n := to - int(from); n > MaxLine {
			found = append(found, Problem{Kind: Syntax, At: f.stretch(int(from), int(from)+1),
				Says: fmt.Sprintf("the line has %d bytes, more than the %d that a line may have", n, MaxLine),
				Do:   "break the list or the text over several lines"})
		}
	}
	return found
}

// stretch is the place from one offset up to another.
func (f *File) stretch(from, to int) Place { return Place{f, int32(from), int32(to)} }
