package catalog

import "driploop/catalog/source"

// Kind is one kind of part: its word in the files, what it is, and the function
// that reads what belongs to it.
type Kind struct {
	Name, Why string
	read      func(*Part, *source.Keys)
}

// Kinds lists all kinds in the order in which they are documented. A new kind is
// a row here and a bind function beside the others.
var Kinds []Kind

// The list is filled on start because the functions in it lead back to it by way
// of the part's own bind function.
func init() {
	Kinds = []Kind{
		{"antenna", "radiates; donor or server antenna", readAntenna},
		{"cable", "coaxial line by the metre", readCable},
		{"connector", "goes on a field-cut cable end", readConnector},
		{"jumper", "made-up cable with both connectors", readJumper},
		{"adapter", "joins two connectors", readPassive},
		{"splitter", "divides evenly", readPassive},
		{"tap", "takes a share off a line", readPassive},
		{"coupler", "directional coupler", readPassive},
		{"diplexer", "joins or parts bands", readPassive},
		{"filter", "passes some spectrum", readPassive},
		{"attenuator", "takes level away", readPassive},
		{"dc-block", "stops direct current", readPassive},
		{"bias-tee", "puts direct current on a line", readPassive},
		{"load", "ends a line", readPassive},
		{"arrestor", "surge arrestor or shield block for a coaxial line", readArrestor},
		{"amplifier", "bidirectional signal booster", readAmplifier},
		{"router", "cellular router or modem", readRouter},
		{"supply", "power supply", readSupply},
		{"injector", "puts power on a data cable", readSupply},
		{"switch", "data switch, with or without power on its ports", readSupply},
		{"battery", "battery", readSupply},
		{"data-cable", "Ethernet cable by the metre", readData},
		{"data-arrestor", "surge protector for a data line", readData},
		{"wire", "direct current conductor by the metre", readWire},
		{"fuse", "protects a wire", readWire},
		{"bond-conductor", "grounding and bonding conductor by the metre", readBond},
		{"bond-point", "bar, block or clamp that bonds meet at", readBond},
		{"electrode", "ground electrode", readBond},
		{"mount", "mast, bracket or frame", readMount},
		{"consumable", "used up per joint, metre or entry", readConsumable},
	}
}

// KindNames lists the words for the kinds.
func KindNames() []string {
	var out []string
	for _, k := range Kinds {
		out = append(out, k.Name)
	}
	return out
}

// DescribePart documents the keys of one kind of part, the common ones first.
func DescribePart(kind string) *source.Record {
	return source.Describe(func(k *source.Keys) {
		p := &Part{Kind: source.Val[string]{V: kind, Set: true}}
		p.keys(k)
	})
}
