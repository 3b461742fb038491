package rules

var bandRules = []*Rule{}
