package rules

var gainRules = []*Rule{}
