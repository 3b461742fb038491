package show

import (
	"fmt"
	"strings"

	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/rules"
	"driploop/rules/limits"
)

type profileJSON struct {
	Profile    string            `json:"profile"`
	Title      string            `json:"title"`
	Instrument string            `json:"instrument"`
	Edition    string            `json:"edition"`
	Checked    string            `json:"checked"`
	Embedded   bool              `json:"embedded"`
	Setting    string            `json:"setting"` // "" both
	Class      string            `json:"class"`   // "" any
	Mobility   string            `json:"mobility"`
	With       []string          `json:"with"`
	Operator   bool              `json:"operator_permission"`
	Spectrum   []spectrumJSON    `json:"spectrum"`
	Papers     []dutyJSON        `json:"papers"`
	Kit        *dutyJSON         `json:"kit"`
	Personal   *dutyJSON         `json:"personal"`
	Separation *dutyJSON         `json:"separation"`
	BSCL       *dutyJSON         `json:"bscl"`
	Limits     []limitRowJSON    `json:"limits"`
	Bands      []bandFiguresJSON `json:"bands"`
	Exposure   []dutyJSON        `json:"exposure"`
	Heights    []dutyJSON        `json:"heights"`
	Conditions []dutyJSON        `json:"conditions"`
	Cautions   []string          `json:"cautions"`
}

// dutyJSON is something asked for, with where it comes from. ID is the paper or
// the exposure level.
type dutyJSON struct {
	ID      string `json:"id,omitempty"`
	Says    string `json:"says"`
	Clause  string `json:"clause"`
	Edition string `json:"edition"`
	Proof   string `json:"proof"`
	Note    string `json:"note"`
}

type spectrumJSON struct {
	Name     string     `json:"name"`
	Uplink   [2]float64 `json:"uplink_mhz"`
	Downlink [2]float64 `json:"downlink_mhz"`
	dutyJSON
}

// limitRowJSON is one limit row. Its ID counts within the profile, so that the bands
// can name it.
type limitRowJSON struct {
	ID      string  `json:"id"`
	Kind    string  `json:"kind"`
	Class   string  `json:"class"` // "radio" for routers
	Where   string  `json:"where"`
	Formula string  `json:"formula"`
	Unit    string  `json:"unit"`
	C0      float64 `json:"c0"`
	KF      float64 `json:"kf"`
	KR      float64 `json:"kr"`
	KM      float64 `json:"km"`
	KB      float64 `json:"kb"`
	Clause  string  `json:"clause"`
	Edition string  `json:"edition"`
	Proof   string  `json:"proof"`
	Note    string  `json:"note"`
}

// bandFiguresJSON is what the rows come to in one band. A row that lacks something of the
// site has no value.
type bandFiguresJSON struct {
	Band    string           `json:"band"`
	Figures []bandFigureJSON `json:"figures"`
}

type bandFigureJSON struct {
	Limit string   `json:"limit"`
	Value *float64 `json:"value"`
	Lacks []string `json:"lacks"`
}

func profileTopic(p *limits.Profile) *Topic {
	t := &profileText{p: p, names: map[*limits.Row]string{}, data: profileJSON{
		Profile: p.ID, Title: p.Title.V, Instrument: p.Instrument.V, Edition: p.Edition.V, Checked: day(p.Checked), Embedded: p.Embedded,
		Setting: p.Setting.V, Class: p.Class.V, Mobility: p.Mobility.V, With: plainWords(p.With.V), Operator: p.OperatorPermission.V,
		Spectrum: []spectrumJSON{}, Limits: []limitRowJSON{}, Bands: []bandFiguresJSON{},
		Cautions: plainWords(p.Cautions)}}
	t.page.Title = p.ID
	t.head()
	t.spectrum()
	t.papers()
	t.asks()
	t.limitRows("Limits of amplifiers", "L", p.Limits)
	t.limitRows("Limits of routers and other radios", "R", p.Radio)
	t.bands()
	t.exposure()
	t.block("What a plan cannot show", duties(p.Conditions, &t.data.Conditions))
	t.cautions(p.Cautions)
	return &Topic{t.page, t.data}
}

