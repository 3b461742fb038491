package catalog

import (
	"slices"
	"strings"

	"driploop/catalog/source"
	"driploop/catalog/unit"
)

// Stock is what all sheets and orders add up to at the end of one day: what lies
// in which bin, what is left on which reel, what each job was given, and what is
// still to come. All lists are in a fixed order whatever order the sheets came in.
type Stock struct {
	Today   unit.Date
	Latest  Moment   // of what happened today at a time of day; zero: nothing did
	Bins    []Bin    // by part, then shelf
	Tags    []Tag    // by ID
	Serials []Serial // by part, then number
	Issues  []Issue  // by job, then part
	Pieces  []Piece  // by job, line and time
	Open    []Open   // by order, then line
	Notes   []Note   // by place
}

// Bin is one part on one shelf. For cut stock it is the sum over its tags there.
type Bin struct {
	Part, Where string
	Kind        string // of the shelf: shop, van, inbound, quarantine; "" where nobody describes it
	Qty         Quantity
	Counted     Moment       // of the newest count; zero where it was never counted
	At          source.Place // of the newest count
	Began       source.Place // of the first row that put something there, or counted it
	BeganOn     Moment
}

// Pickable reports whether a crew may take from the bin.
func (b *Bin) Pickable() bool { return b.Kind == "shop" || b.Kind == "van" }

// OnHand reports whether the bin counts as the firm's stock at all: goods in
// quarantine are kept apart, and so are bins on shelves that nobody describes.
func (b *Bin) OnHand() bool { return b.Pickable() || b.Kind == "inbound" }

// Tag is one piece of cut stock. Of Where and Job at most one is set; none is
// where it was scrapped or a complete count did not find it.
type Tag struct {
	ID, Part string
	Where    string // the shelf it lies on
	Kind     string // of that shelf
	Job      string // the job it was given to whole
	Left     unit.MM
	How      string // how the newest reading knows the length; "" unknown
	Sealed   bool
	Of       string // the tag it was cut from
	Order    string // the order it came with
	Read     Moment // of the newest reading
	At       source.Place
}

// Serial is one piece known by its number. It is in one place unless the sheets
// contradict each other.
type Serial struct {
	Part, Number string
	Spots        []Spot
}

// Spot is where something is: a shelf, or a job; both empty for scrap.
type Spot struct{ Shelf, Job string }

// String prints "shop", "job quay-lane" or "scrap".
func (s Spot) String() string {
	switch {
	case s.Shelf != "":
		return s.Shelf
	case s.Job != "":
		return "job " + s.Job
	}
	return ToScrap
}

// Issue is what a job was given of a part, less what came back.
type Issue struct {
	Job, Part string
	Net       Quantity
	Rows      []IssueRow // by place
}

// IssueRow is a row that gave something to a job or took it back.
type IssueRow struct {
	At      source.Place
	Qty     Quantity // negative for what came back
	Settled bool     // a newer count or reading makes the row old news

	when stamp
	bin  binKey
	tag  string
}

// Day is the day of the row.
func (r *IssueRow) Day() unit.Date {
	day := int(r.when / (wholeDay + 1))
	return unit.Date{Year: day / 32 / 16, Month: day / 32 % 16, Day: day % 32}
}

// Piece is a length that was cut for a line of a job.
type Piece struct {
	Job, Cable string
	Tag, Part  string // Part is "" where nothing was ever read under the tag
	Length     unit.MM
	Back       unit.MM // what remnants of it brought back
	On         Moment
	At         source.Place
}

// Kept is what of the piece is still with the job.
func (p *Piece) Kept() unit.MM { return p.Length - p.Back }

// OnHand is how much of a part the firm has, goods on inbound shelves included and
// quarantine left out, and every bin of it, quarantine included.
func (s *Stock) OnHand(part string) (Quantity, []Bin) {
	bins := s.binsOf(part)
	var sum Quantity
	for i := range bins {
		if bins[i].OnHand() {
			sum = sum.Plus(bins[i].Qty)
		}
	}
	return sum, bins
}

func (s *Stock) binsOf(part string) []Bin {
	by := func(b Bin, part string) int { return strings.Compare(b.Part, part) }
	from, _ := slices.BinarySearchFunc(s.Bins, part, by)
	to := from
	for to < len(s.Bins) && s.Bins[to].Part == part {
		to++
	}
	return s.Bins[from:to]
}

// IsEmpty reports that no sheet and no order says anything: nobody keeps the store's
// books here, and what is on hand is not known.
func (s *Stock) IsEmpty() bool {
	return len(s.Bins)+len(s.Tags)+len(s.Open)+len(s.Issues)+len(s.Pieces) == 0
}

// Tag finds a tag by ID, or nil.
func (s *Stock) Tag(id string) *Tag {
	i, found := slices.BinarySearchFunc(s.Tags, id, func(t Tag, id string) int { return strings.Compare(t.ID, id) })
	if !found {
		return nil
	}
	return &s.Tags[i]
}

// TagsOf lists the tags of a part that lie on a shelf and hold something, by ID.
func (s *Stock) TagsOf(part string) []*Tag {
	var out []*Tag
	for i := range s.Tags {
		if t := &s.Tags[i]; t.Part == part && t.Where != "" && t.Left > 0 {
			out = append(out, t)
		}
	}
	return out
}

// Issued is what a job was given of a part, less what came back. It is below zero
// where more came back than was given.
func (s *Stock) Issued(job, part string) Quantity {
	for _, is := range s.IssuesOf(job) {
		if is.Part == part {
			return is.Net
		}
	}
	return Quantity{}
}

// IssuesOf lists what a job was given, by part.
func (s *Stock) IssuesOf(job string) []Issue {
	from, _ := slices.BinarySearchFunc(s.Issues, job, func(i Issue, job string) int { return strings.Compare(i.Job, job) })
	to := from
	for to < len(s.Issues) && s.Issues[to].Job == job {
		to++
	}
	return s.Issues[from:to]
}

// PiecesFor lists the pieces cut for a job by line, in the order of cutting.
func (s *Stock) PiecesFor(job string) []Piece {
	by := func(p Piece, job string) int { return strings.Compare(p.Job, job) }
	from, _ := slices.BinarySearchFunc(s.Pieces, job, by)
	to := from
	for to < len(s.Pieces) && s.Pieces[to].Job == job {
		to++
	}
	return s.Pieces[from:to]
}

// PiecesOf lists the pieces cut for a line of a job in the order of cutting.
func (s *Stock) PiecesOf(job, cable string) []Piece {
	var out []Piece
	for _, p := range s.PiecesFor(job) {
		if p.Cable == cable {
			out = append(out, p)
		}
	}
	return out
}

// Inbound is what sent orders still owe of a part, and the order lines that do.
func (s *Stock) Inbound(part string) (Quantity, []Open) {
	var sum Quantity
	var lines []Open
	for _, o := range s.Open {
		if o.Part == part {
			sum = sum.Plus(o.Left)
			lines = append(lines, o)
		}
	}
	return sum, lines
}
