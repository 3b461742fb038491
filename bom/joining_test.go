package bom_test

import (
	"fmt"
	"strings"
	"testing"

	"driploop/bom"
)

// cx is a cable of the shop with the given ends; an end that goes nowhere is "".
func cx(id, from, to, more string) string {
	text := fmt.Sprintf("cable.%s = { part = \"CX\", length = \"1 m\"", id)
	if from != "" {
		text += fmt.Sprintf(", from = %q", from)
	}
	if to != "" {
		text += fmt.Sprintf(", to = %q", to)
	}
	if more != "" {
		text += ", " + more
	}
	return text + " }\n"
}

const nn = `ends = ["N male", "N male"]`

func TestBareNames(t *testing.T) {
	const devices = `
[device]
yagi = { part = "YAGI" }
split = { part = "SPLIT-2" }
mixed = { part = "MIXED" }
radio = { part = "RADIO" }
bar = { part = "BAR" }
rod = { existing = true, kind = "electrode" }
`
	g := whole(t, "cable.A = { part = \"J-NS\", from = \"yagi\", to = \"mixed\" }\n"+devices)
	hasMates(t, "the only port, and the only one that mates", g, "A.1 = yagi.rf", "A.2 = mixed.s")

	g = whole(t, cx("A", "yagi", "split", nn)+cx("B", "split.out2", "", nn)+cx("C", "split.in", "mixed", nn)+devices)
	hasMates(t, "named ports go first, the bare name means the one that is left", g,
		"A.1 = yagi.rf", "A.2 = split.out1", "B.1 = split.out2", "C.1 = split.in", "C.2 = mixed.n")

	g = lay(t, cx("A", "yagi", "split", nn)+devices)
	hasHoles(t, "several that mate", g, `no port, "split", cable.A: "split" alone does not say which port: split.in, split.out1, split.out2 are free; write one of them`)
	hasMates(t, "several that mate", g, "A.1 = yagi.rf")

	g = lay(t, cx("A", "yagi", "radio", nn)+devices)
	hasHoles(t, "several that do not mate", g, `no port, "radio", cable.A: "radio" alone does not say which port: radio.main, radio.div are free; write one of them`)

	g = whole(t, "cable.A = { part = \"J-NN\", from = \"radio.main\", to = \"radio\" }\n"+devices)
	hasMates(t, "the only one left, though it does not mate", g, "A.1 = radio.main", "A.2 = radio.div")

	g = lay(t, cx("A", "yagi", "bar", nn)+cx("B", "rod", "", nn)+devices)
	hasHoles(t, "no port at all", g, `no port, "bar", cable.A: bar has no free port left for this; name the port, or free one`)
	hasMates(t, "no port at all", g, "A.1 = yagi.rf")

	g = lay(t, cx("A", "yagi.rg", "split.out3", nn)+cx("B", "yaggi", "xyzxyz", nn)+cx("C", "bar.a", "A.3", nn)+devices)
	hasHoles(t, "names that lead nowhere", g,
		`no port, "yagi.rg", cable.A: yagi (part YAGI) has no port "rg"; did you mean yagi.rf?`,
		`no port, "split.out3", cable.A: split (part SPLIT-2) has no port "out3"; did you mean split.out1?`,
		`no port, "bar.a", cable.C: bar (part BAR) has no port "a"; the part has no ports`,
		`no port, "A.3", cable.C: "A.3" names no end of cable A; write A.1 or A.2`,
		`bad reference, "yaggi", cable.B: the plan has no device or cable "yaggi"; did you mean yagi?`,
		`bad reference, "xyzxyz", cable.B: the plan has no device or cable "xyzxyz"; add it, or correct the name`,
	)
	hasMates(t, "names that lead nowhere", g)
}

