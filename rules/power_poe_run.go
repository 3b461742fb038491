package rules

import (
	"driploop/bom"
	"driploop/catalog/source"
)

// gives is the kind of power that an end puts on the line; "" is none. A port of a
// source that does not say may still be meant by its part.
func (run *dataRun) gives(side int) (kind string, known bool) {
	d, p := run.ends[side], run.ports[side]
	switch {
	case d.Kind() == "data-arrestor":
		return "", true
	case p == nil:
		return "", d.Part != nil || !feedsPower(d)
	case !feedsPower(d) || p.PoE.Set:
		if feedsPower(d) {
			return p.PoE.V, true
		}
		return "", true
	}
	return "", !d.Part.Supply.PoE.Set || takesPoE(d.Part)
}

// takes is the kind of power that an end asks for; "" is none.
func (run *dataRun) takes(side int) (kind string, known bool) {
	d, p := run.ends[side], run.ports[side]
	switch {
	case d.Kind() == "data-arrestor" || feedsPower(d):
		return "", true
	case p == nil:
		return "", d.Part != nil
	}
	return p.PoE.V, true
}

// giver finds the end that gives and the end that takes, −1 for none.
func (run *dataRun) giver() (give, take int) {
	give, take = -1, -1
	for i := range run.ends {
		if kind, _ := run.gives(i); kind != "" {
			give = i
		}
		if kind, _ := run.takes(i); kind != "" {
			take = i
		}
	}
	return give, take
}

// fedBy is what a source feeds over the run with a kind that it takes, or nil.
func (run *dataRun) fedBy(d *bom.Device) *bom.Device {
	give, take := run.giver()
	if give < 0 || take < 0 || run.ends[give] != d {
		return nil
	}
	gives, _ := run.gives(give)
	if takes, _ := run.takes(take); !givesFor(gives, takes) {
		return nil
	}
	return run.ends[take]
}

// lines lists the data lines of a run in its order.
func (run *dataRun) lines() []*bom.DataLine {
	var out []*bom.DataLine
	for _, s := range run.stops {
		if s.line != nil && (len(out) == 0 || out[len(out)-1] != s.line) {
			out = append(out, s.line)
		}
	}
	return out
}

// port is how a run's end is called: "radio.poe", or the device alone.
func (run *dataRun) port(side int) string {
	if p := run.ports[side]; p != nil {
		return run.ends[side].ID + "." + p.Name
	}
	return run.ends[side].ID
}

// place is where the plan says what a run's end is plugged into.
func (run *dataRun) place(side int) (source.Place, string) {
	for _, l := range run.lines() {
		for _, ref := range []source.Val[bom.Ref]{l.Row.From, l.Row.To} {
			if ref.V.Name == run.ends[side].ID {
				return ref.At, l.On()
			}
		}
	}
	return run.ends[side].At, run.ends[side].On()
}
