package cut

import "math/rand/v2"

// snugSteps limits the look for the best fill of one bin.
const snugSteps = 1500

// snug fills one bin after another as full as it finds, shortest bin first: the
// longest piece that fits, as a rule, and the rest that leaves least room. It finds
// packings with hardly any slack that placing piece by piece misses.
func (p *problem) snug(counts, bins []int, rng *rand.Rand) []load {
	left := append([]int(nil), counts...)
	loads := p.empty(bins)
	slack, _ := p.slack(counts, bins)
	// A fill is good enough when it leaves some multiple of a bin's share of the slack.
	enough := max(0, slack) / int64(len(bins)+1) * rng.Int64N(9) / 4
	order := make([]int, len(left)) // of the kinds: longest first or mixed anew for every bin
	for k := range order {
		order[k] = k
	}
	mixed := rng.IntN(2) == 0
	for b := range loads {
		l := &loads[b]
		if mixed {
			rng.Shuffle(len(order), func(i, j int) { order[i], order[j] = order[j], order[i] })
		}
		if k := p.longest(left, l.stock); k >= 0 && rng.IntN(8) > 0 {
			left[k]--
			l.add(k, p.kinds[k].need)
		}
		f := filler{p: p, order: order, stock: l.stock, left: left, steps: snugSteps, best: l.room + 1, enough: enough}
		f.fill(0, l.room)
		for _, k := range f.found {
			left[k]--
			l.add(k, p.kinds[k].need)
		}
	}
	for _, n := range left {
		if n > 0 {
			return nil
		}
	}
	return loads
}

// longest is the first kind that is left and fits; -1 where none does.
func (p *problem) longest(left []int, stock int) int {
	for k, n := range left {
		if n > 0 && p.kinds[k].fits[stock] {
			return k
		}
	}
	return -1
}

// filler looks for the kinds that leave least room.
type filler struct {
	order  []int
	p      *problem
	stock  int
	left   []int
	steps  int
	now    []int
	found  []int
	best   int64
	enough int64
}

func (f *filler) fill(at int, room int64) {
	if room < f.best {
		f.best = room
		f.found = append(f.found[:0], f.now...)
	}
	if f.steps--; f.steps <= 0 || f.best <= f.enough {
		return
	}
	for ; at < len(f.order); at++ {
		k := f.order[at]
		if f.left[k] == 0 || f.p.kinds[k].need > room || !f.p.kinds[k].fits[f.stock] {
			continue
		}
		f.left[k]--
		f.now = append(f.now, k)
		f.fill(at, room-f.p.kinds[k].need)
		f.now = f.now[:len(f.now)-1]
		f.left[k]++
		if f.steps <= 0 || f.best <= f.enough {
			return
		}
	}
}
