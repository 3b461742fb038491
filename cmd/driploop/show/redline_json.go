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

// amounts are two quantities in one unit, each or m.
func amounts(a, b catalog.Quantity) (x, y float64, unit string) {
	if a.Length != 0 || b.Length != 0 {
		return a.Length.Metres(), b.Length.Metres(), "m"
	}
	return float64(a.Each), float64(b.Each), "each"
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
