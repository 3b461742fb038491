package catalog

import (
	"fmt"
	"maps"
	"slices"
	"strings"

	"driploop/catalog/unit"

	"pgregory.net/rapid"
)

// history is a store that knows what really happened in it, while it writes the rows
// that people would write. Things get lost now and then, and only a count tells.
type history struct {
	t     *rapid.T
	files map[string]string
	sheet string // the file that takes the next rows
	by    string // begins the names of files, so that branches write files of their own

	day    int  // of November
	bare   bool // the rows of the day carry no time
	minute int

	bins    map[binKey]int // as the book has them
	hidden  map[binKey]int // of these, lost without a row
	tags    map[string]*pastTag
	serials map[string]Spot
	issued  map[[2]string]Quantity
	open    map[string]Quantity // by part, still to come
	kept    map[string]unit.MM  // by tag, job and line: what was cut and did not come back

	begun, arrived, scrapped, lost map[string]Quantity
}

// pastTag is a piece of cut stock. Left is what the book has; Hidden of it is lost.
type pastTag struct {
	part         string
	at           Spot
	gone         bool // a complete count did not find it, or it was scrapped
	left, hidden unit.MM
	read         bool               // on a bare day: read this evening, so that nothing more happens to it
	pieces       map[string]unit.MM // what was cut for a line and did not come back
}

var (
	pastShelves = []string{"shop", "van-1", "dock", "returns"}
	pastJobs    = []string{"quay-lane", "mill-cottage", "north-pier"}
	pastPieces  = []string{"NC-10-NM", "PS-12"}
	pastCut     = []string{"CX-10", "CX-7"}
)

// newHistory opens the store with a complete count of every shelf.
func newHistory(t *rapid.T) *history {
	h := &history{t: t, files: map[string]string{}, by: "a", day: 1, bins: map[binKey]int{}, hidden: map[binKey]int{}, tags: map[string]*pastTag{}, serials: map[string]Spot{},
		issued: map[[2]string]Quantity{}, open: map[string]Quantity{}, kept: map[string]unit.MM{}, begun: map[string]Quantity{}, arrived: map[string]Quantity{}, scrapped: map[string]Quantity{}, lost: map[string]Quantity{}}
	for i, shelf := range pastShelves {
		for _, p := range pastPieces {
			n := h.upTo("begun", 40)
			h.bins[binKey{p, shelf}] = n
			add(h.begun, p, Quantity{Each: int64(n)})
		}
		id := fmt.Sprintf("A-%d", i)
		h.serials[id], h.bins[binKey{"AMP-W", shelf}] = Spot{Shelf: shelf}, 1
		add(h.begun, "AMP-W", Quantity{Each: 1})
		tag := &pastTag{part: pick(h, pastCut), at: Spot{Shelf: shelf}, left: unit.MM(1 + h.upTo("left", 90000)), pieces: map[string]unit.MM{}}
		h.tags[fmt.Sprintf("R-%d", i)] = tag
		add(h.begun, tag.part, Quantity{Length: tag.left})
		h.complete(shelf)
	}
	return h
}

func add[K comparable](m map[K]Quantity, k K, q Quantity) { m[k] = m[k].Plus(q) }

func (h *history) upTo(what string, n int) int { return rapid.IntRange(0, n).Draw(h.t, what) }

func pick[T any](h *history, list []T) T { return list[h.upTo("which", len(list)-1)] }

// on is the time of the next row, as it is written.
func (h *history) on() string {
	if h.bare {
		return fmt.Sprintf("2026-11-%02d", h.day)
	}
	h.minute++
	return fmt.Sprintf("2026-11-%02dT%02d:%02d:00", h.day, h.minute/60, h.minute%60)
}

// write adds rows to the sheet at hand, or begins another one.
func (h *history) write(rows string) {
	if h.sheet == "" || h.upTo("same sheet", 2) == 0 {
		h.sheet = h.name()
	}
	h.files[h.sheet] += rows
}

// name is a new name for a file; it says nothing of the time.
func (h *history) name() string {
	return fmt.Sprintf("stock/%s/%s%d-%d.toml", pick(h, []string{"counts", "in", "issue", "back", "move"}), h.by, h.upTo("name", 9), len(h.files))
}

// days goes through some days of the store.
func (h *history) days(n int) {
	for range n {
		h.day++
		h.bare, h.minute = h.upTo("bare", 1) == 0, 0
		for _, tag := range h.tags {
			tag.read = false
		}
		steps := []func(){h.move, h.move, h.tagMove, h.cut, h.cut, h.remnant, h.arrive, h.arriveReel, h.amplifier, h.lose, h.loseTag, h.noise}
		counts := []func(){h.count, h.read, func() { h.complete(pick(h, pastShelves)) }}
		if !h.bare {
			steps = slices.Concat(steps, counts)
		}
		for range h.upTo("steps", 8) {
			pick(h, steps)()
		}
		if h.bare {
			for range h.upTo("counts", 3) {
				pick(h, counts)()
			}
		}
	}
}

