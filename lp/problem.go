// Package lp states the linear program of the plastic layout problem, and what a solver of it must promise.
//
// # The program
//
// For bars i and cases k:
//
//	minimise   sum_i c_i a_i
//	subject to sum_i (b_i q_ik - g_k h_i a_i) + f_k = 0        for every case k   (multiplier u_k)
//	           -sc_i a_i <= q_ik <= st_i a_i                    for every i, k     (multipliers y-_ik, y+_ik >= 0)
//	           0 <= a_i <= A_i                                  (A_i may be +Inf)
//	           a_i = A_i                                        for the fixed bars
//
// b_i is the bar's column of the equilibrium matrix over the rows, h_i its weight column: the weight of a unit area,
// shared between the rows it acts on (h >= 0 for a weight that acts against the row's positive direction). f_k is
// the load of case k. The columns b_i and h_i share one sparsity pattern.
//
// A reaction that is limited is a bar as well: one that joins a row to the ground. That is why a bar may have a
// strength of zero on one side, a fixed area and an upper limit of the area.
//
// # The dual
//
// With e_ik = -b_i . u_k (the lengthening of bar i under the displacements u_k),
//
//	maximise   sum_k f_k . u_k - sum_i A_i z_i
//	where      v_i = sum_k [ max(st_i e_ik, -sc_i e_ik) + g_k h_i . u_k ] <= c_i + z_i,  z_i >= 0,
//
// z_i = v_i - c_i of either sign for a fixed bar, z_i = 0 where A_i = +Inf. Any u gives a lower bound on the objective
// once the unlimited bars satisfy v_i <= c_i. Sources: Dorn, Gomory and Greenberg 1964; Hemp 1973.
package lp

import "math"

// Problem is one layout program. All slices are owned by the caller and are not changed by a solver.
type Problem struct {
	// Rows is the number of equilibrium equations of one case.
	Rows int
	// Block groups the rows: rows Block[v] to Block[v+1]-1 belong to block v (a node; or a diaphragm, a zone). It has
	// one entry more than there are blocks, and Block[last] = Rows.
	Block []int32
	// At is the place of each block in metres, used only to order the elimination. A block without a place (a
	// diaphragm, say, that many bars touch) has NaN and is eliminated last.
	At [][3]float64

	Bars  Bars
	Cases []Case
}

// Bars holds the columns of the program, bar by bar. Entry j of bar i, Ptr[i] <= j < Ptr[i+1], is in row Row[j] and has
// the values B[j] (of b_i) and H[j] (of h_i). Rows within a bar are distinct.
type Bars struct {
	Ptr         []int32
	Row         []int32
	B           []float64
	H           []float64
	Tension     []float64 // st_i >= 0
	Compression []float64 // sc_i >= 0; st_i + sc_i > 0. +Inf on one side only, and only for a fixed bar
	Cost        []float64 // c_i > 0; ignored for a fixed bar
	Upper       []float64 // A_i; +Inf for none
	Fixed       []bool    // a_i = A_i
}

// Case is one set of loads.
type Case struct {
	Name    string
	Gravity float64   // g_k
	Load    []float64 // f_k, one entry a row
}

// Len returns the number of bars.
func (b *Bars) Len() int { return len(b.Cost) }

// Add appends a bar and returns its index.
func (b *Bars) Add(row []int32, col, weight []float64, tension, compression, cost, upper float64, fixed bool) int {
	if len(b.Ptr) == 0 {
		b.Ptr = append(b.Ptr, 0)
	}
	b.Row = append(b.Row, row...)
	b.B = append(b.B, col...)
	b.H = append(b.H, weight...)
	b.Ptr = append(b.Ptr, int32(len(b.Row)))
	b.Tension = append(b.Tension, tension)
	b.Compression = append(b.Compression, compression)
	b.Cost = append(b.Cost, cost)
	b.Upper = append(b.Upper, upper)
	b.Fixed = append(b.Fixed, fixed)
	return len(b.Cost) - 1
}

// Elongation returns e = -b_i . u.
func (b *Bars) Elongation(i int, u []float64) float64 {
	e := 0.0
	for j := b.Ptr[i]; j < b.Ptr[i+1]; j++ {
		e -= b.B[j] * u[b.Row[j]]
	}
	return e
}

// Lift returns h_i . u, the dual price of the weight of a unit area.
func (b *Bars) Lift(i int, u []float64) float64 {
	h := 0.0
	for j := b.Ptr[i]; j < b.Ptr[i+1]; j++ {
		h += b.H[j] * u[b.Row[j]]
	}
	return h
}

// Price returns v_i = sum_k [max(st e_ik, -sc e_ik) + g_k h_i . u_k] for the displacements u[k].
func (p *Problem) Price(i int, u [][]float64) float64 {
	b := &p.Bars
	v := 0.0
	for k := range p.Cases {
		v += strain(b.Tension[i], b.Compression[i], b.Elongation(i, u[k]))
		if g := p.Cases[k].Gravity; g != 0 {
			v += g * b.Lift(i, u[k])
		}
	}
	return v
}

// strain returns max(st e, -sc e); an infinite strength prices a wrong sign at +Inf and e = 0 at 0.
func strain(st, sc, e float64) float64 {
	if e == 0 {
		return 0
	}
	return math.Max(st*e, -sc*e)
}
