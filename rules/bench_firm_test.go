package rules_test

import (
	"bytes"
	"fmt"
	"math/rand/v2"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"text/template"

	"driploop/rules"
)

// A firm far larger than those that are known, made by the same steps each time,
// to see what the program takes when there is much to read: 20 sorts of part in
// 100 makes, so 2,000 parts; 5,000 rows of shelf in 10 files; and as many plans of
// about 5 KB as wanted, built like the bakery of the demo. Most plans are sound.
const (
	benchMakes     = 100
	benchParts     = 20 * benchMakes
	benchRows      = 5000
	benchRowsAFile = 500
)

// benchJob is what differs from one made-up plan to the next.
type benchJob struct {
	N, Make, Jumpers     int // number of the job, make of its parts, make of its jumpers
	Feed, Gear           float64
	Legs                 []benchLeg
	Aim, Bearing         int
	Floor                float64 // height of the roof in metres
	RSRP, Shell          int
	Isolation            int
	Consent, Line, Inner string
}

type benchLeg struct {
	N             int
	Length        float64
	East, Distant float64
}

// newBenchJob makes job n. One job in nine has a long feed, one in eleven a stiff
// route, one in thirteen a consent still asked for, one in seventeen its arrestor
// turned round, and one in twenty-three little isolation.
func newBenchJob(n int) benchJob {
	r := rand.New(rand.NewPCG(uint64(n), 2026))
	j := benchJob{
		N: n, Make: n % benchMakes, Jumpers: r.IntN(benchMakes),
		Feed: 8 + float64(r.IntN(60))/10, Gear: 2 + float64(r.IntN(30))/10,
		Aim: r.IntN(360), Floor: 4 + float64(r.IntN(40))/10,
		RSRP: -104 + r.IntN(8), Shell: 12 + r.IntN(10), Isolation: 90 + r.IntN(6),
		Consent: "granted", Line: "line", Inner: "gear",
	}
	j.Bearing = (j.Aim + r.IntN(12)) % 360
	for leg := range 3 {
		j.Legs = append(j.Legs, benchLeg{N: leg + 1, Length: 6 + float64(r.IntN(80))/10,
			East: 3 + 5*float64(leg), Distant: 4 + float64(r.IntN(50))/10})
	}
	if n%9 == 0 {
		j.Feed += 20
	}
	if n%13 == 0 {
		j.Consent = "applied"
	}
	if n%17 == 0 {
		j.Line, j.Inner = j.Inner, j.Line
	}
	if n%23 == 0 {
		j.Isolation = 70
	}
	return j
}

