package show

import (
	"bytes"
	"encoding/json"
	"fmt"
	"unicode/utf16"
	"unicode/utf8"

	"driploop/rules"
)

// encode writes a value as JSON that ends in a line break. Go's encoder escapes
// what HTML and old parsers stumble over and replaces what is no UTF-8; the rest of
// what Clean escapes is escaped here, for JSON is read on terminals and in logs too.
func encode(v any) ([]byte, error) {
	var b bytes.Buffer
	e := json.NewEncoder(&b)
	e.SetIndent("", " ")
	if err := e.Encode(v); err != nil {
		return nil, err
	}
	return quiet(b.Bytes()), nil
}

// quiet escapes what acts in JSON. All of it can only stand inside strings, where
// the escape means the same.
func quiet(src []byte) []byte {
	out := make([]byte, 0, len(src))
	for len(src) > 0 {
		r, n := utf8.DecodeRune(src)
		switch hash := len(out) > 0 && out[len(out)-1] == '#'; {
		case r > 0xFFFF && acts(r):
			high, low := utf16.EncodeRune(r)
			out = fmt.Appendf(out, `\u%04x\u%04x`, high, low)
		case r >= 0x7F && acts(r), r == '#' && hash:
			out = fmt.Appendf(out, `\u%04x`, r)
		default:
			out = append(out, src[:n]...)
		}
		src = src[n:]
	}
	return out
}

// InspectJSON writes the result of an inspection as the interface describes it.
func InspectJSON(r *rules.Result, version string) ([]byte, error) {
	out := inspectJSON{Tool: "driploop", Version: version, At: r.At, LimitsFrom: r.LimitsFrom, StockFrom: r.StockFrom, Today: r.Today,
		Overrides: orEmpty(r.Overrides), Notices: notices(r), Holds: r.Holds, Punch: r.Punch, Notes: r.Notes,
		Waived: r.Waived, Unknown: r.Unknown}
	out.Workspace.Findings = findingsJSON(r.Workspace)
	out.Plans = []planJSON{}
	for _, p := range r.Plans {
		out.Plans = append(out.Plans, planJSON{Plan: p.Path, Job: p.Job, Stage: p.Stage, Profile: p.Profile, Code: p.Code,
			Runs: runsJSON(p.Runs), Findings: findingsJSON(p.Findings), Cautions: orEmpty(p.Cautions),
			Holds: p.Holds, Punch: p.Punch, Notes: p.Notes, Waived: p.Waived, Unknown: p.Unknown})
	}
	return encode(out)
}

type inspectJSON struct {
	Tool       string   `json:"tool"`
	Version    string   `json:"version"`
	At         string   `json:"at"`
	LimitsFrom string   `json:"limits_from"`
	StockFrom  string   `json:"stock_from"`
	Today      string   `json:"today"`
	Overrides  []string `json:"overrides"`
	Notices    []string `json:"notices"`
	Workspace  struct {
		Findings []findingJSON `json:"findings"`
	} `json:"workspace"`
	Plans   []planJSON `json:"plans"`
	Holds   int        `json:"holds"`
	Punch   int        `json:"punch"`
	Notes   int        `json:"notes"`
	Waived  int        `json:"waived"`
	Unknown int        `json:"not_assessed"`
}

type planJSON struct {
	Plan     string        `json:"plan"`
	Job      string        `json:"job"`
	Stage    string        `json:"stage"`
	Profile  string        `json:"profile"`
	Code     string        `json:"code"`
	Runs     []runJSON     `json:"gain_runs"`
	Findings []findingJSON `json:"findings"`
	Cautions []string      `json:"cautions"`
	Holds    int           `json:"holds"`
	Punch    int           `json:"punch"`
	Notes    int           `json:"notes"`
	Waived   int           `json:"waived"`
	Unknown  int           `json:"not_assessed"`
}

type runJSON struct {
	Device string   `json:"device"`
	Band   string   `json:"band"`
	Up     *float64 `json:"uplink_db"`
	UpBy   string   `json:"uplink_bound_by"`
	Down   *float64 `json:"downlink_db"`
	DownBy string   `json:"downlink_bound_by"`
}

type findingJSON struct {
	Rule    string        `json:"rule"`
	Outcome string        `json:"outcome"`
	Weight  string        `json:"weight"`
	On      string        `json:"on"`
	Band    string        `json:"band,omitempty"`
	File    string        `json:"file"`
	Line    int           `json:"line"`
	Col     int           `json:"col"`
	Says    string        `json:"says"`
	Do      string        `json:"do"`
	Basis   []string      `json:"basis"`
	Figures figures       `json:"figures"`
	Related []relatedJSON `json:"related"`
	Waived  *waivedJSON   `json:"waived"`
}

type relatedJSON struct {
	File string `json:"file"`
	Line int    `json:"line"`
	Col  int    `json:"col"`
	Says string `json:"says"`
}

type waivedJSON struct {
	Because string   `json:"because"`
	By      string   `json:"by"`
	Until   string   `json:"until"`
	UpTo    *float64 `json:"up_to"`
}

// figures keeps the order in which a rule names them, and rounds them.
type figures []rules.Figure

func (fs figures) MarshalJSON() ([]byte, error) {
	var b bytes.Buffer
	b.WriteByte('{')
	for i, f := range fs {
		if i > 0 {
			b.WriteByte(',')
		}
		name, _ := json.Marshal(f.Name)
		value, err := json.Marshal(rules.Round(f.Value))
		if err != nil {
			return nil, err
		}
		b.Write(name)
		b.WriteByte(':')
		b.Write(value)
	}
	b.WriteByte('}')
	return b.Bytes(), nil
}

func findingsJSON(all []*rules.Finding) []findingJSON {
	out := []findingJSON{}
	for _, f := range all {
		j := findingJSON{Rule: f.Rule.Name, Outcome: f.Outcome.String(), Weight: f.Weight.String(), On: f.On, Band: f.Band,
			File: f.At.Path(), Line: f.At.Line(), Col: f.At.Col(), Says: f.Says, Do: f.Do,
			Basis: orEmpty(f.Basis), Figures: f.Figures, Related: []relatedJSON{}}
		for _, r := range f.Related {
			j.Related = append(j.Related, relatedJSON{r.At.Path(), r.At.Line(), r.At.Col(), r.Says})
		}
		if w := f.Waived; w != nil {
			j.Waived = &waivedJSON{Because: w.Because.V, By: w.By.V, Until: w.Until.V.String()}
			if w.UpTo.Set {
				j.Waived.UpTo = &w.UpTo.V
			}
		}
		out = append(out, j)
	}
	return out
}

func runsJSON(runs []rules.Runs) []runJSON {
	out := []runJSON{}
	for _, r := range runs {
		out = append(out, runJSON{r.Device, r.Band, figure(r.Up.Gain, r.Up.On), r.Up.By, figure(r.Down.Gain, r.Down.On), r.Down.By})
	}
	return out
}

func orEmpty(s []string) []string {
	if s == nil {
		return []string{}
	}
	return s
}
