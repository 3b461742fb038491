package show

import (
	"strings"

	"driploop/catalog"
)

// PartTOML is a block to paste into a plan: what must be there, and what may be
// filled in as comments. connectors are those that fit a cable.
func PartTOML(p *catalog.Part, connectors []*catalog.Part) []byte {
	b := &paste{}
	b.comment(p.Title() + ", " + p.Kind.V)
	for i := range p.Ports {
		b.comment("port " + strings.TrimSpace(p.Ports[i].Name+" "+portWhat(&p.Ports[i])))
	}
	switch p.Kind.V {
	case "cable":
		b.table("cable.C1", p.ID)
		b.cable(connectors)
	case "jumper":
		b.comment("ends " + p.Jumper.Ends.V[0].String() + " and " + p.Jumper.Ends.V[1].String())
		b.table("cable.C1", p.ID)
		b.hints(`from = "donor.rf"`, `to = "arrestor.line"`)
	case "data-cable":
		b.table("data.E1", p.ID)
		b.hints(`length = "22 m"`, `from = "radio.poe"`, `to = "spd.line"`, `way = ["roof", "entry"]`)
	case "wire":
		b.table("wire.P1", p.ID)
		b.hints(`length = "4 m"`, `from = "battery"`, `to = "amp.power"`, `fuse = "FUSE-5A"`, `fuse_from_source = "0.15 m"`)
	case "bond-conductor":
		b.table("bond.G1", p.ID)
		b.line(`from = "arrestor"`)
		b.line(`to = "bar"`)
		b.hints(`length = "2.1 m"`, `bends = 2`, `raceway = "none"`)
	case "connector":
		b.comment("on a cable it stands in ends = [from end, to end]; to take more of them:")
		b.extra(p.ID)
	case "consumable", "fuse":
		b.extra(p.ID)
	default:
		b.table("device."+strings.ToLower(p.ID), p.ID)
		b.device(p)
	}
	return []byte(b.out.String())
}

// paste collects lines of TOML. IDs hold nothing that needs an escape; what else a
// file says goes into comments, of which Clean makes one line each.
type paste struct{ out strings.Builder }

func (b *paste) line(s string) { b.out.WriteString(s + "\n") }

func (b *paste) comment(text string) { b.line("# " + string(Clean(text))) }

func (b *paste) table(header, part string) {
	b.line("[" + header + "]")
	b.line(`part = "` + part + `"`)
}

func (b *paste) extra(part string) {
	b.line("[[extra]]")
	b.line(`part = "` + part + `"`)
	b.line("qty = 1")
}

// hints are keys to fill in: without their mark they are TOML.
func (b *paste) hints(keys ...string) {
	for _, k := range keys {
		b.line("#" + k)
	}
}

func (b *paste) cable(connectors []*catalog.Part) {
	b.hints(`length = "18.5 m"`, `from = "donor.rf"`, `to = "arrestor.line"`, `ends = ["N male", "N male"]`, `way = ["roof", "entry"]`)
	for _, c := range connectors {
		b.comment("an end: " + c.ID + ", " + c.Connector.Face.V.String())
	}
}

func (b *paste) device(p *catalog.Part) {
	switch {
	case p.Antenna != nil:
		b.hints(`on = "mast"`, `up = "1.3 m"`, `aim_deg = 214`, `people = "2.5 m"`)
	case p.Mount != nil:
		b.hints(`place = "roof"`, `free = "1.5 m"`)
	case p.Amplifier != nil:
		b.hints(`place = "shop"`)
		if len(p.Amplifier.Bands) > 0 {
			b.hints(`set = { ` + p.Amplifier.Bands[0].Band.V + ` = { back_off_db = 10 } }`)
		}
	default:
		b.hints(`place = "entry"`)
	}
}
