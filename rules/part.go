package rules

var partRules = []*Rule{}
