package source

import (
	"fmt"
	"slices"
	"strings"
	"testing"
	"time"

	"github.com/BurntSushi/toml"
	strict "github.com/pelletier/go-toml/v2"
)

// FuzzParse holds for any bytes: no panic, an end in time, every place in its
// file, a tree that can be read by name, and no file without a problem that two
// whole TOML libraries do not both accept and read as the tree does. The bound
// in time is wide because the fuzzer's instrumentation is slow; the caps are
// what bounds the work, and TestHostileShapes times them.
func FuzzParse(f *testing.F) {
	f.Add([]byte(planLike()))
	f.Fuzz(func(t *testing.T, src []byte) {
		start := time.Now()
		d, found := parseBytes(src)
		if took := time.Since(start); took > 5*time.Second {
			t.Fatalf("took %v", took)
		}
		checkPlaces(t, d, found)
		checkMessages(t, found)
		if len(found) == 0 {
			checkAgreement(t, d)
		}
	})
}

// checkMessages refuses the two messages that only a defect leads to: of the
// parser that broke off, or of this package.
func checkMessages(t *testing.T, found []Problem) {
	t.Helper()
	for _, p := range found {
		if strings.Contains(p.Says, "cannot be read from here on") || strings.Contains(p.Says, "this is not TOML: ") {
			t.Fatalf("a text that nobody thought of:%s", listed(found))
		}
	}
}

func checkAgreement(t *testing.T, d *Doc) {
	t.Helper()
	if d.Partial {
		t.Fatal("the tree is not whole, but there is no problem")
	}
	var second, third map[string]any
	if _, err := toml.Decode(string(d.File.Src), &second); err != nil {
		t.Fatalf("one library refuses it: %v", err)
	}
	if err := strict.Unmarshal(d.File.Src, &third); err != nil {
		t.Fatalf("another library refuses it: %v", err)
	}
	want := flat(nil, "", plainTree(d.Root))
	for _, other := range []map[string]any{second, third} {
		if got := flat(nil, "", other); !slices.Equal(got, want) {
			t.Fatalf("read as\n%s\nwant\n%s", strings.Join(got, "\n"), strings.Join(want, "\n"))
		}
	}
}

// plainTree is a node as maps, slices and values.
func plainTree(n *Node) any {
	switch n.Kind {
	case Table:
		m := map[string]any{}
		for _, k := range n.Keys {
			m[k.Name] = plainTree(k.Value)
		}
		return m
	case Array:
		var list []any
		for _, item := range n.Items {
			list = append(list, plainTree(item))
		}
		return list
	case String:
		return n.Str
	case Integer:
		return n.Int
	case Float:
		return n.Float
	case Bool:
		return n.Bool
	}
	return n.Time
}

// flat lists all values with their paths in order of path.
func flat(to []string, path string, v any) []string {
	switch v := v.(type) {
	case map[string]any:
		to = append(to, path+" table")
		for name, item := range v {
			to = flat(to, fmt.Sprintf("%s.%q", path, name), item)
		}
	case []any:
		to = append(to, fmt.Sprintf("%s array of %d", path, len(v)))
		for i, item := range v {
			to = flat(to, fmt.Sprintf("%s[%d]", path, i), item)
		}
	case []map[string]any:
		list := make([]any, len(v))
		for i := range v {
			list[i] = v[i]
		}
		return flat(to, path, list)
	case time.Time:
		to = append(to, path+" "+v.Format("2006-01-02T15:04:05.999999999"))
	case strict.LocalDate:
		return flat(to, path, v.AsTime(time.UTC))
	case strict.LocalDateTime:
		return flat(to, path, v.AsTime(time.UTC))
	case strict.LocalTime:
		return flat(to, path, time.Date(0, 1, 1, v.Hour, v.Minute, v.Second, v.Nanosecond, time.UTC))
	default:
		to = append(to, fmt.Sprintf("%s %T %v", path, v, v))
	}
	if path == "" {
		slices.Sort(to)
	}
	return to
}

func TestAgreementOnSuite(t *testing.T) {
	walkSuite(t, suite(t), "valid", func(name string, src []byte) {
		if d, found := parseBytes(src); len(found) == 0 {
			checkAgreement(t, d)
		}
	})
}
