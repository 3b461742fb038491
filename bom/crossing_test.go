package bom_test

import (
	"fmt"
	"strings"
	"testing"

	"driploop/bom"
)

// crossings writes where a line crosses: what it stands on, the last place outdoors
// and the first indoors, the steps up to and from which, and which comes first.
func crossings(l *bom.Line) string {
	var out []string
	for _, c := range l.Crossings() {
		first := "out"
		if c.In1st {
			first = "in"
		}
		out = append(out, fmt.Sprintf("%s %s|%s %d-%d %s first", c.On, c.Out.ID, c.In.ID, c.Outer, c.Inner, first))
	}
	return strings.Join(out, "; ")
}

func TestCrossings(t *testing.T) {
	yard := places + `
place.attic = { kind = "attic" }
place.skin = { kind = "vehicle-skin" }
place.cabin = { kind = "vehicle-cabin" }
[device]
`
	dev := func(id, part, place string) string {
		return fmt.Sprintf("%s = { part = %q, place = %q }\n", id, part, place)
	}
	amp, donor := dev("amp", "AMP", "room"), dev("yagi", "YAGI", "roof")
	one := func(way string) string { return cx("C", "yagi", "amp.donor", nn+way) }
	for _, c := range []struct{ name, text, want string }{
		{"no way, straight from place to place", one("") + yard + amp + donor,
			"cable.C roof|room 0-3 out first"},
		{"over the entry, which is neither side", one(`, way = ["roof", "wall", "room"]`) + yard + amp + donor,
			"cable.C roof|room 1-1 out first"},
		{"along a second place outdoors", one(`, way = ["roof", "skin 2 m", "wall"]`) + yard + amp + donor,
			"cable.C skin|room 1-3 out first"},
		{"all outdoors", one(`, way = ["roof", "wall", "roof"]`) + yard + dev("amp", "AMP", "roof") + donor, ""},
		{"all indoors", one(`, way = ["attic", "wall"]`) + yard + amp + dev("yagi", "YAGI", "attic"), ""},
		{"nobody says where", one("") + yard + "amp = { part = \"AMP\" }\n" + donor, ""},
		{"in, out and in again", one(`, way = ["attic", "roof", "wall", "room"]`) + yard + amp + dev("yagi", "YAGI", "attic"),
			"cable.C roof|attic 1-1 in first; cable.C roof|room 1-1 out first"},
		{"written from the amplifier", cx("C", "amp.donor", "yagi", nn+`, way = ["room", "wall", "roof"]`) + yard + amp + donor,
			"cable.C roof|room 1-1 out first"},
		{"at the arrestor by the entry", cx("C1", "yagi", "arrest.line", nn+`, way = ["roof", "wall"]`) + cx("C2", "arrest.gear", "amp.donor", nn) +
			yard + amp + donor + dev("arrest", "ARREST", "wall"),
			"cable.C1 roof|room 1-7 out first"},
		{"behind the arrestor outdoors", cx("C1", "yagi", "arrest.line", nn) + cx("C2", "arrest.gear", "amp.donor", nn) +
			yard + amp + donor + dev("arrest", "ARREST", "roof"),
			"cable.C2 roof|room 3-7 out first"},
		{"before the arrestor indoors", cx("C1", "yagi", "arrest.line", nn) + cx("C2", "arrest.gear", "amp.donor", nn) +
			yard + amp + donor + dev("arrest", "ARREST", "room"),
			"cable.C1 roof|room 0-3 out first"},
		{"a captive lead, by a joint", "joint = [{ a = \"whip\", b = \"amp.donor\" }]\n" + yard + amp + dev("whip", "WHIP", "roof"),
			"joint.whip-rf roof|room 0-2 out first"},
		{"a captive lead, by a joint with a way", "joint = [{ a = \"amp.donor\", b = \"whip.rf\", way = [\"cabin\", \"skin\"] }]\n" + yard +
			dev("amp", "AMP", "cabin") + dev("whip", "WHIP", "skin"),
			"joint.amp-donor skin|cabin 1-1 out first"},
		{"the skin of a vehicle", "joint = [{ a = \"whip.rf\", b = \"amp.donor\", way = [\"skin\", \"cabin\"] }]\n" + yard +
			dev("amp", "AMP", "cabin") + dev("whip", "WHIP", "skin"),
			"joint.whip-rf skin|cabin 1-1 out first"},
	} {
		g := whole(t, c.text)
		feeds := g.Lines().Of(bom.Feed)
		if len(feeds) != 1 {
			t.Errorf("%s: %d feeds", c.name, len(feeds))
			continue
		}
		if got := crossings(feeds[0]); got != c.want {
			t.Errorf("%s: crosses at %q, want %q", c.name, got, c.want)
		}
	}
}

// A leg to an antenna outdoors crosses as well, from the inside.
func TestLegsCross(t *testing.T) {
	g := whole(t, cx("L", "amp.server", "dome", nn+`, way = ["room", "wall", "roof"]`)+places+`
device.amp = { part = "AMP", place = "room" }
device.dome = { part = "DOME", place = "roof" }
`)
	leg := g.Lines().Of(bom.Leg)[0]
	if got, want := crossings(leg), "cable.L roof|room 1-1 in first"; got != want {
		t.Errorf("crosses at %q, want %q", got, want)
	}
	if c := leg.Crossings()[0]; c.At.Text() != "L" || c.Line != leg {
		t.Errorf("the crossing is %+v", c)
	}
}

func TestPlacesInsideAndOut(t *testing.T) {
	for kind, want := range map[string][2]bool{ // outdoors, indoors
		"outdoor": {true, false}, "vehicle-skin": {true, false}, "entry": {false, false},
		"indoor": {false, true}, "attic": {false, true}, "riser": {false, true}, "plenum": {false, true}, "vehicle-cabin": {false, true},
	} {
		p, problems := readPlan(t, fmt.Sprintf("place.x = { kind = %q }\n", kind))
		if len(problems) > 0 {
			t.Fatal(problems)
		}
		if got := [2]bool{p.Places[0].Outdoors(), p.Places[0].Indoors()}; got != want {
			t.Errorf("%s is outdoors, indoors: %v, want %v", kind, got, want)
		}
	}
	var none *bom.Place
	if none.Outdoors() || none.Indoors() {
		t.Error("no place is on neither side")
	}
}

// However often a line goes in and out, the list of its crossings is made in one piece,
// in either direction of the way.
func TestCrossingsInOnePiece(t *testing.T) {
	way := strings.TrimSuffix(strings.Repeat(`"p","q",`, 50), ",")
	for _, ends := range []string{`from="amp.server",to="y.rf"`, `from="y.rf",to="amp.server"`} {
		g := lay(t, "place.p.kind=\"outdoor\"\nplace.q.kind=\"indoor\"\ndevice.amp.part=\"AMP\"\ndevice.y.part=\"YAGI\"\n"+
			"cable.w={part=\"J-NN\","+ends+",way=["+way+"]}\n")
		for _, l := range g.Lines().All {
			if l.To.Device == nil || l.From.Device == nil {
				continue
			}
			if n := len(l.Crossings()); n != 99 {
				t.Errorf("%s: %d crossings", ends, n)
			}
			if n := testing.AllocsPerRun(20, func() { l.Crossings() }); n > 4 {
				t.Errorf("%s: %v pieces of memory", ends, n)
			}
		}
	}
}
