package rules_test

import (
	"context"
	"fmt"
	"path/filepath"
	"slices"
	"strings"
	"sync"
	"sync/atomic"
	"testing"

	"github.com/rogpeppe/go-internal/txtar"

	"driploop/catalog/source"
	"driploop/rules"
)

// These tests hold the principle that a missing input is never a pass, for the rules
// where it counts: those on limits and on safety. They take inputs away one at a time
// and look whether something that stood against a plan falls silent, or a plan that
// was whole stays so.

// caseTree is a case's archive over the files that lie under all of them.
func caseTree(t *testing.T, name string) memory {
	t.Helper()
	archive, err := txtar.ParseFile(name)
	if err != nil {
		t.Fatal(err)
	}
	tree := memory{files: files(t, filepath.Join(casesDir, "base"))}
	for _, f := range archive.Files {
		tree.files[f.Name] = wantComment.ReplaceAllString(string(f.Data), "")
	}
	return tree
}

// inspectedWith inspects one file of a workspace in many versions: a plan in one go,
// as that many plans, and any other file by reading the workspace again.
func inspectedWith(t *testing.T, tree memory, path string, versions []removal) [][]*rules.Finding {
	t.Helper()
	var out [][]*rules.Finding
	if !strings.HasPrefix(path, "plans/") {
		for _, v := range versions {
			out = append(out, findings(t, tree.with(path, v.text), today(t, "")))
		}
		return out
	}
	firm := firmOfVersions(t, tree, versions)
	res, err := firm.Inspect(context.Background(), nil)
	if err != nil {
		t.Fatal(err)
	}
	for _, p := range res.Plans {
		out = append(out, append(res.Workspace[:len(res.Workspace):len(res.Workspace)], p.Findings...))
	}
	return out
}

// firmOfVersions is the workspace with the versions in place of its plans, without the
// rules that need the shelf.
func firmOfVersions(t *testing.T, tree memory, versions []removal) *rules.Firm {
	t.Helper()
	many := tree
	many.files = map[string]string{}
	for name, text := range tree.files {
		if !strings.HasPrefix(name, "plans/") {
			many.files[name] = text
		}
	}
	for i, v := range versions {
		many.files[fmt.Sprintf("plans/%05d.toml", i)] = v.text
	}
	firm, err := rules.Load(many, rules.Options{Today: today(t, ""), NoShelf: true})
	if err != nil {
		t.Fatal(err)
	}
	return firm
}

func (m memory) with(path, text string) memory {
	out := memory{files: map[string]string{path: text}}
	for name, t := range m.files {
		if name != path {
			out.files[name] = t
		}
	}
	return out
}

// isInput reports a key of a record, and not a record or an item of a list: with the
// whole of a device taken out, another plan is looked at.
func isInput(what string) bool {
	table, rest, _ := strings.Cut(what, ".")
	switch table {
	case "operator", "place", "device", "cable", "data", "wire", "bond", "part":
		return strings.Contains(rest, ".") && !strings.HasSuffix(what, "]")
	}
	return rest != "" && !strings.HasSuffix(what, "]")
}

func inputsOf(path, text string) []removal {
	n := 0
	return slices.DeleteFunc(removals(path, text), func(r removal) bool {
		if !isInput(r.what) {
			return true
		}
		n++
		return n%every != 0
	})
}

// said is what findings say: what stands against one rule, by what it stands on, and
// how often each thing is said at the weight of a punch or more. What is not assessed
// is told apart by its words, because one thing may lack now this, now that.
type said struct {
	against map[string]bool
	all     map[string]int
}

func saidBy(list []*rules.Finding, rule *rules.Rule) said {
	s := said{map[string]bool{}, map[string]int{}}
	for _, f := range list {
		if f.Outcome == rules.Advice {
			continue
		}
		if f.Rule == rule {
			s.against[f.On] = true
		}
		if f.Weight >= rules.Punch {
			what := f.Rule.Name + " " + f.Outcome.String() + " " + f.On
			if f.Outcome == rules.Unknown || f.Rule.Area() == "file" {
				what += " " + f.Says
			}
			s.all[what]++
		}
	}
	return s
}