// move takes pieces between a shelf and another shelf, a job or scrap, or back.
func (h *history) move() {
	part, shelf, job := pick(h, pastPieces), pick(h, pastShelves), pick(h, pastJobs)
	key := binKey{part, shelf}
	there := h.bins[key] - h.hidden[key]
	out := int(h.issued[[2]string{job, part}].Each)
	to, ends := pick(h, append(pastShelves[:len(pastShelves):len(pastShelves)], ToJob, ToScrap, "back")), ""
	switch {
	case to == "back" && out > 0:
		n := 1 + h.upTo("qty", out-1)
		h.bins[key] += n
		add(h.issued, [2]string{job, part}, Quantity{Each: -int64(n)})
		ends = fmt.Sprintf("from = \"job\"\njob = %q\nto = %q\nqty = %d", job, shelf, n)
	case to == "back" || to == shelf || there == 0:
		return
	default:
		n := 1 + h.upTo("qty", there-1)
		h.bins[key] -= n
		ends = fmt.Sprintf("from = %q\nto = %q\nqty = %d", shelf, to, n)
		switch to {
		case ToJob:
			ends += fmt.Sprintf("\njob = %q", job)
			add(h.issued, [2]string{job, part}, Quantity{Each: int64(n)})
		case ToScrap:
			add(h.scrapped, part, Quantity{Each: int64(n)})
		default:
			h.bins[binKey{part, to}] += n
		}
	}
	h.write(fmt.Sprintf("[[move]]\non = %s\npart = %q\n%s\n", h.on(), part, ends))
}

// amplifier moves a piece that is known by its number.
func (h *history) amplifier() {
	id := pick(h, slices.Sorted(maps.Keys(h.serials)))
	from, to := h.serials[id], Spot{Shelf: pick(h, pastShelves)}
	if h.upTo("to a job", 1) == 0 {
		to = Spot{Job: pick(h, pastJobs)}
	}
	if from == to || from.Job != "" && to.Job != "" {
		return
	}
	ends, job := fmt.Sprintf("from = %q\nto = %q", from.Shelf, to.Shelf), ""
	switch {
	case to.Job != "":
		ends, job = fmt.Sprintf("from = %q\nto = \"job\"\njob = %q", from.Shelf, to.Job), to.Job
		add(h.issued, [2]string{job, "AMP-W"}, Quantity{Each: 1})
	case from.Job != "":
		ends, job = fmt.Sprintf("from = \"job\"\njob = %q\nto = %q", from.Job, to.Shelf), from.Job
		add(h.issued, [2]string{job, "AMP-W"}, Quantity{Each: -1})
	}
	if from.Shelf != "" {
		h.bins[binKey{"AMP-W", from.Shelf}]--
	}
	if to.Shelf != "" {
		h.bins[binKey{"AMP-W", to.Shelf}]++
	}
	h.serials[id] = to
	h.write(fmt.Sprintf("[[move]]\non = %s\npart = \"AMP-W\"\nqty = 1\nserials = [%q]\n%s\n", h.on(), id, ends))
}

// aTag is one of the pieces that are there and that nobody read this evening.
func (h *history) aTag() (string, *pastTag) {
	var ids []string
	for id, tag := range h.tags {
		if !tag.gone && !tag.read {
			ids = append(ids, id)
		}
	}
	if ids == nil {
		return "", nil
	}
	slices.Sort(ids)
	id := pick(h, ids)
	return id, h.tags[id]
}

// tagMove takes a reel elsewhere. One that comes back from a job is read: only then
// does anybody know what the job used.
func (h *history) tagMove() {
	id, tag := h.aTag()
	if tag == nil {
		return
	}
	if from := tag.at.Job; from != "" {
		used := unit.MM(h.upTo("used", int(tag.left-tag.hidden)))
		shelf := pick(h, pastShelves)
		h.write(fmt.Sprintf("[[move]]\non = %s\ntag = %q\nfrom = \"job\"\njob = %q\nto = %q\n", h.on(), id, from, shelf))
		add(h.issued, [2]string{from, tag.part}, Quantity{Length: used + tag.hidden - tag.left})
		tag.at, tag.left, tag.hidden = Spot{Shelf: shelf}, tag.left-tag.hidden-used, 0
		h.reading(id, tag)
		return
	}
	to := pick(h, append(pastShelves[:len(pastShelves):len(pastShelves)], ToJob, ToScrap))
	if to == tag.at.Shelf {
		return
	}
	ends := fmt.Sprintf("from = %q\nto = %q\n", tag.at.Shelf, to)
	switch to {
	case ToJob:
		job := pick(h, pastJobs)
		ends += fmt.Sprintf("job = %q\n", job)
		add(h.issued, [2]string{job, tag.part}, Quantity{Length: tag.left})
		tag.at = Spot{Job: job}
	case ToScrap:
		add(h.scrapped, tag.part, Quantity{Length: tag.left})
		tag.at, tag.left, tag.hidden, tag.gone = Spot{}, 0, 0, true
	default:
		tag.at = Spot{Shelf: to}
	}
	h.write(fmt.Sprintf("[[move]]\non = %s\ntag = %q\n%s", h.on(), id, ends))
}

