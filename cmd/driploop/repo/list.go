package repo

import (
	"cmp"
	"context"
	"fmt"
	"path"
	"path/filepath"
	"slices"
	"strings"

	"driploop/catalog/source"
)

// row is one line of a listing.
type row struct {
	mode, id, path string
	skip           string // known while listing
}

// Why a file of the index is not read.
const (
	unmerged  = "is unmerged (stage 1-3)"
	announced = "is not staged yet (intent to add)"
)

// rows lists all files of a revision, or of the index.
func (r *Repo) rows(ctx context.Context, rev string) ([]row, error) {
	if rev == Index {
		return r.listIndex(ctx)
	}
	return r.listCommit(ctx, rev)
}

// listCommit lists all files of a commit.
func (r *Repo) listCommit(ctx context.Context, rev string) ([]row, error) {
	id, err := r.commit(ctx, rev)
	if err != nil {
		return nil, err
	}
	out, err := r.git.run(ctx, fmt.Sprintf("list the files of %q", rev), "ls-tree", "-r", "-z", "--full-tree", id)
	if err != nil {
		return nil, r.git.adviseObjects(ctx, err)
	}
	return parseRows(out, func(f []string) row { return row{mode: f[0], id: f[2]} })
}

// listIndex lists all files that are staged, and those that are being merged.
func (r *Repo) listIndex(ctx context.Context) ([]row, error) {
	if err := r.needIndex(); err != nil {
		return nil, err
	}
	out, err := r.git.run(ctx, "list the staged files", "ls-files", "-s", "-z", "--full-name", "--", ":/")
	if err != nil {
		return nil, err
	}
	rows, err := parseRows(out, func(f []string) row {
		if f[2] != "0" {
			return row{mode: f[0], id: f[1], skip: unmerged}
		}
		return row{mode: f[0], id: f[1]}
	})
	if err != nil {
		return nil, err
	}
	return rows, r.markUnstaged(ctx, rows)
}

// needIndex refuses a bare repository: its empty index would pass for a workspace.
func (r *Repo) needIndex() error {
	if r.bare {
		return &Refusal{Doing: "list the staged files", Says: "a bare repository has nothing staged", Do: "name a revision"}
	}
	return nil
}

// parseRows reads lines "FIELD FIELD FIELD<tab>PATH<zero>".
func parseRows(out string, read func(fields []string) row) ([]row, error) {
	var rows []row
	for line := range strings.SplitSeq(out, "\x00") {
		if line == "" {
			continue // behind the last zero
		}
		head, name, ok := strings.Cut(line, "\t")
		fields := strings.Fields(head)
		if !ok || len(fields) != 3 {
			return nil, fmt.Errorf("list the files: git printed %q", line)
		}
		r := read(fields)
		r.path = name
		rows = append(rows, r)
	}
	return rows, nil
}

// emptyBlob leads from the id of an empty file to that of an empty tree, which
// every repository knows, for SHA-1 and SHA-256.
var emptyBlob = map[string]string{
	"e69de29bb2d1d6434b8b29ae775ad8c2e48c5391":                         "4b825dc642cb6eb9a060e54bf8d69288fbee4904",
	"473a0f4c3be8a93681a267e3b1e9a7dcda1185436fe141f7749120a303721813": "6ef19b41225c5369f1c104d45d8d85efa9b057b53b14b4b9b939dd74decc5321",
}

// plainDiff makes a diff a list of names and keeps it from running programs.
var plainDiff = []string{"--name-only", "-z", "--no-renames", "--no-ext-diff", "--no-textconv"}

// markUnstaged marks files that were only announced (git add --intent-to-add):
// the index lists them as empty, and an empty plan would pass where the real one
// fails. Truly empty files stay. git names the difference only in a diff.
func (r *Repo) markUnstaged(ctx context.Context, rows []row) error {
	emptyTree := ""
	for _, row := range rows {
		if tree, ok := emptyBlob[row.id]; ok && row.skip == "" {
			emptyTree = tree
		}
	}
	if emptyTree == "" {
		return nil
	}
	args := slices.Concat([]string{"diff-index", "--cached", "--ita-invisible-in-index"}, plainDiff, []string{emptyTree, "--"})
	out, err := r.git.run(ctx, "tell staged files from announced ones", args...)
	if err != nil {
		return err
	}
	staged := map[string]bool{}
	for name := range strings.SplitSeq(out, "\x00") {
		staged[name] = true
	}
	for i, row := range rows {
		if _, empty := emptyBlob[row.id]; empty && row.skip == "" && !staged[row.path] {
			rows[i].skip = announced
		}
	}
	return nil
}

// entries are the rows of the workspace, in order of path, each path once. As in
// source.Disk, folders whose name begins with a dot are left out.
func (r *Repo) entries(rows []row) []source.Entry {
	var in []source.Entry
	for _, row := range rows {
		if rel, ok := strings.CutPrefix(row.path, r.prefix); ok && !inDotFolder(rel) {
			in = append(in, source.Entry{Path: rel, ID: row.id, Skip: cmp.Or(row.skip, skip(row.mode, rel))})
		}
	}
	slices.SortStableFunc(in, func(a, b source.Entry) int { return strings.Compare(a.Path, b.Path) })
	var once []source.Entry
	for _, e := range in {
		if n := len(once); n > 0 && once[n-1].Path == e.Path {
			// The stages of a merge; a tree made by hand can hold a name twice.
			once[n-1].Skip = cmp.Or(once[n-1].Skip, "is listed more than once")
			continue
		}
		once = append(once, e)
	}
	return once
}

// inDotFolder reports a path through a folder whose name begins with a dot, "../" apart.
func inDotFolder(name string) bool {
	folders := strings.Split(path.Dir(name), "/")
	return slices.ContainsFunc(folders, func(f string) bool {
		return strings.HasPrefix(f, ".") && f != "." && f != ".."
	})
}

// skip is why an entry of this mode and path is not read, "" for a plain file.
func skip(mode, name string) string {
	switch {
	case path.Clean(name) != name || !filepath.IsLocal(name):
		return "has a path that no checkout can have" // "../x", from a tree made by hand
	case mode == "120000":
		return "is a symbolic link"
	case mode == "160000":
		return "is a submodule"
	case !strings.HasPrefix(mode, "100"):
		return "is no plain file (mode " + mode + ")"
	}
	return ""
}