// The order of the tables does not decide what a bare name means.
func TestBareNamesInAnyOrder(t *testing.T) {
	const devices = `
[device]
yagi = { part = "YAGI" }
dome = { part = "DOME" }
mixed = { part = "MIXED" }
`
	jumper := "cable.A = { part = \"J-NS\", to = \"mixed\" }\n"                   // its SMA end fits one port
	open := "cable.B = { part = \"THIN\", length = \"1 m\", from = \"mixed\" }\n" // nothing says what its end looks like
	for name, text := range map[string]string{"the certain one first": jumper + open, "the open one first": open + jumper} {
		g := lay(t, text+devices)
		hasMates(t, name, g, "A.2 = mixed.s", "B.1 = mixed.n")
	}
	// Two lines to a thing with one port share it, whichever comes first.
	for _, text := range []string{cx("A", "yagi", "", nn) + cx("B", "yagi", "", nn), cx("B", "yagi", "", nn) + cx("A", "yagi", "", nn)} {
		g := lay(t, text+devices)
		hasMates(t, "two on one port", g, "A.1 = yagi.rf", "B.1 = yagi.rf")
		if len(g.Holes) != 1 || g.Holes[0].Kind != bom.SharedPort {
			t.Errorf("two on one port: holes are %v", holes(g))
		}
	}
	// Two ends that only fit one of two ports do not push each other aside.
	for _, text := range []string{cx("A", "mixed", "", nn) + cx("B", "mixed", "", nn), cx("B", "mixed", "", nn) + cx("A", "mixed", "", nn)} {
		g := lay(t, text+devices)
		hasMates(t, "two that want one port", g, "A.1 = mixed.n", "B.1 = mixed.n")
		if len(g.Holes) != 1 || g.Holes[0].Kind != bom.SharedPort {
			t.Errorf("two that want one port: holes are %v", holes(g))
		}
	}
}

func TestSharedPorts(t *testing.T) {
	g := lay(t, cx("A", "yagi.rf", "amp.donor", nn)+cx("B", "yagi.rf", "amp.server", nn)+`
[device]
yagi = { part = "YAGI" }
amp = { part = "AMP" }
`)
	hasHoles(t, "a port twice", g, `shared port, "yagi.rf", device.yagi: yagi.rf already mates with A.1; a port takes one line: use a splitter, or another port`)
	hasMates(t, "a port twice", g, "A.1 = yagi.rf", "A.2 = amp.donor", "B.1 = yagi.rf", "B.2 = amp.server")
	if also := g.Holes[0].Also; len(also) != 1 || also[0].Text() != `"yagi.rf"` || also[0].Line() != 1 {
		t.Errorf("the first line on the port is not shown: %v", also)
	}
}

func TestEndsThatGoToThemselves(t *testing.T) {
	g := lay(t, cx("A", "A.2", "", nn)+cx("B", "B.1", "", nn)+`
device.yagi = { part = "YAGI" }
joint = [{ a = "yagi.rf", b = "yagi" }]
`)
	hasHoles(t, "itself", g,
		`bad reference, "B.1", cable.B: B.1 is joined to itself; name another port`,
		`bad reference, "yagi", joint.yagi-rf: yagi is joined to itself; name another port`,
	)
	hasMates(t, "itself", g, "A.1 = A.2") // a ring of one cable; the lines say so
}

func TestCableToCable(t *testing.T) {
	const jumpers = `cable.A = { part = "J-NN"%s }
cable.B = { part = "THIN", length = "1 m", ends = ["NF", "NM-CRIMP"]%s }
`
	for name, text := range map[string]string{
		"in the first":  fmt.Sprintf(jumpers, `, to = "B.1"`, ""),
		"in the second": fmt.Sprintf(jumpers, "", `, from = "A.2"`),
		"as a joint":    fmt.Sprintf(jumpers, "", "") + "joint = [{ a = \"A.2\", b = \"B.1\" }]\n",
	} {
		g := whole(t, text)
		if len(g.Mates) != 1 || len(g.Cable("A").Ends[1].Mates) != 1 || g.Cable("A").Ends[1].Mates[0].Other(g.Cable("A").Ends[1]) != g.Cable("B").Ends[0] {
			t.Errorf("%s: joined are %v", name, mates(g))
		}
	}
	g := lay(t, fmt.Sprintf(jumpers, `, to = "B.1"`, `, from = "A.2"`))
	hasHoles(t, "in both", g, `shared port, "A.2", cable.B: the plan joins B.1 and A.2 twice; a joint of two cables is written in one of the two`)
	hasMates(t, "in both", g, "A.2 = B.1")
	g = lay(t, fmt.Sprintf(jumpers, `, to = "B"`, ""))
	hasHoles(t, "without the end", g, `no port, "B", cable.A: "B" names no end of cable B; write B.1 or B.2`)
}

