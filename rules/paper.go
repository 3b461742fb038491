package rules

var paperRules = []*Rule{paperWaiver}
