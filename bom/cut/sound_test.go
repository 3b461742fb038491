package cut

import (
	"math"
	"math/rand/v2"
	"slices"
	"testing"
)

// A dearer reel or a shorter remnant cannot make a plan cheaper, and what is printed as
// proved stays what every assignment says.
func TestChangedTasks(t *testing.T) {
	rng := rand.New(rand.NewPCG(11, 3))
	for i := range 300 {
		task := randomTask(rng, 6)
		before := task.Plan()
		at := rng.IntN(len(task.Stocks))
		task.Stocks = slices.Clone(task.Stocks)
		if s := &task.Stocks[at]; s.Price > 0 {
			s.Price += 1 + rng.Int64N(3)
		} else {
			s.Length -= 1 + rng.Int64N(3)
		}
		p := task.Plan()
		if err := task.Check(p); err != nil {
			t.Fatalf("%d: %v", i, err)
		}
		want := brute(task)
		if compare(verdictOf(p), want, task.ScrapFirst) != 0 {
			t.Fatalf("%d: got %+v, want %+v", i, verdictOf(p), want)
		}
		if len(p.Short) == 0 && p.Price < before.Price {
			t.Fatalf("%d: price fell from %d to %d", i, before.Price, p.Price)
		}
	}
}

// With few steps a plan may be dear, but the bound holds and nothing false is proved.
func TestFewSteps(t *testing.T) {
	rng := rand.New(rand.NewPCG(5, 8))
	unproved := 0
	for i := range 400 {
		task := randomTask(rng, 7)
		task.Nodes = 1
		p := task.Plan()
		if err := task.Check(p); err != nil {
			t.Fatalf("%d: %v", i, err)
		}
		if !p.Proved {
			unproved++
			continue
		}
		want := brute(task)
		if p.Price != want.price || !slices.Equal(p.Short, want.short) {
			t.Fatalf("%d: proved %d short %v, want %d short %v", i, p.Price, p.Short, want.price, want.short)
		}
	}
	if unproved == 0 {
		t.Error("every plan was proved with one step")
	}
}

// The order in which pieces and stocks are written does not change the plan.
func TestShuffled(t *testing.T) {
	task := readTask(t, "job-15")
	want := task.Plan()
	rng := rand.New(rand.NewPCG(2, 9))
	lengths := func(task Task, p Plan) [][]int64 {
		all := make([][]int64, len(p.Opened))
		for i, o := range p.Opened {
			all[i] = []int64{task.Stocks[o.Stock].Length}
		}
		for _, c := range p.Cuts {
			all[c.Opened] = append(all[c.Opened], task.Pieces[c.Piece].Length)
		}
		for i := range all {
			slices.Sort(all[i][1:])
		}
		return all
	}
	for range 5 {
		other := task
		other.Pieces = slices.Clone(task.Pieces)
		other.Stocks = slices.Clone(task.Stocks)
		rng.Shuffle(len(other.Pieces), func(i, j int) { other.Pieces[i], other.Pieces[j] = other.Pieces[j], other.Pieces[i] })
		rng.Shuffle(len(other.Stocks), func(i, j int) { other.Stocks[i], other.Stocks[j] = other.Stocks[j], other.Stocks[i] })
		got := other.Plan()
		if !slices.EqualFunc(lengths(other, got), lengths(task, want), slices.Equal) {
			t.Fatalf("got %v, want %v", lengths(other, got), lengths(task, want))
		}
	}
}

// Nonsense is short or not used; it does not panic or overflow.
func TestHostile(t *testing.T) {
	numbers := []int64{0, -1, math.MinInt64, math.MaxInt64, 1, 5, 1 << 40, 1 << 62}
	rng := rand.New(rand.NewPCG(1, 4))
	pick := func() int64 { return numbers[rng.IntN(len(numbers))] }
	for range 2000 {
		task := Task{Allowance: pick(), Usable: pick(), Nodes: int(pick())}
		if rng.IntN(2) == 0 {
			task.Allowance = 0
		}
		for range rng.IntN(5) {
			task.Stocks = append(task.Stocks, Stock{Length: pick(), Price: pick(), Many: rng.IntN(2) == 0, Least: int(pick())})
		}
		for range rng.IntN(6) {
			task.Pieces = append(task.Pieces, Piece{Length: pick(), On: [][]int{nil, {}, {0, 0, 1}, {-1, 99}}[rng.IntN(4)]})
		}
		p := task.Plan()
		if err := task.Check(p); err != nil {
			t.Fatalf("%v\n%+v\n%+v", err, task, p)
		}
	}
}

// The price per millimetre of a stump times long pieces does not fit 64 bits.
func TestDearStump(t *testing.T) {
	task := Task{Stocks: []Stock{{Length: 1, Price: maxPrice, Many: true}, {Length: maxLength, Price: maxPrice, Many: true}}}
	for range 20 {
		task.Pieces = append(task.Pieces, Piece{Length: maxLength})
	}
	if got := atLeast(20*maxLength, supply{Stock: task.Stocks[0]}); got != dearest {
		t.Errorf("got %d, want %d", got, int64(dearest))
	}
	p := task.Plan()
	if err := task.Check(p); err != nil || p.Price != 20*maxPrice || !p.Proved {
		t.Errorf("price %d, proved %t, %v", p.Price, p.Proved, err)
	}
}

// The checker refuses a plan with any one thing changed.
func TestCheckRefuses(t *testing.T) {
	task := readTask(t, "job-15")
	task.Pieces[0].On = []int{0, 1, 2, 3, 4}
	changes := map[string]func(*Plan){
		"a cut missing":        func(p *Plan) { p.Cuts = p.Cuts[1:] },
		"a cut twice":          func(p *Plan) { p.Cuts = append(p.Cuts, p.Cuts[len(p.Cuts)-1]) },
		"a cut moved":          func(p *Plan) { p.Cuts[3].Opened = (p.Cuts[3].Opened + 1) % len(p.Opened) },
		"a cut from nothing":   func(p *Plan) { p.Cuts[3].Opened = -1 },
		"an unknown piece":     func(p *Plan) { p.Cuts[len(p.Cuts)-1].Piece = 999 },
		"short and cut":        func(p *Plan) { p.Short = []int{2} },
		"short and unknown":    func(p *Plan) { p.Short = []int{-1} },
		"an unknown stock":     func(p *Plan) { p.Opened[0].Stock = 99 },
		"opened for nothing":   func(p *Plan) { p.Opened = append(p.Opened, Opened{Stock: 0, Copy: 50}) },
		"a remnant once more":  func(p *Plan) { p.Opened[0].Copy = 1 },
		"another leftover":     func(p *Plan) { p.Opened[1].Left++ },
		"kept or not":          func(p *Plan) { p.Opened[1].Usable = !p.Opened[1].Usable },
		"another price":        func(p *Plan) { p.Price-- },
		"another scrap":        func(p *Plan) { p.Scrap++ },
		"a bound above":        func(p *Plan) { p.Bound = p.Price + 1 },
		"proved below a bound": func(p *Plan) { p.Bound-- },
	}
	if p := task.Plan(); task.Check(p) != nil || task.Stocks[p.Opened[0].Stock].Many {
		t.Fatal("the plan to be changed must pass and open a remnant first")
	}
	for name, change := range changes {
		p := task.Plan()
		change(&p)
		if task.Check(p) == nil {
			t.Errorf("%s: passes", name)
		}
	}
	task.Pieces[0].On = []int{}
	if task.Check(readTask(t, "job-15").Plan()) == nil {
		t.Error("a piece cut from where it may not be: passes")
	}
}
