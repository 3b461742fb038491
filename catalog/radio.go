package catalog

import "driploop/catalog/source"

// Amplifier is a bidirectional signal booster.
type Amplifier struct {
	Class             source.Val[string] // wideband, provider-specific, industrial
	Mobility          source.Val[string] // fixed, mobile
	Coupling          source.Val[Words]  // antenna, cradle, wired
	CouplingDB        source.Val[float64]
	NetworkProtection source.Val[bool]
	IsolationControl  source.Val[bool]
	StepDB            source.Val[float64]
	MaxIn             source.Val[float64] // dBm
	DamageIn          source.Val[float64] // dBm
	Bands             []AmpBand
	Kits              []Kit
	Load              *Load

	names Words // of Bands
}

// AmpBand is what an amplifier does in one band.
type AmpBand struct {
	At       source.Place
	Band     source.Val[string]
	Uplink   *Gain
	Downlink *Gain
}

// Gain is one direction of an amplifier in one band.
type Gain struct {
	At     source.Place
	GainDB source.Val[float64] // greatest gain
	MaxOut source.Val[float64] // rated output, dBm composite
	NF     source.Val[float64] // dB
}

// Kit is one row of what an amplifier is certified with: on one side, either a
// named antenna or any antenna up to a gain, behind at least some loss.
type Kit struct {
	At        source.Place
	Side      source.Val[string]
	Antenna   source.Val[string]
	MaxGain   source.Val[float64] // dBi
	LeastLoss source.Val[float64] // dB
	Bands     source.Val[Words]   // absent: all
}

// Load is the supply that a device asks for.
type Load struct {
	Volts source.Val[[2]float64]
	W     source.Val[float64]
}

// BandNames lists the bands of the rows in their order. The list is shared.
func (a *Amplifier) BandNames() Words { return a.names }

// Band finds the row of a band, or nil.
func (a *Amplifier) Band(name string) *AmpBand {
	for i := range a.Bands {
		if a.Bands[i].Band.V == name {
			return &a.Bands[i]
		}
	}
	return nil
}

func readAmplifier(p *Part, k *source.Keys) {
	p.ports(k)
	a := &Amplifier{}
	p.Amplifier = a
	a.keys(k)
	p.box(k)
}

func (a *Amplifier) keys(k *source.Keys) {
	source.Opt(k, &a.Class, "class", source.OneOf("wideband", "provider-specific", "industrial"), "class it is certified in")
	source.Opt(k, &a.Mobility, "mobility", source.OneOf("fixed", "mobile"), "for buildings or for vehicles")
	source.Opt(k, &a.Coupling, "coupling", source.ListOf(source.OneOf("antenna", "cradle", "wired")), "how phones may be coupled to it")
	source.Opt(k, &a.CouplingDB, "coupling_db", source.Between(0, 100, "dB"), "coupling loss of its cradle or wire")
	source.Opt(k, &a.NetworkProtection, "network_protection", source.Flag, "lowers its gain by itself to the limits that depend on the received level")
	source.Opt(k, &a.IsolationControl, "isolation_control", source.Flag, "lowers its gain by itself where isolation is short")
	source.Opt(k, &a.StepDB, "step_db", source.Between(0, 20, "dB"), "step of its gain setting")
	source.Opt(k, &a.MaxIn, "max_in_dbm", level, "greatest input without overload")
	source.Opt(k, &a.DamageIn, "damage_in_dbm", level, "input that damages it")
	source.Rows(k, &a.Bands, "band", (*AmpBand).keys, "what it does in each band")
	for i := range a.Bands {
		a.names = append(a.names, a.Bands[i].Band)
	}
	source.Rows(k, &a.Kits, "kit", (*Kit).keys, "antennas and losses it is certified with")
	a.Load = readLoad(k)
}

func readLoad(k *source.Keys) *Load {
	l := new(Load)
	if !source.One(k, l, "load", (*Load).keys, "the supply it asks for") {
		return nil
	}
	return l
}

func (l *Load) keys(k *source.Keys) {
	source.Opt(k, &l.Volts, "volts", source.Pair(volts, "[11, 15]"), "least and greatest voltage")
	source.Opt(k, &l.W, "w", source.AtLeast(0, "W"), "greatest power")
}

func (b *AmpBand) keys(k *source.Keys) {
	b.At = k.At()
	source.Need(k, &b.Band, "band", bandName, "3GPP band")
	if g := new(Gain); source.One(k, g, "uplink", (*Gain).keys, "toward the network") {
		b.Uplink = g
	}
	if g := new(Gain); source.One(k, g, "downlink", (*Gain).keys, "toward the phones") {
		b.Downlink = g
	}
}

func (g *Gain) keys(k *source.Keys) {
	g.At = k.At()
	source.Opt(k, &g.GainDB, "gain_db", source.Between(0, 130, "dB"), "greatest gain")
	source.Opt(k, &g.MaxOut, "max_out_dbm", level, "rated composite output")
	source.Opt(k, &g.NF, "nf_db", source.Between(0, 30, "dB"), "noise figure")
}

func (c *Kit) keys(k *source.Keys) {
	c.At = k.At()
	source.Need(k, &c.Side, "side", source.OneOf("donor", "server"), "which side of the amplifier")
	source.Opt(k, &c.Antenna, "antenna", source.Name, "a listed antenna part")
	source.Opt(k, &c.MaxGain, "max_gain_dbi", source.Between(-30, 40, "dBi"), "or any antenna up to this gain")
	source.Opt(k, &c.LeastLoss, "least_loss_db", source.Between(0, 60, "dB"), "behind at least this loss")
	source.Opt(k, &c.Bands, "bands", source.ListOf(bandName), "where the row holds; absent: all bands")
}

// Router is a cellular router or modem.
type Router struct {
	Bands          source.Val[Words]
	TxDBm          source.Val[float64] // total over its ports
	NF             source.Val[float64]
	Streams        source.Val[int]
	MaxAntennaGain []source.Pick[float64] // dBi by band, of its grant, net of the least loss
	Load           *Load
}

// GrantGain is the greatest antenna gain of the router's grant in a band, dBi.
func (r *Router) GrantGain(band string) source.Val[float64] {
	for _, g := range r.MaxAntennaGain {
		if g.Name == band {
			return g.Val
		}
	}
	return source.Val[float64]{}
}

func readRouter(p *Part, k *source.Keys) {
	p.ports(k)
	r := &Router{}
	p.Router = r
	source.Opt(k, &r.Bands, "bands", source.ListOf(bandName), "bands of its modem")
	source.Opt(k, &r.TxDBm, "tx_dbm", level, "greatest transmit power, total over its ports")
	source.Opt(k, &r.NF, "nf_db", source.Between(0, 30, "dB"), "noise figure")
	source.Opt(k, &r.Streams, "streams", source.Count(1, 16), "spatial streams")
	source.Each(k, &r.MaxAntennaGain, "max_antenna_gain_dbi", ByBand, source.Between(-30, 40, "dBi"), "greatest antenna gain of its grant, by band, net of the least loss")
	r.Load = readLoad(k)
	if k.Recording() || k.Has("range") {
		p.Antenna = &Antenna{}
		p.Antenna.keys(k)
		return
	}
	p.box(k)
}