// cut takes a length off a reel, for a line of a job or as waste.
func (h *history) cut() {
	id, tag := h.aTag()
	if tag == nil || tag.left == tag.hidden {
		return
	}
	n := unit.MM(1 + h.upTo("length", int(tag.left-tag.hidden)-1))
	tag.left -= n
	row := fmt.Sprintf("[[cut]]\non = %s\ntag = %q\nlength = \"%d mm\"\n", h.on(), id, n)
	if h.upTo("waste", 4) == 0 && tag.at.Job == "" {
		add(h.scrapped, tag.part, Quantity{Length: n})
		h.write(row + "because = \"kinked\"\n")
		return
	}
	job, line := pick(h, pastJobs), fmt.Sprintf("C%d", len(h.files)*100+h.minute*7+h.upTo("line", 6))
	if _, twice := tag.pieces[job+"-"+line]; twice {
		line += "x"
	}
	if job != tag.at.Job {
		add(h.issued, [2]string{job, tag.part}, Quantity{Length: n})
		if tag.at.Job != "" {
			add(h.issued, [2]string{tag.at.Job, tag.part}, Quantity{Length: -n})
		}
	}
	tag.pieces[job+"-"+line] = n
	h.kept[id+" "+job+"-"+line] = n
	h.write(row + fmt.Sprintf("job = %q\ncable = %q\n", job, line))
}

// remnant brings back what is left of a piece, or splits a piece off a reel.
func (h *history) remnant() {
	of, parent := h.aTag()
	if parent == nil {
		return
	}
	shelf := pick(h, pastShelves)
	born := &pastTag{part: parent.part, at: Spot{Shelf: shelf}, pieces: map[string]unit.MM{}}
	id := fmt.Sprintf("S-%s-%d", h.by, len(h.tags))
	if names := slices.Sorted(maps.Keys(parent.pieces)); len(names) > 0 && h.upTo("back", 1) == 0 {
		id = pick(h, names)
		piece := parent.pieces[id]
		job := id[:strings.LastIndexByte(id, '-')]
		if h.tags[id] != nil || h.tags[id+"-2"] != nil {
			return
		}
		born.left = unit.MM(1 + h.upTo("left", int(piece)-1))
		add(h.issued, [2]string{job, born.part}, Quantity{Length: -born.left})
		delete(parent.pieces, id)
		h.kept[of+" "+id] -= born.left
	} else {
		if parent.at.Shelf == "" || parent.left == parent.hidden {
			return
		}
		born.left = unit.MM(1 + h.upTo("left", int(parent.left-parent.hidden)-1))
		parent.left -= born.left
	}
	h.tags[id] = born
	h.write(fmt.Sprintf("[[reel]]\non = %s\ntag = %q\npart = %q\nwhere = %q\nleft = \"%d mm\"\nof = %q\n", h.on(), id, born.part, shelf, born.left, of))
}

// arrive books pieces that come under an order, of which some are still to come.
func (h *history) arrive() {
	part, shelf, n, rest := pick(h, pastPieces), pick(h, pastShelves), 1+h.upTo("came", 30), h.upTo("rest", 5)
	order := h.order(part, "1", n+rest)
	h.bins[binKey{part, shelf}] += n
	add(h.arrived, part, Quantity{Each: int64(n)})
	add(h.open, part, Quantity{Each: int64(rest)})
	h.write(fmt.Sprintf("[[move]]\non = %s\norder = %q\npart = %q\nto = %q\nqty = %d\n", h.on(), order, part, shelf, n))
}

// arriveReel books a reel that comes under an order.
func (h *history) arriveReel() {
	part, shelf, length, rest := pick(h, pastCut), pick(h, pastShelves), unit.MM(1+h.upTo("length", 150000)), h.upTo("rest", 2)
	order := h.order(part, fmt.Sprintf("\"%d mm\"", length), 1+rest)
	id := fmt.Sprintf("R-%s-%d", h.by, len(h.tags))
	h.tags[id] = &pastTag{part: part, at: Spot{Shelf: shelf}, left: length, pieces: map[string]unit.MM{}}
	add(h.arrived, part, Quantity{Length: length})
	add(h.open, part, Quantity{Length: length * unit.MM(rest)})
	h.write(fmt.Sprintf("[[reel]]\non = %s\norder = %q\ntag = %q\npart = %q\nwhere = %q\nleft = \"%d mm\"\n", h.on(), order, id, part, shelf, length))
}

