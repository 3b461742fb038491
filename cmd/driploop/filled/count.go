package filled

import (
	"errors"
	"fmt"
	"slices"
	"strings"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/cmd/driploop/show"
)

// howKnown are the ways in which a length is known.
var howKnown = []string{"marks", "tape", "label", "guess"}

// Count takes a count sheet back, by shelf in the order of the file. What is blank was
// not counted; 0 is none. With only, other shelves are passed over.
func Count(b bom.FilledBook, g *Ground, only string) ([]*show.Counted, error) {
	c := &counter{Ground: g, only: only, seen: map[string]string{}}
	if only != "" && !g.shelf(&c.faults, "--where", only) {
		return nil, c.faults.all()
	}
	ours := false
	for _, s := range b {
		var err error
		switch shelf, bins := strings.CutPrefix(s.Key, show.CountKey("")); {
		case s.Key == "":
			ours, err = true, c.table(s)
		case bins:
			ours, err = true, c.binSheet(s, shelf)
		case strings.HasPrefix(s.Key, show.ReelsKey("")):
			ours, err = true, c.reelSheet(s, strings.TrimPrefix(s.Key, show.ReelsKey("")), feet(b, g.Feet))
		}
		if err != nil {
			return nil, err
		}
	}
	if !ours {
		return nil, errors.New("the file has no sheet to count on")
	}
	c.sign()
	if err := c.faults.all(); err != nil {
		return nil, err
	}
	if len(c.shelves) == 0 {
		return nil, errors.New("nothing was filled in; 0 is for what is not there")
	}
	return c.shelves, nil
}

// counter reads the rows of a count.
type counter struct {
	*Ground
	faults  Faults
	only    string
	shelves []*show.Counted
	seen    map[string]string // where each bin and each reel was counted
}

// counted is a row of any count sheet.
type counted struct {
	*bom.FilledRow
	where, shelf, part, tag string
	by                      string
	left                    string // title of the column for what is left on a reel, "" where the sheet has none
	feet                    bool
	sizes                   []int
}

// The columns of the sheets, but for those of bags.
var (
	tableColumns = []string{show.ColumnWhere, show.ColumnPart, show.ColumnName, show.ColumnTag, show.ColumnBook, show.ColumnLoose, show.ColumnAll,
		show.ColumnRead, show.ColumnLeftM, show.ColumnLeftFt, show.ColumnHow, show.ColumnBy, show.ColumnNote}
	binColumns  = []string{show.ColumnPart, show.ColumnName, show.ColumnBook, show.ColumnLoose, show.ColumnAll, show.ColumnNote}
	reelColumns = []string{show.ColumnTag, show.ColumnPart, show.ColumnName, show.ColumnBook, show.ColumnRead, show.ColumnHow, show.ColumnNote}
)

// table reads a count sheet that is one plain table.
func (c *counter) table(s *bom.FilledSheet) error {
	if err := titles(s, tableColumns...); err != nil {
		return err
	}
	if err := s.Has(show.ColumnWhere, show.ColumnPart); err != nil {
		return err
	}
	left, ft := "", c.Feet
	for _, t := range []string{show.ColumnRead, show.ColumnLeftM, show.ColumnLeftFt} {
		if s.Has(t) != nil {
			continue
		}
		if left != "" {
			return fmt.Errorf("%s: the columns %s and %s are for the same", s.Name, left, t)
		}
		left = t
		ft = t == show.ColumnLeftFt || t == show.ColumnRead && c.Feet
	}
	sizes := sizesOf(s)
	for i := range s.Rows {
		r := &counted{FilledRow: &s.Rows[i], left: left, feet: ft, sizes: sizes, where: fmt.Sprintf("line %d", s.Rows[i].Line)}
		if !r.filled() {
			continue
		}
		r.shelf, r.part, r.tag = words(&c.faults, r.Entry(show.ColumnWhere)), words(&c.faults, r.Entry(show.ColumnPart)), words(&c.faults, r.Entry(show.ColumnTag))
		r.by = initials(&c.faults, r.Entry(show.ColumnBy))
		if r.shelf == "" {
			c.faults.add("%s: the row names no shelf", r.where)
			continue
		}
		c.row(r)
	}
	return nil
}

// binSheet reads the sheet of a workbook on which the bins of a shelf are counted.
func (c *counter) binSheet(s *bom.FilledSheet, shelf string) error {
	if err := titles(s, binColumns...); err != nil {
		return err
	}
	if err := s.Has(show.ColumnPart, show.ColumnLoose, show.ColumnAll); err != nil {
		return err
	}
	return c.sheet(s, shelf, counted{sizes: sizesOf(s)}, func(r *counted) {
		r.part = c.named(r, show.ColumnPart)
	})
}

