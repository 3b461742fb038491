package show

import (
	"slices"

	"driploop/catalog/unit"
	"driploop/rules"
)

// JSON writes the chain as the interface describes it: one entry for each band and
// direction at its middle frequency. A figure that is not known is null, and lacks
// says why. Addends are always there.
func (b *Budget) JSON() ([]byte, error) {
	c := b.Case
	from := c.Firm.Origin()
	out := budgetJSON{Plan: c.Plan.File.Path, Job: c.Plan.ID, Stage: c.Stage(), At: from.At, LimitsFrom: from.LimitsFrom, StockFrom: from.StockFrom, Today: c.Today().String(),
		Profile: c.ProfileName(), Overrides: orEmpty(c.Firm.Overrides()), Notices: orEmpty(slices.Concat(from.Differs, b.Notices())), Bands: []bandJSON{}, Areas: []areaJSON{}}
	chains := map[*rules.BudgetBand]*rules.BandChain{}
	for _, g := range b.groups() {
		chains[g.up], chains[g.down] = g.chain, g.chain
	}
	for _, x := range b.Bands {
		out.Bands = append(out.Bands, b.bandOf(x, chains[x]))
	}
	for _, r := range b.Areas {
		out.Areas = append(out.Areas, areaOf(r))
	}
	return encode(out)
}

type budgetJSON struct {
	Plan       string     `json:"plan"`
	Job        string     `json:"job"`
	Stage      string     `json:"stage"`
	At         string     `json:"at"`
	LimitsFrom string     `json:"limits_from"`
	StockFrom  string     `json:"stock_from"`
	Today      string     `json:"today"`
	Profile    string     `json:"profile"`
	Overrides  []string   `json:"overrides"`
	Notices    []string   `json:"notices"`
	Bands      []bandJSON `json:"bands"`
	Areas      []areaJSON `json:"areas"`
}

type bandJSON struct {
	Device    string         `json:"device"`
	Band      string         `json:"band"`
	Direction string         `json:"direction"`
	MHz       float64        `json:"mhz"`
	Lines     []lineJSON     `json:"lines"`
	Chains    []chainJSON    `json:"chains"`
	Stages    []stageJSON    `json:"stages"`
	Input     *float64       `json:"input_dbm"`
	Inputs    []inputJSON    `json:"inputs"`
	Isolation *isolationJSON `json:"isolation"`
	Set       *float64       `json:"set_db"`
	Runs      *float64       `json:"gain_runs_db"`
	BoundBy   string         `json:"bound_by"`
	Lacks     []string       `json:"lacks"`
	EIRP      *float64       `json:"eirp_dbm"`
	Worst     *worstJSON     `json:"worst"`
	Limits    []limitJSON    `json:"limits"`
}

type lineJSON struct {
	From  string     `json:"from"`
	To    string     `json:"to"`
	Kind  string     `json:"kind"`
	Loss  *float64   `json:"loss_db"`
	Least *float64   `json:"least_db"`
	Terms []termJSON `json:"terms"`
	Lacks []string   `json:"lacks"`
}

type termJSON struct {
	What     string  `json:"what"`
	Least    float64 `json:"least_db"`
	Nominal  float64 `json:"nominal_db"`
	Greatest float64 `json:"loss_db"`
}

// chainJSON is where a level chart begins; its stages follow in stages, by name.
type chainJSON struct {
	Name  string   `json:"chain"`
	From  string   `json:"from"`
	To    string   `json:"to"`
	Start *float64 `json:"start_dbm"`
	Lacks []string `json:"lacks"`
}

type stageJSON struct {
	Chain string  `json:"chain"`
	At    string  `json:"at"`
	Gain  float64 `json:"gain_db"`
	Total float64 `json:"total_db"`
	NF    float64 `json:"nf_db"`
	Level float64 `json:"level_dbm"`
	Held  bool    `json:"at_rated_output"`
}

type inputJSON struct {
	Operator string  `json:"operator"`
	Band     string  `json:"band"`
	MHz      float64 `json:"mhz"`
	RSRP     float64 `json:"rsrp_dbm"`
	Load     float64 `json:"full_load_db"`
	Gain     float64 `json:"antenna_gain_dbi"`
	Feed     float64 `json:"feed_db"`
	Level    float64 `json:"level_dbm"`
}

