package geom

import (
	"math"
	"math/rand/v2"
	"testing"

	"github.com/paulmach/orb"
)

// box5 is a prism 10 m x 10 m, 0 to 5 m high; lshape is concave; ringed has a hole.
var (
	box5   = Prism{Polygon: orb.Polygon{{{0, 0}, {10, 0}, {10, 10}, {0, 10}, {0, 0}}}, From: 0, To: 5}
	lshape = Prism{Polygon: orb.Polygon{{{0, 0}, {10, 0}, {10, 4}, {4, 4}, {4, 10}, {0, 10}, {0, 0}}}, From: 0, To: 5}
	ringed = Prism{Polygon: orb.Polygon{box5.Polygon[0], {{3, 3}, {7, 3}, {7, 7}, {3, 7}, {3, 3}}}, From: 0, To: 5}
)

// Touching is not entering: bars stand at the edge of a lane and run along it, and a bar through it is caught however it
// lies.
func TestEnters(t *testing.T) {
	endless := box5
	endless.From, endless.To = math.Inf(-1), math.Inf(1)
	read := box5
	read.From, read.To = -NoLimit, NoLimit
	for _, c := range []struct {
		name string
		p    Prism
		a, b Vec
		want bool
	}{
		{"through", box5, Vec{-5, 5, 2}, Vec{15, 5, 2}, true},
		{"inside", box5, Vec{4, 5, 2}, Vec{6, 5, 2}, true},
		{"from inside out", box5, Vec{4, 5, 2}, Vec{6, 50, 2}, true},
		{"over it", box5, Vec{-5, 5, 6}, Vec{15, 5, 6}, false},
		{"slanting over it", box5, Vec{-5, 5, 0}, Vec{15, 5, 20.1}, false},
		{"slanting through the top", box5, Vec{-5, 5, 0}, Vec{15, 5, 10}, true},
		{"on top", box5, Vec{-5, 5, 5}, Vec{15, 5, 5}, false},
		{"on the floor", box5, Vec{-5, 5, 0}, Vec{15, 5, 0}, false},
		{"down to the top", box5, Vec{5, 5, 9}, Vec{5, 5, 5}, false},
		{"along a face", box5, Vec{-5, 0, 2}, Vec{15, 0, 2}, false},
		{"a millimetre inside a face", box5, Vec{-5, 0.0009, 2}, Vec{15, 0.0009, 2}, false},
		{"two millimetres inside a face", box5, Vec{-5, 0.002, 2}, Vec{15, 0.002, 2}, true},
		{"along a vertical edge", box5, Vec{0, 0, -1}, Vec{0, 0, 9}, false},
		{"along a top edge", box5, Vec{0, 0, 5}, Vec{10, 0, 5}, false},
		{"past a corner", box5, Vec{-5, 5, 2}, Vec{5, -5, 2}, false},
		{"cutting a corner", box5, Vec{-4.9, 5, 2}, Vec{5, -4.9, 2}, true},
		{"vertical inside", box5, Vec{5, 5, -9}, Vec{5, 5, 9}, true},
		{"vertical outside", box5, Vec{11, 5, -9}, Vec{11, 5, 9}, false},
		{"ends at the face", box5, Vec{-5, 5, 2}, Vec{0, 5, 2}, false},
		{"a point inside", box5, Vec{5, 5, 2}, Vec{5, 5, 2}, true},
		{"a point on the face", box5, Vec{0, 5, 2}, Vec{0, 5, 2}, false},
		{"without limits", endless, Vec{-5, 5, 1e6}, Vec{15, 5, 1e6}, true},
		{"without limits, vertical", endless, Vec{5, 5, -1e6}, Vec{5, 5, 1e6}, true},
		{"without limits, along a face", endless, Vec{0, -5, 0}, Vec{0, 15, 30}, false},
		{"as read", read, Vec{-5, 5, 300}, Vec{15, 5, 300}, true},
		{"in the bay of the L", lshape, Vec{5, 5, 2}, Vec{9, 9, 2}, false},
		{"along the bay's edge", lshape, Vec{4, 4, 2}, Vec{4, 20, 2}, false},
		{"across the bay, touching its corner", lshape, Vec{0, 8, 2}, Vec{8, 0, 2}, true},
		{"along the bay's edge and on into the L", lshape, Vec{4, 12, 2}, Vec{4, 1, 2}, true},
		{"through the L", lshape, Vec{-1, 1, 2}, Vec{1, -1.1, 2}, false},
		{"in the hole", ringed, Vec{3, 5, 2}, Vec{7, 5, 2}, false},
		{"across the hole's corners", ringed, Vec{3, 3, 2}, Vec{7, 7, 2}, false},
		{"out of the hole", ringed, Vec{5, 5, 2}, Vec{7.1, 5, 2}, true},
		{"through the hole from above", ringed, Vec{5, 5, -2}, Vec{6, 6, 9}, false},
		{"thin", Prism{Polygon: orb.Polygon{{{0, 0}, {10, 0}, {10, 0.001}, {0, 0.001}, {0, 0}}}, To: 5}, Vec{5, -5, 2}, Vec{5, 5, 2}, false},
	} {
		for _, s := range [][2]Vec{{c.a, c.b}, {c.b, c.a}} {
			if got := c.p.Enters(s[0], s[1]); got != c.want {
				t.Errorf("%s: %v to %v: %v", c.name, s[0], s[1], got)
			}
			if got := NewObstacles([]Prism{ringed, c.p}[1:]).Blocked(s[0], s[1]); got != c.want {
				t.Errorf("%s: obstacles disagree", c.name)
			}
		}
	}
}

