package export

import (
	"math"
	"sort"

	"boughwork/geom"
)

// leastSize is the size in m under which nothing is drawn larger: a record with a single node still has a scale.
const leastSize = 0.5

// measure finds the extents of what is drawn.
func (m *model) measure() {
	m.core = emptyExtent()
	m.low, m.high = math.Inf(1), math.Inf(-1)
	take := func(p geom.Vec) {
		m.core.take(p.X, p.Y)
		m.low, m.high = math.Min(m.low, p.Z), math.Max(m.high, p.Z)
	}
	for _, r := range m.roofs {
		for _, p := range r.places {
			take(p)
		}
	}
	for _, b := range m.bars {
		take(b.a)
		take(b.b)
	}
	for _, f := range m.feet {
		take(f.at)
	}
	if math.IsInf(m.low, 0) {
		for i := range m.rec.Nodes {
			take(m.axes.to(at(m.rec, i)))
		}
	}
	if math.IsInf(m.low, 0) {
		take(geom.Vec{})
	}
	if m.core.w() < leastSize || m.core.h() < leastSize {
		m.core = m.core.grown(leastSize / 2)
	}
	if m.high-m.low < leastSize {
		m.high = m.low + leastSize
	}
	m.nameLevels()
}

// nameLevels lists the heights of the feet and the lowest and highest of each roof.
func (m *model) nameLevels() {
	for _, f := range m.feet {
		m.levels = append(m.levels, f.at.Z)
	}
	for _, r := range m.roofs {
		lo, hi := math.Inf(1), math.Inf(-1)
		for _, p := range r.places {
			lo, hi = math.Min(lo, p.Z), math.Max(hi, p.Z)
		}
		m.levels = append(m.levels, lo, hi)
	}
	sort.Float64s(m.levels)
}

const (
	marginShare  = 0.04 // of the size: paper round the core
	contextShare = 0.14 // of the size: how much of the site beyond the core is shown at most
)

// size is the side of a square as large as the core, m.
func (m *model) size() float64 { return math.Sqrt(m.core.w() * m.core.h()) }

// planExtent is what the plan shows: the core with a margin, and of the site beyond it a little.
func (m *model) planExtent() extent {
	size := m.size()
	inner, outer := m.core.grown(marginShare*size), m.core.grown(contextShare*size)
	e := inner
	take := func(p geom.Vec) {
		e.take(math.Max(outer.x0, math.Min(outer.x1, p.X)), math.Max(outer.y0, math.Min(outer.y1, p.Y)))
	}
	for _, list := range [][]shape{m.footings, m.walls} {
		for _, s := range list {
			for _, ring := range s.rings {
				for _, p := range ring {
					take(p)
				}
			}
		}
	}
	for _, c := range m.clears {
		for _, p := range c.rings[0] {
			take(p)
		}
	}
	for _, a := range m.motion {
		e.take(a.to.X, a.to.Y)
	}
	return e
}

// elevationExtent is what an elevation shows: over a horizontal range, and as far beyond as something moves.
func (m *model) elevationExtent(p projection, x0, x1 float64) extent {
	size := math.Max(m.size(), m.high-m.low)
	e := extent{x0, m.low - marginShare*size, x1, m.high + marginShare*size}
	for _, a := range m.motion {
		e.take(p.flat(a.to))
	}
	return e
}

// axonometricExtent is what the axonometric view shows: the core from the ground to the top.
func (m *model) axonometricExtent() extent {
	e := emptyExtent()
	ground := m.core.grown(marginShare * m.size())
	for _, u := range []float64{ground.x0, ground.x1} {
		for _, v := range []float64{ground.y0, ground.y1} {
			e.take(axonometric.flat(geom.Vec{X: u, Y: v, Z: m.low}))
		}
	}
	for _, r := range m.roofs {
		for _, p := range r.places {
			e.take(axonometric.flat(p))
		}
	}
	for _, b := range m.bars {
		e.take(axonometric.flat(b.a))
		e.take(axonometric.flat(b.b))
	}
	for _, a := range m.motion {
		e.take(axonometric.flat(a.to))
	}
	return e
}
