package rules

var mateRules = []*Rule{}
