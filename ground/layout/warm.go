package layout

import (
	"slices"

	"boughwork/lp"
)

// warm is where the next round may start: the last round's point, with the bars that it is for.
type warm struct {
	cases []int
	pairs []pair // that it is over
	point *lp.Start
}

// keep remembers the point of a solution.
func (w *warm) keep(st *study, cases []int, sol *lp.Solution) {
	if sol.Warm == nil {
		return
	}
	w.remember(st, cases, sol.Warm)
}

// remember sets the point, which is over the bars that are in the program now.
func (w *warm) remember(st *study, cases []int, point *lp.Start) {
	*w = warm{cases: cases, pairs: slices.Clone(st.active.pairs), point: point} // adding bars sorts the list in place
}

// start carries the point over to the bars that are in the program now; a new bar starts without force. It returns nil
// if there is no point for these cases.
func (w *warm) start(st *study, cases []int) *lp.Start {
	if w.point == nil || !slices.Equal(w.cases, cases) {
		return nil
	}
	s := &lp.Start{Area: onto(st.active.pairs, w.pairs, w.point.Area), Displacement: w.point.Displacement}
	for _, q := range w.point.Force {
		s.Force = append(s.Force, onto(st.active.pairs, w.pairs, q))
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
	point := &lp.Start{Area: onto(st.active.pairs, t.pairs, t.sol.Area)}
	for _, k := range cases {
		i := slices.Index(t.cases, k)
		if i < 0 {
			return
		}
		point.Force = append(point.Force, onto(st.active.pairs, t.pairs, t.sol.Force[i]))
		u := make([]float64, len(t.sol.Displacement[i]))
		if j := slices.Index(w.cases, k); j >= 0 {
			copy(u, w.point.Displacement[j])
		}
		point.Displacement = append(point.Displacement, u)
	}
	w.remember(st, cases, point)
}
