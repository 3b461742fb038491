package main

import (
	"context"
	"errors"
	"fmt"

	"github.com/spf13/cobra"

	"driploop/catalog/source"
	"driploop/cmd/driploop/repo"
	"driploop/cmd/driploop/show"
	"driploop/rules"
)

func (c *Command) redline() *cobra.Command {
	var terms show.RedlineTerms
	cmd := &cobra.Command{
		Use:   "redline [BASE [HEAD]]",
		Short: "what a change means for the install",
		Long: `Says what is other in HEAD than in BASE, what of it is work, what facts and what
rulers, and what follows: figures that moved, findings that are new or gone and by
what, waivers, quantities, cost, and which other jobs come to be short of goods.
BASE is a revision; without one it is where HEAD left the branch that it follows, or
the default branch. HEAD is a revision, :index, or without one the working tree.
Both are looked at with the same day. The status is 1 where a hold stands on a plan
that the change concerns, by the rulers of BASE or by those of HEAD.`,
		Example: "  driploop redline HEAD\n  driploop redline HEAD :index --as json",
		RunE: func(cmd *cobra.Command, args []string) error {
			form, err := c.form("text", "json", "markdown")
			if err != nil {
				return err
			}
			page, err := c.page()
			if err != nil {
				return err
			}
			switch {
			case len(args) > 2:
				return fmt.Errorf("redline compares two revisions, %d were named", len(args))
			case c.shared.at != "":
				return errors.New("--at: redline takes the revisions as its arguments, first BASE, then HEAD")
			case c.shared.limitsFrom != "":
				return errors.New("--limits-from: redline holds HEAD against the rulers of BASE by itself")
			}
			res, err := c.compare(cmd.Context(), args)
			if err != nil {
				return err
			}
			c.held = res.Gate.Held
			b, err := redlineAs(res, form, page, terms)
			if err != nil {
				return failure{err}
			}
			return c.emit(b)
		},
	}
	cmd.Flags().BoolVar(&terms.NoPrices, "no-prices", false, "leave out what things cost, for those who are not to know")
	cmd.Flags().StringVar(&terms.Mark, "mark", "", "`NAME` by which a comment in Markdown is found again, like the number of the pull request")
	return cmd
}

func redlineAs(r *rules.Redline, form string, page show.Page, t show.RedlineTerms) ([]byte, error) {
	switch form {
	case "json":
		return show.RedlineJSON(r, version, t)
	case "markdown":
		t.Comment = true
		return show.NewRedlinePage(r, t).Markdown(t.Mark), nil
	}
	return show.NewRedlinePage(r, t).Text(page), nil
}

// compare finds the two states and compares them.
func (c *Command) compare(ctx context.Context, args []string) (*rules.Redline, error) {
	today, err := c.today()
	if err != nil {
		return nil, err
	}
	r, err := repo.Open(ctx, c.shared.root)
	if err != nil {
		return nil, err
	}
	defer r.Close()
	s, err := c.sides(ctx, r, args)
	if err != nil {
		return nil, err
	}
	o := rules.Options{Today: today, Progress: c.progress()}
	if c.shared.stockFrom != "" {
		if o.StockFrom, err = r.At(ctx, c.shared.stockFrom); err != nil {
			return nil, fmt.Errorf("--stock-from: %w", err)
		}
	}
	res, err := rules.Compare(ctx, s.base, s.head, o)
	if err != nil {
		return nil, err
	}
	res.Base, res.BaseID, res.Head, res.HeadID = s.baseName, s.baseID, s.headName, s.headID
	res.Notices = append(s.notices, res.Notices...)
	if c.shared.stockFrom != "" {
		res.Notices = append(res.Notices, "The stock of "+c.shared.stockFrom+" is used for both.")
	}
	return res, nil
}

// sides are the two states that are compared.
type sides struct {
	base, head         source.Tree
	baseName, headName string
	baseID, headID     string
	notices            []string
}

func (c *Command) sides(ctx context.Context, r *repo.Repo, args []string) (*sides, error) {
	s := &sides{headName: "worktree"}
	at := "HEAD" // the commit that the head stands on
	if len(args) > 1 {
		s.headName = args[1]
	}
	var err error
	switch {
	case len(args) < 2:
		if err := c.begins(); err != nil {
			return nil, err
		}
		disk, err := source.Disk(c.shared.root)
		if err != nil {
			return nil, fmt.Errorf("opening the workspace: %w", err)
		}
		s.head = named{disk}
	default:
		if s.head, err = r.At(ctx, args[1]); err != nil {
			return nil, err
		}
		if args[1] != repo.Index {
			at = args[1]
			if s.headID, err = r.Commit(ctx, at); err != nil {
				return nil, err
			}
		}
	}
	if len(args) > 0 {
		s.baseName = args[0]
		if s.baseID, err = r.Commit(ctx, args[0]); err == nil {
			c.movedOn(ctx, r, s, at)
		}
	} else {
		err = c.leftAt(ctx, r, s, at)
	}
	if err != nil {
		return nil, err
	}
	s.base, err = r.At(ctx, s.baseID)
	return s, err
}

// leftAt finds where the head left the branch that it follows, or the default branch.
func (c *Command) leftAt(ctx context.Context, r *repo.Repo, s *sides, at string) error {
	branch, err := r.Upstream(ctx)
	if err == nil && branch == "" {
		branch, err = r.DefaultBranch(ctx)
	}
	if err != nil {
		return err
	}
	if branch == "" {
		return errors.New("there is no branch to compare with; name BASE, like redline HEAD~1")
	}
	if s.baseID, err = r.MergeBase(ctx, branch, at); err != nil {
		return err
	}
	s.baseName = branch
	if tip, err := r.Commit(ctx, branch); err == nil && tip != s.baseID {
		s.baseName = "where it left " + branch
		s.notices = append(s.notices, fmt.Sprintf("%s has moved on since: what it changed meanwhile is not seen here. Merge it and compare again before this one is merged.", branch))
	}
	return nil
}

// movedOn says where a base that was named holds what the head has not.
func (c *Command) movedOn(ctx context.Context, r *repo.Repo, s *sides, at string) {
	left, err := r.MergeBase(ctx, s.baseID, at)
	if err != nil || left == s.baseID {
		return
	}
	s.notices = append(s.notices, fmt.Sprintf("%s has moved on since the head left it at %s: what it changed meanwhile shows here as taken back. Merge it first, or compare with %s.", s.baseName, left[:12], left[:12]))
}

// named is a folder whose files are named by their content, as git names them, so that
// what is the same in a revision is known without reading that.
type named struct{ source.Tree }

// Files lists the files with the names of their contents. A file that cannot be read
// has none.
func (n named) Files() ([]source.Entry, error) {
	entries, err := n.Tree.Files()
	if err != nil {
		return nil, err
	}
	for i := range entries {
		e := &entries[i]
		if e.Skip != "" {
			continue
		}
		if src, err := n.Tree.Read(*e); err == nil {
			e.ID = blobID(src, 40)
		}
	}
	return entries, nil
}