func TestThroughAdapters(t *testing.T) {
	devices := `
[device]
radio = { part = "RADIO" }
mixed = { part = "MIXED" }
split = { part = "SPLIT-2" }
`
	through := func(ends, to, through string) string {
		return fmt.Sprintf("cable.A = { part = \"CX\", length = \"1 m\", to = %q, through = [%s]%s }\n", to, through, ends)
	}
	nm := ", " + nn
	for name, c := range map[string]struct{ text, want string }{
		"as listed":                         {through(nm, "radio.main", `"AD-N-S"`), "A.2 [AD-N-S n s] = radio.main"},
		"turned round":                      {through(nm, "radio.main", `"AD-S-N"`), "A.2 [AD-S-N n s] = radio.main"},
		"two, one of them turned":           {through(nm, "radio.main", `"PAD", "AD-S-N"`), "A.2 [PAD f m] [AD-S-N n s] = radio.main"},
		"turned by what the face must be":   {through(`, ends = ["NM", "NM"]`, "radio.main", `"AD-S-N"`), "A.2 [AD-S-N n s] = radio.main"},
		"turned by the port":                {through("", "radio.main", `"AD-S-N"`), "A.2 [AD-S-N n s] = radio.main"},
		"as listed, by the port":            {through("", "radio.main", `"AD-N-S"`), "A.2 [AD-N-S n s] = radio.main"},
		"a bare name, as listed":            {through(nm, "mixed", `"AD-N-S"`), "A.2 [AD-N-S n s] = mixed.s"},
		"a bare name, turned":               {through(nm, "mixed", `"AD-S-N"`), "A.2 [AD-S-N n s] = mixed.s"},
		"a bare name through a pad":         {through(nm, "mixed", `"PAD"`), "A.2 [PAD f m] = mixed.n"},
		"a bare name, turned behind a pad":  {through(nm, "mixed", `"PAD", "AD-S-N"`), "A.2 [PAD f m] [AD-S-N n s] = mixed.s"},
		"a bare name, turned by its port":   {through("", "mixed", `"AD-S-N"`), "A.2 [AD-S-N n s] = mixed.s"},
		"each turned by the one before it":  {through(nm, "split.in", `"AD-N-S", "AD-NM-SF"`), "A.2 [AD-N-S n s] [AD-NM-SF s n] = split.in"},
		"one that is alike on both sides":   {through(nm, "mixed.n", `"BARREL"`), "A.2 [BARREL a b] = mixed.n"},
		"none that mates either way, first": {through(nm, "split.in", `"AD-N-S"`), "A.2 [AD-N-S n s] = split.in"},
	} {
		g := whole(t, c.text+devices)
		hasMates(t, name, g, c.want)
		if e := g.Cable("A").Ends[1]; e.Fit == nil || e.Fit.ID != "NM" {
			t.Errorf("%s: the end is made with %v, want NM, which meets the adapter", name, e.Fit)
		}
	}
}

// The end that goes through an adapter decides how it is turned, and not the other;
// an adapter is turned anew with the jumper that it is on.
func TestThroughByEnd(t *testing.T) {
	g := whole(t, `
cable.A = { part = "THIN", length = "1 m", to = "mixed", ends = ["SM", "NM-CRIMP"], through = ["AD-S-N"] }
cable.J = { part = "J-NS", from = "radio.main", to = "radio.div", through = ["AD-S-N"] }
device.mixed = { part = "MIXED" }
device.radio = { part = "RADIO" }
`)
	hasMates(t, "by its end", g, "A.2 [AD-S-N n s] = mixed.s", "J.1 = radio.main", "J.2 [AD-S-N n s] = radio.div")
}

// A guess may be a cable as well as a device, whichever of many.
func TestGuessesAmongAll(t *testing.T) {
	text := "cable.C = { part = \"CX\", length = \"1 m\", from = \"attic-feed-9.1\", to = \"hall-dome-9\", ends = [\"NM\", \"NM\"] }\n"
	for i := range 5 {
		text += cx(fmt.Sprint("attic-feed-", i), "", "", nn) + fmt.Sprintf("device.hall-dome-%d = { part = \"DOME\" }\n", i)
	}
	hasHoles(t, "guesses", lay(t, text),
		`bad reference, "attic-feed-9.1", cable.C: the plan has no device or cable "attic-feed-9"; did you mean attic-feed-0?`,
		`bad reference, "hall-dome-9", cable.C: the plan has no device or cable "hall-dome-9"; did you mean hall-dome-0?`)
}

