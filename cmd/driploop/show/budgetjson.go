package show

import (
	"driploop/rules"
)

// BudgetJSON writes a radio chain as the interface describes it: one entry for each
// band and direction at its middle frequency.
func BudgetJSON(b *rules.Budget) ([]byte, error) {
	out := budgetJSON{Plan: b.Case.Plan.File.Path, Job: b.Case.Plan.ID, Profile: b.Case.ProfileName(), Bands: []bandJSON{}, Areas: []areaJSON{}}
	for _, x := range b.Bands {
		out.Bands = append(out.Bands, bandOf(x))
	}
	for _, r := range b.Areas {
		out.Areas = append(out.Areas, areaOf(r))
	}
	return encode(out)
}

type budgetJSON struct {
	Plan    string     `json:"plan"`
	Job     string     `json:"job"`
	Profile string     `json:"profile"`
	Bands   []bandJSON `json:"bands"`
	Areas   []areaJSON `json:"areas"`
}

type bandJSON struct {
	Device    string      `json:"device"`
	Band      string      `json:"band"`
	Direction string      `json:"direction"`
	MHz       float64     `json:"mhz"`
	Lines     []lineJSON  `json:"lines"`
	Stages    []stageJSON `json:"stages"`
	Input     *float64    `json:"input_dbm"`
	Set       *float64    `json:"set_db"`
	Runs      *float64    `json:"gain_runs_db"`
	BoundBy   string      `json:"bound_by"`
	Lacks     []string    `json:"lacks"`
	EIRP      *float64    `json:"eirp_dbm"`
	Worst     *worstJSON  `json:"worst"`
	Limits    []limitJSON `json:"limits"`
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

type stageJSON struct {
	Chain string  `json:"chain"`
	At    string  `json:"at"`
	Gain  float64 `json:"gain_db"`
	Total float64 `json:"total_db"`
	NF    float64 `json:"nf_db"`
	Level float64 `json:"level_dbm"`
}

type worstJSON struct {
	MHz  float64 `json:"mhz"`
	EIRP float64 `json:"eirp_dbm"`
	From string  `json:"from"`
}

type limitJSON struct {
	Rule      string   `json:"rule"`
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
	Name     string          `json:"name"`
	Band     string          `json:"band"`
	Operator string          `json:"operator"`
	MHz      float64         `json:"mhz"`
	RSRP     *float64        `json:"rsrp_dbm"`
	Doubt    float64         `json:"tolerance_db"`
	Before   *float64        `json:"before_dbm"`
	Target   *float64        `json:"target_dbm"`
	UpLevel  *float64        `json:"uplink_dbm"`
	UpNeeded *float64        `json:"uplink_needed_dbm"`
	Limited  bool            `json:"uplink_at_rated_output"`
	Ends     string          `json:"limited_by"`
	Terms    []reachTermJSON `json:"terms"`
	Lacks    []string        `json:"lacks"`
}

type reachTermJSON struct {
	What string  `json:"what"`
	DB   float64 `json:"db"`
}

func figure(v float64, ok bool) *float64 {
	if !ok {
		return nil
	}
	return rounded(&v)
}

func lacksOf(lacks []rules.Lack) []string {
	out := []string{}
	for _, l := range lacks {
		out = append(out, l.What)
	}
	return out
}

func bandOf(x *rules.BudgetBand) bandJSON {
	j := bandJSON{Device: x.Device.ID, Band: x.Band, Direction: x.Direction, MHz: float64(x.MHz), Lines: []lineJSON{}, Stages: []stageJSON{}, Limits: []limitJSON{},
		Input: figure(x.Input.V.Value(), x.Input.OK), Set: figure(float64(x.Set.V), x.Set.OK), EIRP: figure(x.EIRP.V.Value(), x.EIRP.OK), Lacks: lacksOf(x.Runs.Lacks)}
	if x.Runs.OK {
		j.Runs, j.BoundBy = figure(float64(x.Runs.V.Gain), x.Runs.V.On), string(x.Runs.V.By)
	}
	if x.Worst != nil {
		w := x.Worst.Worst
		j.Worst = &worstJSON{float64(w.MHz), rules.Round(w.EIRP.Most.Value()), x.Worst.Node.Name()}
	}
	for _, l := range x.Lines {
		j.Lines = append(j.Lines, lineOf(l))
	}
	for _, ch := range x.Chains {
		for _, s := range ch.Stages {
			j.Stages = append(j.Stages, stageJSON{ch.From + " to " + ch.To, s.At, rules.Round(float64(s.Gain)), rules.Round(float64(s.Total)), rules.Round(float64(s.NF)), rules.Round(s.Level.Value())})
		}
	}
	for _, l := range x.Limits {
		m, ok := l.Margin()
		j.Limits = append(j.Limits, limitJSON{l.Rule, figure(l.Value.V, l.Value.OK), figure(l.Limit.V, l.Limit.OK), figure(m, ok),
			rules.Round(l.Tolerance), l.Unit, l.Outcome, l.Formula, l.Basis, lacksOf(append(append([]rules.Lack(nil), l.Value.Lacks...), l.Limit.Lacks...))})
	}
	return j
}

func lineOf(l rules.BudgetLine) lineJSON {
	j := lineJSON{From: l.Line.From.Name(), To: l.Line.To.Name(), Kind: l.Line.Kind.String(), Terms: []termJSON{}, Lacks: lacksOf(l.Sum.Missing),
		Loss: figure(float64(l.Sum.Loss.Greatest), l.Sum.Known()), Least: figure(float64(l.Sum.Loss.Least), l.Sum.Known())}
	for _, t := range l.Sum.Terms {
		j.Terms = append(j.Terms, termJSON{t.What, rules.Round(float64(t.Loss.Least)), rules.Round(float64(t.Loss.Nominal)), rules.Round(float64(t.Loss.Greatest))})
	}
	return j
}

func areaOf(r *rules.AreaReach) areaJSON {
	j := areaJSON{Name: r.Area.Name.V, Band: r.Signal.Band.V, Operator: r.Signal.Operator.V, MHz: float64(r.MHz), RSRP: figure(r.RSRP.V.Value(), r.RSRP.OK),
		Doubt: rules.Round(float64(r.Doubt)), Before: figure(r.Before.V, r.Before.Set), Target: figure(r.Area.Target.V, r.Area.Target.Set),
		UpLevel: figure(r.Up.V.Level.Value(), r.Up.OK), UpNeeded: figure(r.Up.V.Needed.Value(), r.Up.OK), Limited: r.Up.V.Limited, Ends: r.Ends(),
		Terms: []reachTermJSON{}, Lacks: lacksOf(append(append([]rules.Lack(nil), r.RSRP.Lacks...), r.Up.Lacks...))}
	for _, t := range r.Terms {
		j.Terms = append(j.Terms, reachTermJSON{t.What, rules.Round(float64(t.DB))})
	}
	return j
}
