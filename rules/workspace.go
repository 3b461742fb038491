package rules

import (
	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
)

// WorkspaceFile is the name of the file at the root of every workspace.
const WorkspaceFile = "driploop.toml"

// Workspace is what driploop.toml says.
type Workspace struct {
	Name     source.Val[string]
	Plans    source.Val[catalog.Words] // patterns of file names
	Catalog  source.Val[catalog.Words]
	Offers   source.Val[catalog.Words]
	Stock    source.Val[catalog.Words]
	Profiles source.Val[catalog.Words]
	Profile  source.Val[string]
	Code     source.Val[string]
	Currency source.Val[string]
	Lengths  source.Val[string]
	House    House
	Weights  []Override
	Premises catalog.Premises
}

// House is what the firm asks of itself.
type House struct {
	bom.House
	FeedLossDB        source.Val[float64]
	LegLossDB         source.Val[float64]
	CableLossDB       source.Val[float64]
	IsolationMarginDB source.Val[float64]
	VSWR              source.Val[float64]

	AntennaToleranceDB source.Val[float64]
	CableTolerance     source.Val[float64] // per cent

	BondLength source.Val[unit.MM]
	EntryReach source.Val[unit.MM]

	FuseReach        source.Val[unit.MM]
	DropPercent      source.Val[float64]
	SupplyPercent    source.Val[float64]
	ConverterPercent source.Val[float64]
	ChargingPercent  source.Val[float64]
	CrankingPercent  source.Val[float64]

	BallastFactor source.Val[float64]
	RoofFriction  source.Val[float64]
	LineClearance source.Val[unit.MM]
	BendPerOD     source.Val[float64]
	ClosedRiseC   source.Val[float64]
	PlaneWaves    source.Val[float64]

	BodyLossDB      source.Val[float64]
	ReplacedGainDBi source.Val[float64]
	PhoneGainDBi    source.Val[float64]
	FadeMarginDB    source.Val[float64]
	ReferenceDBm    source.Val[float64]
	SensitivityDBm  source.Val[float64]
}

// Override changes what a plain failure of a rule weighs.
type Override struct {
	Rule    string
	At      source.Place
	Weight  source.Val[string]
	Because source.Val[string]
}

func (w *Workspace) keys(k *source.Keys) {
	source.One(k, w, "workspace", (*Workspace).head, "what belongs to the workspace")
	source.One(k, &w.House, "house", (*House).keys, "what the firm asks of itself")
	rows := []source.Pick[Override]{}
	source.Each(k, &rows, "rule", byRule(), source.Inline((*Override).keys), "what plain failures of a rule weigh")
	for _, r := range rows {
		r.Val.V.Rule, r.Val.V.At = r.Name, r.At
		w.Weights = append(w.Weights, r.Val.V)
	}
	w.Premises.Keys(k)
}

func (w *Workspace) head(k *source.Keys) {
	patterns := source.ListOf(source.Text)
	source.Opt(k, &w.Name, "name", source.Text, "the firm")
	source.Opt(k, &w.Plans, "plans", patterns, "plan files; absent: plans/**/*.toml")
	source.Opt(k, &w.Catalog, "catalog", patterns, "catalog files, beside the generic catalog; absent: catalog/**/*.toml")
	source.Opt(k, &w.Offers, "offers", patterns, "offer files; absent: offers/**/*.toml")
	source.Opt(k, &w.Stock, "stock", patterns, "stock sheets and orders; absent: stock/**/*.toml")
	source.Opt(k, &w.Profiles, "profiles", patterns, "limit profiles and codes of the firm; absent: profiles/**/*.toml")
	source.Opt(k, &w.Profile, "profile", source.Name, "limit profile where a plan names none")
	source.Opt(k, &w.Code, "code", source.Name, "grounding and safety code where a plan names none")
	source.Opt(k, &w.Currency, "currency", source.Text, "currency of all prices")
	source.Opt(k, &w.Lengths, "lengths", source.OneOf("m", "ft"), "unit in which lengths are printed; absent: m")
}

