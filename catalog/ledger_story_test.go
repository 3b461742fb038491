package catalog

import (
	"io/fs"
	"os"
	"path/filepath"
	"regexp"
	"strings"
	"testing"

	"driploop/catalog/source"

	"github.com/google/go-cmp/cmp"
)

const storyDir = "../testdata/story"

// story is the workspace of testdata/story: the firm's shelves, its parts and the
// files of its store.
type story struct {
	premises *Premises
	look     func(string) *Part
	files    map[string]string
}

func readStory(t *testing.T) *story {
	t.Helper()
	s := &story{premises: &Premises{}, files: map[string]string{}}
	read := func(name string) string {
		text, err := os.ReadFile(filepath.Join(storyDir, name))
		if err != nil {
			t.Fatal(err)
		}
		return string(text)
	}
	// [workspace] is for the whole program to read
	source.Read(docOf(t, "driploop.toml", read("driploop.toml")), s.premises.Keys)
	parts, problems := ReadParts(docOf(t, "catalog/parts.toml", read("catalog/parts.toml")))
	wantNone(t, problems)
	s.look = New(parts).Look
	err := filepath.WalkDir(filepath.Join(storyDir, "stock"), func(path string, d fs.DirEntry, err error) error {
		if err == nil && !d.IsDir() {
			rel, _ := filepath.Rel(storyDir, path)
			s.files[filepath.ToSlash(rel)] = read(rel)
		}
		return err
	})
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// book replays the files as of the end of a day.
func (s *story) book(t *testing.T, today string) *Stock {
	t.Helper()
	var text strings.Builder
	for path, src := range s.files { // whatever the order
		text.WriteString("-- " + path + " --\n" + src)
	}
	sheets, orders := stockFiles(t, text.String())
	wantNone(t, CheckStock(sheets, orders, s.look))
	return Book(s.premises, sheets, orders, s.look, dayOf(t, today))
}

// The balances on named days were added up by hand, see the story's README.
func TestStoryBalances(t *testing.T) {
	s := readStory(t)
	days, err := filepath.Glob(filepath.Join(storyDir, "balances", "*.txt"))
	if err != nil || len(days) < 8 {
		t.Fatalf("%d days, %v", len(days), err)
	}
	for _, name := range days {
		day := strings.TrimSuffix(filepath.Base(name), ".txt")
		t.Run(day, func(t *testing.T) {
			want, err := os.ReadFile(name)
			if err != nil {
				t.Fatal(err)
			}
			if diff := cmp.Diff(string(want), withoutFuture(s.book(t, day).told())); diff != "" {
				t.Errorf("the book differs (− wanted, + got):\n%s", diff)
			}
		})
	}
}

// Of a day in the past everything later is in the future; that is no news.
var futureLine = regexp.MustCompile(`(?m)^note future .*\n`)

func withoutFuture(told string) string { return futureLine.ReplaceAllString(told, "") }

// keysOf lists the names of all keys of a record and the tables in it.
func keysOf(r *source.Record) []string {
	var out []string
	for _, k := range r.Keys {
		out = append(out, k.Name)
		if k.Sub != nil {
			out = append(out, keysOf(k.Sub)...)
		}
	}
	return out
}

// The story has every kind of row that a stock file knows, and every key of it.
func TestStoryHasEveryKey(t *testing.T) {
	s := readStory(t)
	all := strings.Builder{}
	for _, src := range s.files {
		all.WriteString(src)
	}
	for _, r := range []*source.Record{DescribeSheet(), DescribeOrder()} {
		for _, k := range keysOf(r) {
			if !regexp.MustCompile(`\b` + k + `\b *=|\[\[?` + k + `\]`).MatchString(all.String()) {
				t.Errorf("nothing in the story has the key %s", k)
			}
		}
	}
}

// whereRow is where a note stands, which changes with the files and rows.
var whereRow = regexp.MustCompile(`(?m)^(note \S+) \S+`)

// What happened on one day is the same whatever the order of its rows in one file, and
// whatever the names of the files when each row has its own: a reel arrives, is cut,
// and a leftover comes back; connectors go to the van and on to the job, and the van
// is counted.
func TestSameDayInEveryOrder(t *testing.T) {
	rows := []string{
		"[[reel]]\ntag = \"R-9\"\npart = \"CX-10\"\nwhere = \"shop\"\nleft = \"40 m\"\norder = \"PO-1\"\n",
		"[[cut]]\ntag = \"R-9\"\nlength = \"12.3 m\"\njob = \"x\"\ncable = \"C1\"\n",
		"[[reel]]\ntag = \"x-C1\"\npart = \"CX-10\"\nwhere = \"van-1\"\nleft = \"3.1 m\"\nof = \"R-9\"\n",
		"[[move]]\npart = \"NC-10-NM\"\nfrom = \"shop\"\nto = \"van-1\"\nqty = 10\n",
		"[[move]]\npart = \"NC-10-NM\"\nfrom = \"van-1\"\nto = \"job\"\njob = \"x\"\nqty = 8\n",
		"[[count]]\npart = \"NC-10-NM\"\nwhere = \"van-1\"\nqty = 2\n",
	}
	const before = "-- counts/a.toml --\nsheet = { on = 2026-11-19, where = \"shop\" }\ncount = [{ part = \"NC-10-NM\", qty = 10 }]\n" +
		"-- orders/PO-1.toml --\norder = { vendor = \"tern\", sent = 2026-11-02 }\nline = [{ part = \"CX-10\", pack = \"40 m\", packs = 1, due = 2026-11-20 }]\n"
	const want = "bin CX-10 shop 27.7 m\nbin CX-10 van-1 3.1 m\nbin NC-10-NM shop 0\nbin NC-10-NM van-1 2\n" +
		"tag R-9 CX-10 shop 27.7 m\ntag x-C1 CX-10 van-1 3.1 m\nissued x CX-10 9.2 m\nissued x NC-10-NM 8\npiece x/C1 9.2 m of R-9\n" +
		"open PO-1 CX-10 0\nnote same-day NC-10-NM van-1\n"
	const head = "sheet = { on = 2026-11-20 }\n"
	premises, look, today := yardOf(t), stockParts(t), dayOf(t, "")
	permutations(len(rows), func(order []int) {
		one, each := "-- back/day.toml --\n"+head, ""
		for k, i := range order {
			one += rows[i]
			each += "-- back/" + string('a'+rune(k)) + ".toml --\n" + head + rows[i]
		}
		for _, text := range []string{one, each} {
			sheets, orders := stockFiles(t, before+text)
			got := Book(premises, sheets, orders, look, today).told()
			if diff := cmp.Diff(want, whereRow.ReplaceAllString(got, "$1")); diff != "" {
				t.Fatalf("rows in the order %v:\n%s", order, diff)
			}
		}
	})
}
