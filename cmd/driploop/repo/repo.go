// Package repo reads a workspace out of git: a commit, or what is staged for the
// next one, as a source.Tree.
//
// The repository is not trusted. Its files may come from a stranger's pull
// request and its .git folder from an archive, so git is started without a
// shell, with the settings in git.go that keep it from running any program the
// repository names and from reaching for the network, in the folder the user
// works in and nowhere below it. Files are listed in one call and read by object
// id, never by name: names may hold newlines, quotes or a leading dash.
//
// The way through the package: Open finds the repository (locate.go), At lists a
// tree (tree.go) and Change compares two (change.go), reading its files goes through one long-lived git (blobs.go),
// and what git refuses comes back as a *Refusal (refusal.go).
package repo

import (
	"context"
	"errors"
	"fmt"
	"io/fs"
	"path/filepath"
)

// Index is the name of the revision that stands for what is staged.
const Index = ":index"

// Repo is the repository that holds a workspace.
type Repo struct {
	place
	blobs *blobs
}

// Open finds the repository of the workspace in the folder root, which is the
// top of a work tree, a folder below it, or a bare repository. Where the
// environment points git at a repository (GIT_DIR, GIT_INDEX_FILE and the like,
// as in a hook) and root belongs to it, that holds; for another repository these
// variables are left out. A folder that is not there stands for the one of that
// name in a revision.
//
// Ending ctx ends the git that reads files. The caller closes the Repo.
// Errors: a *Refusal where git finds no usable repository, exec.ErrNotFound
// where git is not installed.
func Open(ctx context.Context, root string) (*Repo, error) {
	dir, rest, err := existing(root)
	if err != nil {
		return nil, fmt.Errorf("find the repository of %q: %w", root, err)
	}
	found, err := locate(ctx, dir)
	switch {
	case err != nil && rest != "":
		return nil, fmt.Errorf("find the repository of %q: %w", root, fs.ErrNotExist)
	case err != nil:
		return nil, err
	}
	if rest != "" {
		found.prefix += filepath.ToSlash(rest) + "/"
	}
	return &Repo{place: found, blobs: newBlobs(ctx, found.git)}, nil
}

// existing takes root apart: the last folder on the way that is there, without
// symbolic links, and the rest. A revision may have a folder that the work tree has
// not, or not yet.
func existing(root string) (dir, rest string, err error) {
	if dir, err = filepath.Abs(root); err != nil {
		return "", "", err
	}
	for {
		real, err := filepath.EvalSymlinks(dir)
		if err == nil {
			return real, rest, nil
		}
		up := filepath.Dir(dir)
		if !errors.Is(err, fs.ErrNotExist) || up == dir {
			return "", "", err
		}
		dir, rest = up, filepath.Join(filepath.Base(dir), rest)
	}
}

// Close ends the git that reads files. Trees of this Repo cannot be read afterwards.
func (r *Repo) Close() error {
	r.blobs.close()
	return nil
}
