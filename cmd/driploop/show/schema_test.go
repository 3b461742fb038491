package show_test

import (
	"bytes"
	"fmt"
	"os"
	"path/filepath"
	"regexp"
	"slices"
	"strings"
	"testing"

	"github.com/rogpeppe/go-internal/txtar"
	"github.com/santhosh-tekuri/jsonschema/v6"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/cmd/driploop/show"
	"driploop/cmd/driploop/starter"
	"driploop/rules"
	"driploop/rules/limits"
)

// sample is a file of a workspace with its sort.
type sample struct{ name, sort, text string }

// sortOf tells a file's sort by where it lies; "" for what is no file of a workspace.
func sortOf(path, text string) string {
	switch dir, _, _ := strings.Cut(path, "/"); {
	case path == "driploop.toml":
		return "workspace"
	case !strings.HasSuffix(path, ".toml"):
		return ""
	case dir == "plans":
		return "plan"
	case dir == "catalog" || dir == "generic":
		return "catalog"
	case dir == "offers":
		return "offer"
	case dir == "stock" && regexp.MustCompile(`(?m)^\[order\]`).MatchString(text):
		return "order"
	case dir == "stock":
		return "stock"
	case dir == "profiles" || dir == "codes":
		return "profile"
	}
	return ""
}

// read is what the tool has to say of one file by itself. readable is false where what
// the file holds cannot be told.
func read(t *testing.T, s sample) (doc *source.Doc, problems []source.Problem, readable bool) {
	t.Helper()
	file, bad := source.NewFile(s.name, []byte(s.text))
	doc, more := source.Parse(file)
	for _, p := range append(bad, more...) {
		if p.Kind == source.Syntax || p.Kind == source.Merge {
			return doc, append(bad, more...), false
		}
	}
	problems = append(bad, more...)
	switch s.sort {
	case "plan":
		_, more = bom.ReadPlan(doc)
	case "workspace":
		_, more = rules.ReadWorkspace(doc)
	case "catalog":
		_, more = catalog.ReadParts(doc)
	case "offer":
		_, more = catalog.ReadOffers(doc)
	case "stock":
		_, more = catalog.ReadSheet(doc)
	case "order":
		_, more = catalog.ReadOrder(doc)
	case "profile":
		_, more = limits.Load(doc)
	default:
		t.Fatalf("%s is no file of a workspace", s.name)
	}
	return doc, append(problems, more...), true
}

// samples are the files that the schema is held against: the demo, the workspaces of the
// README and of the rule cases, the embedded catalog, profiles and codes, and what start
// writes.
func samples(t *testing.T) []sample {
	t.Helper()
	var out []sample
	add := func(name, path, text string) {
		if sort := sortOf(path, text); sort != "" {
			out = append(out, sample{name, sort, text})
		}
	}
	for _, root := range []string{"../../../testdata/saltmarsh", "../../../testdata/readme", "../../../testdata/rules/base",
		"../../../testdata/hostile", "../../../catalog", "../../../rules/limits"} {
		err := filepath.WalkDir(root, func(path string, e os.DirEntry, err error) error {
			if err != nil || e.IsDir() {
				return err
			}
			text, err := os.ReadFile(path)
			rel, _ := filepath.Rel(root, path)
			add(filepath.Base(root)+"/"+rel, filepath.ToSlash(rel), string(text))
			return err
		})
		if err != nil {
			t.Fatal(err)
		}
	}
	cases, _ := filepath.Glob("../../../testdata/rules/*/*.txtar")
	for _, name := range cases {
		archive, err := txtar.ParseFile(name)
		if err != nil {
			t.Fatal(err)
		}
		rel, _ := filepath.Rel("../../../testdata/rules", name)
		for _, f := range archive.Files {
			add(rel+"/"+f.Name, f.Name, string(f.Data))
		}
	}
	files, err := starter.Workspace()
	if err != nil {
		t.Fatal(err)
	}
	for _, f := range files {
		add("start/"+f.Path, f.Path, string(f.Text))
	}
	for _, like := range starter.Likes() {
		text, err := starter.Plan(like, like)
		if err != nil {
			t.Fatal(err)
		}
		add("start/plans/"+like+".toml", "plans/"+like+".toml", string(text))
	}
	if len(out) < 500 {
		t.Fatalf("only %d files were found", len(out))
	}
	return out
}

type reason struct {
	says *regexp.Regexp
	why  string
}

const asText = "a date is a text to a reader of JSON"

