package rules

import (
	"slices"
	"sort"
)

// Rules lists all rules, area by area, in the order of their documentation.
var Rules []*Rule

var byName = map[string]*Rule{}

// The list is filled on start because paper/waiver itself looks rules up.
func init() {
	Rules = slices.Concat(fileRules, partRules, mateRules, matchRules, bandRules,
		lossRules, groundRules, gainRules, gainSiteRules, []*Rule{gainRadioEIRP}, reachRules, exposureRules, buildRules, powerRules, stockRules, paperRules, catalogRules)
	if err := validate(Rules); err != nil {
		panic(err) // a mistake of the program, met by the first test
	}
	for _, r := range Rules {
		byName[r.Name] = r
	}
}

// Find finds a rule by name, or nil.
func Find(name string) *Rule { return byName[name] }

// Names lists the names of all rules in alphabetical order.
func Names() []string {
	var out []string
	for _, r := range Rules {
		out = append(out, r.Name)
	}
	sort.Strings(out)
	return out
}
