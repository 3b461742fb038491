package catalog_test

import (
	"fmt"
	"reflect"
	"slices"
	"sort"
	"strings"
	"testing"

	"driploop/catalog"
	"driploop/catalog/source"
)

// commonKeys, portKeys and so on are the keys that the documentation of the formats
// lists; a key that is read and not listed there, or the other way round, is a
// defect of one of the two.
const (
	commonKeys = "kind name maker code sheet status instead mass_kg rated ambient_c tools bags serials expendable"
	portKeys   = "port.connector port.impedance_ohm port.use port.poe port.unused port.bands port.dc_out.volts port.dc_out.ma " +
		"port.lead.cable port.lead.length port.lead.in_gain port.side port.polarization"
	pathKeys    = "path.from path.to path.mhz path.loss_db"
	antennaKeys = "range.mhz range.gain_dbi range.vswr range.front_to_back_db range.beam_deg range.ports xpd_db port_isolation_db " +
		"max_w pim_dbc dc wind_area_m2 size_mm mast_mm needs_ground_plane fixing"
	passiveKeys  = portKeys + " " + pathKeys + " dc max_w pim_dbc isolation_db"
	supplyKeys   = portKeys + " volts amps poe " + bodyKeys
	bodyKeys     = "wind_area_m2 size_mm"
	dataKeys     = portKeys + " category screened conductor size fire poe"
	loadKeys     = "load.volts load.w"
	bondKeys     = "material size insulated"
	wireKeys     = "size cores amps"
	gainKeys     = "band.uplink.gain_db band.uplink.max_out_dbm band.uplink.nf_db band.downlink.gain_db band.downlink.max_out_dbm band.downlink.nf_db"
	amplifierRow = "class mobility coupling coupling_db network_protection isolation_control step_db max_in_dbm damage_in_dbm"
)

var kindKeys = map[string]string{
	"antenna":   portKeys + " " + antennaKeys,
	"cable":     "impedance_ohm loss_db_per_100m loss_db_per_100ft max_mhz od_mm bend_radius dc_ohm_per_km velocity fire",
	"connector": "connector impedance_ohm fits loss_db",
	"jumper":    "cable length ends loss_db",
	"adapter":   passiveKeys, "splitter": passiveKeys, "tap": passiveKeys, "coupler": passiveKeys, "diplexer": passiveKeys,
	"filter": passiveKeys, "attenuator": passiveKeys, "dc-block": passiveKeys, "bias-tee": passiveKeys, "load": passiveKeys,
	"arrestor": portKeys + " " + pathKeys + " principle spark_v dc max_w bulkhead directional",
	"amplifier": portKeys + " " + amplifierRow + " band.band " + gainKeys +
		" kit.side kit.antenna kit.max_gain_dbi kit.least_loss_db kit.bands " + loadKeys + " " + bodyKeys,
	"router": portKeys + " bands tx_dbm nf_db streams max_antenna_gain_dbi " + loadKeys + " " + antennaKeys,
	"supply": supplyKeys, "injector": supplyKeys, "switch": supplyKeys, "battery": supplyKeys,
	"data-cable": dataKeys, "data-arrestor": dataKeys,
	"wire": wireKeys, "fuse": wireKeys,
	"bond-conductor": bondKeys, "bond-point": bondKeys, "electrode": bondKeys,
	"mount":      "mast_mm wall_mm yield_mpa length ballast.mass_kg ballast.base ballast.friction",
	"consumable": "per holds",
}

func TestEveryKindHasItsKeys(t *testing.T) {
	names := catalog.KindNames()
	if len(names) != len(kindKeys) {
		t.Errorf("%d kinds, %d are expected", len(names), len(kindKeys))
	}
	for _, kind := range names {
		want := strings.Fields(commonKeys + " " + kindKeys[kind])
		got := recorded("", catalog.DescribePart(kind))
		for _, k := range got {
			if !slices.Contains(want, k) {
				t.Errorf("%s reads %s, which its format does not list", kind, k)
			}
		}
		for _, k := range want {
			if !slices.Contains(got, k) {
				t.Errorf("%s does not read %s, which its format lists", kind, k)
			}
		}
		if sort.Strings(got); len(slices.Compact(got)) != len(want) {
			t.Errorf("%s declares a key twice: %v", kind, got)
		}
	}
}

// recorded lists the keys of a record, those of its tables behind a dot.
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

// What is recorded is what is read, whatever the values are: each key that a kind
// records is read when it stands alone, and no key that it does not record is. The
// keys of an antenna are read of a router that has ranges, and so an antenna.
func TestRecordedKeysAreRead(t *testing.T) {
	all := map[string]bool{}
	for _, kind := range catalog.KindNames() {
		for _, k := range catalog.DescribePart(kind).Keys {
			all[k.Name] = true
		}
	}
	for _, kind := range catalog.KindNames() {
		r := catalog.DescribePart(kind)
		for name := range all {
			if name == "kind" {
				continue
			}
			src := fmt.Sprintf("[part.X]\nkind = %q\n%s = 1979-05-27T07:32:00Z\n", kind, name) // no key takes this value
			if kind == "router" && name != "range" {
				src += "[[part.X.range]]\n"
			}
			unread := fmt.Sprintf("nothing reads the key %q here", name)
			said := false
			_, problems := parts(t, src)
			for _, p := range problems {
				said = said || strings.Contains(p, unread)
			}
			if known := r.Key(name) != nil; known == said {
				t.Errorf("%s records %s: %v, but nothing reads it: %v", kind, name, known, said)
			}
		}
	}
}

