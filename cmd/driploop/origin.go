package main

import (
	"context"
	"crypto/sha1"
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"fmt"
	"os/exec"
	"strings"

	"driploop/bom"
	"driploop/catalog/source"
	"driploop/cmd/driploop/repo"
	"driploop/rules"
)

// madeFrom is the last sheet of every workbook: from which revision and files it was
// made, so that one that comes back filled in can be told from one that is out of
// date.
func (c *Command) madeFrom(ctx context.Context, firm *rules.Firm, plans []source.Entry) (bom.Sheet, error) {
	s := bom.Sheet{Key: "made-from", Name: "Made from", Title: "What this workbook was made from",
		Columns: []bom.Column{{Title: "what", Kind: bom.KindWords}, {Title: "is", Kind: bom.KindWords}}}
	add := func(key, what, is string) { s.Row(key, bom.WordsCell(what), bom.WordsCell(is)) }
	digests, err := firm.Digests()
	if err != nil {
		return s, err
	}
	add("workspace", "workspace", firm.Workspace.Name.Or("without a name"))
	add("version", "version of driploop", version)
	add("today", "the day gone by", firm.Today.String())
	revision, state := c.revision(ctx, firm, digests)
	add("revision", "revision in git", revision)
	add("state", "the files read", state)
	add("lengths", "lengths", map[bool]string{true: "ft", false: "m"}[firm.Workspace.Lengths.V == "ft"])
	add("currency", "currency", firm.Workspace.Currency.Or("not named"))
	add("profile", "limit profile of the workspace", firm.Workspace.Profile.Or("none"))
	from := firm.Origin()
	add("limits", "limits of", from.LimitsFrom)
	add("stock", "stock of", from.StockFrom)
	for _, d := range from.Differs {
		add("", "rulers", d)
	}
	for _, o := range firm.Overrides() {
		add("", "changed by the workspace", o)
	}
	for _, d := range digests {
		add("digest "+d.Kind, "digest of "+d.Kind+", "+fileCount(len(d.Files)), d.Sum)
	}
	for _, e := range plans {
		s.Row("plan "+e.Path, bom.WordsCell("plan"), bom.WordsCell(e.Path))
	}
	return s, nil
}

func fileCount(n int) string {
	if n == 1 {
		return "1 file"
	}
	return fmt.Sprintf("%d files", n)
}

// revision is the commit that was read, or that what was read stands on, and how the
// files read differ from it.
func (c *Command) revision(ctx context.Context, firm *rules.Firm, digests []rules.Digest) (id, state string) {
	r, err := repo.Open(ctx, c.shared.root)
	if err != nil {
		if errors.Is(err, exec.ErrNotFound) {
			return "not known: git is not installed", "as they lie in the folder"
		}
		return "not known: " + err.Error(), "as they lie in the folder"
	}
	defer r.Close()
	if c.shared.at != "" && c.shared.at != repo.Index {
		if id, err = r.Commit(ctx, c.shared.at); err != nil {
			return "not known: " + err.Error(), c.shared.at
		}
		return id, "as committed (" + c.shared.at + ")"
	}
	if id, err = r.Commit(ctx, "HEAD"); err != nil {
		return "none yet", "nothing is committed"
	}
	head, err := r.At(ctx, id)
	if err != nil {
		return id, "not compared with the commit: " + err.Error()
	}
	return id, c.against(head, firm.Tree, digests)
}

// against says which of the files read differ from those of a commit.
func (c *Command) against(head, read source.Tree, digests []rules.Digest) string {
	committed := map[string]string{}
	entries, err := head.Files()
	if err != nil {
		return "not compared with the commit: " + err.Error()
	}
	for _, e := range entries {
		committed[e.Path] = e.ID
	}
	var changed []string
	for _, d := range digests {
		for _, e := range d.Files {
			src, err := read.Read(e)
			if id := committed[e.Path]; err != nil || id == "" || id != blobID(src, len(id)) {
				changed = append(changed, e.Path)
			}
		}
	}
	where := "in the folder"
	if c.shared.at == repo.Index {
		where = "staged"
	}
	if len(changed) == 0 {
		return "as committed, " + where
	}
	most := changed[:min(len(changed), 8)]
	more := ""
	if n := len(changed) - len(most); n > 0 {
		more = fmt.Sprintf(" and %d more", n)
	}
	return fmt.Sprintf("%s, not as committed: %s%s", where, strings.Join(most, ", "), more)
}

// blobID is the name that git gives to the bytes of a file: so many hexadecimal
// digits, 40 of a SHA-1 or 64 of a SHA-256.
func blobID(src []byte, digits int) string {
	named := append(fmt.Appendf(nil, "blob %d\x00", len(src)), src...)
	if digits == 64 {
		sum := sha256.Sum256(named)
		return hex.EncodeToString(sum[:])
	}
	sum := sha1.Sum(named)
	return hex.EncodeToString(sum[:])
}
