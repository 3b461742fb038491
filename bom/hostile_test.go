package bom_test

import (
	"fmt"
	"strings"
	"testing"
	"time"

	"driploop/bom"
	"driploop/catalog/source"
)

// filled repeats lines until a plan has as many values as a file may have, or is as
// large as one may be.
func filled(head string, valuesPerLine int, line func(i int) string) string {
	var b strings.Builder
	b.WriteString(head)
	for i := 0; (i+1)*valuesPerLine < source.MaxNodes-200; i++ {
		s := line(i)
		if b.Len()+len(s) > source.MaxFile {
			break
		}
		b.WriteString(s)
	}
	return b.String()
}

// hostilePlans are as large as a plan may be, each of a shape that asks for more work
// than its size.
var hostilePlans = map[string]string{
	"unknown parts":       filled("", 2, func(i int) string { return fmt.Sprintf("device.a%d.part=\"GEN-XX-%d\"\n", i, i) }),
	"unknown devices":     filled("", 4, func(i int) string { return fmt.Sprintf("cable.c%d={part=\"CX\",from=\"a%d\",to=\"b%d\"}\n", i, i, i) }),
	"unknown places":      filled("", 3, func(i int) string { return fmt.Sprintf("device.a%d={part=\"AMP\",place=\"p%d\"}\n", i, i) }),
	"a tower":             filled("device.a0.part=\"MAST\"\n", 3, func(i int) string { return fmt.Sprintf("device.a%d={part=\"MAST\",on=\"a%d\"}\n", i+1, i) }),
	"a tower upside down": filled("device.z.part=\"MAST\"\n", 3, func(i int) string { return fmt.Sprintf("device.a%d={part=\"MAST\",on=\"a%d\"}\n", i, i+1) }),
	"everything on one ring": filled("device.r={part=\"MAST\",on=\"s\"}\ndevice.s={part=\"MAST\",on=\"r\"}\n", 3, func(i int) string {
		return fmt.Sprintf("device.a%d={part=\"MAST\",on=\"r\"}\n", i)
	}),
	"lines on one port":        filled("device.amp.part=\"AMP\"\n", 3, func(i int) string { return fmt.Sprintf("cable.c%d={part=\"J-NN\",to=\"amp.donor\"}\n", i) }),
	"bare names of one device": filled("device.s.part=\"GEN-N-SPLIT-4\"\n", 3, func(i int) string { return fmt.Sprintf("cable.c%d={part=\"J-NN\",to=\"s\"}\n", i) }),
	"bare names one after the other": filled("device.s0.part=\"ARREST\"\n", 6, func(i int) string {
		return fmt.Sprintf("device.s%d.part=\"ARREST\"\ncable.c%d={part=\"J-NN\",from=\"s%d\",to=\"s%d\"}\n", i+1, i, i+1, i)
	}),
	"one long line": filled("device.amp.part=\"AMP\"\ncable.c0={part=\"J-NN\",from=\"amp.donor\"}\n", 4, func(i int) string {
		return fmt.Sprintf("cable.c%d={part=\"J-NN\",from=\"c%d.2\"}\n", i+1, i)
	}),
	"a star of lines": filled("device.amp.part=\"AMP\"\ndevice.y.part=\"YAGI\"\n", 4, func(i int) string {
		return fmt.Sprintf("cable.c%d={part=\"J-NN\",from=\"amp.server\",to=\"y.rf\"}\n", i)
	}),
	"links": filled("device.a.part=\"AMP\"\ndevice.b.part=\"AMP\"\n", 4, func(i int) string {
		return fmt.Sprintf("cable.c%d={part=\"J-NN\",from=\"a.server\",to=\"b.donor\"}\n", i)
	}),
	"a chain of bonds": filled("device.a0.part=\"BAR\"\n", 6, func(i int) string {
		return fmt.Sprintf("device.a%d.part=\"BAR\"\nbond.g%d={from=\"a%d\",to=\"a%d\",direct=true}\n", i+1, i, i, i+1)
	}),
	"unknown bonds": filled("device.a.part=\"BAR\"\n", 4, func(i int) string { return fmt.Sprintf("bond.g%d={from=\"a%d\",to=\"b%d\",direct=true}\n", i, i, i) }),
	"copies":        "device.a={part=\"AMP\",copies={" + strings.TrimSuffix(filled("", 1, func(i int) string { return fmt.Sprintf("a%d={},", i) }), ",") + "}}\n",
	"unknown through": "device.a.part=\"AMP\"\ncable.c={part=\"CX\",to=\"a.donor\",through=[" +
		filled("", 1, func(i int) string { return fmt.Sprintf("\"AD-%d\",", i) }) + "]}\n",
	"through": "device.a.part=\"AMP\"\ncable.c={part=\"CX\",to=\"a.donor\",through=[" + filled("", 1, func(i int) string { return "\"PAD\"," }) + "]}\n",
	"a long way behind many lines": "place.p.kind=\"outdoor\"\nplace.q.kind=\"indoor\"\ndevice.amp.part=\"AMP\"\n" +
		"cable.w={part=\"CX\",from=\"amp.server\",to=\"s.in\",way=[" + strings.Repeat("\"p\",\"q\",", 50) + "]}\ndevice.s.part=\"SPLIT-2\"\ndevice.y.part=\"YAGI\"\n" +
		filled("", 4, func(i int) string { return fmt.Sprintf("cable.o%d={part=\"J-NN\",from=\"s.out1\",to=\"y.rf\"}\n", i) }),
	"unknown names of operators":   "area=[{name=\"a\",operators=[" + filled("", 1, func(i int) string { return fmt.Sprintf("\"o%d\",", i) }) + "]}]\n",
	"names that are there already": filled("", 4, func(i int) string { return fmt.Sprintf("device.a%d.part=\"AMP\"\ncable.a%d.part=\"CX\"\n", i, i) }),
}

// Whatever shape a plan has, following it ends in time.
func TestHostilePlans(t *testing.T) {
	parts := demoCatalog(t)
	for name, text := range hostilePlans {
		f, _ := source.NewFile("plans/case.toml", []byte(text))
		d, _ := source.Parse(f)
		start := time.Now()
		p, _ := bom.ReadPlan(d)
		g := bom.Resolve(p, parts)
		for _, l := range g.Lines().All {
			l.Crossings()
		}
		g.Takeoff(sealing("TAPE"))
		for _, x := range g.Devices {
			g.PathToElectrode(x)
		}
		took := time.Since(start)
		t.Logf("%s: %d bytes, %d lines, %d holes, %v", name, len(text), len(g.Lines().All), len(g.Holes), took)
		if took > bound {
			t.Errorf("%s: took %v", name, took)
		}
	}
}