// profileText puts a profile together in both shapes.
type profileText struct {
	p     *limits.Profile
	page  Document
	data  profileJSON
	names map[*limits.Row]string
}

// block adds a block unless it is empty.
func (t *profileText) block(head string, items []Item) {
	if len(items) > 0 {
		t.page.Blocks = append(t.page.Blocks, Block{Head: head, Items: items})
	}
}

func (t *profileText) head() {
	p := t.p
	lines := []string{sentence(p.Title.V + own(p.Embedded)), instrument(p.Instrument.V, p.Edition.V, day(p.Checked))}
	var items []Item
	for _, it := range []Item{{"setting", p.Setting.V}, {"class", p.Class.V}, {"mobility", p.Mobility.V}, {"with", strings.Join(plainWords(p.With.V), ", ")}} {
		if it.Text != "" {
			items = append(items, it)
		}
	}
	if p.OperatorPermission.V {
		lines = append(lines, "Nothing may transmit without the operator's own permission, which then sets the figures.")
	}
	if p.DonorAsRadio.V {
		lines = append(lines, "The donor side of an amplifier is held to the limits of the radio service.")
	}
	t.page.Blocks = append(t.page.Blocks, Block{Text: lines, Items: items})
}

// instrument says what a profile or code restates, and when that was last compared.
func instrument(name, edition, checked string) string {
	out := "It restates " + name + " (" + edition + ")"
	if checked != "" {
		out += ", last compared on " + checked
	}
	return out + "."
}

func day(v source.Val[unit.Date]) string {
	if !v.Set {
		return ""
	}
	return v.V.String()
}

func plainWords(list []source.Val[string]) []string {
	out := []string{}
	for _, w := range list {
		out = append(out, w.V)
	}
	return out
}

func dutyOf(id string, d *limits.Duty, says string) dutyJSON {
	return dutyJSON{id, says, d.Clause.V, d.Edition.V, d.Proof.V, d.Note.V}
}

// duties are bullets of what is asked for.
func duties(list []limits.Duty, data *[]dutyJSON) []Item {
	var out []Item
	*data = []dutyJSON{}
	for i := range list {
		out = append(out, Item{Text: list[i].Explain()})
		*data = append(*data, dutyOf("", &list[i], list[i].Says.V))
	}
	return out
}

func (t *profileText) spectrum() {
	var items []Item
	for i := range t.p.Spectrum {
		s := &t.p.Spectrum[i]
		items = append(items, Item{Text: s.Explain()})
		t.data.Spectrum = append(t.data.Spectrum, spectrumJSON{s.Name.V, edges(s.Uplink.V), edges(s.Downlink.V), dutyOf("", &s.Duty, s.Says.V)})
	}
	if items == nil {
		items = []Item{{Text: "It lists no spectrum; that is left to the licence or the operator."}}
	}
	t.block("Spectrum it permits", items)
}

func edges(s unit.Span) [2]float64 { return [2]float64{float64(s.Lo), float64(s.Hi)} }

func (t *profileText) papers() {
	t.data.Papers = []dutyJSON{}
	var items []Item
	for i := range t.p.Papers {
		p := &t.p.Papers[i]
		text := p.Explain()
		if p.Uplink.Set {
			text = "with uplink in " + p.Uplink.V.String() + ": " + text
		}
		items = append(items, Item{p.ID, text})
		t.data.Papers = append(t.data.Papers, dutyOf(p.ID, &p.Duty, p.Says.V))
	}
	t.block("Papers", items)
}

// asks are the single things that a profile asks for.
func (t *profileText) asks() {
	var items []Item
	add := func(name string, d *limits.Duty, says, text string) *dutyJSON {
		items = append(items, Item{name, text})
		j := dutyOf("", d, says)
		return &j
	}
	if d := t.p.Kit; d != nil {
		t.data.Kit = add("kit", d, d.Says.V, d.Explain())
	}
	if d := t.p.Personal; d != nil {
		t.data.Personal = add("personal", d, d.Says.V, d.Explain())
	}
	if d := t.p.Separation; d != nil {
		t.data.Separation = add("separation", &d.Duty, d.Says.V, "at least "+d.Least.V.String()+"; "+d.Explain())
	}
	if d := t.p.BSCL; d != nil {
		says := bsclSays(d)
		t.data.BSCL = add("BSCL", &d.Duty, says, says+"; "+d.Explain())
	}
	t.data.Heights = []dutyJSON{}
	for i := range t.p.Heights {
		h := &t.p.Heights[i]
		t.data.Heights = append(t.data.Heights, *add("height", &h.Duty, "at most "+h.Most.V.String()+" on "+h.MHz.V.String(), h.Explain()))
	}
	t.block("What it asks for", items)
}

