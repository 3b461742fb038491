package rules_test

import (
	"fmt"

	"driploop/catalog/unit"
	"driploop/rules/rf"
)

func (in *inputs) mhz(key string, i ...int) unit.MHz { return unit.MHz(in.num(key, i...)) }
func (in *inputs) db(key string, i ...int) unit.DB   { return unit.DB(in.num(key, i...)) }
func (in *inputs) dbm(key string, i ...int) unit.DBm { return unit.DBmOf(in.num(key, i...)) }
func (in *inputs) watts(key string) unit.DBm         { return unit.DBmOfWatt(in.num(key)) }
func (in *inputs) coax() rf.Coax {
	return rf.Coax{Outer: in.num("mm", 0), Inner: in.num("mm", 1), Permittivity: in.num("er")}
}
func (in *inputs) material() (rf.Material, bool)    { return rf.MaterialNamed(in.text("material")) }
func ofDB(v unit.DB, ok bool) (float64, bool)       { return float64(v), ok }
func ofDBm(v unit.DBm, ok bool) (float64, bool)     { return v.Value(), ok }
func ofMHz(v unit.MHz, ok bool) (float64, bool)     { return float64(v), ok }
func ofInt(v int, ok bool) (float64, bool)          { return float64(v), ok }
func scaled(by, v float64, ok bool) (float64, bool) { return by * v, ok }

func (in *inputs) dbs(key string) []unit.DB {
	var out []unit.DB
	for _, v := range in.list(key) {
		out = append(out, unit.DB(v))
	}
	return out
}

// points pairs the lists mhz and db.
func (in *inputs) points() []rf.Point {
	var out []rf.Point
	mhz, db := in.paired("mhz", "db")
	for i, f := range mhz {
		out = append(out, rf.Point{MHz: unit.MHz(f), DB: unit.DB(db[i])})
	}
	return out
}

func (in *inputs) cable() (rf.Cable, bool) {
	var max unit.MHz
	if in.has("max") {
		max = in.mhz("max")
	}
	c, err := rf.FitCable(in.points(), max)
	in.fail(err)
	return c, err == nil
}

func (in *inputs) stages() []rf.Stage {
	var out []rf.Stage
	gain, nf := in.paired("gain", "nf")
	for i := range gain {
		out = append(out, rf.Stage{Gain: unit.DB(gain[i]), NF: unit.DB(nf[i])})
	}
	return out
}

func (in *inputs) channel() rf.Channel {
	columns := max(1, in.count("columns"))
	var h rf.Channel
	for i, v := range in.list("h") {
		if i%columns == 0 {
			h = append(h, nil)
		}
		h[len(h)-1] = append(h[len(h)-1], complex(v, 0))
	}
	return h
}

func (in *inputs) building() rf.Building {
	return map[string]rf.Building{"office": rf.Office, "residential": rf.Residential, "commercial": rf.Commercial}[in.text("building")]
}

func (in *inputs) facade() rf.Facade {
	return map[string]rf.Facade{"traditional": rf.Traditional, "efficient": rf.Efficient}[in.text("class")]
}

func (in *inputs) reflection() float64 {
	return map[string]float64{"free": rf.FreeField, "ground": rf.GroundReflection, "full": rf.FullReflection}[in.text("reflection")]
}

func (in *inputs) radiated() (rf.Radiated, bool) {
	line := rf.Loss{Least: in.db("db", 0), Nominal: in.db("db", 1), Greatest: in.db("db", 2)}
	return rf.EIRP(in.dbm("dbm"), line, in.db("dbi"))
}

// coupling is one server antenna into the donor antenna.
func (in *inputs) coupling() (unit.DB, bool) {
	path, ok := rf.AirGap(in.mhz("mhz"), in.num("m"))
	if !ok {
		return 0, false
	}
	return rf.Coupling{Path: path, Shell: in.db("shell"), Donor: in.db("dbi", 0), Server: in.db("dbi", 1),
		Feed: in.db("feed"), Leg: in.db("leg")}.Isolation()
}

