package rules_test

import (
	"strconv"
	"strings"
	"testing"

	"driploop/rules"
)

// What would do in place of a part that leaves a planned band out: of the same sort,
// for all planned bands, not withdrawn, on hand where there is a choice.
func TestBandFindingsNameAPartThatWouldDo(t *testing.T) {
	for _, c := range []struct {
		name, rule, catalog, plan, stock, do string
	}{
		{name: "antenna on hand before one that is not", rule: "band/antenna",
			catalog: panel("P-NOW", "mast", "active", 3000) + panel("P-A", "mast", "active", 4200) + panel("P-B", "mast", "active", 4200),
			plan:    onPanel, stock: "P-B",
			do: "take P-B (2 on hand), which covers all planned bands, or take n77 out of bands"},
		{name: "antenna not on hand, the first by ID", rule: "band/antenna",
			catalog: panel("P-NOW", "mast", "active", 3000) + panel("P-B", "mast", "active", 4200) + panel("P-A", "mast", "active", 4200),
			plan:    onPanel, do: "take P-A (none on hand), which covers"},
		{name: "no antenna that is withdrawn, fixed otherwise, of other ports, or short of a band", rule: "band/antenna",
			catalog: panel("P-NOW", "mast", "active", 3000) + panel("P-OLD", "mast", "withdrawn", 4200) + panel("P-WALL", "wall", "active", 4200) +
				panel("P-SHORT", "mast", "active", 4000) + strings.Replace(panel("P-ONE", "mast", "active", 4200), "port.b", "# port.b", 1) +
				strings.Replace(panel("P-HALF", "mast", "active", 4200), "}]", ", ports = [\"a\"] }]", 1) +
				strings.Replace(panel("P-BARE", "mast", "active", 4200), "range =", "# range =", 1),
			plan: onPanel, do: "no antenna like it in the catalog covers all planned bands; find one, or take n77 out of bands"},
		{name: "a port for satellites needs no planned band", rule: "band/antenna",
			catalog: panel("P-NOW", "mast", "active", 3000) + strings.Replace(panel("P-GPS", "mast", "active", 4200), "port.b",
				"port.g = { use = \"power\" }\nport.b", 1),
			plan: onPanel, do: "take P-GPS (none on hand)"},
		{name: "amplifier of the same class", rule: "band/amplifier",
			catalog: amp("A-NOW", "wideband", "fixed", "B12") + amp("A-IND", "industrial", "fixed", "B12", "n77") +
				amp("A-VAN", "wideband", "mobile", "B12", "n77") + amp("A-TWO", "wideband", "fixed", "n77") + amp("A-YES", "wideband", "fixed", "B12", "n77"),
			plan: "[device.amp]\npart = \"A-NOW\"\n", do: "take A-YES (none on hand), which works in all planned bands, or take n77 out of bands"},
		{name: "no amplifier", rule: "band/amplifier",
			catalog: amp("A-NOW", "wideband", "fixed", "B12") + amp("A-BARE", "wideband", "fixed"),
			plan:    "[device.amp]\npart = \"A-NOW\"\n", do: "no amplifier like it in the catalog works in all planned bands"},
		{name: "router with as many ports", rule: "band/part",
			catalog: radio("R-NOW", "B12") + radio("R-YES", "B12", "n77") + strings.Replace(radio("R-ONE", "B12", "n77"), "port.b", "# port.b", 1),
			plan:    "[device.r]\npart = \"R-NOW\"\n", do: "take R-YES (none on hand), which works in all planned bands"},
		{name: "cable of the same impedance that connectors are kept for", rule: "band/part",
			catalog: radio("R-NOW", "B12", "n77") + panel("P-A", "mast", "active", 4200) + cable("C-NOW", 50, 3000) + cable("C-75", 75, 5000) + cable("C-BARE", 50, 5000) +
				cable("C-SHORT", 50, 4000) + cable("C-YES", 50, 4200) + plug("K-1", "C-75", "C-SHORT", "C-YES"),
			plan: feedOf("C-NOW"), do: "take C-YES (none on hand), which is made for all planned bands, or take n77 out of bands"},
		{name: "jumper with the same ends either way round and the same length", rule: "band/part",
			catalog: radio("R-NOW", "B12", "n77") + panel("P-A", "mast", "active", 4200) + cable("C-NOW", 50, 3000) + cable("C-YES", 50, 4200) +
				jumper("J-NOW", "C-NOW", "1 m", "N male", "SMA male") + jumper("J-LONG", "C-YES", "2 m", "N male", "SMA male") +
				jumper("J-SAME", "C-YES", "1 m", "SMA male", "SMA male") + jumper("J-YES", "C-YES", "1 m", "SMA male", "N male"),
			plan: feedOf("J-NOW"), do: "take J-YES (none on hand), which is made for all planned bands"},
		{name: "splitter with the same ports", rule: "band/part",
			catalog: radio("R-NOW", "B12", "n77") + panel("P-A", "mast", "active", 4200) + cable("C-YES", 50, 4200) + splitter("S-NOW", "N female", 3000) +
				splitter("S-SMA", "SMA female", 4200) + splitter("S-SHORT", "N female", 4000) + splitter("S-YES", "N female", 4200),
			plan: "[device]\nr = { part = \"R-NOW\" }\np = { part = \"P-A\" }\ns = { part = \"S-NOW\" }\n[cable]\n" +
				"C1 = { part = \"C-YES\", length = \"1 m\", from = \"p.a\", to = \"s.o1\" }\nC2 = { part = \"C-YES\", length = \"1 m\", from = \"s.in\", to = \"r.a\" }\n",
			do: "take S-YES (none on hand), which is made for all planned bands"},
		{name: "no cable", rule: "band/part",
			catalog: radio("R-NOW", "B12", "n77") + panel("P-A", "mast", "active", 4200) + cable("C-NOW", 75, 3000),
			plan:    feedOf("C-NOW"), do: "no part like it in the catalog is made for all planned bands; find one, or take n77 out of bands"},
	} {
		t.Run(c.name, func(t *testing.T) {
			tree := map[string]string{
				rules.WorkspaceFile: "[workspace]\nname = \"x\"\n[shelf.shop]\nkind = \"shop\"\n",
				"catalog/own.toml":  c.catalog,
				"plans/a.toml":      "[job]\nbands = [\"B12\", \"n77\"]\n" + c.plan,
			}
			if c.stock != "" {
				tree["stock/counts/a.toml"] = "[[count]]\npart = \"" + c.stock + "\"\nwhere = \"shop\"\nqty = 2\non = 2026-11-20\n"
			}
			var said []string
			for _, f := range findings(t, memory{tree}, today(t, "")) {
				switch {
				case f.Rule.Area() == "file":
					t.Errorf("the workspace is not in order: %s line %d: %s", f.At.Path(), f.At.Line(), f.Says)
				case f.Rule.Name == c.rule && f.Outcome == rules.Fails:
					said = append(said, f.Do)
				}
			}
			if len(said) != 1 || !strings.HasPrefix(said[0], c.do) {
				t.Errorf("it says %q, not %q", said, c.do)
			}
		})
	}
}

