package rf_test

import (
	"math"
	"testing"

	"driploop/catalog/unit"
	"driploop/rules/rf"
)

func TestToward(t *testing.T) {
	roof := rf.Position{Up: 10}
	for _, c := range []struct {
		to                         rf.Position
		metres, bearing, elevation float64
	}{
		{rf.Position{North: 5, Up: 10}, 5, 0, 0},
		{rf.Position{East: 5, Up: 10}, 5, 90, 0},
		{rf.Position{East: -3, North: -3, Up: 10}, 3 * math.Sqrt2, 225, 0},
		{rf.Position{Up: 2}, 8, 0, -90},
		{rf.Position{East: 3, Up: 14}, 5, 90, 53.130},
	} {
		d, ok := roof.Toward(c.to)
		if !ok || !near(d.Metres, c.metres, 1e-9) || !near(d.Bearing, c.bearing, 1e-9) || !near(d.Elevation, c.elevation, 0.001) {
			t.Errorf("to %+v: %+v, %v", c.to, d, ok)
		}
	}
	d, ok := roof.Toward(roof)
	wantUnknown(t, "the same place", d, ok)
	d, ok = roof.Toward(rf.Position{East: math.NaN()})
	wantUnknown(t, "nowhere", d, ok)
}

func TestPattern(t *testing.T) {
	yagi := rf.Pattern{Horizontal: 60, Vertical: 50, FrontToBack: 18}
	for _, c := range []struct {
		name   string
		p      rf.Pattern
		az, el float64
		want   float64
	}{
		{"boresight", yagi, 0, 0, 0},
		{"half the beam: 3 dB by definition", yagi, 30, 0, 3},
		{"half of either beam", yagi, 30, 25, 6},
		{"behind", yagi, 180, 0, 18},
		{"behind and below: still F/B", yagi, 180, 90, 18},
		{"round the circle", yagi, 330, 0, 3},
		{"F/B credited to 20 dB", rf.Pattern{Horizontal: 60, FrontToBack: 30}, 180, 0, 20},
		{"13 degrees of declination on a 30 degree beam", rf.Pattern{Horizontal: 30, FrontToBack: 20}, 13, 0, 2.253},
		{"no beams stated", rf.Pattern{FrontToBack: 25}, 180, 90, 0},
		{"no F/B stated", rf.Pattern{Horizontal: 60}, 180, 0, 0},
		{"round about", rf.Pattern{Horizontal: 360, Vertical: 80, FrontToBack: 20}, 120, 40, 3},
	} {
		v, ok := c.p.Discrimination(c.az, c.el)
		wantDB(t, c.name, v, ok, c.want, 0.001)
	}
	v, ok := yagi.Discrimination(math.NaN(), 0)
	wantUnknown(t, "no angle", v, ok)
	v, ok = yagi.Discrimination(0, math.NaN())
	wantUnknown(t, "no elevation", v, ok)
	v, ok = rf.Pattern{FrontToBack: -1}.Discrimination(0, 0)
	wantUnknown(t, "a back that gains", v, ok)
	v, ok = yagi.OffBoresight(214, rf.Direction{Metres: 100, Bearing: 244})
	wantDB(t, "off the aim", v, ok, 3, 1e-9)
}

func TestIsolation(t *testing.T) {
	path, ok := rf.AirGap(836.5, 11)
	wantDB(t, "path", path, ok, 51.725, 0.001)
	c := rf.Coupling{Path: path, Shell: 14, Donor: -7, Server: 3, Feed: 2.6, Leg: 7}
	v, ok := c.Isolation()
	wantDB(t, "port to port", v, ok, 51.725+14+7-3+2.6+7, 0.001)

	v, ok = rf.AirGap(836.5, 0.3)
	wantUnknown(t, "closer than a wavelength", v, ok)
	v, ok = rf.Coupling{Path: 30, Donor: 20, Server: 10}.Isolation()
	wantDB(t, "antennas that look into one another", v, ok, 0, 0)
	v, ok = rf.Coupling{Path: 30, Donor: 20, Server: 10.5}.Isolation()
	wantUnknown(t, "a gap that gains", v, ok)
	c.Path = unit.DB(math.NaN())
	v, ok = c.Isolation()
	wantUnknown(t, "no path", v, ok)
	v, ok = rf.TotalIsolation()
	wantUnknown(t, "no server", v, ok)
	v, ok = rf.TotalIsolation(60, unit.DB(math.NaN()))
	wantUnknown(t, "a server without a figure", v, ok)
	v, ok = rf.TotalIsolation(60, 90)
	wantDB(t, "the weaker hardly counts", v, ok, 59.996, 0.001)
}

