package rules_test

import (
	"strings"
	"testing"
)

// cableBench has a feed of 60 m that loses 6.00 dB at 894 MHz, one more than the house
// allows in one cable, and two cables that would lose enough less: 4.98 and 3.00 dB.
const cableBench = `
-- catalog/bench.toml --
[part.ANT-10]
kind  = "antenna"
port  = { rf = { connector = "N female", impedance_ohm = 50 } }
range = [{ mhz = [600, 2700], gain_dbi = 10 }]
[part.AMP]
kind = "amplifier"
port = { donor = { connector = "N female", impedance_ohm = 50, side = "donor" } }
band = [{ band = "B5", uplink = { gain_db = 60 }, downlink = { gain_db = 60 } }]
[part.CX-LIN]
kind             = "cable"
impedance_ohm    = 50
loss_db_per_100m = [[447, 5], [894, 10]]
[part.CX-THIN]
kind             = "cable"
impedance_ohm    = 50
loss_db_per_100m = [[447, 4.15], [894, 8.3]]
[part.CX-THICK]
kind             = "cable"
impedance_ohm    = 50
loss_db_per_100m = [[447, 2.5], [894, 5]]
[part.CX-75]
kind             = "cable"
impedance_ohm    = 75
loss_db_per_100m = [[447, 2.5], [894, 5]]
[part.CX-BARE]
kind             = "cable"
impedance_ohm    = 50
loss_db_per_100m = [[447, 4], [894, 8]]
[part.NC]
kind          = "connector"
connector     = "N male"
impedance_ohm = 50
fits          = ["CX-LIN", "CX-THIN", "CX-THICK", "CX-75"]
-- plans/bench.toml --
[job]
bands = ["B5"]
[device]
donor = { part = "ANT-10" }
amp   = { part = "AMP" }
[cable]
F1 = { part = "CX-LIN", length = "60 m", from = "donor", to = "amp.donor", ends = ["NC", "NC"] }
-- stock/counts/reels.toml --
[sheet]
on = 2026-11-20
by = "jo"
STOCK
`

// A finding proposes the thinnest cable that does, and what lies on the shelf before
// what does not; never one of another impedance or without connectors.
func TestLossProposesACableThatWouldDo(t *testing.T) {
	thick := "[[reel]]\ntag = \"R-1\"\npart = \"CX-THICK\"\nwhere = \"shop\"\nleft = \"80 m\"\nhow = \"tape\"\n"
	for _, c := range []struct{ name, text, starts string }{
		{"thinnest", strings.Replace(cableBench, "STOCK", "", 1), "shorten F1, or make it of CX-THIN (none on hand)"},
		{"on hand", strings.Replace(cableBench, "STOCK", thick, 1), "shorten F1, or make it of CX-THICK (80 m on hand) or CX-THIN (none on hand)"},
	} {
		f := only(t, "loss/cable", c.text)
		if !strings.HasPrefix(f.Do, c.starts) || strings.Contains(f.Do, "CX-75") || strings.Contains(f.Do, "CX-BARE") {
			t.Errorf("%s: it proposes %q", c.name, f.Do)
		}
	}
	f := only(t, "loss/cable", strings.NewReplacer("STOCK", "", `"60 m"`, `"900 m"`).Replace(cableBench))
	if f.Do != "shorten F1; no cable of the catalog would lose enough less" {
		t.Errorf("of 900 m it proposes %q", f.Do)
	}
}