// reelSheet reads the sheet of a workbook on which the reels of a shelf are read.
func (c *counter) reelSheet(s *bom.FilledSheet, shelf string, feet bool) error {
	if err := titles(s, reelColumns...); err != nil {
		return err
	}
	if err := s.Has(show.ColumnTag, show.ColumnPart, show.ColumnRead, show.ColumnHow); err != nil {
		return err
	}
	return c.sheet(s, shelf, counted{left: show.ColumnRead, feet: feet}, func(r *counted) {
		r.tag, r.part = c.named(r, show.ColumnTag), words(&c.faults, r.Entry(show.ColumnPart))
	})
}

// sheet reads one sheet of a workbook, which is for one shelf.
func (c *counter) sheet(s *bom.FilledSheet, shelf string, like counted, name func(*counted)) error {
	if e := s.Fact("where"); e.Text != shelf {
		return fmt.Errorf("%s: the sheet was made for the shelf %s, and says %s; take a sheet of that shelf", e.Where, shelf, source.Quote(e.Text))
	}
	before, by, any := len(c.faults), initials(&c.faults, s.Fact("by")), false
	for i := range s.Rows {
		r := like
		r.FilledRow, r.shelf, r.by = &s.Rows[i], shelf, by
		r.where = fmt.Sprintf("%s, row %d", s.Name, r.Line)
		if !r.filled() {
			continue
		}
		any = true
		name(&r)
		c.row(&r)
	}
	if any {
		c.dayOf(&c.faults, s.Fact("on"))
	} else {
		c.faults = c.faults[:before]
	}
	return nil
}

// named is what a row of a workbook is about: its hidden key, or what somebody wrote
// who added the row by hand.
func (c *counter) named(r *counted, title string) string {
	name := words(&c.faults, r.Entry(title))
	if r.Key != "" && r.Key != name {
		c.faults.add("%s: the row was made for %s, and says %s; add a row below instead", r.where, r.Key, source.Quote(name))
	}
	return name
}

// sizesOf are the sizes of bags that a sheet has columns for.
func sizesOf(s *bom.FilledSheet) []int {
	var out []int
	for _, t := range s.Columns {
		if n := bagSize(t); n > 0 {
			out = append(out, n)
		}
	}
	return out
}

// filled reports that something was counted in a row.
func (r *counted) filled() bool {
	if r.left != "" && !r.Entry(r.left).Blank() || !r.Entry(show.ColumnHow).Blank() {
		return true
	}
	for _, n := range r.sizes {
		if !r.Entry(show.BagColumn(n)).Blank() {
			return true
		}
	}
	all := r.Entry(show.ColumnAll)
	return !r.Entry(show.ColumnLoose).Blank() || !all.Blank() && all.Kind != bom.EntryFormula
}

// row books a row in which something was counted.
func (c *counter) row(r *counted) {
	if !c.shelf(&c.faults, r.where, r.shelf) || c.only != "" && r.shelf != c.only {
		return
	}
	key := "bin " + r.part + " at " + r.shelf
	if r.tag != "" {
		key = "reel " + r.tag
	}
	if before := c.seen[key]; before != "" {
		c.faults.add("%s: the %s was counted already, in %s", r.where, key, before)
		return
	}
	c.seen[key] = r.where
	if r.tag != "" {
		c.reel(r)
		return
	}
	c.bin(r)
}

// on is the shelf's count.
func (c *counter) on(shelf string) *show.Counted {
	i := slices.IndexFunc(c.shelves, func(s *show.Counted) bool { return s.Shelf == shelf })
	if i < 0 {
		i = len(c.shelves)
		c.shelves = append(c.shelves, &show.Counted{Shelf: shelf, On: c.Today, By: c.By, Feet: c.Feet})
	}
	return c.shelves[i]
}

func (c *counter) bin(r *counted) {
	if r.part == "" {
		c.faults.add("%s: the row names no part", r.where)
		return
	}
	p, good := c.part(&c.faults, r.where, r.part)
	switch {
	case !good:
		return
	case p != nil && p.CutStock() || p == nil && c.onReels(r.part):
		c.faults.add("%s: %s is cut stock and is read by its tag, not counted", r.where, r.part)
		return
	case r.left != "" && !r.Entry(r.left).Blank():
		c.faults.add("%s: a length stands here, and the row names no reel", r.Entry(r.left).Where)
		return
	}
	qty, ok := c.pieces(r, bags(p))
	if !ok {
		return
	}
	book := c.onShelf(r.part, r.shelf).Each
	s := c.on(r.shelf)
	s.Bins = append(s.Bins, show.CountedBin{Part: r.part, By: r.by, Note: words(&c.faults, r.Entry(show.ColumnNote)), Qty: qty, Book: book,
		Bag: catalog.BagsCounted(bags(p), book, qty)})
}

