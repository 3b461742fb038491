package source

import "bytes"

// markers are the line starts that a merge leaves where both sides changed the
// same lines, in the order in which they follow each other.
var markers = []string{"<<<<<<<", "|||||||", "=======", ">>>>>>>"}

// withConflicts adds a problem for each conflict that a merge left in the file.
// It looks at lines, not at the tree, because a conflict inside a text of several
// lines is TOML like any other. What the parser had to say about a line with a
// marker is dropped.
func withConflicts(f *File, problems []Problem) []Problem {
	stopped, marked := map[int]bool{}, map[int]bool{}
	for _, p := range problems {
		stopped[p.At.Line()] = true
	}
	var kept, conflicts []Problem
	open := false
	for i := range f.lines {
		at, marker := markerOn(f, i+1)
		if marker == "" {
			continue
		}
		switch {
		case marker == "<<<<<<<":
			open = true
			conflicts = append(conflicts, conflictAt(at))
		case open:
			if last := &conflicts[len(conflicts)-1]; len(last.Also) < len(markers)-1 {
				last.Also = append(last.Also, at)
			}
			open = marker != ">>>>>>>"
		case marker == ">>>>>>>", stopped[i+1]:
			// A single ruler of equal signs in a text is no marker.
			conflicts = append(conflicts, conflictAt(at))
		default:
			continue
		}
		marked[i+1] = true
	}
	for _, p := range problems {
		if !marked[p.At.Line()] {
			kept = append(kept, p)
		}
	}
	return append(kept, conflicts...)
}

func conflictAt(at Place) Problem {
	return Problem{Kind: Merge, At: at,
		Says: "a merge left both sides of a conflict here",
		Do:   "keep the lines that hold and delete the marker lines"}
}

// markerOn finds the conflict marker on a 1-based line: seven equal signs with
// nothing behind, or seven of the others with nothing or a blank behind.
func markerOn(f *File, line int) (Place, string) {
	from := int(f.lines[line-1])
	rest := f.Src[from:]
	for _, m := range markers {
		if !bytes.HasPrefix(rest, []byte(m)) {
			continue
		}
		text := f.LineText(line)
		behind := text[len(m):]
		if behind == "" || behind[0] == ' ' && m != "=======" {
			return f.stretch(from, from+len(text)), m
		}
	}
	return Place{}, ""
}