// After a hundred guesses no more are made; what is wrong is said all the same.
func TestGuessesEnd(t *testing.T) {
	var b strings.Builder
	b.WriteString("device.dome = { part = \"DOME\" }\n")
	for i := range 110 {
		fmt.Fprintf(&b, "cable.C%d = { part = \"J-NN\", to = \"domme\" }\n", i)
	}
	g, guessed := lay(t, b.String()), 0
	for _, h := range g.Holes {
		if strings.HasPrefix(h.Do, "did you mean dome") {
			guessed++
		}
	}
	if len(g.Holes) != 110 || guessed != 100 {
		t.Errorf("%d holes, %d with a guess; want 110 and 100", len(g.Holes), guessed)
	}
}

func TestThroughWhatIsNoAdapter(t *testing.T) {
	const text = `
device.radio = { part = "RADIO" }
cable.A = { part = "CX", length = "1 m", to = "radio.main", ends = ["NM", "NM"], through = [%s] }
`
	g := lay(t, fmt.Sprintf(text, `"AD-N-X"`))
	hasHoles(t, "unknown", g, `no part, "AD-N-X", cable.A: the catalog has no part "AD-N-X"; did you mean AD-N-S?`)
	g = lay(t, fmt.Sprintf(text, `"SPLIT-2"`))
	hasHoles(t, "a splitter", g, `wrong kind, "SPLIT-2", cable.A: SPLIT-2 is of kind splitter; adapter or attenuator or dc-block is expected here; name a part of that kind`)
	g = lay(t, fmt.Sprintf(text, `"TEE"`))
	hasHoles(t, "of three ports", g, `wrong kind, "TEE", cable.A: TEE has 3 ports; what a cable passes through has two; make it a device with a cable to each port`)
	// Across a gap nothing is joined: what would meet there is not known. What the cable
	// goes to is looked up all the same.
	hasMates(t, "of three ports", g)
	const gap = `no part, "AD-N-X", cable.A: the catalog has no part "AD-N-X"; did you mean AD-N-S?`
	across := strings.ReplaceAll(text, `"radio.main"`, "%q")
	for to, want := range map[string]string{
		"radio":       "", // which port it means nobody can say
		"radio.mainn": `no port, "radio.mainn", cable.A: radio (part RADIO) has no port "mainn"; did you mean radio.main?`,
		"radios":      `bad reference, "radios", cable.A: the plan has no device or cable "radios"; did you mean radio?`,
		"A":           "",
		"A.1":         "",
	} {
		g := lay(t, fmt.Sprintf(across, to, `"AD-N-X"`))
		if want == "" {
			hasHoles(t, to, g, gap)
		} else {
			hasHoles(t, to, g, gap, want)
		}
		hasMates(t, to, g)
	}
}

