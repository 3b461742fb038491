package source

import (
	"math/rand/v2"
	"path"
	"strings"
	"testing"
	"time"
)

func TestMatch(t *testing.T) {
	for _, c := range []struct {
		pattern, name string
		want          bool
	}{
		{"plans/**/*.toml", "plans/quay-lane.toml", true}, // ** may be no folder at all
		{"plans/**/*.toml", "plans/2026/quay-lane.toml", true},
		{"plans/**/*.toml", "plans/2026/north/quay-lane.toml", true},
		{"plans/**/*.toml", "plans/quay-lane.txt", false},
		{"plans/**/*.toml", "plans.toml", false},
		{"plans/**/*.toml", "old/plans/quay-lane.toml", false},
		{"plans/**/*.toml", "plans/x.toml/readme", false},
		{"plans/*.toml", "plans/quay-lane.toml", true},
		{"plans/*.toml", "plans/2026/quay-lane.toml", false}, // * stays in its folder
		{"*.toml", "driploop.toml", true},
		{"*.toml", "plans/driploop.toml", false},
		{"**", "a/b/c", true},
		{"**", "a", true},
		{"**/c", "a/b/c", true},
		{"**/c", "c", true},
		{"**/c", "a/b/c/d", false},
		{"a/**", "a/b", true},
		{"a/**", "a", true},
		{"a/**", "b/a", false},
		{"**/a/**/b", "x/a/y/a/z/b", true},
		{"**/a/**/b", "x/a/y/b/z", false},
		{"**/a/**/b", "b/a", false},
		{"a/**/**/b", "a/b", true},
		{"a/?.toml", "a/x.toml", true},
		{"a/?.toml", "a/xy.toml", false},
		{"a/?.toml", "a//.toml", false},
		{"stock/counts/2026-*.toml", "stock/counts/2026-11-20-shop-jo.toml", true},
		{"a/b", "a/b", true},
		{"a/b", "a/B", false},
		{"a/b", "a/b/", false},
		{"a", "a/b", false},
		{"a/b", "a", false},
		{"", "", true},
		{"", "a", false},
		{"a/[", "a/[", false}, // a pattern that is none matches nothing
		{"a**/b", "ax/b", true},
		{"a**/b", "ax/y/b", false}, // ** is special only as a whole part
	} {
		if got := Match(c.pattern, c.name); got != c.want {
			t.Errorf("%q matches %q: %v, want %v", c.pattern, c.name, got, c.want)
		}
	}
}

// Many ** and a long path have very many ways to be tried.
func TestMatchEndsInTime(t *testing.T) {
	pattern := strings.Repeat("**/a/", 60) + "b"
	name := strings.Repeat("a/", 500) + "c"
	start := time.Now()
	if Match(pattern, name) {
		t.Error("c matches b")
	}
	if !Match(pattern, name[:len(name)-1]+"b") {
		t.Error("b does not match b")
	}
	if took := time.Since(start); took > bound {
		t.Errorf("took %v", took)
	}
}

// Matching agrees with trying every way.
func TestMatchAgreesWithTryingAll(t *testing.T) {
	r := rand.New(rand.NewPCG(3, 3))
	pick := func(words []string, most int) string {
		parts := make([]string, 1+r.IntN(most))
		for i := range parts {
			parts[i] = words[r.IntN(len(words))]
		}
		return strings.Join(parts, "/")
	}
	matched := 0
	for range 20000 {
		pattern, name := pick([]string{"**", "**", "*", "a", "b", "a*"}, 6), pick([]string{"a", "b", "ab"}, 6)
		got := Match(pattern, name)
		if want := tryAll(strings.Split(pattern, "/"), strings.Split(name, "/")); got != want {
			t.Fatalf("%q matches %q: %v, want %v", pattern, name, got, want)
		}
		if got {
			matched++
		}
	}
	if matched < 2000 || matched > 18000 {
		t.Errorf("%d of 20000 match, so one side is hardly tested", matched)
	}
}

func tryAll(pattern, name []string) bool {
	switch {
	case len(pattern) == 0:
		return len(name) == 0
	case pattern[0] == "**":
		return tryAll(pattern[1:], name) || len(name) > 0 && tryAll(pattern, name[1:])
	case len(name) == 0:
		return false
	}
	ok, _ := path.Match(pattern[0], name[0])
	return ok && tryAll(pattern[1:], name[1:])
}
