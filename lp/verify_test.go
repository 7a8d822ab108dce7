package lp

import (
	"math"
	"strings"
	"testing"
)

// twoBars is a joint with two bars at right angles, each carrying one component of the load (3, -4): areas 3 and 4 at a
// strength of 1, lengths 2 and 5, so the least volume is 3x2 + 4x5 = 26.
func twoBars() (*Problem, *Solution) {
	p := &Problem{Rows: 2, Block: []int32{0, 2}, At: [][3]float64{{}}}
	none := []float64{0}
	p.Bars.Add([]int32{0}, []float64{1}, none, 1, 1, 2, math.Inf(1), false)
	p.Bars.Add([]int32{1}, []float64{1}, none, 1, 1, 5, math.Inf(1), false)
	p.Cases = []Case{{Name: "one", Load: []float64{3, -4}}}
	s := &Solution{Area: []float64{3, 4}, Force: [][]float64{{-3, 4}}, Displacement: [][]float64{{2, -5}}, Objective: 26, Bound: 26}
	return p, s
}

func TestCheckPassesWhatIsRight(t *testing.T) {
	p, s := twoBars()
	if err := p.Validate(); err != nil {
		t.Fatal(err)
	}
	r := Check(p, s)
	if err := r.Err(0, 0, 0); err != nil {
		t.Fatal(err)
	}
	if r.Reference != 4 || r.Objective != 26 || r.Bound != 26 || r.WorstPrice != 1 {
		t.Errorf("report %+v", r)
	}
}

func TestCheckCatches(t *testing.T) {
	for _, c := range []struct {
		name, want string
		spoil      func(*Problem, *Solution)
	}{
		{"forces out of balance", "unbalanced", func(_ *Problem, s *Solution) { s.Force[0][1] -= 1e-6 }},
		{"weight forgotten", "unbalanced", func(p *Problem, _ *Solution) { p.Bars.H[1] = 1e-3; p.Cases[0].Gravity = 1 }},
		{"overstressed in tension", "beyond strength", func(_ *Problem, s *Solution) { s.Area[1] *= 1 - 1e-6 }},
		{"overstressed in compression", "beyond strength", func(_ *Problem, s *Solution) { s.Area[0] *= 1 - 1e-6 }},
		{"area above the limit", "beyond its limit", func(p *Problem, _ *Solution) { p.Bars.Upper[1] = 3.9 }},
		{"fixed area changed", "beyond its limit", func(p *Problem, _ *Solution) { p.Bars.Upper[1] = 5; p.Bars.Fixed[1] = true }},
		{"negative area", "negative", func(p *Problem, s *Solution) { s.Area[1] = -4; s.Force[0][1] = 0; p.Cases[0].Load[1] = 0 }},
		{"objective not its own", "objective said", func(_ *Problem, s *Solution) { s.Objective = 26.001 }},
		{"bound not its own", "bound said", func(_ *Problem, s *Solution) { s.Bound = 26.001 }},
		{"displacement of the wrong sign", "gap of", func(_ *Problem, s *Solution) { s.Displacement[0][0] *= -1 }},
		{"displacement too large", "gap of", func(_ *Problem, s *Solution) { s.Displacement[0][0] = 3 }},
		{"not a number", "NaN", func(_ *Problem, s *Solution) { s.Area[0] = math.NaN() }},
		{"force not a number", "unbalanced", func(_ *Problem, s *Solution) { s.Force[0][0] = math.NaN() }},
		{"displacement not a number", "gap of", func(_ *Problem, s *Solution) { s.Displacement[0][0] = math.NaN() }},
		{"too few areas", "areas", func(_ *Problem, s *Solution) { s.Area = s.Area[:1] }},
		{"no displacement", "cases", func(_ *Problem, s *Solution) { s.Displacement = nil }},
		{"short force", "forces for", func(_ *Problem, s *Solution) { s.Force[0] = nil }},
		{"short displacement", "displacements for", func(_ *Problem, s *Solution) { s.Displacement[0] = nil }},
	} {
		p, s := twoBars()
		c.spoil(p, s)
		err := Check(p, s).Err(1e-8, 1e-8, 1e-8)
		if err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: got %v, want %q", c.name, err, c.want)
		}
	}
}

