package rules_test

import (
	"path/filepath"
	"strings"
	"testing"

	"github.com/rogpeppe/go-internal/txtar"

	"driploop/rules"
)

// caseFindings inspects a case of a rule, and returns what that rule says.
func caseFindings(t *testing.T, rule, name string) []*rules.Finding {
	t.Helper()
	archive, err := txtar.ParseFile(filepath.Join(casesDir, strings.ReplaceAll(rule, "/", "-"), name+".txtar"))
	if err != nil {
		t.Fatal(err)
	}
	return inspectText(t, rule, string(txtar.Format(archive)))
}

// inspectText does the same with a text archive.
func inspectText(t *testing.T, rule, text string) []*rules.Finding {
	t.Helper()
	archive := txtar.Parse([]byte(text))
	tree := memory{files: files(t, filepath.Join(casesDir, "base"))}
	for _, f := range archive.Files {
		tree.files[f.Name] = string(f.Data)
	}
	var out []*rules.Finding
	for _, f := range findings(t, tree, today(t, "")) {
		if f.Rule.Name == rule {
			out = append(out, f)
		}
	}
	return out
}

func TestOpenPortsWeigh(t *testing.T) {
	expect := map[string]rules.Weight{
		"amp.server": rules.Punch, "donor.m45": rules.Punch, "hyb.a2": rules.Punch, "hyb.b2": rules.Punch,
		"coup.coupled": rules.Punch, "split.out2": rules.Punch, "split.in": rules.Hold, "pad.in": rules.Hold,
		"car.wifi1 and car.wifi2": rules.Note, "tv.rx": rules.Note,
		"east.donor": rules.Hold, "radio.cell2": rules.Hold, "radio.cell3 and radio.cell4": rules.Punch, "duo.m45": rules.Punch,
	}
	for _, name := range []string{"bad-weights", "bad-donor-and-router"} {
		for _, f := range caseFindings(t, "mate/open", name) {
			port, _, _ := strings.Cut(f.Says, " (")
			w, known := expect[port]
			if !known || f.Weight != w {
				t.Errorf("%s weighs %s, expected %s", port, f.Weight, w)
			}
			delete(expect, port)
		}
	}
	for port := range expect {
		t.Errorf("%s is not reported", port)
	}
}

func TestImpedanceStepsWeigh(t *testing.T) {
	expect := map[string]rules.Weight{"cable.C1": rules.Hold, "cable.C2": rules.Punch, "cable.C3": rules.Punch}
	for _, f := range caseFindings(t, "match/impedance", "bad-75-ohm-run") {
		if f.Weight != expect[f.On] {
			t.Errorf("%s weighs %s, expected %s", f.On, f.Weight, expect[f.On])
		}
		delete(expect, f.On)
	}
	if len(expect) > 0 {
		t.Errorf("not reported: %v", expect)
	}
}

