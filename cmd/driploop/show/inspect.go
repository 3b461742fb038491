package show

import (
	"fmt"
	"slices"
	"sort"
	"strings"
	"unicode/utf8"

	"driploop/catalog/unit"
	"driploop/rules"
)

// InspectText writes the result of an inspection for a phone in a van and a log
// in a review: the verdict first, then what is worst, each finding a block of its
// own with a tag that people can call out to each other.
func InspectText(r *rules.Result, page Page, quiet bool) []byte {
	s := &sheet{page: page}
	t := &inspectText{sheet: s, quiet: quiet}
	t.summary(r)
	t.workspace(r)
	for _, p := range worstFirst(r.Plans) {
		t.plan(p)
	}
	t.foot(r)
	return []byte(strings.TrimRight(s.b.String(), "\n") + "\n")
}

type inspectText struct {
	*sheet
	quiet bool
}

// worstFirst orders plans by what stands against them, then by path.
func worstFirst(plans []*rules.PlanResult) []*rules.PlanResult {
	out := append([]*rules.PlanResult(nil), plans...)
	sort.SliceStable(out, func(i, j int) bool {
		a, b := out[i], out[j]
		switch {
		case a.Holds != b.Holds:
			return a.Holds > b.Holds
		case a.Punch != b.Punch:
			return a.Punch > b.Punch
		}
		return a.Path < b.Path
	})
	return out
}

// summary is the verdict over all plans, where there is more than one.
func (t *inspectText) summary(r *rules.Result) {
	if len(r.Plans) == 1 {
		return
	}
	held := 0
	for _, p := range r.Plans {
		if p.Holds > 0 {
			held++
		}
	}
	switch {
	case len(r.Plans) == 0:
		t.line(0, strong, "No plan to look at.")
	case held == 0:
		t.para("", strong, Terms("%s, and nothing holds work up on any of them.", words(len(r.Plans), "plan", "plans")))
	default:
		t.para("", stop, Terms("%s, and work must not go on with %d of them.", words(len(r.Plans), "plan", "plans"), held))
	}
	for _, p := range worstFirst(r.Plans) {
		how := plain
		if p.Holds > 0 {
			how = strong
		}
		t.hang("  ", plain, 4, how, Terms("%s: %s", p.Job, tally(p.Counts)))
	}
	t.gap()
}

// tally is "6 holds, 4 punch, 3 notes; 2 not assessed, 1 accepted by waiver".
func tally(n rules.Counts) string {
	out := fmt.Sprintf("%s, %d punch, %s", words(n.Holds, "hold", "holds"), n.Punch, words(n.Notes, "note", "notes"))
	var more []string
	if n.Unknown > 0 {
		more = append(more, fmt.Sprintf("%d not assessed", n.Unknown))
	}
	if n.Waived > 0 {
		more = append(more, fmt.Sprintf("%d accepted by waiver", n.Waived))
	}
	if len(more) > 0 {
		out += "; " + strings.Join(more, ", ")
	}
	return out
}

func words(n int, one, many string) string {
	if n == 1 {
		return "1 " + one
	}
	return fmt.Sprint(n) + " " + many
}

func (t *inspectText) workspace(r *rules.Result) {
	held := slices.ContainsFunc(r.Workspace, func(f *rules.Finding) bool { return letterOf(f) == "H" })
	if len(r.Workspace) == 0 || t.quiet && !held {
		return
	}
	t.line(0, strong, "THE WORKSPACE'S OWN FILES")
	t.findings(r.Workspace, "")
	t.gap()
}

func (t *inspectText) plan(p *rules.PlanResult) {
	title := p.Job
	if p.Title != "" && p.Title != p.Job {
		title += " · " + p.Title
	}
	t.para("", strong, Clean(title))
	if p.Holds > 0 {
		t.para("", stop, Terms("Work must not go on: %s.", tally(p.Counts)))
	} else {
		t.para("", fine, Terms("Nothing holds work up: %s.", tally(p.Counts)))
	}
	t.para("", faint, Terms("%s, stage %s, limits %s, code %s", p.Path, or(p.Stage, "unknown"), or(p.Profile, "none named"), or(p.Code, "none named")))
	if runs := gainWords(p.Runs); runs != "" {
		t.para("", faint, Clean(runs))
	}
	t.gap()
	t.findings(p.Findings, p.Path)
	if !t.quiet {
		t.cautions(p.Cautions)
	}
}

func or(s, other string) string {
	if s == "" {
		return other
	}
	return s
}

// gainWords is the gain that runs per band: "gain that runs, up/down in dB: B12
// 61.0/55.0 (set/isolation)"; with the amplifier's name where there are several.
func gainWords(runs []rules.Runs) string {
	byDevice := map[string][]string{}
	var devices []string
	for _, r := range runs {
		if byDevice[r.Device] == nil {
			devices = append(devices, r.Device)
		}
		byDevice[r.Device] = append(byDevice[r.Device], r.Band+" "+bothWays(r.Up, r.Down))
	}
	var out []string
	for _, d := range devices {
		text := strings.Join(byDevice[d], ", ")
		if len(devices) > 1 {
			text = d + " " + text
		}
		out = append(out, text)
	}
	if len(out) == 0 {
		return ""
	}
	return "gain that runs, up/down in dB: " + strings.Join(out, "; ")
}