type isolationJSON struct {
	DB       float64 `json:"isolation_db"`
	Margin   float64 `json:"margin_db"`
	Measured bool    `json:"measured"`
	MHz      float64 `json:"mhz,omitempty"`
}

type worstJSON struct {
	MHz  float64 `json:"mhz"`
	EIRP float64 `json:"eirp_dbm"`
	From string  `json:"from"`
	Out  float64 `json:"output_dbm"`
	Gain float64 `json:"antenna_gain_dbi"`
	Loss float64 `json:"least_loss_db"`
}

type limitJSON struct {
	Rule      string   `json:"rule"`
	Of        string   `json:"of"`
	Value     *float64 `json:"value"`
	Limit     *float64 `json:"limit"`
	Margin    *float64 `json:"margin"`
	Tolerance float64  `json:"tolerance"`
	Unit      string   `json:"unit"`
	Outcome   string   `json:"outcome"`
	Formula   string   `json:"formula"`
	Basis     string   `json:"basis"`
	Lacks     []string `json:"lacks"`
}

type areaJSON struct {
	Name        string          `json:"name"`
	Band        string          `json:"band"`
	Operator    string          `json:"operator"`
	MHz         float64         `json:"mhz"`
	Device      string          `json:"device"`
	Donor       string          `json:"donor"`
	Survey      *float64        `json:"survey_dbm"`
	Before      *float64        `json:"before_dbm"`
	RSRP        *float64        `json:"rsrp_dbm"`
	Doubt       float64         `json:"tolerance_db"`
	Target      *float64        `json:"target_dbm"`
	UpLevel     *float64        `json:"uplink_dbm"`
	UpNeeded    *float64        `json:"uplink_needed_dbm"`
	UpMargin    *float64        `json:"uplink_margin_db"`
	UpDoubt     float64         `json:"uplink_tolerance_db"`
	Limited     bool            `json:"uplink_at_rated_output"`
	Ends        string          `json:"limited_by"`
	Terms       []reachTermJSON `json:"terms"`
	UplinkTerms []reachTermJSON `json:"uplink_terms"`
	Lacks       []string        `json:"lacks"`
}

type reachTermJSON struct {
	What string  `json:"what"`
	DB   float64 `json:"db"`
}

func figure(v float64, ok bool) *float64 {
	if !ok {
		return nil
	}
	r := rules.Round(v)
	return &r
}

func ratioOf(d unit.DB) float64  { return rules.Round(float64(d)) }
func levelOf(l unit.DBm) float64 { return rules.Round(l.Value()) }

func lacksOf(lacks ...[]rules.Lack) []string {
	out := []string{}
	for _, list := range lacks {
		for _, l := range list {
			out = append(out, l.What)
		}
	}
	return out
}

// bandOf is one direction of a device in one band; chain is that of an amplifier.
func (b *Budget) bandOf(x *rules.BudgetBand, chain *rules.BandChain) bandJSON {
	j := bandJSON{Device: x.Device.ID, Band: x.Band, Direction: x.Direction, MHz: rules.Round(float64(x.MHz)), Lines: []lineJSON{}, Chains: []chainJSON{}, Stages: []stageJSON{},
		Inputs: []inputJSON{}, Limits: []limitJSON{}, Input: figure(x.Input.V.Value(), x.Input.OK), Set: figure(float64(x.Set.V), x.Set.OK),
		EIRP: figure(x.EIRP.V.Value(), x.EIRP.OK), Lacks: lacksOf(x.Runs.Lacks)}
	if x.Runs.OK {
		j.Runs, j.BoundBy = figure(float64(x.Runs.V.Gain), x.Runs.V.On), string(x.Runs.V.By)
	}
	if x.Worst != nil {
		w := x.Worst.Worst
		j.Worst = &worstJSON{rules.Round(float64(w.MHz)), levelOf(w.EIRP.Most), x.Worst.Node.Name(), levelOf(w.Out), ratioOf(w.Gain), ratioOf(w.Line.Loss.Least)}
	}
	if chain != nil {
		j.Isolation = b.isolationOf(chain)
		if x.Direction == "downlink" {
			j.Inputs = b.inputsOf(chain)
		}
	}
	for _, l := range x.Lines {
		j.Lines = append(j.Lines, lineOf(l))
	}
	for _, ch := range x.Chains {
		name := ch.From + " to " + ch.To
		j.Chains = append(j.Chains, chainJSON{name, ch.From, ch.To, figure(ch.Start.Value(), len(ch.Stages) > 0), lacksOf(ch.Lacks)})
		for _, s := range ch.Stages {
			j.Stages = append(j.Stages, stageJSON{name, s.At, ratioOf(s.Gain), ratioOf(s.Total), ratioOf(s.NF), levelOf(s.Level), s.Held})
		}
	}
	for _, l := range x.Limits {
		m, ok := l.Margin()
		j.Limits = append(j.Limits, limitJSON{l.Rule, l.Of, figure(l.Value.V, l.Value.OK), figure(l.Limit.V, l.Limit.OK), figure(m, ok),
			rules.Round(l.Tolerance), l.Unit, l.Outcome, l.Formula, l.Basis, lacksOf(l.Value.Lacks, l.Limit.Lacks)})
	}
	return j
}

