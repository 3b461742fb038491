package limits

import (
	"driploop/catalog/source"
	"driploop/catalog/unit"
)

// span is a stretch of spectrum.
var span = source.Map(source.Pair(source.Between(0, 300000, "MHz"), "[824, 849]"), toSpan)

func toSpan(p [2]float64) (unit.Span, error) {
	s := unit.Span{Lo: unit.MHz(p[0]), Hi: unit.MHz(p[1])}
	if s.Empty() {
		return s, errEmptySpan
	}
	return s, nil
}

func (p *Profile) keys(k *source.Keys) {
	p.ID, p.At = k.ID(), k.At()
	source.Need(k, &p.Title, "title", source.Text, "what it is, in a line")
	source.Need(k, &p.Instrument, "instrument", source.Text, "law, rule or standard it restates")
	source.Need(k, &p.Edition, "edition", source.Text, "state of the instrument that was used")
	source.Opt(k, &p.Checked, "checked", source.Day, "when the rows were last compared with their sources")
	source.Opt(k, &p.Setting, "setting", source.OneOf("building", "vehicle"), "absent: both")
	source.Opt(k, &p.Class, "class", source.OneOf("wideband", "provider-specific", "industrial"), "class of amplifier it is for; absent: any")
	source.Opt(k, &p.Mobility, "mobility", source.OneOf("fixed", "mobile"), "absent: both")
	source.Opt(k, &p.With, "with", source.ListOf(source.Name), "profiles whose radio rows, exposure levels, heights and separation hold here too")
	source.Opt(k, &p.OperatorPermission, "operator_permission", source.Flag, "nothing may transmit without the operator's permission, which sets the figures")
	source.Opt(k, &p.DonorAsRadio, "donor_as_radio", source.Flag, "the donor side of an amplifier is held to the radio rows")
	source.Rows(k, &p.Spectrum, "spectrum", (*Spectrum).keys, "what it permits; absent: left to the licence")
	source.Named(k, &p.Papers, "paper", (*Paper).keys, "evidence it asks for: consent, registration, permit")
	p.limitRows(k)
	source.Named(k, &p.Exposure, "exposure", (*Level).keys, "reference levels: general, occupational, local")
	source.Rows(k, &p.Heights, "height", (*Height).keys, "greatest antenna heights")
	p.BSCL = one(k, "bscl", (*BSCL).keys, "base station coupling loss where it was not measured")
	p.Kit = one(k, "kit", (*Duty).keys, "only with what the amplifier is certified with")
	p.Personal = one(k, "personal", (*Duty).keys, "for personal use only")
	p.Separation = one(k, "separation", (*Separation).keys, "least distance between antennas and people")
	source.Rows(k, &p.Conditions, "condition", (*Duty).keys, "what a plan cannot show")
	var cautions source.Val[[]source.Val[string]]
	source.Opt(k, &cautions, "cautions", source.ListOf(source.Text), "what its plans are told where it has no limit to hold them against")
	p.Cautions = cautions.V
	p.fillEdition()
}

func (p *Profile) limitRows(k *source.Keys) {
	var amps, radios []Row
	source.Rows(k, &amps, "limit", (*Row).keys, "limits of amplifiers")
	source.Rows(k, &radios, "radio", (*Row).radioKeys, "limits of routers and other radios, class radio")
	for i := range amps {
		p.Limits = append(p.Limits, &amps[i])
	}
	for i := range radios {
		p.Radio = append(p.Radio, &radios[i])
	}
}

// one reads a sub-table that may be left out, or gives nil.
func one[R any](k *source.Keys, name string, bind func(*R, *source.Keys), doc string) *R {
	r := new(R)
	if !source.One(k, r, name, bind, doc) {
		return nil
	}
	return r
}

// fillEdition gives rows and duties without an edition of their own the profile's.
func (p *Profile) fillEdition() {
	fill := func(e *source.Val[string]) {
		if !e.Set {
			*e = p.Edition
		}
	}
	for _, r := range append(append([]*Row{}, p.Limits...), p.Radio...) {
		fill(&r.Edition)
	}
	for _, d := range p.duties() {
		fill(&d.Edition)
	}
}

// duties lists everything of the profile that is not a limit row.
func (p *Profile) duties() []*Duty {
	var out []*Duty
	for i := range p.Spectrum {
		out = append(out, &p.Spectrum[i].Duty)
	}
	for i := range p.Papers {
		out = append(out, &p.Papers[i].Duty)
	}
	for i := range p.Exposure {
		out = append(out, &p.Exposure[i].Duty)
	}
	for i := range p.Heights {
		out = append(out, &p.Heights[i].Duty)
	}
	if p.BSCL != nil {
		out = append(out, &p.BSCL.Duty)
	}
	if p.Separation != nil {
		out = append(out, &p.Separation.Duty)
	}
	for _, d := range []*Duty{p.Kit, p.Personal} {
		if d != nil {
			out = append(out, d)
		}
	}
	for i := range p.Conditions {
		out = append(out, &p.Conditions[i])
	}
	return out
}

func (d *Duty) keys(k *source.Keys) {
	d.At = k.At()
	source.Need(k, &d.Says, "says", source.Text, "what is asked for, in our words")
	d.origin(k)
}

// origin reads where a duty or figure comes from.
func (d *Duty) origin(k *source.Keys) {
	d.At = k.At()
	source.Need(k, &d.Clause, "clause", source.Text, "instrument and paragraph")
	source.Opt(k, &d.Edition, "edition", source.Text, "of the instrument; absent: as the profile")
	source.Need(k, &d.Proof, "proof", proof, "how sure it is")
	source.Opt(k, &d.Note, "note", source.Text, "what a reader should know about it")
}

func (s *Spectrum) keys(k *source.Keys) {
	source.Need(k, &s.Name, "name", source.Text, "what the instrument calls it")
	source.Need(k, &s.Uplink, "uplink", span, "toward the network")
	source.Need(k, &s.Downlink, "downlink", span, "toward the phones")
	s.origin(k)
}

func (p *Paper) keys(k *source.Keys) {
	p.ID = k.ID()
	switch p.ID {
	case "", "consent", "registration", "permit":
	default:
		k.Fault(k.At(), "no plan keeps a paper "+source.Quote(p.ID), "use consent, registration or permit")
	}
	source.Opt(k, &p.Uplink, "uplink", span, "asked for where a band's uplink overlaps this; absent: always")
	p.Duty.keys(k)
}

func (h *Height) keys(k *source.Keys) {
	source.Need(k, &h.MHz, "mhz", span, "transmit frequencies")
	source.Need(k, &h.Most, "most", source.Length, "greatest height above ground")
	source.Opt(k, &h.Fixed, "fixed", source.Flag, "only for fixed stations")
	h.origin(k)
}

func (s *Separation) keys(k *source.Keys) {
	source.Need(k, &s.Least, "least", source.Length, "least distance")
	s.Duty.keys(k)
}

func (b *BSCL) keys(k *source.Keys) {
	source.Opt(k, &b.BaseDBm, "base_dbm", source.Between(-100, 100, "dBm"), "power a base station is taken to send in one channel")
	source.Opt(k, &b.AssumedDB, "assumed_db", source.Between(0, 200, "dB"), "where nothing was measured")
	b.origin(k)
}
