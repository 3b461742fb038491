package rules_test

import (
	"errors"
	"fmt"
	"strings"

	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/rules"
	"driploop/rules/rf"
)

// practiceQuantities are what the table of common practice may ask for. The answers
// come from the rules themselves, run over a small workspace, or from the catalog.
var practiceQuantities = map[string]quantity{
	"left out":               (*inputs).leftOut,
	"left out mhz":           (*inputs).leftOutWidth,
	"covered per cent":       (*inputs).covered,
	"capacity kept per cent": (*inputs).capacityKept,
	"xpd as read":            (*inputs).xpdAsRead,
	"cable fit":              (*inputs).cableFit,
	"cable fit expects":      (*inputs).fitExpects,
	"series mhz":             (*inputs).seriesLimit,
}

// spans reads stretches of spectrum as pairs of ends.
func (in *inputs) spans(key string) []unit.Span {
	var out []unit.Span
	ends := in.list(key)
	for i := 1; i < len(ends); i += 2 {
		out = append(out, unit.Span{Lo: unit.MHz(ends[i-1]), Hi: unit.MHz(ends[i])})
	}
	return out
}

// told runs the rules over a workspace and lists what one of them says.
func (in *inputs) told(rule string, tree map[string]string) []*rules.Finding {
	tree[rules.WorkspaceFile] = "[workspace]\nname = \"published values\"\n"
	var out []*rules.Finding
	for _, f := range findings(in.t, memory{tree}, today(in.t, "")) {
		switch {
		case f.Rule.Name == rule:
			out = append(out, f)
		case f.Rule.Area() == "file":
			in.fail(fmt.Errorf("the workspace of a published value is not in order: %s", f.Says))
		}
	}
	return out
}

// antennaFinding lets an antenna with the ranges at hand receive one band.
func (in *inputs) antennaFinding() *rules.Finding {
	var ranges []string
	for _, s := range in.spans("covers") {
		ranges = append(ranges, fmt.Sprintf("{ mhz = [%v, %v], gain_dbi = 7 }", float64(s.Lo), float64(s.Hi)))
	}
	band := in.text("band")
	all := in.told("band/antenna", map[string]string{
		"catalog/own.toml": "[part.PANEL]\nkind = \"antenna\"\nport.rf = { connector = \"N male\", impedance_ohm = 50 }\nrange = [" + strings.Join(ranges, ", ") + "]\n" +
			"[part.RADIO]\nkind = \"router\"\nbands = [\"" + band + "\"]\nport.main = { connector = \"N female\", impedance_ohm = 50 }\n",
		"plans/a.toml": "[job]\nbands = [\"" + band + "\"]\n[device]\npanel = { part = \"PANEL\" }\nradio = { part = \"RADIO\" }\n" +
			"[[joint]]\na = \"panel\"\nb = \"radio\"\n",
	})
	switch len(all) {
	case 0:
		return nil
	case 1:
		return all[0]
	}
	in.fail(fmt.Errorf("%d findings on one antenna", len(all)))
	return nil
}

func figureOf(f *rules.Finding, name string) string {
	for _, x := range f.Figures {
		if x.Name == name {
			return fmt.Sprint(rules.Round(x.Value))
		}
	}
	return "no " + name
}

func (in *inputs) leftOutWidth() string {
	if f := in.antennaFinding(); f != nil {
		return figureOf(f, "left_out_mhz")
	}
	return "0"
}

func (in *inputs) leftOut() string {
	f := in.antennaFinding()
	if f == nil {
		return "nothing"
	}
	_, left, _ := strings.Cut(f.Says, " leaves out ")
	left, _, _ = strings.Cut(left, "; its ranges")
	return left
}

// covered is how much of a stretch some ranges cover.
func (in *inputs) covered() string {
	ends := in.list("span")
	if len(ends) != 2 {
		in.fail(errors.New("a span has two ends"))
		return "unknown"
	}
	whole := unit.Span{Lo: unit.MHz(ends[0]), Hi: unit.MHz(ends[1])}
	var open unit.MHz
	for _, s := range whole.Minus(in.spans("covers")...) {
		open += s.Width()
	}
	return fmt.Sprint(100 * float64(1-open/whole.Width()))
}

// capacityKept is the capacity of two streams over polarizations that leak into
// each other, against two that do not.
func (in *inputs) capacityKept() string {
	snr := in.db("snr")
	leaky, ok := rf.CrossPolar(in.db("xpd")).Capacity(snr)
	clean, okClean := rf.Channel{{1, 0}, {0, 1}}.Capacity(snr)
	if !ok || !okClean {
		return "unknown"
	}
	return fmt.Sprint(100 * leaky / clean)
}

func (in *inputs) xpdAsRead() string {
	file, _ := source.NewFile("catalog/own.toml", []byte("[part.PANEL]\nkind = \"antenna\"\nxpd_db = "+in.text("xpd_db")+"\n"))
	doc, problems := source.Parse(file)
	parts, more := catalog.ReadParts(doc)
	if len(problems)+len(more) > 0 || len(parts) != 1 || !parts[0].Antenna.XPD.Set {
		return "refused"
	}
	return fmt.Sprint(parts[0].Antenna.XPD.V)
}

// fitFinding holds the points of a cable against one curve.
func (in *inputs) fitFinding() *rules.Finding {
	mhz, db := in.paired("mhz", "db")
	var points []string
	for i := range mhz {
		points = append(points, fmt.Sprintf("[%v, %v]", mhz[i], db[i]))
	}
	for _, f := range in.told("catalog/fit", map[string]string{
		"catalog/own.toml": "[part.CX]\nkind = \"cable\"\nimpedance_ohm = 50\nloss_db_per_" + in.text("unit") + " = [" + strings.Join(points, ", ") + "]\n",
	}) {
		return f
	}
	return nil
}

func (in *inputs) cableFit() string {
	switch f := in.fitFinding(); {
	case f == nil:
		return "holds"
	case f.Outcome == rules.Fails:
		return "refused"
	default:
		return f.Outcome.String()
	}
}

func (in *inputs) fitExpects() string {
	if f := in.fitFinding(); f != nil {
		return figureOf(f, "expected_db_per_100m")
	}
	return "nothing"
}

func (in *inputs) seriesLimit() string {
	s, ok := catalog.LookSeries(in.text("series"))
	if !ok {
		return "no such series"
	}
	max, known := s.LimitMHz(in.num("ohm"))
	if !known {
		return "unknown"
	}
	return fmt.Sprint(float64(max))
}
