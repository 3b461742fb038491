package rules_test

func init() { unmeasured["build/airbag"] = true }
