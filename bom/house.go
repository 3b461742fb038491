package bom

import (
	"driploop/catalog/source"
	"driploop/catalog/unit"
)

// DefaultCutAllowance is added to every cut where the house says nothing.
const DefaultCutAllowance unit.MM = 300

// House is what the firm asks of its own warehouse and crews: the keys of [house]
// that quantities, stock and purchase depend on. Thresholds of rules are keys of
// the same table, bound by package rules.
type House struct {
	CutAllowance  source.Val[unit.MM]
	UsableRemnant source.Val[unit.MM]
	BuyAheadDays  source.Val[int]
	Sealing       source.Val[string]
	ClaimDays     source.Val[int]
	ReadyDays     source.Val[int]
	SlipDays      source.Val[int]
	CountDays     source.Val[int]
	ReelDoubt     source.Val[unit.MM]
}

// Keys reads the house's keys from [house].
func (h *House) Keys(k *source.Keys) {
	source.Opt(k, &h.CutAllowance, "cut_allowance", source.Length, "added to every cut; absent: 0.3 m")
	source.Opt(k, &h.UsableRemnant, "usable_remnant", source.Length, "a leftover from this length on goes back; absent: 3 m")
	source.Opt(k, &h.BuyAheadDays, "buy_ahead_days", source.Count(0, 3650), "how far ahead purchases look; absent: 30")
	source.Opt(k, &h.Sealing, "sealing", source.Name, "consumable that takeoff adds at joints in the weather")
	source.Opt(k, &h.ClaimDays, "claim_days", source.Count(0, 3650), "a job whose date is longer past no longer goes first; absent: 30")
	source.Opt(k, &h.ReadyDays, "ready_days", source.Count(0, 365), "goods are needed this many working days before the install; absent: 1")
	source.Opt(k, &h.SlipDays, "slip_days", source.Count(0, 365), "days that an overdue delivery is expected to slip; absent: 5")
	source.Opt(k, &h.CountDays, "count_days", source.Count(0, 3650), "a count older than this is old; absent: 60")
	source.Opt(k, &h.ReelDoubt, "reel_doubt", source.Length, "kept back on a reel whose length is a guess; absent: 0.5 m")
}
