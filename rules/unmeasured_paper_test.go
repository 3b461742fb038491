package rules_test

func init() {
	for _, name := range []string{"paper/consent", "paper/registration", "paper/permit", "paper/personal"} {
		unmeasured[name] = true
	}
}
