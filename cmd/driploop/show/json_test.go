package show

import (
	"encoding/json"
	"strings"
	"testing"
)

func TestEncode(t *testing.T) {
	for _, s := range append([]string{"a\u009b\u202e\U000e0041###[x] \\##"}, hostileTexts...) {
		b, err := encode(map[string]string{"says": s})
		if err != nil {
			t.Fatal(err)
		}
		if bad := harmlessText(string(b)); bad != "" {
			t.Errorf("%q became %q: %s", s, b, bad)
		}
		var back map[string]string
		if err := json.Unmarshal(b, &back); err != nil || back["says"] != strings.ToValidUTF8(s, "\uFFFD") && strings.ToValidUTF8(s, "") == s {
			t.Errorf("%q came back as %q (%v)", s, back["says"], err)
		}
	}
}
