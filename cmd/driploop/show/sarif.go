package show

import (
	"fmt"
	"slices"

	"driploop/rules"
)

// MostResults is how many results a SARIF log lists: code hosts show no more of one
// run.
const MostResults = 5000

// InspectSARIF writes the result of an inspection as a SARIF 2.1.0 log of one run,
// worst first, MostResults at most. File names are relative to the top of the
// repository; prefix leads from there to the workspace and is "" or ends in a slash.
// Columns count characters.
func InspectSARIF(r *rules.Result, version, prefix string) ([]byte, error) {
	run := sarifRunOf(r, prefix)
	run.Tool.Driver = sarifDriver{Name: "driploop", Version: version, Rules: sarifRules()}
	return encode(sarifLog{Schema: "https://docs.oasis-open.org/sarif/sarif/v2.1.0/errata01/os/schemas/sarif-schema-2.1.0.json",
		Version: "2.1.0", Runs: []sarifRun{run}})
}

// sarifRunOf is a run without the tool that made it.
func sarifRunOf(r *rules.Result, prefix string) sarifRun {
	all := allWorstFirst(r)
	keys := planKeys(all)
	run := sarifRun{ColumnKind: "unicodeCodePoints", Results: []sarifResult{}, Properties: sarifProperties(r)}
	run.Bases = map[string]sarifBase{sarifRoot: {Description: sarifMessage{Text: "the top of the repository that holds the workspace"}}}
	for i, l := range all[:min(len(all), MostResults)] {
		run.Results = append(run.Results, sarifResultOf(l, keys[i], prefix))
	}
	run.Invocations = []sarifInvocation{sarifInvocationOf(r, len(all)-len(run.Results))}
	return run
}

type sarifLog struct {
	Schema  string     `json:"$schema"`
	Version string     `json:"version"`
	Runs    []sarifRun `json:"runs"`
}

type sarifRun struct {
	Tool struct {
		Driver sarifDriver `json:"driver"`
	} `json:"tool"`
	Invocations []sarifInvocation    `json:"invocations"`
	Bases       map[string]sarifBase `json:"originalUriBaseIds"`
	ColumnKind  string               `json:"columnKind"`
	Results     []sarifResult        `json:"results"`
	Properties  sarifRunProperties   `json:"properties"`
}

type sarifDriver struct {
	Name    string      `json:"name"`
	Version string      `json:"version"`
	Rules   []sarifRule `json:"rules"`
}

type sarifBase struct {
	Description sarifMessage `json:"description"`
}

type sarifMessage struct {
	Text SARIF `json:"text"`
}

type sarifResult struct {
	Rule         string                `json:"ruleId"`
	Index        int                   `json:"ruleIndex"`
	Level        string                `json:"level"`
	Message      sarifMessage          `json:"message"`
	Locations    []sarifLocation       `json:"locations"`
	Related      []sarifLocation       `json:"relatedLocations,omitempty"`
	Fingerprints map[string]string     `json:"partialFingerprints"`
	Suppressions []sarifSuppression    `json:"suppressions"`
	Properties   sarifResultProperties `json:"properties"`
}

type sarifLocation struct {
	ID       *int           `json:"id,omitempty"`
	Message  *sarifMessage  `json:"message,omitempty"`
	Physical sarifPhysical  `json:"physicalLocation"`
	Logical  []sarifLogical `json:"logicalLocations,omitempty"`
}

type sarifPhysical struct {
	Artifact struct {
		URI  URI    `json:"uri"`
		Base string `json:"uriBaseId"`
	} `json:"artifactLocation"`
	Region *sarifRegion `json:"region,omitempty"`
}

type sarifRegion struct {
	Line int `json:"startLine"`
	Col  int `json:"startColumn"`
}

type sarifLogical struct {
	Name SARIF `json:"fullyQualifiedName"`
}

type sarifSuppression struct {
	Kind          string `json:"kind"`
	Status        string `json:"status"`
	Justification SARIF  `json:"justification"`
}

type sarifResultProperties struct {
	Outcome string  `json:"outcome"`
	Weight  string  `json:"weight"`
	On      SARIF   `json:"on"`
	Band    SARIF   `json:"band,omitempty"`
	Job     SARIF   `json:"job,omitempty"`
	Profile SARIF   `json:"profile,omitempty"`
	Code    SARIF   `json:"code,omitempty"`
	Do      SARIF   `json:"do"`
	Basis   []SARIF `json:"basis"`
	Figures figures `json:"figures"`
}

const sarifRoot = "%SRCROOT%"

// sarifLevel is the level of a weight.
func sarifLevel(w rules.Weight) string {
	switch w {
	case rules.Hold:
		return "error"
	case rules.Punch:
		return "warning"
	case rules.Note:
		return "note"
	}
	return "none"
}

