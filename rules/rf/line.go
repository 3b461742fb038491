package rf

import "driploop/catalog/unit"

// Loss is what a part or a whole line takes, as three figures that are summed
// apart: power and exposure limits meet the least, reach meets the greatest, and
// the nominal is what a meter should read on a mild day.
type Loss struct{ Least, Nominal, Greatest unit.DB }

// Exactly is a loss without spread.
func Exactly(d unit.DB) Loss { return Loss{d, d, d} }

// Plus is the loss of both in a row.
func (l Loss) Plus(m Loss) Loss {
	return Loss{l.Least + m.Least, l.Nominal + m.Nominal, l.Greatest + m.Greatest}
}
