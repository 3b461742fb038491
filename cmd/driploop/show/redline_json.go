package show

import (
	"driploop/catalog"
	"driploop/rules"
)

// RedlineJSON writes a redline as DEVELOPERS.md describes it.
func RedlineJSON(r *rules.Redline, version string, t RedlineTerms) ([]byte, error) {
	w := &redWords{r: r, terms: t}
	out := redlineJSON{Tool: "driploop", Version: version, Base: r.Base, BaseID: r.BaseID, Head: r.Head, HeadID: r.HeadID, Today: r.Today, Verdict: w.verdict(),
		Gate:    gateJSON{r.Gate.Held, r.Gate.Differs, r.Gate.UnderBase, r.Gate.UnderHead},
		Changes: w.changesJSON(r.Changes), Jobs: []jobJSON{}, Others: []otherJSON{}, Past: []pastJSON{}, NewRows: r.NewRows, Bins: []binJSON{},
		Notices: orEmpty(r.Notices), Untouched: r.Untouched}
	for _, j := range r.Jobs {
		out.Jobs = append(out.Jobs, w.jobJSON(j))
	}
	for _, o := range r.Others {
		x := otherJSON{Job: o.Job, Plan: o.Path, Title: o.Title, Crew: o.Crew, Short: movedShortsJSON(o.Short), Findings: movedJSON(o.Findings)}
		if !o.On.IsZero() {
			x.On = o.On.String()
		}
		out.Others = append(out.Others, x)
	}
	out.Workspace.Findings, out.Workspace.Standing = movedJSON(r.Workspace), countsOf(r.Standing)
	for _, p := range r.Past {
		out.Past = append(out.Past, pastJSON(p))
	}
	for _, b := range r.Bins {
		x := binJSON{Part: b.Part, Where: b.Where, Tag: b.Tag}
		x.Was, x.Now, x.Unit = amounts(b.Was, b.Now)
		out.Bins = append(out.Bins, x)
	}
	if k := r.Cost; k.Known && !t.NoPrices {
		out.Cost = &costJSON{Currency: k.Currency, ValueWas: k.Value[0].String(), Value: k.Value[1].String(), ToBuyWas: k.ToBuy[0].String(), ToBuy: k.ToBuy[1].String(),
			FreightWas: k.Freight[0].String(), Freight: k.Freight[1].String(), Proved: k.Proved}
	}
	return encode(out)
}

type redlineJSON struct {
	Tool      string       `json:"tool"`
	Version   string       `json:"version"`
	Base      string       `json:"base"`
	BaseID    string       `json:"base_id"`
	Head      string       `json:"head"`
	HeadID    string       `json:"head_id"`
	Today     string       `json:"today"`
	Verdict   string       `json:"verdict"`
	Gate      gateJSON     `json:"gate"`
	Changes   []changeJSON `json:"changes"`
	Jobs      []jobJSON    `json:"jobs"`
	Others    []otherJSON  `json:"others"`
	Workspace struct {
		Findings []movedFindingJSON `json:"findings"`
		Standing countsJSON         `json:"standing"`
	} `json:"workspace"`
	Past      []pastJSON `json:"past"`
	NewRows   int        `json:"new_rows"`
	Bins      []binJSON  `json:"bins"`
	Cost      *costJSON  `json:"cost"`
	Notices   []string   `json:"notices"`
	Untouched int        `json:"untouched"`
}

type gateJSON struct {
	Held      bool `json:"held"`
	Differ    bool `json:"rulers_differ"`
	UnderBase int  `json:"holds_under_base"`
	Under     int  `json:"holds"`
}

type changeJSON struct {
	Charge string `json:"charge"`
	File   string `json:"file"`
	Line   int    `json:"line"`
	On     string `json:"on"`
	Key    string `json:"key"`
	How    string `json:"how"`
	Was    string `json:"was"`
	Now    string `json:"now"`
}

func (w *redWords) changesJSON(list []rules.Change) []changeJSON {
	out := []changeJSON{}
	for _, c := range list {
		if !c.Price || !w.terms.NoPrices {
			out = append(out, changeJSON{c.Charge.String(), c.File, c.Line, c.On, c.Key, c.How, c.Was, c.Now})
		}
	}
	return out
}

type jobJSON struct {
	Job       string             `json:"job"`
	WasJob    string             `json:"was_job"`
	Plan      string             `json:"plan"`
	Title     string             `json:"title"`
	Stage     string             `json:"stage"`
	Crew      string             `json:"crew"`
	On        string             `json:"install_on"`
	How       string             `json:"how"`
	Same      bool               `json:"same_meaning"`
	Broken    string             `json:"file_only"`
	Charges   []string           `json:"charges"`
	Changes   []changeJSON       `json:"changes"`
	Figures   []movedFigureJSON  `json:"figures"`
	Largest   *movedFigureJSON   `json:"largest_within_tolerance"`
	Findings  []movedFindingJSON `json:"findings"`
	Standing  countsJSON         `json:"standing"`
	Waivers   []movedWaiverJSON  `json:"waivers"`
	Takeoff   []movedPartJSON    `json:"takeoff"`
	Short     []movedShortJSON   `json:"short"`
	Wasted    []wastedJSON       `json:"wasted"`
	Tools     []toolJSON         `json:"tools"`
	Value     *valueJSON         `json:"value"`
	Holds     int                `json:"holds"`
	HoldsBase int                `json:"holds_under_base"`
	BaseHolds []findingJSON      `json:"held_by_base"`
}