func TestJoints(t *testing.T) {
	devices := `
[device]
yagi = { part = "YAGI" }
whip = { part = "WHIP" }
arrest = { part = "ARREST-MF" }
amp = { part = "AMP" }
load = { part = "LOAD" }
split = { part = "SPLIT-2" }
pad = { part = "PAD", copies = { pad-2 = {} } }
line = { part = "ARREST", copies = { line-2 = {} } }
load-2 = { part = "LOAD" }
`
	joint := func(a, b string) string { return fmt.Sprintf("joint = [{ a = %q, b = %q }]\n", a, b) }
	for name, c := range map[string]struct{ a, b, want string }{
		"two ports":                         {"arrest.gear", "amp.donor", "arrest.gear = amp.donor"},
		"a lead and a port":                 {"whip", "amp.donor", "whip.rf = amp.donor"},
		"the only port that mates":          {"amp.donor", "arrest", "amp.donor = arrest.gear"},
		"the same, the bare name first":     {"arrest", "amp.donor", "arrest.gear = amp.donor"},
		"a thing with one port, bare first": {"load", "amp.server", "load.rf = amp.server"},
		"both bare, one has one port":       {"yagi", "arrest", "yagi.rf = arrest.gear"},
		"the same the other way round":      {"arrest", "yagi", "arrest.gear = yagi.rf"},
		"one port left does not mate":       {"yagi", "amp.donor", "yagi.rf = amp.donor"},
	} {
		g := whole(t, joint(c.a, c.b)+devices)
		hasMates(t, name, g, c.want)
		if g.Mates[0].Joint != &g.Plan.Joints[0] {
			t.Errorf("%s: the joint is not kept", name)
		}
	}
	g := lay(t, joint("split", "amp")+devices)
	hasHoles(t, "nothing says which", g,
		`no port, "split", joint.split: "split" alone does not say which port: split.in, split.out1, split.out2 are free; write one of them`,
		`no port, "amp", joint.split: "amp" alone does not say which port: amp.donor, amp.server are free; write one of them`)
	g = lay(t, joint("arrest", "amp")+devices)
	hasHoles(t, "one port of one, two of the other", g,
		`no port, "arrest", joint.arrest: "arrest" alone does not say which port: arrest.line, arrest.gear are free; write one of them`,
		`no port, "amp", joint.arrest: "amp" alone does not say which port: amp.donor, amp.server are free; write one of them`)
	hasMates(t, "one port of one, two of the other", g)
	g = lay(t, joint("yagi.rf", "amp.zz")+devices)
	hasHoles(t, "the second leads nowhere", g, `no port, "amp.zz", joint.yagi-rf: amp (part AMP) has no port "zz"; its ports are donor, server, dc`)
	g = lay(t, joint("yag", "amp.donor")+devices)
	hasHoles(t, "the first leads nowhere", g, `bad reference, "yag", joint.yag: the plan has no device or cable "yag"; did you mean yagi?`)
	// A joint with a bare name, whichever of its sides it is, waits for those without.
	g = whole(t, `joint = [{ a = "line", b = "load.rf" }, { a = "line.line", b = "pad.m" }, { a = "load-2.rf", b = "line-2" }, { a = "line-2.line", b = "pad-2.m" }]
`+devices)
	hasMates(t, "bare names wait", g, "line.gear = load.rf", "line.line = pad.m", "load-2.rf = line-2.gear", "line-2.line = pad-2.m")
	p, problems := readPlan(t, "joint = [{ a = \"yagi.rf\", b = 3 }, { a = 3, b = \"yagi.rf\" }]\n"+devices)
	if len(problems) != 2 {
		t.Errorf("problems are %v", problems)
	}
	g = bom.Resolve(p, shopCatalog(t))
	hasHoles(t, "a side that cannot be read", g)
	hasMates(t, "a side that cannot be read", g)
	g = lay(t, joint("yag", "amp.donr")+devices)
	hasHoles(t, "both lead nowhere", g,
		`bad reference, "yag", joint.yag: the plan has no device or cable "yag"; did you mean yagi?`,
		`no port, "amp.donr", joint.yag: amp (part AMP) has no port "donr"; did you mean amp.donor?`)
}

func TestOnOfJoints(t *testing.T) {
	g := whole(t, places+`
[device]
whip = { part = "WHIP", place = "roof" }
amp = { part = "AMP", place = "room" }
[[joint]]
a = "amp.donor"
b = "whip.rf"
way = ["room", "wall 0.2 m", "roof"]
`)
	m := g.Mates[0]
	if m.On() != "joint.amp-donor" || m.At.Text() != `"whip.rf"` || len(m.Way) != 3 || m.Way[1].Place.ID != "wall" || m.Way[1].Length.V != 200 {
		t.Errorf("the joint is on %s at %s with the way %+v", m.On(), m.At.Text(), m.Way)
	}
}

// Findings about a mate stand on its cable, or on the joint by the device's port.
func TestOnOfMates(t *testing.T) {
	g := whole(t, cx("A", "yagi", "", nn)+cx("B", "", "", `ends = ["NF", "NM"]`)+`
joint = [{ a = "A.2", b = "B.1" }, { a = "B.2", b = "amp.donor" }, { a = "load.rf", b = "amp.server" }]
device.yagi = { part = "YAGI" }
device.amp = { part = "AMP" }
device.load = { part = "LOAD" }
`)
	for pair, want := range map[string]string{
		"A.1 = yagi.rf": "cable.A", "A.2 = B.1": "cable.A", "B.2 = amp.donor": "joint.amp-donor", "load.rf = amp.server": "joint.load-rf",
	} {
		found := false
		for _, m := range g.Mates {
			if m.A.Name()+" = "+m.B.Name() == pair {
				found = true
				if m.On() != want {
					t.Errorf("%s stands on %s, want %s", pair, m.On(), want)
				}
			}
		}
		if !found {
			t.Errorf("%s are not joined", pair)
		}
	}
}