func (h *history) order(part, pack string, packs int) string {
	id := fmt.Sprintf("PO-%s-%d", h.by, len(h.files))
	h.files["stock/orders/"+id+".toml"] = fmt.Sprintf("order = { vendor = \"tern\", sent = 2026-10-20 }\nline = [{ part = %q, pack = %s, packs = %d, due = 2026-12-24 }]\n", part, pack, packs)
	return id
}

// noise writes what does not count: a sheet that was withdrawn, a row of next year, a
// wish.
func (h *history) noise() {
	part, shelf := pick(h, pastPieces), pick(h, pastShelves)
	h.files[h.name()] = fmt.Sprintf("sheet = { on = %s, where = %q, complete = true, void = \"bags were counted\" }\ncount = [{ part = %q, qty = 1 }]\n", h.on(), shelf, part)
	h.write(fmt.Sprintf("[[move]]\non = 2027-01-02\npart = %q\nfrom = %q\nto = \"scrap\"\nqty = 7\n", part, shelf))
	h.files[fmt.Sprintf("stock/orders/W-%s-%d.toml", h.by, len(h.files))] = fmt.Sprintf("order = { vendor = \"tern\" }\nline = [{ part = %q, packs = 3 }]\n", part)
}

// lose takes pieces away without a row.
func (h *history) lose() {
	key := binKey{pick(h, pastPieces), pick(h, pastShelves)}
	h.hidden[key] += h.upTo("lost", h.bins[key]-h.hidden[key])
}

func (h *history) loseTag() {
	if _, tag := h.aTag(); tag != nil && tag.at.Shelf != "" {
		tag.hidden += unit.MM(h.upTo("lost", int(tag.left-tag.hidden)))
	}
}

// found is a true count of a bin: what was lost comes to light.
func (h *history) found(key binKey) int {
	add(h.lost, key.part, Quantity{Each: int64(h.hidden[key])})
	h.bins[key] -= h.hidden[key]
	h.hidden[key] = 0
	return h.bins[key]
}

func (h *history) count() {
	key := binKey{pick(h, pastPieces), pick(h, pastShelves)}
	h.write(fmt.Sprintf("[[count]]\non = %s\npart = %q\nwhere = %q\nqty = %d\n", h.on(), key.part, key.where, h.found(key)))
}

func (h *history) read() {
	if id, tag := h.aTag(); tag != nil && tag.at.Shelf != "" {
		h.foundTag(tag)
		h.reading(id, tag)
	}
}

func (h *history) foundTag(tag *pastTag) {
	add(h.lost, tag.part, Quantity{Length: tag.hidden})
	tag.left, tag.hidden = tag.left-tag.hidden, 0
}

// reading writes what is left on a reel. On a bare date it is of the evening.
func (h *history) reading(id string, tag *pastTag) {
	tag.read = h.bare
	h.write(fmt.Sprintf("[[reel]]\non = %s\ntag = %q\npart = %q\nwhere = %q\nleft = \"%d mm\"\n", h.on(), id, tag.part, tag.at.Shelf, tag.left))
}

// complete counts a shelf: what is not listed is not there.
func (h *history) complete(shelf string) {
	text := fmt.Sprintf("sheet = { on = %s, where = %q, complete = true }\n", h.on(), shelf)
	for _, p := range pastPieces {
		if n := h.found(binKey{p, shelf}); n > 0 {
			text += fmt.Sprintf("[[count]]\npart = %q\nqty = %d\n", p, n)
		}
	}
	var numbers []string
	for _, id := range slices.Sorted(maps.Keys(h.serials)) {
		if h.serials[id].Shelf == shelf {
			numbers = append(numbers, fmt.Sprintf("%q", id))
		}
	}
	if numbers != nil {
		text += fmt.Sprintf("[[count]]\npart = \"AMP-W\"\nqty = %d\nserials = [%s]\n", len(numbers), strings.Join(numbers, ", "))
	}
	for _, id := range slices.Sorted(maps.Keys(h.tags)) {
		tag := h.tags[id]
		if tag.at.Shelf != shelf || tag.gone {
			continue
		}
		if h.foundTag(tag); tag.left == 0 && !tag.read {
			tag.gone, tag.at = true, Spot{}
			continue
		}
		tag.read = h.bare
		text += fmt.Sprintf("[[reel]]\ntag = %q\npart = %q\nleft = \"%d mm\"\n", id, tag.part, tag.left)
	}
	h.files[h.name()] = text
}