func TestBoundScalesAndCountsLimits(t *testing.T) {
	inf := math.Inf(1)
	for _, c := range []struct {
		name         string
		change       func(*Problem)
		u            []float64
		bound, worst float64
	}{
		// 3x2 + 4x5 with prices 2 of 2 and 5 of 5
		{"feasible as it is", nil, []float64{2, -5}, 26, 1},
		// prices 4 of 2 and 5 of 5: halved, 3x2 + 4x2.5
		{"scaled down", nil, []float64{4, -5}, 16, 2},
		{"never scaled up", nil, []float64{1, 0}, 3, 0.5},
		// the first bar may not exceed 2.5: price 4 of cost 2, 3x4 + 4x5 - 2.5x(4-2)
		{"limited bar may be overpriced", func(p *Problem) { p.Bars.Upper[0] = 2.5 }, []float64{4, -5}, 27, 1},
		{"limited bar below its cost", func(p *Problem) { p.Bars.Upper[0] = 2.5 }, []float64{1, -5}, 23, 1},
		// the first bar stands already, 3 of it: its price counts in full, 3x4 + 4x5 - 3x4
		{"fixed bar", func(p *Problem) { p.Bars.Fixed[0] = true; p.Bars.Upper[0] = 3 }, []float64{4, -5}, 20, 1},
		// scaling by 1/2 of the other bar scales the fixed one's price too: (3x4 + 4x10 - 3x4) / 2
		{"fixed bar scaled", func(p *Problem) { p.Bars.Fixed[0] = true; p.Bars.Upper[0] = 3 }, []float64{4, -10}, 20, 2},
		// a stop that cannot be crushed: lengthening e = -2 is forbidden, 0 and +2 are free of cost
		{"stop the wrong way", stop, []float64{2, -5}, -inf, 1},
		{"stop still", stop, []float64{0, -5}, 20, 1},
		{"stop the right way", stop, []float64{-2, -5}, 14, 1},
		{"stop the wrong way by rounding", stop, []float64{1e-13, -5}, 20, 1},
		{"stop the wrong way by more", stop, []float64{1e-10, -5}, -inf, 1},
		{"not a number", nil, []float64{math.NaN(), 0}, -inf, math.NaN()},
	} {
		p, _ := twoBars()
		if c.change != nil {
			c.change(p)
		}
		if err := p.Validate(); err != nil {
			t.Fatal(c.name, err)
		}
		bound, worst := Bound(p, [][]float64{c.u})
		if math.Abs(bound-c.bound) > 1e-11 || bound != c.bound && math.IsInf(c.bound, 0) || math.Abs(worst-c.worst) > 1e-15 {
			t.Errorf("%s: bound %v, worst %v; want %v, %v", c.name, bound, worst, c.bound, c.worst)
		}
	}
}

// stop makes the first bar a stop that pushes as much as it must and never pulls.
func stop(p *Problem) {
	p.Bars.Fixed[0], p.Bars.Upper[0], p.Bars.Tension[0], p.Bars.Compression[0] = true, 1, 0, math.Inf(1)
}

func TestBoundPricesWeight(t *testing.T) {
	// A bar of length 2 hangs a load of 1; half its weight, 0.25 of it a unit of area, pulls at its lower end against the
	// row: q = 1 + 0.25 a = a, a = 4/3. Price of u = -w: w + 0.25 x (-w) = 0.75 w = 2 at w = 8/3, f.u = 8/3 = 2 x 4/3.
	p := &Problem{Rows: 1, Block: []int32{0, 1}, At: [][3]float64{{}}, Cases: []Case{{Gravity: 1, Load: []float64{-1}}}}
	p.Bars.Add([]int32{0}, []float64{1}, []float64{0.25}, 1, 1, 2, math.Inf(1), false)
	s := &Solution{Area: []float64{4. / 3}, Force: [][]float64{{4. / 3}}, Displacement: [][]float64{{-8. / 3}}, Objective: 8. / 3, Bound: 8. / 3}
	if err := Check(p, s).Err(1e-15, 1e-15, 1e-15); err != nil {
		t.Error(err)
	}
}

func TestCheckRay(t *testing.T) {
	p, _ := twoBars()
	p.Bars.Fixed[1], p.Bars.Upper[1] = true, 3 // a bar of 3 for a load of 4
	for _, c := range []struct {
		u           []float64
		work, worst float64
	}{
		{[]float64{0, -1}, 1, 0},        // the load does 4, the bar absorbs 3
		{[]float64{0, 1}, -7, 0},        // against the load
		{[]float64{1, -1}, 4, 0.5},      // the first bar, price 1 of cost 2, resists
		{[]float64{1e-9, -1}, 1, 5e-10}, // and by rounding only
	} {
		work, worst := CheckRay(p, [][]float64{c.u})
		if math.Abs(work-c.work) > 1e-8 || math.Abs(worst-c.worst) > 1e-15 {
			t.Errorf("%v: work %v, worst %v; want %v, %v", c.u, work, worst, c.work, c.worst)
		}
	}
	p.Bars.Fixed[1], p.Bars.Upper[1] = false, 3 // limited instead of fixed
	if work, _ := CheckRay(p, [][]float64{{0, -1}}); work != 1 {
		t.Errorf("limited bar: work %v, want 1", work)
	}
	stop(p)
	if work, _ := CheckRay(p, [][]float64{{1, -1}}); !math.IsInf(work, -1) {
		t.Errorf("stop moved the wrong way: work %v, want -Inf", work)
	}
}

// The weight of a bar that stands already is a load like any other: without it a problem whose only load it is would be
// judged against 1.
func TestReferenceCountsFixedWeight(t *testing.T) {
	p, s := twoBars()
	p.Bars.Fixed[0], p.Bars.Upper[0], p.Bars.H[0], p.Cases[0].Gravity = true, 3, 20, 1
	if r := Check(p, s); r.Reference != 57 { // |3 - 20 x 3|
		t.Errorf("reference %v, want 57", r.Reference)
	}
}

