package rules_test

import (
	"context"
	"fmt"
	"slices"
	"sync"
	"testing"

	"driploop/rules"
)

// An inspection tells of every plan that it reads, of those it only reads for the
// shelf too, and of what it does after that; so does a purchase.
func TestProgress(t *testing.T) {
	const plans = 12
	for _, c := range []struct {
		name string
		run  func(*rules.Firm) error
		want []string // what is told, each line once, counts in their order
	}{
		{"all", func(f *rules.Firm) error { _, err := f.Inspect(context.Background(), nil); return err },
			append(reading(plans), "sharing out the shelf")},
		{"one", func(f *rules.Firm) error { _, err := f.Inspect(context.Background(), f.PlanFiles[:1]); return err },
			append(append(reading(1), reading(plans-1)...), "sharing out the shelf")},
		{"demands", func(f *rules.Firm) error { _, err := f.Demands(context.Background()); return err }, reading(plans)},
	} {
		t.Run(c.name, func(t *testing.T) {
			var lock sync.Mutex
			var told []string
			firm, err := rules.Load(benchFirm(plans), rules.Options{Progress: func(what string, done, total int) {
				lock.Lock()
				defer lock.Unlock()
				if total > 0 {
					what = fmt.Sprintf("%s %02d of %02d", what, done, total)
				}
				told = append(told, what)
			}})
			if err != nil {
				t.Fatal(err)
			}
			if err := c.run(firm); err != nil {
				t.Fatal(err)
			}
			slices.Sort(told)
			slices.Sort(c.want)
			if !slices.Equal(told, c.want) {
				t.Errorf("told\n%q\nwanted\n%q", told, c.want)
			}
		})
	}
}

func reading(plans int) []string {
	var out []string
	for i := range plans + 1 {
		out = append(out, fmt.Sprintf("reading plans %02d of %02d", i, plans))
	}
	return out
}
