package show

import (
	"encoding/json"

	"driploop/bom"
	"driploop/catalog"
)

type pickJSON struct {
	Job        string           `json:"job"`
	Title      string           `json:"title"`
	At         string           `json:"at"`
	LimitsFrom string           `json:"limits_from"`
	StockFrom  string           `json:"stock_from"`
	Today      string           `json:"today"`
	Stage      string           `json:"stage"`
	Crew       string           `json:"crew"`
	Install    string           `json:"install_on"`
	Needed     string           `json:"needed"`
	Tools      []pickToolJSON   `json:"tools"`
	Bins       []pickBinJSON    `json:"bins"`
	Reels      []pickReelJSON   `json:"reels"`
	Loose      []pickGivenJSON  `json:"not_booked"`
	Short      []shortJSON      `json:"short"`
	Coming     []pickComingJSON `json:"coming"`
	Given      []pickGivenJSON  `json:"given"`
	Labels     []pickLabelJSON  `json:"labels"`
}

type pickToolJSON struct {
	Name string   `json:"name"`
	For  []string `json:"for"`
	Has  bool     `json:"crew_has"`
}

type pickBinJSON struct {
	Where      string `json:"where"`
	Part       string `json:"part"`
	Qty        int    `json:"qty"`
	CountFirst bool   `json:"count_first"`
}

type pickReelJSON struct {
	Where      string        `json:"where"`
	Tag        string        `json:"tag"`
	Part       string        `json:"part"`
	OnReel     int64         `json:"on_reel_mm"`
	How        string        `json:"how"`
	CountFirst bool          `json:"count_first"`
	Cuts       []pickCutJSON `json:"cuts"`
	Left       int64         `json:"left_mm"`
	Usable     bool          `json:"usable"`
}

type pickCutJSON struct {
	Line      string `json:"line"`
	CutMM     int64  `json:"cut_mm"`
	InstallMM int64  `json:"installed_mm"`
}

type pickComingJSON struct {
	Part    string      `json:"part"`
	Qty     json.Number `json:"qty"`
	Line    string      `json:"line,omitempty"`
	Order   string      `json:"order"`
	Day     string      `json:"day"`
	Assumed bool        `json:"assumed"`
}

type pickGivenJSON struct {
	Part string      `json:"part"`
	Qty  json.Number `json:"qty"`
}

type pickLabelJSON struct {
	Line      string `json:"line"`
	Part      string `json:"part"`
	InstallMM int64  `json:"installed_mm"`
	From      string `json:"from"`
	To        string `json:"to"`
}

// JSON writes the pick list; quantities of cut stock are in metres.
func (p *Pick) JSON() ([]byte, error) {
	out := pickJSON{Job: p.Job, Title: p.Title, At: p.At, LimitsFrom: p.LimitsFrom, StockFrom: p.StockFrom, Today: p.Today, Stage: p.Stage, Crew: p.Crew, Install: p.On.String(), Needed: p.Needed.String(),
		Tools: []pickToolJSON{}, Bins: []pickBinJSON{}, Reels: []pickReelJSON{}, Loose: []pickGivenJSON{}, Short: shortsJSON(p.Missing, nil),
		Coming: []pickComingJSON{}, Given: []pickGivenJSON{}, Labels: []pickLabelJSON{}}
	for _, t := range p.Tools {
		out.Tools = append(out.Tools, pickToolJSON{t.Name, t.For, t.Has})
	}
	for _, b := range p.Loose {
		out.Loose = append(out.Loose, pickGivenJSON{b.Part.ID, number(b.Qty, 0)})
	}
	for _, b := range p.Bins {
		out.Bins = append(out.Bins, pickBinJSON{b.Where, b.Part.ID, b.Qty, b.CountFirst})
	}
	for _, r := range p.Reels {
		j := pickReelJSON{Where: r.Where, Tag: r.Tag.ID, Part: r.Part.ID, OnReel: int64(r.Tag.Left), How: r.Tag.How, CountFirst: r.CountFirst,
			Left: int64(r.Left), Usable: r.Usable}
		for _, c := range r.Cuts {
			j.Cuts = append(j.Cuts, pickCutJSON{c.Line, int64(c.Length), int64(c.Bare)})
		}
		out.Reels = append(out.Reels, j)
	}
	for _, c := range p.Coming {
		out.Coming = append(out.Coming, pickComingJSON{Part: c.Part.ID, Qty: holdNumber(c.Hold), Line: c.Piece.Line,
			Order: c.Supply.Name(), Day: c.Supply.Day.String(), Assumed: c.Supply.Assumed})
	}
	for _, is := range p.Given {
		if !is.Net.IsZero() {
			out.Given = append(out.Given, pickGivenJSON{is.Part, quantityNumber(is.Net)})
		}
	}
	for _, l := range p.Labels {
		out.Labels = append(out.Labels, pickLabelJSON{l.Line, l.Part, int64(l.Length), l.From, l.To})
	}
	return encode(out)
}

func holdNumber(h bom.Hold) json.Number { return number(h.Each, h.Piece.Length) }

// quantityNumber is a count, or metres to the millimetre.
func quantityNumber(q catalog.Quantity) json.Number { return number(int(q.Each), q.Length) }
