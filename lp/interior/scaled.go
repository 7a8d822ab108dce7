package interior

import (
	"math"

	"boughwork/lp"
)

// scaled is a problem without dimensions: every bar's larger strength is 1, the largest load is 1, and costs are about 1.
// With F the largest load, sigma_i the bar's larger strength and Lambda the mean of c_i / sigma_i,
//
//	a' = a sigma/F,  q' = q/F,  c' = c/(sigma Lambda),  u' = u/Lambda,  h' = h/sigma,  f' = f/F.
//
// The last virtual bars are artificial forces, one a row, at the cost penalty; see solve.go.
type scaled struct {
	rows, bars, cases int
	real              int // bars of the caller; the rest are artificial
	ptr, row          []int32
	b, h              []float64
	st, sc, cost, up  []float64
	fixed             []bool
	hasP, hasM, hasZ  []bool // which slacks exist: of tension, of compression, of the area's limit
	gravity           []float64
	load              [][]float64
	force, lambda     float64   // F and Lambda
	sigma             []float64 // per bar
	weighs            bool      // some case has gravity and some bar weight
}

// newScaled returns nil for a problem without any load.
func newScaled(p *lp.Problem) *scaled {
	b := &p.Bars
	n := b.Len()
	s := &scaled{rows: p.Rows, bars: n, cases: len(p.Cases), real: n, ptr: b.Ptr, row: b.Row, b: b.B,
		h: make([]float64, len(b.H)), st: make([]float64, n), sc: make([]float64, n), cost: make([]float64, n), up: make([]float64, n),
		fixed: append([]bool(nil), b.Fixed...), hasP: make([]bool, n), hasM: make([]bool, n), hasZ: make([]bool, n),
		sigma: make([]float64, n), force: 0, lambda: 0}
	for _, c := range p.Cases {
		s.gravity = append(s.gravity, c.Gravity)
		for _, f := range c.Load {
			s.force = math.Max(s.force, math.Abs(f))
		}
		s.force = math.Max(s.force, fixedWeight(b, c.Gravity))
	}
	if s.force == 0 {
		return nil
	}
	s.scaleBars(b)
	for _, c := range p.Cases {
		f := make([]float64, p.Rows)
		for r, v := range c.Load {
			f[r] = v / s.force
		}
		s.load = append(s.load, f)
	}
	return s
}

// fixedWeight returns the largest force that the weight of a fixed bar puts on a row.
func fixedWeight(b *lp.Bars, gravity float64) float64 {
	top := 0.0
	for i, fixed := range b.Fixed {
		if fixed {
			for _, h := range b.H[b.Ptr[i]:b.Ptr[i+1]] {
				top = math.Max(top, math.Abs(gravity*h*b.Upper[i]))
			}
		}
	}
	return top
}

func (s *scaled) scaleBars(b *lp.Bars) {
	counted := 0
	for i := range s.bars {
		s.hasP[i], s.hasM[i] = !math.IsInf(b.Tension[i], 1), !math.IsInf(b.Compression[i], 1)
		s.hasZ[i] = !b.Fixed[i] && !math.IsInf(b.Upper[i], 1)
		if s.hasP[i] {
			s.sigma[i] = b.Tension[i]
		}
		if s.hasM[i] {
			s.sigma[i] = math.Max(s.sigma[i], b.Compression[i])
		}
		if s.sigma[i] == 0 {
			s.sigma[i] = 1 // one side is zero, the other without limit
		}
		if !b.Fixed[i] {
			s.lambda += b.Cost[i] / s.sigma[i]
			counted++
		}
	}
	if s.lambda /= float64(max(counted, 1)); s.lambda == 0 {
		s.lambda = 1
	}
	for i, sig := range s.sigma {
		s.st[i], s.sc[i] = b.Tension[i]/sig, b.Compression[i]/sig
		s.cost[i] = b.Cost[i] / (sig * s.lambda)
		s.up[i] = b.Upper[i] * sig / s.force
		for j := b.Ptr[i]; j < b.Ptr[i+1]; j++ {
			s.h[j] = b.H[j] / sig
			s.weighs = s.weighs || b.H[j] != 0
		}
	}
	heavy := false
	for _, g := range s.gravity {
		heavy = heavy || g != 0
	}
	s.weighs = s.weighs && heavy
}

// withArtificial returns the problem with one artificial force a row and case, at the given cost of its largest value.
func (s *scaled) withArtificial(penalty float64) *scaled {
	t := *s
	n := s.bars + s.rows
	t.bars = n
	t.ptr = append(append([]int32(nil), s.ptr...), make([]int32, s.rows)...)
	t.row = append([]int32(nil), s.row...)
	t.b, t.h = append([]float64(nil), s.b...), append([]float64(nil), s.h...)
	grow := func(x []float64, v float64) []float64 {
		x = append([]float64(nil), x...)
		for range s.rows {
			x = append(x, v)
		}
		return x
	}
	flags := func(x []bool, v bool) []bool {
		x = append([]bool(nil), x...)
		for range s.rows {
			x = append(x, v)
		}
		return x
	}
	t.st, t.sc, t.cost, t.up = grow(s.st, 1), grow(s.sc, 1), grow(s.cost, penalty), grow(s.up, math.Inf(1))
	t.sigma = grow(s.sigma, 1)
	t.fixed, t.hasP, t.hasM, t.hasZ = flags(s.fixed, false), flags(s.hasP, true), flags(s.hasM, true), flags(s.hasZ, false)
	for r := range s.rows {
		t.row = append(t.row, int32(r))
		t.b = append(t.b, 1)
		t.h = append(t.h, 0)
		t.ptr[s.bars+r+1] = int32(len(t.row))
	}
	return &t
}