// bags are the sizes in which a part is bagged.
func bags(p *catalog.Part) []int {
	var out []int
	if p != nil {
		for _, n := range p.Bags.V {
			out = append(out, n.V)
		}
	}
	return out
}

// pieces adds up what was counted in bags and loose. Who wrote down what it is in all
// as well must have the same.
func (c *counter) pieces(r *counted, bagged []int) (int64, bool) {
	var sum int64
	any, good := false, true
	count := func(e bom.Entry, each int64) {
		n, err := e.Count()
		switch {
		case errors.Is(err, bom.ErrBlank):
		case err != nil:
			c.faults.err(err)
			good = false
		default:
			sum, any = sum+n*each, true
		}
	}
	for _, n := range r.sizes {
		e := r.Entry(show.BagColumn(n))
		if !e.Blank() && !slices.Contains(bagged, n) {
			c.faults.add("%s: %s does not come in bags of %d", e.Where, r.part, n)
			good = false
			continue
		}
		count(e, int64(n))
	}
	count(r.Entry(show.ColumnLoose), 1)
	if all := r.Entry(show.ColumnAll); good && !all.Blank() && all.Kind != bom.EntryFormula {
		n, err := all.Count()
		switch {
		case err != nil:
			c.faults.err(err)
			good = false
		case any && n != sum:
			c.faults.add("%s: %d in all, and bags and loose pieces make %d", all.Where, n, sum)
			good = false
		}
		sum, any = n, true
	}
	if good && !any {
		c.faults.add("%s: nothing was counted", r.where)
	}
	if good && sum > 10*bom.MostFilledCount {
		c.faults.add("%s: %d pieces are more than a bin may have", r.where, sum)
		good = false
	}
	return sum, good && any
}

func (c *counter) reel(r *counted) {
	t := c.tag(&c.faults, r.where, r.tag)
	if t == nil {
		return
	}
	if r.part != "" && r.part != t.Part {
		c.faults.add("%s: on the reel %s is %s, and not %s; a tag belongs to one part for ever", r.where, t.ID, t.Part, r.part)
		return
	}
	for _, title := range append(bagTitles(r.sizes), show.ColumnLoose, show.ColumnAll) {
		if e := r.Entry(title); !e.Blank() {
			c.faults.add("%s: a reel is read by its length, and has no pieces", e.Where)
			return
		}
	}
	if r.left == "" || r.Entry(r.left).Blank() {
		c.faults.add("%s: how long the reel is does not stand here", r.where)
		return
	}
	left, err := r.Entry(r.left).Length(r.feet)
	if err != nil {
		c.faults.err(err)
		return
	}
	how := words(&c.faults, r.Entry(show.ColumnHow))
	if how != "" && !slices.Contains(howKnown, how) {
		c.faults.add("%s", unknown(r.Entry(show.ColumnHow).Where, "way to know a length", how, howKnown)+" It is marks, tape, label or guess.")
		return
	}
	s := c.on(r.shelf)
	s.Reels = append(s.Reels, show.CountedReel{Tag: t.ID, Part: t.Part, By: r.by, Note: words(&c.faults, r.Entry(show.ColumnNote)), Left: left, Book: t.Left, How: how, Was: t.Where})
}

func bagTitles(sizes []int) []string {
	var out []string
	for _, n := range sizes {
		out = append(out, show.BagColumn(n))
	}
	return out
}

// sign says of each shelf who counted it: who came with the call, or the one who
// counted all of it.
func (c *counter) sign() {
	for _, s := range c.shelves {
		var names []string
		add := func(who *string) {
			if *who == "" {
				*who = c.By
			}
			names = append(names, *who)
		}
		for i := range s.Bins {
			add(&s.Bins[i].By)
		}
		for i := range s.Reels {
			add(&s.Reels[i].By)
		}
		slices.Sort(names)
		names = slices.Compact(names)
		if len(names) == 1 {
			s.By = names[0]
		}
		if s.By == "" || names[0] == "" {
			c.faults.add("who counted %s? The sheet names nobody, or several; --by has the initials of who speaks for it", s.Shelf)
		}
	}
}
