package rules_test

func init() { unmeasured["power/dc-path"] = true }