func TestJumpersBringLengthAndEnds(t *testing.T) {
	g := whole(t, `
device.yagi = { part = "YAGI" }
device.radio = { part = "RADIO" }
cable.A = { part = "J-NS", from = "yagi", to = "radio.main" }
`)
	a := g.Cable("A")
	if a.Length.V != 2000 || a.Ends[0].Face.V.Written != "N male" || a.Ends[1].Face.V.Written != "SMA male" || a.Ends[0].Fit != nil || a.Ends[0].Ohm.Set {
		t.Errorf("the jumper is %+v, ends %+v %+v", a, a.Ends[0], a.Ends[1])
	}
	// The impedance is that of the cable that it is made of.
	if nn := whole(t, "cable.A = { part = \"J-NN\" }\n").Cable("A"); nn.Ends[0].Ohm.V != 50 || nn.Length.V != 1000 {
		t.Errorf("the jumper is %+v, end %+v", nn, nn.Ends[0])
	}
}

func TestConnectorsOfEnds(t *testing.T) {
	const devices = `
[device]
yagi = { part = "YAGI" }
whip = { part = "WHIP" }
mixed = { part = "MIXED" }
`
	for _, c := range []struct {
		name, cable string
		fits        string // connector part of each end, "-" for none
		holes       []string
	}{
		{"a face with one part", `part = "CX", ends = ["N male", "N female"]`, "NM NF", nil},
		{"the part itself", `part = "THIN", ends = ["NM-CLAMP", "SM"]`, "NM-CLAMP SM", nil},
		{"a face with two parts", `part = "THIN", ends = ["N male", "SMA male"]`, "- SM",
			[]string{`choice, "N male", cable.A: end 1 can be made with NM-CLAMP or NM-CRIMP; name one of them in ends`}},
		{"a face with no part", `part = "CX", ends = ["N male", "SMA male"]`, "NM -",
			[]string{`no connector, "SMA male", cable.A: no connector part fits CX and has SMA male; add one to the catalog, or use a cable or face that has one`}},
		{"no face, a port that one part mates with", `part = "THIN", to = "mixed.s", ends = ["NF", "SM"]`, "NF SM", nil},
		{"absent, one part mates with each port", `part = "CX", from = "yagi", to = "whip"`, "NM NF", nil},
		{"absent, two parts mate", `part = "THIN", from = "yagi", to = "mixed.s"`, "- SM",
			[]string{`choice, "yagi", cable.A: end 1 can be made with NM-CLAMP or NM-CRIMP; name one of them in ends`}},
		{"absent, no part mates", `part = "CX", from = "yagi", to = "mixed.s"`, "NM -",
			[]string{`no connector, "mixed.s", cable.A: no connector part fits CX and has a face that mates with mixed.s; add one to the catalog, or use a cable or face that has one`}},
		{"absent and going nowhere", `part = "CX", from = "yagi"`, "NM -", nil},
		{"a cable that no connector fits", `part = "BARE", from = "yagi"`, "- -",
			[]string{`no connector, "yagi", cable.A: no connector part fits BARE and has a face that mates with yagi.rf; add one to the catalog, or use a cable or face that has one`}},
		{"of what is there already nothing is asked", `part = "BARE", from = "yagi", existing = true`, "- -", nil},
		{"nor a choice", `part = "THIN", from = "yagi", existing = true`, "- -", nil},
		{"a connector of another cable", `part = "CX", ends = ["NM-CRIMP", "NM"]`, "NM-CRIMP NM", nil},
		{"what is no connector", `part = "CX", ends = ["AMP", "NM"]`, "- NM",
			[]string{`wrong kind, "AMP", cable.A: AMP is of kind amplifier; connector is expected here; name a part of that kind`}},
	} {
		g := lay(t, devices+"[cable.A]\nlength = \"1 m\"\n"+lines(c.cable))
		hasHoles(t, c.name, g, c.holes...)
		got := ""
		for _, e := range g.Cable("A").Ends {
			switch {
			case e.Fit == nil:
				got += " -"
			default:
				got += " " + e.Fit.ID
			}
		}
		if got[1:] != c.fits {
			t.Errorf("%s: the ends are made with%s, want %s", c.name, got, c.fits)
		}
	}
	g := lay(t, devices+"[cable.A]\nlength = \"1 m\"\n"+lines(`part = "THIN", from = "yagi", to = "mixed.s"`))
	if e := g.Cable("A").Ends[0]; fmt.Sprint(e.Could) != "[NM-CLAMP NM-CRIMP]" || e.Face.V.Written != "N male" || e.Ohm.V != 50 {
		t.Errorf("an open choice is %+v", e)
	}
	if e := g.Cable("A").Ends[1]; e.Face.V.Written != "SMA male" || len(e.Could) > 0 {
		t.Errorf("an end that the port decides is %+v", e)
	}
}

