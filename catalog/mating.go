package catalog

import (
	_ "embed"
	"fmt"
	"maps"
	"slices"
	"strconv"
	"strings"
	"sync"

	"driploop/catalog/source"
	"driploop/catalog/unit"
)

// Face is one half of a connector. It is kept as the side of its shell and the
// contact it carries, because the words male and female mean either of the two
// in different data sheets.
type Face struct {
	Series  string
	Shell   string // inside, outside: takes the other half in, or is taken in
	Contact string // pin, socket
	Written string // as the file says it
}

// String is the written form, or nothing for no face.
func (f Face) String() string { return f.Written }

// Series is one connector series with the facts that joints depend on.
type Series struct {
	Name       string
	Group      string    // series of one group engage
	Impedances []float64 // ohm
	MaxMHz     []source.Pick[float64]
	Coupling   string
	Outdoor    bool // sealed by its own gasket
	TorqueNm   source.Val[[2]float64]
	Source     string
	Proof      string

	halves map[string]half // male, female, plug, jack
}

// half is one half of a series.
type half struct{ Shell, Contact source.Val[string] }

// encounter is a pair of faces that engage though they should not.
type encounter struct {
	A, B       source.Val[Face]
	AOhm, BOhm source.Val[float64]
	Text       source.Val[string]
	Source     source.Val[string]
	Proof      source.Val[string]
}

//go:embed data/mating.toml
var matingData []byte

type matingTable struct {
	series     map[string]*Series
	names      []string
	harm, poor []encounter
}

// mating is read in two steps because the pairs in it are written as faces, and
// faces are read by way of the series.
var mating = sync.OnceValue(func() *matingTable {
	t := seriesTable()
	readEmbedded("data/mating.toml", matingData, t.pairs)
	return t
})

var seriesTable = sync.OnceValue(func() *matingTable {
	t := &matingTable{series: map[string]*Series{}}
	readEmbedded("data/mating.toml", matingData, t.rows)
	return t
})

// LookSeries finds a connector series by name.
func LookSeries(name string) (*Series, bool) {
	s, ok := seriesTable().series[name]
	return s, ok
}

// ParseFace reads "N male", "RP-SMA female", "F plug". The last word is the half,
// what stands before it the series.
func ParseFace(s string) (Face, error) {
	s = strings.TrimSpace(s)
	i := strings.LastIndexByte(s, ' ')
	if i < 0 {
		return Face{}, fmt.Errorf("%s needs a series and male or female", source.Quote(s))
	}
	name, which := strings.TrimSpace(s[:i]), s[i+1:]
	series, ok := LookSeries(name)
	if !ok {
		if near := source.Nearest(name, seriesTable().names); near != "" {
			return Face{}, fmt.Errorf("%s is no connector series that is known here; %s is", source.Quote(name), near)
		}
		return Face{}, fmt.Errorf("%s is no connector series that is known here", source.Quote(name))
	}
	h, ok := series.halves[which]
	if !ok {
		return Face{}, fmt.Errorf("%s ends in %s; male, female, plug or jack is expected", source.Quote(s), source.Quote(which))
	}
	return Face{series.Name, h.Shell.V, h.Contact.V, name + " " + which}, nil
}

// FaceNames lists the faces as files write them: each series with male, female, plug
// and jack, as far as it has them.
func FaceNames() []string {
	var out []string
	for _, name := range seriesTable().names {
		halves := seriesTable().series[name].halves
		for _, which := range slices.Sorted(maps.Keys(halves)) {
			out = append(out, name+" "+which)
		}
	}
	return out
}

// SpellFace is the usual spelling of a face that ParseFace reads: male for plug and
// female for jack, but for a series whose plug is not its male half.
func SpellFace(s string) string {
	f, err := ParseFace(s)
	if err != nil {
		return s
	}
	halves := seriesTable().series[f.Series].halves
	for word, usual := range map[string]string{"plug": "male", "jack": "female"} {
		if f.Written == f.Series+" "+word && halves[word] == halves[usual] {
			return f.Series + " " + usual
		}
	}
	return f.Written
}

// SameFace reports that two faces are one, however they are written.
func SameFace(a, b Face) bool {
	return a.Series == b.Series && a.Shell == b.Shell && a.Contact == b.Contact
}

// Fit says how two faces meet.
type Fit int

const (
	Mates      Fit = iota // joins as made
	OtherMake             // shells of different series that do not engage
	SameShell             // two male or two female shells
	WrongCore             // shells engage, pin meets pin or socket meets socket
	ThinSocket            // engages and harms a contact, because the impedances differ
	LoosePin              // engages with poor contact, because the impedances differ
)

// Meeting is what happens where two faces are brought together.
type Meeting struct {
	Fit    Fit
	Text   string // what happens to the contacts, where the table knows
	Source string
	Proof  string
}

// Meet brings two faces together, each with the impedance of its side in ohms,
// or 0 where that is unknown.
func Meet(a, b Face, aOhm, bOhm float64) Meeting {
	sa, sb := seriesTable().series[a.Series], seriesTable().series[b.Series]
	switch {
	case sa == nil || sb == nil || sa.Group != sb.Group:
		return Meeting{Fit: OtherMake}
	case a.Shell == b.Shell:
		return Meeting{Fit: SameShell}
	case a.Contact == b.Contact:
		return mating().meeting(WrongCore, a, b, aOhm, bOhm)
	}
	for _, fit := range []Fit{ThinSocket, LoosePin} {
		if m := mating().meeting(fit, a, b, aOhm, bOhm); m.Text != "" {
			return m
		}
	}
	return Meeting{Fit: Mates}
}

