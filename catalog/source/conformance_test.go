package source

import (
	"encoding/json"
	"fmt"
	"io/fs"
	"os"
	"os/exec"
	"path/filepath"
	"strconv"
	"strings"
	"testing"
	"time"
)

const (
	infinite = "nan and inf are TOML, but no figure that a plan can mean"
	newer    = "TOML 1.1, which editors and formatters in the field refuse"
)

// refusedOnPurpose lists the valid files of the suite that Parse refuses.
var refusedOnPurpose = map[string]string{
	"valid/comment/after-literal-no-ws":  infinite,
	"valid/float/inf-and-nan":            infinite,
	"valid/spec-1.0.0/float-2":           infinite,
	"valid/spec-1.1.0/common-25":         infinite,
	"valid/datetime/no-seconds":          newer,
	"valid/inline-table/newline":         newer,
	"valid/inline-table/newline-comment": newer,
	"valid/spec-1.1.0/common-12":         newer, // \x
	"valid/spec-1.1.0/common-29":         newer, // no seconds
	"valid/spec-1.1.0/common-31":         newer, // no seconds
	"valid/spec-1.1.0/common-34":         newer, // no seconds
	"valid/spec-1.1.0/common-47":         newer, // line ends in braces
	"valid/string/escape-esc":            newer,
	"valid/string/hex-escape":            newer,
}

// acceptedOnPurpose lists the invalid files of the suite that Parse accepts.
var acceptedOnPurpose = map[string]string{}

func TestSuiteValid(t *testing.T) {
	dir, refused := suite(t), map[string]bool{}
	files := walkSuite(t, dir, "valid", func(name string, src []byte) {
		d, found := parseBytes(src)
		if _, ok := refusedOnPurpose[name]; ok {
			refused[name] = len(found) > 0
			return
		}
		if len(found) > 0 {
			t.Errorf("%s is refused: %s", name, listed(found))
			return
		}
		if err := sameAsExpected(d.Root, expectedJSON(t, dir, name)); err != nil {
			t.Errorf("%s: %v", name, err)
		}
	})
	for name := range refusedOnPurpose {
		if !refused[name] {
			t.Errorf("%s is on the list of refused files, but it is not there or passes", name)
		}
	}
	if files < 250 {
		t.Errorf("only %d valid files were found", files)
	}
}

func TestSuiteInvalid(t *testing.T) {
	files := walkSuite(t, suite(t), "invalid", func(name string, src []byte) {
		d, found := parseBytes(src)
		_, listed := acceptedOnPurpose[name]
		if accepted := len(found) == 0; accepted != listed {
			t.Errorf("%s: accepted is %v, on the list is %v", name, accepted, listed)
		}
		checkPlaces(t, d, found)
	})
	if files < 450 {
		t.Errorf("only %d invalid files were found", files)
	}
}

// suite is the folder of the conformance files that BurntSushi/toml brings along.
func suite(t *testing.T) string {
	t.Helper()
	out, err := exec.Command("go", "list", "-m", "-f", "{{.Dir}}", "github.com/BurntSushi/toml").Output()
	if err != nil {
		t.Fatalf("finding the conformance files: %v", err)
	}
	dir := filepath.Join(strings.TrimSpace(string(out)), "internal", "toml-test", "tests")
	if _, err := os.Stat(dir); err != nil {
		t.Fatalf("the conformance files are not there: %v", err)
	}
	return dir
}

// walkSuite calls do for every TOML file below a folder of the suite and returns
// how many there were.
func walkSuite(t *testing.T, root, kind string, do func(name string, src []byte)) (files int) {
	t.Helper()
	err := filepath.WalkDir(filepath.Join(root, kind), func(path string, d fs.DirEntry, err error) error {
		if err != nil || filepath.Ext(path) != ".toml" {
			return err
		}
		src, err := os.ReadFile(path)
		if err != nil {
			return err
		}
		files++
		name, err := filepath.Rel(root, strings.TrimSuffix(path, ".toml"))
		do(filepath.ToSlash(name), src)
		return err
	})
	if err != nil {
		t.Fatal(err)
	}
	return files
}

func expectedJSON(t *testing.T, dir, name string) any {
	t.Helper()
	text, err := os.ReadFile(filepath.Join(dir, filepath.FromSlash(name)+".json"))
	if err != nil {
		t.Fatal(err)
	}
	var want any
	if err := json.Unmarshal(text, &want); err != nil {
		t.Fatalf("%s.json: %v", name, err)
	}
	return want
}

// sameAsExpected compares a node with the suite's notation: tables and arrays as
// in JSON, every plain value as {"type": …, "value": "…"}.
func sameAsExpected(n *Node, want any) error {
	switch want := want.(type) {
	case []any:
		if n.Kind != Array || len(n.Items) != len(want) {
			return fmt.Errorf("%q: want an array of %d", n.At.Text(), len(want))
		}
		for i := range want {
			if err := sameAsExpected(n.Items[i], want[i]); err != nil {
				return err
			}
		}
	case map[string]any:
		if kind, plain := want["type"].(string); plain && len(want) == 2 {
			return sameAsTagged(n, kind, want["value"].(string))
		}
		if n.Kind != Table || len(n.Keys) != len(want) {
			return fmt.Errorf("%q: want a table of %d keys", n.At.Text(), len(want))
		}
		for name, w := range want {
			k := n.Get(name)
			if k == nil {
				return fmt.Errorf("%q: the key %q is missing", n.At.Text(), name)
			}
			if err := sameAsExpected(k.Value, w); err != nil {
				return err
			}
		}
	}
	return nil
}

func sameAsTagged(n *Node, kind, value string) error {
	var got string
	var err error
	switch kind {
	case "string":
		got = n.Str
	case "integer":
		got = strconv.FormatInt(n.Int, 10)
	case "bool":
		got = strconv.FormatBool(n.Bool)
	case "float":
		var want float64
		want, err = strconv.ParseFloat(value, 64)
		got, value = fmt.Sprint(n.Float), fmt.Sprint(want)
	default:
		var want time.Time
		want, err = time.Parse(taggedTimes[kind], value)
		got, value = n.Time.Format(time.RFC3339Nano), want.Format(time.RFC3339Nano)
	}
	if err != nil {
		return err
	}
	if tagged[n.Kind] != kind || got != value {
		return fmt.Errorf("%q was read as %s %s, want %s %s", n.At.Text(), tagged[n.Kind], got, kind, value)
	}
	return nil
}

var (
	tagged = map[NodeKind]string{String: "string", Integer: "integer", Float: "float", Bool: "bool",
		DateTime: "datetime", LocalDateTime: "datetime-local", LocalDate: "date-local", LocalTime: "time-local"}
	taggedTimes = map[string]string{"datetime": time.RFC3339, "datetime-local": "2006-01-02T15:04:05",
		"date-local": time.DateOnly, "time-local": time.TimeOnly}
)
