package source

import (
	"fmt"
	"math/rand/v2"
	"strings"
	"testing"

	strict "github.com/pelletier/go-toml/v2"
)

// Random documents over three names define things twice, and let tables grow from
// several places, in far more ways than anyone would list. A strict TOML library
// has to refuse what Parse refuses, and to accept and read in the same way what
// Parse accepts.
func TestRandomDefinitions(t *testing.T) {
	var accepted int
	const documents = 5000
	for seed := range uint64(documents) {
		g := generator{rand.New(rand.NewPCG(seed, 1))}
		src := g.document()
		d, found := parseBytes([]byte(src))
		checkPlaces(t, d, found)
		var m map[string]any
		err := strict.Unmarshal([]byte(src), &m)
		if (err == nil) != (len(found) == 0) {
			t.Fatalf("seed %d: the library says %v, Parse says %s\n%s", seed, err, listed(found), src)
		}
		if len(found) == 0 {
			accepted++
			checkAgreement(t, d)
		}
	}
	if accepted < documents/10 || accepted > documents*9/10 {
		t.Errorf("%d of %d documents are accepted, so one side is hardly tested", accepted, documents)
	}
}

type generator struct{ *rand.Rand }

func (g generator) document() string {
	var b strings.Builder
	for range 1 + g.IntN(6) {
		switch g.IntN(5) {
		case 0:
			fmt.Fprintf(&b, "[%s]\n", g.key(3))
		case 1:
			fmt.Fprintf(&b, "[[%s]]\n", g.key(3))
		default:
			fmt.Fprintf(&b, "%s = %s\n", g.key(2), g.value(2))
		}
	}
	return b.String()
}

func (g generator) key(parts int) string {
	names := []string{"a", "b", "c", `"a"`}
	var key []string
	for range 1 + g.IntN(parts) {
		key = append(key, names[g.IntN(len(names))])
	}
	return strings.Join(key, ".")
}

func (g generator) value(depth int) string {
	if depth == 0 {
		return "1"
	}
	var items []string
	switch g.IntN(4) {
	case 0:
		for range g.IntN(3) {
			items = append(items, g.value(depth-1))
		}
		return "[" + strings.Join(items, ", ") + "]"
	case 1:
		for range g.IntN(4) {
			items = append(items, g.key(2)+" = "+g.value(depth-1))
		}
		return "{" + strings.Join(items, ", ") + "}"
	}
	return "'x'"
}
