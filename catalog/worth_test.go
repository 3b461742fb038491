package catalog

import (
	"testing"

	"driploop/catalog/unit"
)

func TestWorth(t *testing.T) {
	o, problems := ReadOffers(docOf(t, "offers/all.toml", `
[vendor.tern]
[vendor.plover]
[[offer]]
part = "NC"
vendor = "tern"
pack = 10
price = "62.00"
[[offer]]
part = "NC"
vendor = "plover"
pack = 25
price = "151.00"
[[offer]]
part = "NC"
vendor = "plover"
pack = 25
price = "100.00"
until = 2026-11-30
[[offer]]
part = "NC"
vendor = "nobody"
price = "1.00"
[[offer]]
part = "CX"
vendor = "tern"
pack = "152.4 m"
price = "318.00"
breaks = [[3, "100.00"]]
[[offer]]
part = "CX"
vendor = "tern"
cut_from = "10 m"
price = "2.95"
[[offer]]
brings = { AMP = 1, NC = 9 }
vendor = "tern"
price = "1.00"
[[offer]]
part = "CY"
vendor = "tern"
pack = "50 m"
price = "90.00"
least = 4
breaks = [[3, "80.00"]]
`))
	wantNone(t, problems)
	day := unit.Date{Year: 2026, Month: 12, Day: 1}
	for _, c := range []struct {
		part string
		qty  Quantity
		want unit.Money
	}{
		{"NC", Quantity{Each: 1}, 60400},          // 151 / 25
		{"NC", Quantity{Each: 25}, 1510000},       // a whole pack
		{"NC", Quantity{}, 0},                     // nothing
		{"CX", Quantity{Length: 29300}, 611400},   // 29.3 m of 152.4 m at 318.00 is 61.138
		{"CX", Quantity{Length: 152400}, 3180000}, // a break is for those who buy three
		{"CY", Quantity{Length: 10000}, 160000},   // four at least, so at the break
	} {
		w, ok := o.Worth(c.part, day)
		if got := w.Of(c.qty); !ok || got != c.want {
			t.Errorf("%s %s is worth %s, want %s", c.qty, c.part, got, c.want)
		}
	}
	if w, ok := o.Worth("AMP", day); ok {
		t.Errorf("a box says what its amplifier is worth: %+v", w)
	}
	if w, _ := o.Worth("NC", unit.Date{Year: 2026, Month: 11, Day: 30}); w.Of(Quantity{Each: 1}) != 40000 {
		t.Error("an offer counts on its last day")
	}
}