// depth returns how deep a place is inside a prism, negative outside: the definition, with no tolerance.
func depth(p Prism, v Vec) float64 {
	d := DistanceToBoundary(p.Polygon, orb.Point{v.X, v.Y})
	if !insideRings(p.Polygon, orb.Point{v.X, v.Y}) {
		d = -d
	}
	return math.Min(d, math.Min(v.Z-p.From, p.To-v.Z))
}

// randomPrism returns a box, a concave prism or one with a hole.
func randomPrism(rnd *rand.Rand) Prism {
	p := Prism{From: 0, To: 1 + 4*rnd.Float64()}
	switch rnd.IntN(4) {
	case 0:
		p.Polygon = box5.Polygon
	case 1:
		p.Polygon = orb.Polygon{star(rnd, orb.Point{5, 5}, 6, 3)}
	case 2:
		p.Polygon = orb.Polygon{star(rnd, orb.Point{5, 5}, 6, 4+rnd.IntN(12))}
	default:
		p.Polygon = starWithHole(rnd, orb.Point{5, 5}, 6)
	}
	if rnd.IntN(5) == 0 {
		p.From, p.To = math.Inf(-1), math.Inf(1)
	}
	return p
}

// randomEnd returns a place near a prism, often exactly on a corner, a face or a height of it: where answers go wrong.
func randomEnd(rnd *rand.Rand, p Prism) Vec {
	v := Vec{14*rnd.Float64() - 2, 14*rnd.Float64() - 2, 9*rnd.Float64() - 2}
	ring := p.Polygon[rnd.IntN(len(p.Polygon))]
	i := rnd.IntN(len(ring) - 1)
	switch rnd.IntN(5) {
	case 0:
		v.X, v.Y = ring[i][0], ring[i][1]
	case 1:
		q := along(ring[i], ring[i+1], 2*rnd.Float64()-0.5)
		v.X, v.Y = q[0], q[1]
	case 2:
		v.Z = []float64{p.From, p.To, 0}[rnd.IntN(3)]
		if math.IsInf(v.Z, 0) {
			v.Z = 3
		}
	}
	return v
}

// Entering is being deeper than the tolerance somewhere. Depth changes no faster than the way along the segment, so
// samples at a distance h bound the largest depth from both sides.
func TestEntersAgainstSampling(t *testing.T) {
	const rounding = 1e-9
	rnd := rand.New(rand.NewPCG(7, 8))
	entered := 0
	for range 3000 {
		p := randomPrism(rnd)
		a, b := randomEnd(rnd, p), randomEnd(rnd, p)
		if rnd.IntN(8) == 0 {
			b.X, b.Y = a.X, a.Y
		}
		const n = 400
		deepest, h := math.Inf(-1), b.Sub(a).Norm()/n
		for i := range n + 1 {
			deepest = math.Max(deepest, depth(p, a.Add(b.Sub(a).Scale(float64(i)/n))))
		}
		got := p.Enters(a, b)
		if got {
			entered++
		}
		if deepest > EnterTolerance+rounding && !got {
			t.Fatalf("%v: from %v to %v is %v m deep and not seen", p, a, b, deepest)
		}
		if got && deepest+h/2 < EnterTolerance-rounding {
			t.Fatalf("%v: from %v to %v is nowhere deeper than %v m and counts as entering", p, a, b, deepest+h/2)
		}
		if got != p.Enters(b, a) || got != NewObstacles([]Prism{p}).Blocked(a, b) {
			t.Fatalf("%v: from %v to %v: the answer depends on the direction or on the preparation", p, a, b)
		}
	}
	if entered < 500 || entered > 2700 {
		t.Errorf("only one kind of answer is tested: %d of 3000 enter", entered)
	}
}

