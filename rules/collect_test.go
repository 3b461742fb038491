package rules_test

import (
	"runtime/debug"
	"testing"

	"driploop/rules"
)

func TestCollectLessIsTakenBackAndLeavesGOGCAlone(t *testing.T) {
	percent := func() int {
		now := debug.SetGCPercent(100)
		debug.SetGCPercent(now)
		return now
	}
	defer debug.SetGCPercent(debug.SetGCPercent(100))
	t.Setenv("GOGC", "")
	before := percent()
	takeBack := rules.CollectLess()
	if got := percent(); got <= before {
		t.Errorf("garbage is collected at %d %%, and before that at %d %%", got, before)
	}
	if takeBack(); percent() != before {
		t.Errorf("after taking it back %d %%, expected %d %%", percent(), before)
	}
	t.Setenv("GOGC", "50")
	if rules.CollectLess(); percent() != before {
		t.Errorf("with GOGC set it is changed to %d %%", percent())
	}
}
