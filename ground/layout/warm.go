package layout

import (
	"slices"

	"boughwork/lp"
)

// warm is where the next round may start: the last round's point, with the bars that it is for.
type warm struct {
	cases []int
	at    map[int64]int // place of every pair
	bars  int           // how many pairs
	point *lp.Start
}

// keep remembers the point of a solution.
func (w *warm) keep(st *study, cases []int, sol *lp.Solution) {
	if sol.Warm == nil {
		return
	}
	*w = warm{cases: cases, at: make(map[int64]int, len(st.active.pairs)), bars: len(st.active.pairs), point: sol.Warm}
	for i, p := range st.active.pairs {
		w.at[p.key()] = i
	}
}

// start carries the point over to the bars that are in the program now; a new bar starts without force. It returns nil
// if there is no point for these cases.
func (w *warm) start(st *study, cases []int) *lp.Start {
	if w.point == nil || !slices.Equal(w.cases, cases) {
		return nil
	}
	tail := len(w.point.Area) - w.bars // kept members and feet
	n := len(st.active.pairs)
	from := make([]int, n+tail)
	for i, p := range st.active.pairs {
		from[i] = -1
		if j, ok := w.at[p.key()]; ok {
			from[i] = j
		}
	}
	for i := range tail {
		from[n+i] = w.bars + i
	}
	pick := func(x []float64) []float64 {
		out := make([]float64, len(from))
		for i, j := range from {
			if j >= 0 {
				out[i] = x[j]
			}
		}
		return out
	}
	s := &lp.Start{Area: pick(w.point.Area), Displacement: w.point.Displacement}
	for _, q := range w.point.Force {
		s.Force = append(s.Force, pick(q))
	}
	return s
}

// seed prepares a start for a program with more cases: the areas and forces of a layout over few bars that knows them all,
// and the displacements of the last point, zero for a case that is new: both are feasible, and as far apart as the new
// cases make the layout dearer.
func (w *warm) seed(st *study, t trimmed, cases []int) {
	if w.point == nil {
		return
	}
	place := make(map[int64]int, len(t.pairs))
	for i, p := range t.pairs {
		place[p.key()] = i
	}
	spread := func(x []float64) []float64 {
		out := make([]float64, 0, len(st.active.pairs)+len(x)-len(t.pairs))
		for _, p := range st.active.pairs {
			v := 0.0
			if i, ok := place[p.key()]; ok {
				v = x[i]
			}
			out = append(out, v)
		}
		return append(out, x[len(t.pairs):]...)
	}
	point := &lp.Start{Area: spread(t.sol.Area)}
	for _, k := range cases {
		i := slices.Index(t.cases, k)
		if i < 0 {
			return
		}
		point.Force = append(point.Force, spread(t.sol.Force[i]))
		u := make([]float64, len(t.sol.Displacement[i]))
		if j := slices.Index(w.cases, k); j >= 0 {
			copy(u, w.point.Displacement[j])
		}
		point.Displacement = append(point.Displacement, u)
	}
	at := make(map[int64]int, len(st.active.pairs))
	for i, p := range st.active.pairs {
		at[p.key()] = i
	}
	*w = warm{cases: cases, at: at, bars: len(st.active.pairs), point: point}
}
