package bom

import (
	"driploop/catalog"
	"driploop/catalog/unit"
)

// Terms says what is bought for.
type Terms struct {
	Until unit.Date       // jobs needed after it are left for later; zero: so many days from now as the house says
	Jobs  map[string]bool // only these jobs, and no reorder levels; nil: all of both
	Nodes int             // limit of the search in steps; 0: the default
}

// Purchase is what to buy from whom: what sees to it that no job is late that need
// not be, at the least cost with freight.
type Purchase struct {
	Today, Until unit.Date
	Rows         []*BuyRow // by vendor, then part
	Freight      []Freight // of each vendor with an order, by vendor
	Total        unit.Money
	Bound        unit.Money // no purchase that is as little late costs less
	Proved       bool       // Total is the least possible
	Cuts         []*CutPlan // of cut stock, by part
	Unsourced    []Unsourced
	Later        []Later
	Waiting      []Waiting
	Moves        []LevelMove
	Swaps        []Swap // substitutes that the purchase goes by: changes of plans, to be made by hand
}

// BuyRow is one line of an order.
type BuyRow struct {
	Offer   *catalog.Offer
	Vendor  *catalog.Vendor
	Parts   []Bought // one, or those of a box that are wanted
	Packs   int
	Pack    catalog.Pack // of what is cut to length, the length
	Price   unit.Money   // of one pack, or of one metre where it is cut to length
	Cost    unit.Money   // rounded half up to the cent
	Needed  unit.Date    // earliest of what it serves; zero where nothing has a day
	OrderBy unit.Date    // so that it comes by then; zero where it has no day or nobody knows how long it takes
	Arrives unit.Date    // when ordered today; zero where nobody knows
	Late    []LateJob
}

// Bought is what a row brings of one part, and why.
type Bought struct {
	Part *catalog.Part
	Qty  catalog.Quantity // in all packs of the row
	For  []Serves         // by turn of the jobs
	Keep catalog.Quantity // for reorder levels
	// Of the part in all, over all rows: what the jobs are still to be given and the
	// levels lack, and what of it comes from shelves and from orders.
	Need, Shelf, Inbound catalog.Quantity
}

// Serves is what a job gets of a row.
type Serves struct {
	Job    string
	Qty    catalog.Quantity
	Needed unit.Date
}

// LateJob is a job that a row comes too late for.
type LateJob struct {
	Job     string
	Needed  unit.Date
	Arrives unit.Date // zero: nobody knows
}

// Freight is what an order costs beyond its goods.
type Freight struct {
	Vendor *catalog.Vendor
	Goods  unit.Money
	Amount unit.Money
}

// Unsourced is what nobody sells.
type Unsourced struct {
	Part string
	Qty  catalog.Quantity
	Jobs []Serves
	Keep bool // a reorder level wants it
	Why  string
}

// Later is what a job lacks that is not bought yet.
type Later struct {
	Job    string
	Part   *catalog.Part
	Qty    catalog.Quantity
	Needed unit.Date
}

// Waiting is what a job waits for: an order that was sent brings it too late, and
// nothing that could be bought comes sooner.
type Waiting struct {
	Job    string
	Part   *catalog.Part
	Qty    catalog.Quantity
	Needed unit.Date
	Order  string
	Day    unit.Date
}

// CutPlan says which piece of a part is cut from which reel.
type CutPlan struct {
	Part   *catalog.Part
	Pieces []CutPiece // in turn
	Opened []CutFrom
	Cost   unit.Money // of what is bought, without freight
	Bound  unit.Money // no plan for these pieces costs less
	Proved bool
}

// CutPiece is one piece and the index in Opened of what it is cut from.
type CutPiece struct {
	Job    string
	Piece  Piece
	From   int
	Needed unit.Date
}

// CutFrom is a reel, remnant or length that is cut.
type CutFrom struct {
	ID     string
	Supply *Supply        // on hand or on order
	Offer  *catalog.Offer // to be bought
	Length unit.MM
	Left   unit.MM
	Usable bool    // what is left goes back
	Keep   unit.MM // of what is left, what a reorder level asked for
}

// Buy says what to buy for what an allocation leaves short and for the reorder
// levels. First it makes as few jobs late as the offers allow, then it costs as
// little as can be, freight and all; parts finds a part by ID, or nil.
func Buy(a *Allocation, offers *catalog.Offers, parts func(string) *catalog.Part, t Terms) *Purchase {
	shut := map[string]bool{}
	for {
		b := newBuyer(a, offers, parts, t, shut)
		b.gather()
		b.split()
		chosen, refuses := b.search()
		if refuses == "" {
			b.write(chosen)
			return b.out
		}
		shut[refuses] = true
	}
}

// buyer is a purchase while it is being made.
type buyer struct {
	a       *Allocation
	offers  *catalog.Offers
	parts   func(string) *catalog.Part
	terms   Terms
	out     *Purchase
	vendors []*catalog.Vendor // who has an order in prospect, by ID
	shut    map[string]bool   // vendors whose least order cannot be reached
	market  map[string][]*good
	refused map[string]string // by part: why an offer for it is not used
	wants   map[string][]*want
	cuts    map[string]*cutting
	lots    []*lot
}

// DefaultBuyAhead is how many days ahead is bought where the house says nothing.
const DefaultBuyAhead = 30

func newBuyer(a *Allocation, offers *catalog.Offers, parts func(string) *catalog.Part, t Terms, shut map[string]bool) *buyer {
	until := t.Until
	if until.IsZero() {
		until = a.Today.Add(a.house.BuyAheadDays.Or(DefaultBuyAhead))
	}
	b := &buyer{a: a, offers: offers, parts: parts, terms: t, out: &Purchase{Today: a.Today, Until: until},
		shut: shut, wants: map[string][]*want{}, cuts: map[string]*cutting{}}
	b.readMarket()
	return b
}

// bought reports whether the claims of a job are bought for.
func (b *buyer) bought(c *Claim) bool {
	return (b.terms.Jobs == nil || b.terms.Jobs[c.Job()]) && !c.Needed.After(b.out.Until)
}

// later notes what a claim lacks that is not bought yet. What other jobs lack than
// those asked for is not noted.
func (b *buyer) later(c *Claim, qty catalog.Quantity) {
	if !qty.IsZero() && (b.terms.Jobs == nil || b.terms.Jobs[c.Job()]) {
		b.out.Later = append(b.out.Later, Later{c.Job(), c.Part(), qty, c.Needed})
	}
}
