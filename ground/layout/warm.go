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
