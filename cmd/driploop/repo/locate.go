package repo

import (
	"context"
	"fmt"
	"path/filepath"
	"strings"
)

// place is where a workspace lies in a repository.
type place struct {
	git     git
	top     string // the top folder of the work tree; "" where bare
	prefix  string // from the top of the repository to the workspace: "" or "demo/"
	bare    bool   // without a work tree, and so without anything staged
	foreign bool   // in another repository than the environment points at
}

// locate finds the repository of root, an absolute path without symbolic links.
func locate(ctx context.Context, root string) (place, error) {
	own := alone(root)
	top, err := own.top(ctx)
	if pointed() {
		if p, ok, err := locatePointed(ctx, root, top); ok || err != nil {
			return p, err
		}
	}
	var p place
	if err != nil {
		p, err = locateBare(ctx, root, err)
	} else {
		p, err = below(own, top, root)
	}
	p.foreign = pointed()
	return p, err
}

// locatePointed looks where the environment points. It is not ok where root
// belongs to another repository, whose top is own ("" where root has none).
func locatePointed(ctx context.Context, root, own string) (p place, ok bool, err error) {
	here := inherited()
	top, err := here.top(ctx)
	if err != nil {
		// A hook of a bare repository runs inside it, with GIT_DIR=".".
		out, bareErr := here.run(ctx, doingFind(""), "rev-parse", "--is-bare-repository")
		if bareErr != nil || out != "true\n" {
			return place{}, false, err
		}
		return place{git: here, bare: true}, own == "", nil
	}
	if own != "" && own != top {
		return place{}, false, nil
	}
	p, err = below(here, top, root)
	return p, err == nil, err
}

// locateBare takes root for a bare repository, where it is one and does not lie
// in the work tree of another: there it may have come with a pull request. err
// is why root is in no work tree.
func locateBare(ctx context.Context, root string, err error) (place, error) {
	if _, inside := alone(filepath.Dir(root)).top(ctx); inside == nil {
		return place{}, err
	}
	// With the setting lifted git still checks who owns the repository, which it
	// does not once --git-dir names it.
	look := alone(root)
	look.where = []string{"-c", "safe.bareRepository=all"}
	out, bareErr := look.run(ctx, doingFind(root), "rev-parse", "--is-bare-repository", "--absolute-git-dir")
	if bareErr != nil {
		return place{}, bareErr
	}
	if out != "true\n"+filepath.ToSlash(root)+"\n" {
		return place{}, err
	}
	bare := alone(root)
	bare.where = []string{"--git-dir=" + root}
	return place{git: bare, bare: true}, nil
}

// below is the place of root in the work tree at top.
func below(g git, top, root string) (place, error) {
	rel, err := filepath.Rel(top, root)
	if err != nil || !filepath.IsLocal(rel) {
		return place{}, &Refusal{Doing: doingFind(root), Says: "its work tree is at " + clean(top)}
	}
	if rel == "." {
		return place{git: g, top: top}, nil
	}
	return place{git: g, top: top, prefix: filepath.ToSlash(rel) + "/"}, nil
}

// doingFind says in errors whose repository is looked for; "" is the one that the
// environment points at.
func doingFind(dir string) string {
	if dir == "" {
		return "find the repository that GIT_DIR, GIT_INDEX_FILE or the like point at"
	}
	return fmt.Sprintf("find the repository of %q", dir)
}

// top is the top folder of the work tree, without symbolic links.
func (g git) top(ctx context.Context) (string, error) {
	out, err := g.run(ctx, doingFind(g.dir), "rev-parse", "--show-toplevel")
	if err != nil {
		return "", err
	}
	return filepath.EvalSymlinks(filepath.FromSlash(strings.TrimSuffix(out, "\n")))
}
