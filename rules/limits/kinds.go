package limits

// Kind is a quantity that rows limit.
type Kind struct {
	Name   string
	Symbol string // in formulas
	Unit   string
	Means  string
}

// Kinds lists what rows can limit, in the order of their documentation. Noise as
// radiated power and intermodulation are shown by certification, not by a plan;
// their rows stand there to be read beside the others.
var Kinds = []Kind{
	{"gain", "G", "dB", "from the amplifier's own input port to its output port"},
	{"system_gain", "G", "dB", "as the instrument defines it, with the antennas and cables it names"},
	{"conducted", "P", "dBm", "power at the amplifier's output port"},
	{"eirp", "EIRP", "dBm", "radiated power over an isotropic antenna"},
	{"erp", "ERP", "dBm", "radiated power over a half-wave dipole, 2.15 dB below EIRP"},
	{"noise_per_mhz", "N", "dBm/MHz", "noise at the amplifier's output port"},
	{"noise_figure", "NF", "dB", "noise figure of the amplifier"},
	{"noise_erp", "N", "dBm", "noise as radiated power over a half-wave dipole"},
	{"intermodulation", "IM", "dBm", "one product at a port"},
}

func kindNames() []string {
	var out []string
	for _, k := range Kinds {
		out = append(out, k.Name)
	}
	return out
}

// kind is the description of the row's kind.
func (r *Row) kind() Kind {
	for _, k := range Kinds {
		if k.Name == r.Kind.V {
			return k
		}
	}
	return Kind{Name: r.Kind.V, Symbol: r.Kind.V}
}

// Unit is what the row's value is counted in: dB, dBm, dBm/MHz, and what it is
// per.
func (r *Row) Unit() string {
	u := r.kind().Unit
	if r.Per.Set {
		u += " per " + perNames[r.Per.V]
	}
	return u
}

var perNames = map[string]string{"channel": "channel", "5MHz": "5 MHz", "10MHz": "10 MHz", "10kHz": "10 kHz"}
