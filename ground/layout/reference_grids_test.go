package layout_test

import (
	"math"

	"boughwork/geom"
)

// gridCases approach their value from above as the lattice is refined.
var gridCases = []referenceCase{
	{"A8.3", maxwell(math.Pi, 0, 2, 1), func(b *builder) { halfPlane(b, 4, 0); b.strengths(2, 1) }},
	{"A9.5", 2 * (math.Sqrt(math.E) - 1), func(b *builder) { hanging(b, 16, -1) }},

	{"A10.1", chan1960(1), func(b *builder) { cantilever(b, 1, 2, 1, 0) }},
	{"A10.2", chan1960(2), func(b *builder) { cantilever(b, 2, 2, 1, 0) }},
	{"A10.3", chan1960(2), func(b *builder) { cantilever(b, 2, 4, 1, 0) }},
	{"A10.4", chan1960(2), func(b *builder) { cantilever(b, 2, 8, 1, 0) }},
	{"A10.5", chan1960(3), func(b *builder) { cantilever(b, 3, 2, 1, 0) }},
	{"A10.6", chan1960(3), func(b *builder) { cantilever(b, 3, 4, 1, 0) }},
	{"A10.7", chan1960(3), func(b *builder) { cantilever(b, 3, 8, 1, 0) }},
	{"A10.8", chan1960(3), func(b *builder) { cantilever(b, 3, 12, 1, 0) }},
	{"A10.9", chan1960(4), func(b *builder) { cantilever(b, 4, 4, 1.5, 0) }},
	{"A10.10", chan1960(2), func(b *builder) { cantilever(b, 2, 4, 1, 1) }},

	{"A11.1", 8 * math.Log(4), func(b *builder) { spirals(b, 4, 18, 0) }},
	{"A11.2", 8 * math.Log(4), func(b *builder) { spirals(b, 8, 36, 0) }},
	{"A11.3", 8 * math.Log(4), func(b *builder) { spirals(b, 4, 18, 1) }},

	{"A12.1", 1 + math.Pi/2, func(b *builder) { fullPlane(b, 2, 0) }},
	{"A12.2", 1 + math.Pi/2, func(b *builder) { fullPlane(b, 4, 0) }},
	{"A12.3", 1 + math.Pi/2, func(b *builder) { fullPlane(b, 8, 0) }},
	{"A12.4", math.Pi, func(b *builder) { halfPlane(b, 2, 0) }},
	{"A12.5", math.Pi, func(b *builder) { halfPlane(b, 4, 0) }},
	{"A12.6", math.Pi, func(b *builder) { halfPlane(b, 10, 0) }},
	{"A12.7", math.Pi, func(b *builder) { halfPlane(b, 4, 1) }},
	{"A12.8", 1 + math.Pi/2, func(b *builder) { fullPlane(b, 4, 1) }},

	{"A14.1", 0.788, func(b *builder) { uniform(b, 48) }},

	{"B1", 10.6, canopy},
	{"B2", 0.7947, func(b *builder) { uniform(b, 48) }},
}

// nested are lattices of which each holds the nodes of the one before: their volumes can only fall.
var nested = [][]string{
	{"A10.2", "A10.3", "A10.4"}, {"A10.5", "A10.6", "A10.7"}, {"A10.6", "A10.8"}, {"A11.1", "A11.2"},
	{"A12.1", "A12.2", "A12.3"}, {"A12.4", "A12.5"}, {"A12.4", "A12.6"}, {"A9.1", "A9.2", "A9.5"},
}

// level are plane lattices and the same with more planes beside them. Displacements of the plane problem that do not
// change across the planes price no slanting bar higher than its projection, so both have the same least volume.
var level = [][2]string{{"A10.3", "A10.10"}, {"A11.1", "A11.3"}, {"A12.5", "A12.7"}, {"A12.2", "A12.8"}}

// cantilever is case A10 with h = 1 and P = 1: nodes every 1/n in 0 <= x <= reach, |z| <= room, in 2 beside + 1 planes.
func cantilever(b *builder, reach, n int, room float64, beside int) {
	rows := int(room * float64(n))
	b.box(0, -float64(beside)/float64(n), -room, 1/float64(n), reach*n, 2*beside, 2*rows)
	b.node(0, 0, -1, "xyz")
	b.node(0, 0, 1, "xyz")
	b.load(b.node(float64(reach), 0, 0, ""), 0, 0, -1)
}

// spirals is case A11 with r = 1, R = 4, P = 1: steps + 1 rings whose radii grow by a constant factor, so that bars from
// ring to ring rise at about 45 degrees.
func spirals(b *builder, steps, parts, beside int) {
	held := "y"
	if beside > 0 {
		held = ""
	}
	for p := -beside; p <= beside; p++ {
		for i := range steps + 1 {
			at := held
			if i == 0 {
				at = "xyz"
			}
			ring(parts, math.Pow(4, float64(i)/float64(steps)), func(x, z float64) { b.node(x, float64(p)/2, z, at) })
		}
	}
	b.load(b.node(4, 0, 0, held), 0, 0, -1)
}

// halfPlane is case A12 with a = 1, P = 1 and room on one side: nodes every 1/n in |x| <= 1, 0 <= z <= 1, on a pin and a
// roller.
func halfPlane(b *builder, n, beside int) {
	b.box(-1, -float64(beside)/float64(n), 0, 1/float64(n), 2*n, 2*beside, n)
	b.node(-1, 0, 0, "xyz")
	b.node(1, 0, 0, "yz")
	b.load(b.node(0, 0, 0, ""), 0, 0, -1)
}

// fullPlane is the same with room on both sides.
func fullPlane(b *builder, n, beside int) {
	b.box(-1, -float64(beside)/float64(n), -1, 1/float64(n), 2*n, 2*beside, 2*n)
	b.node(-1, 0, 0, "xyz")
	b.node(1, 0, 0, "yz")
	b.load(b.node(0, 0, 0, ""), 0, 0, -1)
}

// uniform is case A14 with L = 1 and w = 1: n panels between two pins, room above them up to half the span.
func uniform(b *builder, n int) {
	b.box(0, 0, 0, 1/float64(n), n, 0, n/2)
	b.hold("xyz", func(v geom.Vec) bool { return v.Z == 0 && (v.X == 0 || v.X > 1-1e-9) })
	for i := 1; i < n; i++ {
		b.load(b.node(float64(i)/float64(n), 0, 0, ""), 0, 0, -1/float64(n))
	}
}

// canopy is the one that an independent linear program was solved for: 20 x 20 x 8, nodes every 2, four feet
// around each of (5 or 15, 5 or 15), a total of 1 spread over the roof by tributary area.
func canopy(b *builder) {
	b.box(0, 0, 0, 2, 10, 10, 4)
	near := func(c float64) bool { return math.Abs(c-5) <= 1 || math.Abs(c-15) <= 1 }
	b.hold("xyz", func(v geom.Vec) bool { return v.Z == 0 && near(v.X) && near(v.Y) })
	for i, n := range b.Nodes {
		if n.At.Z < 8 {
			continue
		}
		share := 0.01
		for _, c := range []float64{n.At.X, n.At.Y} {
			if c == 0 || c == 20 {
				share /= 2
			}
		}
		b.load(i, 0, 0, -share)
	}
}