// beyond lists what a schema cannot know, or does not, with the reason. A reason that
// nothing needs any more fails the test.
var beyond = []reason{
	{regexp.MustCompile("^([A-Za-z0-9_-]+: )+the date .* was read, (text|an? .*) is expected$"), asText},
	{regexp.MustCompile("^([A-Za-z0-9_-]+: )+the number -?[0-9]+ was read, a whole number is expected$"), "7.0 is a whole number to a reader of JSON"},
	{regexp.MustCompile("^([A-Za-z0-9_-]+: )+a length lies between "), "a pattern cannot compare numbers"},
	{regexp.MustCompile("^([A-Za-z0-9_-]+: )+a temperature on site lies between "), "a pattern cannot compare numbers"},
	{regexp.MustCompile("^([A-Za-z0-9_-]+: )+a wind speed lies between "), "a pattern cannot compare numbers"},
	{regexp.MustCompile("^([A-Za-z0-9_-]+: )+a conductor size lies above "), "a pattern cannot compare numbers"},
	{regexp.MustCompile("^no shelf is called "), "which shelves there are stands in another table"},
	{regexp.MustCompile("^fill .* is less than least "), "two figures are compared"},
	{regexp.MustCompile("^cut_to .* is shorter than cut_from "), "two figures are compared"},
	{regexp.MustCompile("^the row holds on no spectrum: "), "two figures are compared"},
	{regexp.MustCompile("^with: there is no profile "), "which profiles there are stands in other files"},
}

// known reports whether a schema can know of one of the problems at least; used marks
// the reasons that excused the others.
func known(problems []source.Problem, used map[int]bool) bool {
	out := false
	for _, p := range problems {
		i := slices.IndexFunc(beyond, func(b reason) bool { return b.says.MatchString(p.Says) })
		if i < 0 {
			out = true
			continue
		}
		used[i] = true
		if beyond[i].why == asText {
			return false // and what else is said may follow from that
		}
	}
	return out
}

func compiled(t *testing.T) map[string]*jsonschema.Schema {
	t.Helper()
	out := map[string]*jsonschema.Schema{}
	for _, name := range append(show.SchemaNames(), "") {
		b, err := show.SchemaOf(name).JSON()
		if err != nil {
			t.Fatal(err)
		}
		doc, err := jsonschema.UnmarshalJSON(bytes.NewReader(b))
		if err != nil {
			t.Fatal(err)
		}
		c := jsonschema.NewCompiler()
		if err := c.AddResource("file:///"+name+".json", doc); err != nil {
			t.Fatal(err)
		}
		if out[name], err = c.Compile("file:///" + name + ".json"); err != nil {
			t.Fatal(err)
		}
	}
	return out
}

// value is a document as a reader of JSON sees it.
func value(n *source.Node) any {
	switch n.Kind {
	case source.Table:
		out := map[string]any{}
		for _, k := range n.Keys {
			out[k.Name] = value(k.Value)
		}
		return out
	case source.Array:
		out := []any{}
		for _, i := range n.Items {
			out = append(out, value(i))
		}
		return out
	case source.String:
		return n.Str
	case source.Integer:
		return n.Int
	case source.Float:
		return n.Float
	case source.Bool:
		return n.Bool
	case source.LocalDate:
		return n.Time.Format("2006-01-02")
	case source.LocalDateTime:
		return n.Time.Format("2006-01-02T15:04:05")
	case source.LocalTime:
		return n.Time.Format("15:04:05")
	case source.DateTime:
		return n.Time.Format("2006-01-02T15:04:05Z07:00")
	}
	return nil // refused when it was parsed: nan and inf, which JSON has no word for
}

// The schema and the tool are of one mind on every file, and on every slip of the pen.
func TestSchemaAgrees(t *testing.T) {
	schemas := compiled(t)
	used := map[int]bool{}
	passed, refused, bad := 0, 0, 0
	for _, s := range append(samples(t), slips(t, everySlip)...) {
		doc, problems, readable := read(t, s)
		if !readable {
			continue
		}
		err := schemas[s.sort].Validate(value(doc.Root))
		wrong := ""
		switch {
		case len(problems) == 0 && err != nil:
			wrong = fmt.Sprintf("%s has no problem, and the schema says %v", s.name, err)
		case err == nil && known(problems, used):
			wrong = fmt.Sprintf("the schema passes %s, near %q: %s", s.name, nearby(problems), problems[0].Says)
		case err == nil:
			passed++
			if whole := schemas[""].Validate(value(doc.Root)); whole != nil {
				wrong = fmt.Sprintf("%s is a %s, and the schema of all says %v", s.name, s.sort, whole)
			}
		default:
			refused++
		}
		if wrong == "" {
			continue
		}
		if bad++; bad < 25 {
			t.Error(wrong)
		}
	}
	t.Logf("%d files pass, %d are refused", passed, refused)
	if passed < 2000 || refused < 10000/everySlip {
		t.Error("too few files are looked at")
	}
	for i, b := range beyond {
		if !used[i] && everySlip == 1 {
			t.Errorf("nothing needs the reason %q any more", b.says)
		}
	}
}

// nearby is the line of the first problem.
func nearby(problems []source.Problem) string {
	at := problems[0].At
	return strings.Split(string(at.File.Src), "\n")[at.Line()-1]
}
