package main

import (
	"fmt"
	"go/parser"
	"go/token"
	"io/fs"
	"os"
	"path"
	"slices"
	"sort"
	"strconv"
	"strings"
	"testing"
	"testing/fstest"
)

// The house: what lies where, and who may know whom. A folder imports what stands
// before it in this list, and never what stands after it.
var houseFloors = []string{"catalog", "bom", "rules", "cmd"}

// What lies at the top, beside files whose names begin with a dot.
var houseTop = []string{"cmd", "bom", "rules", "catalog", "testdata",
	"go.mod", "go.sum", "README.md", "DEVELOPERS.md", "LICENSE"}

// Packages that take numbers and give numbers, and all that they may know of the
// project.
var housePure = map[string][]string{
	"catalog/unit": {},
	"bom/cut":      {},
	"rules/elec":   {"catalog/unit"},
	"rules/mech":   {"catalog/unit"},
	"rules/rf":     {"catalog/unit"},
}

// Libraries that only tests use; any test may. Every other library has one package
// that knows it.
var houseTestLibraries = []string{
	"github.com/google/go-cmp",
	"github.com/rogpeppe/go-internal",
	"github.com/santhosh-tekuri/jsonschema/v6",
	"github.com/yuin/goldmark",
	"pgregory.net/rapid",
}

// Tests that use a library of another package, with the reason.
var houseTestGuests = map[string]string{
	"rules github.com/BurntSushi/toml": "the benchmark measures itself against it",
}

// Names that say nothing of what is in a package or file.
var houseEmptyNames = []string{"base", "common", "core", "helper", "helpers", "lib", "manager", "managers",
	"misc", "shared", "stuff", "util", "utils", "various"}

func TestHouse(t *testing.T) {
	h := readHouse(t, os.DirFS("../.."))
	if len(h.packages) < 8 {
		t.Fatalf("%d packages were found, so this test looks in the wrong place", len(h.packages))
	}
	for _, c := range h.complaints() {
		t.Error(c)
	}
}

// TestHouseComplains holds that each check can fail.
func TestHouseComplains(t *testing.T) {
	for _, c := range []struct {
		name, want string
		add        map[string]string // to a small house without fault; "-" takes a file away
	}{
		{"nothing", "", nil},
		{"upward", "catalog imports rules", map[string]string{"catalog/a.go": `package catalog; import _ "driploop/rules"`}},
		{"upward from below", "bom/cut imports cmd/driploop/show", map[string]string{"bom/cut/a.go": `package cut; import _ "driploop/cmd/driploop/show"`}},
		{"upward in a test", "bom imports rules", map[string]string{"bom/a_test.go": `package bom_test; import _ "driploop/rules"`}},
		{"upward under a build tag", "catalog imports bom", map[string]string{"catalog/a_plan9.go": `package catalog; import _ "driploop/bom"`}},
		{"the parent", "rules/limits imports rules", map[string]string{"rules/limits/a.go": `package limits; import _ "driploop/rules"`}},
		{"of numbers only", "rules/rf imports catalog; it should", map[string]string{"rules/rf/a.go": `package rf; import _ "driploop/catalog"`}},
		{"a library twice", "github.com/BurntSushi/toml is imported by bom and catalog/source", map[string]string{
			"catalog/source/a.go": `package source; import _ "github.com/BurntSushi/toml"`,
			"bom/a.go":            `package bom; import _ "github.com/BurntSushi/toml/internal"`}},
		{"a library in the program and in another's test", "the tests of bom import github.com/BurntSushi/toml, which catalog/source uses", map[string]string{
			"catalog/source/a.go": `package source; import _ "github.com/BurntSushi/toml"`,
			"bom/a_test.go":       `package bom; import _ "github.com/BurntSushi/toml"`}},
		{"a test library in the program", "bom imports github.com/google/go-cmp/cmp, which is for tests", map[string]string{
			"bom/a.go": `package bom; import _ "github.com/google/go-cmp/cmp"`}},
		{"a library that go.mod lacks", "bom imports example.org/x, which go.mod does not require", map[string]string{
			"bom/a.go": `package bom; import _ "example.org/x"`}},
		{"a folder at the top", "internal lies at the top", map[string]string{"internal/x/a.go": `package x`}},
		{"a file missing", "LICENSE is missing", map[string]string{"LICENSE": "-"}},
		{"a file at the top", "notes.txt lies at the top", map[string]string{"notes.txt": ``}},
		{"an empty package name", "rules/helpers is called helpers", map[string]string{"rules/helpers/a.go": `package helpers`}},
		{"an empty file name", "rules/utils.go is called utils", map[string]string{"rules/utils.go": `package rules`}},
		{"another package name", "package ruler lies in rules", map[string]string{"rules/a.go": `package ruler`}},
	} {
		t.Run(c.name, func(t *testing.T) {
			tree := fstest.MapFS{
				"go.mod":                {Data: []byte("module driploop\nrequire (\n\tgithub.com/BurntSushi/toml v1.6.0\n\tgithub.com/google/go-cmp v0.7.0\n)\n")},
				".gitignore":            {Data: []byte("/driploop\n*.prof\n")},
				"driploop":              {},
				"cpu.prof":              {},
				"cmd/driploop/main.go":  {Data: []byte(`package main; import _ "driploop/rules"`)},
				"rules/rule.go":         {Data: []byte(`package rules; import _ "driploop/rules/limits"`)},
				"testdata/x/helpers.go": {},
				"bom/plan.go":           {Data: []byte(`package bom`)},
				"catalog/part.go":       {Data: []byte(`package catalog`)},
				"go.sum":                {}, "README.md": {}, "DEVELOPERS.md": {}, "LICENSE": {},
			}
			for name, text := range c.add {
				if tree[name] = (&fstest.MapFile{Data: []byte(text)}); text == "-" {
					delete(tree, name)
				}
			}
			got := strings.Join(readHouse(t, tree).complaints(), "\n")
			if c.want == "" && got != "" || !strings.Contains(got, c.want) {
				t.Errorf("the house complains\n%s\nwant\n%s", got, c.want)
			}
		})
	}
}

