package bom_test

import (
	"fmt"
	"reflect"
	"slices"
	"strings"
	"testing"

	"driploop/bom"
	"driploop/catalog/source"
)

// planKeys are the keys that the documentation of the formats lists for a plan.
const planKeys = `
job.title job.stage job.because job.ended job.install_on job.profile job.code job.setting job.use job.crew job.bands
operator.consent.state operator.consent.ref operator.consent.on operator.consent.why
operator.registered.state operator.registered.ref operator.registered.on operator.registered.why
paper.permit.state paper.permit.ref paper.permit.on paper.permit.why
site.shell_db site.coldest site.hottest site.wind site.wind_basis site.terrain site.electrode site.lightning_system site.mains
site.lightning_down_conductors site.lightning_length site.lightning_gap site.lightning_medium site.lightning_earths_differ
site.volts site.skin
power_line.at power_line.kv
place.kind place.at place.hottest place.coldest place.access place.airbag
between.a between.b between.loss_db
device.part device.kind device.existing device.supplied_by device.place device.on device.up device.free device.at device.aim_deg
device.below_roof_edge device.off_wall device.lightning
device.people device.coupling device.serial device.set device.copies
cable.part cable.like cable.length cable.from cable.to cable.ends cable.through cable.way cable.least_bend cable.existing cable.supplied_by
joint.a joint.b joint.way
data.part data.length data.from data.to data.way data.existing data.supplied_by
wire.part wire.length wire.from wire.to wire.fuse wire.fuse_from_source wire.switched wire.way wire.existing wire.supplied_by
bond.from bond.to bond.part bond.direct bond.length bond.bends bond.raceway bond.existing bond.supplied_by
signal.operator signal.band signal.mhz signal.width_mhz signal.rsrp_dbm signal.scs_khz signal.sinr_db signal.bearing_deg signal.at
signal.on signal.through.gain_dbi signal.through.loss_db
area.name area.served_by area.distance area.walls area.floors area.environment area.operators area.target_rsrp_dbm area.before
reading.what reading.from reading.to reading.band reading.operator reading.at reading.mhz reading.value_db reading.value_dbm
reading.value reading.value_ohm reading.value_v reading.length reading.serial reading.stage reading.on reading.by
reserve.tag reserve.part reserve.qty reserve.at reserve.cable reserve.until
extra.part extra.qty
waive.rule waive.on waive.band waive.up_to waive.because waive.by waive.until
`

func TestPlanHasItsKeys(t *testing.T) {
	want := strings.Fields(planKeys)
	got := recorded("", bom.DescribePlan())
	for _, k := range got {
		if !slices.Contains(want, k) {
			t.Errorf("a plan reads %s, which its format does not list", k)
		}
	}
	for _, k := range want {
		if !slices.Contains(got, k) {
			t.Errorf("a plan does not read %s, which its format lists", k)
		}
	}
	if slices.Sort(got); len(slices.Compact(got)) != len(want) {
		t.Error("a key is declared twice")
	}
	for _, k := range want {
		name := k[strings.LastIndexByte(k, '.')+1:]
		if !strings.Contains(fullPlan, "\n"+name+" = ") && !strings.Contains(fullPlan, " "+name+" = ") {
			t.Errorf("the full plan lacks %s", k)
		}
	}
}

func recorded(prefix string, r *source.Record) []string {
	var out []string
	for _, k := range r.Keys {
		if k.Sub != nil {
			out = append(out, recorded(prefix+k.Name+".", k.Sub)...)
			continue
		}
		out = append(out, prefix+k.Name)
	}
	return out
}

// readPlan reads a plan and lists its problems as "line: what is said; what to do".
func readPlan(t *testing.T, text string) (*bom.Plan, []string) {
	t.Helper()
	f, problems := source.NewFile("plans/north/quay-lane.toml", []byte(text))
	d, more := source.Parse(f)
	p, rest := bom.ReadPlan(d)
	var out []string
	for _, x := range append(append(problems, more...), rest...) {
		out = append(out, fmt.Sprintf("%d: %s; %s", x.At.Line(), x.Says, x.Do))
	}
	return p, out
}

