package rules

import (
	"bytes"
	"fmt"
	"slices"
	"strings"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
)

var partRules = []*Rule{partUnknown, partKind, partStatus}

var partUnknown = &Rule{
	Name:   "part/unknown",
	Title:  "Every part that is named is in the catalog",
	Why:    "nobody can pick, buy or check a part that nobody knows; whatever hangs on it is left unchecked with it",
	Basis:  []Basis{practice("an install is reviewed on the figures of its parts")},
	Weight: Hold,
	Lighter: "A substitute, a kit row's antenna or a connector's cable that the catalog lacks is a punch, " +
		"and so is the cable of a jumper that states its own loss.",
	Grave: true,
	Check: func(c *Case, r *Report) {
		for _, h := range firstOfEach(c.Graph.Holes, bom.NoPart) {
			c.reportMissing(h, r)
		}
		for _, d := range c.Graph.Devices {
			c.checkNameless(d, r)
		}
	},
	CheckFiles: func(f *Firm, r *Report) {
		f.eachPartRef(func(ref partRef) {
			if f.Catalog.Look(ref.id.V) != nil {
				return
			}
			x := r.Fails(ref.id.At, ref.on(), "%s of %s: the catalog has no part %s", ref.role, ref.owner(), source.Quote(ref.id.V)).
				Then("%s", f.suggest(ref.id.V, "add it to the catalog, or correct the ID"))
			ref.mark(x)
			if ref.idle {
				x.Lighter(Punch)
			}
		})
	},
}

// reportMissing reports a part that the catalog lacks. One that stands in a catalog
// file that could not be read whole is not missing; nobody knows it yet.
func (c *Case) reportMissing(h *missingPart, r *Report) {
	var f *Finding
	if file := c.Firm.brokenWith(h.ID); !file.IsZero() {
		f = r.Unknown(h.At, h.On, "%s is not assessed: it stands in %s, which could not be read whole", h.ID, file.Path()).
			Then("put that file right first").Beside(file, "what is wrong with it")
	} else {
		f = r.Fails(h.At, h.On, "%s", h.Says).Then("%s", c.Firm.withStock(h.Do))
	}
	for _, also := range h.Also {
		f.Beside(also, "named here too")
	}
}

// brokenWith is what is wrong with a catalog file that holds a part's ID and could
// not be read whole; nowhere where there is no such file.
func (f *Firm) brokenWith(id string) source.Place {
	for _, p := range f.Problems {
		if p.Kind != source.Syntax && p.Kind != source.Merge || p.At.File == nil {
			continue
		}
		if anyMatch(patterns(f.Workspace.Catalog, "catalog"), p.At.Path()) && holdsWord(p.At.File.Src, id) {
			return p.At
		}
	}
	return source.Place{}
}

// holdsWord reports whether an ID stands in a text, and not only as a piece of a
// longer one.
func holdsWord(text []byte, id string) bool {
	for from := 0; ; {
		i := bytes.Index(text[from:], []byte(id))
		if i < 0 {
			return false
		}
		at, end := from+i, from+i+len(id)
		if (at == 0 || !source.ValidID("x"+string(text[at-1:at]))) && (end == len(text) || !source.ValidID("x"+string(text[end:end+1]))) {
			return true
		}
		from = at + 1
	}
}

// missingPart is what the catalog lacks, with every place of a plan that names it.
type missingPart struct {
	bom.Hole
	ID string
}

// firstOfEach lists the holes of a kind, those that say the same as one: however
// often a plan names a part, it is missing once.
func firstOfEach(holes []bom.Hole, kind bom.HoleKind) []*missingPart {
	var out []*missingPart
	bySays := map[string]*missingPart{}
	for _, h := range holes {
		if h.Kind != kind {
			continue
		}
		first := bySays[h.Says]
		if first == nil {
			first = &missingPart{Hole: h, ID: unquoted(h.At.Text())}
			bySays[h.Says] = first
			out = append(out, first)
			continue
		}
		if h.At != first.At && !slices.Contains(first.Also, h.At) {
			first.Also = append(first.Also[:len(first.Also):len(first.Also)], h.At)
		}
	}
	return out
}

