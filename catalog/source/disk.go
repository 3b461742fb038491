package source

import (
	"fmt"
	"io"
	"io/fs"
	"os"
	"path"
	"sort"
	"strings"
	"syscall"
)

// disk is the tree below a folder. All access goes through os.Root, so that no
// link leads out of it.
type disk struct{ root *os.Root }

// Disk is the tree of the files below a folder as they are now. Folders whose
// name begins with a dot are left out, .git among them. Links, pipes, sockets and
// devices are listed with a reason in Skip, and folders behind links not entered.
func Disk(root string) (Tree, error) {
	r, err := os.OpenRoot(root)
	if err != nil {
		return nil, fmt.Errorf("opening the folder %s: %w", root, err)
	}
	return &disk{r}, nil
}

// Name is "worktree".
func (d *disk) Name() string { return "worktree" }

// Files lists the tree. A folder that cannot be listed is an error, for a plan in
// it would be passed over in silence.
func (d *disk) Files() ([]Entry, error) {
	var all []Entry
	for folders := []string{"."}; len(folders) > 0; {
		last := len(folders) - 1
		folder := folders[last]
		folders = folders[:last]
		items, err := d.list(folder)
		if err != nil {
			return nil, fmt.Errorf("listing the folder %s: %w", folder, err)
		}
		for _, item := range items {
			name := path.Join(folder, item.Name())
			switch {
			case !item.IsDir():
				all = append(all, Entry{Path: name, Skip: skipReason(item.Type())})
			case !strings.HasPrefix(item.Name(), "."):
				folders = append(folders, name)
			}
		}
	}
	sort.Slice(all, func(i, j int) bool { return all[i].Path < all[j].Path })
	return all, nil
}

func (d *disk) list(folder string) ([]fs.DirEntry, error) {
	f, err := d.root.Open(folder)
	if err != nil {
		return nil, err
	}
	defer f.Close()
	return f.ReadDir(-1)
}

// Read returns the bytes of an entry. What the listing saw may have been replaced
// since, so the open file is looked at again, and opening never waits for the
// other end of a pipe.
func (d *disk) Read(e Entry) ([]byte, error) {
	if e.Skip != "" {
		return nil, fmt.Errorf("%s is not read: it %s", e.Path, e.Skip)
	}
	f, err := d.root.OpenFile(e.Path, os.O_RDONLY|syscall.O_NONBLOCK, 0)
	if err != nil {
		return nil, fmt.Errorf("opening %s: %w", e.Path, err)
	}
	defer f.Close()
	info, err := f.Stat()
	if err != nil {
		return nil, fmt.Errorf("looking at %s: %w", e.Path, err)
	}
	if reason := skipReason(info.Mode().Type()); reason != "" {
		return nil, fmt.Errorf("%s is not read: it %s", e.Path, reason)
	}
	if info.Size() > MaxFile {
		return nil, &TooBig{e.Path, info.Size()}
	}
	return readCapped(f, e.Path)
}

// readCapped reads a file that may be longer than it said, because it grows or
// because the system makes it up.
func readCapped(r io.Reader, path string) ([]byte, error) {
	src, err := io.ReadAll(io.LimitReader(r, MaxFile+1))
	if err != nil {
		return nil, fmt.Errorf("reading %s: %w", path, err)
	}
	if len(src) > MaxFile {
		return nil, &TooBig{Path: path}
	}
	return src, nil
}

// skipReason says why a file of that type is not read, "" for a plain one.
func skipReason(t fs.FileMode) string {
	switch {
	case t == 0:
		return ""
	case t&fs.ModeSymlink != 0:
		return "is a symbolic link"
	case t&fs.ModeDir != 0:
		return "is a folder"
	case t&fs.ModeNamedPipe != 0:
		return "is a pipe"
	case t&fs.ModeSocket != 0:
		return "is a socket"
	case t&fs.ModeDevice != 0:
		return "is a device"
	}
	return "is no plain file"
}
