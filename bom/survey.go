package bom

import (
	"errors"
	"maps"
	"slices"

	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
)

// Signal is one carrier in the air.
type Signal struct {
	At       source.Place
	Operator source.Val[string]
	Band     source.Val[string]
	MHz      source.Val[float64] // channel centre; absent: middle of the band
	WidthMHz source.Val[float64]
	RSRP     source.Val[float64] // dBm at a 0 dBi antenna, unless Through
	SCSkHz   source.Val[float64]
	SINR     source.Val[float64]
	Bearing  source.Val[float64] // degrees from true north
	Where    source.Val[string]
	On       source.Val[unit.Date]
	Through  *Through
}

// Through is what a survey was taken through.
type Through struct {
	GainDBi source.Val[float64]
	LossDB  source.Val[float64]
}

// Area is a part of the site that is to be covered.
type Area struct {
	At          source.Place
	Name        source.Val[string]
	ServedBy    source.Val[catalog.Words]
	Distance    source.Val[unit.MM] // to the nearest server antenna
	Walls       source.Val[[]source.Val[Wall]]
	Floors      source.Val[int]
	Environment source.Val[string]
	Operators   source.Val[catalog.Words]
	Target      source.Val[float64] // RSRP, dBm
	Before      source.Val[[]source.Val[Before]]
}

// Wall is a named wall, with its loss where the plan knows better than a table.
type Wall struct {
	Name   source.Val[string]
	LossDB source.Val[catalog.Points]
}

// Before is what was received in an area without the install.
type Before struct {
	Operator source.Val[string]
	Band     source.Val[string]
	RSRP     source.Val[float64]
}

// Reading is a measured value.
type Reading struct {
	At       source.Place
	What     source.Val[string]
	From, To source.Val[Ref]
	Band     source.Val[string]
	Operator source.Val[string]
	Where    source.Val[string]
	MHz      source.Val[float64]
	DB       source.Val[float64]
	DBm      source.Val[float64]
	Ratio    source.Val[float64]
	Ohm      source.Val[float64]
	V        source.Val[float64]
	Length   source.Val[unit.MM]
	Serial   source.Val[string]
	Stage    source.Val[string]
	On       source.Val[unit.Date]
	By       source.Val[string]
}

// Reserve keeps stock for this job.
type Reserve struct {
	At    source.Place
	Tag   source.Val[string]
	Part  source.Val[string]
	Qty   source.Val[int]
	Where source.Val[string]
	Cable source.Val[string]
	Until source.Val[unit.Date]
}

// Extra is a part beyond what the plan implies.
type Extra struct {
	At   source.Place
	Part source.Val[string]
	Qty  source.Val[Amount]
}

// Amount is a count of pieces, or a length of cut stock.
type Amount struct {
	Each   int
	Length unit.MM
}

// Waiver accepts a finding until a day and up to a figure.
type Waiver struct {
	At      source.Place
	Rule    source.Val[string]
	On      source.Val[string]
	Band    source.Val[string]
	UpTo    source.Val[float64]
	Because source.Val[string]
	By      source.Val[string]
	Until   source.Val[unit.Date]
}

var level = source.Between(-200, 60, "dBm")

var namedWall = source.Map(source.Text, func(s string) (Wall, error) {
	return Wall{Name: source.Val[string]{V: s, Set: true}}, nil
})

// What the values of these rows may be, put together once for all of them.
var (
	frequency     = source.Between(1, 300000, "MHz")
	channelWidth  = source.Between(0.1, 2000, "MHz")
	subcarriers   = source.Between(15, 480, "kHz")
	nameList      = source.ListOf(source.Name)
	walls         = source.ListOf(source.Either(source.IsString, namedWall, source.Inline((*Wall).keys), "wall"))
	floors        = source.Count(0, 50)
	environments  = source.OneOf("residential", "office", "commercial")
	befores       = source.ListOf(source.Inline((*Before).keys))
	quantities    = source.OneOf("isolation", "rsrp", "return-loss", "vswr", "ground-ohm", "voltage", "length", "serial")
	standingWave  = source.AtLeast(1, "")
	resistance    = source.AtLeast(0, "ohm")
	voltage       = source.Between(0, 1000, "V")
	readingStages = source.OneOf("survey", "as-built")
	extraQty      = source.Count(1, 1000000)
)

