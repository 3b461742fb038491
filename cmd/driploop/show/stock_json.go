package show

import (
	"encoding/json"

	"driploop/bom"
)

type stockJSON struct {
	At         string                            `json:"at"`
	LimitsFrom string                            `json:"limits_from"`
	StockFrom  string                            `json:"stock_from"`
	Today      string                            `json:"today"`
	Rows       []standingJSON                    `json:"rows"`
	Reels      []reelJSON                        `json:"reels"`
	Claims     map[string]map[string]json.Number `json:"claims"`
	Short      []shortJSON                       `json:"short"`
}

type standingJSON struct {
	Part    string      `json:"part"`
	Where   string      `json:"where"`
	Unit    string      `json:"unit"`
	OnHand  json.Number `json:"on_hand"`
	Inbound json.Number `json:"inbound"`
	Claimed json.Number `json:"claimed"`
	Free    json.Number `json:"free"`
	Longest *int64      `json:"longest_mm,omitempty"`
	Counted string      `json:"counted,omitempty"`
}

type reelJSON struct {
	Tag   string `json:"tag"`
	Part  string `json:"part"`
	Where string `json:"where"`
	Left  int64  `json:"left_mm"`
	Free  int64  `json:"free_mm"`
	How   string `json:"how"`
}

// shortJSON is what a job is short of, who holds the part, and what comes too late.
type shortJSON struct {
	Part   string      `json:"part"`
	Job    string      `json:"job"`
	Qty    json.Number `json:"qty"`
	Lines  []string    `json:"lines,omitempty"`
	Needed string      `json:"needed"`
	HeldBy []string    `json:"held_by"`
	Late   []lateJSON  `json:"late"`
}

type lateJSON struct {
	Order string `json:"order"`
	Day   string `json:"day"`
}

// JSON writes the stock; quantities of cut stock are in metres.
func (s *Stock) JSON() ([]byte, error) {
	out := stockJSON{At: s.At, LimitsFrom: s.LimitsFrom, StockFrom: s.StockFrom, Today: s.Today, Rows: []standingJSON{}, Reels: []reelJSON{}, Claims: map[string]map[string]json.Number{}}
	for _, r := range s.rows() {
		j := standingJSON{Part: r.Part, Where: r.Where, Unit: "each", OnHand: quantityNumber(r.OnHand), Inbound: quantityNumber(r.Inbound),
			Claimed: quantityNumber(r.Claimed), Free: quantityNumber(r.Free), Counted: r.Counted.Day.String()}
		if s.cutStock(r.Part) {
			longest := int64(r.Longest)
			j.Unit, j.Longest = "m", &longest
		}
		out.Rows = append(out.Rows, j)
	}
	for _, r := range s.reels() {
		out.Reels = append(out.Reels, reelJSON{r.ID, r.Part, r.Where, int64(r.Left), int64(r.Free), r.How})
	}
	var short []*bom.Claim
	for _, c := range s.claims() {
		if out.Claims[c.Job()] == nil {
			out.Claims[c.Job()] = map[string]json.Number{}
		}
		out.Claims[c.Job()][c.Part().ID] = quantityNumber(c.Quantity())
		if c.IsShort() {
			short = append(short, c)
		}
	}
	out.Short = shortsJSON(short, s.Allocation)
	return encode(out)
}

// shortsJSON lists shortages; without an allocation nothing is said of who holds the
// part.
func shortsJSON(claims []*bom.Claim, a *bom.Allocation) []shortJSON {
	out := []shortJSON{}
	for _, c := range claims {
		q := c.ShortBy()
		j := shortJSON{Part: c.Part().ID, Job: c.Job(), Qty: quantityNumber(q), Needed: c.Needed.String(), HeldBy: []string{}, Late: []lateJSON{}}
		for _, l := range c.ShortLines {
			j.Lines = append(j.Lines, l.Line)
		}
		if a != nil {
			for h := range a.HeldBy(c) {
				j.HeldBy = append(j.HeldBy, h.Job())
			}
		}
		for _, h := range c.Late {
			j.Late = append(j.Late, lateJSON{h.Supply.Name(), h.Supply.Day.String()})
		}
		out = append(out, j)
	}
	return out
}