// meeting looks the pair up in the tables of harm and poor contact, in either
// order.
func (t *matingTable) meeting(fit Fit, a, b Face, aOhm, bOhm float64) Meeting {
	var lists [][]encounter
	switch fit {
	case WrongCore:
		lists = [][]encounter{t.harm, t.poor}
	case ThinSocket:
		lists = [][]encounter{t.harm}
	default:
		lists = [][]encounter{t.poor}
	}
	for _, list := range lists {
		for _, e := range list {
			if e.is(a, b, aOhm, bOhm) || e.is(b, a, bOhm, aOhm) {
				return Meeting{fit, e.Text.V, e.Source.V, e.Proof.V}
			}
		}
	}
	return Meeting{Fit: fit}
}

func (e *encounter) is(a, b Face, aOhm, bOhm float64) bool {
	ohms := func(want source.Val[float64], got float64) bool { return !want.Set || want.V == got }
	return SameFace(e.A.V, a) && SameFace(e.B.V, b) && ohms(e.AOhm, aOhm) && ohms(e.BOhm, bOhm)
}

// LimitMHz is the highest frequency of the series at an impedance, or false where
// no figure is known.
func (s *Series) LimitMHz(ohm float64) (unit.MHz, bool) {
	name := strconv.FormatFloat(ohm, 'f', -1, 64)
	for _, m := range s.MaxMHz {
		if m.Name == name {
			return unit.MHz(m.Val.V), true
		}
	}
	return 0, false
}

var anyName = source.Naming{Check: func(string) error { return nil }}

func (t *matingTable) rows(k *source.Keys) {
	var rows []source.Pick[*Series]
	source.Each(k, &rows, "series", anyName, source.Inline(func(s **Series, k *source.Keys) {
		*s = &Series{halves: map[string]half{}}
		(*s).keys(k)
	}), "connector series")
	for _, r := range rows {
		r.Val.V.Name = r.Name
		t.series[r.Name] = r.Val.V
		t.names = append(t.names, r.Name)
	}
	k.Mute() // the pairs are read in a second pass
}

func (t *matingTable) pairs(k *source.Keys) {
	source.Rows(k, &t.harm, "harm", (*encounter).keys, "pairs that engage and destroy a contact")
	source.Rows(k, &t.poor, "poor", (*encounter).keys, "pairs that engage with poor contact or none")
	k.Mute() // the series were read in the first pass
}

func (s *Series) keys(k *source.Keys) {
	var group, coupling, src, prf source.Val[string]
	var impedances source.Val[[]source.Val[float64]]
	var outdoor source.Val[bool]
	source.Need(k, &group, "group", source.Text, "series of one group engage")
	source.Need(k, &impedances, "impedance", source.ListOf(ohm), "values in which it is made")
	source.Each(k, &s.MaxMHz, "max_mhz", anyName, source.AtLeast(0, "MHz"), "highest frequency by impedance")
	source.Need(k, &coupling, "coupling", source.Text, "how the halves hold each other")
	for _, name := range []string{"male", "female", "plug", "jack"} {
		if h := (half{}); source.One(k, &h, name, (*half).keys, "shell and contact") {
			s.halves[name] = h
		}
	}
	source.Opt(k, &s.TorqueNm, "torque_nm", source.Pair(source.AtLeast(0, "N·m"), "[0.7, 1.4]"), "tightening torque")
	source.Need(k, &outdoor, "outdoor", source.Flag, "sealed by its own gasket")
	source.Need(k, &src, "source", source.Text, "where the row comes from")
	source.Need(k, &prf, "proof", proof, "how sure")
	for word, as := range map[string]string{"plug": "male", "jack": "female"} {
		if _, own := s.halves[word]; !own {
			s.halves[word] = s.halves[as]
		}
	}
	for _, v := range impedances.V {
		s.Impedances = append(s.Impedances, v.V)
	}
	s.Group, s.Coupling, s.Outdoor, s.Source, s.Proof = group.V, coupling.V, outdoor.V, src.V, prf.V
}

func (h *half) keys(k *source.Keys) {
	source.Need(k, &h.Shell, "shell", source.OneOf("inside", "outside"), "side of the shell")
	source.Need(k, &h.Contact, "contact", source.OneOf("pin", "socket"), "contact it carries")
}

func (e *encounter) keys(k *source.Keys) {
	source.Need(k, &e.A, "a", face, "one face")
	source.Opt(k, &e.AOhm, "a_ohm", ohm, "where only this impedance does it")
	source.Need(k, &e.B, "b", face, "the other")
	source.Opt(k, &e.BOhm, "b_ohm", ohm, "where only this impedance does it")
	source.Need(k, &e.Text, "text", source.Text, "what happens")
	source.Need(k, &e.Source, "source", source.Text, "where the row comes from")
	source.Need(k, &e.Proof, "proof", proof, "how sure")
}