func (s *Signal) keys(k *source.Keys) {
	s.At = k.At()
	source.Need(k, &s.Operator, "operator", source.Name, "whose it is")
	source.Need(k, &s.Band, "band", catalog.BandName, "3GPP band")
	source.Opt(k, &s.MHz, "mhz", frequency, "channel centre; absent: middle of the band")
	source.Opt(k, &s.WidthMHz, "width_mhz", channelWidth, "channel width")
	source.Need(k, &s.RSRP, "rsrp_dbm", level, "reference signal power at a 0 dBi antenna, unless through")
	source.Opt(k, &s.SCSkHz, "scs_khz", subcarriers, "subcarrier spacing of an NR signal")
	source.Opt(k, &s.SINR, "sinr_db", decibels, "signal to interference and noise")
	source.Opt(k, &s.Bearing, "bearing_deg", degrees, "direction of the site, from true north")
	source.Opt(k, &s.Where, "at", source.Text, "where it was taken")
	source.Opt(k, &s.On, "on", source.Day, "when it was taken")
	if t := new(Through); source.One(k, t, "through", (*Through).keys, "what it was taken through") {
		s.Through = t
	}
}

func (t *Through) keys(k *source.Keys) {
	source.Opt(k, &t.GainDBi, "gain_dbi", decibels, "gain of the survey antenna")
	source.Opt(k, &t.LossDB, "loss_db", decibels, "loss of the survey cable")
}

func (a *Area) keys(k *source.Keys) {
	a.At = k.At()
	source.Need(k, &a.Name, "name", source.Text, "what it is called")
	source.Some(k, &a.ServedBy, "served_by", nameList, "server antennas, or the router's own")
	source.Opt(k, &a.Distance, "distance", source.Length, "to the nearest of them")
	source.Some(k, &a.Walls, "walls", walls, "walls on the way; absent: an indoor model stands for them")
	source.Opt(k, &a.Floors, "floors", floors, "floors on the way")
	source.Opt(k, &a.Environment, "environment", environments, "for the indoor model; absent: office")
	source.Some(k, &a.Operators, "operators", nameList, "wanted there; absent: all of the plan's")
	source.Opt(k, &a.Target, "target_rsrp_dbm", level, "what is promised")
	source.Some(k, &a.Before, "before", befores, "what was received without the install")
}

func (w *Wall) keys(k *source.Keys) {
	source.Need(k, &w.Name, "name", source.Text, "what it is made of")
	source.Opt(k, &w.LossDB, "loss_db", catalog.LossTable, "loss, one number or [MHz, dB] pairs")
}

func (b *Before) keys(k *source.Keys) {
	source.Need(k, &b.Operator, "operator", source.Name, "whose")
	source.Need(k, &b.Band, "band", catalog.BandName, "in which band")
	source.Need(k, &b.RSRP, "rsrp_dbm", level, "reference signal power")
}