// bsclSays is how the base station coupling loss is come by.
func bsclSays(b *limits.BSCL) string {
	out := []string{"measured where that is known"}
	if b.BaseDBm.Set {
		out = append(out, fmt.Sprintf("else %s dBm less what is received in one channel", plainNumber(b.BaseDBm.V)))
	}
	if b.AssumedDB.Set {
		out = append(out, fmt.Sprintf("else taken as %s dB", plainNumber(b.AssumedDB.V)))
	}
	return strings.Join(out, ", ")
}

func (t *profileText) limitRows(head, letter string, rows []*limits.Row) {
	var items []Item
	for i, r := range rows {
		name := fmt.Sprintf("%s%d", letter, i+1)
		t.names[r] = name
		items = append(items, Item{name, r.Explain()})
		t.data.Limits = append(t.data.Limits, limitRowJSON{name, r.Kind.V, r.Class.V, r.Where(), r.Formula(), r.Unit(),
			r.C0.V, r.KF.V, r.KR.V, r.KM.V, r.KB.V, r.Clause.V, r.Edition.V, r.Proof.V, r.Note.V})
	}
	t.block(head, items)
}

// bands is a table of what the rows come to in each band, as far as that follows
// from the band alone.
func (t *profileText) bands() {
	numbers := t.p.Numbers()
	shown := map[string]bool{}
	for _, b := range numbers {
		j := bandFiguresJSON{Band: b.Band.Name, Figures: []bandFigureJSON{}}
		for _, f := range b.Figures {
			g := bandFigureJSON{Limit: t.names[f.Row], Lacks: orEmpty(f.Missing)}
			if len(f.Missing) == 0 {
				v := rules.Round(f.Value)
				g.Value = &v
				shown[g.Limit] = shown[g.Limit] || f.Row.KF.V != 0 || f.Row.FFrom.Set || f.Row.FBelow.Set
			}
			j.Figures = append(j.Figures, g)
		}
		t.data.Bands = append(t.data.Bands, j)
	}
	grid := &Grid{Columns: []string{"band"}}
	for _, l := range t.data.Limits {
		if shown[l.ID] {
			grid.Columns = append(grid.Columns, l.ID)
		}
	}
	for _, b := range t.data.Bands {
		grid.Rows = append(grid.Rows, b.row(grid.Columns))
	}
	if len(grid.Columns) > 1 && len(grid.Rows) > 0 {
		t.page.Blocks = append(t.page.Blocks, Block{Head: "Band by band",
			Text: []string{"What the rows that depend on frequency come to; the others are the same in every band, or depend on the site."}, Table: grid})
	}
}

func (b bandFiguresJSON) row(columns []string) []string {
	out := []string{b.Band}
	for _, c := range columns[1:] {
		cell := ""
		for _, f := range b.Figures {
			if f.Limit == c && f.Value != nil {
				cell = unit.Fixed(*f.Value, 1)
			}
		}
		out = append(out, cell)
	}
	return out
}

func (t *profileText) exposure() {
	t.data.Exposure = []dutyJSON{}
	var items []Item
	for i := range t.p.Exposure {
		l := &t.p.Exposure[i]
		items = append(items, Item{l.ID, l.Explain()})
		t.data.Exposure = append(t.data.Exposure, dutyOf(l.ID, &l.Duty, strings.TrimSuffix(l.Explain(), "; "+l.Duty.Explain())))
	}
	t.block("Levels for exposure to radio fields", items)
}

func (t *profileText) cautions(list []source.Val[string]) {
	var items []Item
	for _, c := range plainWords(list) {
		items = append(items, Item{Text: c})
	}
	t.block("Mind", items)
}
