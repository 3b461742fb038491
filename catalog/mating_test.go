package catalog_test

import (
	"strings"
	"testing"

	"driploop/catalog"
)

func face(t *testing.T, s string) catalog.Face {
	t.Helper()
	f, err := catalog.ParseFace(s)
	if err != nil {
		t.Fatal(err)
	}
	return f
}

// The male half carries the nut, with its thread inside; reverse polarity swaps the
// contacts and leaves the shells.
func TestParseFace(t *testing.T) {
	for text, want := range map[string]catalog.Face{
		"N male":        {Series: "N", Shell: "inside", Contact: "pin", Written: "N male"},
		"N female":      {Series: "N", Shell: "outside", Contact: "socket", Written: "N female"},
		"N plug":        {Series: "N", Shell: "inside", Contact: "pin", Written: "N plug"},
		"N jack":        {Series: "N", Shell: "outside", Contact: "socket", Written: "N jack"},
		"N  male":       {Series: "N", Shell: "inside", Contact: "pin", Written: "N male"},
		"N male ":       {Series: "N", Shell: "inside", Contact: "pin", Written: "N male"},
		"3.5 mm female": {Series: "3.5 mm", Shell: "outside", Contact: "socket", Written: "3.5 mm female"},
		"RP-SMA male":   {Series: "RP-SMA", Shell: "inside", Contact: "socket", Written: "RP-SMA male"},
		"RP-SMA female": {Series: "RP-SMA", Shell: "outside", Contact: "pin", Written: "RP-SMA female"},
	} {
		got, err := catalog.ParseFace(text)
		if err != nil || got != want {
			t.Errorf("%q is %+v (%v), want %+v", text, got, err, want)
		}
		if got.String() != want.Written {
			t.Errorf("%q prints %q", text, got)
		}
	}
	for text, want := range map[string]string{
		"":             "needs a series and male or female",
		"N":            "needs a series and male or female",
		"male":         "needs a series and male or female",
		"Nn male":      `"Nn" is no connector series that is known here; `,
		"RPSMA male":   `"RPSMA" is no connector series that is known here; RP-SMA is`,
		"Xyzzy77 male": `"Xyzzy77" is no connector series that is known here`,
		"N males":      `"N males" ends in "males"; male, female, plug or jack is expected`,
		"N Male":       `ends in "Male"`,
		"n male":       `"n" is no connector series that is known here; N is`,
	} {
		if got, err := catalog.ParseFace(text); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%q is %+v (%v), want an error with %q", text, got, err, want)
		}
	}
}

func TestMeet(t *testing.T) {
	for _, c := range []struct {
		a, b       string
		aOhm, bOhm float64
		want       catalog.Fit
	}{
		{"N male", "N female", 50, 50, catalog.Mates},
		{"N plug", "N jack", 50, 50, catalog.Mates},
		{"SMA male", "SMA female", 50, 50, catalog.Mates},
		{"RP-SMA male", "RP-SMA female", 50, 50, catalog.Mates},
		{"N male", "N male", 50, 50, catalog.SameShell},
		{"N female", "N female", 50, 50, catalog.SameShell},
		{"N male", "SMA female", 50, 50, catalog.OtherMake},
		{"SMA male", "RP-SMA female", 50, 50, catalog.WrongCore}, // pin on pin
		{"RP-SMA male", "SMA female", 50, 50, catalog.WrongCore}, // socket on socket
		{"SMA male", "RP-SMA male", 50, 50, catalog.SameShell},
		{"N male", "N female", 50, 75, catalog.ThinSocket}, // the thick pin spreads the thin socket
		{"N male", "N female", 75, 50, catalog.LoosePin},
		{"N male", "N female", 75, 75, catalog.Mates},
		{"N male", "N female", 0, 75, catalog.Mates}, // unknown is not assumed
		{"N male", "N female", 0, 0, catalog.Mates},
	} {
		a, b := face(t, c.a), face(t, c.b)
		for _, m := range []catalog.Meeting{catalog.Meet(a, b, c.aOhm, c.bOhm), catalog.Meet(b, a, c.bOhm, c.aOhm)} {
			if m.Fit != c.want {
				t.Errorf("%s (%v ohm) and %s (%v ohm) meet as %d, want %d", c.a, c.aOhm, c.b, c.bOhm, m.Fit, c.want)
			}
			if (c.want == catalog.ThinSocket || c.want == catalog.LoosePin) && (m.Text == "" || m.Source == "" || m.Proof == "") {
				t.Errorf("%s and %s: what happens is not said: %+v", c.a, c.b, m)
			}
		}
	}
	if m := catalog.Meet(catalog.Face{}, face(t, "N male"), 0, 0); m.Fit != catalog.OtherMake {
		t.Errorf("no face meets N male as %d", m.Fit)
	}
}

// allSeries are the rows of the table.
var allSeries = []string{"N", "SMA", "RP-SMA", "TNC", "RP-TNC", "BNC", "F", "FME", "4.3-10", "7-16", "QMA", "SMB",
	"MCX", "MMCX", "TS9", "CRC9", "3.5 mm", "2.92 mm"}

// How two faces meet does not depend on which of them is named first, and the two
// halves of one series at one impedance mate.
func TestMeetIsSymmetric(t *testing.T) {
	var faces []catalog.Face
	for _, name := range allSeries {
		s, ok := catalog.LookSeries(name)
		if !ok {
			t.Fatalf("%s is not known", name)
		}
		male, female := face(t, name+" male"), face(t, name+" female")
		faces = append(faces, male, female)
		for _, ohm := range s.Impedances {
			if m := catalog.Meet(male, female, ohm, ohm); m.Fit != catalog.Mates {
				t.Errorf("the halves of %s at %v ohm meet as %d", name, ohm, m.Fit)
			}
		}
		if s.Group == "" || s.Coupling == "" || s.Source == "" || s.Proof == "" || len(s.Impedances) == 0 {
			t.Errorf("%s lacks a fact: %+v", name, s)
		}
	}
	for _, a := range faces {
		for _, b := range faces {
			for _, ohms := range [][2]float64{{50, 50}, {50, 75}, {75, 50}, {0, 50}, {0, 0}} {
				x, y := catalog.Meet(a, b, ohms[0], ohms[1]), catalog.Meet(b, a, ohms[1], ohms[0])
				if x != y {
					t.Errorf("%v and %v at %v ohm: %+v, the other way round %+v", a, b, ohms, x, y)
				}
			}
		}
	}
}

func TestSeriesLimit(t *testing.T) {
	s, ok := catalog.LookSeries("N")
	if !ok {
		t.Fatal("N is not known")
	}
	if f, ok := s.LimitMHz(50); !ok || f < 10000 {
		t.Errorf("N at 50 ohm goes up to %v, %v", f, ok)
	}
	if f, ok := s.LimitMHz(60); ok {
		t.Errorf("N at 60 ohm goes up to %v", f)
	}
	if _, ok := catalog.LookSeries("n"); ok {
		t.Error("a series is found under another name")
	}
}

func TestFaceWithSpaceAround(t *testing.T) {
	want, err := catalog.ParseFace("N male")
	if err != nil {
		t.Fatal(err)
	}
	for _, s := range []string{" N male", "N male ", "  N   male  "} {
		if got, err := catalog.ParseFace(s); err != nil || got != want {
			t.Errorf("%q is %+v, %v; expected %+v", s, got, err, want)
		}
	}
}
