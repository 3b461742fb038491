package source

import (
	"bytes"
	"strings"
)

// skip is the first offset from at on whose byte is none of those given.
func (f *File) skip(at int, bytes string) int {
	for at < len(f.Src) && strings.IndexByte(bytes, f.Src[at]) >= 0 {
		at++
	}
	return at
}

// skipBetween is the offset of the next value or closing bracket inside brackets:
// blanks, line ends, commas and comments are left behind.
func (f *File) skipBetween(at int) int {
	for {
		at = f.skip(at, " \t\r\n,")
		if at >= len(f.Src) || f.Src[at] != '#' {
			return at
		}
		if end := bytes.IndexByte(f.Src[at:], '\n'); end >= 0 {
			at += end
		} else {
			at = len(f.Src)
		}
	}
}

// breaksLine reports a line end between two offsets.
func (f *File) breaksLine(from, to int) bool {
	return bytes.IndexByte(f.Src[from:to], '\n') >= 0
}
