package unit

import (
	"math/rand/v2"
	"strconv"
	"testing"
)

func TestSpell(t *testing.T) {
	for s, want := range map[string]string{
		"18.50 m": "18.5 m", "18.5 m": "18.5 m", " 60   ft ": "60 ft", "8.0 in": "8 in", "008 mm": "8 mm", ".5 cm": "0.5 cm",
		"5. m": "5 m", "0 m": "0 m", "0.0 m": "0 m", "100 m": "100 m", "-15.0 C": "-15 C", "-0.50 F": "-0.5 F", "45 °C": "45 C",
		"2/0 AWG": "2/0 AWG", "0 AWG": "0 AWG", "10  AWG": "10 AWG", "16.00 mm²": "16 mm2", "44.10 m/s": "44.1 m/s",
		"160 km/h": "160 km/h", "18.5m": "18.5m", "": "", "1.2.3 m": "1.2.3 m", "1e3 m": "1e3 m", ". m": ". m", "- m": "- m",
	} {
		if got := Spell(s); got != want {
			t.Errorf("%q is spelled %q, want %q", s, got, want)
		}
		if got := Spell(want); got != want {
			t.Errorf("%q, spelled once, is spelled %q again", want, got)
		}
	}
}

// However a figure is written, its usual spelling is read as the very same.
func TestSpellMeansTheSame(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 1))
	read := 0
	for range 40000 {
		digits := func(most int) (s string) {
			for range r.IntN(most + 1) {
				s += string("0012345678900"[r.IntN(13)])
			}
			return s
		}
		s := []string{"", "-"}[r.IntN(2)] + digits(4) + []string{"", "."}[r.IntN(2)] + digits(6) +
			[]string{" ", "  ", ""}[r.IntN(3)] + []string{"m", "ft", "in", "mm", "C", "°F", "mph", "mm²", "AWG"}[r.IntN(9)]
		for _, p := range []func(string) string{printed(ParseLength), printed(ParseTemperature), printed(ParseSpeed),
			printed(func(s string) (float64, error) { g, err := ParseGauge(s); return g.MM2, err })} {
			before, after := p(s), p(Spell(s))
			if before != "" {
				read++
			}
			if before != "" && before != after {
				t.Fatalf("%q is read as %s, spelled %q as %s", s, before, Spell(s), after)
			}
		}
	}
	if read < 5000 {
		t.Errorf("only %d of the spellings can be read", read)
	}
}

// printed is what a function reads, to the last bit, or nothing.
func printed[T ~float64 | ~int64](read func(string) (T, error)) func(string) string {
	return func(s string) string {
		v, err := read(s)
		if err != nil {
			return ""
		}
		return strconv.FormatFloat(float64(v), 'b', -1, 64)
	}
}