// silenced names what stood against the rule and does no more, where nothing else
// that is said now takes its place.
func (s said) silenced(after said) []string {
	for what, times := range after.all {
		if times > s.all[what] {
			return nil
		}
	}
	var gone []string
	for on := range s.against {
		if !after.against[on] {
			gone = append(gone, on)
		}
	}
	return gone
}

// mayClear are inputs without which a finding goes for a reason: the formats say what
// their absence means, or what is taken away is the fault itself.
var mayClear = map[string]string{
	"part/unknown part.DOME-R.instead": "the name that is not there is the fault",

	"band/antenna part.ANT-Q.port.lte.bands": "a port without bands serves all of its antenna's",

	"ground/arrestor device.donor.off_wall":   "the distance of the mast counts for what it carries",
	"ground/conductor bond.G4.raceway":        "a conductor without raceway runs in none",
	"ground/electrodes site.electrode":        "what the site says against the bonds is the fault; the bonds tie the two",
	"ground/separation device.lps.lightning":  "what it says against the site is the fault",
	"ground/separation site.lightning_system": "that the mast has no place is said by ground/bond; with a place the system is asked for",
	"ground/data data.E2.way":                 "without a way a line goes straight from place to place",

	"gain/mobility device.amp.coupling":      "absent, phones are coupled by antennas",
	"gain/amplifier device.amp.coupling":     "absent, phones are coupled by antennas",
	"gain/uplink-eirp site.coldest":          "where the plan gives no temperature it is 20 degrees",
	"gain/kit site.coldest":                  "where the plan gives no temperature it is 20 degrees",
	"gain/radio-eirp place.loft.coldest":     "a place without temperatures has those of its kind",
	"gain/radio-eirp cable.F.way":            "without a way a line goes straight from place to place",
	"gain/isolation reading[1].on":           "a reading without a day counts after those that have one",
	"gain/isolation reading[1].stage":        "a reading without a stage is one of the survey",
	"gain/kit part.NC-0.loss_db":             "a connector without a loss has the usual one of a pair",
	"gain/kit part.AMP.kit[0].least_loss_db": "a row of a kit need not ask for a loss",
	"gain/kit part.AMP.kit[1].least_loss_db": "a row of a kit need not ask for a loss",

	"build/wind site.wind":                 "without a speed the pressures of the standard count",
	"build/wind part.FRAME-X.ballast":      "a mount without ballast is fixed to the building",
	"build/clearance cable.C1.way":         "without a way a line goes straight from place to place",
	"build/clearance part.RTR-X.size_mm":   "gear on a mast of unknown size is left out beside mast and antenna",
	"power/fuse part.RTR-40.load.w":        "a fuse that is too small for its load burns nobody",
	"power/volts job.setting":              "absent, the job is in a building, where no engine starts",
	"power/volts site.volts":               "the battery's part gives the voltage",
	"power/volts device.battery.existing":  "what this job brings is not what the vehicle has",
	"power/dc-path cable.C1.through":       "the adapter that stops the current is the fault",
	"power/dc-path part.GPS.port.gnss.use": "absent, a port is for cellular",
}

// Whatever stands against a plan by a rule on limits or safety, no input can be taken
// out of the plan so that it falls silent, and in the plain cases of each rule none
// out of the parts. The cases of the rules are the plans.
func TestNothingMissingSilencesAFinding(t *testing.T) {
	var tried atomic.Int64
	var used sync.Map
	t.Run("rules", func(t *testing.T) {
		for _, r := range rules.Rules {
			if !r.Grave || r.Check == nil {
				continue
			}
			t.Run(r.Name, func(t *testing.T) {
				t.Parallel()
				names, _ := filepath.Glob(filepath.Join(casesDir, strings.ReplaceAll(r.Name, "/", "-"), "*.txtar"))
				for _, name := range names {
					tree := caseTree(t, name)
					for path := range tree.files {
						if counts(path, filepath.Base(name)) {
							tried.Add(int64(takeAway(t, r, tree, path, filepath.Base(name), &used)))
						}
					}
				}
			})
		}
	})
	for key := range mayClear {
		if _, is := used.Load(key); !is && every == 1 && !testing.Short() {
			t.Errorf("%s silences nothing any more; take it off the list", key)
		}
	}
	if tried.Load() < 10000/every {
		t.Errorf("only %d inputs were taken away", tried.Load())
	}
	t.Logf("%d inputs were taken away", tried.Load())
}

