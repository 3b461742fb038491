package source

import "fmt"

// MaxFile is the largest file that is read, in bytes.
const MaxFile = 256 << 10

// Tree lists files and reads them: a folder on disk or a revision in git.
type Tree interface {
	// Name says which tree it is: "worktree", or a revision.
	Name() string
	// Files lists all files below the root in order of path, those that must
	// not be read included, with the reason in Skip.
	Files() ([]Entry, error)
	// Read returns the bytes of one entry, or *TooBig above MaxFile.
	Read(Entry) ([]byte, error)
}

// Entry is one file of a tree.
type Entry struct {
	Path string // slash-separated, relative to the root of the tree
	ID   string // a name of the content that equal contents share, "" where unknown
	Skip string // why it is not read: "is a symbolic link"; "" for a plain file
}

// TooBig is the error for a file above MaxFile.
type TooBig struct {
	Path string
	Size int64 // bytes, or 0 where only "more than the cap" is known
}

func (e *TooBig) Error() string {
	return fmt.Sprintf("%s is larger than the %d KiB that a file may have", e.Path, MaxFile>>10)
}