func TestLeastCoupling(t *testing.T) {
	v, ok := rf.LeastCoupling(44.9, 38.2, 51)
	wantDB(t, "least", v, ok, 38.2, 0)
	v, ok = rf.LeastCoupling(38.2, 44.9)
	wantDB(t, "the first is the least", v, ok, 38.2, 0)
	v, ok = rf.LeastCoupling()
	wantUnknown(t, "no antenna", v, ok)
	v, ok = rf.LeastCoupling(44, unit.DB(math.NaN()))
	wantUnknown(t, "one without a figure", v, ok)
}

func TestStrongest(t *testing.T) {
	v, ok := rf.Strongest(unit.DBmOf(12), unit.DBmOf(14.5), unit.DBmOf(9))
	wantDB(t, "strongest", unit.DB(v.Value()), ok, 14.5, 0)
	v, ok = rf.Strongest(unit.DBmOf(14.5), unit.DBmOf(12))
	wantDB(t, "the first is the strongest", unit.DB(v.Value()), ok, 14.5, 0)
	v, ok = rf.Strongest()
	wantUnknown(t, "no server", v, ok)
	v, ok = rf.Strongest(unit.DBmOf(12), unit.DBmOf(math.NaN()))
	wantUnknown(t, "one without a figure", v, ok)
}

// TestNoiseAtBase walks the figures of a near site by hand: noise at the port of
// −42.98 dBm/MHz, 8.5 dB of antenna behind a feed, 75 dB of path.
func TestNoiseAtBase(t *testing.T) {
	port, ok := rf.PortNoise(rf.Stage{Gain: 65, NF: 6})
	wantDB(t, "port", unit.DB(port.Value()), ok, -113.975+71, 0.001)
	base, ok := rf.NoiseAtBase(port, 11, 2.5, 75)
	wantDB(t, "base", unit.DB(base.Value()), ok, -109.475, 0.001)
	floor, ok := rf.BaseFloor(3)
	wantDB(t, "the base station's own", unit.DB(floor.Value()), ok, -110.975, 0.001)
	rise, ok := rf.Desense(base, floor)
	wantDB(t, "rise", rise, ok, 10*math.Log10(1+math.Pow(10, 0.15)), 0.001)
	path, ok := rf.PathLossTo(unit.DBmOf(18), unit.DBmOf(-57))
	wantDB(t, "path", path, ok, 75, 1e-9)
	path, ok = rf.PathLossTo(unit.DBmOf(18), unit.DBmOf(20))
	wantUnknown(t, "a path that gains", path, ok)
}

func TestReach(t *testing.T) {
	path, ok := rf.PathThrough(836.5, 11, 0.4, 6)
	wantDB(t, "path and walls", path, ok, 51.725+6.4, 0.001)
	path, ok = rf.PathThrough(836.5, 11, unit.DB(math.NaN()))
	wantUnknown(t, "a wall without a figure", path, ok)

	down := rf.Downlink{RSRP: unit.DBmOf(-92), Gain: 60, Leg: 8, Server: 3, Path: 58, Body: 3}
	level, ok := down.AtPhone()
	wantDB(t, "at the phone", unit.DB(level.Value()), ok, -98, 1e-9)

	up := rf.Uplink{Phone: unit.DBmOf(23), Hand: -3, Body: 3, Path: 58, Server: 3, Leg: 8, Gain: 60,
		MaxOut: unit.DBmOf(24), Feed: 2.5, Donor: 11, ToBase: 110}
	level, limited, ok := up.AtBase()
	wantDB(t, "at the base station", unit.DB(level.Value()), ok, 14+8.5-110, 1e-9)
	if limited {
		t.Error("14 dBm is no more than 24 dBm")
	}
	up.Path = 40
	level, limited, ok = up.AtBase()
	wantDB(t, "held down by the output", unit.DB(level.Value()), ok, 24+8.5-110, 1e-9)
	if !limited {
		t.Error("32 dBm is more than 24 dBm")
	}
	up.Path = unit.DB(math.NaN())
	level, limited, ok = up.AtBase()
	wantUnknown(t, "no path", level, ok || limited)
}

