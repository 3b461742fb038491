package source

import (
	"math/rand/v2"
	"strings"
	"testing"
)

func TestNearest(t *testing.T) {
	for _, c := range []struct{ got, known, want string }{
		{"lenght", "length lengths width", "length"},
		{"loss_bd", "gain_db loss_db", "loss_db"},
		// The nearest, and not the first that is near; of equals the first by the alphabet.
		{"dome-12", "dome-2 dome-12x dome-11 dome-1", "dome-1"}, // all are 1 away
		{"dome-3", "dame-33 dome-31", "dome-31"},
		{"amp-es", "amp amp-east amp-e", "amp-e"},
		{"roof2", "hood2 root2 roof", "roof"}, // roof and root2 are both 1 away
		{"N male", "N female,NM", "N female"},
		{"copper", "hopper cooper copter copper-clad", "cooper"},
		{"indoors", "outdoor indoor", "indoor"},
		// Case and swapped neighbours.
		{"HEIGHT", "height weight", "height"},
		{"ahngle", "hangle xxxxxx", "hangle"},
		{"abdc", "abcd xxxx", "abcd"},
		// The allowed distance grows with the length.
		{"ab", "ax xy", "ax"},
		{"ab", "xy", ""},
		{"abc", "axy", "axy"}, // two of three, five or four
		{"abcde", "abcxy", "abcxy"},
		{"abcd", "abxy", "abxy"},
		{"abcd", "axyz", ""},
		{"abcdef", "abcdxy", "abcdxy"},
		{"abcdef", "abcxyz", ""},
		{"abcdefghi", "abcdefxyz", "abcdefxyz"},
		{"abcdefghi", "abcdewxyz", ""},
		{"", "a b", "a"},
		{"x", "", ""},
		{"straße", "strasse", "strasse"},
	} {
		sep := " "
		if strings.Contains(c.known, ",") {
			sep = ","
		}
		known := strings.Split(c.known, sep)
		if c.known == "" {
			known = nil
		}
		if got := Nearest(c.got, known); got != c.want {
			t.Errorf("of %q the nearest to %q is %q, want %q", c.known, c.got, got, c.want)
		}
	}
}

// Whatever the order of the known names, the answer is the same, and nothing that
// is known lies nearer.
func TestNearestIsNearest(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 1))
	word := func() string {
		b := make([]byte, 1+r.IntN(8))
		for i := range b {
			b[i] = "abc-"[r.IntN(4)]
		}
		return string(b)
	}
	found := 0
	for range 2000 {
		known := make([]string, 1+r.IntN(8))
		for i := range known {
			known[i] = word()
		}
		before := strings.Join(known, " ")
		got := word()
		name := Nearest(got, known)
		if strings.Join(known, " ") != before {
			t.Fatal("the list was changed")
		}
		r.Shuffle(len(known), func(i, j int) { known[i], known[j] = known[j], known[i] })
		if again := Nearest(got, known); again != name {
			t.Fatalf("%q in %q: %q, and in another order %q", got, before, name, again)
		}
		least := len(got) + 100
		for _, k := range known {
			least = min(least, plainDistance(got, k))
		}
		switch {
		case name == "" && least <= allowedDistance(got):
			t.Fatalf("%q in %q: nothing, though one is %d away", got, before, least)
		case name != "" && plainDistance(got, name) != least:
			t.Fatalf("%q in %q: %q, though one is only %d away", got, before, name, least)
		}
		if name != "" {
			found++
		}
	}
	if found < 200 || found > 1990 {
		t.Errorf("%d of 2000 words are near a name, so one side is hardly tested", found)
	}
}

// plainDistance is the same measure without its shortcuts: optimal string alignment
// by its recursion, on a whole table.
func plainDistance(a, b string) int {
	d := make([][]int, len(a)+1)
	for i := range d {
		d[i] = make([]int, len(b)+1)
		for j := range d[i] {
			switch {
			case i == 0:
				d[i][j] = j
			case j == 0:
				d[i][j] = i
			default:
				cost := 1
				if a[i-1] == b[j-1] {
					cost = 0
				}
				d[i][j] = min(d[i-1][j]+1, d[i][j-1]+1, d[i-1][j-1]+cost)
				if i > 1 && j > 1 && a[i-1] == b[j-2] && a[i-2] == b[j-1] {
					d[i][j] = min(d[i][j], d[i-2][j-2]+1)
				}
			}
		}
	}
	return d[len(a)][len(b)]
}

func TestNearestIgnoresLongNames(t *testing.T) {
	long := strings.Repeat("a", 129)
	if got := Nearest(long, []string{long}); got != "" {
		t.Errorf("a name of 129 bytes is compared")
	}
	if got := Nearest(long[1:], []string{long}); got != long {
		t.Errorf("a name of 128 bytes is not compared")
	}
}

func TestQuote(t *testing.T) {
	for s, want := range map[string]string{
		"":                       `""`,
		"a b":                    `"a b"`,
		strings.Repeat("ä", 60):  `"` + strings.Repeat("ä", 60) + `"`,
		strings.Repeat("ä", 61):  `"` + strings.Repeat("ä", 60) + `…"`,
		strings.Repeat("x", 999): `"` + strings.Repeat("x", 60) + `…"`,
	} {
		if got := Quote(s); got != want {
			t.Errorf("%q is quoted %s, want %s", s, got, want)
		}
	}
}
