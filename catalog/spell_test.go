package catalog

import "testing"

func TestSpellFace(t *testing.T) {
	for s, want := range map[string]string{
		"N male": "N male", "N plug": "N male", "N  jack": "N female", " F plug": "F male", "RP-SMA plug": "RP-SMA male",
		"RP-SMA jack": "RP-SMA female", "SMB plug": "SMB plug", "SMB  male": "SMB male", "n plug": "n plug", "NC-10-NM": "NC-10-NM", "": "",
	} {
		if got := SpellFace(s); got != want {
			t.Errorf("%q is spelled %q, want %q", s, got, want)
		}
	}
}

// Every half of every series keeps its shell and contact, and those whose plug is
// neither male nor female keep their word.
func TestSpellFaceMeansTheSame(t *testing.T) {
	own := 0
	for _, name := range seriesTable().names {
		for which := range seriesTable().series[name].halves {
			s := name + "  " + which
			before, err := ParseFace(s)
			if err != nil {
				t.Fatal(err)
			}
			spelled := SpellFace(s)
			after, err := ParseFace(spelled)
			if err != nil || !SameFace(before, after) {
				t.Errorf("%q is %v, spelled %q it is %v: %v", s, before, spelled, after, err)
			}
			if spelled == name+" plug" || spelled == name+" jack" {
				own++
			}
		}
	}
	if own == 0 {
		t.Error("no series has a plug of its own; the hard case is not tested")
	}
}
