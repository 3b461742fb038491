package show

import (
	"encoding/json"
	"fmt"
	"strconv"
	"strings"
	"unicode/utf8"

	"driploop/bom"
	"driploop/catalog/unit"
	"driploop/rules"
)

// Takeoff is what plans take, ready to be shown.
type Takeoff struct {
	Rows []*bom.Total
	Gaps []JobGap
	Feet bool // lengths are printed in feet

	From      rules.Origin // the allowance for cutting is one of the limits
	Today     string
	Overrides []string
}

// JobGap is something of a job that could not be counted.
type JobGap struct {
	Job string
	bom.Gap
}

// Text writes the takeoff as a table, and as blocks on a narrow page.
func (t *Takeoff) Text(page Page) ([]byte, error) {
	s := &sheet{page: page}
	if len(t.Rows) == 0 {
		s.line(0, strong, "These plans take nothing.")
	} else if page.Width < 72 {
		t.blocks(s)
	} else if err := t.table(s); err != nil {
		return nil, err
	}
	if len(t.Gaps) > 0 {
		s.gap()
		s.para("", stop, Terms("Not counted: %s.", words(len(t.Gaps), "thing", "things")))
		for _, g := range t.Gaps {
			s.hang("  · ", plain, 4, plain, Terms("%s, %s: %s (line %d).", g.Job, strings.Replace(g.On, ".", " ", 1), g.Says, g.At.Line()))
		}
	}
	if t.From.LimitsFrom != t.From.At {
		s.gap()
		s.para("", faint, Clean(t.madeFrom()))
		for _, d := range t.From.Differs {
			s.hang("rulers: ", plain, 4, plain, Clean(d))
		}
	}
	return []byte(s.b.String()), nil
}

func (t *Takeoff) table(s *sheet) error {
	columns := []column{{"part", false}, {"kind", false}, {"to bring", true}, {"installed", true}, {"for", false}}
	var rows [][]Term
	for _, r := range t.Rows {
		rows = append(rows, []Term{Clean(r.Part.ID), Clean(r.Part.Kind.V), Clean(t.qty(r.Each, r.Length)), Clean(t.installed(r)), Clean(t.jobs(r))})
	}
	text, err := table(0, columns, wrapLast(columns, rows, s.page.Width))
	if err != nil {
		return err
	}
	s.b.WriteString(string(text))
	return nil
}

// wrapLast breaks the last cell of each row so that the table fits a page; what does
// not fit goes on in the rows below.
func wrapLast(columns []column, rows [][]Term, width int) [][]Term {
	last := len(columns) - 1
	for i, c := range columns[:last] {
		widest := utf8.RuneCountInString(c.title)
		for _, r := range rows {
			widest = max(widest, utf8.RuneCountInString(string(r[i])))
		}
		width -= widest + 2
	}
	var out [][]Term
	for _, r := range rows {
		for i, part := range wrap(string(r[last]), max(width, 16), max(width, 16)) {
			row := make([]Term, len(columns))
			if i == 0 {
				copy(row, r)
			}
			row[last] = Term(part)
			out = append(out, row)
		}
	}
	return out
}

func (t *Takeoff) blocks(s *sheet) {
	for _, r := range t.Rows {
		s.para("", strong, Terms("%s  %s", t.qty(r.Each, r.Length), r.Part.ID))
		s.para("   ", plain, Terms("%s; %s", r.Part.Kind.V, t.jobs(r)))
	}
}

// qty prints what is to be brought: pieces, or a length with its cuts.
func (t *Takeoff) qty(each int, length unit.MM) string {
	if length > 0 {
		return t.length(length)
	}
	return strconv.Itoa(each)
}

func (t *Takeoff) length(l unit.MM) string {
	if t.Feet {
		return unit.Fixed(l.Feet(), 1) + " ft"
	}
	return unit.Fixed(l.Metres(), 1) + " m"
}

func (t *Takeoff) installed(r *bom.Total) string {
	if r.Length == 0 {
		return ""
	}
	return t.length(r.Bare)
}