// The answer belongs to the shapes, not to where they stand: not even in a national grid. Touching cases included, for
// the tolerance is far above rounding.
func TestEntersMoves(t *testing.T) {
	rnd := rand.New(rand.NewPCG(9, 10))
	for range 3000 {
		p := randomPrism(rnd)
		a, b := randomEnd(rnd, p), randomEnd(rnd, p)
		sin, cos := math.Sincos(rnd.Float64() * 7)
		at := Vec{155000 + 1e5*rnd.Float64(), 5e6 * rnd.Float64(), 0}
		move := func(v Vec) Vec { return Vec{cos*v.X - sin*v.Y, sin*v.X + cos*v.Y, v.Z}.Add(at) }
		q := Prism{From: p.From, To: p.To}
		for _, ring := range p.Polygon {
			var r orb.Ring
			for _, v := range ring {
				w := move(Vec{v[0], v[1], 0})
				r = append(r, orb.Point{w.X, w.Y})
			}
			q.Polygon = append(q.Polygon, r)
		}
		if x, y := p.Enters(a, b), q.Enters(move(a), move(b)); x != y {
			t.Fatalf("%v: from %v to %v: %v, moved: %v", p, a, b, x, y)
		}
	}
}

// Contains counts the boundary as inside; BlockedAt does not.
func TestContains(t *testing.T) {
	o := NewObstacles([]Prism{box5})
	for _, c := range []struct {
		v               Vec
		holds, blocking bool
	}{{Vec{5, 5, 2}, true, true}, {Vec{0, 0, 0}, true, false}, {Vec{10, 5, 5}, true, false}, {Vec{5, 5, 5.1}, false, false}, {Vec{11, 5, 2}, false, false}} {
		if got := box5.Contains(c.v); got != c.holds {
			t.Errorf("%v: contains %v", c.v, got)
		}
		if got := o.BlockedAt(c.v); got != c.blocking {
			t.Errorf("%v: blocked %v", c.v, got)
		}
	}
}

// A bar may run along a face of the envelope and from one prism into its neighbour, and nowhere else.
func TestInsideEnvelope(t *testing.T) {
	next := Prism{Polygon: orb.Polygon{{{10, 2}, {20, 2}, {20, 8}, {10, 8}, {10, 2}}}, From: 0, To: 3}
	above := Prism{Polygon: box5.Polygon, From: 5, To: 9}
	for _, c := range []struct {
		name string
		ps   []Prism
		a, b Vec
		want bool
	}{
		{"no envelope", nil, Vec{-50, 0, 0}, Vec{50, 0, 0}, true},
		{"inside", []Prism{box5}, Vec{1, 1, 1}, Vec{9, 9, 4}, true},
		{"along a face", []Prism{box5}, Vec{0, 0, 0}, Vec{10, 0, 5}, true},
		{"along an edge", []Prism{box5}, Vec{0, 0, 0}, Vec{0, 0, 5}, true},
		{"out at the side", []Prism{box5}, Vec{1, 1, 1}, Vec{10.01, 1, 1}, false},
		{"out at the top", []Prism{box5}, Vec{1, 1, 1}, Vec{1, 1, 5.01}, false},
		{"into the neighbour", []Prism{box5, next}, Vec{1, 5, 1}, Vec{19, 5, 2}, true},
		{"over the neighbour", []Prism{box5, next}, Vec{1, 5, 1}, Vec{19, 5, 4}, false},
		{"past the neighbour", []Prism{box5, next}, Vec{9, 1, 1}, Vec{11, 1, 1}, false},
		{"up into the next floor", []Prism{box5, above}, Vec{1, 1, 1}, Vec{9, 9, 8}, true},
		{"across the bay of the L", []Prism{lshape}, Vec{1, 9, 1}, Vec{9, 1, 1}, false},
		{"across the bay's corner", []Prism{lshape}, Vec{0, 8, 1}, Vec{8, 0, 1}, true},
		{"across the hole", []Prism{ringed}, Vec{1, 5, 1}, Vec{9, 5, 1}, false},
		{"along the hole", []Prism{ringed}, Vec{3, 1, 1}, Vec{3, 9, 1}, true},
		{"far away", []Prism{box5}, Vec{100, 1, 1}, Vec{101, 9, 4}, false},
		{"an empty prism", []Prism{{}}, Vec{0, 0, 0}, Vec{0, 0, 0}, false},
	} {
		if got := InsideEnvelope(c.ps, c.a, c.b); got != c.want {
			t.Errorf("%s: %v", c.name, got)
		}
		if got := InsideEnvelope(c.ps, c.b, c.a); got != c.want {
			t.Errorf("%s, backwards: %v", c.name, got)
		}
	}
}

