package rules_test

func init() {
	for _, name := range []string{"ground/bond"} {
		unmeasured[name] = true
	}
}