func (t *Takeoff) jobs(r *bom.Total) string {
	if len(r.Jobs) == 1 {
		return r.Jobs[0].Job
	}
	var out []string
	for _, j := range r.Jobs {
		out = append(out, fmt.Sprintf("%s %s", j.Job, t.qty(j.Each, j.Length)))
	}
	return strings.Join(out, ", ")
}

// JSON writes the takeoff as the interface describes it; lengths are in metres.
func (t *Takeoff) JSON() ([]byte, error) {
	type piece struct {
		Line      string `json:"line"`
		CutMM     int64  `json:"cut_mm"`
		InstallMM int64  `json:"installed_mm"`
	}
	type row struct {
		Part      string             `json:"part"`
		Kind      string             `json:"kind"`
		Qty       json.Number        `json:"qty"`
		Unit      string             `json:"unit"`
		Installed *json.Number       `json:"installed,omitempty"`
		Plans     map[string]any     `json:"plans"`
		Pieces    map[string][]piece `json:"pieces,omitempty"`
	}
	type gap struct {
		Job  string `json:"job"`
		On   string `json:"on"`
		Says string `json:"says"`
		Line int    `json:"line"`
	}
	out := struct {
		At         string   `json:"at"`
		LimitsFrom string   `json:"limits_from"`
		StockFrom  string   `json:"stock_from"`
		Today      string   `json:"today"`
		Overrides  []string `json:"overrides"`
		Notices    []string `json:"notices"`
		Rows       []row    `json:"rows"`
		Gaps       []gap    `json:"not_counted"`
	}{t.From.At, t.From.LimitsFrom, t.From.StockFrom, t.Today, orEmpty(t.Overrides), orEmpty(t.From.Differs), []row{}, []gap{}}
	for _, r := range t.Rows {
		j := row{Part: r.Part.ID, Kind: r.Part.Kind.V, Unit: "each", Qty: number(r.Each, r.Length), Plans: map[string]any{}}
		for _, s := range r.Jobs {
			j.Plans[s.Job] = number(s.Each, s.Length)
		}
		if r.Length > 0 {
			j.Unit = "m"
			bare := number(0, r.Bare)
			j.Installed, j.Pieces = &bare, map[string][]piece{}
			for _, s := range r.Jobs {
				for _, p := range s.Pieces {
					j.Pieces[s.Job] = append(j.Pieces[s.Job], piece{p.Line, int64(p.Length), int64(p.Bare)})
				}
			}
		}
		out.Rows = append(out.Rows, j)
	}
	for _, g := range t.Gaps {
		out.Gaps = append(out.Gaps, gap{g.Job, g.On, g.Says, g.At.Line()})
	}
	return encode(out)
}

// number is a count, or metres to the millimetre.
func number(each int, length unit.MM) json.Number {
	if length > 0 {
		return json.Number(strconv.FormatFloat(length.Metres(), 'f', -1, 64))
	}
	return json.Number(strconv.Itoa(each))
}

// CSV writes one row for each part and job; lengths are in metres. What could not
// be counted stands at the end with an empty quantity, so that it is not missed; so
// does where the limits came from, if not from the workspace itself.
func (t *Takeoff) CSV() ([]byte, error) {
	rows := [][]Cell{{"part", "kind", "name", "qty", "unit", "installed_m", "job"}}
	for _, r := range t.Rows {
		for _, s := range r.Jobs {
			u, installed := Cell("each"), Cell("")
			if s.Length > 0 {
				var bare unit.MM
				for _, p := range s.Pieces {
					bare += p.Bare
				}
				u, installed = "m", Cell(number(0, bare))
			}
			rows = append(rows, []Cell{CellOf(r.Part.ID), Cell(r.Part.Kind.V), CellOf(r.Part.Name.V), Cell(number(s.Each, s.Length)), u, installed, CellOf(s.Job)})
		}
	}
	for _, g := range t.Gaps {
		rows = append(rows, []Cell{"", "", CellOf(g.On + ": " + g.Says), "", "not counted", "", CellOf(g.Job)})
	}
	if t.From.LimitsFrom != t.From.At {
		for _, says := range append([]string{t.madeFrom()}, t.From.Differs...) {
			rows = append(rows, []Cell{"", "", CellOf(says), "", "made from", "", ""})
		}
	}
	return csvOf(rows)
}