func sarifResultOf(l listed, key, prefix string) sarifResult {
	out := sarifResult{Rule: l.Rule.Name, Index: slices.Index(rules.Rules, l.Rule), Level: sarifLevel(l.Weight), Message: sarifMessage{sarifWords(l)},
		Fingerprints: map[string]string{"planKey/v1": key}, Suppressions: []sarifSuppression{}}
	at := sarifAt(prefix+l.path(), l.At.Line(), l.At.Col())
	at.Logical = []sarifLogical{{SARIFOf(l.job() + "/" + l.On)}}
	out.Locations = []sarifLocation{at}
	for i, rel := range l.Related {
		if rel.At.Path() == "" {
			continue
		}
		at := sarifAt(prefix+rel.At.Path(), rel.At.Line(), rel.At.Col())
		at.ID, at.Message = &i, &sarifMessage{SARIFOf(rel.Says)}
		out.Related = append(out.Related, at)
	}
	if w := l.Waived; w != nil {
		out.Suppressions = append(out.Suppressions, sarifSuppression{"inSource", "accepted", SARIFOf(acceptance(w))})
	}
	p := sarifResultProperties{Outcome: l.Outcome.String(), Weight: l.Weight.String(), On: SARIFOf(l.On), Band: SARIFOf(l.Band), Job: SARIFOf(l.job()), Do: SARIFOf(l.Do), Basis: sarifList(l.Basis), Figures: l.Figures}
	if l.plan != nil {
		p.Profile, p.Code = SARIFOf(l.plan.Profile), SARIFOf(l.plan.Code)
	}
	out.Properties = p
	return out
}

// sarifWords is what a finding says, what to do, and who accepts it.
func sarifWords(l listed) SARIF {
	out := l.Says + "."
	if l.Do != "" {
		out += " " + sentence(l.Do)
	}
	if l.Waived != nil {
		out += " " + sentence(acceptance(l.Waived))
	}
	return SARIFOf(out)
}

func sarifAt(path string, line, col int) sarifLocation {
	var out sarifLocation
	out.Physical.Artifact.URI, out.Physical.Artifact.Base = URIOf(path), sarifRoot
	if line > 0 {
		out.Physical.Region = &sarifRegion{line, max(col, 1)}
	}
	return out
}

type sarifInvocation struct {
	Successful    bool                `json:"executionSuccessful"`
	ExitCode      int                 `json:"exitCode"`
	Overrides     []sarifOverride     `json:"ruleConfigurationOverrides"`
	Notifications []sarifNotification `json:"toolExecutionNotifications"`
	Properties    sarifRunProperties  `json:"properties"`
}

type sarifNotification struct {
	Level   string       `json:"level"`
	Message sarifMessage `json:"message"`
}

// sarifInvocationOf says how the run went: what was left out, the results that the log
// does not list among it.
func sarifInvocationOf(r *rules.Result, more int) sarifInvocation {
	out := sarifInvocation{Successful: true, Overrides: sarifOverrides(r), Notifications: []sarifNotification{}, Properties: sarifProperties(r)}
	if r.Holds > 0 {
		out.ExitCode = 1
	}
	if more > 0 {
		says := fmt.Sprintf("%s not listed here; these are the worst %d. The other forms list all.", words(more, "more result is", "more results are"), MostResults)
		out.Notifications = append(out.Notifications, sarifNotification{"note", sarifMessage{SARIF(says)}})
	}
	for _, n := range notices(r) {
		out.Notifications = append(out.Notifications, sarifNotification{"note", sarifMessage{SARIFOf(sentence(n))}})
	}
	return out
}

// sarifRunProperties state what the run was made from.
type sarifRunProperties struct {
	Revision   SARIF   `json:"revision"`
	LimitsFrom SARIF   `json:"limitsFrom"`
	StockFrom  SARIF   `json:"stockFrom"`
	Today      string  `json:"today"`
	Profiles   []SARIF `json:"profiles"`
	Codes      []SARIF `json:"codes"`
	Overrides  []SARIF `json:"overrides"`
	Plans      int     `json:"plans"`
	Holds      int     `json:"holds"`
	Punch      int     `json:"punch"`
	Notes      int     `json:"notes"`
	Waived     int     `json:"waived"`
	Unknown    int     `json:"notAssessed"`
}

func sarifProperties(r *rules.Result) sarifRunProperties {
	return sarifRunProperties{SARIFOf(r.At), SARIFOf(r.LimitsFrom), SARIFOf(r.StockFrom), r.Today,
		sarifList(named(r.Plans, func(p *rules.PlanResult) string { return p.Profile })),
		sarifList(named(r.Plans, func(p *rules.PlanResult) string { return p.Code })),
		sarifList(r.Overrides), len(r.Plans), r.Holds, r.Punch, r.Notes, r.Waived, r.Unknown}
}
