package layout_test

import (
	"math"

	"boughwork/geom"
	"boughwork/ground"
)

// referenceCase is a case of the ledger: how its ground structure is made, and its closed form, which the figure written
// in the ledger is compared with.
type referenceCase struct {
	id    string
	exact float64
	build func(b *builder)
}

// exactCases reach their value on any lattice that holds the needed nodes.
var exactCases = []referenceCase{
	{"A1.1", 2, func(b *builder) { wallPlane(b) }},
	{"A1.2", 2 / math.Sqrt(1*0.25), func(b *builder) { wallPlane(b); b.strengths(1, 0.25) }},
	{"A1.3", 2, func(b *builder) { wallSpace(b, 0.2, 5); b.load(b.node(1, 0, 0, ""), 0, 0.6, -0.8) }},
	{"A1.4", 2 / math.Sqrt(4*1), func(b *builder) {
		wallSpace(b, 0.5, 4)
		b.strengths(4, 1)
		b.load(b.node(1, 0, 0, ""), 0, -1, 0)
	}},

	{"A2.1", oneLoad(1, 0.5, 1), func(b *builder) { groundPlane(b); b.load(b.node(0, 0, 1, "y"), 0.5, 0, -1) }},
	{"A2.2", oneLoad(1, 2, 1), func(b *builder) { groundPlane(b); b.load(b.node(0, 0, 1, "y"), 2, 0, -1) }},
	{"A2.3", oneLoad(1, 0.5, 1), func(b *builder) { groundSpace(b); b.load(b.node(0, 0, 1, ""), 0.3, 0.4, -1) }},
	{"A2.4", oneLoad(1, 2, 1), func(b *builder) { groundSpace(b); b.load(b.node(0, 0, 1, ""), 1.2, 1.6, -1) }},
	{"A2.5", oneLoad(1, 0.5, 1), func(b *builder) { groundSpace(b); b.load(b.node(0, 0, 1, ""), -0.3, -0.4, 1) }},

	{"A3.1", 2.5, func(b *builder) { legsPlane(b) }},
	{"A3.2", 2.5, func(b *builder) { legs(b, 3) }},
	{"A3.3", 2.5, func(b *builder) { legs(b, 4) }},
	{"A3.4", 2.5, func(b *builder) { legs(b, 6) }},

	{"A4.1", fanPlane(nil, 0), func(b *builder) { fanPlane(b, 0) }},
	{"A4.2", fanPlane(nil, -3, 2), func(b *builder) { fanPlane(b, -3, 2) }},
	{"A4.3", fanSpace(nil, [2]float64{0, 0}), func(b *builder) { fanSpace(b, [2]float64{0, 0}) }},
	{"A4.4", fanSpace(nil, [2]float64{-2, -2}, [2]float64{2, -1}, [2]float64{0, 2}), func(b *builder) {
		fanSpace(b, [2]float64{-2, -2}, [2]float64{2, -1}, [2]float64{0, 2})
	}},
	{"A4.5", math.Pi * (1 + 1.0/2), func(b *builder) { disc(b) }},

	{"A7.1", 1 * (1 + 2*0.5), func(b *builder) {
		groundPlane(b)
		top := b.node(0, 0, 1, "y")
		b.load(top, 0.5, 0, -1)
		b.newCase()
		b.load(top, -0.5, 0, -1)
	}},
	{"A7.2", 1 * (1 + 2*2), func(b *builder) {
		groundSpace(b)
		top := b.node(0, 0, 1, "")
		b.load(top, 1.2, 1.6, -1)
		b.newCase()
		b.load(top, -1.2, -1.6, -1)
	}},
	{"A7.3", 2, func(b *builder) {
		wallPlane(b)
		b.newCase()
		b.load(b.node(1, 0, 0, "y"), 1, 0, 0)
	}},

	{"A8.1", maxwell(3, -1, 2, 1), func(b *builder) {
		b.strengths(2, 1)
		b.node(-1, 0, 0, "xyz")
		b.node(1, 0, 0, "yz")
		b.load(b.node(0, 0, 1, "y"), 0, 0, -1)
	}},
	{"A8.2", maxwell(3, -1, 1, 2), func(b *builder) {
		b.strengths(1, 2)
		ring(3, 1, func(x, y float64) { b.node(x, y, 0, "z") })
		b.Nodes[0].Fixed = [3]bool{true, true, true}
		b.Nodes[1].Fixed[1] = true // keeps the whole from turning about z
		b.load(b.node(0, 0, 1, ""), 0, 0, -1)
	}},

	{"A9.1", 4.0 / 3, func(b *builder) { hanging(b, 1, -1) }},
	{"A9.2", 64.0 / 49, func(b *builder) { hanging(b, 2, -1) }},
	{"A9.3", 64.0 / 49, func(b *builder) { hanging(b, 2, 1) }},
	{"A9.4", 2.5 / (1 - 2.5*0.2/2), func(b *builder) {
		ring(3, 1, func(x, y float64) { b.node(x, y, 0, "xyz") })
		b.load(b.node(0, 0, 2, ""), 0, 0, -1)
		weigh(b, 0.2)
	}},
}

// wallPlane is a wall x = 0 with room in front of it, and a load P = 1 along it at L = 1.
func wallPlane(b *builder) {
	b.box(0, 0, -2, 0.5, 2, 0, 8)
	b.hold("xyz", func(v geom.Vec) bool { return v.X == 0 })
	b.load(b.node(1, 0, 0, "y"), 0, 0, -1)
}

