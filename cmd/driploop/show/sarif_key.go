package show

import (
	"crypto/sha256"
	"encoding/hex"
	"fmt"
	"regexp"
	"strings"

	"driploop/rules"
)

// planKeys gives each finding a key by which a code host knows it again in the next
// run. It is made of what stays the same where lines move, lists are put into another
// order or a figure changes: the rule, the file, the thing, the band and direction. It
// never holds a line, a column or an index. Where the thing is no more than the file,
// the job or a row of a list, and where findings would share a key, what is said goes
// in too, without its figures; what is still the same is counted.
func planKeys(all []listed) []string {
	keys := make([]string, len(all))
	shared := map[string]int{}
	for i, l := range all {
		keys[i] = planKey(l)
		shared[keys[i]]++
	}
	seen := map[string]int{}
	for i, l := range all {
		if shared[keys[i]] > 1 {
			keys[i] += "\x00" + saying(l.Finding)
		}
		key := keys[i]
		if n := seen[key]; n > 0 {
			keys[i] += fmt.Sprintf("\x00%d", n)
		}
		seen[key]++
	}
	for i, k := range keys {
		sum := sha256.Sum256([]byte(k))
		keys[i] = hex.EncodeToString(sum[:16])
	}
	return keys
}

func planKey(l listed) string {
	kind, name, _ := strings.Cut(l.On, ".")
	parts := []string{l.Rule.Name, l.path(), kind, name, l.Band, direction(l.Says)}
	if rowed[kind] {
		parts[3] = ""
	}
	if name == "" || rowed[kind] {
		parts = append(parts, saying(l.Finding))
	}
	return strings.Join(parts, "\x00")
}

// rowed are the things that have no name and are called by their row.
var rowed = map[string]bool{"signal": true, "reading": true}

func direction(says string) string {
	switch {
	case strings.Contains(says, "downlink"):
		return "downlink"
	case strings.Contains(says, "uplink"):
		return "uplink"
	}
	return ""
}

// saying is what a finding says without the figures in it. Digits of a name (B12,
// CX-10) stay.
func saying(f *rules.Finding) string { return loneFigure.ReplaceAllString(f.Says, "$1#") }

var loneFigure = regexp.MustCompile(`(^|[\s(±≥≤<>=…–/])[-−]?\d[\d.,]*`)