var benchPlan = template.Must(template.New("plan").Parse(`# House and store are brick, steel lintels over both windows. Entry is beside the flue.

[job]
title      = "House and store {{.N}}, ground floor"
stage      = "review"
install_on = 2026-12-15
use        = "personal"
crew       = "north"
bands      = ["B12", "B13", "B5", "B4", "B2"]

[operator.northbank]
consent    = { state = "{{.Consent}}", ref = "letter {{.N}}", on = 2026-11-18 }
registered = { state = "granted", ref = "online form", on = 2026-11-24 }
[operator.harbourcell]
consent    = { state = "granted", ref = "mail, case {{.N}}", on = 2026-11-20 }
registered = { state = "granted", ref = "online form", on = 2026-11-23 }
[paper]
permit     = { state = "not-required", why = "town office, letter of 2026-11-02: under 3 m above the roof" }

[site]
shell_db         = {{.Shell}}
coldest          = "-15 C"
hottest          = "45 C"
wind             = "44 m/s"
wind_basis       = "asce7-strength"
terrain          = "C"
electrode        = "building"
lightning_system = "none"
mains            = "protected"
[[power_line]]
at = [14.0, 26.0, 7.0]
kv = 13.8

[place]
roof    = { kind = "outdoor", at = [0.0, 0.0, {{.Floor}}], access = "crew" }
entry   = { kind = "entry", at = [1.2, 0.4, 3.0] }
office  = { kind = "indoor", at = [2.5, 1.5, 2.0] }
shop    = { kind = "indoor", at = [4.0, 5.0, 2.7], access = "public" }
[[between]]
a = "roof"
b = "shop"
loss_db = [[700, {{.Shell}}], [2100, 24]]

[device]
mast = { part = "MT-{{.Make}}", place = "roof", free = "1.5 m" }
donor = { part = "ANT-{{.Make}}", on = "mast", up = "1.3 m", aim_deg = {{.Aim}}, people = "2.5 m" }
arrestor = { part = "ARR-{{.Make}}", place = "entry" }
amp = { part = "AMP-{{.Make}}", place = "office" }
psu = { part = "PSU-{{.Make}}", place = "office" }
split = { part = "SP3-{{.Make}}", place = "office" }
bar = { part = "BAR-{{.Make}}", place = "entry" }
rod = { existing = true, kind = "electrode", place = "entry" }
{{range .Legs}}
[device.dome-{{.N}}]
part   = "DOME-{{$.Make}}"
place  = "shop"
at     = [{{.East}}, 4.0, 2.7]
people = "1.2 m"
{{end}}
# The feed was walked with a tape, round the flue; the straight line would be shorter.
[cable.C1]
part   = "CX-{{.Make}}"
length = "{{.Feed}} m"
from   = "donor"
to     = "arrestor.{{.Line}}"
ends   = ["NM-{{.Make}}", "NM-{{.Make}}"]
way    = ["roof", "entry"]
[cable]
C2 = { part = "CX-{{.Make}}", length = "{{.Gear}} m", from = "arrestor.{{.Inner}}", to = "amp.donor", ends = ["NM-{{.Make}}", "NM-{{.Make}}"] }
J1 = { part = "JMP-{{.Jumpers}}", from = "amp.server", to = "split.in" }
{{range .Legs}}L{{.N}} = { part = "CX-{{$.Make}}", length = "{{.Length}} m", from = "split.out{{.N}}", to = "dome-{{.N}}", ends = ["NM-{{$.Make}}", "NM-{{$.Make}}"] }
{{end}}[wire]
P1 = { part = "WIRE-{{.Make}}", length = "1.5 m", from = "psu", to = "amp.power" }
[bond]
G1 = { from = "arrestor", to = "bar", part = "BC-{{.Make}}", length = "0.6 m" }
G2 = { from = "mast", to = "bar", part = "BC-{{.Make}}", length = "5.5 m" }
G3 = { from = "amp", to = "bar", part = "BC-{{.Make}}", length = "4 m" }
G4 = { from = "bar", to = "rod", part = "BC-{{.Make}}", length = "1.8 m" }

[[signal]]
operator    = "northbank"
band        = "B12"
width_mhz   = 10
rsrp_dbm    = {{.RSRP}}
sinr_db     = 6
bearing_deg = {{.Bearing}}
[[signal]]
operator    = "northbank"
band        = "B4"
width_mhz   = 20
rsrp_dbm    = {{.RSRP}}
sinr_db     = 4
bearing_deg = {{.Bearing}}
[[signal]]
operator    = "northbank"
band        = "B2"
width_mhz   = 10
rsrp_dbm    = {{.RSRP}}
sinr_db     = 5
bearing_deg = {{.Bearing}}
[[signal]]
operator    = "harbourcell"
band        = "B13"
width_mhz   = 10
rsrp_dbm    = {{.RSRP}}
sinr_db     = 5
bearing_deg = {{.Bearing}}
[[signal]]
operator    = "harbourcell"
band        = "B5"
width_mhz   = 10
rsrp_dbm    = {{.RSRP}}
sinr_db     = 5
bearing_deg = {{.Bearing}}
{{range slice .Legs 1}}[[area]]
name            = "room {{.N}}"
served_by       = ["dome-{{.N}}"]
distance        = "{{.Distant}} m"
walls           = ["plasterboard 12.5 mm", { name = "wood shelf", loss_db = 3 }]
target_rsrp_dbm = -105
before          = [
  { operator = "northbank", band = "B12", rsrp_dbm = -114 }, { operator = "northbank", band = "B4", rsrp_dbm = -118 },
  { operator = "northbank", band = "B2", rsrp_dbm = -117 }, { operator = "harbourcell", band = "B13", rsrp_dbm = -115 },
  { operator = "harbourcell", band = "B5", rsrp_dbm = -116 },
]
{{end}}[[reading]]
what     = "isolation"
from     = "amp.server"
to       = "amp.donor"
value_db = {{.Isolation}}
stage    = "survey"
on       = 2026-11-18
[[extra]]
part = "TAPE-{{.Make}}"
qty  = 2
`))

