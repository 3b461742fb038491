package cut

// everyWay finds the loads of the best score over all ways to put the pieces on the
// bins; nil where there is none or the steps run out. Bin by bin, it keeps for each
// set of pieces placed so far the best score.
type everyWay struct {
	p     *problem
	items []int // kind of each piece; alike ones stand together
	steps *int
	now   []cell
	next  []cell
	stock int
	rest  int64 // length of the bins after this one
}

// cell is the best way to a set of pieces.
type cell struct {
	score
	reached bool
	last    uint16 // what the bin just filled took
}

func (p *problem) everyWay(bins []int, steps *int) []load {
	w := everyWay{p: p, steps: steps}
	for k, kd := range p.kinds {
		for range kd.pieces {
			w.items = append(w.items, k)
		}
	}
	for _, s := range bins {
		w.rest += p.stocks[s].Length
	}
	w.now = make([]cell, 1<<len(w.items))
	w.now[0].reached = true
	var history [][]cell
	for _, s := range bins {
		w.stock = s
		w.rest -= p.stocks[s].Length
		w.next = make([]cell, len(w.now))
		for set := range w.now {
			if w.now[set].reached {
				w.fill(set, 0, 0, p.stocks[s].Length)
			}
		}
		if *steps <= 0 {
			return nil
		}
		history = append(history, w.next)
		w.now = w.next
	}
	return w.loads(bins, history)
}

// fill adds to this bin any of the pieces from item on that the set lacks.
func (w *everyWay) fill(set int, took uint16, item int, room int64) {
	if *w.steps--; *w.steps <= 0 {
		return
	}
	w.keep(set, took, room)
	for i := item; i < len(w.items); i++ {
		k := w.items[i]
		placed := (set | int(took)) >> i & 1
		if placed == 1 || !w.p.kinds[k].fits[w.stock] || w.p.kinds[k].need > room {
			continue
		}
		// Of pieces alike the first one left goes first.
		if i > 0 && w.items[i-1] == k && (set|int(took))>>(i-1)&1 == 0 {
			continue
		}
		w.fill(set, took|1<<i, i+1, room-w.p.kinds[k].need)
	}
}

// keep notes a way to the set and what the bin took, where it is the best so far.
func (w *everyWay) keep(set int, took uint16, room int64) {
	c := cell{w.now[set].score, true, took}
	if took != 0 {
		c.opened++
		c.scrap += w.p.scrap(room)
	}
	all := set | int(took)
	var missing int64
	for i, k := range w.items {
		if all>>i&1 == 0 {
			missing += w.p.kinds[k].need
		}
	}
	if missing > w.rest {
		return
	}
	if old := &w.next[all]; !old.reached || w.p.compare(c.score, old.score) < 0 {
		*old = c
	}
}

func (w *everyWay) loads(bins []int, history [][]cell) []load {
	set := len(w.now) - 1
	if !w.now[set].reached {
		return nil
	}
	loads := w.p.empty(bins)
	for b := len(bins) - 1; b >= 0; b-- {
		took := history[b][set].last
		for i, k := range w.items {
			if took>>i&1 == 1 {
				loads[b].add(k, w.p.kinds[k].need)
			}
		}
		set &^= int(took)
	}
	return loads
}