func TestSumIsCompensated(t *testing.T) {
	var a sum
	for _, x := range []float64{1, 1e100, 1, -1e100} {
		a.add(x)
	}
	if a.value() != 2 {
		t.Errorf("1 + 1e100 + 1 - 1e100 = %v, want 2", a.value())
	}
}

func TestValidate(t *testing.T) {
	inf, nan := math.Inf(1), math.NaN()
	for _, c := range []struct {
		want  string // what the error must name; empty: valid
		spoil func(*Problem)
	}{
		{"", func(*Problem) {}},
		{"", func(p *Problem) { p.At[0] = [3]float64{nan, nan, nan} }},
		{"", func(p *Problem) { p.Bars, p.Cases = Bars{}, nil }},
		{"", func(p *Problem) { p.Bars.Cost[1], p.Bars.Fixed[1], p.Bars.Upper[1] = 0, true, 1 }},
		{"", func(p *Problem) { p.Bars.Fixed[1], p.Bars.Upper[1] = true, 0 }},
		{"", stop},
		{"Rows", func(p *Problem) { p.Rows = -1 }},
		{"Block", func(p *Problem) { p.Block = nil }},
		{"Block", func(p *Problem) { p.Block = []int32{0, 1} }},
		{"Block", func(p *Problem) { p.Block = []int32{1, 2} }},
		{"block 1", func(p *Problem) { p.Block = []int32{0, 2, 1, 2}; p.At = make([][3]float64, 3) }},
		{"At", func(p *Problem) { p.At = nil }},
		{"At", func(p *Problem) { p.At[0][1] = inf }},
		{"At", func(p *Problem) { p.At[0][1] = nan }},
		{"Tension", func(p *Problem) { p.Bars.Tension = p.Bars.Tension[:1] }},
		{"Fixed", func(p *Problem) { p.Bars.Fixed = nil }},
		{"H has", func(p *Problem) { p.Bars.H = nil }},
		{"Ptr", func(p *Problem) { p.Bars.Ptr = p.Bars.Ptr[:2] }},
		{"Ptr", func(p *Problem) { p.Bars.Ptr[0] = 1 }},
		{"bar 0: Ptr", func(p *Problem) { p.Bars.Ptr[1] = 5 }},
		{"bar 1: Row 2", func(p *Problem) { p.Bars.Row[1] = 2 }},
		{"bar 0: Row -1", func(p *Problem) { p.Bars.Row[0] = -1 }},
		{"bar 2: Row 1 is there twice", func(p *Problem) {
			p.Bars.Add([]int32{1, 1}, []float64{1, 1}, []float64{0, 0}, 1, 1, 1, inf, false)
		}},
		{"bar 1: B", func(p *Problem) { p.Bars.B[1] = nan }},
		{"bar 1: H", func(p *Problem) { p.Bars.H[1] = inf }},
		{"bar 0: Tension", func(p *Problem) { p.Bars.Tension[0] = -1 }},
		{"bar 0: Tension", func(p *Problem) { p.Bars.Tension[0] = nan }},
		{"bar 0: Compression", func(p *Problem) { p.Bars.Compression[0] = -1 }},
		{"bar 0: Tension and Compression are both 0", func(p *Problem) { p.Bars.Tension[0], p.Bars.Compression[0] = 0, 0 }},
		{"bar 0: unlimited", func(p *Problem) { p.Bars.Compression[0] = inf }},
		{"both unlimited", func(p *Problem) { stop(p); p.Bars.Tension[0] = inf }},
		{"Upper 0", func(p *Problem) { stop(p); p.Bars.Upper[0] = 0 }},
		{"bar 0: Upper", func(p *Problem) { p.Bars.Upper[0] = nan }},
		{"bar 0: Upper", func(p *Problem) { p.Bars.Upper[0] = -1 }},
		{"bar 0: Fixed", func(p *Problem) { p.Bars.Fixed[0] = true }},
		{"bar 0: Cost", func(p *Problem) { p.Bars.Cost[0] = 0 }},
		{"bar 0: Cost", func(p *Problem) { p.Bars.Cost[0] = inf }},
		{"case 0 (one): Gravity", func(p *Problem) { p.Cases[0].Gravity = nan }},
		{"case 0 (one): Load has 1", func(p *Problem) { p.Cases[0].Load = []float64{1} }},
		{"case 0 (one): Load[1]", func(p *Problem) { p.Cases[0].Load[1] = inf }},
	} {
		p, _ := twoBars()
		c.spoil(p)
		err := p.Validate()
		if c.want == "" && err != nil {
			t.Errorf("valid problem: %v", err)
		}
		if c.want != "" && (err == nil || !strings.Contains(err.Error(), c.want)) {
			t.Errorf("got %v, want %q", err, c.want)
		}
	}
}
