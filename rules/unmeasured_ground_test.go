package rules_test

func init() {
	for _, name := range []string{"ground/bond", "ground/electrodes"} {
		unmeasured[name] = true
	}
}