// counts reports a plan, and the parts of a case that is bad or lacks something. Each
// part taken away means reading the workspace again; a short run leaves them out.
func counts(path, name string) bool {
	plain := strings.HasPrefix(name, "bad") || strings.HasPrefix(name, "missing")
	return strings.HasPrefix(path, "plans/") || strings.HasPrefix(path, "catalog/") && plain && !testing.Short()
}

// takeAway takes the inputs of one file away one at a time and counts them.
func takeAway(t *testing.T, r *rules.Rule, tree memory, path, name string, used *sync.Map) int {
	t.Helper()
	whole := saidBy(inspectedWith(t, tree, path, []removal{{"", tree.files[path]}})[0], r)
	if len(whole.against) == 0 {
		return 0
	}
	all := inputsOf(path, tree.files[path])
	cuts := whole.inDoubt(t, r, tree, path, all)
	for i, list := range inspectedWith(t, tree, path, cuts) {
		gone := whole.silenced(saidBy(list, r))
		if len(gone) == 0 {
			continue
		}
		key := r.Name + " " + cuts[i].what
		if used.Store(key, true); mayClear[key] == "" {
			t.Errorf("%s, case %s, %s: without %s nothing is said of %v any more", r.Name, name, path, cuts[i].what, gone)
		}
	}
	return len(all)
}

// inDoubt leaves out the versions of a file of which the rule by itself says that all
// that stood against the plans still does: what the other rules say of them matters
// only where something falls silent.
func (s said) inDoubt(t *testing.T, r *rules.Rule, tree memory, path string, versions []removal) []removal {
	t.Helper()
	if r.CheckFiles != nil {
		return versions
	}
	var out []removal
	keep := func(i int, firm *rules.Firm, plans ...source.Entry) {
		after := map[string]bool{}
		for _, e := range plans {
			for on := range saidBy(firm.Alone(e, r), r).against {
				after[on] = true
			}
		}
		for on := range s.against {
			if !after[on] {
				out = append(out, versions[i])
				return
			}
		}
	}
	if strings.HasPrefix(path, "plans/") {
		firm := firmOfVersions(t, tree, versions)
		for i, e := range firm.PlanFiles {
			keep(i, firm, e)
		}
		return out
	}
	for i, v := range versions {
		firm, err := rules.Load(tree.with(path, v.text), rules.Options{Today: today(t, "")})
		if err != nil {
			t.Fatal(err)
		}
		keep(i, firm, firm.PlanFiles...)
	}
	return out
}

// With any key, item or record of the demo's plans taken out the rules still run, and
// what they say is whole.
func TestTornPlansAreStillLookedAt(t *testing.T) {
	tree := memory{files: files(t, demo)}
	for path, text := range tree.files {
		if !strings.HasPrefix(path, "plans/") {
			continue
		}
		var cuts []removal
		for i, cut := range removals(path, text) {
			if i%every == 0 {
				cuts = append(cuts, cut)
			}
		}
		for i, list := range inspectedWith(t, tree, path, cuts) {
			for _, f := range list {
				words := f.Says + " " + f.Do
				if f.Says == "" || f.On == "" || f.At.IsZero() || strings.Contains(words, "%!") || strings.Contains(words, "NaN") || strings.Contains(words, "Inf") {
					t.Errorf("%s without %s: %s on %q says %q, %q", path, cuts[i].what, f.Rule.Name, f.On, f.Says, f.Do)
				}
			}
		}
	}
}
