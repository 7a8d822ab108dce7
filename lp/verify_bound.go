package lp

import "math"

// A bar of unlimited strength that moves its forbidden way by no more than this share of the largest displacement of the
// case (times the sum of the bar's |b|) counts as not moving: four digits above the rounding of float64.
const wrongWay = 1e-12

// Bound returns the lower bound on the objective that the displacements prove, from nothing but the problem and u[k][row]
// of any origin:
//
//  1. v_i = Price(i, u) of every bar; worst = the largest v_i / c_i over the bars that are neither fixed nor limited, or 0.
//  2. If worst > 1, u and with it every v_i is multiplied by 1 / worst.
//  3. bound = sum_k f_k . u_k - sum over limited bars A_i max(0, v_i - c_i) - sum over fixed bars A_i v_i.
//
// A fixed bar of unlimited compression (tension) must not shorten (lengthen): if it does in any case, by more than
// 1e-12 of the largest displacement of the case, the displacements prove nothing and the bound is -Inf; up to that it
// counts as not moving (see Settle for displacements that are free of this rounding). The bound is -Inf too where u holds
// a NaN. A bound below zero is true, and of no use: the objective is never negative.
//
// The sums over rows and bars are compensated. p must be valid. Source: weak duality; Hemp 1973.
func Bound(p *Problem, u [][]float64) (bound, worst float64) {
	tiny := tinyMoves(u)
	price := make([]float64, p.Bars.Len())
	for i := range price {
		price[i] = p.priceBut(i, u, tiny)
		if !p.Bars.Fixed[i] && math.IsInf(p.Bars.Upper[i], 1) {
			worst = math.Max(worst, price[i]/p.Bars.Cost[i])
		}
	}
	scale := 1.0
	if worst > 1 {
		scale = 1 / worst
	}
	var v sum
	for k, c := range p.Cases {
		for r, f := range c.Load {
			v.add(scale * f * u[k][r])
		}
	}
	for i, w := range price {
		switch {
		case p.Bars.Fixed[i]:
			v.add(-p.Bars.Upper[i] * scale * w)
		case !math.IsInf(p.Bars.Upper[i], 1):
			v.add(-p.Bars.Upper[i] * math.Max(0, scale*w-p.Bars.Cost[i]))
		}
	}
	bound = v.value()
	if math.IsNaN(bound) || math.IsInf(bound, 1) || math.IsNaN(worst) || math.IsInf(worst, 0) {
		bound = math.Inf(-1)
	}
	return bound, worst
}

// CheckRay judges the motion u[k][row] that comes with Status NoEquilibrium. work is what the loads do on it beyond what
// the fixed and limited bars can absorb:
//
//	work = sum_k f_k . u_k - sum over limited bars A_i max(0, v_i) - sum over fixed bars A_i v_i
//
// and worst is the largest v_i / c_i over the other bars, or 0. Any layout needs an objective of at least work / worst, so
// work > 0 and worst = 0 prove that there is none, and a work / worst that is many orders above any sensible objective
// proves it up to rounding. work is -Inf if a bar of unlimited strength moves its forbidden way, as in Bound.
//
// The sums over rows and bars are compensated. p must be valid. Source: Farkas's lemma.
func CheckRay(p *Problem, u [][]float64) (work, worst float64) {
	tiny := tinyMoves(u)
	var v sum
	for k, c := range p.Cases {
		for r, f := range c.Load {
			v.add(f * u[k][r])
		}
	}
	for i := range p.Bars.Len() {
		w := p.priceBut(i, u, tiny)
		switch {
		case p.Bars.Fixed[i]:
			v.add(-p.Bars.Upper[i] * w)
		case !math.IsInf(p.Bars.Upper[i], 1):
			v.add(-p.Bars.Upper[i] * math.Max(0, w))
		default:
			worst = math.Max(worst, w/p.Bars.Cost[i])
		}
	}
	work = v.value()
	if math.IsNaN(work) || math.IsInf(work, 1) || math.IsNaN(worst) {
		work = math.Inf(-1)
	}
	return work, worst
}

// tinyMoves returns what counts as no movement in every case.
func tinyMoves(u [][]float64) []float64 {
	tiny := make([]float64, len(u))
	for k := range u {
		tiny[k] = wrongWay * largestOf(u[k])
	}
	return tiny
}

// priceBut is Price, but a bar of unlimited strength that moves by no more than tiny[k] sum_j |b_j| counts as still.
func (p *Problem) priceBut(i int, u [][]float64, tiny []float64) float64 {
	b := &p.Bars
	if !math.IsInf(b.Tension[i], 1) && !math.IsInf(b.Compression[i], 1) {
		return p.Price(i, u)
	}
	size := 0.0
	for j := b.Ptr[i]; j < b.Ptr[i+1]; j++ {
		size += math.Abs(b.B[j])
	}
	v := 0.0
	for k, c := range p.Cases {
		if e := b.Elongation(i, u[k]); math.Abs(e) > tiny[k]*size || math.IsNaN(e) {
			v += strain(b.Tension[i], b.Compression[i], e)
		}
		if c.Gravity != 0 {
			v += c.Gravity * b.Lift(i, u[k])
		}
	}
	return v
}

// sum is a compensated sum. Source: Neumaier 1974.
type sum struct{ s, c float64 }

func (a *sum) add(x float64) {
	t := a.s + x
	if math.Abs(a.s) >= math.Abs(x) {
		a.c += (a.s - t) + x
	} else {
		a.c += (x - t) + a.s
	}
	a.s = t
}

func (a *sum) value() float64 {
	if math.IsInf(a.s, 0) {
		return a.s // the compensation is Inf - Inf
	}
	return a.s + a.c
}