const onPanel = `[device]
p = { part = "P-NOW" }
r = { part = "GEN-RTR-5G-4" }
[cable]
C1 = { part = "GEN-J-N-SMA-1", from = "p.a", to = "r.cell1" }
`

func feedOf(part string) string {
	length := ", length = \"1 m\""
	if strings.HasPrefix(part, "J-") {
		length = ""
	}
	return "[device]\nr = { part = \"R-NOW\" }\np = { part = \"P-A\" }\n[cable]\nC1 = { part = \"" + part + "\"" + length + ", from = \"p.a\", to = \"r.a\" }\n"
}

func panel(id, fixing, status string, to int) string {
	return part(id, "antenna", "fixing = \""+fixing+"\"", "status = \""+status+"\"",
		port("a", "N female", ""), port("b", "N female", ""), "range = [{ mhz = [600, "+strconv.Itoa(to)+"], gain_dbi = 7 }]")
}

func amp(id, class, mobility string, bands ...string) string {
	out := part(id, "amplifier", "class = \""+class+"\"", "mobility = \""+mobility+"\"",
		port("donor", "N female", ", side = \"donor\""), port("server", "N female", ", side = \"server\""))
	for _, b := range bands {
		out += "[[part." + id + ".band]]\nband = \"" + b + "\"\n"
	}
	return out
}

