package show

import (
	"fmt"
	"sort"
	"strings"

	"driploop/rules"
)

// mostAnnotations is how many annotations of a kind a build runner shows of one step.
const mostAnnotations = 10

// Command is a message in a workflow command of a build runner; Property a value in
// its head. Both are one line, and what would end them stands escaped.
type (
	Command  string
	Property string
)

var (
	inCommand  = strings.NewReplacer("%", "%25", "\r", "%0D", "\n", "%0A")
	inProperty = strings.NewReplacer("%", "%25", "\r", "%0D", "\n", "%0A", ":", "%3A", ",", "%2C")
)

// CommandOf makes a message of a string from a file.
func CommandOf(s string) Command { return Command(inCommand.Replace(string(Clean(s)))) }

// PropertyOf makes a value of a string from a file.
func PropertyOf(s string) Property { return Property(inProperty.Replace(string(Clean(s)))) }

// annotationKinds are the runner's kinds of annotation, worst first, by weight.
var annotationKinds = []struct {
	name, one, many string
}{{"error", "hold", "holds"}, {"warning", "punch", "punch"}, {"notice", "note", "notes"}}

// annotationKind is the kind of a finding; what a waiver accepts is a note.
func annotationKind(f *rules.Finding) int {
	switch letterOf(f) {
	case "H":
		return 0
	case "P":
		return 1
	}
	return 2
}

// InspectAnnotations writes findings as commands from which a build runner makes
// annotations on the lines of a change: worst first, mostAnnotations of a kind, and how
// many more there are. The verdict and what it was made from stand before them as
// plain lines. prefix leads from the top of the repository to the workspace.
func InspectAnnotations(r *rules.Result, prefix string, quiet bool) []byte {
	var b strings.Builder
	line := func(t Term) { b.WriteString(string(t) + "\n") }
	line(Terms("%s", verdict(r)))
	for _, it := range about(r) {
		if quiet && it.Name != "override" {
			continue
		}
		line(Terms("%s: %s", it.Name, it.Text))
	}
	var shown, left [3]int
	for _, m := range mattersWorstFirst(r) {
		kind := annotationKind(m.worst)
		switch {
		case quiet && kind > 0:
		case shown[kind] == mostAnnotations:
			left[kind] += 1 + len(m.others)
		default:
			shown[kind]++
			b.WriteString(annotation(m, annotationKinds[kind].name, prefix))
		}
	}
	if more := moreWords(left); more != "" {
		line(Terms("%s not shown here; the other forms list all.", more))
	}
	return []byte(b.String())
}

// planMatter is a matter with the plan that it stands on.
type planMatter struct {
	matter
	listed
}

// mattersWorstFirst lists what a result has to say, a matter over several bands as one.
func mattersWorstFirst(r *rules.Result) []planMatter {
	var out []planMatter
	for _, m := range matters(r.Workspace) {
		out = append(out, planMatter{m, listed{m.worst, nil}})
	}
	for _, p := range worstFirst(r.Plans) {
		for _, m := range matters(p.Findings) {
			out = append(out, planMatter{m, listed{m.worst, p}})
		}
	}
	sort.SliceStable(out, func(i, j int) bool { return rank(out[i].worst) > rank(out[j].worst) })
	return out
}

// annotation is one command, with its line end.
func annotation(l planMatter, kind, prefix string) string {
	says := l.Says + "."
	if also := l.also(); also != "" {
		says += " " + also
	}
	if l.Do != "" {
		says += " " + sentence(l.Do)
	}
	if l.Waived != nil {
		says += " " + sentence(acceptance(l.Waived))
	}
	head := fmt.Sprintf("file=%s", PropertyOf(prefix+l.path()))
	if n := l.At.Line(); n > 0 {
		head += fmt.Sprintf(",line=%d,col=%d", n, max(l.At.Col(), 1))
	}
	title := l.Rule.Name + ", " + thing(l.Finding)
	if job := l.job(); job != "" {
		title = job + ", " + title
	}
	return fmt.Sprintf("::%s %s,title=%s::%s\n", kind, head, PropertyOf(title), CommandOf(says))
}

// moreWords is "3 holds, 12 punch and 1 note are", or "".
func moreWords(left [3]int) string {
	var out []string
	total := 0
	for i, n := range left {
		if total += n; n > 0 {
			out = append(out, words(n, annotationKinds[i].one, annotationKinds[i].many))
		}
	}
	switch {
	case total == 0:
		return ""
	case total == 1:
		return out[0] + " is"
	case len(out) == 1:
		return out[0] + " are"
	}
	return strings.Join(out[:len(out)-1], ", ") + " and " + out[len(out)-1] + " are"
}

// verdict is the result of an inspection in one sentence.
func verdict(r *rules.Result) string {
	held := 0
	for _, p := range r.Plans {
		if p.Holds > 0 {
			held++
		}
	}
	inspected := words(len(r.Plans), "plan", "plans")
	switch {
	case held > 0:
		return fmt.Sprintf("Work must not go on with %d of %s: %s.", held, inspected, tally(r.Counts))
	case r.Holds > 0:
		return fmt.Sprintf("The workspace's own files hold work up; %s: %s.", inspected, tally(r.Counts))
	case len(r.Plans) == 0:
		return fmt.Sprintf("No plan to look at: %s.", tally(r.Counts))
	}
	return fmt.Sprintf("Nothing holds work up on %s: %s.", inspected, tally(r.Counts))
}