// benchMake is one of each sort of part; Db moves its figures a little from make
// to make.
var benchMake = template.Must(template.New("make").Parse(`
[part.ANT-{{.N}}]
kind         = "antenna"
name         = "log-periodic donor antenna {{.N}}, 698-960 / 1710-2700 MHz"
maker        = "Made-up Aerials"
mass_kg      = 1.4
rated        = ["outdoor"]
ambient_c    = [-40, 60]
max_w        = 50
dc           = "short"
wind_area_m2 = 0.06
size_mm      = 620
mast_mm      = [30, 52]
fixing       = "mast"
port.rf      = { connector = "N female", impedance_ohm = 50, polarization = "vertical" }
[[part.ANT-{{.N}}.range]]
mhz              = [698, 960]
gain_dbi         = {{.Db}}
vswr             = 1.5
front_to_back_db = 20
beam_deg         = [64, 55]
[[part.ANT-{{.N}}.range]]
mhz              = [1710, 2700]
gain_dbi         = {{.Db}}
vswr             = 1.5
front_to_back_db = 22
beam_deg         = [50, 44]
[part.DOME-{{.N}}]
kind      = "antenna"
name      = "ceiling dome {{.N}}"
rated     = ["plenum"]
ambient_c = [-20, 55]
max_w     = 10
dc        = "short"
size_mm   = 190
fixing    = "ceiling"
port.rf   = { connector = "N female", impedance_ohm = 50, polarization = "vertical" }
[[part.DOME-{{.N}}.range]]
mhz      = [698, 960]
gain_dbi = 3.0
vswr     = 1.8
[[part.DOME-{{.N}}.range]]
mhz      = [1710, 2700]
gain_dbi = 5.0
vswr     = 1.8
[part.AMP-{{.N}}]
kind               = "amplifier"
name               = "fixed wideband booster {{.N}}, five bands"
serials            = true
ambient_c          = [-10, 50]
class              = "wideband"
mobility           = "fixed"
coupling           = ["antenna"]
network_protection = true
isolation_control  = true
step_db            = 1
max_in_dbm         = 0
damage_in_dbm      = 10
load               = { volts = [11.4, 12.6], w = 30 }
port.donor         = { connector = "N female", impedance_ohm = 50, side = "donor" }
port.server        = { connector = "N female", impedance_ohm = 50, side = "server" }
port.power         = { use = "power" }
{{range .Bands}}[[part.AMP-{{$.N}}.band]]
band     = "{{.}}"
uplink   = { gain_db = 62, max_out_dbm = 20, nf_db = 5 }
downlink = { gain_db = 62, max_out_dbm = 12, nf_db = 6 }
{{end}}[[part.AMP-{{.N}}.kit]]
side          = "donor"
antenna       = "ANT-{{.N}}"
least_loss_db = 0.5
bands         = ["B12", "B13", "B5", "B4", "B2"]
[[part.AMP-{{.N}}.kit]]
side          = "server"
antenna       = "DOME-{{.N}}"
least_loss_db = 0.0
bands         = ["B12", "B13", "B5", "B4", "B2"]
[part.CX-{{.N}}]
kind             = "cable"
name             = "10 mm low-loss coaxial cable {{.N}}"
rated            = ["outdoor", "riser"]
fire             = "CATVR"
impedance_ohm    = 50
loss_db_per_100m = [[150, 5.2], [450, 9.3], [700, 11.7], [900, 13.4], [1700, 18.9], [1900, 20.1], [2150, 21.6], [2700, 24.5]]
max_mhz          = 4000
od_mm            = 10.3
bend_radius      = "52 mm"
{{range $i, $face := .Faces}}[part.{{$face.ID}}-{{$.N}}]
kind          = "connector"
name          = "{{$face.Name}} clamp connector {{$.N}}"
rated         = ["outdoor"]
connector     = "{{$face.Name}}"
impedance_ohm = 50
fits          = ["CX-{{$.N}}"]
{{end}}[part.JMP-{{.N}}]
kind    = "jumper"
name    = "jumper N male to N male {{.N}}"
cable   = "CX-{{.N}}"
length  = "1 m"
ends    = ["N male", "N male"]
loss_db = [[700, 0.22], [2700, 0.42]]
{{range .Ways}}[part.SP{{.}}-{{$.N}}]
kind    = "splitter"
name    = "splitter {{$.N}}"
dc      = "block"
max_w   = 20
port.in = { connector = "N female", impedance_ohm = 50 }
port.out1 = { connector = "N female", impedance_ohm = 50 }
port.out2 = { connector = "N female", impedance_ohm = 50 }
{{if eq . 3}}port.out3 = { connector = "N female", impedance_ohm = 50 }
{{end}}[[part.SP{{.}}-{{$.N}}.path]]
from    = "in"
to      = ["out1", "out2"{{if eq . 3}}, "out3"{{end}}]
mhz     = [600, 2700]
loss_db = [[700, 5.1], [2700, 5.4]]
{{end}}[part.LOAD-{{.N}}]
kind    = "load"
name    = "termination N male {{.N}}"
max_w   = 2
port.rf = { connector = "N male", impedance_ohm = 50 }
[part.ARR-{{.N}}]
kind        = "arrestor"
name        = "gas-tube arrestor {{.N}}"
rated       = ["outdoor"]
principle   = "gas-tube"
spark_v     = 90
dc          = "pass"
max_w       = 50
bulkhead    = true
directional = true
port.line   = { connector = "N female", impedance_ohm = 50 }
port.gear   = { connector = "N female", impedance_ohm = 50 }
[[part.ARR-{{.N}}.path]]
from    = "line"
to      = "gear"
mhz     = [1, 4000]
loss_db = [[700, 0.1], [2700, 0.25]]
[part.MT-{{.N}}]
kind      = "mount"
name      = "steel mast {{.N}}"
rated     = ["outdoor"]
mast_mm   = 42.4
wall_mm   = 2.9
yield_mpa = 235
length    = "2 m"
[part.BC-{{.N}}]
kind      = "bond-conductor"
name      = "copper bonding conductor {{.N}}"
material  = "copper"
size      = "6 AWG"
insulated = true
rated     = ["outdoor"]
[part.BAR-{{.N}}]
kind    = "bond-point"
name    = "copper ground bar {{.N}}"
rated   = ["outdoor"]
[part.ROD-{{.N}}]
kind    = "electrode"
name    = "copper-bonded ground rod {{.N}}"
[part.PSU-{{.N}}]
kind     = "supply"
name     = "plug supply {{.N}}"
volts    = 12
amps     = 5
port.out = { use = "power" }
[part.WIRE-{{.N}}]
kind  = "wire"
name  = "two-core wire {{.N}}"
size  = "1.5 mm2"
cores = 2
[part.FUSE-{{.N}}]
kind  = "fuse"
name  = "blade fuse with holder {{.N}}"
amps  = 5
[part.TAPE-{{.N}}]
kind       = "consumable"
name       = "sealing tape {{.N}}"
per        = "joint"
holds      = 6
expendable = true
`))

