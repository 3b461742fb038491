package bom

import (
	"slices"
	"strings"

	"driploop/catalog/source"
)

// Renames follows things that a plan calls otherwise than it did: from the old ID to
// the new one, for devices and lines.
type Renames map[string]string

// Of is the name that an old one has now.
func (r Renames) Of(id string) string {
	if now, ok := r[id]; ok {
		return now
	}
	return id
}

// thing is a device or a line of a plan, as a search for renames sees it.
type thing struct {
	id, sort string
	row      any      // without the ID and without what refers to other things
	refs     []string // "end port name": what it refers to, in order
	near     []string // what refers to it: "sort end port", and the name of the other
}

// FollowRenames finds what was renamed between two states of a plan: a thing that is
// gone, and a new one that is the same part with the same keys, at the same ports of
// the same neighbours. Where several would do, none is taken.
func FollowRenames(was, now *Plan) Renames {
	a, b := thingsOf(was), thingsOf(now)
	gone, fresh := missingFrom(a, b), missingFrom(b, a)
	out := Renames{}
	for again := true; again; {
		again = false
		for _, x := range gone {
			if _, done := out[x.id]; done {
				continue
			}
			fit := candidates(x, fresh, gone, out)
			if len(fit) == 1 && len(rivals(fit[0], gone, fresh, out)) == 1 {
				out[x.id] = fit[0].id
				again = true
			}
		}
	}
	return out
}

// missingFrom lists the things of one plan whose ID the other has not.
func missingFrom(list, other []*thing) []*thing {
	var out []*thing
	for _, x := range list {
		if !slices.ContainsFunc(other, func(y *thing) bool { return x.id == y.id }) {
			out = append(out, x)
		}
	}
	return out
}

// candidates lists what a thing that is gone may be called now.
func candidates(x *thing, fresh, gone []*thing, known Renames) []*thing {
	var out []*thing
	for _, y := range fresh {
		if !taken(y.id, known) && x.mayBe(y, fresh, gone, known) {
			out = append(out, y)
		}
	}
	return out
}

func rivals(y *thing, gone, fresh []*thing, known Renames) []*thing {
	var out []*thing
	for _, x := range gone {
		if _, done := known[x.id]; !done && x.mayBe(y, fresh, gone, known) {
			out = append(out, x)
		}
	}
	return out
}

func taken(id string, known Renames) bool {
	for _, now := range known {
		if now == id {
			return true
		}
	}
	return false
}

// mayBe reports whether a thing could be another one of a new name: nothing that is
// known speaks against it.
func (x *thing) mayBe(y *thing, fresh, gone []*thing, known Renames) bool {
	if x.sort != y.sort || len(x.refs) != len(y.refs) || len(x.near) != len(y.near) || !source.Alike(x.row, y.row) {
		return false
	}
	same := func(r, s string) bool {
		port, old, _ := strings.Cut(r, " ")
		other, new, _ := strings.Cut(s, " ")
		if port != other {
			return false
		}
		if now, done := known[old]; done {
			return now == new
		}
		return old == new || isOne(old, gone) && isOne(new, fresh) && !taken(new, known)
	}
	if !slices.EqualFunc(x.refs, y.refs, same) {
		return false
	}
	left := slices.Clone(y.near)
	for _, n := range x.near {
		i := slices.IndexFunc(left, func(s string) bool { return same(n, s) })
		if i < 0 {
			return false
		}
		left = slices.Delete(left, i, i+1)
	}
	return true
}

func isOne(id string, list []*thing) bool {
	return slices.ContainsFunc(list, func(x *thing) bool { return x.id == id })
}

// thingsOf lists the devices and lines of a plan with what ties them together.
func thingsOf(p *Plan) []*thing {
	var out []*thing
	byID := map[string]*thing{}
	add := func(t *thing) {
		out = append(out, t)
		if byID[t.id] == nil {
			byID[t.id] = t
		}
	}
	for _, d := range p.Devices {
		t := &thing{id: d.ID, sort: "device", refs: []string{"on " + d.On.V}}
		d.ID, d.On = "", source.Val[string]{}
		t.row = &d
		add(t)
	}
	line := func(id, sort string, row any, ends ...Ref) {
		t := &thing{id: id, sort: sort, row: row}
		for i, e := range ends {
			t.refs = append(t.refs, string('1'+rune(i))+"."+e.Port+" "+e.Name)
		}
		add(t)
	}
	for _, c := range p.Cables {
		id, from, to, like := c.ID, c.From.V, c.To.V, Ref{Name: c.Like.V}
		c.ID, c.From, c.To, c.Like = "", source.Val[Ref]{}, source.Val[Ref]{}, source.Val[string]{}
		line(id, "cable", &c, from, to, like)
	}
	for _, c := range p.Data {
		id, from, to := c.ID, c.From.V, c.To.V
		c.ID, c.From, c.To = "", source.Val[Ref]{}, source.Val[Ref]{}
		line(id, "data", &c, from, to)
	}
	for _, c := range p.Wires {
		id, from, to := c.ID, c.From.V, c.To.V
		c.ID, c.From, c.To = "", source.Val[Ref]{}, source.Val[Ref]{}
		line(id, "wire", &c, from, to)
	}
	for _, c := range p.Bonds {
		id, from, to := c.ID, c.From.V, c.To.V
		c.ID, c.From, c.To = "", source.Val[Ref]{}, source.Val[Ref]{}
		line(id, "bond", &c, from, to)
	}
	for _, t := range out {
		for _, r := range t.refs {
			end, name, _ := strings.Cut(r, " ")
			if n := byID[name]; n != nil {
				n.near = append(n.near, t.sort+"/"+end+" "+t.id)
			}
		}
	}
	for _, j := range p.Joints {
		for _, pair := range [][2]Ref{{j.A.V, j.B.V}, {j.B.V, j.A.V}} {
			if n := byID[pair[0].Name]; n != nil {
				n.near = append(n.near, "joint/"+pair[0].Port+"/"+pair[1].Port+" "+pair[1].Name)
			}
		}
	}
	return out
}
