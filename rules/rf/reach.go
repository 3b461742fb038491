package rf

import "driploop/catalog/unit"

// PathThrough is free space and the walls in its way.
func PathThrough(f unit.MHz, metres float64, walls ...unit.DB) (unit.DB, bool) {
	path, ok := FreeSpaceLoss(f, metres)
	if !ok {
		return 0, false
	}
	for _, w := range walls {
		if !(w >= 0) {
			return 0, false
		}
		path += w
	}
	return known(float64(path))
}

// Downlink is the way of a signal from an amplifier's donor port to a phone. All
// losses are the greatest.
type Downlink struct {
	RSRP   unit.DBm // at the donor port
	Gain   unit.DB  // that runs
	Leg    unit.DB
	Server unit.DB // antenna gain
	Path   unit.DB // server antenna to phone, walls included
	Body   unit.DB // the hand and head that hold the phone
}

// AtPhone is the RSRP of a phone of 0 dBi.
func (d Downlink) AtPhone() (unit.DBm, bool) {
	return knownLevel(d.RSRP.Plus(d.Gain - d.Leg + d.Server - d.Path - d.Body))
}

// Uplink is the way of a phone's signal through an amplifier to a base station.
type Uplink struct {
	Phone  unit.DBm // output, 23 dBm of power class 3, TS 36.101 table 6.2.2-1 (memory)
	Hand   unit.DB  // the phone's antenna gain, mostly negative
	Body   unit.DB
	Path   unit.DB // phone to server antenna, walls included
	Server unit.DB
	Leg    unit.DB
	Gain   unit.DB  // that runs
	MaxOut unit.DBm // rated output
	Feed   unit.DB
	Donor  unit.DB
	ToBase unit.DB // PathLossTo
}

// AtBase is the level at an isotropic antenna of the base station, and whether the
// amplifier's rated output holds it down.
func (u Uplink) AtBase() (level unit.DBm, limited, ok bool) {
	out, ok := knownLevel(u.Phone.Plus(u.Hand - u.Body - u.Path + u.Server - u.Leg + u.Gain))
	if !ok {
		return unit.DBm{}, false, false
	}
	if limited = Exceeds(out.Value(), u.MaxOut.Value()); limited {
		out = u.MaxOut
	}
	level, ok = knownLevel(out.Plus(u.Donor - u.Feed - u.ToBase))
	return level, limited && ok, ok
}