func (r *Reading) keys(k *source.Keys) {
	r.At = k.At()
	source.Need(k, &r.What, "what", quantities, "what was measured")
	source.Opt(k, &r.From, "from", ref, "where, or from where")
	source.Opt(k, &r.To, "to", ref, "to where")
	source.Opt(k, &r.Band, "band", catalog.BandName, "in which band; absent: for all")
	source.Opt(k, &r.Operator, "operator", source.Name, "whose signal")
	source.Opt(k, &r.Where, "at", source.Text, "area or place; of a length also what it leads to, such as power line or edge")
	source.Opt(k, &r.MHz, "mhz", frequency, "at which frequency")
	source.Opt(k, &r.DB, "value_db", decibels, "isolation or return loss")
	source.Opt(k, &r.DBm, "value_dbm", level, "rsrp")
	source.Opt(k, &r.Ratio, "value", standingWave, "vswr")
	source.Opt(k, &r.Ohm, "value_ohm", resistance, "ground resistance")
	source.Opt(k, &r.V, "value_v", voltage, "voltage")
	source.Opt(k, &r.Length, "length", source.Length, "length as built")
	source.Opt(k, &r.Serial, "serial", source.Text, "serial number")
	source.Opt(k, &r.Stage, "stage", readingStages, "when in the job")
	source.Opt(k, &r.On, "on", source.Day, "when")
	source.Opt(k, &r.By, "by", source.Text, "who")
	if k.Recording() {
		for _, what := range slices.Sorted(maps.Keys(valueOf)) {
			state := source.Holds("what", what)
			k.Demand(source.Condition{When: &state, Any: []source.State{source.Given(valueOf[what])}})
		}
	}
	if value := valueOf[r.What.V]; value != "" && !k.Has(value) {
		k.Missing(value, "a reading of "+r.What.V+" is that figure")
	}
}

// valueOf is the key that holds what a kind of reading is about.
var valueOf = map[string]string{
	"isolation": "value_db", "return-loss": "value_db", "rsrp": "value_dbm", "vswr": "value", "ground-ohm": "value_ohm",
	"voltage": "value_v", "length": "length", "serial": "serial",
}

func (r *Reserve) keys(k *source.Keys) {
	r.At = k.At()
	source.Opt(k, &r.Tag, "tag", source.Name, "a reel or remnant")
	source.Opt(k, &r.Part, "part", source.Name, "or a part")
	source.Opt(k, &r.Qty, "qty", extraQty, "how many")
	source.Opt(k, &r.Where, "at", source.Name, "from which shelf")
	source.Opt(k, &r.Cable, "cable", source.Name, "for which cable")
	source.Need(k, &r.Until, "until", source.Day, "until when it is kept")
	k.Demand(source.OneOfTwo("tag", "part")...)
	switch tag, part := k.Has("tag"), k.Has("part"); {
	case tag && part:
		k.Fault(k.At(), "a reserve names a tag or a part, one of the two", "write tag, or part and qty")
	case !tag && !part:
		k.Missing("tag", "or part and qty: what is kept")
	}
}

func (e *Extra) keys(k *source.Keys) {
	e.At = k.At()
	source.Need(k, &e.Part, "part", source.Name, "part of the catalog")
	each := source.Map(source.Count(1, 1000000), func(n int) (Amount, error) { return Amount{Each: n}, nil })
	length := source.Map(source.Shaped(source.Length, source.Form{Pattern: unit.SomeLengthPattern}), func(l unit.MM) (Amount, error) {
		if l == 0 {
			return Amount{}, errors.New("a length above 0 is expected")
		}
		return Amount{Length: l}, nil
	})
	source.Need(k, &e.Qty, "qty", source.Either(source.IsString, length, each, "a number or a length"), "how many, or how much of cut stock")
}

func (w *Waiver) keys(k *source.Keys) {
	w.At = k.At()
	source.Need(k, &w.Rule, "rule", source.Text, "area/name of the rule")
	source.Opt(k, &w.On, "on", source.Text, "what it stands on; absent: everything in the plan")
	source.Opt(k, &w.Band, "band", catalog.BandName, "only in this band")
	source.Opt(k, &w.UpTo, "up_to", source.Number, "figure accepted; beyond it the waiver no longer holds")
	source.Opt(k, &w.Because, "because", source.Text, "why it is accepted")
	source.Opt(k, &w.By, "by", source.Text, "who accepted it")
	source.Opt(k, &w.Until, "until", source.Day, "until when")
}
