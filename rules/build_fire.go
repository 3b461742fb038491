package rules

import (
	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/rules/limits"
)

// Fire types of jackets by space. The rows of the code list what each space allows,
// a stronger type standing in for a weaker one: plenum, riser, general, limited.
// What a code does not speak about, as the European one leaves the classes to each
// country, is not asked for.

// space is a sort of place with its row for coaxial and for data cable.
type space struct{ kind, words, coax, data string }

// spaces are in the order of what they forbid, the strictest first.
var spaces = []space{
	{"plenum", "in an air space", "fire-plenum", "fire-data-plenum"},
	{"riser", "in a riser", "fire-riser", "fire-data-riser"},
	{"attic", "inside the building", "fire-indoor", "fire-data-indoor"},
	{"indoor", "inside the building", "fire-indoor", "fire-data-indoor"},
}

// unmarked gathers the lines of a part without a fire marking.
type unmarked struct {
	part  *catalog.Part
	lines []string
	first spreadLine
	rank  int // of the strictest space that one of them runs in
}

func (c *Case) checkFire(r *Report) {
	open := map[*catalog.Part]*unmarked{}
	var order []*unmarked
	for _, s := range c.spread() {
		if s.jacket == nil || s.jacket.Cable == nil && s.jacket.Data == nil {
			continue // a wire, or a jumper of which only the loss is known
		}
		rank, unknown := c.checkLineFire(r, s)
		if !unknown {
			continue
		}
		u := open[s.jacket]
		if u == nil {
			u = &unmarked{part: s.jacket, first: s, rank: rank}
			open[s.jacket] = u
			order = append(order, u)
		}
		u.rank = min(u.rank, rank)
		u.lines = append(u.lines, s.id)
	}
	for _, u := range order {
		c.reportUnmarked(r, u)
	}
}

// checkLineFire holds one line against the spaces it runs in, the strictest first,
// and stops at the first that has something to say. A line whose marking is needed
// and not known is reported with the others of its part.
func (c *Case) checkLineFire(r *Report, s spreadLine) (rank int, unknown bool) {
	fire := fireOf(s.jacket)
	for i, sp := range spaces {
		place, row := s.placeOf(sp.kind), c.codeRow(sp.rowFor(s.jacket))
		if place == nil || row == nil || s.cordAt(sp) {
			continue
		}
		if !fire.Set && !s.existing && !c.entersUnlisted(s, sp) {
			return i, true
		}
		if fire.Set && !permitted(row)(s.jacket) {
			c.checkMarking(r, marked{s, sp, place, row, fire})
			break
		}
	}
	return 0, false
}

func (c *Case) reportUnmarked(r *Report, u *unmarked) {
	sp := spaces[u.rank]
	row := c.codeRow(sp.rowFor(u.part))
	r.Unknown(u.first.at, u.first.on, "%s has no fire marking in the catalog; whether %s may run %s is not assessed, where it has to be %s",
		u.part.ID, list(u.lines), sp.words, row.Figure()).onRow(row).Beside(u.part.At, "the part").
		Then("read the marking on the jacket and add it as fire; otherwise %s", c.jacketFor(u.first, permitted(row)))
}

func (sp space) rowFor(p *catalog.Part) string {
	if p.Data != nil {
		return sp.data
	}
	return sp.coax
}

func fireOf(p *catalog.Part) source.Val[string] {
	if p.Data != nil {
		return p.Data.Fire
	}
	return p.Cable.Fire
}

func permitted(row *limits.CodeRow) func(*catalog.Part) bool {
	return func(p *catalog.Part) bool {
		ok, _ := row.Permits(fireOf(p).V)
		return ok
	}
}

func (s *spreadLine) placeOf(kind string) *bom.Place {
	for _, p := range s.places() {
		if p.Kind.V == kind {
			return p
		}
	}
	return nil
}

// cordAt reports a made-up jumper at the gear it belongs to, which is a cord and no
// wiring of the building; in a riser or air space it is looked at like any cable.
func (s *spreadLine) cordAt(sp space) bool {
	return s.part.Jumper != nil && sp.coax == "fire-indoor"
}

// marked is a line whose marking a space does not list.
type marked struct {
	line  spreadLine
	space space
	place *bom.Place
	row   *limits.CodeRow
	fire  source.Val[string]
}

func (c *Case) checkMarking(r *Report, m marked) {
	s := m.line
	switch {
	case european(m.fire.V):
		r.Unknown(s.at, s.on, "%s (%s) is marked %s and runs %s (%s); %s counts other types, so this is not assessed", s.id, s.part.ID, m.fire.V, m.space.words, m.place.ID, c.CodeName()).
			onRow(m.row).Beside(m.fire.At, "its marking").Then("find out which listed type the jacket is, and give that")
	case m.space.coax == "fire-indoor" && limited(m.fire.V):
		c.checkLimited(r, m)
	default:
		c.reportForbidden(r, m)
	}
}

func (c *Case) reportForbidden(r *Report, m marked) {
	s := m.line
	r.Fails(s.at, s.on, "%s (%s) is marked %s and runs %s (%s); %s is expected", s.id, s.part.ID, m.fire.V, m.space.words, m.place.ID, m.row.Figure()).
		onRow(m.row).Beside(m.fire.At, "its marking").Beside(m.place.At, "the place").
		Then("%s; the code also takes metal raceway", c.jacketFor(s, permitted(m.row)))
}

