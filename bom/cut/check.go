package cut

import (
	"fmt"
	"slices"
)

// Check reads a plan against the task and says what is wrong with it. It shares no
// code with the planning.
func (t Task) Check(p Plan) error {
	if err := t.checkOnce(p); err != nil {
		return err
	}
	used := make([]int64, len(p.Opened))
	for _, c := range p.Cuts {
		if c.Opened < 0 || c.Opened >= len(p.Opened) {
			return fmt.Errorf("piece %q is cut from nothing", t.Pieces[c.Piece].ID)
		}
		stock := p.Opened[c.Opened].Stock
		piece := t.Pieces[c.Piece]
		if piece.On != nil && !slices.Contains(piece.On, stock) {
			return fmt.Errorf("piece %q may not be cut from stock %d", piece.ID, stock)
		}
		if stock < 0 || stock >= len(t.Stocks) {
			return fmt.Errorf("piece %q is cut from stock %d, which does not exist", piece.ID, stock)
		}
		if piece.Length <= 0 || t.Allowance < 0 {
			return fmt.Errorf("piece %q has no length", piece.ID)
		}
		room := t.Stocks[stock].Length - used[c.Opened]
		if piece.Length > room || t.Allowance > room-piece.Length {
			return fmt.Errorf("stock %q is too short for piece %q", t.Stocks[stock].ID, piece.ID)
		}
		used[c.Opened] += piece.Length + t.Allowance
	}
	return t.checkSums(p, used)
}

// checkOnce wants every piece cut once or short once, both in order.
func (t Task) checkOnce(p Plan) error {
	seen := make([]int, len(t.Pieces))
	last := -1
	for _, c := range p.Cuts {
		if c.Piece <= last || c.Piece >= len(seen) {
			return fmt.Errorf("cuts are not in the order of the pieces at piece %d", c.Piece)
		}
		last = c.Piece
		seen[c.Piece]++
	}
	for _, i := range p.Short {
		if i < 0 || i >= len(seen) {
			return fmt.Errorf("piece %d is short and does not exist", i)
		}
		seen[i]++
	}
	for i, n := range seen {
		if n != 1 {
			return fmt.Errorf("piece %q is planned %d times", t.Pieces[i].ID, n)
		}
	}
	return nil
}

func (t Task) checkSums(p Plan, used []int64) error {
	type one struct{ stock, copy int }
	seen := map[one]bool{}
	bought := map[int]int{}
	var scrap int64
	for i, o := range p.Opened {
		if o.Stock < 0 || o.Stock >= len(t.Stocks) || used[i] == 0 {
			return fmt.Errorf("stock %d is opened for nothing", o.Stock)
		}
		s := t.Stocks[o.Stock]
		if seen[one{o.Stock, o.Copy}] || o.Copy < 0 || o.Copy > 0 && !s.Many {
			return fmt.Errorf("stock %q is opened twice", s.ID)
		}
		seen[one{o.Stock, o.Copy}] = true
		bought[o.Stock]++
		if o.Left != s.Length-used[i] || o.Usable != (o.Left >= t.Usable) {
			return fmt.Errorf("stock %q leaves %d mm, not %d mm", s.ID, s.Length-used[i], o.Left)
		}
		if o.Left < t.Usable {
			scrap += o.Left
		}
	}
	var price int64
	for i, n := range bought {
		price += t.Stocks[i].Price * int64(max(n, t.Stocks[i].Least))
	}
	switch {
	case scrap != p.Scrap:
		return fmt.Errorf("the scrap is %d mm, not %d mm", scrap, p.Scrap)
	case price != p.Price:
		return fmt.Errorf("the price is %d, not %d", price, p.Price)
	case p.Bound > p.Price || p.Proved && p.Bound != p.Price:
		return fmt.Errorf("the bound %d does not go with the price %d, proved %t", p.Bound, p.Price, p.Proved)
	}
	return nil
}
