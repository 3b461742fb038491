package main

import (
	"context"
	"crypto/rand"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path"
	"time"

	"driploop/bom"
	"driploop/catalog"
	"driploop/cmd/driploop/filled"
	"driploop/cmd/driploop/repo"
	"driploop/cmd/driploop/show"
	"driploop/rules"
)

// issuing are the flags of pick --issue and pick --read.
type issuing struct {
	do, more bool
	by, read string
}

// mostInitials keeps a sheet one that can be read again: lines of files have a limit.
const mostInitials = 64

// refuse says which flags do not go together.
func (i *issuing) refuse(s *shared) error {
	switch {
	case i.do && i.read != "":
		return errors.New("--issue books what the list says, --read what a filled sheet says; one of the two")
	case !i.do && i.read == "" && (i.more || i.by != ""):
		return errors.New("--more and --by belong to --issue and --read")
	case !i.do && i.read == "":
		return nil
	case s.at != "":
		return fmt.Errorf("%s writes into the folder and cannot be used with --at %s", i.name(), s.at)
	case s.as != "" || s.out != "":
		return fmt.Errorf("%s writes a sheet of its own; --as and --out do not go with it", i.name())
	case i.do && i.by == "":
		return errors.New("who takes the goods? --by has the initials")
	case len(i.by) > mostInitials:
		return fmt.Errorf("--by has %d bytes; initials have at most %d", len(i.by), mostInitials)
	}
	return nil
}

func (i *issuing) name() string {
	if i.do {
		return "--issue"
	}
	return "--read"
}

// issue books what the pick list says as taken, in a sheet of the job's own.
func (c *Command) issue(ctx context.Context, firm *rules.Firm, p *show.Pick, how issuing, page show.Page) error {
	is := &show.Issue{Pick: p.Pick, On: c.moment(firm.Stock), By: how.by, Stock: firm.Stock}
	file, err := c.issueFile(p, how)
	if err != nil {
		return err
	}
	if is.Empty() {
		return fmt.Errorf("nothing lies ready for %s that is still to be issued", p.Job)
	}
	if err := c.writeSheets(firm, []newSheet{{file, is.TOML()}}); err != nil {
		return err
	}
	return c.emit(is.Text(page, file, c.seen(ctx, file)))
}

// issueFile is the file of the next issue, where one may be made.
func (c *Command) issueFile(p *show.Pick, how issuing) (string, error) {
	root, err := os.OpenRoot(c.shared.root)
	if err != nil {
		return "", err
	}
	defer root.Close()
	file, err := nextIssue(root, p.Job, how.more)
	if err == nil && !how.more && given(p) {
		err = fmt.Errorf("goods were issued to %s already, see the sheets that name it; --more issues what is still claimed", p.Job)
	}
	return file, err
}

// pickRead books what a filled pick sheet says was taken.
func (c *Command) pickRead(ctx context.Context, firm *rules.Firm, p *show.Pick, d *bom.Demand, how issuing, form string, page show.Page) error {
	file, err := c.issueFile(p, how)
	if err != nil {
		return err
	}
	b, err := readFilled(how.read, form)
	if err != nil {
		return err
	}
	t, err := filled.Pick(b, ground(firm, how.by), p.Pick, d)
	if err != nil {
		return c.faulty(how.read, err)
	}
	t.On = c.moment(firm.Stock)
	if err := c.writeSheets(firm, []newSheet{{file, t.TOML()}}); err != nil {
		return err
	}
	return c.emit(t.Text(page, file, c.seen(ctx, file)))
}

func given(p *show.Pick) bool {
	for _, is := range p.Given {
		if is.Net.Each > 0 || is.Net.Length > 0 {
			return true
		}
	}
	return false
}

// moment is now as TOML writes a local time. With --today it is that day, and where
// the books know of a time on it, the second after the last: what is taken was there
// with all that happened before, and a bare date would come first.
func (c *Command) moment(s *catalog.Stock) string {
	if c.shared.today == "" {
		return c.Now().Format(localTime)
	}
	if !s.Latest.Clock {
		return c.shared.today
	}
	day, sec := s.Latest.Day, min(s.Latest.Sec+1, 24*60*60-1)
	return time.Date(day.Year, time.Month(day.Month), day.Day, 0, 0, sec, 0, time.UTC).Format(localTime)
}

const localTime = "2006-01-02T15:04:05"

// nextIssue is the file of the job's next issue: the first, or with more the next
// that is not there.
func nextIssue(root *os.Root, job string, more bool) (string, error) {
	for n := 1; ; n++ {
		file := fmt.Sprintf("stock/issue/%s-%d.toml", job, n)
		_, err := root.Lstat(file)
		switch {
		case errors.Is(err, fs.ErrNotExist):
			return file, nil
		case err != nil:
			return "", fmt.Errorf("looking for %s: %w", file, cause(err))
		case !more:
			return "", fmt.Errorf("%s was issued already: %s is there; --more issues what is still claimed", job, file)
		}
	}
}

// seen says which branch the issue was made on, and what it cannot know.
func (c *Command) seen(ctx context.Context, file string) string {
	const blind = " An issue made elsewhere is not seen; it would be in a file of the same name, and git stops where the two meet."
	r, err := repo.Open(ctx, c.shared.root)
	if err != nil {
		return "Seen: this folder alone; git knows of no repository here." + blind
	}
	defer r.Close()
	branch, err := r.Branch(ctx)
	switch {
	case err != nil:
		return "Seen: this folder alone; git does not say on which branch it is." + blind
	case branch == "":
		return "Seen: a commit that is checked out on no branch." + blind
	}
	return "Seen: branch " + branch + "." + blind
}

// writeNew writes a file that is not there yet, whole or not at all: a reader, or a
// machine that loses power, finds all of it under its name or nothing. One that
// appeared meanwhile is left as it is, and that is an error.
func writeNew(root *os.Root, file string, b []byte) error {
	if err := root.MkdirAll(path.Dir(file), 0o777); err != nil {
		return err
	}
	beside := path.Join(path.Dir(file), "."+path.Base(file)+"."+rand.Text()[:8])
	f, err := root.OpenFile(beside, os.O_WRONLY|os.O_CREATE|os.O_EXCL, 0o666)
	if err != nil {
		return err
	}
	defer root.Remove(beside)
	_, err = f.Write(b)
	if err = errors.Join(err, f.Sync(), f.Close()); err != nil {
		return err
	}
	if err := root.Link(beside, file); err != nil {
		return err
	}
	return syncFolder(root, path.Dir(file))
}

// syncFolder makes a new name in a folder last.
func syncFolder(root *os.Root, dir string) error {
	d, err := root.Open(dir)
	if err != nil {
		return err
	}
	return errors.Join(d.Sync(), d.Close())
}
