package rules_test

import (
	"maps"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"github.com/rogpeppe/go-internal/txtar"

	"driploop/rules"
)

const safetyDir = "../testdata/safety"

// fixture is a plan to which nothing is lacking, at stage construction, over the
// demo's catalog; a name with a slash is a rule case, with what lies under it.
func fixture(t *testing.T, name string) memory {
	t.Helper()
	if strings.Contains(name, "/") {
		return caseTree(t, filepath.Join(casesDir, name+".txtar"))
	}
	archive, err := txtar.ParseFile(filepath.Join(safetyDir, name+".txtar"))
	if err != nil {
		t.Fatal(err)
	}
	tree := memory{files: files(t, demo)}
	maps.DeleteFunc(tree.files, func(path, _ string) bool { // the demo's plans, and stock and orders that name their jobs
		return strings.HasPrefix(path, "plans/") || strings.HasPrefix(path, "stock/")
	})
	for _, f := range archive.Files {
		tree.files[f.Name] = string(f.Data)
	}
	return tree
}

// notAssessed lists, for each rule on limits or safety, inputs without which it may
// not be silent about a plan that was whole: it says that it is not assessed.
var notAssessed = []struct {
	rule, fixture string
	without       string // keys, parted by spaces
}{
	{"band/antenna", "building", "job.bands part.ANT-LP-11.range[0].mhz part.DOME-NF.range[1].mhz"},
	{"band/antenna", "router", "job.bands part.ANT-P2-10.range[2].mhz"},
	{"band/profile", "iec", "profile.pier.spectrum"},

	{"ground/arrestor", "building", "device.amp.place device.dome.place"},
	{"ground/arrestor", "router", "device.mast.place device.panel.on device.radio.on"},
	{"ground/bond", "building", "device.mast.place"},
	{"ground/bond", "router", "device.mast.place"},
	{"ground/conductor", "building", "bond.G1.part bond.G2.part bond.G4.part part.BC-6-CU.material part.BC-6-CU.size"},
	{"ground/conductor", "iec", "bond.G3.part part.BC-16-CU.material part.BC-16-CU.size"},
	{"ground/electrodes", "building", "site.electrode"},
	{"ground/electrodes", "iec", "site.electrode"},
	{"ground/separation", "building", "site.lightning_system"},
	{"ground/separation", "router", "site.lightning_system"},
	{"ground/separation", "iec", "site.lightning_system site.lightning_gap site.lightning_length site.lightning_medium site.lightning_down_conductors device.mast.place"},
	{"ground/dc", "ground-dc/good-passive", "part.ARR-S.dc part.ARR-S.path part.GPS-P.dc"},
	{"ground/data", "router", "data.E1.from data.E1.to data.E2.from data.E2.to device.mast.place device.radio.on device.inj.place part.SPD-RJ-AT.poe part.SPD-RJ-AT.screened"},
	{"ground/reversed", "building", "part.ARR-GT-NFF.path"},
	{"ground/reversed", "iec", "part.ARR-GT-NFF.path"},

	{"gain/profile", "building", "signal[0].rsrp_dbm signal[0].width_mhz signal[3].band cable.C1.length cable.C2.part part.AMP-W-65.band part.AMP-W-65.band[2].uplink part.ANT-LP-11.range[0].gain_dbi part.CX-10.loss_db_per_100m"},
	{"gain/profile", "vehicle", "signal[1].width_mhz part.AMP-M-50.band[0].uplink.gain_db part.ANT-MAG-3.port.rf.lead.length"},
	{"gain/mobility", "building", "part.AMP-W-65.class part.AMP-W-65.mobility"},
	{"gain/mobility", "vehicle", "part.AMP-M-50.class part.AMP-M-50.mobility"},
	{"gain/amplifier", "building", "part.AMP-W-65.band[0].uplink.gain_db part.AMP-W-65.band[4].downlink"},
	{"gain/amplifier", "iec", "part.AMP-E-60.band[1].uplink part.AMP-E-60.band[3].downlink.gain_db"},
	{"gain/uplink-power", "building", "part.AMP-W-65.band[0].uplink.max_out_dbm"},
	{"gain/uplink-power", "iec", "part.AMP-E-60.band[2].uplink.max_out_dbm"},
	{"gain/downlink-power", "vehicle", "part.AMP-M-50.band[3].downlink.max_out_dbm"},
	{"gain/uplink-eirp", "building", "part.AMP-W-65.band[0].uplink.max_out_dbm part.ANT-LP-11.range[0].gain_dbi cable.C1.length part.ARR-GT-NFF.path[0].loss_db"},
	{"gain/uplink-eirp", "iec", "cable.C2.length part.ANT-LP-11.range[1].gain_dbi"},
	{"gain/downlink-eirp", "building", "cable.L1.length cable.L1.part part.DOME-NF.range[0].gain_dbi"},
	{"gain/downlink-eirp", "vehicle", "part.ANT-IN-2.port.rf.lead.length part.ANT-IN-2.port.rf.lead.cable"},
	{"gain/kit", "building", "cable.C1.length part.AMP-W-65.kit part.AMP-W-65.kit[0].antenna"},
	{"gain/kit", "vehicle", "part.AMP-M-50.kit part.CX-5.loss_db_per_100m"},
	{"gain/system", "gain-system/good", "part.AMP-80.band[0].uplink.gain_db part.ANT-D.range[0].gain_dbi"},
	{"gain/input", "building", "signal[0].rsrp_dbm signal[0].width_mhz cable.C1.length part.ANT-LP-11.range[0].gain_dbi part.AMP-W-65.band[0].downlink.max_out_dbm"},
	{"gain/isolation", "vehicle", "reading[0].what part.AMP-M-50.band[0].uplink.gain_db"},
	{"gain/isolation", "building", "part.AMP-W-65.band[1].downlink.gain_db"},
	{"gain/noise", "building", "part.AMP-W-65.band[0].uplink.nf_db part.AMP-W-65.band[0].downlink.nf_db"},
	{"gain/noise", "vehicle", "part.AMP-M-50.band[0].uplink.nf_db"},
	{"gain/radio-eirp", "router", "part.RTR-5.tx_dbm part.RTR-5.bands part.RTR-5.max_antenna_gain_dbi cable.F1.length cable.F2.like part.ANT-P2-10.range[0].gain_dbi part.CX-10.loss_db_per_100m"},

	{"exposure/density", "building", "device.donor.people device.dome.people part.ANT-LP-11.size_mm part.DOME-NF.size_mm part.AMP-W-65.band[0].uplink.max_out_dbm cable.C1.length"},
	{"exposure/density", "router", "device.panel.people part.RTR-5.tx_dbm part.ANT-P2-10.size_mm"},
	{"exposure/density", "iec", "profile.pier.exposure.general.segment device.donor.people"},
	{"exposure/density", "vehicle", "device.whip.people device.pad.people part.ANT-MAG-3.size_mm"},
	{"exposure/distance", "building", "device.donor.people device.dome.people"},
	{"exposure/distance", "iec", "device.donor.people"},
	{"exposure/distance", "vehicle", "device.whip.people device.pad.people"},

	{"build/wind", "building", "site.wind site.wind_basis site.terrain place.gable.at device.mast.place part.MT-42.mast_mm part.MT-42.wall_mm part.MT-42.yield_mpa"},
	{"build/wind", "router", "site.wind part.MT-42.yield_mpa"},
	{"build/wind", "iec", "device.mast.free place.gable.at part.ANT-LP-11.wind_area_m2 part.MT-42.length"},
	{"build/clearance", "building", "power_line place.gable.at place.entry.at device.mast.place device.donor.on part.ANT-LP-11.size_mm part.MT-42.length"},
	{"build/clearance", "router", "power_line place.gable.at"},
	{"build/clearance", "iec", "power_line part.MT-42.length"},

	{"power/fuse", "building", "wire.P1.from device.psu.part part.PS-12-5.amps part.W-15-2.size"},
	{"power/fuse", "vehicle", "wire.P1.from wire.P1.fuse_from_source part.FUSE-5A.amps part.W-25-2.size"},
	{"power/volts", "building", "part.PS-12-5.volts part.AMP-W-65.load wire.P1.to"},
	{"power/volts", "vehicle", "part.AMP-M-50.load wire.P1.to"},
	{"power/dc-path", "power-dc-path/good", "device.split.part device.arr.part"},

	{"paper/consent", "building", "operator.harbourcell.consent operator.northbank.consent"},
	{"paper/consent", "iec", "operator.skerry.consent"},
	{"paper/registration", "building", "operator.harbourcell.registered"},
	{"paper/permit", "building", "paper.permit"},
	{"paper/personal", "building", "job.use"},
	{"paper/height", "building", "place.gable.at device.mast.place device.donor.on"},
	{"paper/height", "router", "place.gable.at device.panel.on"},
}

