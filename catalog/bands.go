package catalog

import (
	_ "embed"
	"fmt"
	"slices"
	"strings"
	"sync"

	"driploop/catalog/source"
	"driploop/catalog/unit"
)

// Band is one operating band of 3GPP.
type Band struct {
	Name     string
	Uplink   unit.Span // zero for a band that only has a downlink
	Downlink unit.Span
	Duplex   string // FDD, TDD, SDL
	NR       string // the same for the band's NR twin, or "none"
	DLOffset source.Val[int]
	ULOffset source.Val[int]
	Source   string // document, table and edition
	Proof    string // read, copy, memory
}

//go:embed data/bands.toml
var bandData []byte

type bandTable struct {
	list   []Band
	byName map[string]*Band
	names  []string
}

var bands = sync.OnceValue(func() *bandTable {
	t := &bandTable{byName: map[string]*Band{}}
	readEmbedded("data/bands.toml", bandData, t.keys)
	for i := range t.list {
		b := &t.list[i]
		t.byName[b.Name] = b
		t.names = append(t.names, b.Name)
		if n := "n" + strings.TrimPrefix(b.Name, "B"); b.Name[0] == 'B' && b.NR != "none" {
			t.names = append(t.names, n)
		}
	}
	return t
})

// Bands lists all bands in the order of the table.
func Bands() []Band { return bands().list }

// LookBand finds a band by its 3GPP name, as LTE ("B12") or as NR ("n12"); an NR
// name that 3GPP does not define is not found.
func LookBand(name string) (Band, bool) {
	t := bands()
	if b := t.byName[name]; b != nil {
		return *b, true
	}
	if num, ok := strings.CutPrefix(name, "n"); ok {
		if b := t.byName["B"+num]; b != nil && b.NR != "none" {
			nr := *b
			nr.Name, nr.Duplex = name, b.NR
			return nr, true
		}
	}
	return Band{}, false
}

// EARFCN is the downlink carrier frequency of an LTE channel number in the band,
// F = F_low + 0.1·(N − N_offs) (TS 36.104, 5.7.3); false outside the band.
func (b Band) EARFCN(n int) (unit.MHz, bool) {
	if !b.DLOffset.Set {
		return 0, false
	}
	f := b.Downlink.Lo + unit.MHz(n-b.DLOffset.V)/10
	return f, b.Downlink.Contains(f)
}

// NRARFCN is the frequency of an NR channel number on the global raster
// (TS 38.104 table 5.4.2.1-1); false above 24.25 GHz.
func NRARFCN(n int) (unit.MHz, bool) {
	switch {
	case n >= 0 && n < 600000:
		return unit.MHz(n) * 5 / 1000, true
	case n >= 600000 && n < 2016667:
		return 3000 + unit.MHz(n-600000)*15/1000, true
	}
	return 0, false
}

func isBand(name string) error {
	if _, ok := LookBand(name); !ok {
		if near := source.Nearest(name, bands().names); near != "" {
			return fmt.Errorf("%s is no band of 3GPP that is known here; %s is", source.Quote(name), near)
		}
		return fmt.Errorf("%s is no band of 3GPP that is known here", source.Quote(name))
	}
	return nil
}

// BandNames lists the names that bands may be called by, in the order of the table.
func BandNames() []string { return slices.Clone(bands().names) }

func readBandName(s string) (string, error) { return s, isBand(s) }

func (t *bandTable) keys(k *source.Keys) {
	head := tableSource{}
	source.One(k, &head, "source", (*tableSource).keys, "where the table comes from")
	source.Named(k, &t.list, "band", func(b *Band, k *source.Keys) { b.keys(k, head) }, "operating bands")
}

// tableSource says where an embedded table comes from.
type tableSource struct{ LTE, NR, EARFCN, Proof source.Val[string] }

func (s *tableSource) keys(k *source.Keys) {
	source.Need(k, &s.LTE, "lte", source.Text, "edges of the bands: document, table and edition")
	source.Need(k, &s.NR, "nr", source.Text, "the same for NR")
	source.Need(k, &s.EARFCN, "earfcn", source.Text, "channel numbers")
	source.Need(k, &s.Proof, "proof", proof, "how sure")
}

// proof says how a figure was come by: read in the document, read in a copy of
// it, or remembered.
var proof = source.OneOf("read", "copy", "memory", "calculated", "common practice")

func (b *Band) keys(k *source.Keys, head tableSource) {
	b.Name = k.ID()
	var up, down source.Val[unit.Span]
	var duplex, nr, src, prf source.Val[string]
	source.Opt(k, &up, "uplink", span, "from the phone; absent: downlink only")
	source.Need(k, &down, "downlink", span, "to the phone")
	source.Need(k, &duplex, "duplex", source.OneOf("FDD", "TDD", "SDL"), "how the directions are kept apart")
	source.Opt(k, &nr, "nr", source.OneOf("FDD", "TDD", "SDL", "none"), "the same for its NR twin")
	source.Opt(k, &b.DLOffset, "dl_offset", source.Count(0, 200000), "EARFCN offset, downlink")
	source.Opt(k, &b.ULOffset, "ul_offset", source.Count(0, 200000), "EARFCN offset, uplink")
	source.Opt(k, &src, "source", source.Text, "where the row comes from, if not as the table")
	source.Opt(k, &prf, "proof", proof, "how sure, if not as the table")
	b.Uplink, b.Downlink, b.Duplex, b.NR = up.V, down.V, duplex.V, nr.Or("none")
	table := head.LTE.V
	if b.Name[0] == 'n' {
		table = head.NR.V
	}
	b.Source, b.Proof = src.Or(table), prf.Or(head.Proof.V)
}