// unquoted is the text of a TOML string that holds a name.
func unquoted(s string) string {
	if len(s) >= 2 && (s[0] == '"' || s[0] == '\'') {
		return s[1 : len(s)-1]
	}
	return s
}

// withStock adds what is on hand to a suggestion of the nearest part.
func (f *Firm) withStock(do string) string {
	id, asks := strings.CutPrefix(do, "did you mean ")
	if near := f.Catalog.Look(strings.TrimSuffix(id, "?")); asks && near != nil {
		return "did you mean " + f.OnHand(near) + "?"
	}
	return do
}

// suggest names the known part that an ID was probably meant to be, with the
// number on hand; otherwise says what else would do.
func (f *Firm) suggest(id, otherwise string) string {
	if near := f.Catalog.Look(f.Catalog.Nearest(id)); near != nil {
		return "did you mean " + f.OnHand(near) + "?"
	}
	return otherwise
}

// radioKinds are the kinds that radio signals pass or end at.
var radioKinds = []string{"antenna", "adapter", "splitter", "tap", "coupler", "diplexer", "filter", "attenuator", "dc-block",
	"bias-tee", "load", "arrestor", "amplifier", "router"}

// checkNameless looks at something that exists and whose part nobody knows. Where
// a cable or joint goes to it, the line ends there, and nothing behind it is looked
// at.
func (c *Case) checkNameless(d *bom.Device, r *Report) {
	if d.Row.Part.Set || !slices.Contains(radioKinds, d.Row.Kind.V) {
		return
	}
	for _, ref := range c.radioRefs() {
		if ref.V.Name == d.ID {
			r.Unknown(d.At, d.On(), "%s is known as %s only: its ports, bands and levels, and the line that ends at it, are not assessed",
				d.ID, withArticle(d.Row.Kind.V)).
				Then("read the label and name its part, or measure it and add a part to the catalog").Beside(ref.At, "a line goes to it")
			return
		}
	}
}

func withArticle(noun string) string {
	if slices.Contains([]byte("aeiou"), noun[0]) {
		return "an " + noun
	}
	return "a " + noun
}

// radioRefs lists what the ends of cables and joints refer to.
func (c *Case) radioRefs() []source.Val[bom.Ref] {
	var out []source.Val[bom.Ref]
	for _, x := range c.Graph.Cables {
		out = append(out, x.Row.From, x.Row.To)
	}
	for _, j := range c.Plan.Joints {
		out = append(out, j.A, j.B)
	}
	return out
}

var partKind = &Rule{
	Name:    "part/kind",
	Title:   "Every part is of the kind that goes where it is named",
	Why:     "a splitter written where a cable belongs is no cable, and the line is not there",
	Basis:   []Basis{{Document: "the project's file formats", Kind: "house"}},
	Weight:  Hold,
	Lighter: "A substitute of another kind is a punch.",
	Check: func(c *Case, r *Report) {
		for _, h := range firstOfEach(c.Graph.Holes, bom.WrongKind) {
			f := r.Fails(h.At, h.On, "%s", h.Says).Then("%s", h.Do)
			for _, also := range h.Also {
				f.Beside(also, "see here")
			}
		}
		c.checkServers(r)
		c.checkKindless(r)
	},
	CheckFiles: func(f *Firm, r *Report) {
		f.eachPartRef(func(ref partRef) {
			p := f.Catalog.Look(ref.id.V)
			if p == nil || !p.Kind.Set || ref.kind == "" || p.Kind.V == ref.kind {
				return
			}
			x := r.Fails(ref.id.At, ref.on(), "%s of %s: %s is of kind %s; %s is expected here", ref.role, ref.owner(), p.ID, p.Kind.V, ref.kind).
				Then("name %s", withArticle(ref.kind)).Beside(p.At, "the part")
			ref.mark(x)
			if ref.role == substitute {
				x.Lighter(Punch)
			}
		})
	},
}