func TestFullPlan(t *testing.T) {
	p, problems := readPlan(t, fullPlan)
	if len(problems) > 0 {
		t.Fatalf("problems:\n%s", strings.Join(problems, "\n"))
	}
	got := values(p)
	want := strings.Split(strings.TrimSpace(fullPlanValues), "\n")
	for _, l := range got {
		if !slices.Contains(want, l) {
			t.Errorf("read      %s", l)
		}
	}
	for _, l := range want {
		if !slices.Contains(got, l) {
			t.Errorf("expected  %s", l)
		}
	}
	if !t.Failed() && !slices.Equal(got, want) {
		t.Error("the same in another order")
	}
}

// Every record knows where it stands, and every value in it.
func TestPlacesInThePlan(t *testing.T) {
	p, _ := readPlan(t, fullPlan)
	for at, want := range map[source.Place]string{
		p.Job.At:                        "job",
		p.Operators[0].At:               "north",
		p.Operators[0].Consent.At:       "consent",
		p.Permit.At:                     "permit",
		p.Site.At:                       "site",
		p.PowerLines[0].At:              "[[power_line]]",
		p.Places[0].At:                  "roof",
		p.Betweens[0].At:                "[[between]]",
		p.Devices[1].At:                 "donor",
		p.Devices[3].Copies[1].At:       "dome-3",
		p.Devices[4].Set[0].At:          "B5",
		p.Cables[0].At:                  "C1",
		p.Joints[0].At:                  "[[joint]]",
		p.Data[0].At:                    "E1",
		p.Wires[0].At:                   "P1",
		p.Bonds[0].At:                   "G1",
		p.Signals[0].At:                 "[[signal]]",
		p.Areas[0].At:                   "[[area]]",
		p.Readings[0].At:                "[[reading]]",
		p.Reserves[0].At:                "[[reserve]]",
		p.Extras[0].At:                  "[[extra]]",
		p.Waivers[0].At:                 "[[waive]]",
		p.Cables[0].Ends.V[1].At:        `"NC-10-NM-CRIMP"`,
		p.Cables[0].Way.V[1].At:         `"entry 0.5 m"`,
		p.Cables[0].Through.V[0].At:     `"AD-NF-SMAM"`,
		p.Areas[0].ServedBy.V[1].At:     `"dome-2"`,
		p.Areas[0].Walls.V[1].V.Name.At: `"steel shelf"`,
		p.Job.Bands.V[2].At:             `"B4"`,
	} {
		if at.Text() != want {
			t.Errorf("a place shows %q, want %q", at.Text(), want)
		}
	}
	if p.ID != "quay-lane" || p.File.Path != "plans/north/quay-lane.toml" {
		t.Errorf("the plan is %q of %q", p.ID, p.File.Path)
	}
}

func TestJobOf(t *testing.T) {
	for path, want := range map[string]string{
		"plans/quay-lane.toml": "quay-lane", "quay-lane.toml": "quay-lane", "a/b/c.d.toml": "c.d", "x": "x", "a/.toml": ".toml", "a.b/c": "c", "": "",
	} {
		if got := bom.JobOf(path); got != want {
			t.Errorf("the job of %q is %q, want %q", path, got, want)
		}
	}
}

