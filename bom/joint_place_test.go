package bom_test

import "testing"

// A captive lead meets at its free end: the whip on the roof is joined in the room.
func TestJointOfALeadIsAtItsFreeEnd(t *testing.T) {
	const devices = `
[device]
whip = { part = "WHIP", place = "roof" }
split = { part = "SPLIT-2", place = "room" }
out = { part = "SPLIT-2", place = "roof" }
`
	for plan, want := range map[string]string{
		`joint = [{ a = "whip", b = "split.in", way = ["roof", "room"] }]` + "\n":                                                           "room",
		`joint = [{ a = "split.in", b = "whip" }]` + "\n":                                                                                   "room",
		`joint = [{ a = "whip", b = "out.in" }]` + "\n":                                                                                     "roof",
		`cable.L1 = { part = "CX", length = "2 m", from = "whip.rf", to = "split.in", ends = ["NF", "NM"], way = ["wall", "room"] }` + "\n": "wall",
		`cable.L2 = { part = "CX", length = "2 m", from = "whip.rf", to = "split.in", ends = ["NF", "NM"] }` + "\n":                         "roof", // nobody knows how far its lead goes
	} {
		g := whole(t, plan+places+devices)
		if got := g.Mates[0].Place(); got == nil || got.ID != want {
			t.Errorf("%s meets elsewhere than in %s", plan, want)
		}
	}
}
