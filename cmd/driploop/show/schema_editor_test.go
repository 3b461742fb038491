package show_test

import (
	"errors"
	"os"
	"os/exec"
	"path/filepath"
	"regexp"
	"strconv"
	"testing"

	"driploop/cmd/driploop/show"
)

var refusedFile = regexp.MustCompile(`invalid file error=.* path="[^"]*/([0-9]+)\.toml"`)

// What an editor's own reader makes of the schema is what the library of the tests makes
// of it: taplo, the language server behind several editors, is asked about every file and
// some of the slips, all of a sort in one call.
func TestEditorAgrees(t *testing.T) {
	taplo, err := exec.LookPath("taplo")
	if err != nil {
		t.Skip("taplo is not there: npm install --global @taplo/cli@0.7.0")
	}
	schemas := compiled(t)
	files := append(samples(t), slips(t, 40)...)
	for _, sort := range show.SchemaNames() {
		t.Run(sort, func(t *testing.T) {
			dir := t.TempDir()
			b, err := show.SchemaOf(sort).JSON()
			if err != nil {
				t.Fatal(err)
			}
			schema := filepath.Join(dir, "schema.json")
			if err := os.WriteFile(schema, b, 0o666); err != nil {
				t.Fatal(err)
			}
			want := map[int]bool{}
			for i, s := range files {
				doc, _, readable := read(t, s)
				if s.sort != sort || !readable {
					continue
				}
				want[i] = schemas[sort].Validate(value(doc.Root)) != nil
				if err := os.WriteFile(filepath.Join(dir, strconv.Itoa(i)+".toml"), []byte(s.text), 0o666); err != nil {
					t.Fatal(err)
				}
			}
			cmd := exec.Command(taplo, "check", "--colors", "never", "--schema", "file://"+schema, filepath.Join(dir, "*.toml"))
			cmd.Dir = dir
			out, err := cmd.CombinedOutput()
			if exit := (*exec.ExitError)(nil); err != nil && !errors.As(err, &exit) {
				t.Fatal(err)
			}
			got := map[int]bool{}
			for _, m := range refusedFile.FindAllStringSubmatch(string(out), -1) {
				i, _ := strconv.Atoi(m[1])
				got[i] = true
			}
			refused := 0
			for i, w := range want {
				if got[i] != w {
					t.Errorf("%s: taplo refuses it is %v, the library %v\n%s", files[i].name, got[i], w, files[i].text)
				}
				if w {
					refused++
				}
			}
			if refused == 0 || refused == len(want) {
				t.Errorf("of %d files %d are refused", len(want), refused)
			}
			t.Logf("%d files, %d refused by both", len(want), refused)
		})
	}
}
