package catalog

import (
	"fmt"
	"strings"
	"time"

	"driploop/catalog/source"
	"driploop/catalog/unit"
)

// Premises is where the firm keeps its goods and when it works: the tables shelf,
// crew, calendar and keep of driploop.toml.
type Premises struct {
	Shelves  []Shelf
	Crews    []Crew
	Calendar Calendar
	Keeps    []Keep
}

// Shelf is one place where goods lie.
type Shelf struct {
	ID      string
	At      source.Place
	Kind    source.Val[string] // shop, van, inbound, quarantine
	Address source.Val[Words]  // for deliveries
}

// Crew is who installs, and from which shelves it takes.
type Crew struct {
	ID      string
	At      source.Place
	Shelves source.Val[Words] // in the order in which it takes from them
	Tools   source.Val[Words]
}

// Keep is a reorder level: what a shelf holds below Least is bought up to Fill.
type Keep struct {
	At    source.Place
	Part  source.Val[string]
	Shelf source.Val[string]
	Least source.Val[Quantity]
	Fill  source.Val[Quantity]
}

// Quantity is a number of pieces, or a length of cut stock; one of the two is 0.
type Quantity struct {
	Each   int64
	Length unit.MM
}

// Plus is the sum of two quantities of one part.
func (q Quantity) Plus(r Quantity) Quantity { return Quantity{q.Each + r.Each, q.Length + r.Length} }

// Minus is what is left after r is taken; it may be below zero.
func (q Quantity) Minus(r Quantity) Quantity { return Quantity{q.Each - r.Each, q.Length - r.Length} }

// Less reports whether q is less than r, both of one part.
func (q Quantity) Less(r Quantity) bool { return q.Each < r.Each || q.Length < r.Length }

// IsZero reports whether there is nothing.
func (q Quantity) IsZero() bool { return q == Quantity{} }

// String prints "26" or "61.4 m".
func (q Quantity) String() string {
	if q.Length != 0 {
		return q.Length.String()
	}
	return fmt.Sprint(q.Each)
}

// Shelf finds a shelf by ID, or nil.
func (p *Premises) Shelf(id string) *Shelf {
	for i := range p.Shelves {
		if p.Shelves[i].ID == id {
			return &p.Shelves[i]
		}
	}
	return nil
}

// Crew finds a crew by ID, or nil.
func (p *Premises) Crew(id string) *Crew {
	for i := range p.Crews {
		if p.Crews[i].ID == id {
			return &p.Crews[i]
		}
	}
	return nil
}

// ShelfNames lists the shelves in the order of the file.
func (p *Premises) ShelfNames() []string {
	var out []string
	for i := range p.Shelves {
		out = append(out, p.Shelves[i].ID)
	}
	return out
}

// Keys reads the firm's shelves, crews, calendar and reorder levels from the root
// of driploop.toml.
func (p *Premises) Keys(k *source.Keys) {
	source.Named(k, &p.Shelves, "shelf", (*Shelf).keys, "places where goods lie")
	source.Named(k, &p.Crews, "crew", (*Crew).keys, "who installs")
	source.One(k, &p.Calendar, "calendar", (*Calendar).keys, "when the firm and its vendors work")
	source.Rows(k, &p.Keeps, "keep", (*Keep).keys, "reorder levels")
	p.agree(k)
}

func (s *Shelf) keys(k *source.Keys) {
	s.ID, s.At = k.ID(), k.At()
	source.Need(k, &s.Kind, "kind", source.OneOf("shop", "van", "inbound", "quarantine"), "inbound: arrived, not to be picked yet; quarantine: never given to a job")
	source.Opt(k, &s.Address, "address", source.ListOf(source.Text), "where deliveries go, line by line")
	if low := strings.ToLower(s.ID); low == ToJob || low == ToScrap {
		k.Fault(s.At, "a shelf cannot be called "+source.Quote(s.ID)+": moves use the word for where goods end", "give it another name")
	}
}

func (c *Crew) keys(k *source.Keys) {
	c.ID, c.At = k.ID(), k.At()
	source.Opt(k, &c.Shelves, "shelves", source.ListOf(source.Name), "takes from these, in this order; absent: from every shop shelf")
	source.Opt(k, &c.Tools, "tools", source.ListOf(source.Text), "what it can crimp and clamp with")
}

// amount is a count of pieces, or a length of cut stock.
var amount = source.Either(source.IsString,
	source.Map(source.Length, func(l unit.MM) (Quantity, error) { return Quantity{Length: l}, nil }),
	source.Map(source.Count(0, 1000000), func(n int) (Quantity, error) { return Quantity{Each: int64(n)}, nil }),
	"a count, or a length of cut stock")