// bothWays is the gain up and down and what binds each: "61.0/55.0 (set/isolation)".
func bothWays(up, down rules.RunsAt) string {
	switch {
	case up.By == "" && down.By == "":
		return "not assessed"
	case up.By == down.By:
		return fmt.Sprintf("%s/%s (%s)", gainOr(up), gainOr(down), up.By)
	}
	return fmt.Sprintf("%s/%s (%s/%s)", gainOr(up), gainOr(down), or(up.By, "?"), or(down.By, "?"))
}

func gainOr(r rules.RunsAt) string {
	switch {
	case r.By == "":
		return "?"
	case !r.On:
		return "off"
	}
	return unit.Fixed(r.Gain, 1)
}

// findings writes one block for each matter, worst first.
func (t *inspectText) findings(all []*rules.Finding, planPath string) {
	n := map[string]int{}
	for _, m := range matters(all) {
		letter := letterOf(m.worst)
		from := n[letter] + 1
		n[letter] += 1 + len(m.others)
		if t.quiet && letter != "H" {
			continue
		}
		tag := fmt.Sprintf("%s%d", letter, from)
		if len(m.others) > 0 {
			tag += fmt.Sprintf("–%d", n[letter])
		}
		t.finding(m, tag, planPath)
	}
}

// rank puts holds before punch before notes, and what a waiver accepts last.
func rank(f *rules.Finding) int {
	if f.Waived != nil {
		return 0
	}
	return int(f.Weight)
}

// letterOf is the letter of a finding's tag: hold, punch, note, or accepted.
func letterOf(f *rules.Finding) string {
	switch {
	case f.Waived != nil:
		return "A"
	case f.Weight == rules.Hold:
		return "H"
	case f.Weight == rules.Punch:
		return "P"
	}
	return "N"
}

func (t *inspectText) finding(m matter, tag, planPath string) {
	f, how := m.worst, plain
	switch letterOf(f) {
	case "H":
		how = stop
	case "P":
		how = mend
	}
	lead := tag + strings.Repeat(" ", max(1, 5-utf8.RuneCountInString(tag)))
	t.hang(Clean(lead), how, 5, strong, Clean(heading(f, planPath)))
	t.para("     ", plain, Clean(f.Says+"."))
	if also := m.also(); also != "" {
		t.para("     ", plain, Clean(also))
	}
	if f.Do != "" {
		t.hang("  do ", mend, 5, plain, Clean(f.Do+ending(f.Do)))
	}
	if w := f.Waived; w != nil {
		t.hang("     ", plain, 5, plain, Clean(acceptance(w)))
	}
	for _, rel := range f.Related {
		if f.Lacks != "" {
			break // the lack is named already
		}
		t.hang("     ", plain, 5, faint, Clean(rel.Says+": "+where(rel.At.Path(), rel.At.Line(), planPath)))
	}
	t.hang("     ", plain, 5, faint, Clean(f.Rule.Name+"; "+strings.Join(f.Basis, "; ")))
	t.gap()
}

func ending(s string) string {
	if strings.HasSuffix(s, "?") || strings.HasSuffix(s, ".") {
		return ""
	}
	return "."
}

func by(w *rules.Settled) string {
	out := ""
	if w.By.Set {
		out += " by " + w.By.V
	}
	if w.Until.Set {
		out += " until " + w.Until.V.String()
	}
	return out
}

// heading says what a finding stands on and where that is written.
func heading(f *rules.Finding, planPath string) string {
	on := thing(f)
	if f.Outcome == rules.Unknown {
		on += ", not assessed"
	}
	return on + " — " + where(f.At.Path(), f.At.Line(), planPath)
}

// onWords is what a finding stands on: "cable C1".
func onWords(on string) string {
	kind, name, _ := strings.Cut(on, ".")
	if name == "" {
		return kind
	}
	return kind + " " + name
}

// where is a line of the plan at hand, or a file and its line.
func where(path string, line int, planPath string) string {
	switch {
	case path == planPath && line > 0:
		return fmt.Sprintf("line %d", line)
	case line > 0:
		return fmt.Sprintf("%s, line %d", path, line)
	}
	return path
}

func (t *inspectText) cautions(list []string) {
	if len(list) == 0 {
		return
	}
	t.line(0, strong, "Mind")
	for _, c := range list {
		t.hang("   · ", plain, 5, plain, Clean(c))
	}
	t.gap()
}

// foot says what the result was made from.
func (t *inspectText) foot(r *rules.Result) {
	if t.quiet {
		return
	}
	for _, o := range r.Overrides {
		t.hang("changed here: ", plain, 4, plain, Clean(o))
	}
	for _, d := range r.Differs {
		t.hang("rulers: ", plain, 4, plain, Clean(d))
	}
	for _, n := range r.Notices {
		t.hang("left out: ", plain, 4, plain, Clean(n))
	}
	t.para("", faint, Terms("%s The tool holds the plan against the limits it was given; it does not say that an install may go up.", lookedAt(r.Origin, r.Today)))
}

func treeName(at string) string {
	switch at {
	case "worktree":
		return "the files as they are"
	case ":index":
		return "what is staged"
	}
	return "revision " + at
}
