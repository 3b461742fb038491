package main

import (
	"context"
	"encoding/json"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"unicode/utf8"

	"driploop/catalog/unit"
	"driploop/cmd/driploop/show"
	"driploop/rules"
)

func hostileFiles(t *testing.T) map[string]string {
	t.Helper()
	out := map[string]string{}
	err := filepath.WalkDir(hostile, func(path string, d os.DirEntry, err error) error {
		if err != nil || d.IsDir() {
			return err
		}
		src, err := os.ReadFile(path)
		rel, _ := filepath.Rel(hostile, path)
		out[filepath.ToSlash(rel)] = string(src)
		return err
	})
	if err != nil {
		t.Fatal(err)
	}
	return out
}

// A head in which every text is an attack on some reader harms none of them, whatever
// it is compared with; nor does a base like that.
func TestRedlineOfHostile(t *testing.T) {
	day := unit.Date{Year: 2026, Month: 12, Day: 1}
	bad, demo := stored{"::error::bad", hostileFiles(t)}, stored{"demo", demoFiles(t)}
	bare := stored{"bare", map[string]string{}}
	edited := stored{"edited", hostileFiles(t)}
	for path, text := range edited.files {
		edited.files[path] = strings.NewReplacer("length = \"", "length = \"1", "qty = ", "qty = 1", "price = \"", "price = \"9", "db = ", "db = 1").Replace(text)
	}
	shown := ""
	for _, c := range []struct{ base, head stored }{{demo, bad}, {bad, demo}, {bad, edited}, {bare, bad}} {
		r, err := rules.Compare(context.Background(), c.base, c.head, rules.Options{Today: day})
		if err != nil {
			t.Fatal(err)
		}
		for _, width := range []int{40, 80} {
			text := string(show.NewRedlinePage(r, show.RedlineTerms{}).Text(show.Page{Width: width}))
			checkText(t, text, width)
			shown += text
		}
		comment := string(show.NewRedlinePage(r, show.RedlineTerms{Comment: true}).Markdown("1"))
		if found := inMarkdown(comment); found != "" {
			t.Errorf("%s to %s: the comment holds %s", c.base.name, c.head.name, found)
		}
		if n := utf8.RuneCountInString(comment); n >= 65536 || !strings.HasPrefix(comment, "## ") {
			t.Errorf("%s to %s: the comment has %d characters and begins %.20q", c.base.name, c.head.name, n, comment)
		}
		b, err := show.RedlineJSON(r, "test", show.RedlineTerms{})
		if err != nil || !json.Valid(b) || inLog(string(b)) != "" {
			t.Errorf("%s to %s: JSON: %v %s", c.base.name, c.head.name, err, inLog(string(b)))
		}
	}
	for _, attack := range []string{`\x1b[2J`, `:\x3aerror`, `\u202e`} {
		if !strings.Contains(shown, attack) {
			t.Errorf("nothing shows %s; the attacks do not reach it", attack)
		}
	}
}