// What a remedy names: a connector or jumper that would do and an adapter, of
// several the one that is on hand, then the firm's own; none that is withdrawn, has
// a step inside, or does not pass the planned bands.
func TestRemedyNamesTheBest(t *testing.T) {
	const shop = `
-- catalog/own.toml --
[part.AD-OLD]
kind = "adapter"
status = "withdrawn"
port.a = { connector = "N female", impedance_ohm = 50 }
port.b = { connector = "SMA male", impedance_ohm = 50 }
path = [{ from = "a", to = "b", loss_db = 0.05 }]
[part.AD-75]
kind = "adapter"
port.a = { connector = "N female", impedance_ohm = 50 }
port.b = { connector = "SMA male", impedance_ohm = 75 }
path = [{ from = "a", to = "b", loss_db = 0.05 }]
[part.AD-LOW]
kind = "adapter"
port.a = { connector = "N female", impedance_ohm = 50 }
port.b = { connector = "SMA male", impedance_ohm = 50 }
path = [{ from = "a", to = "b", mhz = [0, 500], loss_db = 0.05 }]
[part.AD-OWN]
kind = "adapter"
port.a = { connector = "N female", impedance_ohm = 50 }
port.b = { connector = "SMA male", impedance_ohm = 50 }
path = [{ from = "a", to = "b", loss_db = 0.05 }]
-- plans/job.toml --
[job]
bands = ["B12"]
[device]
wall  = { part = "GEN-ANT-WALL-7" }
radio = { part = "GEN-RTR-4G-2" }
[cable]
C1 = { part = "GEN-CX-5", length = "2 m", from = "wall", to = "radio.cell1", ends = ["N male", "N male"] }
`
	const held = `
-- stock/counts/2026-11-20-shop-jo.toml --
[sheet]
on = 2026-11-20
by = "jo"
where = "shop"
[[count]]
part = "GEN-AD-NF-SMAM"
qty = 3
[[count]]
part = "AD-OLD"
qty = 9
[[count]]
part = "AD-75"
qty = 9
[[count]]
part = "AD-LOW"
qty = 9
`
	for name, c := range map[string]struct{ text, want string }{
		"own before generic":  {shop, "make end 2 of C1 with GEN-SMAM-CX5-CRIMP (none on hand), or put adapter AD-OWN (none on hand) between them"},
		"on hand before that": {shop + held, "make end 2 of C1 with GEN-SMAM-CX5-CRIMP (none on hand), or put adapter GEN-AD-NF-SMAM (3 on hand) between them"},
	} {
		got := inspectText(t, "mate/series", c.text)
		if len(got) != 1 || got[0].Do != c.want {
			t.Errorf("%s: %d findings, the first says to %q, expected %q", name, len(got), got[0].Do, c.want)
		}
	}
}

// The load that is named goes on the port as it is, and outdoors is one for outdoors.
func TestLoadsFitThePort(t *testing.T) {
	const plan = `
-- plans/job.toml --
[job]
bands = ["B12"]
[place]
roof = { kind = "outdoor" }
[device]
donor = { part = "GEN-ANT-LP-10" }
fork  = { part = "GEN-N-SPLIT-2", place = "roof" }
amp   = { part = "GEN-AMP-W5-FIX" }
split = { part = "GEN-N-SPLIT-3" }
dome  = { part = "GEN-ANT-DOME-3" }
home  = { part = "GEN-AMP-W5-HOME75" }
yagi  = { part = "GEN-ANT-LP75-9" }
[cable]
C0 = { part = "GEN-J-N-N-1", from = "donor", to = "fork.in" }
C1 = { part = "GEN-J-N-N-1", from = "fork.out1", to = "amp.donor" }
L0 = { part = "GEN-J-N-N-1", from = "amp.server", to = "split.in" }
L1 = { part = "GEN-J-N-N-1", from = "split.out1", to = "dome" }
F1 = { part = "GEN-J-F-F-1", from = "yagi", to = "home.donor" }
-- stock/counts/2026-11-20-shop-jo.toml --
[sheet]
on = 2026-11-20
by = "jo"
where = "shop"
[[count]]
part = "GEN-N-LOAD-2"
qty = 5
[[count]]
part = "GEN-F-LOAD"
qty = 2
`
	expect := map[string]string{
		"device.fork":  "terminate it with GEN-N-LOAD-10-PIM (none on hand), or connect a line",
		"device.split": "terminate each with GEN-N-LOAD-2 (5 on hand), or connect a line",
		"device.home":  "terminate it with GEN-F-LOAD (2 on hand), or connect a server antenna",
	}
	for _, f := range inspectText(t, "mate/open", plan) {
		if f.Do != expect[f.On] {
			t.Errorf("%s: %q, expected %q", f.On, f.Do, expect[f.On])
		}
		delete(expect, f.On)
	}
	if len(expect) > 0 {
		t.Errorf("not reported: %v", expect)
	}
}
