package show_test

import (
	"fmt"
	"strings"
	"testing"
)

// The schema and the tool refuse the same number of ports and paths of a part.
func TestSchemaBounds(t *testing.T) {
	schema := compiled(t)["catalog"]
	splitter := func(ports, paths int) string {
		var b strings.Builder
		b.WriteString("[part.S]\nkind = \"splitter\"\n")
		for i := range ports {
			fmt.Fprintf(&b, "port.p%d = { connector = \"N female\", impedance_ohm = 50 }\n", i)
		}
		for range paths {
			b.WriteString("[[part.S.path]]\nfrom = \"p0\"\nto = \"p1\"\nmhz = [600, 2700]\nloss_db = 3.5\n")
		}
		return b.String()
	}
	for _, c := range []struct {
		ports, paths int
		good         bool
	}{{2, 1, true}, {64, 1, true}, {65, 1, false}, {2, 256, true}, {2, 257, false}} {
		doc, problems, _ := read(t, sample{"bounds", "catalog", splitter(c.ports, c.paths)})
		err := schema.Validate(value(doc.Root))
		if tool := len(problems) == 0; tool != c.good || (err == nil) != c.good {
			t.Errorf("%d ports and %d paths: the tool says %v, the schema %v, good is %t", c.ports, c.paths, problems, err, c.good)
		}
	}
}