func (b *Budget) isolationOf(chain *rules.BandChain) *isolationJSON {
	i := chain.Apart
	if !i.OK {
		return nil
	}
	return &isolationJSON{ratioOf(i.V), ratioOf(b.IsolationMargin()), i.Reading != nil, rules.Round(float64(i.Edge))}
}

func (b *Budget) inputsOf(chain *rules.BandChain) []inputJSON {
	out := []inputJSON{}
	for _, a := range b.Case.Arrivals(chain) {
		out = append(out, inputJSON{a.Survey.Operator.V, a.Survey.Band.V, rules.Round(float64(a.Signal.Channel.Mid())), levelOf(a.Signal.RSRP),
			ratioOf(a.Load), ratioOf(a.Signal.Gain), ratioOf(a.Signal.Feed), levelOf(a.Level)})
	}
	return out
}

func lineOf(l rules.BudgetLine) lineJSON {
	j := lineJSON{From: l.Line.From.Name(), To: l.Line.To.Name(), Kind: l.Line.Kind.String(), Terms: []termJSON{}, Lacks: lacksOf(l.Sum.Missing),
		Loss: figure(float64(l.Sum.Loss.Greatest), l.Sum.Known()), Least: figure(float64(l.Sum.Loss.Least), l.Sum.Known())}
	for _, t := range l.Sum.Terms() {
		j.Terms = append(j.Terms, termJSON{t.What, ratioOf(t.Loss.Least), ratioOf(t.Loss.Nominal), ratioOf(t.Loss.Greatest)})
	}
	return j
}

func areaOf(r *rules.AreaReach) areaJSON {
	j := areaJSON{Name: r.Area.Name.V, Band: r.Signal.Band.V, Operator: r.Signal.Operator.V, MHz: rules.Round(float64(r.MHz)), Device: r.Chain.Amp.ID,
		Survey: figure(r.Signal.RSRP.V, r.Signal.RSRP.Set), RSRP: figure(r.RSRP.V.Value(), r.RSRP.OK), Doubt: ratioOf(r.Doubt),
		Before: figure(r.Before.V, r.Before.Set), Target: figure(r.Area.Target.V, r.Area.Target.Set),
		UpLevel: figure(r.Up.V.Level.Value(), r.Up.OK), UpNeeded: figure(r.Up.V.Needed.Value(), r.Up.OK),
		UpMargin: figure(float64(r.Up.V.Level.Minus(r.Up.V.Needed)), r.Up.OK), UpDoubt: ratioOf(r.Up.V.Doubt), Limited: r.Up.V.Limited, Ends: r.Ends(),
		Terms: termsOf(r.Terms), UplinkTerms: termsOf(r.Up.V.Terms), Lacks: lacksOf(r.RSRP.Lacks)}
	if r.RSRP.OK {
		j.Lacks = lacksOf(r.Up.Lacks)
	}
	if r.Feed != nil {
		j.Donor = r.Feed.From.Name()
	}
	return j
}

func termsOf(terms []rules.ReachTerm) []reachTermJSON {
	out := []reachTermJSON{}
	for _, t := range terms {
		out = append(out, reachTermJSON{t.Words(), ratioOf(t.DB)})
	}
	return out
}
