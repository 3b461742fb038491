package elec

// Reach is the length of an Ethernet channel in metres, patch cords included:
// ISO/IEC 11801-1, 2017, and TIA-568.2; from memory.
const Reach = 100.0

// PoE is a kind of power over Ethernet: what the source gives at least, and the
// channel that the standard counts with. IEEE 802.3, clauses 33 and 145, 2018 (af,
// at, bt type 3 and type 4); powers and voltages read in public summaries, the loop
// from memory.
type PoE struct {
	Watt     float64 // at the source
	Volts    float64 // least, at the source
	PairSets int     // two pairs each: one out, one back
	LoopOhm  float64 // greatest of a pair set, out and back
	Class    int     // highest
}

var kinds = map[string]PoE{
	"af":  {15.4, 44, 1, 20, 3},
	"at":  {30, 50, 1, 12.5, 4},
	"bt3": {60, 50, 2, 12.5, 6},
	"bt4": {90, 52, 2, 12.5, 8},
}

// Kind finds a negotiated kind of power by its word in the catalog. Passive kinds
// are no kinds of the standard and not found.
func Kind(name string) (PoE, bool) {
	k, ok := kinds[name]
	return k, ok
}

// classes are the powers at the source and at the device in W, by class 0 to 8.
// IEEE 802.3-2018, clauses 33 and 145; read in public summaries.
var classes = [...]struct{ source, device float64 }{
	{15.4, 12.95}, {4, 3.84}, {7, 6.49}, {15.4, 12.95}, {30, 25.5}, {45, 40}, {60, 51}, {75, 62}, {90, 71.3},
}

// ClassWatt are the powers of a class at the source and at the device, W.
func ClassWatt(class int) (source, device float64, ok bool) {
	if class < 0 || class >= len(classes) {
		return 0, 0, false
	}
	return classes[class].source, classes[class].device, true
}

// DeviceWatt is what a device may draw on a kind of power, W.
func (k PoE) DeviceWatt() float64 { return classes[k.Class].device }

// DeviceVolts is the least voltage at a device: at the greatest power, the least
// voltage of the source and the longest channel. Calculated: Volts − I·LoopOhm with
// I of one pair set.
func (k PoE) DeviceVolts() float64 { return k.Volts - k.amps()*k.LoopOhm }

// amps is the greatest current of one pair set at the least voltage.
func (k PoE) amps() float64 { return k.Watt / k.Volts / float64(k.PairSets) }

// Left is what gets through a channel at the greatest power: Watt − n·I²·R, with R
// the loop of one pair set. Calculated from Ohm's law.
func (k PoE) Left(loopOhm float64) (watt float64, ok bool) {
	if !(loopOhm >= 0) {
		return 0, false
	}
	left := k.Watt - float64(k.PairSets)*k.amps()*k.amps()*loopOhm
	if !(left > 0) {
		return 0, false
	}
	return left, true
}

// Pairs is the resistance of a data cable out and back over a number of pair sets,
// Ω, from that of one conductor in Ω/km. Two conductors run side by side out and
// two back, so a pair set has the resistance of one conductor; pair sets share.
func Pairs(metres, ohmPerKm float64, pairSets int) (float64, bool) {
	loop, ok := Loop(metres, ohmPerKm)
	if !ok || pairSets < 1 {
		return 0, false
	}
	return loop / 2 / float64(pairSets), true
}