func (w *redWords) jobJSON(j *rules.JobChange) jobJSON {
	x := jobJSON{Job: j.Job, WasJob: j.WasJob, Plan: j.Path, Title: j.Title, Stage: j.Stage, Crew: j.Crew, How: j.How, Same: j.SaysSame, Broken: j.Broken,
		Charges: []string{}, Changes: w.changesJSON(j.Changes), Figures: []movedFigureJSON{}, Findings: movedJSON(j.Findings), Standing: countsOf(j.Standing),
		Waivers: []movedWaiverJSON{}, Takeoff: []movedPartJSON{}, Short: movedShortsJSON(j.Short), Wasted: []wastedJSON{}, Tools: []toolJSON{},
		Holds: j.Holds, HoldsBase: j.HoldsBase, BaseHolds: findingsJSON(j.BaseHolds)}
	if !j.On.IsZero() {
		x.On = j.On.String()
	}
	for _, c := range j.Charges {
		x.Charges = append(x.Charges, c.String())
	}
	for _, m := range j.Figures {
		x.Figures = append(x.Figures, figureMoved(m))
	}
	if j.Largest != nil {
		f := figureMoved(*j.Largest)
		x.Largest = &f
	}
	for _, m := range j.Waivers {
		x.Waivers = append(x.Waivers, waiverMoved(m))
	}
	for _, m := range j.Takeoff {
		p := movedPartJSON{Part: m.Part}
		p.Was, p.Now, p.Unit = amounts(m.Was, m.Now)
		x.Takeoff = append(x.Takeoff, p)
	}
	for _, t := range j.Tools {
		x.Tools = append(x.Tools, toolJSON(t))
	}
	for _, m := range j.Wasted {
		p := wastedJSON{How: m.How, Part: m.Part, Line: m.Line, From: m.From, Says: m.Says, File: m.At.Path(), At: m.At.Line()}
		_, p.Qty, p.Unit = amounts(m.Qty, m.Qty)
		x.Wasted = append(x.Wasted, p)
	}
	if !w.terms.NoPrices && w.r.Cost.Known {
		x.Value = &valueJSON{j.Value[0].String(), j.Value[1].String(), j.ValueByFacts.String(), orEmpty(j.Unpriced)}
	}
	return x
}

type movedFigureJSON struct {
	Name      string             `json:"name"`
	On        string             `json:"on"`
	Band      string             `json:"band"`
	Way       string             `json:"direction"`
	Unit      string             `json:"unit"`
	Was       *float64           `json:"was"`
	Now       *float64           `json:"now"`
	Diff      *float64           `json:"difference"`
	LimitWas  *float64           `json:"limit_was"`
	LimitNow  *float64           `json:"limit"`
	MarginWas *float64           `json:"margin_was"`
	MarginNow *float64           `json:"margin"`
	Tolerance float64            `json:"tolerance"`
	Charge    string             `json:"charge"`
	By        map[string]float64 `json:"by"`
	Eaten     bool               `json:"margin_eaten"`
	Beyond    bool               `json:"beyond"`
	Back      bool               `json:"back_inside"`
}

func figureMoved(m rules.MovedFigure) movedFigureJSON {
	d, both := m.Difference()
	x := movedFigureJSON{Name: m.Name, On: m.On, Band: m.Band, Way: m.Way, Unit: m.Unit, Was: figureOf(m.Was), Now: figureOf(m.Now), Diff: figure(d, both),
		LimitWas: figureOf(m.LimitWas), LimitNow: figureOf(m.LimitNow), MarginWas: figureOf(m.MarginWas), MarginNow: figureOf(m.MarginNow),
		Tolerance: rules.Round(m.Tolerance), Charge: m.Charge.String(), By: map[string]float64{}, Eaten: m.Eaten, Beyond: m.Beyond, Back: m.Back}
	for c := rules.ToRulers; c <= rules.ToWork; c++ {
		if v := rules.Round(m.By[c]); v != 0 {
			x.By[c.String()] = v
		}
	}
	return x
}

func figureOf(k rules.Known[float64]) *float64 { return figure(k.V, k.OK) }

type movedFindingJSON struct {
	How    string `json:"how"`
	Was    string `json:"was"`
	Now    string `json:"now"`
	Charge string `json:"charge"`
	findingJSON
}

func movedJSON(list []rules.MovedFound) []movedFindingJSON {
	out := []movedFindingJSON{}
	for _, m := range list {
		out = append(out, movedFindingJSON{m.How.String(), m.Was, m.Now, m.Charge.String(), findingsJSON([]*rules.Finding{m.Finding})[0]})
	}
	return out
}

