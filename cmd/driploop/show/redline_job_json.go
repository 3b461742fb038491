package show

import (
	"driploop/rules"
)

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
