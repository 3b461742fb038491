package rules

import (
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
)

// Charge says what moved a figure or a finding: the install, what is the case around
// it, or what it is held against.
type Charge int

// The charges, in the order in which a change is taken apart: from the base first the
// rulers are exchanged for those of the head, then the facts, then the work.
const (
	Uncharged Charge = iota
	ToRulers
	ToFacts
	ToWork
)

var chargeWords = [...]string{"", "rulers", "facts", "work"}

// String is the charge's word in JSON.
func (c Charge) String() string { return chargeWords[c] }

// Redline is what a change from a base to a head means for the install.
type Redline struct {
	Base, Head     string // names of the trees
	BaseID, HeadID string // of their commits, "" where there is none
	Today          string
	Changes        []Change // in the workspace's own files, by file
	RulersMoved    bool     // something that plans are held against is other in the head
	Jobs           []*JobChange
	Others         []OtherJob   // jobs whose own plans did not change
	Workspace      []MovedFound // findings on the workspace's own files
	Standing       Counts       // of such findings, those that were there before
	Past           []PastRow    // rows of stock history that were edited or deleted
	NewRows        int          // rows that were added to it
	Bins           []MovedBin   // what lies where otherwise
	Cost           Cost
	Gate           Gate
	Notices        []string
	Untouched      int      // plans that the change does not concern
	Private        []string // serial numbers and addresses, which no comment shows
	Feet           bool
}

// Change is one thing that a file says otherwise.
type Change struct {
	Charge   Charge
	File     string
	Line     int    // in the head, or in the base where it is gone
	On       string // "cable.C1", "house", "offer T-40077"
	Key      string // "" where the whole is added or gone
	How      string // added, gone, changed, renamed
	Was, Now string // as the files write it
	Price    bool   // Was and Now tell prices
}

// JobChange is what the change means for one job.
type JobChange struct {
	Job, Path    string
	WasJob       string // its name before, where it was renamed
	Title        string
	Stage        string
	Crew         string
	On           unit.Date
	How          string // added, gone, renamed, changed; "concerned": its file is as it was
	SaysSame     bool   // the file changed and its meaning did not
	Broken       string // why only its file was looked at, or ""
	Charges      []Charge
	Changes      []Change
	Figures      []MovedFigure
	Largest      *MovedFigure // of figures that stay inside their tolerance, or nil
	Findings     []MovedFound
	Standing     Counts // findings as they were before
	Waivers      []MovedWaiver
	Takeoff      []MovedPart
	Wasted       []Wasted
	Short        []MovedShort
	Tools        []ToolLack    // that the crew lacks for parts that are new in the plan
	Value        [2]unit.Money // of its takeoff at the cheapest offers, base and head
	ValueByFacts unit.Money    // of the difference, what prices make
	Unpriced     []string      // parts without an offer
	Holds        int           // that stand on the head
	HoldsBase    int           // that stand on the head under the rulers of the base
	BaseHolds    []*Finding    // those of them that do not stand under the head's own
}

// OtherJob is a job whose plan did not change and that gains or loses goods, or
// findings about them, all the same.
type OtherJob struct {
	Job, Path, Crew string
	Title           string
	On              unit.Date
	Short           []MovedShort
	Findings        []MovedFound
	Holds           int // new ones
}

// MovedShort is a part of which a job comes to be short, or is short no longer.
type MovedShort struct {
	Part     string
	Was, Now catalog.Quantity
	Needed   unit.Date
	Lines    []string // of cut stock, the lines without a piece
	Order    string   // brings it too late, or ""
	Day      unit.Date
	Charge   Charge
}

// ToolLack is a tool that a part asks for, newly taken, and that the crew has not.
type ToolLack struct{ Part, Tool, Crew string }

// Newly reports a shortage that was not there.
func (m *MovedShort) Newly() bool { return m.Was.IsZero() && !m.Now.IsZero() }

// MovedFound is a finding that is new, gone, or other than it was.
type MovedFound struct {
	*Finding // as it stands on the head; of one that is gone, as it stood on the base
	How      FoundHow
	Was, Now string // weight words with what goes with them; "" where there is none
	Charge   Charge
}

// FoundHow is how a finding moved.
type FoundHow int

// The ways in which findings move.
const (
	Arisen   FoundHow = iota + 1 // new
	Lost                         // assessed before and not assessed now
	Heavier                      // weighs more than it did
	Lighter                      // weighs less, or is accepted by a waiver
	Cleared                      // gone
	Assessed                     // not assessed before; now it is, and nothing stands against it
)

var foundWords = [...]string{"", "new", "lost", "heavier", "lighter", "cleared", "assessed"}

// String is the word in JSON.
func (h FoundHow) String() string { return foundWords[h] }

// Worse reports a move that a reviewer has to answer for.
func (h FoundHow) Worse() bool { return h == Arisen || h == Lost || h == Heavier }

// MovedPart is a quantity that a job takes otherwise than it did.
type MovedPart struct {
	Part     string
	Was, Now catalog.Quantity
}

// Wasted is goods that a change makes of no use: already cut, issued or ordered.
type Wasted struct {
	How  string // cut, issued, ordered
	Part string
	Qty  catalog.Quantity
	Line string // of a cut
	From string // tag or order
	Says string
	At   source.Place
}

// Cost is what the change costs.
type Cost struct {
	Known    bool // there are offers
	Currency string
	Value    [2]unit.Money // of the changed jobs' takeoff
	ToBuy    [2]unit.Money // goods and freight of what has to be bought for the jobs concerned
	Freight  [2]unit.Money // in it
	Proved   bool
}

// Gate says whether work is held up, by the rulers of the base and by the head's own.
type Gate struct {
	Differs   bool // the rulers of base and head differ
	UnderBase int  // holds that stand on the head under the base's rulers
	UnderHead int  // under its own
	Held      bool
}
