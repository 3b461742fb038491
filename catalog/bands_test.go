package catalog_test

import (
	"strings"
	"testing"

	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
)

func TestLookBand(t *testing.T) {
	for name, duplex := range map[string]string{"B12": "FDD", "n12": "FDD", "B41": "TDD", "n77": "TDD", "B29": "SDL"} {
		b, ok := catalog.LookBand(name)
		if !ok || b.Name != name || b.Duplex != duplex {
			t.Errorf("%s is %+v, %v; want %s", name, b, ok, duplex)
		}
	}
	for _, name := range []string{"", "B", "n", "12", "b12", "N12", "B012", "B9999", "n9999", "B 12"} {
		if b, ok := catalog.LookBand(name); ok {
			t.Errorf("%q is taken for %+v", name, b)
		}
	}
}

func TestIsBandNamesTheNearest(t *testing.T) {
	for name, want := range map[string]string{"B12": "", "n77": "", "b12": "B12 is", "B-12": "B12 is", "n-12": "n12 is", "band twelve": "is no band of 3GPP that is known here"} {
		err := catalog.IsBand(name)
		if (err == nil) != (want == "") || err != nil && !strings.Contains(err.Error(), want) {
			t.Errorf("%q: %v, want %q", name, err, want)
		}
	}
}

// Every row of the table is one that can be computed with.
func TestBandsAreWhole(t *testing.T) {
	for _, b := range catalog.Bands() {
		if b.Downlink.Empty() {
			t.Errorf("%s has the downlink %v", b.Name, b.Downlink)
		}
		if b.Uplink.Empty() != (b.Duplex == "SDL") {
			t.Errorf("%s is %s with the uplink %v", b.Name, b.Duplex, b.Uplink)
		}
		if (b.Uplink == b.Downlink) != (b.Duplex == "TDD") {
			t.Errorf("%s is %s with the uplink %v and the downlink %v", b.Name, b.Duplex, b.Uplink, b.Downlink)
		}
		if b.Duplex == "FDD" && !b.Uplink.Overlap(b.Downlink).Empty() {
			t.Errorf("the directions of %s overlap: %v, %v", b.Name, b.Uplink, b.Downlink)
		}
		if b.Source == "" || b.Proof == "" {
			t.Errorf("%s has the source %q, proof %q", b.Name, b.Source, b.Proof)
		}
		if got, ok := catalog.LookBand(b.Name); !ok || got != b {
			t.Errorf("%s is looked up as %+v", b.Name, got)
		}
	}
}

// Channel numbers reach from the first frequency of the band to the last, and not
// beyond (TS 36.104, 5.7.3: B12 begins at 729 MHz with 5010).
func TestChannelNumbersAtTheEdges(t *testing.T) {
	b, _ := catalog.LookBand("B12")
	for n, want := range map[int]unit.MHz{5010: 729, 5095: 737.5, 5180: 746} {
		if f, ok := b.EARFCN(n); !ok || f != want {
			t.Errorf("channel %d of B12 is at %v, %v; want %v", n, f, ok, want)
		}
	}
	for _, n := range []int{5009, 5181, 0, -1} {
		if f, ok := b.EARFCN(n); ok {
			t.Errorf("channel %d of B12 is at %v", n, f)
		}
	}
	nr, _ := catalog.LookBand("n77")
	if nr.DLOffset.Set {
		t.Error("n77 has an LTE channel number")
	}
	if _, ok := nr.EARFCN(1); ok {
		t.Error("a band without an offset has channel numbers")
	}
	for n, want := range map[int]unit.MHz{0: 0, 1: 0.005, 599999: 2999.995, 600000: 3000, 600001: 3000.015, 2016666: 24249.99} {
		if f, ok := catalog.NRARFCN(n); !ok || f < want-1e-9 || f > want+1e-9 {
			t.Errorf("NR channel %d is at %v, %v; want %v", n, f, ok, want)
		}
	}
	for _, n := range []int{-1, 2016667} {
		if f, ok := catalog.NRARFCN(n); ok {
			t.Errorf("NR channel %d is at %v", n, f)
		}
	}
}

// A row comes from the table of its kind, where it does not say otherwise.
func TestSourcesOfBands(t *testing.T) {
	for name, want := range map[string]string{"B12": "36.104", "n77": "38.104"} {
		if b, _ := catalog.LookBand(name); !strings.Contains(b.Source, want) {
			t.Errorf("%s comes from %q, want %s", name, b.Source, want)
		}
	}
}

func TestKindName(t *testing.T) {
	read := func(kind string) []source.Problem {
		d, _ := source.Parse(&source.File{Path: "x.toml", Src: []byte("kind = \"" + kind + "\"\n")})
		return source.Read(d, func(k *source.Keys) { source.Opt(k, new(source.Val[string]), "kind", catalog.KindName, "a kind") })
	}
	for _, kind := range catalog.KindNames() {
		if problems := read(kind); len(problems) > 0 {
			t.Errorf("%s: %s", kind, problems[0].Says)
		}
	}
	if problems := read("rod"); len(problems) != 1 || !strings.Contains(problems[0].Says, `"rod" is no kind of part`) {
		t.Errorf("a rod is a kind of part: %v", problems)
	}
}
