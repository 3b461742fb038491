package source

import (
	"bytes"
	"errors"
	"fmt"
	"slices"
)

// Dress lays a file out as all files of its sort are: tables and keys in the order
// in which read asks for them, one blank line between tables of different names,
// no indents, each value in its usual spelling. It moves whole lines and edits only
// inside the strings that it spells otherwise, so comments and columns stay as they
// were written:
//
//   - A comment that touches a key or header from above, or stands behind it, moves
//     with it; so does one that touches it from below and nothing else. A comment
//     that touches nothing moves with what follows it. The first comment of the file
//     never moves where a blank line follows it.
//   - Tables of one name keep their order, and their blank lines, so rows and the
//     tables below them stay together. Keys that nobody asked for come last.
//   - Line ends are those of the file; a byte order mark is taken off.
//
// read is the function that reads files of that sort. What is written is proved
// before it is returned: it holds the same values, every comment, and would be left
// as it is by a second call. A file with problems of syntax is not dressed; they are
// returned. An error means that the proof failed, which is a defect of this package.
func Dress(path string, src []byte, read func(*Doc) []Problem) ([]byte, []Problem, error) {
	before, problems, err := undress(path, src, read)
	if len(problems) > 0 || err != nil {
		return nil, problems, err
	}
	out := before.dressed()
	after, problems, err := undress(path, out, read)
	if err != nil {
		return nil, nil, err
	}
	if len(problems) > 0 {
		return nil, nil, fmt.Errorf("line %d of what it would become: %s", problems[0].At.Line(), problems[0].Says)
	}
	if err := before.proves(after); err != nil {
		return nil, nil, err
	}
	if !bytes.Equal(after.dressed(), out) {
		return nil, nil, errors.New("what it would become would be laid out in yet another way")
	}
	return out, nil, nil
}

// draft is a file taken apart: what it means, and the lines that say so.
type draft struct {
	doc      *Doc
	layout   *layout
	problems int // that reading it met
	comments []string
	items    []item
	head     []string   // the comment at the top of the file, which never moves
	tail     [][]string // comments behind all else
	lineEnd  string
}

// undress reads a file and takes it apart. What Parse has against it is returned,
// but for a byte order mark.
func undress(path string, src []byte, read func(*Doc) []Problem) (*draft, []Problem, error) {
	f := &File{Path: path, Src: bytes.TrimPrefix(src, byteOrderMark)}
	doc, problems := Parse(f)
	if len(problems) > 0 || doc.Partial {
		return nil, problems, nil
	}
	doc.layout = &layout{map[*Node][]string{}, map[*Node]spelling{}}
	d := &draft{doc: doc, layout: doc.layout, problems: len(read(doc))}
	if err := d.takeApart(); err != nil {
		return nil, nil, err
	}
	return d, nil, nil
}

// proves returns why after does not say what w says.
func (d *draft) proves(after *draft) error {
	if at, same := d.layout.same(d.doc.Root, after.doc.Root); !same {
		return fmt.Errorf("line %d would mean something else", at.Line())
	}
	if d.problems != after.problems {
		return fmt.Errorf("reading it would meet %d problems instead of %d", after.problems, d.problems)
	}
	slices.Sort(d.comments)
	slices.Sort(after.comments)
	if !slices.Equal(d.comments, after.comments) {
		return errors.New("a comment would be lost or changed")
	}
	return nil
}

// same compares two trees and returns the first place of the first that differs.
// Keys may stand in another order only where their table has one of its own;
// strings may differ where both are spellings of one value.
func (l *layout) same(a, b *Node) (Place, bool) {
	if a.Kind != b.Kind || len(a.Keys) != len(b.Keys) || len(a.Items) != len(b.Items) {
		return a.At, false
	}
	ordered := l.ranks[a] == nil || a.made == asValue
	for i, k := range a.Keys {
		other := b.Get(k.Name)
		if other == nil || ordered && b.Keys[i] != other {
			return k.At, false
		}
		if at, same := l.same(k.Value, other.Value); !same {
			return at, false
		}
	}
	for i, item := range a.Items {
		if at, same := l.same(item, b.Items[i]); !same {
			return at, false
		}
	}
	return a.At, l.sameScalar(a, b)
}

func (l *layout) sameScalar(a, b *Node) bool {
	if a.Str != b.Str {
		s, spelled := l.spells[a]
		return spelled && s.same(b)
	}
	return a.Int == b.Int && a.Float == b.Float && a.Bool == b.Bool && a.Time.Equal(b.Time)
}