// european reports a class of EN 13501-6, which no row of the American code lists.
func european(fire string) bool {
	switch fire {
	case "B2ca", "Cca", "Dca", "Eca", "Fca":
		return true
	}
	return false
}

// limited reports a type that serves only in dwellings and over short lengths in view.
func limited(fire string) bool { return fire == "CATVX" || fire == "CMX" }

// checkLimited looks at a limited type inside a building: it serves where it is short
// and in view, or thin enough in a dwelling.
func (c *Case) checkLimited(r *Report, m marked) {
	s := m.line
	short, lacks := c.shortEnough(m)
	thin, more := c.thinEnough(m)
	lacks = append(lacks, more...)
	switch {
	case short != nil:
		r.Advice(s.at, s.on, "%s (%s) is marked %s: in %s that serves in view, and not behind anything", s.id, s.part.ID, m.fire.V, m.place.ID).
			onRow(short).Then("keep it where it can be seen")
	case thin != nil:
		r.Advice(s.at, s.on, "%s (%s) is marked %s: that serves in a dwelling, which this job for personal use is taken for", s.id, s.part.ID, m.fire.V).
			onRow(thin).Then("take a general type where it is none")
	case len(lacks) > 0:
		r.Lacking(s.at, s.on, lacks, "%s, marked %s, in %s,", s.id, m.fire.V, m.place.ID).onRow(m.row)
	default:
		c.reportForbidden(r, m)
	}
}

// shortEnough is the row by which a limited type may run that far, or nil.
func (c *Case) shortEnough(m marked) (*limits.CodeRow, []Lack) {
	row := c.codeRow("fire-limited")
	if row == nil || !row.Length.Set {
		return nil, nil
	}
	in, most := m.line.lengthIn((*bom.Place).Indoors), float64(row.Length.V)
	switch {
	case in.most <= most:
		return row, nil
	case in.least <= most:
		return nil, []Lack{{"its length in " + m.place.ID, m.line.at}}
	}
	return nil, nil
}

// thinEnough is the row by which a limited type that thin serves in a dwelling, or
// nil. A job for personal use is taken for one.
func (c *Case) thinEnough(m marked) (*limits.CodeRow, []Lack) {
	row := c.codeRow("fire-limited-dwelling")
	if row == nil {
		return nil, nil
	}
	limit, ok := row.Constant(m.fire.V)
	use, od := c.Plan.Job.Use, m.line.od()
	switch {
	case !ok, od.Set && od.V >= limit, use.Set && use.V != "personal":
		return nil, nil
	case !use.Set:
		return nil, []Lack{{"whether it is a dwelling (job.use)", c.JobAt()}}
	case !od.Set:
		return nil, []Lack{{"od_mm of " + m.line.jacket.ID, m.line.jacket.At}}
	}
	return row, nil
}

// od is the outer diameter of the jacket, where its part has one.
func (s *spreadLine) od() source.Val[float64] {
	if s.jacket.Cable == nil {
		return source.Val[float64]{}
	}
	return s.jacket.Cable.ODmm
}

// entersUnlisted reports a coaxial line from outdoors that ends at an arrestor or
// block no further in than the code lets an unlisted jacket run; its marking does
// not matter.
func (c *Case) entersUnlisted(s spreadLine, sp space) bool {
	row := c.codeRow("fire-unlisted")
	if row == nil || sp.coax != "fire-indoor" || s.cable == nil {
		return false
	}
	outdoors, block := false, false
	for _, p := range s.places() {
		outdoors = outdoors || p.Outdoors()
	}
	for _, e := range s.cable.Ends {
		for _, m := range e.Mates {
			d := m.Other(e).Device
			block = block || d != nil && d.Kind() == "arrestor"
		}
	}
	in := s.lengthIn((*bom.Place).Indoors)
	ok, known := row.AllowsLength(unit.MM(min(in.most, 1e9)))
	return outdoors && block && known && ok
}

// jacketFor names a catalog cable in place of a line's that would do, and that is made
// for the weather where the line sees it; where there is none for both, one to change
// over to.
func (c *Case) jacketFor(s spreadLine, would func(*catalog.Part) bool) string {
	if s.part.Kind.V == "wire" || s.part.Kind.V == "jumper" {
		return "take one whose jacket is made for the place"
	}
	outdoors := false
	for _, p := range s.places() {
		outdoors = outdoors || p.Outdoors()
	}
	best := c.Firm.pick(c.jacketLike(s.part, func(p *catalog.Part) bool { return would(p) && (!outdoors || rated(p, "outdoor")) }))
	if best != nil {
		return "make it of " + c.Firm.OnHand(best) + ", if its loss is low enough"
	}
	if best = c.Firm.pick(c.jacketLike(s.part, would)); best != nil && outdoors {
		return "change over at the entry to " + c.Firm.OnHand(best) + "; the catalog has no cable for both"
	}
	return "lead it another way; the catalog has no cable for this"
}

// jacketLike describes what could take the place of a cable: one of the same kind and
// impedance that connectors are kept for, and that meets a condition.
func (c *Case) jacketLike(as *catalog.Part, would func(*catalog.Part) bool) func(*catalog.Part) bool {
	return func(p *catalog.Part) bool {
		return p.Kind.V == as.Kind.V && p.ID != as.ID && (p.Cable == nil || c.likeCable(as)(p)) && would(p)
	}
}
