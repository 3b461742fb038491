package rules

var catalogRules = []*Rule{}
