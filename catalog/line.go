package catalog

import (
	"driploop/catalog/source"
	"driploop/catalog/unit"
)

// Cable is coaxial line. Loss is kept per 100 m at 20 °C, whichever unit the
// file uses.
type Cable struct {
	Impedance source.Val[float64] // ohm
	Loss      source.Val[Points]  // dB per 100 m
	PerFeet   bool                // the file gives dB per 100 ft
	MaxMHz    source.Val[float64]
	ODmm      source.Val[float64]
	Bend      source.Val[unit.MM] // least radius once installed
	DCOhmKm   source.Val[float64] // both conductors together
	Velocity  source.Val[float64]
	Fire      source.Val[string]
}

func readCable(p *Part, k *source.Keys) {
	c := &Cable{}
	p.Cable = c
	c.keys(k)
}

func (c *Cable) keys(k *source.Keys) {
	source.Need(k, &c.Impedance, "impedance_ohm", ohm, "characteristic impedance")
	source.Opt(k, &c.Loss, "loss_db_per_100m", LossTable, "loss at 20 °C, one [MHz, dB] pair a point")
	var feet source.Val[Points]
	source.Opt(k, &feet, "loss_db_per_100ft", LossTable, "the same per 100 ft, as many data sheets print it")
	source.Opt(k, &c.MaxMHz, "max_mhz", source.AtLeast(0, "MHz"), "highest frequency it is made for; beyond it there is no value")
	source.Opt(k, &c.ODmm, "od_mm", source.AtLeast(0, "mm"), "outer diameter")
	source.Opt(k, &c.Bend, "bend_radius", source.Length, "least radius once installed")
	source.Opt(k, &c.DCOhmKm, "dc_ohm_per_km", source.AtLeast(0, "ohm/km"), "loop resistance, both conductors")
	source.Opt(k, &c.Velocity, "velocity", source.Between(0.3, 1, ""), "velocity factor")
	source.Opt(k, &c.Fire, "fire", fire, "marking on the jacket")
	k.Demand(source.OneOfTwo("loss_db_per_100m", "loss_db_per_100ft")...)
	switch {
	case c.Loss.Set && feet.Set:
		k.Fault(feet.At, "the loss is given per 100 m and per 100 ft", "keep the one that the data sheet prints", c.Loss.At)
	case feet.Set:
		c.Loss, c.PerFeet = feet, true
		for i := range c.Loss.V {
			c.Loss.V[i].V /= 0.3048
		}
	case !k.Recording() && !k.Has("loss_db_per_100m") && !k.Has("loss_db_per_100ft"):
		k.Missing("loss_db_per_100m", "without it no loss can be computed")
	}
}

// fire lists the jacket markings of NEC article 800/820 cable types and of the
// European classes, strongest first within each family.
var fire = source.OneOf("CATVP", "CATVR", "CATV", "CATVX", "CMP", "CMR", "CMG", "CM", "CMX",
	"B2ca", "Cca", "Dca", "Eca", "Fca")

// Connector goes on a field-cut cable end.
type Connector struct {
	Face      source.Val[Face]
	Impedance source.Val[float64] // ohm
	Fits      source.Val[Words]   // cable parts
	LossDB    source.Val[float64] // of the mated pair; replaces the default
}

func readConnector(p *Part, k *source.Keys) {
	c := &Connector{}
	p.Connector = c
	source.Need(k, &c.Face, "connector", face, "series and gender")
	source.Need(k, &c.Impedance, "impedance_ohm", ohm, "characteristic impedance")
	source.Need(k, &c.Fits, "fits", source.ListOf(source.Name), "cable parts it is made for")
	source.Opt(k, &c.LossDB, "loss_db", source.Between(0, 10, "dB"), "of the mated pair, in place of 0.05·√(f/GHz)")
}

// Jumper is a made-up cable.
type Jumper struct {
	Cable  source.Val[string]
	Length source.Val[unit.MM]
	Ends   source.Val[[2]Face]
	Loss   source.Val[Points] // dB, both connectors included; wins over cable and length
}

func readJumper(p *Part, k *source.Keys) {
	j := &Jumper{}
	p.Jumper = j
	source.Opt(k, &j.Cable, "cable", source.Name, "part of its cable")
	source.Need(k, &j.Length, "length", source.Length, "over all")
	source.Need(k, &j.Ends, "ends", source.Pair(face, `["N male", "N male"]`), "its two connectors")
	source.Opt(k, &j.Loss, "loss_db", LossTable, "both connectors included; wins over cable and length")
	k.Demand(source.Needs("cable", "loss_db"))
	if !k.Recording() && !k.Has("cable") && !k.Has("loss_db") {
		k.Missing("cable", "or loss_db: without one of them no loss can be computed")
	}
}

// Passive is a two-port or more without supply: adapter, splitter, tap, coupler,
// diplexer, filter, attenuator, dc-block, bias-tee, load.
type Passive struct {
	DC        source.Val[string] // pass, block, short
	MaxW      source.Val[float64]
	PIMdBc    source.Val[float64]
	Isolation source.Val[float64] // between outputs, dB
}

func readPassive(p *Part, k *source.Keys) {
	p.ports(k)
	p.paths(k)
	v := &Passive{}
	p.Passive = v
	source.Opt(k, &v.DC, "dc", source.OneOf("pass", "block", "short"), "what it does to direct current")
	source.Opt(k, &v.MaxW, "max_w", source.AtLeast(0, "W"), "greatest power")
	source.Opt(k, &v.PIMdBc, "pim_dbc", source.Between(-200, 0, "dBc"), "passive intermodulation at 2 × 43 dBm (IEC 62037)")
	source.Opt(k, &v.Isolation, "isolation_db", source.Between(0, 100, "dB"), "between its outputs; no way through")
}

// Arrestor protects a coaxial line where it enters.
type Arrestor struct {
	Principle   source.Val[string]
	SparkV      source.Val[float64]
	DC          source.Val[string]
	MaxW        source.Val[float64]
	Bulkhead    source.Val[bool]
	Directional source.Val[bool]
}

func readArrestor(p *Part, k *source.Keys) {
	p.ports(k)
	p.paths(k)
	a := &Arrestor{}
	p.Arrestor = a
	source.Need(k, &a.Principle, "principle", source.OneOf("gas-tube", "quarter-wave", "high-pass", "shield-block"), "how it works")
	source.Opt(k, &a.SparkV, "spark_v", source.AtLeast(0, "V"), "nominal spark-over voltage of the tube")
	source.Opt(k, &a.DC, "dc", source.OneOf("pass", "block", "short"), "what it does to direct current")
	source.Opt(k, &a.MaxW, "max_w", source.AtLeast(0, "W"), "greatest power")
	source.Opt(k, &a.Bulkhead, "bulkhead", source.Flag, "passes through a grounded panel")
	source.Opt(k, &a.Directional, "directional", source.Flag, "its line side must face the antenna")
}
