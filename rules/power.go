package rules

import (
	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
)

// The power rules follow direct current from what gives it to what takes it: over
// wires, over data lines, over coax.
var powerRules = []*Rule{powerFuse, powerVolts, powerDCPath, powerBudget, powerDrop, powerPoE}

// Cautions of the power rules.
const (
	cautionFire    = "A battery gives hundreds of amperes into a short and sets a wire on fire within seconds. Fuse the lead at the battery, and connect the battery last."
	cautionIsolate = "Isolate the supply before it is touched. Mains work belongs to a licensed electrician wherever the law says so."
)

// resolved is the device that a reference names, or nil; also where its part did
// not resolve, which has a finding of its own.
func (c *Case) resolved(r source.Val[bom.Ref]) *bom.Device {
	d := c.Graph.Device(r.V.Name)
	if !r.Set || d == nil || d.Part == nil && d.Row.Part.Set {
		return nil
	}
	return d
}

// rankOfSource puts a battery before a supply, and a supply before what takes.
func rankOfSource(d *bom.Device) int {
	if d == nil {
		return 0
	}
	switch d.Kind() {
	case "battery":
		return 2
	case "supply":
		return 1
	}
	return 0
}

// voltsOf is the nominal voltage that a device gives. A battery of a vehicle whose
// part is not known has the vehicle's.
func (c *Case) voltsOf(d *bom.Device) Known[float64] {
	switch {
	case d.Part != nil && d.Part.Supply != nil && d.Part.Supply.Volts.Set:
		return known(d.Part.Supply.Volts.V)
	case d.Kind() == "battery" && c.Vehicle() && c.Plan.Site.Volts.Set:
		return known(c.Plan.Site.Volts.V)
	}
	return unknown[float64](partOrDevice(d), "volts of "+partName(d))
}

// partName is a device's part, or the device where nobody knows its part.
func partName(d *bom.Device) string {
	if d.Part == nil {
		return d.ID
	}
	return d.Part.ID
}

func partOrDevice(d *bom.Device) source.Place {
	if d.Part == nil {
		return d.At
	}
	return d.Part.At
}

// named is a device with its part: "psu (PS-12-5)".
func named(d *bom.Device) string {
	if d.Part == nil {
		return d.ID
	}
	return d.ID + " (" + d.Part.ID + ")"
}

// loadOf is the supply that a device asks for, or nil.
func loadOf(d *bom.Device) *catalog.Load {
	switch {
	case d == nil || d.Part == nil:
		return nil
	case d.Part.Amplifier != nil:
		return d.Part.Amplifier.Load
	case d.Part.Router != nil:
		return d.Part.Router.Load
	}
	return nil
}

func watts(w float64) string { return plainFigure(Round(w)) + " W" }

func volts(v float64) string { return unit.Fixed(v, 2) + " V" }

// voltRange prints a range of voltage: "11.4 to 12.6 V".
func voltRange(r [2]float64) string {
	if r[0] == 0 {
		return "up to " + plainFigure(r[1]) + " V"
	}
	return plainFigure(r[0]) + " to " + plainFigure(r[1]) + " V"
}
