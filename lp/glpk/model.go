//go:build glpk && cgo

package glpk

import (
	"math"

	"boughwork/lp"
)

// model is the layout program as GLPK takes it: minimise cost . x subject to bounds on x and on the rows, all in units
// near 1. Forces are in units of the largest load, areas in units of force / strength, the objective in units of the mean
// cost of a unit of force.
//
// A bar's force is t - c, tension less compression, both >= 0, and t/st + c/sc <= a is all that strength asks. With one
// case the area is t/st + c/sc itself: no column and no row for it, unless it is limited. A fixed bar is one bounded
// column a case and its weight is a load. Every cost is >= 0, so the slack basis is dual feasible.
type model struct {
	p        *lp.Problem
	force    float64   // unit of force
	cost     float64   // unit of the objective
	strength []float64 // the larger finite strength of every bar
	area     []int32   // column of the area, 0 for none
	tension  [][]int32 // [case][bar] column of t, or of the force of a fixed bar; 0 for none
	compress [][]int32 // [case][bar] column of c, 0 for none

	// One entry for the index 0 that GLPK does not use, then rows and columns from 1.
	rowLow, rowHigh []float64
	colLow, colHigh []float64
	colCost         []float64
	ia, ja          []int32
	ar              []float64
}

// newModel builds the program of p. If elastic, every balance of forces has an artificial force either way at a cost of 1
// and nothing else costs: its least cost is 0 if p has an equilibrium, and otherwise its duals are a collapse motion.
func newModel(p *lp.Problem, elastic bool) *model {
	n := p.Bars.Len()
	m := &model{p: p, strength: make([]float64, n), area: make([]int32, n)}
	m.rowLow, m.rowHigh = make([]float64, 1), make([]float64, 1)
	m.colLow, m.colHigh, m.colCost = make([]float64, 1), make([]float64, 1), make([]float64, 1)
	m.ia, m.ja, m.ar = make([]int32, 1), make([]int32, 1), make([]float64, 1)
	m.units()
	m.balances()
	for range p.Cases {
		m.tension, m.compress = append(m.tension, make([]int32, n)), append(m.compress, make([]int32, n))
	}
	for i := range n {
		switch {
		case p.Bars.Fixed[i]:
			m.fixedBar(i)
		case len(p.Cases) == 1:
			m.singleBar(i)
		default:
			m.bar(i)
		}
	}
	if elastic {
		m.artificial()
	}
	return m
}

// units chooses the units of force and cost.
func (m *model) units() {
	b := &m.p.Bars
	for _, c := range m.p.Cases {
		for _, f := range c.Load {
			m.force = math.Max(m.force, math.Abs(f))
		}
		for i, fixed := range b.Fixed {
			if fixed {
				for _, h := range b.H[b.Ptr[i]:b.Ptr[i+1]] {
					m.force = math.Max(m.force, math.Abs(c.Gravity*h*b.Upper[i]))
				}
			}
		}
	}
	if m.force == 0 {
		m.force = 1
	}
	free := 0
	for i := range m.strength {
		st, sc := b.Tension[i], b.Compression[i]
		switch {
		case math.IsInf(st, 1):
			m.strength[i] = sc
		case math.IsInf(sc, 1):
			m.strength[i] = st
		default:
			m.strength[i] = math.Max(st, sc)
		}
		if !b.Fixed[i] {
			m.cost += b.Cost[i] * m.force / m.strength[i]
			free++
		}
	}
	if free == 0 {
		m.cost = 1
		return
	}
	m.cost /= float64(free)
}

// balances adds the rows of equilibrium: sum (b q - g h a) = -f, with the weight of fixed bars on the right.
func (m *model) balances() {
	b := &m.p.Bars
	for _, c := range m.p.Cases {
		right := make([]float64, m.p.Rows)
		for i, fixed := range b.Fixed {
			if fixed && c.Gravity != 0 {
				for j := b.Ptr[i]; j < b.Ptr[i+1]; j++ {
					right[b.Row[j]] += c.Gravity * b.H[j] * b.Upper[i] / m.force
				}
			}
		}
		for r, f := range c.Load {
			v := right[r] - f/m.force
			m.row(v, v)
		}
	}
}

