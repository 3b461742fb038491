package show

import (
	"encoding/json"
	"strings"

	"driploop/bom"
	"driploop/catalog"
)

type purchaseJSON struct {
	At         string            `json:"at"`
	LimitsFrom string            `json:"limits_from"`
	StockFrom  string            `json:"stock_from"`
	Today      string            `json:"today"`
	Until      string            `json:"until"`
	Rows       []buyJSON         `json:"rows"`
	Freight    map[string]string `json:"freight"`
	Total      string            `json:"total"`
	Bound      string            `json:"bound"`
	Proved     bool              `json:"proved"`
	Unsourced  []unsourcedJSON   `json:"unsourced"`
	Later      []laterJSON       `json:"later"`
	Waiting    []waitingJSON     `json:"waiting"`
	Moves      []levelMoveJSON   `json:"moves"`
	Swaps      []swapJSON        `json:"swaps"`
	Gaps       []gapJSON         `json:"not_counted"`
	Broken     []string          `json:"broken"`
}

// buyJSON is one order line. Quantities are pieces, or metres of cut stock. need,
// shelf and inbound are of the part in all, also where several rows bring it; for and
// keep are of this row.
type buyJSON struct {
	Part    string                 `json:"part"`
	Vendor  string                 `json:"vendor"`
	Code    string                 `json:"code"`
	Packs   int                    `json:"packs"`
	Pack    json.Number            `json:"pack"`
	Unit    string                 `json:"unit"`
	Price   string                 `json:"price"`
	Cost    string                 `json:"cost"`
	Need    json.Number            `json:"need"`
	Shelf   json.Number            `json:"shelf"`
	Inbound json.Number            `json:"inbound"`
	For     map[string]json.Number `json:"for"`
	Keep    json.Number            `json:"keep"`
	OrderBy string                 `json:"order_by"`
	Needed  string                 `json:"needed"`
	Arrives string                 `json:"arrives"`
	Late    []string               `json:"late"`
	Length  bool                   `json:"cut_to_length,omitempty"`
	Brings  map[string]int         `json:"brings,omitempty"`
	Also    []alsoJSON             `json:"also,omitempty"`
}

// alsoJSON is what a box brings beside its first part.
type alsoJSON struct {
	Part    string                 `json:"part"`
	Need    json.Number            `json:"need"`
	Shelf   json.Number            `json:"shelf"`
	Inbound json.Number            `json:"inbound"`
	For     map[string]json.Number `json:"for"`
	Keep    json.Number            `json:"keep"`
}

type unsourcedJSON struct {
	Part string                 `json:"part"`
	Need json.Number            `json:"need"`
	For  map[string]json.Number `json:"for"`
	Keep bool                   `json:"keep"`
	Why  string                 `json:"why"`
}

type laterJSON struct {
	Part   string      `json:"part"`
	Job    string      `json:"job"`
	Need   json.Number `json:"need"`
	Needed string      `json:"needed"`
}

type waitingJSON struct {
	Part   string      `json:"part"`
	Job    string      `json:"job"`
	Need   json.Number `json:"need"`
	Needed string      `json:"needed"`
	Order  string      `json:"order"`
	Day    string      `json:"day"`
}

type swapJSON struct {
	Job  string `json:"job"`
	From string `json:"from"`
	To   string `json:"to"`
}

type gapJSON struct {
	Job  string `json:"job"`
	On   string `json:"on"`
	Says string `json:"says"`
	Line int    `json:"line"`
}

func gapsJSON(gaps []JobGap) []gapJSON {
	out := []gapJSON{}
	for _, g := range gaps {
		out = append(out, gapJSON{g.Job, g.On, g.Says, g.At.Line()})
	}
	return out
}

// JSON writes the purchase as the interface describes it.
func (b *Buying) JSON() ([]byte, error) {
	out := purchaseJSON{At: b.At, LimitsFrom: b.LimitsFrom, StockFrom: b.StockFrom, Today: b.Today.String(), Until: b.Until.String(), Rows: []buyJSON{}, Freight: map[string]string{},
		Total: b.Total.String(), Bound: b.Bound.String(), Proved: b.Proved, Unsourced: unsourcedsJSON(b.Unsourced), Later: latersJSON(b.Later),
		Waiting: waitingsJSON(b.Waiting), Moves: movesJSON(b.Moves), Swaps: []swapJSON{}, Gaps: gapsJSON(b.Gaps), Broken: append([]string{}, b.Broken...)}
	for _, r := range b.Rows {
		out.Rows = append(out.Rows, rowJSON(r))
	}
	for _, f := range b.Freight {
		out.Freight[f.Vendor.ID] = f.Amount.String()
	}
	for _, s := range b.Swaps {
		out.Swaps = append(out.Swaps, swapJSON(s))
	}
	return encode(out)
}