func TestPlanCrossChecks(t *testing.T) {
	for _, c := range []struct {
		name, text string
		want       []string
	}{
		{"nothing at all", "", nil},
		{"cancelled without a reason", "[job]\nstage = \"cancelled\"\n", []string{`1: "job" has no because: a cancelled job says why`}},
		{"cancelled with one", "[job]\nstage = \"cancelled\"\nbecause = \"sold\"\n", nil},
		{"cancelled with one that cannot be read", "[job]\nstage = \"cancelled\"\nbecause = 3\n", []string{"3: because: the number 3 was read"}},
		{"evidence without a state", "[operator.n]\nconsent = { ref = \"mail\" }\n", []string{`2: "consent" has no state`}},
		{"evidence in another state", "[paper]\npermit = { state = \"asked\" }\n", []string{`2: state: "asked" is not one of missing, applied`}},
		{"a device without part", "[device.a]\nplace = \"p\"\n", []string{`1: "a" has no part: only what exists already may give its kind instead`}},
		{"a new device of a kind", "[device.a]\nkind = \"electrode\"\n", []string{`1: "a" has no part`}},
		{"an existing device without kind", "[device.a]\nexisting = true\n", []string{`1: "a" has no part`}},
		{"an existing device of a kind", "[device.a]\nexisting = true\nkind = \"electrode\"\n", nil},
		{"an existing device of no kind", "[device.a]\nexisting = true\nkind = \"rod\"\n", []string{`3: kind: "rod" is no kind of part`}},
		{"existing in quotes", "[device.a]\nexisting = \"true\"\nkind = \"electrode\"\n", []string{`2: existing: the text "true" was read`}},
		{"a device with a part that cannot be read", "[device.a]\npart = 3\n", []string{"2: part: the number 3 was read"}},
		{"a cable without part", "[cable.a]\nfrom = \"x\"\n", []string{`1: "a" has no part: or like`}},
		{"a cable like another", "[cable.a]\nlike = \"b\"\n", nil},
		{"one end", "[cable.a]\npart = \"b\"\nends = [\"N male\"]\n", []string{"3: ends: 1 ends were read, two are expected"}},
		{"three ends", "[cable.a]\npart = \"b\"\nends = [\"N male\", \"N male\", \"X\"]\n", []string{"3: ends: 3 ends were read"}},
		{"an end that is neither", "[cable.a]\npart = \"b\"\nends = [\"N male\", \"N males\"]\n", []string{`3: ends: "N males" ends in "males"`}},
		{"a joint with one side", "[[joint]]\na = \"x.y\"\n", []string{"1: this table has no b"}},
		{"a bond of nothing", "[bond.G]\nfrom = \"a\"\nto = \"b\"\n", []string{`1: "G" has no part: or direct = true`}},
		{"a direct bond", "[bond.G]\nfrom = \"a\"\nto = \"b\"\ndirect = true\n", nil},
		{"an existing bond", "[bond.G]\nfrom = \"a\"\nto = \"b\"\nexisting = true\n", nil},
		{"a bond direct in quotes", "[bond.G]\nfrom = \"a\"\nto = \"b\"\ndirect = \"true\"\n", []string{`4: direct: the text "true" was read`}},
		{"a bond existing in quotes", "[bond.G]\nfrom = \"a\"\nto = \"b\"\nexisting = 1\n", []string{"4: existing: the number 1 was read"}},
		{"a bond without ends", "[bond.G]\npart = \"a\"\n", []string{`1: "G" has no from`, `1: "G" has no to`}},
		{"a reserve of nothing", "[[reserve]]\nuntil = 2026-12-05\n", []string{"1: this table has no tag: or part and qty"}},
		{"a reserve of two things", "[[reserve]]\ntag = \"R-1\"\npart = \"X\"\nuntil = 2026-12-05\n", []string{"1: a reserve names a tag or a part, one of the two"}},
		{"a reserve without end", "[[reserve]]\ntag = \"R-1\"\n", []string{"1: this table has no until"}},
		{"an extra without qty", "[[extra]]\npart = \"X\"\n", []string{"1: this table has no qty"}},
		{"an extra of none", "[[extra]]\npart = \"X\"\nqty = 0\n", []string{"3: qty: 0 is outside 1 to 1000000"}},
		{"an extra by half", "[[extra]]\npart = \"X\"\nqty = 1.5\n", []string{"3: qty: the number 1.5 was read, a whole number is expected"}},
		{"an extra without unit", "[[extra]]\npart = \"X\"\nqty = \"12\"\n", []string{`3: qty: "12" needs a number, a space and a unit`}},
		{"an extra of no length", "[[extra]]\npart = \"X\"\nqty = \"0 m\"\n", []string{"3: qty: a length above 0 is expected"}},
		{"two coordinates", "[[power_line]]\nat = [1, 2]\nkv = 1\n", []string{"2: at: 2 numbers were read, three are expected"}},
		{"a reference with two dots", "[cable.a]\npart = \"b\"\nfrom = \"x.y.z\"\n", []string{`3: from: "x.y.z" is no reference`}},
		{"a reference that ends in a dot", "[cable.a]\npart = \"b\"\nfrom = \"x.\"\n", []string{`3: from: "x." is no reference`}},
		{"a reference to a port of nothing", "[cable.a]\npart = \"b\"\nfrom = \".x\"\n", []string{`3: from: ".x" is no reference`}},
		{"a way with a length", "[cable.a]\npart = \"b\"\nway = [\"entry 0.5 m\", \"roof\"]\n", nil},
		{"a way with a length that is none", "[cable.a]\npart = \"b\"\nway = [\"entry 0.5\", \"entry \", \"a.b\"]\n",
			[]string{`3: way: "0.5" needs a number`, `3: way: "" needs a number`, `3: way: "a.b" names no place`}},
		{"a way of 100 places", "[cable.a]\npart = \"b\"\nway = [" + strings.Repeat("\"p\", ", 100) + "]\n", nil},
		{"a longer one", "[cable.a]\npart = \"b\"\nway = [" + strings.Repeat("\"p\", ", 101) + "]\n", []string{"3: way: 101 places were read, 100 are the most"}},
		{"back-off of no band", "[device.a]\npart = \"b\"\nset = { B5 = { back_off_db = 3 }, B0 = { back_off_db = 3 } }\n", []string{`3: set: "B0" is no band`}},
		{"back-off left out", "[device.a]\npart = \"b\"\nset = { B5 = { } }\n", []string{"3: B5: this table has no back_off_db"}},
		{"a copy with a name that cannot be referred to", "[device.a]\npart = \"b\"\ncopies = { \"a b\" = [1, 2, 3] }\n", []string{`3: copies: "a b" is no name`}},
		{"a copy of another shape", "[device.a]\npart = \"b\"\ncopies = { c = \"x\", d = { plac = \"y\" } }\n",
			[]string{`3: c: the text "x" was read, a table is expected`, `3: d: nothing reads the key "plac" here; did you mean place?`}},
		{"walls", "[[area]]\nname = \"a\"\nwalls = [\"x\", { loss_db = 3 }, 4]\n",
			[]string{"3: walls: this table has no name", "3: walls: the number 4 was read, a table is expected"}},
		{"before", "[[area]]\nname = \"a\"\nbefore = [{ operator = \"n\", band = \"B5\" }]\n", []string{"3: before: this table has no rsrp_dbm"}},
		{"an SWR below one", "[[reading]]\nwhat = \"vswr\"\nvalue = 0.9\n", []string{"3: value: 0.9 is outside what begins at 1"}},
		{"two devices but for case", "[device]\namp = { part = \"a\" }\nAmp = { part = \"a\" }\n", []string{`3: the name "Amp" stands already, but for its case`}},
	} {
		_, got := readPlan(t, c.text)
		if len(got) != len(c.want) {
			t.Errorf("%s: %d problems, want %d:\n  %s", c.name, len(got), len(c.want), strings.Join(got, "\n  "))
			continue
		}
		for i := range got {
			if !strings.HasPrefix(got[i], c.want[i]) {
				t.Errorf("%s: problem %d is %s, want %s", c.name, i+1, got[i], c.want[i])
			}
		}
	}
}