func (r *Keep) keys(k *source.Keys) {
	r.At = k.At()
	source.Need(k, &r.Part, "part", source.Name, "what is kept")
	source.Need(k, &r.Shelf, "at", source.Name, "on which shelf")
	source.Need(k, &r.Least, "least", amount, "below this it is bought")
	source.Need(k, &r.Fill, "fill", amount, "up to this")
	if r.Least.Set && r.Fill.Set && r.Fill.V.Less(r.Least.V) {
		k.Fault(r.Fill.At, fmt.Sprintf("fill %s is less than least %s", r.Fill.V, r.Least.V), "buy at least up to the level that asks for it", r.Least.At)
	}
}

// agree holds the tables against each other: crews and reorder levels name
// shelves that exist, and a bin has one level.
func (p *Premises) agree(k *source.Keys) {
	for _, c := range p.Crews {
		for _, s := range c.Shelves.V {
			p.known(k, s)
		}
	}
	levels := map[[2]string]source.Place{}
	for _, r := range p.Keeps {
		if !r.Part.Set || !r.Shelf.Set {
			continue
		}
		p.known(k, r.Shelf)
		bin := [2]string{r.Part.V, r.Shelf.V}
		if first, twice := levels[bin]; twice {
			k.Fault(r.At, fmt.Sprintf("%s has two reorder levels at %s", source.Quote(r.Part.V), source.Quote(r.Shelf.V)), "keep one of them", first)
			continue
		}
		levels[bin] = r.At
	}
}

func (p *Premises) known(k *source.Keys, s source.Val[string]) {
	if !s.Set || p.Shelf(s.V) != nil {
		return
	}
	do := "describe it in [shelf." + s.V + "]"
	if near := source.Nearest(s.V, p.ShelfNames()); near != "" {
		do = "did you mean " + near + "?"
	}
	k.Fault(s.At, "no shelf is called "+source.Quote(s.V), do)
}

// Check holds the reorder levels against the catalog; look finds a part by ID, or nil.
func (p *Premises) Check(look func(string) *Part) []source.Problem {
	var out []source.Problem
	for _, r := range p.Keeps {
		part := partOf(&out, look, r.Part)
		if part == nil {
			continue
		}
		for _, q := range []source.Val[Quantity]{r.Least, r.Fill} {
			if q.Set && !q.V.IsZero() && (q.V.Length > 0) != part.CutStock() {
				out = append(out, source.Problem{Kind: source.Value, At: q.At, Says: fmt.Sprintf("%s does not suit %s", q.V, source.Quote(part.ID)),
					Do: "write a length for cut stock and a count for all else"})
			}
		}
	}
	return out
}

// Calendar is the firm's working days. Its zero value works Monday to Friday.
type Calendar struct {
	Week   source.Val[Words]
	Closed source.Val[[]source.Val[unit.Date]]

	works  [7]bool // by time.Weekday; all false: Monday to Friday
	closed map[unit.Date]bool
}

var weekdays = []string{"sun", "mon", "tue", "wed", "thu", "fri", "sat"}

func (c *Calendar) keys(k *source.Keys) {
	source.Opt(k, &c.Week, "week", source.Filled(source.ListOf(source.OneOf(weekdays...))), "working days; absent: mon to fri")
	source.Opt(k, &c.Closed, "closed", source.ListOf(source.Day), "days on which nobody works")
	if c.Week.Set && len(c.Week.V) == 0 {
		k.Fault(c.Week.At, "the week has no working day", "name one at least")
	}
	for _, w := range c.Week.V {
		for i, name := range weekdays {
			c.works[i] = c.works[i] || name == w.V
		}
	}
	c.closed = map[unit.Date]bool{}
	for _, d := range c.Closed.V {
		c.closed[d.V] = true
	}
}

// Workday reports whether people work on the day.
func (c *Calendar) Workday(d unit.Date) bool {
	w := d.Weekday()
	works := c.works[w]
	if c.works == [7]bool{} {
		works = w != time.Saturday && w != time.Sunday
	}
	return works && !c.closed[d]
}

// AddWorkdays is the n-th working day after d, or before it for a negative n. The
// day d itself is day 0, whether people work on it or not.
func (c *Calendar) AddWorkdays(d unit.Date, n int) unit.Date {
	step := 1
	if n < 0 {
		step, n = -1, -n
	}
	for n > 0 {
		d = d.Add(step)
		if c.Workday(d) {
			n--
		}
	}
	return d
}

// Workdays is how many working days lie after one day, up to and with another.
func (c *Calendar) Workdays(from, to unit.Date) int {
	n := 0
	for d := from; d.Before(to); {
		if d = d.Add(1); c.Workday(d) {
			n++
		}
	}
	return n
}