// Every sample of a bar that is inside must be inside one of the prisms; a bar with a sample clearly outside is not.
func TestInsideEnvelopeAgainstSampling(t *testing.T) {
	rnd := rand.New(rand.NewPCG(11, 12))
	inside := 0
	for range 3000 {
		ps := []Prism{randomPrism(rnd), randomPrism(rnd)}
		a, b := randomEnd(rnd, ps[0]), randomEnd(rnd, ps[1])
		got := InsideEnvelope(ps, a, b)
		if got {
			inside++
		}
		const n = 200
		highest := math.Inf(1) // the smallest over the samples of the depth in the prism that holds it best
		for i := range n + 1 {
			v := a.Add(b.Sub(a).Scale(float64(i) / n))
			highest = math.Min(highest, math.Max(depth(ps[0], v), depth(ps[1], v)))
		}
		if got && highest < -1.5*EnterTolerance { // corners of the thickened prism are square between plan and height
			t.Fatalf("%v: %v to %v is %v m outside and counts as inside", ps, a, b, -highest)
		}
		if h := b.Sub(a).Norm() / n; !got && highest > h {
			t.Fatalf("%v: %v to %v is everywhere %v m inside and counts as outside", ps, a, b, highest)
		}
	}
	if inside < 100 {
		t.Errorf("only %d of 3000 inside", inside)
	}
}

// The question is asked for every candidate bar, so it must not ask for memory.
func TestBlockedAllocatesNothing(t *testing.T) {
	o := NewObstacles([]Prism{box5, lshape, ringed})
	e := NewEnvelope([]Prism{box5, lshape, ringed})
	if n := testing.AllocsPerRun(100, func() {
		o.Blocked(Vec{-5, 5, 6}, Vec{15, 5, 4})
		o.Blocked(Vec{4, 4, 2}, Vec{4, 20, 2})
		e.Contains(Vec{1, 1, 1}, Vec{9, 9, 4})
		e.Contains(Vec{1, 1, 1}, Vec{9, 9, 5.1})
	}); n > 0 {
		t.Errorf("%v allocations", n)
	}
}

// BenchmarkBlocked asks 1000 bars against 24 prisms, half of them concave.
func BenchmarkBlocked(b *testing.B) {
	rnd := rand.New(rand.NewPCG(13, 14))
	var ps []Prism
	for i := range 24 {
		c := orb.Point{40 * rnd.Float64(), 20 * rnd.Float64()}
		ps = append(ps, Prism{Polygon: orb.Polygon{star(rnd, c, 2, 4+4*(i%2))}, To: 5})
	}
	o := NewObstacles(ps)
	var ends []Vec
	for range 2000 {
		ends = append(ends, Vec{40 * rnd.Float64(), 20 * rnd.Float64(), 8 * rnd.Float64()})
	}
	blocked := 0
	for b.Loop() {
		for i := 0; i < len(ends); i += 2 {
			if o.Blocked(ends[i], ends[i+1]) {
				blocked++
			}
		}
	}
	b.ReportMetric(float64(blocked)/float64(b.N)/1000, "blocked/bar")
}
