package rules

import "driploop/catalog/source"

// Alone is what one rule says of a plan, as an inspection without waivers has it.
func (f *Firm) Alone(e source.Entry, rule *Rule) []*Finding {
	c, broken := f.Case(e)
	if broken || c.Stage() == "cancelled" {
		return nil
	}
	r := Report{rule: rule}
	rule.Check(c, &r)
	return f.weigh(&r, c.Stage())
}
