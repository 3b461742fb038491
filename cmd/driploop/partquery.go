package main

import (
	"strings"

	"driploop/catalog"
	"driploop/catalog/unit"
)

// query is what a part is looked up by; every clue must fit.
type query []clue

// clue is one word. Where it names a connector it fits a face, and where it names
// a band also what works in it.
type clue struct {
	word string // in small letters
	face *catalog.Face
	band *catalog.Band
}

// queryOf makes a query of the words of a call; two that name a connector together
// are one clue.
func queryOf(words []string) query {
	var out query
	for i := 0; i < len(words); i++ {
		if i+1 < len(words) {
			if f := faceOf(words[i] + " " + words[i+1]); f != nil {
				out = append(out, clue{face: f})
				i++
				continue
			}
		}
		out = append(out, termOf(words[i]))
	}
	return out
}

func termOf(word string) clue {
	t := clue{word: strings.ToLower(word), face: faceOf(word)}
	for _, name := range []string{word, strings.ToUpper(word), strings.ToLower(word)} {
		if b, ok := catalog.LookBand(name); ok {
			t.band = &b
			break
		}
	}
	return t
}

// faceOf reads a connector, however its letters are written.
func faceOf(s string) *catalog.Face {
	i := strings.LastIndexByte(s, ' ')
	if i < 0 {
		return nil
	}
	for _, try := range []string{s, strings.ToUpper(s[:i]) + strings.ToLower(s[i:])} {
		if f, err := catalog.ParseFace(try); err == nil {
			return &f
		}
	}
	return nil
}

func (q query) fits(p *catalog.Part) bool {
	for _, t := range q {
		if !t.fits(p) {
			return false
		}
	}
	return true
}

func (t clue) fits(p *catalog.Part) bool {
	if t.face != nil {
		return hasFace(p, *t.face)
	}
	if t.band != nil && worksIn(p, *t.band) {
		return true
	}
	for _, s := range []string{p.ID, p.Name.V, p.Kind.V} {
		if strings.Contains(strings.ToLower(s), t.word) {
			return true
		}
	}
	for _, f := range facesOf(p) {
		if strings.Contains(strings.ToLower(f.Written), t.word) {
			return true
		}
	}
	return false
}

// facesOf lists the connectors of a part.
func facesOf(p *catalog.Part) []catalog.Face {
	var out []catalog.Face
	for i := range p.Ports {
		if p.Ports[i].Connector.Set {
			out = append(out, p.Ports[i].Connector.V)
		}
	}
	if p.Connector != nil && p.Connector.Face.Set {
		out = append(out, p.Connector.Face.V)
	}
	if p.Jumper != nil && p.Jumper.Ends.Set {
		out = append(out, p.Jumper.Ends.V[:]...)
	}
	return out
}

func hasFace(p *catalog.Part, want catalog.Face) bool {
	for _, f := range facesOf(p) {
		if f.Series == want.Series && f.Shell == want.Shell && f.Contact == want.Contact {
			return true
		}
	}
	return false
}

// worksIn reports whether the part's own figures reach over the whole band, in both
// directions.
func worksIn(p *catalog.Part, b catalog.Band) bool {
	switch {
	case p.Amplifier != nil:
		return p.Amplifier.Band(b.Name) != nil
	case p.Router != nil:
		return catalog.Has(p.Router.Bands, b.Name)
	}
	var spans []unit.Span
	if p.Antenna != nil {
		for _, r := range p.Antenna.Ranges {
			spans = append(spans, r.MHz.V)
		}
	}
	for _, w := range p.Paths {
		spans = append(spans, w.MHz.V)
	}
	return len(spans) > 0 && len(b.Downlink.Minus(spans...)) == 0 && (b.Uplink.Empty() || len(b.Uplink.Minus(spans...)) == 0)
}