// balance returns the row of equilibrium of row r in case k.
func (m *model) balance(k int, r int32) int32 { return int32(k*m.p.Rows) + r + 1 }

func (m *model) row(low, high float64) int32 {
	m.rowLow, m.rowHigh = append(m.rowLow, low), append(m.rowHigh, high)
	return int32(len(m.rowLow) - 1)
}

func (m *model) column(low, high, cost float64) int32 {
	m.colLow, m.colHigh, m.colCost = append(m.colLow, low), append(m.colHigh, high), append(m.colCost, cost)
	return int32(len(m.colLow) - 1)
}

func (m *model) entry(row, col int32, v float64) {
	if v != 0 {
		m.ia, m.ja, m.ar = append(m.ia, row), append(m.ja, col), append(m.ar, v)
	}
}

// push adds sign b - weight g h of bar i to the balances of case k.
func (m *model) push(i, k int, col int32, sign, weight float64) {
	b, g := &m.p.Bars, m.p.Cases[k].Gravity
	for j := b.Ptr[i]; j < b.Ptr[i+1]; j++ {
		m.entry(m.balance(k, b.Row[j]), col, sign*b.B[j]-weight*g*b.H[j])
	}
}

// fixedBar adds one column a case between the bar's two strengths.
func (m *model) fixedBar(i int) {
	b := &m.p.Bars
	a := b.Upper[i] / m.force
	for k := range m.p.Cases {
		col := m.column(-b.Compression[i]*a, b.Tension[i]*a, 0)
		m.tension[k][i] = col
		m.push(i, k, col, 1, 0)
	}
}

// singleBar adds a bar of a problem with one case: its area is t/st + c/sc.
func (m *model) singleBar(i int) {
	b := &m.p.Bars
	limit := int32(0)
	if !math.IsInf(b.Upper[i], 1) {
		limit = m.row(math.Inf(-1), b.Upper[i]*m.strength[i]/m.force)
	}
	price := b.Cost[i] * m.force / m.cost
	side := func(strength, sign float64) int32 {
		if strength == 0 {
			return 0
		}
		col := m.column(0, math.Inf(1), price/strength)
		m.push(i, 0, col, sign, 1/strength)
		if limit != 0 {
			m.entry(limit, col, m.strength[i]/strength)
		}
		return col
	}
	m.tension[0][i] = side(b.Tension[i], 1)
	m.compress[0][i] = side(b.Compression[i], -1)
}

// bar adds a bar of a problem with several cases: a column for its area and a row a case for its strength.
func (m *model) bar(i int) {
	b := &m.p.Bars
	area := m.column(0, b.Upper[i]*m.strength[i]/m.force, b.Cost[i]*m.force/m.strength[i]/m.cost)
	m.area[i] = area
	for k := range m.p.Cases {
		m.push(i, k, area, 0, 1/m.strength[i])
		limit := m.row(math.Inf(-1), 0)
		m.entry(limit, area, -1)
		side := func(strength, sign float64) int32 {
			if strength == 0 {
				return 0
			}
			col := m.column(0, math.Inf(1), 0)
			m.push(i, k, col, sign, 0)
			m.entry(limit, col, m.strength[i]/strength)
			return col
		}
		m.tension[k][i] = side(b.Tension[i], 1)
		m.compress[k][i] = side(b.Compression[i], -1)
	}
}

// artificial makes an elastic program of m.
func (m *model) artificial() {
	for j := range m.colCost {
		m.colCost[j] = 0
	}
	for k := range m.p.Cases {
		for r := range m.p.Rows {
			for _, sign := range [2]float64{1, -1} {
				m.entry(m.balance(k, int32(r)), m.column(0, math.Inf(1), 1), sign)
			}
		}
	}
}
