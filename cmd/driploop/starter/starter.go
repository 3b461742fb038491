// Package starter holds the files that a new workspace and a new plan begin with.
//
// They are templates beside this file. A line of one that ends in "#:" has a key, live or
// commented out, and gets as its comment what the function that reads the key says of it:
// what a plan's author reads and what the tool does come from one place. A line whose key
// nobody reads is an error, which the tests would meet.
package starter

import (
	"embed"
	"fmt"
	"io/fs"
	"path"
	"regexp"
	"strings"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/rules"
	"driploop/rules/limits"
)

//go:embed plans workspace
var templates embed.FS

// File is one file to be written, by its path within the workspace.
type File struct {
	Path string
	Text []byte
}

// Likes lists the shapes of plan that there are, the usual one first.
func Likes() []string { return []string{"building", "van", "router"} }

// Plan is a new plan of one of the shapes, titled by its job.
func Plan(like, job string) ([]byte, error) {
	text, err := templates.ReadFile("plans/" + like + ".toml")
	if err != nil {
		return nil, fmt.Errorf("there is no plan like %s", source.Quote(like))
	}
	return teach(strings.ReplaceAll(string(text), "JOB", job), bom.DescribePlan())
}

// Workspace is the files of a new workspace, driploop.toml first.
func Workspace() ([]File, error) {
	var out []File
	err := fs.WalkDir(templates, "workspace", func(name string, e fs.DirEntry, err error) error {
		if err != nil || e.IsDir() {
			return err
		}
		text, err := templates.ReadFile(name)
		if err != nil {
			return err
		}
		f := File{Path: strings.TrimPrefix(name, "workspace/"), Text: text}
		if f.Path == "gitattributes" { // embedding leaves out names that begin with a dot
			f.Path = ".gitattributes"
		} else if f.Text, err = teach(string(text), recordOf(f.Path)); err != nil {
			return fmt.Errorf("%s: %w", f.Path, err)
		}
		if f.Path == rules.WorkspaceFile {
			out = append([]File{f}, out...)
			return nil
		}
		out = append(out, f)
		return nil
	})
	return out, err
}

// recordOf documents the format of a workspace's file.
func recordOf(file string) *source.Record {
	switch path.Dir(file) {
	case "catalog":
		return catalog.DescribeCatalog()
	case "offers":
		return catalog.DescribeOffers()
	case "stock/counts":
		return catalog.DescribeSheet()
	case "stock/orders":
		return catalog.DescribeOrder()
	case "profiles":
		return limits.Describe()
	}
	return rules.DescribeWorkspace()
}

var (
	headLine = regexp.MustCompile(`^(?:# )?\[\[?([^\[\]]+)\]\]?$`)
	keyLine  = regexp.MustCompile(`^((?:# )?([a-z][a-z0-9_]*) = (.*?))\s*#:$`)
)

// teach puts behind each marked key what is known of it.
func teach(text string, root *source.Record) ([]byte, error) {
	lines := strings.Split(text, "\n")
	table, name := root, ""
	for i, line := range lines {
		if m := headLine.FindStringSubmatch(line); m != nil {
			name = m[1]
			if table = tableOf(root, name); table == nil {
				return nil, fmt.Errorf("line %d: nothing reads the table %s", i+1, name)
			}
			continue
		}
		if !strings.HasSuffix(line, "#:") {
			continue
		}
		m := keyLine.FindStringSubmatch(line)
		if m == nil {
			return nil, fmt.Errorf("line %d has no key to speak of", i+1)
		}
		k := table.Key(m[2])
		if k == nil {
			return nil, fmt.Errorf("line %d: nothing reads the key %s of %s", i+1, m[2], name)
		}
		lines[i] = m[1] + "  # " + Comment(k)
		if v := table.Variants; v != nil && v.Key == m[2] {
			table = v.Of(strings.Trim(m[3], `"`))
		}
	}
	return []byte(strings.Join(lines, "\n")), nil
}

// Comment is what stands behind a key: its meaning, and the words it may hold.
func Comment(k *source.KeyDoc) string {
	words := k.Type.OneOf
	if k.Type.List != nil {
		words = k.Type.List.OneOf
	}
	if len(words) == 0 || len(words) > 8 {
		return k.Doc
	}
	return k.Doc + "; " + strings.Join(words, ", ")
}

// tableOf is the record that a header opens, or nil.
func tableOf(r *source.Record, header string) *source.Record {
	for rest := header; rest != ""; {
		var name string
		name, rest, _ = strings.Cut(rest, ".")
		k := r.Key(name)
		switch {
		case k == nil:
			return nil
		case k.Type.Each != nil:
			return k.Type.Each.Sub() // what follows is a name of the file's choice
		case k.Shape == source.NamedTables:
			_, rest, _ = strings.Cut(rest, ".") // likewise
		}
		if r = k.Sub; r == nil {
			return nil
		}
	}
	return r
}
