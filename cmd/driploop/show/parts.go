package show

import (
	"encoding/json"
	"fmt"

	"driploop/catalog"
)

// Parts is what was found in the catalog.
type Parts struct {
	Words   string // what was looked for, "" for everything
	Rows    []PartRow
	Near    string // where nothing was found: the ID that was probably meant, or ""
	Counted bool   // what is on hand is known
}

// PartRow is one part with what of it is on hand.
type PartRow struct {
	Part   *catalog.Part
	OnHand catalog.Quantity
}

// Text writes a block for each part: its ID, kind and stock, its name, and what
// matters when one chooses it.
func (p *Parts) Text(page Page) []byte {
	s := &sheet{page: page}
	s.para("", strong, Clean(p.heading()))
	for _, r := range p.Rows {
		s.gap()
		s.para("", strong, Terms("%s · %s", r.Part.ID, r.Part.Kind.V))
		if r.Part.Name.V != "" {
			s.para("   ", plain, Clean(r.Part.Name.V))
		}
		for _, f := range partFacts(r.Part) {
			s.hang("   ", plain, 5, plain, Clean(f))
		}
		if p.Counted {
			s.para("   ", faint, Clean(r.stock()))
		}
	}
	return []byte(s.b.String())
}

func (p *Parts) heading() string {
	what := words(len(p.Rows), "part", "parts")
	if p.Words != "" {
		what += " for " + p.Words
	}
	if len(p.Rows) == 0 {
		what = "No part for " + p.Words
		if p.Near != "" {
			return what + ". Did you mean " + p.Near + "?"
		}
		return what + "."
	}
	generic := 0
	for _, r := range p.Rows {
		if r.Part.Generic {
			generic++
		}
	}
	return what + ", " + fmt.Sprint(generic) + " of them generic" + "."
}

func (r PartRow) stock() string {
	if r.OnHand.IsZero() {
		return "none on hand"
	}
	return r.OnHand.String() + " on hand"
}

type partJSON struct {
	Part      string      `json:"part"`
	Kind      string      `json:"kind"`
	Name      string      `json:"name"`
	Maker     string      `json:"maker"`
	Code      string      `json:"code"`
	Status    string      `json:"status"`
	Generic   bool        `json:"generic"`
	Rated     []string    `json:"rated"`
	Instead   []string    `json:"instead"`
	Connector string      `json:"connector,omitempty"` // of a connector
	Ends      []string    `json:"ends,omitempty"`      // of a jumper
	Ports     []portJSON  `json:"ports"`
	Facts     []string    `json:"facts"` // what the text shows
	OnHand    json.Number `json:"on_hand,omitempty"`
	Unit      string      `json:"unit"`
}

type portJSON struct {
	Port      string   `json:"port"`
	Connector string   `json:"connector"`
	Impedance *float64 `json:"impedance_ohm"`
	Use       string   `json:"use"`
	Side      string   `json:"side,omitempty"`
	Bands     []string `json:"bands,omitempty"`
}

// JSON writes the list for programs. Without a workspace on_hand is left out;
// lengths are in metres.
func (p *Parts) JSON() ([]byte, error) {
	out := struct {
		Parts []partJSON `json:"parts"`
	}{[]partJSON{}}
	for _, r := range p.Rows {
		j := partData(r.Part)
		if p.Counted {
			j.OnHand = number(int(r.OnHand.Each), r.OnHand.Length)
		}
		out.Parts = append(out.Parts, j)
	}
	return encode(out)
}

func partData(p *catalog.Part) partJSON {
	j := partJSON{Part: p.ID, Kind: p.Kind.V, Name: p.Name.V, Maker: p.Maker.V, Code: p.Code.V, Status: p.Status.Or("active"), Generic: p.Generic,
		Rated: plainWords(p.Rated.V), Instead: plainWords(p.Instead.V), Ports: []portJSON{}, Facts: orEmpty(partFacts(p)), Unit: "each"}
	if p.CutStock() {
		j.Unit = "m"
	}
	if p.Connector != nil {
		j.Connector = p.Connector.Face.V.String()
	}
	if p.Jumper != nil {
		j.Ends = []string{p.Jumper.Ends.V[0].String(), p.Jumper.Ends.V[1].String()}
	}
	for i := range p.Ports {
		q := &p.Ports[i]
		port := portJSON{Port: q.Name, Connector: q.Connector.V.String(), Use: q.Use.Or("cellular"), Side: q.Side.V}
		if q.Impedance.Set {
			port.Impedance = &q.Impedance.V
		}
		if q.Bands.Set {
			port.Bands = plainWords(q.Bands.V)
		}
		j.Ports = append(j.Ports, port)
	}
	return j
}
