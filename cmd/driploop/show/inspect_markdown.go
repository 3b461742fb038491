package show

import (
	"fmt"
	"slices"
	"strings"

	"driploop/rules"
)

// MostMarkdown is how long a report in Markdown gets, in bytes: code hosts refuse a
// comment of more than 65,536 characters.
const MostMarkdown = 65000

// What the parts of a report may take of it at most, in bytes, and a single text in
// characters. What is cut is counted.
const (
	mostAbout   = 8000
	mostTable   = 12000
	mostCaution = 8000
	mostText    = 600
	mostName    = 100
)

// InspectMarkdown writes the result of an inspection for the summary of a build or a
// comment: the verdict, what it was made from, the plans worst first with their holds,
// and all else folded away. It is never longer than MostMarkdown.
func InspectMarkdown(r *rules.Result, quiet bool) []byte {
	m := &inspectMD{room: MostMarkdown}
	m.add("## " + string(Prose(verdict(r))) + "\n")
	m.about(r)
	m.table(r)
	m.sections(r, quiet)
	return []byte(m.b.String())
}

// inspectMD collects Markdown while there is room.
type inspectMD struct {
	b    strings.Builder
	room int
}

func (m *inspectMD) add(s string) {
	m.b.WriteString(s)
	m.room -= len(s)
}

// list adds lines up to a length, and how many there are more.
func (m *inspectMD) list(lines []string, most int) {
	for i, l := range lines {
		if most -= len(l); most < 0 {
			m.add(fmt.Sprintf("- and %d more\n", len(lines)-i))
			return
		}
		m.add(l)
	}
}

// about says what the report was made from.
func (m *inspectMD) about(r *rules.Result) {
	m.add("\n" + string(Prose(clip(lookedAt(r.Origin, r.Today), mostText))) +
		" The tool holds plans against the limits it was given; it does not say that an install may go up.\n")
	var lines []string
	for _, g := range []struct {
		lead string
		says []string
	}{{"changed here", r.Overrides}, {"rulers", r.Differs}, {"left out", r.Notices}} {
		for _, s := range g.says {
			lines = append(lines, "- "+g.lead+": "+string(Prose(clip(s, mostText)))+"\n")
		}
	}
	if len(lines) > 0 {
		m.add("\n")
		m.list(lines, mostAbout)
	}
}

// table has a row for each plan, worst first.
func (m *inspectMD) table(r *rules.Result) {
	g := &Grid{Words: 4, Columns: []string{"plan", "stage", "limits", "code", "holds", "punch", "notes", "not assessed", "accepted"}}
	used := 0
	for _, p := range worstFirst(r.Plans) {
		row := []string{clip(p.Job, mostName), clip(or(p.Stage, "unknown"), mostName), clip(or(p.Profile, "none named"), mostName), clip(or(p.Code, "none named"), mostName)}
		for _, n := range []int{p.Holds, p.Punch, p.Notes, p.Unknown, p.Waived} {
			row = append(row, fmt.Sprint(n))
		}
		if used += len(rowMD(row)); used > mostTable {
			break
		}
		g.Rows = append(g.Rows, row)
	}
	if len(g.Rows) > 0 {
		m.add(gridMD(g))
	}
	if more := len(r.Plans) - len(g.Rows); more > 0 {
		m.add("\nand " + words(more, "more plan", "more plans") + "\n")
	}
}

// sectionMD is a plan's findings, or those of the workspace's own files.
type sectionMD struct {
	head         string
	holds, rest  []string // a line each
	summary      string   // of what is folded
	cutH, cutR   int      // how many lines did not fit
	shown, folds bool
}

// What a section takes beside its lines: the line about what is cut, and the fold.
const (
	frameCut  = 60
	frameFold = 160
)

// sections are the findings. Holds go before all else: only what they leave is for
// cautions, and what those leave for the rest.
func (m *inspectMD) sections(r *rules.Result, quiet bool) {
	var all []*sectionMD
	if len(r.Workspace) > 0 {
		all = append(all, newSectionMD("The workspace's own files", "", r.Workspace))
	}
	var cautions []string
	for _, p := range worstFirst(r.Plans) {
		all = append(all, newSectionMD(planTitle(p), p.Path, p.Findings))
		for _, c := range p.Cautions {
			if line := "- " + string(Prose(clip(c, mostText))) + "\n"; !slices.Contains(cautions, line) {
				cautions = append(cautions, line)
			}
		}
	}
	room := m.room - frameCut*2
	if !quiet && len(cautions) > 0 {
		room -= frameFold + frameCut + min(mostCaution, total(cautions))
	}
	for _, s := range all {
		room -= s.fitHolds(room)
	}
	left := 0
	for _, s := range all {
		if s.shown && !quiet {
			room -= s.fitRest(room)
		}
		if s.shown {
			m.section(s)
		} else if len(s.holds)+len(s.rest) > 0 {
			left++
		}
	}
	if left > 0 {
		m.add("\nThe findings of " + words(left, "more file", "more files") + " are not shown here.\n")
	}
	if !quiet && len(cautions) > 0 {
		m.fold("Mind", func() { m.list(cautions, mostCaution) })
	}
}

