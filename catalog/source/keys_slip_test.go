package source

import (
	"strings"
	"testing"
)

// plug is a record with one key that must be there and three that may.
type plug struct {
	Ohm    Val[float64]
	Name   Val[string]
	Offset Val[string]
	Qty    Val[int]
}

func (x *plug) keys(k *Keys) {
	Need(k, &x.Ohm, "impedance_ohm", Between(1, 1000, "ohm"), "characteristic impedance")
	Opt(k, &x.Name, "name", Text, "what it is called")
	Opt(k, &x.Offset, "offset", Checked("offset", `"x"`, NameOf), "a name that begins with a vowel")
	Opt(k, &x.Qty, "qty", Count(0, 9), "how many")
}

func TestASlipInANeededKeyIsSaidOnce(t *testing.T) {
	got := read(t, "impedence_ohm = 50\n", new(plug).keys)
	wants(t, got, []string{`1:1 impedence_ohm: nothing reads the key "impedence_ohm" here, and impedance_ohm is needed; did you mean impedance_ohm?`})
}

func TestAnUnknownKeyDoesNotExcuseAMissingOne(t *testing.T) {
	if got := read(t, "nmae = \"x\"\ncolour = 3\n", new(plug).keys); len(got) != 3 {
		t.Errorf("want the missing key and both unknown ones, got:\n  %s", strings.Join(got, "\n  "))
	}
}

func TestASlipInsideBracesIsSaidOnce(t *testing.T) {
	got := read(t, "rows = [{ impedance_ohn = 50 }]\n", func(k *Keys) {
		var list Val[[]Val[plug]]
		Opt(k, &list, "rows", ListOf(Inline((*plug).keys)), "rows")
	})
	wants(t, got, []string{`1:11 impedance_ohn: rows: nothing reads the key "impedance_ohn" here, and impedance_ohm is needed`})
}

func TestMessagesTakeTheRightArticle(t *testing.T) {
	wants(t, read(t, "impedance_ohm = 50\noffset = 4\n", new(plug).keys), []string{`2:10 4: offset: the number 4 was read, an offset is expected`})
}
