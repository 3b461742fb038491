package rules_test

func init() {
	for _, name := range []string{"stock/stranded", "stock/tag", "stock/counted-twice", "stock/unknown", "stock/same-day"} {
		unmeasured[name] = true
	}
}
