package rules

var matchRules = []*Rule{}