func planTitle(p *rules.PlanResult) string {
	if p.Title != "" && p.Title != p.Job {
		return clip(p.Job, mostName) + " · " + clip(p.Title, mostName)
	}
	return clip(p.Job, mostName)
}

func newSectionMD(title, path string, findings []*rules.Finding) *sectionMD {
	s := &sectionMD{head: "\n### " + string(Prose(title)) + "\n\n"}
	n, count := map[string]int{}, rules.Counts{}
	for _, x := range matters(findings) {
		letter := letterOf(x.worst)
		from := n[letter] + 1
		n[letter] += 1 + len(x.others)
		tag := fmt.Sprintf("%s%d", letter, from)
		if len(x.others) > 0 {
			tag += fmt.Sprintf("–%d", n[letter])
		}
		if line := findingMD(x, tag, path); letter == "H" {
			s.holds = append(s.holds, line)
		} else {
			s.rest = append(s.rest, line)
		}
	}
	count.Punch, count.Notes, count.Waived = n["P"], n["N"], n["A"]
	s.summary = fmt.Sprintf("%d punch, %s, %d accepted by waiver", count.Punch, words(count.Notes, "note", "notes"), count.Waived)
	return s
}

// findingMD is a matter on one line of a list.
func findingMD(m matter, tag, path string) string {
	f := m.worst
	says := f.Says + "."
	if also := m.also(); also != "" {
		says += " " + also
	}
	out := "- " + tag + " " + string(Prose(clip(heading(f, path), mostName*2))) + ": " + string(Prose(clip(says, mostText)))
	if f.Do != "" {
		out += " " + string(Prose(clip(sentence(f.Do), mostText)))
	}
	if f.Waived != nil {
		out += " " + string(Prose(clip(sentence(acceptance(f.Waived)), mostText)))
	}
	return out + " " + string(Code(f.Rule.Name)) + "\n"
}

// fitHolds keeps the head and the holds that there is room for, and says what they
// take. Without room for any of it the section is left out.
func (s *sectionMD) fitHolds(room int) int {
	need := len(s.head) + frameCut
	if len(s.holds)+len(s.rest) == 0 || need+frameFold > room {
		return 0
	}
	s.shown = true
	return need + fit(&s.holds, &s.cutH, room-need)
}

// fitRest keeps what there is room for behind the fold.
func (s *sectionMD) fitRest(room int) int {
	if s.folds = len(s.rest) > 0 && room > frameFold+frameCut; !s.folds {
		return 0
	}
	return frameFold + frameCut + fit(&s.rest, &s.cutR, room-frameFold-frameCut)
}

func fit(lines *[]string, cut *int, room int) (used int) {
	for i, l := range *lines {
		if used+len(l) > room {
			*cut, *lines = len(*lines)-i, (*lines)[:i]
			break
		}
		used += len(l)
	}
	return used
}

func (m *inspectMD) section(s *sectionMD) {
	m.add(s.head)
	for _, l := range s.holds {
		m.add(l)
	}
	if s.cutH > 0 {
		m.add(fmt.Sprintf("- and %d more that hold work up\n", s.cutH))
	}
	if s.folds {
		m.fold(s.summary, func() { m.list(s.rest, MostMarkdown); m.more(s.cutR) })
	}
}

func (m *inspectMD) more(n int) {
	if n > 0 {
		m.add(fmt.Sprintf("- and %d more\n", n))
	}
}

// fold hides lines behind a summary, which must be words of our own: it is HTML.
func (m *inspectMD) fold(summary string, lines func()) {
	m.add("\n<details>\n<summary>" + summary + "</summary>\n\n")
	lines()
	m.add("\n</details>\n")
}

func total(lines []string) int {
	n := 0
	for _, l := range lines {
		n += len(l)
	}
	return n
}