// rfQuantities are what the table of the radio chain may ask for.
var rfQuantities = map[string]func(*inputs) (float64, bool){
	"quarter wave mm": func(in *inputs) (float64, bool) {
		v, ok := rf.QuarterWave(in.mhz("mhz"), in.num("velocity"))
		return scaled(1000, v, ok)
	},
	"quarter wave cm": func(in *inputs) (float64, bool) {
		v, ok := rf.QuarterWave(in.mhz("mhz"), in.num("velocity"))
		return scaled(100, v, ok)
	},
	"dbi from dbd": func(in *inputs) (float64, bool) { return ofDB(rf.DBiFromDBd(in.db("dbd")), true) },
	"dbuv":         func(in *inputs) (float64, bool) { return rf.DBuV(in.dbm("dbm"), in.num("ohm")) },

	"gamma":                 func(in *inputs) (float64, bool) { return rf.Gamma(in.num("vswr")) },
	"return loss":           func(in *inputs) (float64, bool) { return ofDB(rf.ReturnLoss(in.num("vswr"))) },
	"mismatch loss":         func(in *inputs) (float64, bool) { return ofDB(rf.MismatchLoss(in.num("vswr"))) },
	"vswr from return loss": func(in *inputs) (float64, bool) { return rf.VSWR(in.db("db")) },
	"step vswr":             func(in *inputs) (float64, bool) { return rf.StepVSWR(in.num("ohm", 0), in.num("ohm", 1)) },
	"return loss through":   func(in *inputs) (float64, bool) { return ofDB(rf.ReturnLossThrough(in.db("db"), in.db("line"))) },
	"reflected per cent": func(in *inputs) (float64, bool) {
		v, ok := rf.ReflectedShare(in.num("vswr"))
		return scaled(100, v, ok)
	},
	"composite best":  func(in *inputs) (float64, bool) { v, _, ok := rf.CompositeVSWR(in.list("vswr")...); return v, ok },
	"composite worst": func(in *inputs) (float64, bool) { _, v, ok := rf.CompositeVSWR(in.list("vswr")...); return v, ok },
	"run loss least": func(in *inputs) (float64, bool) {
		l, ok := rf.MismatchRun(in.list("vswr")...)
		return ofDB(l.Least, ok)
	},
	"run loss nominal": func(in *inputs) (float64, bool) {
		l, ok := rf.MismatchRun(in.list("vswr")...)
		return ofDB(l.Nominal, ok)
	},
	"run loss greatest": func(in *inputs) (float64, bool) {
		l, ok := rf.MismatchRun(in.list("vswr")...)
		return ofDB(l.Greatest, ok)
	},
	"mismatch up": func(in *inputs) (float64, bool) {
		up, _, ok := rf.MismatchUncertainty(in.num("vswr", 0), in.num("vswr", 1))
		return ofDB(up, ok)
	},
	"mismatch down": func(in *inputs) (float64, bool) {
		_, down, ok := rf.MismatchUncertainty(in.num("vswr", 0), in.num("vswr", 1))
		return ofDB(down, ok)
	},
	"pad series": func(in *inputs) (float64, bool) {
		v, _, _, ok := rf.MinimumLossPad(in.num("ohm", 0), in.num("ohm", 1))
		return v, ok
	},
	"pad shunt": func(in *inputs) (float64, bool) {
		_, v, _, ok := rf.MinimumLossPad(in.num("ohm", 0), in.num("ohm", 1))
		return v, ok
	},
	"pad loss": func(in *inputs) (float64, bool) {
		_, _, v, ok := rf.MinimumLossPad(in.num("ohm", 0), in.num("ohm", 1))
		return ofDB(v, ok)
	},

	"noise density": func(in *inputs) (float64, bool) { return ofDBm(rf.NoiseDensity(in.num("kelvin"))) },
	"thermal noise": func(in *inputs) (float64, bool) { return ofDBm(rf.ThermalNoise(in.mhz("mhz"))) },
	"cascade nf":    func(in *inputs) (float64, bool) { s, ok := rf.Cascade(in.stages()...); return ofDB(s.NF, ok) },
	"cascade gain":  func(in *inputs) (float64, bool) { s, ok := rf.Cascade(in.stages()...); return ofDB(s.Gain, ok) },
	"port noise": func(in *inputs) (float64, bool) {
		return ofDBm(rf.PortNoise(rf.Stage{Gain: in.db("gain"), NF: in.db("nf")}))
	},
	"desense": func(in *inputs) (float64, bool) { return ofDB(rf.Desense(in.dbm("dbm"), in.dbm("floor"))) },

	"free space loss": func(in *inputs) (float64, bool) { return ofDB(rf.FreeSpaceLoss(in.mhz("mhz"), in.num("m"))) },
	"mscl": func(in *inputs) (float64, bool) {
		return ofDB(rf.MSCL(in.mhz("mhz"), in.num("m"), in.db("server"), in.db("leg")))
	},
	"mscl building": func(in *inputs) (float64, bool) {
		return ofDB(rf.MSCL(in.mhz("mhz"), rf.BuildingPhoneMetres, in.db("server"), in.db("leg")))
	},
	"mscl vehicle": func(in *inputs) (float64, bool) {
		return ofDB(rf.MSCL(in.mhz("mhz"), rf.VehiclePhoneMetres, in.db("server"), in.db("leg")))
	},
	"p1238 older": func(in *inputs) (float64, bool) {
		return ofDB(rf.IndoorLoss(in.building(), in.mhz("mhz"), in.num("m"), in.count("floors")))
	},
	"p1238 newer": func(in *inputs) (float64, bool) {
		row, found := rf.SurroundingsNamed(in.text("row"))
		if !found {
			in.fail(fmt.Errorf("no row %q", in.text("row")))
		}
		return ofDB(row.Loss(in.mhz("mhz"), in.num("m")))
	},
	"p1238 coefficient": func(in *inputs) (float64, bool) { // what a decade of distance adds
		near, ok1 := rf.IndoorLoss(in.building(), in.mhz("mhz"), 10, 0)
		far, ok2 := rf.IndoorLoss(in.building(), in.mhz("mhz"), 100, 0)
		return float64(far - near), ok1 && ok2
	},
	"p1238 floor loss": func(in *inputs) (float64, bool) {
		open, ok1 := rf.IndoorLoss(in.building(), in.mhz("mhz"), 10, 0)
		through, ok2 := rf.IndoorLoss(in.building(), in.mhz("mhz"), 10, in.count("floors"))
		return float64(through - open), ok1 && ok2
	},
	"p1238 spread": func(in *inputs) (float64, bool) {
		row, found := rf.SurroundingsNamed(in.text("row"))
		return ofDB(row.Sigma, found)
	},
	"conductivity":   func(in *inputs) (float64, bool) { m, _ := in.material(); return m.Conductivity(in.mhz("mhz")) },
	"permittivity":   func(in *inputs) (float64, bool) { m, _ := in.material(); return m.Permittivity(in.mhz("mhz")) },
	"loss per metre": func(in *inputs) (float64, bool) { m, _ := in.material(); return ofDB(m.LossPerMetre(in.mhz("mhz"))) },
	"slab": func(in *inputs) (float64, bool) {
		m, found := in.material()
		if !found {
			in.fail(fmt.Errorf("no material %q", in.text("material")))
		}
		return ofDB(m.Slab(in.mhz("mhz"), in.num("mm")))
	},
	"wall": func(in *inputs) (float64, bool) {
		w, ok := rf.Wall(in.text("material"), in.num("mm"), in.mhz("mhz"))
		return ofDB(w.Loss, ok)
	},
	"wall tolerance": func(in *inputs) (float64, bool) {
		w, ok := rf.Wall(in.text("material"), in.num("mm"), in.mhz("mhz"))
		return ofDB(w.Tolerance, ok)
	},
	"entry loss": func(in *inputs) (float64, bool) {
		return ofDB(rf.EntryLoss(in.facade(), in.mhz("mhz"), in.num("elevation"), in.num("share")))
	},

	"vertical isolation": func(in *inputs) (float64, bool) { return ofDB(rf.VerticalIsolation(in.mhz("mhz"), in.num("m"))) },
	"horizontal isolation": func(in *inputs) (float64, bool) {
		return ofDB(rf.HorizontalIsolation(in.mhz("mhz"), in.num("m"), in.db("dbi", 0), in.db("dbi", 1)))
	},
	"slant isolation": func(in *inputs) (float64, bool) {
		return ofDB(rf.SlantIsolation(in.db("db", 0), in.db("db", 1), in.num("up"), in.num("across")))
	},
	"coupling isolation": func(in *inputs) (float64, bool) { return ofDB(in.coupling()) },
	"total isolation":    func(in *inputs) (float64, bool) { return ofDB(rf.TotalIsolation(in.dbs("db")...)) },

	"coax impedance":       func(in *inputs) (float64, bool) { return in.coax().Impedance() },
	"coax cutoff":          func(in *inputs) (float64, bool) { return ofMHz(in.coax().Cutoff()) },
	"coax conductor loss":  func(in *inputs) (float64, bool) { return ofDB(in.coax().ConductorLoss(in.mhz("mhz"), in.num("s"))) },
	"coax dielectric loss": func(in *inputs) (float64, bool) { return ofDB(in.coax().DielectricLoss(in.mhz("mhz"), in.num("tan"))) },
	"cable k1":             func(in *inputs) (float64, bool) { c, ok := in.cable(); return c.K1, ok },
	"cable k2":             func(in *inputs) (float64, bool) { c, ok := in.cable(); return c.K2, ok },
	"cable miss":           func(in *inputs) (float64, bool) { c, ok := in.cable(); return c.Miss, ok },
	"cable attenuation":    func(in *inputs) (float64, bool) { c, _ := in.cable(); return ofDB(c.AttenuationPer100m(in.mhz("at"))) },
	"cable loss": func(in *inputs) (float64, bool) {
		c, _ := in.cable()
		return ofDB(c.Loss(in.mhz("at"), unit.MM(1000*in.num("m")), unit.Celsius(in.num("celsius"))))
	},
	"per 100 m": func(in *inputs) (float64, bool) { // holds the tables against the foot, not the package
		return in.num("ft") * unit.MM(100_000).Feet() / 100, true
	},
	"temperature factor": func(in *inputs) (float64, bool) { return rf.TemperatureFactor(unit.Celsius(in.num("celsius"))) },
	"pair loss":          func(in *inputs) (float64, bool) { return ofDB(rf.PairLoss(in.mhz("mhz"))) },

	"split":       func(in *inputs) (float64, bool) { return ofDB(rf.SplitLoss(in.count("ways"))) },
	"tap through": func(in *inputs) (float64, bool) { return ofDB(rf.TapThroughLoss(in.db("db"))) },
	"combine":     func(in *inputs) (float64, bool) { return ofDB(rf.CombineLoss(in.db("db"), in.num("deg"))) },
	"pim level":   func(in *inputs) (float64, bool) { return ofDBm(rf.PIMLevel(in.db("dbc"), in.dbm("dbm"))) },
	"third order lower": func(in *inputs) (float64, bool) {
		l, _, ok := rf.ThirdOrder(in.mhz("mhz", 0), in.mhz("mhz", 1))
		return ofMHz(l, ok)
	},
	"third order upper": func(in *inputs) (float64, bool) {
		_, u, ok := rf.ThirdOrder(in.mhz("mhz", 0), in.mhz("mhz", 1))
		return ofMHz(u, ok)
	},

	"lte blocks": func(in *inputs) (float64, bool) { return ofInt(rf.LTEBlocks(in.mhz("mhz"))) },
	"nr blocks":  func(in *inputs) (float64, bool) { return ofInt(rf.NRBlocks(in.mhz("mhz"), in.count("khz"))) },
	"rssi over rsrp": func(in *inputs) (float64, bool) {
		return ofDBm(rf.RSSI(unit.DBmOf(0), in.count("blocks")))
	},
	"rsrq": func(in *inputs) (float64, bool) {
		return ofDB(rf.RSRQ(in.dbm("rsrp"), in.dbm("rssi"), in.count("blocks")))
	},
	"power sum": func(in *inputs) (float64, bool) {
		var levels []unit.DBm
		for _, v := range in.list("dbm") {
			levels = append(levels, unit.DBmOf(v))
		}
		return unit.PowerSum(levels...).Value(), true
	},
	"shannon":              func(in *inputs) (float64, bool) { return rf.Shannon(in.mhz("mhz"), in.db("snr")) },
	"capacity":             func(in *inputs) (float64, bool) { return in.channel().Capacity(in.db("snr")) },
	"cross polar capacity": func(in *inputs) (float64, bool) { return rf.CrossPolar(in.db("xpd")).Capacity(in.db("snr")) },
	"polarization loss":    func(in *inputs) (float64, bool) { return ofDB(rf.PolarizationLoss(in.num("deg"), in.db("xpd"))) },

	"eirp of erp":  func(in *inputs) (float64, bool) { return ofDBm(rf.EIRPFromERP(in.watts("w")), true) },
	"eirp most":    func(in *inputs) (float64, bool) { r, ok := in.radiated(); return ofDBm(r.Most, ok) },
	"eirp nominal": func(in *inputs) (float64, bool) { r, ok := in.radiated(); return ofDBm(r.Nominal, ok) },
	"eirp least":   func(in *inputs) (float64, bool) { r, ok := in.radiated(); return ofDBm(r.Least, ok) },
	"greatest gain": func(in *inputs) (float64, bool) {
		return ofDB(rf.GreatestGain(in.dbm("limit"), in.dbm("dbm"), in.db("db"), in.count("antennas")))
	},

	"power density": func(in *inputs) (float64, bool) {
		return rf.PowerDensity(in.watts("w"), in.reflection(), in.num("m"), in.num("from"))
	},
	"least distance cm": func(in *inputs) (float64, bool) {
		v, ok := rf.LeastDistance(in.watts("w"), in.reflection(), in.num("limit"), 0)
		return scaled(100, v, ok)
	},
	"far field from": func(in *inputs) (float64, bool) { return rf.FarFieldFrom(in.mhz("mhz"), in.num("m")) },
}
