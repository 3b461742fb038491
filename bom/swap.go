package bom

// Swap is a substitute that a plan could take: one step of a part's instead, for all
// pieces of the part in the plan.
type Swap struct{ Job, From, To string }
