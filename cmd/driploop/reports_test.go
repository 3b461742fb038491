package main

import (
	"encoding/json"
	"encoding/xml"
	"errors"
	"fmt"
	"io"
	"os"
	"os/exec"
	"path/filepath"
	"regexp"
	"strings"
	"testing"

	"github.com/santhosh-tekuri/jsonschema/v6"
)

// sarifSchema is the official schema of SARIF 2.1.0. It is large and not ours, so it
// is looked for where the environment says; a clean build brings it along.
const sarifSchema = "DRIPLOOP_SARIF_SCHEMA"

// inSARIF reads a log as a program that shows it does.
func inSARIF(page string) string {
	var log struct {
		Runs []struct {
			Results []struct {
				RuleID       string
				Message      struct{ Text string }
				Fingerprints map[string]string `json:"partialFingerprints"`
				Locations    []struct {
					PhysicalLocation struct{ ArtifactLocation struct{ URI string } }
				}
			}
		}
	}
	if err := json.Unmarshal([]byte(page), &log); err != nil {
		return err.Error()
	}
	keys := map[string]bool{}
	for _, r := range log.Runs[0].Results {
		key := r.Fingerprints["planKey/v1"]
		switch {
		case key == "" || keys[key]:
			return "a result without a key of its own: " + r.Message.Text
		case embeddedLink.MatchString(r.Message.Text):
			return "a link or place holder: " + r.Message.Text
		case len(r.Locations) != 1 || !relativeURI.MatchString(r.Locations[0].PhysicalLocation.ArtifactLocation.URI):
			return fmt.Sprintf("no relative reference: %+v", r.Locations)
		}
		keys[key] = true
	}
	return inJSON(page)
}

var (
	embeddedLink = regexp.MustCompile(`\]\(|\{[0-9]`)
	relativeURI  = regexp.MustCompile(`^([A-Za-z0-9._~-]|%[0-9A-F]{2})+(/([A-Za-z0-9._~-]|%[0-9A-F]{2})+)*$`)
)

// annotation is a command as a build runner takes it apart.
var annotation = regexp.MustCompile(`^::(error|warning|notice) file=([^:,]+)(,line=[1-9][0-9]*,col=[1-9][0-9]*)?,title=[^:,]+::.+$`)

// inAnnotations reads a page as a build runner does: a command is one of ours, ten of a
// kind at most, and no other line is a command.
func inAnnotations(page string) string {
	kinds := map[string]int{}
	var rest strings.Builder
	for line := range strings.Lines(page) {
		line = strings.TrimSuffix(line, "\n")
		if !strings.HasPrefix(line, "::") {
			rest.WriteString(line + "\n")
			continue
		}
		m := annotation.FindStringSubmatch(line)
		if m == nil {
			return "no annotation of ours: " + line
		}
		if kinds[m[1]]++; kinds[m[1]] > 10 {
			return "more than ten of kind " + m[1]
		}
		rest.WriteString(strings.TrimLeft(line, ":") + "\n")
	}
	return inLog(rest.String())
}

func inJUnit(page string) string {
	d := xml.NewDecoder(strings.NewReader(page))
	d.Strict = true
	for {
		if _, err := d.Token(); errors.Is(err, io.EOF) {
			break
		} else if err != nil {
			return err.Error()
		}
	}
	return inLog(page)
}

// reported are workspaces whose reports the real readers read.
var reported = []string{"saltmarsh", "hostile", "readme"}

// leftOutOutside skips what needs a program or file of others that is not there, but
// not in a clean build.
func leftOutOutside(t *testing.T, what string) {
	t.Helper()
	if os.Getenv("DRIPLOOP_CI") != "" {
		t.Fatalf("%s is missing; a clean build may leave nothing out", what)
	}
	t.Skipf("%s is missing: this reader is left out", what)
}

