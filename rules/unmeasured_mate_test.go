package rules_test

func init() {
	for _, name := range []string{"mate/port", "mate/shared", "mate/series", "mate/gender", "mate/polarity", "mate/fit",
		"mate/loose", "mate/open", "mate/choice", "mate/adapters", "match/impedance"} {
		unmeasured[name] = true
	}
}