func TestMissingInputsAreNotAssessed(t *testing.T) {
	tabled := map[string]bool{}
	trees := map[string]memory{}
	for _, row := range notAssessed {
		tabled[row.rule] = true
		if trees[row.fixture].files == nil {
			trees[row.fixture] = fixture(t, row.fixture)
		}
		rule := rules.Find(row.rule)
		for _, key := range strings.Fields(row.without) {
			path, text := without(t, trees[row.fixture], key)
			if path == "" {
				t.Errorf("fixture %s has no %s to take away", row.fixture, key)
				continue
			}
			list := findings(t, trees[row.fixture].with(path, text), today(t, ""))
			open := slices.IndexFunc(list, func(f *rules.Finding) bool { return f.Rule == rule && f.Outcome == rules.Unknown })
			switch {
			case open < 0:
				t.Errorf("without %s of %s, %s does not say that it is not assessed", key, row.fixture, row.rule)
			case !strings.Contains(row.fixture, "/") && list[open].Weight != rules.Hold:
				t.Errorf("without %s of %s, %s weighs %s at stage construction", key, row.fixture, row.rule, list[open].Weight)
			}
		}
	}
	for _, r := range rules.Rules {
		if r.Grave && r.Check != nil && !tabled[r.Name] && r.Name != "part/unknown" { // whose input is a name
			t.Errorf("no input of %s is taken away", r.Name)
		}
	}
}