// A port that is not for radio signals takes no coaxial line.
func TestCoaxGoesToRadioPorts(t *testing.T) {
	g := lay(t, `
device.radio = { part = "RADIO" }
device.psu = { part = "PSU" }
`+cx("A", "radio.poe", "psu.dc", nn)+cx("B", "radio.main", "psu", nn))
	hasHoles(t, "coax", g,
		`no port, "radio.poe", cable.A: radio.poe carries data; a port for radio signals is expected; name one of radio.main, radio.div`,
		`no port, "psu.dc", cable.A: psu.dc carries power; a port for radio signals is expected; the part has none`,
		`no port, "psu", cable.B: psu has no free port left for this; name the port, or free one`,
	)
	hasMates(t, "coax", g, "B.1 = radio.main")
}

func TestOneBadPartLeavesTheRest(t *testing.T) {
	g := lay(t, cx("A", "yagi", "arrest.line", nn)+cx("B", "arrest.gear", "amp.donor", nn)+cx("C", "amp.server", "dome.rf", nn)+`
cable.D = { part = "CXX", length = "1 m", from = "dome.rf", to = "amp.server" }
[device]
yagi = { part = "YAGI" }
arrest = { part = "ARRESST" }
amp = { part = "AMP" }
dome = { part = "DOME" }
`)
	hasHoles(t, "one bad part", g,
		`no part, "ARRESST", device.arrest: the catalog has no part "ARRESST"; did you mean ARREST?`,
		`no part, "CXX", cable.D: the catalog has no part "CXX"; did you mean CX?`,
		`shared port, "dome.rf", device.dome: dome.rf already mates with C.2; a port takes one line: use a splitter, or another port`,
		`shared port, "amp.server", device.amp: amp.server already mates with C.1; a port takes one line: use a splitter, or another port`,
	)
	hasMates(t, "one bad part", g, "A.1 = yagi.rf", "B.2 = amp.donor", "C.1 = amp.server", "C.2 = dome.rf", "D.1 = dome.rf", "D.2 = amp.server")
}

// Every jumper is turned, wherever it stands among the cables, and none without need.
func TestJumpersAreTurnedEach(t *testing.T) {
	g := whole(t, cx("A", "", "", nn)+`
cable.J1 = { part = "J-NS", from = "radio.main", to = "split.in" }
cable.B = { part = "CX", length = "1 m", ends = ["NM", "NM"] }
cable.J2 = { part = "J-NS", from = "radio.div", to = "split.out1" }
cable.J3 = { part = "J-NS", from = "split.out2", to = "yagi.rf" }
cable.J4 = { part = "J-NS", from = "mixed.n" }
[device]
radio = { part = "RADIO" }
split = { part = "SPLIT-2" }
yagi = { part = "YAGI" }
mixed = { part = "MIXED" }
`)
	for id, want := range map[string]string{
		"J1": "SMA male, N male", "J2": "SMA male, N male",
		"J3": "N male, SMA male", // one end fits either way: it stays as it is listed
		"J4": "N male, SMA male",
	} {
		ends := g.Cable(id).Ends
		if got := ends[0].Face.V.Written + ", " + ends[1].Face.V.Written; got != want {
			t.Errorf("%s has the ends %s, want %s", id, got, want)
		}
	}
}

// A connector part whose face cannot be read is no choice, and hides no other.
func TestConnectorsWithoutFace(t *testing.T) {
	p, problems := readPlan(t, "cable.A = { part = \"K\", length = \"1 m\", ends = [\"N male\", \"N male\"] }\n")
	if len(problems) > 0 {
		t.Fatal(problems)
	}
	g := bom.Resolve(p, ownCatalog(t, `
[part.K]
kind = "cable"
impedance_ohm = 50
loss_db_per_100m = 3
[part.A-BAD]
kind = "connector"
connector = "N mail"
impedance_ohm = 50
fits = ["K"]
[part.B-GOOD]
kind = "connector"
connector = "N male"
impedance_ohm = 50
fits = ["K"]
`))
	hasHoles(t, "a connector without face", g)
	for _, e := range g.Cable("A").Ends {
		if e.Fit == nil || e.Fit.ID != "B-GOOD" {
			t.Errorf("end %d is made with %v", e.End, e.Fit)
		}
	}
}