// house is what the checks look at.
type house struct {
	top      []string // entries at the top that git does not ignore
	modules  []string // that go.mod requires
	packages map[string]*housePackage
}

// housePackage is one folder of Go files.
type housePackage struct {
	dir           string
	names         []string // package names, without _test
	files         []string
	uses, testing []string // imports of its files, and of its tests
}

func readHouse(t *testing.T, tree fs.FS) *house {
	t.Helper()
	h := &house{packages: map[string]*housePackage{}}
	h.readTop(t, tree)
	for _, line := range strings.Split(houseFile(t, tree, "go.mod"), "\n") {
		if f := strings.Fields(strings.TrimPrefix(line, "require ")); len(f) >= 2 && strings.HasPrefix(f[1], "v") {
			h.modules = append(h.modules, f[0])
		}
	}
	err := fs.WalkDir(tree, ".", func(name string, e fs.DirEntry, err error) error {
		switch {
		case err != nil:
			return err
		case e.IsDir() && (e.Name() == "testdata" || len(name) > 1 && e.Name()[0] == '.'):
			return fs.SkipDir
		case !e.IsDir() && path.Ext(name) == ".go":
			return h.readFile(name, houseFile(t, tree, name))
		}
		return nil
	})
	if err != nil {
		t.Fatal(err)
	}
	return h
}

func houseFile(t *testing.T, tree fs.FS, name string) string {
	t.Helper()
	b, err := fs.ReadFile(tree, name)
	if err != nil {
		t.Fatal(err)
	}
	return string(b)
}

func (h *house) readTop(t *testing.T, tree fs.FS) {
	entries, err := fs.ReadDir(tree, ".")
	if err != nil {
		t.Fatal(err)
	}
	ignored := strings.Fields(houseFile(t, tree, ".gitignore"))
	for _, e := range entries {
		skip := strings.HasPrefix(e.Name(), ".")
		for _, pattern := range ignored {
			match, err := path.Match(strings.TrimPrefix(pattern, "/"), e.Name())
			if err != nil {
				t.Fatal(err)
			}
			skip = skip || match
		}
		if !skip {
			h.top = append(h.top, e.Name())
		}
	}
}

func (h *house) readFile(name, text string) error {
	f, err := parser.ParseFile(token.NewFileSet(), name, text, parser.ImportsOnly)
	if err != nil {
		return err
	}
	dir := path.Dir(name)
	p := h.packages[dir]
	if p == nil {
		p = &housePackage{dir: dir}
		h.packages[dir] = p
	}
	p.files = append(p.files, path.Base(name))
	p.names = append(p.names, strings.TrimSuffix(f.Name.Name, "_test"))
	for _, i := range f.Imports {
		imported, err := strconv.Unquote(i.Path.Value)
		if err != nil {
			return err
		}
		if strings.HasSuffix(name, "_test.go") {
			p.testing = append(p.testing, imported)
		} else {
			p.uses = append(p.uses, imported)
		}
	}
	return nil
}

