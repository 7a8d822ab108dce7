package lptest

import (
	"math"
	"math/rand/v2"

	"boughwork/lp"
)

func newRand(seed uint64) *rand.Rand { return rand.New(rand.NewPCG(seed, 0x626f756768)) }

// randomProblem returns a problem that has an equilibrium: every free node has unlimited bars to feet in general
// position. Everything else is by chance: two or three dimensions, one to four cases, strengths, joint cost, weight,
// loads that are missing; if trimmings, also bars that only pull or only push, limited and kept bars, and reactions.
func randomProblem(seed uint64, nodes int, trimmings bool) *lp.Problem {
	r := newRand(seed)
	dim := 2 + r.IntN(2)
	t := newTruss(dim, 0.2+r.Float64(), 0.2+r.Float64())
	if r.IntN(2) == 0 {
		t.joint = 0.3 * r.Float64()
	}
	if r.IntN(2) == 0 {
		t.weight = 0.02 * r.Float64()
	}
	corners := [][]float64{{0, 0}, {4, 0}}
	if dim == 3 {
		corners = [][]float64{{0, 0, 0}, {4, 0, 0}, {0, 4, 0}, {4, 4, 0}}
	}
	for _, c := range corners {
		t.foot(c...)
	}
	for range nodes {
		x := []float64{4 * r.Float64(), 4 * r.Float64(), 4 * r.Float64()}[:dim]
		x[dim-1] = 1 + 0.5*x[dim-1]
		t.node(x...)
	}
	bars(t, r, trimmings)
	for range 1 + r.IntN(4) {
		var loads []load
		for n := len(corners); n < len(t.at); n++ {
			if r.IntN(3) > 0 {
				loads = append(loads, on(n, r.NormFloat64(), r.NormFloat64(), r.NormFloat64()))
			}
		}
		t.with(float64(r.IntN(3)), loads...)
	}
	return t.p
}

// bars adds all bars: unlimited ones to the feet, and others between nodes.
func bars(t *truss, r *rand.Rand, trimmings bool) {
	st, sc := t.st, t.sc
	for j := range t.at {
		for i := range j {
			if t.row[j][0] < 0 { // both feet
				continue
			}
			if t.row[i][0] < 0 || !trimmings {
				t.bar(i, j)
				continue
			}
			switch r.IntN(8) {
			case 0:
				t.st = 0
				t.bar(i, j)
			case 1:
				t.sc = 0
				t.bar(i, j)
			case 2:
				t.limited(i, j, r.Float64())
			case 3:
				t.kept(i, j, r.Float64())
			case 4: // twice, as a bar is that stands already and may be strengthened
				t.kept(i, j, r.Float64())
				t.bar(i, j)
			default:
				t.bar(i, j)
			}
			t.st, t.sc = st, sc
		}
	}
	if !trimmings {
		return
	}
	for n := range t.at { // a prop or a hold here and there
		if t.row[n][0] < 0 {
			continue
		}
		switch r.IntN(6) {
		case 0:
			t.stand(n, 0, math.Inf(1), 0, 1, true)
		case 1:
			t.stand(n, 0.5*r.Float64(), r.Float64(), 0, 1, true)
		case 2:
			t.stand(n, 1, 1, 3*r.Float64()+0.1, math.Inf(1), false)
		}
	}
}
