package rules_test

func init() {
	for _, name := range []string{"ground/bond", "ground/electrodes", "ground/dc", "ground/data", "ground/reversed", "ground/mains"} {
		unmeasured[name] = true
	}
}
