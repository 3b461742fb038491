package unit

import (
	"math/rand/v2"
	"regexp"
	"strings"
	"testing"
)

// The patterns take what the functions read, and nothing else but figures out of bounds.
func TestPatterns(t *testing.T) {
	reads := func(err error) (bool, bool) {
		if err == nil {
			return true, true
		}
		for _, bounds := range []string{"lies between", "lies above 0"} {
			if strings.Contains(err.Error(), bounds) {
				return false, true
			}
		}
		return false, false
	}
	types := []struct {
		name, pattern string
		read          func(string) error
	}{
		{"length", LengthPattern, func(s string) error { _, err := ParseLength(s); return err }},
		{"temperature", TemperaturePattern, func(s string) error { _, err := ParseTemperature(s); return err }},
		{"speed", SpeedPattern, func(s string) error { _, err := ParseSpeed(s); return err }},
		{"gauge", GaugePattern, func(s string) error { _, err := ParseGauge(s); return err }},
		{"money", MoneyPattern, func(s string) error { _, err := ParseMoney(s); return err }},
	}
	words := []string{"0", "1", "18", "40", "41", "4", "07", ".", "-", "/", " ", " ", "m", "mm", "mm2", "mm²", "ft", "in", "cm", "km", "C", "°F", "°", "m/s", "mph", "km/h", "AWG", "e", "+", "\t"}
	r := rand.New(rand.NewPCG(1, 2))
	for _, typ := range types {
		pattern := regexp.MustCompile(typ.pattern)
		stand := 0
		for range 200000 {
			s := ""
			for range 1 + r.IntN(6) {
				s += words[r.IntN(len(words))]
			}
			ok, inBounds := reads(typ.read(s))
			match := pattern.MatchString(s)
			if ok {
				stand++
			}
			switch {
			case ok && !match:
				t.Errorf("%s: %q is read, and the pattern refuses it", typ.name, s)
			case match && !ok && !inBounds:
				t.Errorf("%s: %q is not read, and the pattern takes it", typ.name, s)
			}
		}
		if stand < 50 {
			t.Errorf("%s: only %d of the texts could be read", typ.name, stand)
		}
	}
}

// A length above nothing: the pattern takes no zero.
func TestSomeLength(t *testing.T) {
	pattern := regexp.MustCompile(SomeLengthPattern)
	for text, want := range map[string]bool{"1 m": true, "0.5 m": true, ".5 ft": true, "10. m": true, "0 m": false, "0.0 mm": false, "-1 m": false, ". m": false, "1.2.3 m": false} {
		if pattern.MatchString(text) != want {
			t.Errorf("the pattern takes %q: %v", text, !want)
		}
	}
}