// A key that no record knows is found in every record.
func TestUnknownKeysOfAPlan(t *testing.T) {
	for _, table := range []string{"job", "paper", "site", "operator.x", "place.x", "device.x", "cable.x", "data.x", "wire.x", "bond.x",
		"operator.x.consent", "operator.x.registered", "paper.permit",
		"[power_line]", "[between]", "[joint]", "[signal]", "[area]", "[reading]", "[reserve]", "[extra]", "[waive]"} {
		_, got := readPlan(t, "["+table+"]\nzzz-zzz = 1\n")
		if found := slices.ContainsFunc(got, func(s string) bool { return strings.HasPrefix(s, `2: nothing reads the key "zzz-zzz" here`) }); !found {
			t.Errorf("[%s] takes a key that nobody knows: %v", table, got)
		}
	}
	_, got := readPlan(t, "[devices.x]\npart = \"a\"\n")
	if len(got) != 1 || !strings.Contains(got[0], "did you mean device?") {
		t.Errorf("a table that nobody knows: %v", got)
	}
}

// In a file that was read in part nothing is said to be missing.
func TestPartialPlanMissesNothing(t *testing.T) {
	_, got := readPlan(t, "[device.a]\nplace = \"x\"\nplace = \"y\"\n[[reserve]]\n[bond.G]\n")
	if len(got) != 1 || !strings.Contains(got[0], "is defined a second time") {
		t.Errorf("problems:\n%s", strings.Join(got, "\n"))
	}
}