func (h *House) keys(k *source.Keys) {
	h.House.Keys(k)
	db := source.Between(0, 100, "dB")
	source.Opt(k, &h.FeedLossDB, "feed_loss_db", db, "greatest loss of a feed; absent: 6")
	source.Opt(k, &h.LegLossDB, "leg_loss_db", db, "greatest loss of a leg's cables and connectors, splitters left out; absent: 8")
	source.Opt(k, &h.CableLossDB, "cable_loss_db", db, "greatest loss of one cable; absent: 5")
	source.Opt(k, &h.IsolationMarginDB, "isolation_margin_db", db, "isolation above the gain that is set; absent: 15")
	source.Opt(k, &h.VSWR, "vswr", source.Between(1, 20, ""), "greatest standing wave ratio of an antenna in the planned bands; absent: 2")
	source.Opt(k, &h.AntennaToleranceDB, "antenna_tolerance_db", db, "how far an antenna's gain may be off; absent: 0.5")
	level := source.Between(-200, 60, "dBm")
	source.Opt(k, &h.BodyLossDB, "body_loss_db", db, "what the body that holds a phone takes; absent: 3")
	source.Opt(k, &h.ReplacedGainDBi, "replaced_gain_dbi", source.Between(-30, 30, "dBi"), "gain of a router's own antenna; absent: 2")
	source.Opt(k, &h.PhoneGainDBi, "phone_gain_dbi", source.Between(-30, 10, "dBi"), "gain of a phone's antenna; absent: -3")
	source.Opt(k, &h.FadeMarginDB, "fade_margin_db", db, "margin for 90 % of an area; absent: 8")
	source.Opt(k, &h.ReferenceDBm, "reference_dbm", level, "reference signal of a base station, per resource element; absent: 18")
	source.Opt(k, &h.SensitivityDBm, "base_sensitivity_dbm", level, "base station, one resource block; absent: -118")
	source.Opt(k, &h.CableTolerance, "cable_tolerance_percent", source.Between(0, 50, "%"), "how far a cable's loss may be off; absent: 4")
	percent := source.Between(1, 200, "%")
	source.Opt(k, &h.FuseReach, "fuse_reach", source.Length, "how far from the battery a fuse may sit; absent: 0.3 m")
	source.Opt(k, &h.DropPercent, "drop_percent", percent, "greatest drop of a direct current lead, of the nominal voltage; absent: 5")
	source.Opt(k, &h.SupplyPercent, "supply_load_percent", percent, "how far a supply may be loaded; absent: 100")
	source.Opt(k, &h.ConverterPercent, "converter_percent", percent, "what a converter gives of what it takes; absent: 85")
	source.Opt(k, &h.ChargingPercent, "charging_percent", percent, "voltage of a battery while it charges, of its nominal voltage; absent: 120")
	source.Opt(k, &h.CrankingPercent, "cranking_percent", percent, "voltage of a vehicle while its engine starts, of the nominal voltage; absent: 75")
	source.Opt(k, &h.BondLength, "bond_length", source.Length, "longest way over bonds from an arrestor to its electrode; absent: 20 ft")
	source.Opt(k, &h.EntryReach, "entry_reach", source.Length, "how far behind the entry an arrestor may sit; absent: 5 ft")
	source.Opt(k, &h.BallastFactor, "ballast_factor", source.Between(1, 20, ""), "how many times a ballasted mount holds the wind; absent: 1.5, or what the code asks")
	source.Opt(k, &h.RoofFriction, "roof_friction", source.Between(0.05, 2, ""), "of a ballasted mount whose part gives none; absent: 0.4")
	source.Opt(k, &h.LineClearance, "line_clearance", source.Length, "from a power line to whatever could fall toward it; absent: what the code asks, else 10 ft")
	source.Opt(k, &h.BendPerOD, "bend_per_od", source.Between(1, 50, ""), "least bend of a cable whose part gives none, in its diameters; absent: 5")
	source.Opt(k, &h.ClosedRiseC, "closed_rise_c", source.Between(0, 60, "K"), "what the sun adds in an attic or a vehicle with no hottest of its own; absent: 15")
	source.Opt(k, &h.PlaneWaves, "plane_wavelengths", source.Between(0, 2, ""), "of metal around an antenna that needs a ground plane; absent: 0.25")
}

func (o *Override) keys(k *source.Keys) {
	source.Need(k, &o.Weight, "weight", source.OneOf("hold", "punch", "note", "off"), "what a plain failure weighs")
	source.Need(k, &o.Because, "because", source.Text, "why the firm weighs it so")
}

// byRule is the naming of a table whose keys are rules.
func byRule() source.Naming {
	return source.Naming{Check: ruleName, Form: &source.Form{Among: Names}}
}

func ruleName(name string) error {
	if Find(name) == nil {
		return unknownRule(name)
	}
	return nil
}

// DescribeWorkspace documents driploop.toml.
func DescribeWorkspace() *source.Record { return source.Describe((&Workspace{}).keys) }

// PlanPatterns lists the patterns of the names of plan files.
func (w *Workspace) PlanPatterns() []string { return patterns(w.Plans, "plans") }

// ReadsPlan reports whether a file of that path is a plan of the workspace.
func (w *Workspace) ReadsPlan(path string) bool { return anyMatch(w.PlanPatterns(), path) }

// patterns lists the patterns of one sort of file, or the default for it.
func patterns(v source.Val[catalog.Words], sort string) []string {
	if !v.Set {
		return []string{sort + "/**/*.toml"}
	}
	var out []string
	for _, p := range v.V {
		out = append(out, p.V)
	}
	return out
}

// ReadWorkspace reads driploop.toml by itself: what it names elsewhere is not looked up.
func ReadWorkspace(d *source.Doc) (*Workspace, []source.Problem) {
	w := &Workspace{}
	return w, source.Read(d, w.keys)
}
