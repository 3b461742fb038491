package main

import (
	"encoding/json"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

const cutting = "../../testdata/cutting"

// cuttingJob is one of the jobs with a proved optimum.
type cuttingJob struct {
	Allowance int64 `json:"cut_allowance_mm"`
	Usable    int64 `json:"usable_remnant_mm"`
	Pieces    []struct {
		Length int64 `json:"length_mm"`
		Qty    int   `json:"qty"`
	} `json:"pieces"`
	Reels []struct {
		Length int64 `json:"length_mm"`
		Price  int64 `json:"price_cents"`
	} `json:"reels"`
	Remnants []int64 `json:"remnants_mm"`
}

func readCutting(t *testing.T, name string, into any) {
	t.Helper()
	raw, err := os.ReadFile(filepath.Join(cutting, name))
	if err == nil {
		err = json.Unmarshal(raw, into)
	}
	if err != nil {
		t.Fatal(err)
	}
}

// workspace writes the job as a workspace: its pieces are the cables of one plan, its
// reels are offers, its remnants are tags in the shop.
func (j *cuttingJob) workspace(t *testing.T) (root string, pieces int) {
	t.Helper()
	var plan, offers, stock strings.Builder
	plan.WriteString("[job]\nstage = \"review\"\ncrew = \"one\"\n")
	for _, p := range j.Pieces {
		for range p.Qty {
			pieces++
			fmt.Fprintf(&plan, "[cable.C%d]\npart = \"CX\"\nlength = \"%d mm\"\n", pieces, p.Length)
		}
	}
	offers.WriteString("[vendor.tern]\n")
	for i, r := range j.Reels {
		fmt.Fprintf(&offers, "[[offer]]\npart = \"CX\"\nvendor = \"tern\"\ncode = \"reel-%d\"\npack = \"%d mm\"\nprice = \"%d.%02d\"\nlead_days = 3\n", i, r.Length, r.Price/100, r.Price%100)
	}
	stock.WriteString("[sheet]\non = 2026-11-20\nby = \"jo\"\n")
	for i, l := range j.Remnants {
		fmt.Fprintf(&stock, "[[reel]]\ntag = \"R-%d\"\npart = \"CX\"\nwhere = \"shop\"\nleft = \"%d mm\"\nhow = \"tape\"\n", i, l)
	}
	root = t.TempDir()
	for name, text := range map[string]string{
		"driploop.toml": fmt.Sprintf("[workspace]\n[house]\ncut_allowance = \"%d mm\"\nusable_remnant = \"%d mm\"\n[shelf.shop]\nkind = \"shop\"\n[crew.one]\nshelves = [\"shop\"]\n",
			j.Allowance, j.Usable),
		"catalog/cable.toml":     "[part.CX]\nkind = \"cable\"\nimpedance_ohm = 50\nloss_db_per_100m = [[850, 12.0]]\n",
		"plans/job.toml":         plan.String(),
		"offers/tern.toml":       offers.String(),
		"stock/counts/shop.toml": stock.String(),
	} {
		file := filepath.Join(root, name)
		if err := os.MkdirAll(filepath.Dir(file), 0o777); err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(file, []byte(text), 0o666); err != nil {
			t.Fatal(err)
		}
	}
	return root, pieces
}

// The program buys and cuts each job at its proved optimum, and says that it is one.
func TestCuttingJobs(t *testing.T) {
	var optima []struct {
		Name string `json:"name"`
		Cost int64  `json:"optimal_cost_cents"`
	}
	readCutting(t, "optima.json", &optima)
	for _, o := range optima {
		var job cuttingJob
		readCutting(t, o.Name+".json", &job)
		root, pieces := job.workspace(t)
		want := fmt.Sprintf("%d.%02d", o.Cost/100, o.Cost%100)
		var cuts struct {
			Parts []struct {
				Pieces      []struct{ From string }
				New         []struct{ ID string }
				Cost, Bound string
				Proved      bool
			}
		}
		asked(t, &cuts, "cuts", root)
		if len(cuts.Parts) != 1 {
			t.Fatalf("%s: %+v", o.Name, cuts)
		}
		if c := cuts.Parts[0]; len(c.Pieces) != pieces || c.Cost != want || c.Bound != want || !c.Proved {
			t.Errorf("%s: %d of %d pieces cost %s, at least %s, proved %t; the least is %s", o.Name, len(c.Pieces), pieces, c.Cost, c.Bound, c.Proved, want)
		}
		var bought struct {
			Rows         []struct{ Packs int }
			Total, Bound string
			Proved       bool
		}
		asked(t, &bought, "purchase", root)
		packs := 0
		for _, r := range bought.Rows {
			packs += r.Packs
		}
		if bought.Total != want || bought.Bound != want || !bought.Proved || packs != len(cuts.Parts[0].New) {
			t.Errorf("%s: %d reels for %s, at least %s, proved %t; the least is %s", o.Name, packs, bought.Total, bought.Bound, bought.Proved, want)
		}
	}
	if len(optima) < 10 {
		t.Errorf("there are %d jobs", len(optima))
	}
}

// asked runs a command for JSON.
func asked(t *testing.T, into any, command, root string) {
	t.Helper()
	out, messages, status := run([]string{command, "--root", root, "--as", "json", "--today", "2026-12-01"})
	if status != statusClear {
		t.Fatalf("%s: status %d: %s", command, status, messages)
	}
	if err := json.Unmarshal([]byte(out), into); err != nil {
		t.Fatal(err)
	}
}