func TestEvidenceCounts(t *testing.T) {
	for text, want := range map[string]bool{
		`{ state = "granted" }`: true, `{ state = "not-required", why = "w" }`: true, `{ state = "not-required" }`: false,
		`{ state = "applied", why = "w" }`: false, `{ state = "missing" }`: false, `{ state = "refused", why = "w" }`: false,
	} {
		p, _ := readPlan(t, "[paper]\npermit = "+text+"\n")
		if p.Permit.Counts() != want {
			t.Errorf("%s counts: %v, want %v", text, !want, want)
		}
	}
	p, _ := readPlan(t, "")
	if p.Permit.Counts() {
		t.Error("a paper that is not there counts")
	}
}

// values lists what is set in a plan, one line a value: the path of fields, then the
// value as the file writes it and, where that reads otherwise, what it means.
func values(p *bom.Plan) []string {
	var out []string
	v := reflect.ValueOf(p).Elem()
	for i := range v.NumField() {
		if f := v.Type().Field(i); f.Name != "ID" && f.Name != "File" {
			out = append(out, valuesOf(f.Name, v.Field(i))...)
		}
	}
	return out
}

func valuesOf(path string, v reflect.Value) []string {
	switch {
	case isVal(v.Type()):
		if !v.FieldByName("Set").Bool() {
			return nil
		}
		raw := v.FieldByName("At").Interface().(source.Place).Text()
		text := plainText(v)
		if strings.Trim(raw, `"`) == text {
			return []string{path + ": " + text}
		}
		return []string{path + ": " + raw + " = " + text}
	case v.Type() == reflect.TypeFor[source.Place]():
		return nil
	}
	var out []string
	switch v.Kind() {
	case reflect.Pointer:
		if !v.IsNil() {
			out = valuesOf(path, v.Elem())
		}
	case reflect.Slice:
		for i := range v.Len() {
			out = append(out, valuesOf(fmt.Sprintf("%s.%d", path, i+1), v.Index(i))...)
		}
	case reflect.Struct:
		for i := range v.NumField() {
			out = append(out, valuesOf(path+"."+v.Type().Field(i).Name, v.Field(i))...)
		}
	case reflect.String:
		out = []string{path + ": " + v.String()}
	default:
		out = []string{fmt.Sprintf("%s: a field of an unexpected kind, %v", path, v.Kind())}
	}
	return out
}

func isVal(t reflect.Type) bool {
	return t.Kind() == reflect.Struct && strings.HasPrefix(t.Name(), "Val[")
}

// plainText is a value without the places of what is in it.
func plainText(v reflect.Value) string {
	switch {
	case isVal(v.Type()):
		if !v.FieldByName("Set").Bool() {
			return "-"
		}
		return plainText(v.FieldByName("V"))
	case v.Kind() == reflect.Slice:
		var items []string
		for i := range v.Len() {
			items = append(items, plainText(v.Index(i)))
		}
		return "[" + strings.Join(items, ", ") + "]"
	case v.Kind() == reflect.Struct && !v.Type().Implements(reflect.TypeFor[fmt.Stringer]()):
		var fields []string
		for i := range v.NumField() {
			fields = append(fields, plainText(v.Field(i)))
		}
		return "(" + strings.Join(fields, " ") + ")"
	}
	return fmt.Sprint(v.Interface())
}