type benchFace struct{ ID, Name string }

// benchCounted are the sorts of part that lie in bins; cable, conductor and wire
// lie on reels.
var benchCounted = []string{"ANT", "DOME", "AMP", "NM", "NF", "TM", "JMP", "SP2", "SP3",
	"LOAD", "ARR", "MT", "BAR", "ROD", "PSU", "FUSE", "TAPE"}

const benchWorkspace = `[workspace]
name     = "Made-up Firm"
profile  = "us-fixed-wideband"
code     = "us-nec-2020"
currency = "USD"

[shelf.shop]
kind = "shop"
[shelf.van-1]
kind = "van"
[shelf.van-2]
kind = "van"
[crew.north]
shelves = ["van-1", "shop"]
`

// benchFirm is a workspace with that many plans. Above 1,000 the plans are the
// first 1,000 again under other names, so that the texts themselves stay small.
func benchFirm(plans int) memory {
	tree := memory{files: map[string]string{rules.WorkspaceFile: benchWorkspace}}
	for file := range benchMakes / 10 {
		var b bytes.Buffer
		for i := range 10 {
			writeBenchMake(&b, 10*file+i)
		}
		tree.files[fmt.Sprintf("catalog/makes-%02d.toml", file)] = b.String()
	}
	for file := range benchRows / benchRowsAFile {
		tree.files[fmt.Sprintf("stock/counts/2026-11-20-all-%02d.toml", file)] = benchSheet(file * benchRowsAFile)
	}
	for n := range plans {
		name := fmt.Sprintf("plans/job-%05d.toml", n)
		if n >= 1000 {
			tree.files[name] = tree.files[fmt.Sprintf("plans/job-%05d.toml", n%1000)]
			continue
		}
		tree.files[name] = benchPlanText(n)
	}
	return tree
}