func TestWallsSayHowGoodTheyAre(t *testing.T) {
	for _, c := range []struct {
		name      string
		mm        float64
		mhz       unit.MHz
		known     bool
		tolerance unit.DB
	}{
		{"concrete", 200, 1000, true, 0},
		{"concrete", 200, 999, true, rf.WallTolerance},
		{"concrete", 200, 399, false, 0},
		{"concrete", 0, 1900, false, 0}, // a slab without a thickness, and no such outer wall
		{"wood", 0, 707.5, true, rf.WallTolerance},
		{"wood", 40, 707.5, true, 0},
		{"stone", 300, 1900, true, rf.WallTolerance},
		{"metal", 1, 1900, false, 0},
		{"gingerbread", 100, 1900, false, 0},
	} {
		w, ok := rf.Wall(c.name, c.mm, c.mhz)
		if ok != c.known || w.Tolerance != c.tolerance || ok != (w.Basis != "") || w.Loss < 0 {
			t.Errorf("%s %g mm at %v: %+v, %v", c.name, c.mm, c.mhz, w, ok)
		}
	}
}

// TestIndoorRows pins that the older form of P.1238 takes the nearest row: 33 for an
// office at 700 MHz, 32 at 1300, 30 from the middle of the gap to 1800 on.
func TestIndoorRows(t *testing.T) {
	for f, n := range map[unit.MHz]float64{300: 33, 700: 33, 1050: 33, 1051: 32, 1300: 32, 1551: 30, 1900: 30, 2600: 30, 3500: 28, 6000: 31} {
		near, ok1 := rf.IndoorLoss(rf.Office, f, 10, 0)
		far, ok2 := rf.IndoorLoss(rf.Office, f, 100, 0)
		wantDB(t, f.String(), far-near, ok1 && ok2, n, 1e-9)
	}
	low, ok := rf.IndoorLoss(rf.Residential, 707.5, 10, 2)
	wantDB(t, "a house below its lowest row", low, ok, 20*math.Log10(707.5)+28-28+8, 1e-9)
	v, ok := rf.IndoorLoss(rf.Office, 2400, 10, 2)
	wantUnknown(t, "two floors at 2.4 GHz", v, ok)
	v, ok = rf.IndoorLoss(rf.Building(7), 1900, 10, 0)
	wantUnknown(t, "no such building", v, ok)
}

func TestNearFieldIsNotAssessed(t *testing.T) {
	from, ok := rf.FarFieldFrom(698, 0.05)
	if !ok || !near(from, 0.4295/(2*math.Pi), 0.0001) {
		t.Errorf("a small antenna radiates from %g m", from)
	}
	eirp := unit.DBmOf(30)
	if _, ok := rf.PowerDensity(eirp, rf.FreeField, from, from); !ok {
		t.Error("nothing where the far field begins")
	}
	v, ok := rf.PowerDensity(eirp, rf.FreeField, from*0.99, from)
	wantUnknown(t, "just inside", v, ok)
	v, ok = rf.LeastDistance(eirp, rf.FreeField, 10, 0.5)
	wantUnknown(t, "a distance inside the near field", v, ok)
	v, ok = rf.PowerDensity(unit.DBmOf(math.NaN()), rf.FreeField, 1, 0)
	wantUnknown(t, "no power", v, ok)
}

func TestTolerances(t *testing.T) {
	got, ok := rf.Together(rf.Either(3), rf.Either(4), rf.Tolerance{Above: 0, Below: 12})
	if !ok || !near(float64(got.Above), 5, 1e-9) || !near(float64(got.Below), 13, 1e-9) {
		t.Errorf("%+v, %v", got, ok)
	}
	for _, bad := range []rf.Tolerance{{Above: -1}, {Below: -1}} {
		got, ok = rf.Together(bad)
		wantUnknown(t, "a negative tolerance", got, ok)
	}
	got, ok = rf.Together()
	if !ok || got != (rf.Tolerance{}) {
		t.Errorf("nothing to add: %+v, %v", got, ok)
	}
}

func TestCapacityOfOddMatrices(t *testing.T) {
	for _, h := range []rf.Channel{nil, {{}}, {{1, 0}, {1}}} {
		v, ok := h.Capacity(20)
		wantUnknown(t, "no matrix", v, ok)
	}
	// one receiving antenna, two transmitting: log2(1 + SNR/2·2)
	v, ok := rf.Channel{{1, 1i}}.Capacity(20)
	if !ok || !near(v, math.Log2(101), 1e-9) {
		t.Errorf("%g", v)
	}
	// a dead branch leaves half the power: log2(1 + SNR/2)
	v, ok = rf.Channel{{1, 0}, {0, 0}}.Capacity(20)
	if !ok || !near(v, math.Log2(51), 1e-9) {
		t.Errorf("%g", v)
	}
	h := rf.Channel{{1, 0}, {0, 1}}
	first, _ := h.Capacity(20)
	if second, _ := h.Capacity(20); first != second {
		t.Error("asking changes the channel")
	}
}
