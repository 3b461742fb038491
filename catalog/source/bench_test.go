package source

import (
	"fmt"
	"strings"
	"testing"

	"github.com/BurntSushi/toml"
)

// planLike is a text of about 5 KB built like an install plan: a few single
// tables, many named ones, arrays of tables, lists and tables in braces.
func planLike() string {
	var b strings.Builder
	b.WriteString(`# ground floor and store
[job]
title      = "Quay Lane bakery, ground floor"
stage      = "review"
install_on = 2026-12-15
profile    = "us-fixed-wideband"
bands      = ["B12", "B5", "B4", "B2"]

[operator.north]
consent    = { state = "granted", ref = "mail", on = 2026-11-20 }
registered = { state = "applied" }

[site]
shell_db = 14
coldest  = "-15 C"
wind     = "44 m/s"

[place.roof]
kind = "outdoor"
at   = [0.0, 0.0, 7.5]

[[between]]
a = "roof"
b = "shop"
loss_db = [[700, 4], [2100, 7]]
`)
	for i := range 12 {
		fmt.Fprintf(&b, `
[device.dome-%d]
part   = "DOME-NF"
place  = "shop"
at     = [2.0, 5.0, 2.7]           # overrides the place's
people = "1.2 m"

[cable.C%d]
part   = "CX-10"
length = "18.5 m"
from   = "splitter.out%d"
to     = "dome-%d.rf"
ends   = ["N male", "NC-10-NM-CRIMP"]
way    = ["roof", "entry"]

[[signal]]
operator = "north"
band     = "B12"
mhz      = %d.5
rsrp_dbm = -101
`, i, i, i, i, 730+i)
	}
	b.WriteString(`
[[waive]]
rule    = "loss/feed"
on      = "cable.C1"
because = "the owner allows no other route"
by      = "site lead"
until   = 2027-01-31
`)
	return b.String()
}

func BenchmarkParse(b *testing.B) {
	src := []byte(planLike())
	b.SetBytes(int64(len(src)))
	b.ReportAllocs()
	for b.Loop() {
		if _, found := parseBytes(src); len(found) > 0 {
			b.Fatal(listed(found))
		}
	}
}

// BenchmarkIndex is Parse without the second reading.
func BenchmarkIndex(b *testing.B) {
	src := []byte(planLike())
	b.SetBytes(int64(len(src)))
	b.ReportAllocs()
	for b.Loop() {
		f, _ := NewFile("plan.toml", src)
		x := newIndexer(f)
		x.run()
	}
}

// BenchmarkDecode is the measure that Parse is held against.
func BenchmarkDecode(b *testing.B) {
	src := planLike()
	b.SetBytes(int64(len(src)))
	b.ReportAllocs()
	for b.Loop() {
		var m map[string]any
		if _, err := toml.Decode(src, &m); err != nil {
			b.Fatal(err)
		}
	}
}