// checkServers holds that areas are served by what radiates.
func (c *Case) checkServers(r *Report) {
	for i := range c.Plan.Areas {
		a := &c.Plan.Areas[i]
		for _, s := range a.ServedBy.V {
			d := c.Graph.Device(s.V)
			if d == nil || d.Kind() == "" || d.Kind() == "antenna" || d.Part != nil && d.Part.Antenna != nil {
				continue
			}
			r.Fails(s.At, "area."+a.Name.V, "%s is served by %s, which is %s; an antenna, or a router with its own, is expected", a.Name.V, d.ID,
				withArticle(d.Kind())).Then("name the antenna that people there are served by").Beside(d.At, "the device")
		}
	}
}

// checkKindless looks for parts that the catalog names without saying what they
// are: whether they belong where the plan has them is not known.
func (c *Case) checkKindless(r *Report) {
	seen := map[string]bool{}
	for _, u := range c.partUses() {
		p := c.Firm.Catalog.Look(u.id.V)
		if p == nil || p.Kind.Set || seen[p.ID] {
			continue
		}
		seen[p.ID] = true
		r.Unknown(u.id.At, u.on, "whether %s belongs here is not assessed: the catalog does not say what kind of part it is", p.ID).
			Then("add kind to the part").Beside(p.At, "the part")
	}
}

var partStatus = &Rule{
	Name:    "part/status",
	Title:   "What has to be bought can still be had",
	Why:     "a part that is no longer made comes late or not at all, and is swapped on the roof for what is in the van",
	Basis:   []Basis{practice("the maker's notice, kept as status in the catalog")},
	Weight:  Punch,
	Lighter: "A part on its last buy is a note.",
	Check: func(c *Case, r *Report) {
		for _, q := range c.Takeoff().Rows {
			at := q.At
			if at.Path() != c.Plan.File.Path {
				at = c.JobAt() // what joints use up is named nowhere in the plan
			}
			switch q.Part.Status.V {
			case "withdrawn":
				r.Fails(at, c.onOf(q.Part.ID), "%s is withdrawn, and %s of it", c.Firm.OnHand(q.Part), takes(q)).
					Then("%s", c.Firm.otherwise(q.Part)).Beside(q.Part.Status.At, "its status")
			case "last-buy":
				r.Fails(at, c.onOf(q.Part.ID), "%s can be ordered one last time, and %s of it", c.Firm.OnHand(q.Part), takes(q)).
					Then("order what later jobs need as well; %s", c.Firm.otherwise(q.Part)).Beside(q.Part.Status.At, "its status").Lighter(Note)
			}
		}
	},
}

func takes(q *bom.Quantity) string {
	if q.Part.CutStock() {
		return "the plan takes " + q.Length.String()
	}
	return fmt.Sprintf("the plan takes %d", q.Each)
}

// otherwise names the substitutes of a part with what is on hand of each.
func (f *Firm) otherwise(p *catalog.Part) string {
	var out []string
	for _, id := range p.Instead.V {
		if s := f.Catalog.Look(id.V); s != nil && s.Status.V != "withdrawn" {
			out = append(out, f.OnHand(s))
		}
	}
	if len(out) == 0 {
		return "look for a substitute and write it into the part's instead"
	}
	return "take " + orList(out) + " instead"
}

// orList joins alternatives: "a", "a or b", "a, b or c".
func orList(words []string) string {
	if n := len(words); n > 1 {
		return strings.Join(words[:n-1], ", ") + " or " + words[n-1]
	}
	return list(words)
}

// onOf is what a finding about a part of the plan stands on: its first use.
func (c *Case) onOf(id string) string {
	for _, u := range c.partUses() {
		if u.id.V == id {
			return u.on
		}
	}
	return "job"
}
