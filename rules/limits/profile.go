package limits

import (
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
)

// Profile is what one authority, or one of its classes of equipment, asks for.
type Profile struct {
	ID       string
	At       source.Place
	Embedded bool // part of the program, not of the workspace

	Title      source.Val[string]
	Instrument source.Val[string]
	Edition    source.Val[string]
	Checked    source.Val[unit.Date] // when the rows were last compared with their sources

	Setting  source.Val[string] // building, vehicle; absent: both
	Class    source.Val[string] // class of amplifier it is for; absent: any
	Mobility source.Val[string] // fixed, mobile; absent: both
	With     source.Val[[]source.Val[string]]

	// OperatorPermission says that nothing may transmit without the operator's own
	// permission, which then sets the figures.
	OperatorPermission source.Val[bool]
	// DonorAsRadio says that the donor side of an amplifier is held to the limits
	// of the radio service.
	DonorAsRadio source.Val[bool]

	Spectrum   []Spectrum
	Papers     []Paper
	Limits     []*Row
	Radio      []*Row // of the service parts, for routers
	Exposure   []Level
	Heights    []Height
	BSCL       *BSCL
	Kit        *Duty // set: only antennas and losses the amplifier is certified with
	Personal   *Duty // set: for personal use only
	Separation *Separation
	Conditions []Duty // what a plan cannot show
	Cautions   []source.Val[string]
}

// Duty is something the instrument asks for, in the project's words.
type Duty struct {
	At      source.Place
	Says    source.Val[string]
	Clause  source.Val[string]
	Edition source.Val[string]
	Proof   source.Val[string]
	Note    source.Val[string]
}

// Spectrum is a stretch the profile permits, in both directions.
type Spectrum struct {
	Duty
	Name             source.Val[string]
	Uplink, Downlink source.Val[unit.Span]
}

// Paper is evidence the profile asks for. Its ID is the key under which a plan
// keeps it: consent and registration of each operator, permit of the site.
type Paper struct {
	Duty
	ID     string
	Uplink source.Val[unit.Span] // only where a band overlaps this; absent: always
}

// Height is the greatest height of a fixed transmitting antenna above ground.
type Height struct {
	Duty
	MHz   source.Val[unit.Span] // transmit frequencies
	Most  source.Val[unit.MM]
	Fixed source.Val[bool] // only for fixed stations
}

// Separation is the least distance between an antenna and people.
type Separation struct {
	Duty
	Least source.Val[unit.MM]
}

// BSCL says how the base station coupling loss is come by where it was not
// measured.
type BSCL struct {
	Duty
	BaseDBm   source.Val[float64] // power a base station is taken to send in a channel
	AssumedDB source.Val[float64] // where nothing was measured at all
}

// Permission tells which part of a band a profile leaves out.
type Permission struct {
	Known    bool // false: the profile lists no spectrum, or the band is unknown
	Uplink   []unit.Span
	Downlink []unit.Span
}

// Whole reports that the profile permits all of the band.
func (p Permission) Whole() bool { return p.Known && len(p.Uplink) == 0 && len(p.Downlink) == 0 }

// Permits compares a 3GPP band with the spectrum the profile lists. A profile
// without a list leaves that to the licence or the operator, and the answer is
// not known here.
func (p *Profile) Permits(band string) Permission {
	b, ok := catalog.LookBand(band)
	if !ok || len(p.Spectrum) == 0 {
		return Permission{}
	}
	var up, down []unit.Span
	for _, s := range p.Spectrum {
		// A downlink counts only with the uplink it is paired with.
		if b.Uplink.Empty() || !s.Uplink.V.Overlap(b.Uplink).Empty() {
			up = append(up, s.Uplink.V)
			down = append(down, s.Downlink.V)
		}
	}
	left := Permission{Known: true, Downlink: b.Downlink.Minus(down...)}
	if !b.Uplink.Empty() {
		left.Uplink = b.Uplink.Minus(up...)
	}
	return left
}

// Bands lists the 3GPP bands with an uplink that the profile permits whole, in
// the order of the band table; where it lists no spectrum, those whose uplink its
// radio rows cover.
func (p *Profile) Bands() []catalog.Band {
	var out []catalog.Band
	for _, b := range catalog.Bands() {
		if b.Uplink.Empty() {
			continue
		}
		if len(p.Spectrum) == 0 {
			if len(p.Radio) > 0 && len(p.Uncovered(Query{Kind: "eirp", Class: Radio, Band: b.Name})) == 0 {
				out = append(out, b)
			}
			continue
		}
		if p.Permits(b.Name).Whole() {
			out = append(out, b)
		}
	}
	return out
}

// PapersFor lists the papers that a plan with these bands needs.
func (p *Profile) PapersFor(bands ...string) []*Paper {
	var out []*Paper
	for i := range p.Papers {
		paper := &p.Papers[i]
		needed := !paper.Uplink.Set
		for _, band := range bands {
			span, known := bandSpan(band, "uplink")
			needed = needed || known && !paper.Uplink.V.Overlap(span).Empty()
		}
		if needed {
			out = append(out, paper)
		}
	}
	return out
}

// NeedsOperatorPermission reports that the operator's permission stands in place
// of figures.
func (p *Profile) NeedsOperatorPermission() bool { return p.OperatorPermission.V }

// HeightsFor lists the height limits of an antenna that transmits on the band,
// fixed or in a vehicle.
func (p *Profile) HeightsFor(band string, fixed bool) []*Height {
	span, known := bandSpan(band, "uplink")
	var out []*Height
	for i := range p.Heights {
		h := &p.Heights[i]
		if known && !h.MHz.V.Overlap(span).Empty() && (fixed || !h.Fixed.V) {
			out = append(out, h)
		}
	}
	return out
}

// BSCLFrom gives the base station coupling loss in dB and how it was come by:
// measured where that is known, else from the received power of one channel at
// the donor port, else as assumed. It is unknown where the profile has no such
// rule and nothing was measured.
func (p *Profile) BSCLFrom(measured, channelDBm Input) (Input, string) {
	switch {
	case measured.Known:
		return measured, "measured"
	case p.BSCL == nil:
		return Input{}, ""
	case channelDBm.Known && p.BSCL.BaseDBm.Set:
		return Figure(p.BSCL.BaseDBm.V-channelDBm.V, true), "received"
	case p.BSCL.AssumedDB.Set:
		return Figure(p.BSCL.AssumedDB.V, true), "assumed"
	}
	return Input{}, ""
}