// without takes a key out of the one file of a tree that has it. Rows under a key are
// taken out together.
func without(t *testing.T, tree memory, key string) (path, text string) {
	t.Helper()
	for _, p := range slices.Sorted(maps.Keys(tree.files)) {
		cut, found := tree.files[p], false
		for again := true; again; {
			again = false
			for _, r := range removals(p, cut) {
				if r.what == key || r.what == key+"[0]" {
					cut, found, again = r.text, true, r.what != key
					break
				}
			}
		}
		if found {
			return p, cut
		}
	}
	return "", ""
}

// The fixtures are whole: nothing is lacking to any rule on limits or safety, and
// nothing stands against one.
func TestFixturesAreWhole(t *testing.T) {
	names, err := filepath.Glob(filepath.Join(safetyDir, "*.txtar"))
	if err != nil || len(names) < 4 {
		t.Fatalf("%d fixtures, %v", len(names), err)
	}
	for _, name := range names {
		tree := fixture(t, strings.TrimSuffix(filepath.Base(name), ".txtar"))
		for _, f := range findings(t, tree, today(t, "")) {
			if f.Weight >= rules.Punch {
				t.Errorf("%s: %s %s on %s: %s", filepath.Base(name), f.Rule.Name, f.Outcome, f.On, f.Says)
			}
		}
	}
}

// A plan that is silent on a matter of safety is a punch while it is drawn, and holds
// once it is to be built.
func TestSilentPlansHoldFromConstruction(t *testing.T) {
	for name, c := range map[string]struct {
		plan string
		want string // rules that are not assessed
	}{
		"building": {`
bands = ["B12", "B4"]
[place]
roof = { kind = "outdoor" }
room = { kind = "indoor" }
[device]
mast  = { part = "GEN-MAST-42-3", place = "roof" }
donor = { part = "GEN-ANT-LP-10", on = "mast" }
arr   = { part = "GEN-ARR-GT90-NFF", place = "room" }
amp   = { part = "GEN-AMP-W5-FIX", place = "room" }
dome  = { part = "GEN-ANT-DOME-3", place = "room" }
rod   = { existing = true, kind = "electrode", place = "roof" }
[cable]
C1 = { part = "GEN-CX-10", from = "donor", to = "arr.line" }
C2 = { part = "GEN-CX-10", from = "arr.gear", to = "amp.donor" }
C3 = { part = "GEN-CX-10", from = "amp.server", to = "dome" }
[bond]
G1 = { from = "mast", to = "rod", existing = true }
G2 = { from = "arr", to = "rod", part = "GEN-BC-6-CU" }
`, "build/wind build/clearance ground/conductor ground/electrodes ground/separation exposure/density exposure/distance gain/profile gain/uplink-eirp " +
			"gain/downlink-eirp gain/input gain/isolation gain/kit paper/consent paper/permit paper/personal paper/height power/volts"},
		"router": {`
profile = "us-router"
[place]
wall = { kind = "outdoor" }
[device]
mast  = { part = "GEN-MAST-42-3" }
panel = { part = "GEN-ANT-LP-10", on = "mast" }
radio = { part = "GEN-RTR-5G-4" }
[cable]
F1 = { part = "GEN-CX-10", from = "panel", to = "radio.cell1" }
[data]
E1 = { part = "GEN-CAT6A-OUT-S", from = "radio" }
`, "band/antenna ground/arrestor ground/bond ground/data build/wind build/clearance"},
		"vehicle": {`
setting = "vehicle"
profile = "us-mobile-wideband"
bands   = ["B12"]
[place]
roof = { kind = "vehicle-skin" }
cab  = { kind = "vehicle-cabin" }
[device]
whip    = { part = "GEN-ANT-MAG-2", place = "roof" }
amp     = { part = "GEN-AMP-W5-MOB50", place = "cab" }
battery = { existing = true, kind = "battery" }
[[joint]]
a = "whip.rf"
b = "amp.donor"
[wire]
P1 = { part = "GEN-W-14-2", from = "battery", to = "amp.power", fuse = "GEN-FUSE-5A" }
`, "gain/profile exposure/density exposure/distance power/volts power/fuse paper/consent paper/personal"},
	} {
		for stage, weight := range map[string]rules.Weight{"draft": rules.Punch, "review": rules.Punch, "construction": rules.Hold, "as-built": rules.Hold} {
			open := map[string]rules.Weight{}
			res := inspected(t, "[job]\nstage = \""+stage+"\""+c.plan)
			for _, f := range res.Findings {
				if f.Outcome == rules.Unknown && f.Rule.Grave {
					open[f.Rule.Name] = f.Weight
				}
			}
			for _, rule := range strings.Fields(c.want) {
				if open[rule] != weight {
					t.Errorf("%s, %s: what %s cannot assess weighs %s, want %s", name, stage, rule, open[rule], weight)
				}
			}
		}
	}
}