type countsJSON struct {
	Holds   int `json:"holds"`
	Punch   int `json:"punch"`
	Notes   int `json:"notes"`
	Waived  int `json:"waived"`
	Unknown int `json:"not_assessed"`
}

func countsOf(n rules.Counts) countsJSON {
	return countsJSON{n.Holds, n.Punch, n.Notes, n.Waived, n.Unknown}
}

type movedWaiverJSON struct {
	Rule     string   `json:"rule"`
	On       string   `json:"on"`
	Band     string   `json:"band"`
	How      []string `json:"how"`
	By       string   `json:"by"`
	Because  string   `json:"because"`
	Until    string   `json:"until"`
	UntilWas string   `json:"until_was"`
	UpTo     *float64 `json:"up_to"`
	UpToWas  *float64 `json:"up_to_was"`
	Figure   *float64 `json:"figure"`
	Covers   int      `json:"covers"`
	Weight   string   `json:"weight"`
	Line     int      `json:"line"`
}

func waiverMoved(m rules.MovedWaiver) movedWaiverJSON {
	x := movedWaiverJSON{Rule: m.Rule, On: m.On, Band: m.Band, How: m.How, By: m.By, Because: m.Because, UpTo: figureOf(m.UpTo), UpToWas: figureOf(m.UpToWas),
		Figure: figureOf(m.Figure), Covers: m.Covers, Weight: m.Weight, Line: m.Line}
	if !m.Until.IsZero() {
		x.Until = m.Until.String()
	}
	if !m.UntilWas.IsZero() {
		x.UntilWas = m.UntilWas.String()
	}
	return x
}

type movedPartJSON struct {
	Part string  `json:"part"`
	Was  float64 `json:"was"`
	Now  float64 `json:"now"`
	Unit string  `json:"unit"`
}

// amounts are two quantities in one unit, each or m.
func amounts(a, b catalog.Quantity) (x, y float64, unit string) {
	if a.Length != 0 || b.Length != 0 {
		return a.Length.Metres(), b.Length.Metres(), "m"
	}
	return float64(a.Each), float64(b.Each), "each"
}

type movedShortJSON struct {
	Part   string   `json:"part"`
	Was    float64  `json:"was"`
	Now    float64  `json:"now"`
	Unit   string   `json:"unit"`
	Newly  bool     `json:"newly"`
	Needed string   `json:"needed"`
	Lines  []string `json:"lines"`
	Order  string   `json:"order"`
	Day    string   `json:"day"`
	Charge string   `json:"charge"`
}

func movedShortsJSON(list []rules.MovedShort) []movedShortJSON {
	out := []movedShortJSON{}
	for _, m := range list {
		x := movedShortJSON{Part: m.Part, Newly: m.Newly(), Lines: orEmpty(m.Lines), Order: m.Order, Charge: m.Charge.String()}
		x.Was, x.Now, x.Unit = amounts(m.Was, m.Now)
		if !m.Needed.IsZero() {
			x.Needed = m.Needed.String()
		}
		if m.Order != "" {
			x.Day = m.Day.String()
		}
		out = append(out, x)
	}
	return out
}

type wastedJSON struct {
	How  string  `json:"how"`
	Part string  `json:"part"`
	Qty  float64 `json:"qty"`
	Unit string  `json:"unit"`
	Line string  `json:"on_line"`
	From string  `json:"from"`
	Says string  `json:"says"`
	File string  `json:"file"`
	At   int     `json:"line"`
}

type toolJSON struct {
	Part string `json:"part"`
	Tool string `json:"tool"`
	Crew string `json:"crew"`
}

type valueJSON struct {
	Was      string   `json:"was"`
	Now      string   `json:"now"`
	ByPrices string   `json:"by_prices"`
	Unpriced []string `json:"unpriced"`
}

type otherJSON struct {
	Job      string             `json:"job"`
	Plan     string             `json:"plan"`
	Title    string             `json:"title"`
	Crew     string             `json:"crew"`
	On       string             `json:"install_on"`
	Short    []movedShortJSON   `json:"short"`
	Findings []movedFindingJSON `json:"findings"`
}

type pastJSON struct {
	File string `json:"file"`
	Line int    `json:"line"`
	Row  string `json:"row"`
	How  string `json:"how"`
	Was  string `json:"was"`
	Now  string `json:"now"`
}

type binJSON struct {
	Part  string  `json:"part"`
	Where string  `json:"where"`
	Tag   string  `json:"tag"`
	Was   float64 `json:"was"`
	Now   float64 `json:"now"`
	Unit  string  `json:"unit"`
}

type costJSON struct {
	Currency   string `json:"currency"`
	ValueWas   string `json:"value_was"`
	Value      string `json:"value"`
	ToBuyWas   string `json:"to_buy_was"`
	ToBuy      string `json:"to_buy"`
	FreightWas string `json:"freight_was"`
	Freight    string `json:"freight"`
	Proved     bool   `json:"proved"`
}