// complaints are what is wrong with the house, in order.
func (h *house) complaints() []string {
	var out []string
	for _, e := range h.top {
		if !slices.Contains(houseTop, e) {
			out = append(out, e+" lies at the top, where only "+strings.Join(houseTop, " ")+" do")
		}
	}
	for _, e := range houseTop {
		if !slices.Contains(h.top, e) {
			out = append(out, e+" is missing at the top")
		}
	}
	for _, p := range h.packages {
		out = append(out, p.nameComplaints()...)
		out = append(out, p.floorComplaints()...)
	}
	out = append(out, h.libraryComplaints()...)
	sort.Strings(out)
	return slices.Compact(out)
}

func (p *housePackage) nameComplaints() []string {
	var out []string
	last := path.Base(p.dir)
	if slices.Contains(houseEmptyNames, last) {
		out = append(out, fmt.Sprintf("%s is called %s, which says nothing of what is in it", p.dir, last))
	}
	for _, f := range p.files {
		stem := strings.TrimSuffix(strings.TrimSuffix(f, ".go"), "_test")
		if slices.Contains(houseEmptyNames, stem) {
			out = append(out, fmt.Sprintf("%s/%s is called %s, which says nothing of what is in it", p.dir, f, stem))
		}
	}
	for _, n := range p.names {
		if n != last && n != "main" {
			out = append(out, fmt.Sprintf("package %s lies in %s", n, p.dir))
		}
	}
	return out
}

// floorComplaints hold the one way of imports, for tests too.
func (p *housePackage) floorComplaints() []string {
	var out []string
	own := houseFloor(p.dir)
	for _, i := range slices.Concat(p.uses, p.testing) {
		dir, ours := strings.CutPrefix(i, "driploop/")
		if !ours || dir == p.dir {
			continue
		}
		if houseFloor(dir) > own || strings.HasPrefix(p.dir, dir+"/") {
			out = append(out, fmt.Sprintf("%s imports %s, which stands above it", p.dir, dir))
		}
		known, pure := housePure[p.dir]
		if pure && slices.Contains(p.uses, i) && !slices.Contains(known, dir) {
			out = append(out, fmt.Sprintf("%s imports %s; it should know numbers only", p.dir, dir))
		}
	}
	return out
}

func houseFloor(dir string) int {
	first, _, _ := strings.Cut(dir, "/")
	return slices.Index(houseFloors, first)
}

// libraryComplaints hold that one package knows each library.
func (h *house) libraryComplaints() []string {
	var out []string
	users := map[string][]string{}
	for dir, p := range h.packages {
		for _, i := range p.uses {
			switch module := h.module(i); {
			case module == "":
			case module == "?":
				out = append(out, fmt.Sprintf("%s imports %s, which go.mod does not require", dir, i))
			case slices.Contains(houseTestLibraries, module):
				out = append(out, fmt.Sprintf("%s imports %s, which is for tests", dir, i))
			case !slices.Contains(users[module], dir):
				users[module] = append(users[module], dir)
			}
		}
	}
	for module, dirs := range users {
		if sort.Strings(dirs); len(dirs) > 1 {
			out = append(out, fmt.Sprintf("%s is imported by %s; one package should know it", module, strings.Join(dirs, " and ")))
		}
	}
	for dir, p := range h.packages {
		for _, i := range p.testing {
			module := h.module(i)
			home := users[module]
			if len(home) > 0 && home[0] != dir && houseTestGuests[dir+" "+module] == "" {
				out = append(out, fmt.Sprintf("the tests of %s import %s, which %s uses", dir, module, home[0]))
			}
		}
	}
	return out
}

// module is that of an import: "" for the standard library and this project's own
// packages, "?" for one that go.mod does not require.
func (h *house) module(imported string) string {
	first, _, _ := strings.Cut(imported, "/")
	if first == "driploop" || !strings.Contains(first, ".") {
		return ""
	}
	for _, m := range h.modules {
		if imported == m || strings.HasPrefix(imported, m+"/") {
			return m
		}
	}
	return "?"
}