// Logs hold against the official schema of SARIF, and logs with a mistake do not.
func TestSARIFSchema(t *testing.T) {
	path := os.Getenv(sarifSchema)
	if path == "" {
		leftOutOutside(t, "the schema of SARIF 2.1.0 ("+sarifSchema+")")
	}
	c := jsonschema.NewCompiler()
	schema, err := c.Compile(path)
	if err != nil {
		t.Fatal(err)
	}
	valid := func(page string) error {
		log, err := jsonschema.UnmarshalJSON(strings.NewReader(page))
		if err != nil {
			return err
		}
		return schema.Validate(log)
	}
	for _, w := range reported {
		page, messages, _ := run([]string{"inspect", "--root", "../../testdata/" + w, "--today", "2026-12-01", "--as", "sarif"})
		if err := valid(page); err != nil {
			t.Errorf("%s: %v %s", w, err, messages)
		}
		for _, slip := range [][2]string{{`"level": "error"`, `"level": "fatal"`}, {`"startLine": `, `"startLine": -`}, {`"columnKind": "unicodeCodePoints"`, `"columnKind": "bytes"`}} {
			if torn := strings.Replace(page, slip[0], slip[1], 1); torn != page && valid(torn) == nil {
				t.Errorf("%s: the schema takes %s", w, slip[1])
			}
		}
	}
}

// A reader of XML that is not ours reads the reports as test tools do.
func TestJUnitElsewhere(t *testing.T) {
	python, err := exec.LookPath("python3")
	if err != nil {
		leftOutOutside(t, "python3")
	}
	const read = `
import sys, xml.etree.ElementTree as tree
root = tree.parse(sys.stdin).getroot()
cases = root.findall("testsuite/testcase")
count = lambda tag: len([c for c in cases if c.find(tag) is not None])
assert root.tag == "testsuites", root.tag
assert int(root.get("tests")) == len(cases) > 0, "tests"
assert int(root.get("failures")) == count("failure"), "failures"
assert int(root.get("skipped")) == count("skipped"), "skipped"
for s in root.findall("testsuite"):
    assert int(s.get("tests")) == len(s.findall("testcase")), s.get("name")
print(len(cases), count("failure"), count("skipped"))
`
	for _, w := range reported {
		page, _, _ := run([]string{"inspect", "--root", "../../testdata/" + w, "--today", "2026-12-01", "--as", "junit"})
		cmd := exec.Command(python, "-c", read)
		cmd.Stdin = strings.NewReader(page)
		if out, err := cmd.CombinedOutput(); err != nil {
			t.Errorf("%s: %v\n%s", w, err, out)
		}
		cmd = exec.Command(python, "-c", read)
		cmd.Stdin = strings.NewReader(strings.Replace(page, "</testcase>", "\x1b</testcase>", 1))
		if cmd.Run() == nil {
			t.Errorf("%s: the reader takes a control character; it reads nothing", w)
		}
	}
}

// Code hosts call files by their names from the top of the repository.
func TestNamesFromTheTop(t *testing.T) {
	top := t.TempDir()
	copyFile(t, "../../testdata/readme/driploop.toml", filepath.Join(top, "a b/firm/driploop.toml"))
	copyFile(t, "../../testdata/readme/plans/ferry-hut.toml", filepath.Join(top, "a b/firm/plans/ferry-hut.toml"))
	calls := map[string]string{"sarif": `"uri": "PREFIXplans/ferry-hut.toml"`, "annotations": "file=PREFIXplans/ferry-hut.toml,"}
	holds := func(prefix map[string]string) {
		for form, want := range calls {
			out, messages, _ := run([]string{"inspect", "--root", filepath.Join(top, "a b/firm"), "--as", form})
			if want = strings.Replace(want, "PREFIX", prefix[form], 1); !strings.Contains(out, want) {
				t.Errorf("%s has no %s: %s", form, want, messages)
			}
		}
	}
	holds(map[string]string{"sarif": "", "annotations": ""})
	if err := os.Mkdir(filepath.Join(top, ".git"), 0o777); err != nil {
		t.Fatal(err)
	}
	holds(map[string]string{"sarif": "a%20b/firm/", "annotations": "a b/firm/"})
}