func benchPlanText(n int) string {
	var b strings.Builder
	if err := benchPlan.Execute(&b, newBenchJob(n)); err != nil {
		panic(err)
	}
	return b.String()
}

func writeBenchMake(b *bytes.Buffer, n int) {
	err := benchMake.Execute(b, map[string]any{
		"N": n, "Db": 8 + float64(n%20)/10, "Ways": []int{2, 3},
		"Bands": []string{"B12", "B13", "B5", "B4", "B2"},
		"Faces": []benchFace{{"NM", "N male"}, {"NF", "N female"}, {"TM", "TNC male"}},
	})
	if err != nil {
		panic(err)
	}
}

// benchSheet is a sheet of rows from the first on: bins sort by sort, make by make
// and shelf by shelf, then reels. A thousand plans find on it most of what they take.
func benchSheet(first int) string {
	var b strings.Builder
	b.WriteString("[sheet]\non = 2026-11-20\nby = \"jo\"\n")
	shelves := []string{"shop", "van-1", "van-2"}
	bins := len(benchCounted) * benchMakes
	for row := first; row < first+benchRowsAFile; row++ {
		shelf, bin := row/bins, row%bins
		if shelf < 2 || bin < bins/2 {
			fmt.Fprintf(&b, "[[count]]\npart = \"%s-%d\"\nwhere = \"%s\"\nqty = %d\n",
				benchCounted[bin%len(benchCounted)], bin/len(benchCounted), shelves[shelf], 400+row%40)
			continue
		}
		fmt.Fprintf(&b, "[[reel]]\ntag = \"R-%d\"\npart = \"%s-%d\"\nwhere = \"shop\"\nleft = \"%d m\"\nhow = \"tape\"\n",
			row, []string{"CX", "BC", "WIRE"}[row%3], row%benchMakes, 720+row%80)
	}
	return b.String()
}

// writeTree puts a tree on disk.
func writeTree(t *testing.T, tree memory, dir string) {
	t.Helper()
	for name, text := range tree.files {
		file := filepath.Join(dir, filepath.FromSlash(name))
		if err := os.MkdirAll(filepath.Dir(file), 0o755); err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(file, []byte(text), 0o644); err != nil {
			t.Fatal(err)
		}
	}
}