func rowJSON(r *bom.BuyRow) buyJSON {
	first := r.Parts[0]
	j := buyJSON{Part: first.Part.ID, Vendor: r.Vendor.ID, Code: r.Offer.Code.V, Packs: r.Packs, Pack: quantityNumber(r.Pack.Quantity(1)), Unit: "each",
		Price: r.Price.String(), Cost: r.Cost.String(), Need: quantityNumber(first.Need), Shelf: quantityNumber(first.Shelf), Inbound: quantityNumber(first.Inbound),
		For: servesJSON(first.For), Keep: quantityNumber(first.Keep), OrderBy: r.OrderBy.String(), Needed: r.Needed.String(), Arrives: r.Arrives.String(),
		Late: []string{}, Length: r.Offer.ToLength()}
	if first.Part.CutStock() {
		j.Unit = "m"
	}
	for _, l := range r.Late {
		j.Late = append(j.Late, l.Job)
	}
	for _, p := range r.Offer.Brings {
		if j.Brings == nil {
			j.Brings = map[string]int{}
		}
		j.Brings[p.Name] += p.Val.V
	}
	for _, p := range r.Parts[1:] {
		j.Also = append(j.Also, alsoJSON{p.Part.ID, quantityNumber(p.Need), quantityNumber(p.Shelf), quantityNumber(p.Inbound), servesJSON(p.For), quantityNumber(p.Keep)})
	}
	return j
}

func servesJSON(list []bom.Serves) map[string]json.Number {
	out := map[string]json.Number{}
	for _, s := range list {
		out[s.Job] = quantityNumber(s.Qty)
	}
	return out
}

func unsourcedsJSON(list []bom.Unsourced) []unsourcedJSON {
	out := []unsourcedJSON{}
	for _, u := range list {
		out = append(out, unsourcedJSON{u.Part, quantityNumber(u.Qty), servesJSON(u.Jobs), u.Keep, u.Why})
	}
	return out
}

func latersJSON(list []bom.Later) []laterJSON {
	out := []laterJSON{}
	for _, l := range list {
		out = append(out, laterJSON{l.Part.ID, l.Job, quantityNumber(l.Qty), l.Needed.String()})
	}
	return out
}

// levelMoveJSON is what fills a reorder level without being bought.
type levelMoveJSON struct {
	Part string `json:"part"`
	From string `json:"from"`
	To   string `json:"to"`
	Qty  int    `json:"qty"`
}

func movesJSON(list []bom.LevelMove) []levelMoveJSON {
	out := []levelMoveJSON{}
	for _, m := range list {
		out = append(out, levelMoveJSON{m.Part.ID, m.From.Name(), m.Keep.Shelf.V, m.Each})
	}
	return out
}

func waitingsJSON(list []bom.Waiting) []waitingJSON {
	out := []waitingJSON{}
	for _, w := range list {
		out = append(out, waitingJSON{w.Part.ID, w.Job, quantityNumber(w.Qty), w.Needed.String(), w.Order, w.Day.String()})
	}
	return out
}

// CSV writes a row for each order line, then one for the freight of each vendor, then what
// nobody sells, without a vendor.
func (b *Buying) CSV() ([]byte, error) {
	rows := [][]Cell{{"vendor", "code", "part", "packs", "pack", "unit", "price", "cost", "need", "shelf", "inbound", "for", "keep", "needed", "order_by", "arrives", "late"}}
	for _, r := range b.Rows {
		j := rowJSON(r)
		var of []string
		for _, p := range r.Parts {
			for _, s := range p.For {
				of = append(of, s.Job+" "+numberOf(s.Qty))
			}
		}
		rows = append(rows, []Cell{CellOf(j.Vendor), CellOf(j.Code), CellOf(rowName(r)), Cell(number(r.Packs, 0)), Cell(j.Pack), Cell(j.Unit), Cell(j.Price), Cell(j.Cost),
			Cell(j.Need), Cell(j.Shelf), Cell(j.Inbound), CellOf(strings.Join(of, "; ")), Cell(j.Keep), Cell(j.Needed), Cell(j.OrderBy), Cell(j.Arrives), CellOf(strings.Join(j.Late, "; "))})
	}
	blank := func(vendor, code, part, cost, need, of Cell) []Cell {
		return []Cell{vendor, code, part, "", "", "", "", cost, need, "", "", of, "", "", "", "", ""}
	}
	for _, f := range b.Freight {
		rows = append(rows, blank(CellOf(f.Vendor.ID), "freight", "", Cell(f.Amount.String()), "", ""))
	}
	for _, u := range b.Unsourced {
		rows = append(rows, blank("", CellOf(u.Why), CellOf(u.Part), "", Cell(numberOf(u.Qty)), ""))
	}
	for _, p := range b.Broken {
		rows = append(rows, blank("", "not counted: the file cannot be read whole", "", "", "", CellOf(p)))
	}
	return csvOf(rows)
}

func numberOf(q catalog.Quantity) string { return string(quantityNumber(q)) }
