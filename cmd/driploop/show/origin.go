package show

import (
	"sort"

	"driploop/rules"
)

// madeFrom names the files that a result was made from: "the files as they are, with
// the limits of revision main".
func madeFrom(o rules.Origin) string { return treeName(o.At) + borrowed(o) }

// lookedAt says from what and for which day a result was made.
func lookedAt(o rules.Origin, today string) string {
	return "Looked at " + treeName(o.At) + " on " + today + borrowed(o) + "."
}

// borrowed says what was taken from other trees, "" where nothing was.
func borrowed(o rules.Origin) string {
	limits, stock := o.LimitsFrom != o.At, o.StockFrom != o.At
	switch {
	case limits && stock && o.LimitsFrom == o.StockFrom:
		return ", with the limits and the stock of " + treeName(o.LimitsFrom)
	case limits && stock:
		return ", with the limits of " + treeName(o.LimitsFrom) + " and the stock of " + treeName(o.StockFrom)
	case limits:
		return ", with the limits of " + treeName(o.LimitsFrom)
	case stock:
		return ", with the stock of " + treeName(o.StockFrom)
	}
	return ""
}

// notices are what a reader of a result must know of what it was made from.
func notices(r *rules.Result) []string {
	return append(append([]string{}, r.Differs...), r.Notices...)
}

// about lists what a result was made from, for forms that state it by name.
func about(r *rules.Result) []Item {
	out := []Item{{"revision", r.At}, {"limits_from", r.LimitsFrom}, {"stock_from", r.StockFrom}, {"today", r.Today}}
	for _, p := range named(r.Plans, func(p *rules.PlanResult) string { return p.Profile }) {
		out = append(out, Item{"profile", p})
	}
	for _, c := range named(r.Plans, func(p *rules.PlanResult) string { return p.Code }) {
		out = append(out, Item{"code", c})
	}
	for _, o := range r.Overrides {
		out = append(out, Item{"override", o})
	}
	for _, n := range notices(r) {
		out = append(out, Item{"notice", n})
	}
	return out
}

// named lists what plans name, each once, in alphabetical order.
func named(plans []*rules.PlanResult, of func(*rules.PlanResult) string) []string {
	seen, out := map[string]bool{"": true}, []string{}
	for _, p := range plans {
		if name := of(p); !seen[name] {
			seen[name] = true
			out = append(out, name)
		}
	}
	sort.Strings(out)
	return out
}

// listed is a finding with the plan that it stands on, nil on the workspace's own
// files.
type listed struct {
	*rules.Finding
	plan *rules.PlanResult
}

// path is the file that a finding is shown in; one without a place is shown in its
// plan, or where the workspace begins.
func (l listed) path() string {
	switch {
	case l.At.Path() != "":
		return l.At.Path()
	case l.plan != nil:
		return l.plan.Path
	}
	return rules.WorkspaceFile
}

// job names the plan, "" for the workspace's own files.
func (l listed) job() string {
	if l.plan == nil {
		return ""
	}
	return l.plan.Job
}

// allWorstFirst lists all findings of a result: holds, punch, notes, and what waivers
// accept; each of them by file and place, as the result has them.
func allWorstFirst(r *rules.Result) []listed {
	var out []listed
	for _, f := range r.Workspace {
		out = append(out, listed{f, nil})
	}
	for _, p := range r.Plans {
		for _, f := range p.Findings {
			out = append(out, listed{f, p})
		}
	}
	sort.SliceStable(out, func(i, j int) bool {
		if a, b := rank(out[i].Finding), rank(out[j].Finding); a != b {
			return a > b
		}
		return out[i].path() < out[j].path()
	})
	return out
}

// acceptance says who accepts a finding, until when and why.
func acceptance(w *rules.Settled) string { return "accepted" + by(w) + ": " + w.Because.V }

// thing is what a finding stands on, in words: "cable C1, B12".
func thing(f *rules.Finding) string {
	out := onWords(f.On)
	if f.Band != "" {
		out += ", " + f.Band
	}
	return out
}