func radio(id string, bands ...string) string {
	return part(id, "router", "bands = [\""+strings.Join(bands, "\", \"")+"\"]", port("a", "N female", ""), port("b", "N female", ""))
}

func cable(id string, ohm, to int) string {
	return part(id, "cable", "impedance_ohm = "+strconv.Itoa(ohm), "loss_db_per_100m = [[100, 5.0], [400, 10.0], [900, 15.0]]", "max_mhz = "+strconv.Itoa(to))
}

func plug(id string, fits ...string) string {
	return part(id, "connector", "connector = \"N male\"", "impedance_ohm = 50", "fits = [\""+strings.Join(fits, "\", \"")+"\"]")
}

func jumper(id, of, length, from, to string) string {
	return part(id, "jumper", "cable = \""+of+"\"", "length = \""+length+"\"", "ends = [\""+from+"\", \""+to+"\"]")
}

func splitter(id, face string, to int) string {
	return part(id, "splitter", port("in", face, ""), port("o1", face, ""), port("o2", face, ""),
		"path = [{ from = \"in\", to = [\"o1\", \"o2\"], mhz = [600, "+strconv.Itoa(to)+"], loss_db = 3.4 }]")
}

func port(name, face, more string) string {
	return "port." + name + " = { connector = \"" + face + "\", impedance_ohm = 50" + more + " }"
}

func part(id, kind string, keys ...string) string {
	return "[part." + id + "]\nkind = \"" + kind + "\"\n" + strings.Join(keys, "\n") + "\n"
}

// A limit that is not the part's own names its document before the rule's basis; a
// finding on one band says which.
func TestBandPartSaysWhereALimitComesFrom(t *testing.T) {
	tree := map[string]string{
		rules.WorkspaceFile: "[workspace]\nname = \"x\"\n",
		"catalog/own.toml": part("W", "antenna", port("rf", "FME female", ""), "range = [{ mhz = [600, 4200], gain_dbi = 3 }]") +
			part("R-NOW", "router", "bands = [\"B4\", \"B66\"]", port("a", "FME male", "")) + splitter("S-NOW", "FME female", 2000),
		"plans/a.toml": "[job]\nbands = [\"B4\"]\n[device]\nw = { part = \"W\" }\nr = { part = \"R-NOW\" }\n[[joint]]\na = \"w\"\nb = \"r.a\"\n",
		"plans/b.toml": "[job]\nbands = [\"B4\", \"B66\"]\n[device]\nw = { part = \"W\" }\nr = { part = \"R-NOW\" }\n[[joint]]\na = \"w\"\nb = \"r.a\"\n",
	}
	var bands []string
	for _, f := range findings(t, memory{tree}, today(t, "")) {
		if f.Rule.Name != "band/part" {
			continue
		}
		bands = append(bands, f.Band)
		if len(f.Basis) != 2 || !strings.Contains(f.Basis[0], "from memory") || f.Basis[1] != f.Rule.Basis[0].String() {
			t.Errorf("it stands on %q", f.Basis)
		}
		if !strings.HasPrefix(f.Do, "use connectors of a series that is made for it, or take B4") {
			t.Errorf("it says to %s", f.Do)
		}
	}
	if strings.Join(bands, "|") != "B4|" {
		t.Errorf("the findings are on the bands %q", bands)
	}
}
