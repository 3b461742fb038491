package rules

// cautions is the short list of what to mind with the kinds of work in the plan.
func (c *Case) cautions(findings []*Finding) []string {
	return nil
}
