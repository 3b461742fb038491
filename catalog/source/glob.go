package source

import (
	"path"
	"strings"
)

// Match reports whether a slash-separated path matches a pattern, in which * and ?
// stand for anything within one folder and ** for any number of folders.
func Match(pattern, name string) bool {
	return matchParts(strings.Split(pattern, "/"), strings.Split(name, "/"))
}

// matchParts goes back to the last ** only: what an earlier one could take more of,
// the last one can take as well. So the work does not grow with the ways to share
// the folders out among many of them.
func matchParts(pattern, name []string) bool {
	last, taken := -1, 0 // the last ** met, and the parts of the name up to its end
	p, n := 0, 0
	for n < len(name) {
		switch {
		case p < len(pattern) && pattern[p] == "**":
			last, taken = p, n
			p++
		case p < len(pattern) && matchPart(pattern[p], name[n]):
			p++
			n++
		case last >= 0:
			taken++
			p, n = last+1, taken
		default:
			return false
		}
	}
	for p < len(pattern) && pattern[p] == "**" {
		p++
	}
	return p == len(pattern)
}

// matchPart matches one folder or file name; a pattern that is none matches nothing.
func matchPart(pattern, name string) bool {
	ok, err := path.Match(pattern, name)
	return ok && err == nil
}
