package rules

var groundRules = []*Rule{}
