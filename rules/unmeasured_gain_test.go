package rules_test

func init() { unmeasured["gain/mobility"] = true }
