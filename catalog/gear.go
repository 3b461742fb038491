package catalog

import (
	"errors"

	"driploop/catalog/source"
	"driploop/catalog/unit"
)

// Supply gives power: supply, injector, switch, battery.
type Supply struct {
	Volts source.Val[float64]
	Amps  source.Val[float64]
	PoE   source.Val[string]
}

func readSupply(p *Part, k *source.Keys) {
	p.ports(k)
	s := &Supply{}
	p.Supply = s
	source.Opt(k, &s.Volts, "volts", volts, "nominal voltage")
	source.Opt(k, &s.Amps, "amps", source.AtLeast(0, "A"), "greatest current")
	source.Opt(k, &s.PoE, "poe", poe, "what it puts on a data line")
	p.box(k)
}

// Data belongs to data lines: data-cable, data-arrestor.
type Data struct {
	Category  source.Val[string]
	Screened  source.Val[bool]
	Conductor source.Val[string] // copper, cca
	Size      source.Val[unit.Gauge]
	Fire      source.Val[string]
	PoE       source.Val[string] // of an arrestor: what it passes
}

func readData(p *Part, k *source.Keys) {
	p.ports(k)
	d := &Data{}
	p.Data = d
	source.Opt(k, &d.Category, "category", source.OneOf("5", "5e", "6", "6A", "7", "7A", "8"), "category after ISO/IEC 11801")
	source.Opt(k, &d.Screened, "screened", source.Flag, "has a screen")
	source.Opt(k, &d.Conductor, "conductor", source.OneOf("copper", "cca"), "solid copper or copper-clad aluminium")
	source.Opt(k, &d.Size, "size", source.Size, "conductor size")
	source.Opt(k, &d.Fire, "fire", fire, "marking on the jacket")
	source.Opt(k, &d.PoE, "poe", poe, "power over Ethernet that it passes")
}

// Wire belongs to direct current lines: wire, fuse.
type Wire struct {
	Size  source.Val[unit.Gauge]
	Cores source.Val[int]
	Amps  source.Val[float64] // a fuse's rating; a wire's, where the maker states one
}

func readWire(p *Part, k *source.Keys) {
	w := &Wire{}
	p.Wire = w
	source.Opt(k, &w.Size, "size", source.Size, "conductor size")
	source.Opt(k, &w.Cores, "cores", source.Count(1, 100), "number of cores")
	source.Opt(k, &w.Amps, "amps", source.AtLeast(0, "A"), "rating of a fuse; current a wire may carry")
}

// Bond belongs to grounding: bond-conductor, bond-point, electrode.
type Bond struct {
	Material  source.Val[string]
	Size      source.Val[unit.Gauge]
	Insulated source.Val[bool]
}

func readBond(p *Part, k *source.Keys) {
	b := &Bond{}
	p.Bond = b
	source.Opt(k, &b.Material, "material", source.OneOf("copper", "aluminium", "copper-clad-steel", "bronze", "steel"), "metal")
	source.Opt(k, &b.Size, "size", source.Size, "conductor size")
	source.Opt(k, &b.Insulated, "insulated", source.Flag, "has insulation")
}

// Mount holds antennas: mast, bracket, frame.
type Mount struct {
	MastMM   source.Val[[2]float64] // outer diameter of its tube; a bracket's least and greatest
	WallMM   source.Val[float64]
	YieldMPa source.Val[float64]
	Length   source.Val[unit.MM]
	Ballast  *Ballast
}

// Ballast holds a mount down by weight.
type Ballast struct {
	MassKg   source.Val[float64]
	Base     source.Val[unit.MM] // shorter side of its footprint
	Friction source.Val[float64]
}

func readMount(p *Part, k *source.Keys) {
	m := &Mount{}
	p.Mount = m
	one := source.Map(source.AtLeast(0, "mm"), func(v float64) ([2]float64, error) { return [2]float64{v, v}, nil })
	tube := source.Either(source.IsArray, source.Pair(source.AtLeast(0, "mm"), "[30, 50]"), one, "mm, one number or a pair")
	source.Opt(k, &m.MastMM, "mast_mm", tube, "outer diameter of its tube, or what a bracket takes")
	source.Opt(k, &m.WallMM, "wall_mm", source.AtLeast(0, "mm"), "wall of its tube")
	source.Opt(k, &m.YieldMPa, "yield_mpa", source.AtLeast(0, "MPa"), "yield strength of its metal")
	source.Opt(k, &m.Length, "length", source.Length, "length of its tube")
	if b := new(Ballast); source.One(k, b, "ballast", (*Ballast).keys, "stands by weight alone") {
		m.Ballast = b
	}
}

func (b *Ballast) keys(k *source.Keys) {
	source.Need(k, &b.MassKg, "mass_kg", source.AtLeast(0, "kg"), "ballast and frame together")
	source.Need(k, &b.Base, "base", source.Length, "shorter side of its footprint")
	source.Opt(k, &b.Friction, "friction", source.Between(0, 2, ""), "coefficient against the roof")
}

// Consumable is used up as work goes on.
type Consumable struct {
	Per   source.Val[string] // joint, metre, entry
	Holds source.Val[Holds]
}

// Holds is what one package serves: a number of uses, or a length.
type Holds struct {
	Uses   float64
	Length unit.MM
}

func readConsumable(p *Part, k *source.Keys) {
	c := &Consumable{}
	p.Consumable = c
	uses := source.Map(source.AtLeast(1, "uses"), func(v float64) (Holds, error) { return Holds{Uses: v}, nil })
	length := source.Map(source.Shaped(source.Length, source.Form{Pattern: unit.SomeLengthPattern}), func(l unit.MM) (Holds, error) {
		if l <= 0 {
			return Holds{}, errors.New("a package of no length serves nothing")
		}
		return Holds{Length: l}, nil
	})
	source.Need(k, &c.Per, "per", source.OneOf("joint", "metre", "entry"), "what uses it up")
	source.Opt(k, &c.Holds, "holds", source.Either(source.IsString, length, uses, "a number or a length"), "what one package serves; absent: one")
}
