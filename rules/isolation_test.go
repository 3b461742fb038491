package rules_test

import (
	"strings"
	"testing"

	"driploop/catalog/unit"
)

const shell14 = "[site]\nshell_db = 14\n"

// Three equal domes at equal distances let through three times what one does, 4.77 dB
// less isolation, and what they do is not looked at one by one.
func TestServersAreCombinedAsASum(t *testing.T) {
	split := `
-- catalog/split.toml --
[part.SPL-X]
kind      = "splitter"
port.in   = { connector = "N female", impedance_ohm = 50 }
port.out1 = { connector = "N female", impedance_ohm = 50 }
port.out2 = { connector = "N female", impedance_ohm = 50 }
port.out3 = { connector = "N female", impedance_ohm = 50 }
path      = [{ from = "in", to = ["out1", "out2", "out3"], loss_db = 5 }]
`
	text := strings.NewReplacer(
		`dome  = { part = "ANT-S", place = "room" }`, "split = { part = \"SPL-X\", place = \"room\" }\ndome  = { part = \"ANT-S\", place = \"room\", copies = { dome-2 = [10, 0, 2], dome-3 = [-10, 0, 2] } }",
		`to = "dome" }`, "to = \"split.in\" }\nL1 = { part = \"J-2\", from = \"split.out1\", to = \"dome\" }\nL2 = { part = \"J-2\", from = \"split.out2\", to = \"dome-2\" }\nL3 = { part = \"J-2\", from = \"split.out3\", to = \"dome-3\" }",
	).Replace(chainPlan(fixedWideband, shell14+heard("-99"))) + split
	x := planCase(t, text, "shop").Chain().Bands[0]
	if !x.Apart.OK || len(x.Apart.Pairs) != 3 {
		t.Fatalf("isolation %+v", x.Apart)
	}
	for _, p := range x.Apart.Pairs {
		if !nearly(float64(x.Apart.V-p.Isolation), -4.771, 0.001) {
			t.Errorf("%s alone has %.3f dB, all three %.3f", p.Server.Name(), float64(p.Isolation), float64(x.Apart.V))
		}
	}
}

// Feed and leg are in the isolation, port to port: with 2.6 dB and 7 dB of leads the
// same antennas have 9.6 dB more than without any.
func TestFeedAndLegAreInTheIsolation(t *testing.T) {
	isolation := func(feed, leg string) float64 {
		text := chainPlan(fixedWideband, shell14+heard("-99"))
		text = strings.Replace(text, `F = { part = "J-2"`, `F = { part = "J-`+feed+`"`, 1)
		text = strings.Replace(text, `L = { part = "J-2"`, `L = { part = "J-`+leg+`"`, 1)
		for name, loss := range map[string]string{"0": "0", "26": "2.6", "70": "7"} {
			text += "\n-- catalog/j" + name + ".toml --\n[part.J-" + name + "]\nkind = \"jumper\"\ncable = \"GEN-CX-10\"\nlength = \"1 m\"\nends = [\"N male\", \"N male\"]\nloss_db = " + loss + "\n"
		}
		x := planCase(t, text, "shop").Chain().Bands[0]
		if !x.Apart.OK {
			t.Fatalf("isolation lacks %v", x.Apart.Lacks)
		}
		return float64(x.Apart.V)
	}
	if d := isolation("26", "70") - isolation("0", "0"); !nearly(d, 9.6, 1e-9) {
		t.Errorf("leads of 9.6 dB make a difference of %.3f dB", d)
	}
}

// The least over the edges of the amplifier's band counts: with nothing but free
// space between, the lowest edge.
func TestIsolationIsTheLeastOverTheEdges(t *testing.T) {
	x := planCase(t, chainPlan(fixedWideband, shell14+heard("-99")), "shop").Chain().Bands[0]
	if x.Apart.Edge != 824 || !nearly(float64(x.Apart.V), 56.4109, 0.0001) {
		t.Errorf("%.4f dB at %s", float64(x.Apart.V), x.Apart.Edge)
	}
	text := chainPlan(fixedWideband, shell14+heard("-99")+"[[between]]\na = \"roof\"\nb = \"room\"\nloss_db = [[824, 20], [894, 10]]\n")
	x = planCase(t, text, "shop").Chain().Bands[0]
	// At 894 MHz free space is 0.708 dB more and the shell 10 dB less than at 824.
	if x.Apart.Edge != 894 || !nearly(float64(x.Apart.V), 56.4109+0.7082-4, 0.0001) {
		t.Errorf("%.4f dB at %s, where the roof lets through most", float64(x.Apart.V), x.Apart.Edge)
	}
}

// Two donor antennas at one port hear twice as much; at ports of their own the one
// that hears most counts.
func TestDonorsOfOnePortAddUp(t *testing.T) {
	two := strings.NewReplacer(
		`port  = { donor`, `port  = { d2 = { connector = "N female", impedance_ohm = 50, side = "donor" }, donor`,
		`amp   =`, "second = { part = \"ANT-D\", place = \"roof\", at = [20, 10, 6] }\namp   =",
		`L = {`, "F2 = { part = \"J-2\", from = \"second\", to = \"amp.d2\" }\nL = {",
	).Replace(chainPlan(fixedWideband, shell14+heard("-99")))
	if x := planCase(t, two, "shop").Chain().Bands[0]; !nearly(float64(x.Apart.V), 56.4109, 0.0001) {
		t.Errorf("the farther antenna at a port of its own leaves %.4f dB", float64(x.Apart.V))
	}
	combined := strings.NewReplacer(
		`amp   =`, "second = { part = \"ANT-D\", place = \"roof\" , at = [0, 20, 6] }\nhyb   = { part = \"SPL-D\", place = \"room\" }\namp   =",
		`to = "amp.donor" }`, "to = \"hyb.out1\" }\nF2 = { part = \"J-2\", from = \"second\", to = \"hyb.out2\" }\nF3 = { part = \"J-2\", from = \"hyb.in\", to = \"amp.donor\" }",
	).Replace(chainPlan(fixedWideband, shell14+heard("-99"))) + `
-- catalog/split.toml --
[part.SPL-D]
kind      = "splitter"
port.in   = { connector = "N female", impedance_ohm = 50 }
port.out1 = { connector = "N female", impedance_ohm = 50 }
port.out2 = { connector = "N female", impedance_ohm = 50 }
path      = [{ from = "in", to = ["out1", "out2"], loss_db = 3 }]
`
	x := planCase(t, combined, "shop").Chain().Bands[0]
	// Both are 10.77 m from the dome, behind 2 + 3 + 2 dB: 5 dB more than above, and
	// 3.01 less for two.
	if want := 56.4109 + 5 - 3.0103; !nearly(float64(x.Apart.V), want, 0.0001) {
		t.Errorf("two at one port leave %.4f dB, want %.4f", float64(x.Apart.V), want)
	}
}

// The margin is the house's: 15 dB where it says nothing.
func TestIsolationMarginOfTheHouse(t *testing.T) {
	house := "-- driploop.toml --\n[workspace]\nname = \"Case Workshop\"\nprofile = \"us-fixed-wideband\"\n[house]\nisolation_margin_db = 20\n"
	x := planCase(t, house+chainPlan(fixedWideband, heard("-99")+apart("70")), "shop").Chain().Bands[0]
	if x.Up.Runs.V.Gain != unit.DB(50) {
		t.Errorf("70 dB less 20 leave %v", x.Up.Runs.V.Gain)
	}
}
