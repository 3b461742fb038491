package repo

import (
	"context"
	"fmt"
	"path/filepath"
	"strings"
)

// Hooks is the folder in which git looks for the hooks of this work tree.
type Hooks struct {
	Dir string // absolute; it need not exist
	// Shared says that the user's or the machine's configuration names the folder,
	// so that its hooks run in other repositories too.
	Shared bool
}

// Hooks finds the folder of the hooks: core.hooksPath, which counts from the top
// of the work tree where it is relative, else hooks in the folder that linked work
// trees have in common.
// Errors: a *Refusal in a bare repository, where nothing is committed.
func (r *Repo) Hooks(ctx context.Context) (Hooks, error) {
	const doing = "find the folder of the hooks"
	if r.bare {
		return Hooks{}, &Refusal{Doing: doing, Says: "in a bare repository nothing is committed, so none would run"}
	}
	// The last value is the one that every call here is given (settings).
	out, err := r.git.run(ctx, doing, "config", "--show-scope", "--type=path", "-z", "--get-all", "core.hooksPath")
	if err != nil {
		return Hooks{}, err
	}
	set := strings.Split(out, "\x00")
	if n := len(set) - 5; n >= 0 { // SCOPE VALUE, SCOPE VALUE of ours, and what is behind the last zero
		scope, dir := set[n], set[n+1]
		if dir == "" {
			return Hooks{}, &Refusal{Doing: doing, Says: "core.hooksPath is empty", Do: "set it to a folder, or unset it"}
		}
		if !filepath.IsAbs(dir) {
			dir = filepath.Join(r.top, dir)
			if err := r.ledOut(doing, dir); err != nil {
				return Hooks{}, err
			}
		}
		return Hooks{Dir: dir, Shared: scope == "global" || scope == "system"}, nil
	}
	out, err = r.git.run(ctx, doing, "rev-parse", "--git-common-dir")
	if err != nil {
		return Hooks{}, err
	}
	dir := filepath.FromSlash(strings.TrimSuffix(out, "\n"))
	if !filepath.IsAbs(dir) {
		dir = filepath.Join(r.git.dir, dir)
	}
	dir, err = filepath.Abs(filepath.Join(dir, "hooks"))
	return Hooks{Dir: dir}, err
}

// ledOut refuses a folder in the work tree that is, or lies behind, a link out of it:
// links come with the files of strangers.
func (r *Repo) ledOut(doing, dir string) error {
	real, rest, err := existing(dir)
	if err != nil {
		return fmt.Errorf("%s: %w", doing, err)
	}
	if within(r.top, dir) && !within(r.top, filepath.Join(real, rest)) {
		return &Refusal{Doing: doing, Says: fmt.Sprintf("%q, where core.hooksPath points, is a link out of the work tree", dir)}
	}
	return nil
}

func within(top, dir string) bool {
	rel, err := filepath.Rel(top, dir)
	return err == nil && filepath.IsLocal(rel)
}

// Below is the path from the top of the work tree to the workspace, with slashes;
// "." where the workspace is the top.
func (r *Repo) Below() string {
	if r.prefix == "" {
		return "."
	}
	return strings.TrimSuffix(r.prefix, "/")
}