// The same for what a port, a path, a range and so on hold, and whatever else the
// port carries.
func TestRecordedPortKeysAreRead(t *testing.T) {
	for _, use := range []string{"", "cellular", "data", "power"} {
		for _, k := range catalog.DescribePart("amplifier").Key("port").Sub.Keys {
			src := "[part.X]\nkind = \"amplifier\"\n[part.X.port.a]\n"
			if use != "" && k.Name != "use" {
				src += fmt.Sprintf("use = %q\n", use)
			}
			_, problems := parts(t, src+k.Name+" = 1979-05-27T07:32:00Z\n")
			for _, p := range problems {
				if strings.Contains(p, "nothing reads") {
					t.Errorf("with use %q: %s", use, p)
				}
			}
		}
	}
}

func TestFullExampleOfEveryKind(t *testing.T) {
	for _, kind := range catalog.KindNames() {
		example := examples[kind]
		if example.toml == "" {
			t.Errorf("%s has no example", kind)
			continue
		}
		src := fmt.Sprintf("[part.X]\nkind = %q\n", kind) + commonExample + example.toml
		list, problems := parts(t, src)
		if len(problems) > 0 || len(list) != 1 {
			t.Errorf("%s: %d parts, problems:\n%s", kind, len(list), strings.Join(problems, "\n"))
			continue
		}
		p := list[0]
		if p.ID != "X" || p.At.Text() != "X" || p.At.Line() != 1 || p.Kind.V != kind {
			t.Errorf("%s is %s %s at line %d", kind, p.ID, p.Kind.V, p.At.Line())
		}
		got := values(p)
		want := strings.Split(strings.TrimSpace(fmt.Sprintf(commonValues, kind)+example.values), "\n")
		if !slices.Equal(got, want) {
			t.Errorf("%s is read as\n%s", kind, unlike(got, want))
		}
		checkComplete(t, kind, src)
	}
}

// checkComplete holds that the example has every key that its kind records; of two
// keys that exclude each other one will do.
func checkComplete(t *testing.T, kind, src string) {
	either := map[string]string{"loss_db_per_100ft": "loss_db_per_100m"}
	for _, k := range recorded("", catalog.DescribePart(kind)) {
		name := k[strings.LastIndexByte(k, '.')+1:]
		if !hasKey(src, name) && !hasKey(src, either[name]) {
			t.Errorf("the example of %s lacks %s", kind, k)
		}
	}
}

func hasKey(src, name string) bool {
	return name != "" && (strings.Contains(src, "\n"+name+" = ") || strings.Contains(src, " "+name+" = "))
}

func unlike(got, want []string) string {
	var b strings.Builder
	for _, l := range got {
		if !slices.Contains(want, l) {
			fmt.Fprintf(&b, "  read      %s\n", l)
		}
	}
	for _, l := range want {
		if !slices.Contains(got, l) {
			fmt.Fprintf(&b, "  expected  %s\n", l)
		}
	}
	if b.Len() == 0 {
		return "  the same in another order"
	}
	return b.String()
}

// parts reads a catalog file and lists its problems as "line: what is said; what to
// do".
func parts(t *testing.T, src string) ([]*catalog.Part, []string) {
	t.Helper()
	f, problems := source.NewFile("catalog/own.toml", []byte(src))
	d, more := source.Parse(f)
	list, rest := catalog.ReadParts(d)
	var out []string
	for _, p := range append(append(problems, more...), rest...) {
		out = append(out, fmt.Sprintf("%d: %s; %s", p.At.Line(), p.Says, p.Do))
	}
	return list, out
}

// one reads a file of one part that has no problem.
func one(t *testing.T, src string) *catalog.Part {
	t.Helper()
	list, problems := parts(t, src)
	if len(problems) > 0 || len(list) != 1 {
		t.Fatalf("%d parts, problems:\n%s\n%s", len(list), strings.Join(problems, "\n"), src)
	}
	return list[0]
}

// values lists what is set in a part, one line a value: the path of fields, then the
// value.
func values(p *catalog.Part) []string {
	var out []string
	v := reflect.ValueOf(p).Elem()
	for i := range v.NumField() {
		if f := v.Type().Field(i); f.Name != "ID" && f.Name != "At" {
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
		return []string{path + " " + plainText(v)}
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
			if f := v.Type().Field(i); f.IsExported() {
				out = append(out, valuesOf(path+"."+f.Name, v.Field(i))...)
			}
		}
	default:
		if !v.IsZero() {
			out = []string{fmt.Sprintf("%s %v", path, v.Interface())}
		}
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
			return "unset"
		}
		return plainText(v.FieldByName("V"))
	case v.Kind() == reflect.Slice:
		var items []string
		for i := range v.Len() {
			items = append(items, plainText(v.Index(i)))
		}
		return "[" + strings.Join(items, " ") + "]"
	}
	return fmt.Sprint(v.Interface())
}