// wallSpace is a wall x = 0 of (2n + 1)^2 places at the given step, and some nodes in front of it.
func wallSpace(b *builder, step float64, n int) {
	for i := -n; i <= n; i++ {
		for j := -n; j <= n; j++ {
			b.node(0, float64(i)*step, float64(j)*step, "xyz")
		}
	}
	for i := -1.0; i <= 1; i++ {
		for j := -1.0; j <= 1; j++ {
			b.node(0.5, i/2, j/2, "")
			b.node(1.5, i/2, j/2, "")
		}
	}
}

// oneLoad is sigma V of case A2: a load N down and Q sideways at height h over a ground that holds everywhere.
func oneLoad(n, q, h float64) float64 {
	if q <= n {
		return h * (n + q*q/n)
	}
	return 2 * q * h
}

// groundPlane is a line of ground with two rows of nodes above it.
func groundPlane(b *builder) {
	b.box(-1, 0, 0, 0.5, 4, 0, 2)
	b.hold("xyz", func(v geom.Vec) bool { return v.Z == 0 })
}

// groundSpace is a square of ground with places every 0.1 and some nodes above it.
func groundSpace(b *builder) {
	for i := -10; i <= 10; i++ {
		for j := -10; j <= 10; j++ {
			b.node(float64(i)/10, float64(j)/10, 0, "xyz")
		}
	}
	for i := -1.0; i <= 1; i++ {
		for j := -1.0; j <= 1; j++ {
			b.node(i/2, j/2, 0.5, "")
		}
	}
}

// legs is case A3 with R = 1, H = 2, P = 1: n feet on a ring, nodes half way up the legs and on the axis, a load on top.
func legs(b *builder, n int) {
	ring(n, 1, func(x, y float64) { b.node(x, y, 0, "xyz"); b.node(x/2, y/2, 1, "") })
	b.node(0, 0, 0.5, "")
	b.node(0, 0, 1.5, "")
	b.load(b.node(0, 0, 2, ""), 0, 0, -1)
}

// legsPlane is the same with two feet in a plane.
func legsPlane(b *builder) {
	for _, x := range []float64{-1, 1} {
		b.node(x, 0, 0, "xyz")
		b.node(x/2, 0, 1, "y")
	}
	b.node(0, 0, 0.5, "y")
	b.node(0, 0, 1.5, "y")
	b.load(b.node(0, 0, 2, "y"), 0, 0, -1)
}

// fanPlane is case A4 in a plane: unequal loads every metre at H = 2, held sideways, on the given feet; no load is
// further than H from a foot. It returns sigma V = sum P (H + r^2/H), and builds nothing if b is nil.
func fanPlane(b *builder, feet ...float64) float64 {
	const height = 2.0
	volume := 0.0
	for i := -2; i <= 2; i++ {
		x, p := float64(i), 1+0.25*float64(i)
		r := math.Inf(1)
		for _, f := range feet {
			r = math.Min(r, math.Abs(x-f))
		}
		volume += p * (height + r*r/height)
		if b != nil {
			b.load(b.node(x, 0, height, "xy"), 0, 0, -p)
			b.node(x, 0, 1.5, "y")
		}
	}
	if b != nil {
		for _, f := range feet {
			b.node(f, 0, 0, "xyz")
		}
	}
	return volume
}

// fanSpace is the same in space: 5 x 5 loads every half metre at H = 2.5.
func fanSpace(b *builder, feet ...[2]float64) float64 {
	const height = 2.5
	volume := 0.0
	for i := -2; i <= 2; i++ {
		for j := -2; j <= 2; j++ {
			x, y, p := float64(i)/2, float64(j)/2, 1+0.1*float64(i)-0.2*float64(j)
			r := math.Inf(1)
			for _, f := range feet {
				r = math.Min(r, math.Hypot(x-f[0], y-f[1]))
			}
			volume += p * (height + r*r/height)
			if b != nil {
				b.load(b.node(x, y, height, "xy"), 0, 0, -p)
				b.node(x, y, 1.25, "")
			}
		}
	}
	if b != nil {
		for _, f := range feet {
			b.node(f[0], f[1], 0, "xyz")
		}
	}
	return volume
}

// disc is a disc of radius 1 under a pressure of 1 at height 1 on one foot, cut into 4 rings of 12 parts. The load of
// each part sits at its radius of gyration about the axis: then sum P r^2 is the integral of q r^2, and the formula of
// the disc is met by the parts without any error of discretisation.
func disc(b *builder) {
	const rings, parts = 4, 12
	b.node(0, 0, 0, "xyz")
	for k := range rings {
		in, out := float64(k)/rings, float64(k+1)/rings
		p := math.Pi * (out*out - in*in) / parts
		ring(parts, math.Sqrt((in*in+out*out)/2), func(x, y float64) {
			b.load(b.node(x, y, 1, "xy"), 0, 0, -p)
			b.node(x/2, y/2, 0.75, "")
		})
	}
}

// maxwell is case A8: W = sum |q| l of the best layout for equal strengths, M = sum P . r with the reactions.
func maxwell(w, m, st, sc float64) float64 { return w/2*(1/st+1/sc) + m/2*(1/st-1/sc) }

// hanging is case A9 with P L / sigma = 1, g L / sigma = 1/2 and n segments: a load that hangs below a ceiling (side -1)
// or stands on a column (side +1).
func hanging(b *builder, n int, side float64) {
	b.node(0, 0, 0, "xyz")
	for i := 1; i <= n; i++ {
		b.node(0, 0, side*float64(i)/float64(n), "xy")
	}
	b.load(n, 0, 0, -1)
	weigh(b, 0.5)
}

// weigh gives bars a weight per volume in N/m3.
func weigh(b *builder, weight float64) {
	b.Material.Density = weight / ground.Gravity
	for k := range b.Cases {
		b.Cases[k].Gravity = 1
	}
}
