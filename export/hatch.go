package export

import (
	"math"
	"sort"
)

// hatch returns parallel lines at 45 degrees inside closed rings on the sheet (even-odd rule), step mm apart. The lines
// of all shapes of a sheet lie on one lattice, so that neighbours match.
func hatch(rings [][]pt, step float64) (lines [][]pt) {
	// In the turned system s runs along the lines and t across them.
	type edge struct{ s0, t0, s1, t1 float64 }
	var edges []edge
	lo, hi := math.Inf(1), math.Inf(-1)
	for _, ring := range rings {
		for i, a := range ring {
			b := ring[(i+1)%len(ring)]
			e := edge{(a.x - a.y) / math.Sqrt2, (a.x + a.y) / math.Sqrt2, (b.x - b.y) / math.Sqrt2, (b.x + b.y) / math.Sqrt2}
			edges = append(edges, e)
			lo, hi = math.Min(lo, e.t0), math.Max(hi, e.t0)
		}
	}
	for k := math.Ceil(lo / step); k*step < hi; k++ {
		t := k * step
		var cuts []float64
		for _, e := range edges {
			if (e.t0 > t) != (e.t1 > t) {
				cuts = append(cuts, e.s0+(t-e.t0)/(e.t1-e.t0)*(e.s1-e.s0))
			}
		}
		sort.Float64s(cuts)
		for i := 0; i+1 < len(cuts); i += 2 {
			lines = append(lines, []pt{turnedBack(cuts[i], t), turnedBack(cuts[i+1], t)})
		}
	}
	return lines
}

func turnedBack(s, t float64) pt { return pt{(s + t) / math.Sqrt2, (t - s) / math.Sqrt2} }

// clipRing cuts a ring on the sheet to a box (Sutherland and Hodgman 1974). A result in several parts comes as one ring
// joined along the edge of the box, which is right for filling.
func clipRing(ring []pt, b box) []pt {
	sides := []func(p pt) float64{
		func(p pt) float64 { return p.x - b.x0 }, func(p pt) float64 { return b.x1 - p.x },
		func(p pt) float64 { return p.y - b.y0 }, func(p pt) float64 { return b.y1 - p.y },
	}
	for _, in := range sides {
		var out []pt
		for i, p := range ring {
			q := ring[(i+1)%len(ring)]
			dp, dq := in(p), in(q)
			if dp >= 0 {
				out = append(out, p)
			}
			if (dp >= 0) != (dq >= 0) {
				t := dp / (dp - dq)
				out = append(out, pt{p.x + t*(q.x-p.x), p.y + t*(q.y-p.y)})
			}
		}
		ring = out
	}
	if len(ring) < 3 {
		return nil
	}
	return ring
}

// clipRings cuts rings to a box and drops what is left of nothing.
func clipRings(rings [][]pt, b box) (out [][]pt) {
	for _, r := range rings {
		if r = clipRing(r, b); r != nil {
			out = append(out, r)
		}
	}
	return out
}
