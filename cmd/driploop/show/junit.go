package show

import (
	"bytes"
	"encoding/xml"
	"fmt"
	"strconv"
	"strings"

	"driploop/rules"
)

// XML is text for encoding/xml that shows itself: what XML cannot hold, and what acts
// on a terminal, stands escaped in words before the library escapes the rest.
type XML string

// XMLOf makes text of a string from a file.
func XMLOf(s string) XML { return XML(Clean(s)) }

// InspectJUnit writes the result of an inspection for what reads test reports: a suite
// for each plan and one for the workspace's own files, a case for each rule. A rule
// fails where a hold stands. What is not assessed is a skipped case, never a passed
// one; other findings stand in the output of their case.
func InspectJUnit(r *rules.Result) ([]byte, error) {
	out := junitSuites{Name: "driploop", Properties: junitProperties(about(r))}
	out.add(junitFiles(r))
	for _, p := range worstFirst(r.Plans) {
		out.add(junitPlan(r, p))
	}
	b, err := xml.MarshalIndent(out, "", " ")
	if err != nil {
		return nil, err
	}
	return bytes.Join([][]byte{[]byte(xml.Header), b, []byte("\n")}, nil), nil
}

type junitSuites struct {
	XMLName xml.Name `xml:"testsuites"`
	Name    XML      `xml:"name,attr"`
	junitCounts
	Properties []junitProperty `xml:"properties>property"`
	Suites     []junitSuite    `xml:"testsuite"`
}

type junitCounts struct {
	Tests    int `xml:"tests,attr"`
	Failures int `xml:"failures,attr"`
	Errors   int `xml:"errors,attr"`
	Skipped  int `xml:"skipped,attr"`
}

type junitProperty struct {
	Name  string `xml:"name,attr"`
	Value XML    `xml:"value,attr"`
}

type junitSuite struct {
	Name XML `xml:"name,attr"`
	junitCounts
	Properties []junitProperty `xml:"properties>property"`
	Cases      []junitCase     `xml:"testcase"`
}

type junitCase struct {
	Class   XML           `xml:"classname,attr"`
	Name    string        `xml:"name,attr"`
	File    XML           `xml:"file,attr"`
	Line    int           `xml:"line,attr,omitempty"`
	Failure *junitOutcome `xml:"failure"`
	Skipped *junitOutcome `xml:"skipped"`
	Output  XML           `xml:"system-out,omitempty"`
}

type junitOutcome struct {
	Message XML `xml:"message,attr"`
	Text    XML `xml:",chardata"`
}

func (s *junitSuites) add(x junitSuite) {
	s.Tests += x.Tests
	s.Failures += x.Failures
	s.Skipped += x.Skipped
	s.Suites = append(s.Suites, x)
}

func (s *junitSuite) add(c junitCase) {
	s.Tests++
	switch {
	case c.Failure != nil:
		s.Failures++
	case c.Skipped != nil:
		s.Skipped++
	}
	s.Cases = append(s.Cases, c)
}

func junitProperties(list []Item) []junitProperty {
	out := []junitProperty{}
	for _, it := range list {
		out = append(out, junitProperty{it.Name, XMLOf(it.Text)})
	}
	return out
}

// junitFiles is the suite of the workspace's own files.
func junitFiles(r *rules.Result) junitSuite {
	s := junitSuite{Name: "the workspace's own files"}
	for _, rule := range rules.Rules {
		if rule.CheckFiles != nil || rule.Firm() {
			s.add(junitCaseOf(rule, r.Workspace, "workspace", rules.WorkspaceFile, leftOut(r, nil, rule)))
		}
	}
	return s
}

// junitPlan is the suite of one plan.
func junitPlan(r *rules.Result, p *rules.PlanResult) junitSuite {
	s := junitSuite{Name: XMLOf(p.Path), Properties: junitProperties([]Item{{"revision", r.At}, {"limits_from", r.LimitsFrom}, {"stock_from", r.StockFrom}, {"today", r.Today},
		{"job", p.Job}, {"title", p.Title}, {"stage", p.Stage}, {"profile", p.Profile}, {"code", p.Code}, {"gain", gainWords(p.Runs)}})}
	for _, c := range p.Cautions {
		s.Properties = append(s.Properties, junitProperty{"caution", XMLOf(c)})
	}
	for _, rule := range rules.Rules {
		if rule.Check != nil || rule.Firm() {
			s.add(junitCaseOf(rule, p.Findings, p.Job, p.Path, leftOut(r, p, rule)))
		}
	}
	return s
}

// leftOut says why a rule did not look at a plan, "" where it did.
func leftOut(r *rules.Result, p *rules.PlanResult, rule *rules.Rule) string {
	for _, w := range r.Weights {
		if w.Rule == rule.Name && w.Weight.V == rules.Off.String() {
			return "the rule is off in this workspace: " + w.Because.V
		}
	}
	if rule.Firm() && r.NoShelf {
		return "the rules that need the shelf were left out"
	}
	if p != nil && p.FilesOnly != "" && rule.Area() != "file" {
		return p.FilesOnly
	}
	return ""
}

// junitCaseOf is a rule on one suite's findings.
func junitCaseOf(rule *rules.Rule, all []*rules.Finding, class, file, out string) junitCase {
	c := junitCase{Class: XMLOf(class), Name: rule.Name, File: XMLOf(file)}
	var holds, unknown, rest []string
	for _, f := range all {
		if f.Rule != rule {
			continue
		}
		line := junitLine(f, file)
		switch {
		case f.Waived == nil && f.Weight == rules.Hold:
			if holds == nil && f.At.Path() == file {
				c.Line = f.At.Line()
			}
			holds = append(holds, line)
		case f.Outcome == rules.Unknown:
			unknown = append(unknown, line)
		default:
			rest = append(rest, line)
		}
	}
	switch {
	case holds != nil:
		c.Failure = &junitOutcome{XMLOf(words(len(holds), "hold", "holds") + " on " + class), junitLines(holds)}
		rest = append(unknown, rest...)
	case unknown != nil:
		c.Skipped = &junitOutcome{XMLOf("not assessed: " + strconv.Itoa(len(unknown))), junitLines(unknown)}
	case out != "":
		c.Skipped = &junitOutcome{Message: XMLOf(out)}
	}
	c.Output = junitLines(rest)
	return c
}

// junitLine is a finding on one line.
func junitLine(f *rules.Finding, file string) string {
	out := fmt.Sprintf("%s: %s: %s.", f.Weight, heading(f, file), f.Says)
	if f.Do != "" {
		out += " " + sentence(f.Do)
	}
	if f.Waived != nil {
		out += " " + sentence(acceptance(f.Waived))
	}
	return out
}

func junitLines(list []string) XML {
	var b strings.Builder
	for _, l := range list {
		b.WriteString(string(XMLOf(l)) + "\n")
	}
	return XML(b.String())
}
