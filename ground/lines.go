package ground

import (
	"cmp"
	"math"
	"slices"
)

const (
	// fitSlack is the share of a panel by which a length may be too long for a whole number of panels. Sites are drawn
	// to the centimetre; a roof of 40.01 m has ten panels of 4 m.
	fitSlack = 0.01
	// keepApart is the share of the spacing below which a grid point is dropped for the sake of a point of the outline,
	// and a grid line for the sake of another.
	keepApart = 0.4
	// edgeApart is the share of the spacing below which a grid point is too close to an edge of the outline.
	edgeApart = 0.25
	// breakLength is the share of the spacing above which an edge along the grid draws a grid line of its own.
	breakLength = 0.75
	// alongGrid is the slope (rise over run) below which an edge runs along the grid.
	alongGrid = 0.01
)

// panels returns the number of equal panels, each at most spacing long, that fit into a length.
func panels(length, spacing float64) int {
	return max(1, int(math.Ceil(length/spacing-fitSlack)))
}

// nearestParts returns the number of equal parts of a length that comes nearest to the spacing, as a ratio.
func nearestParts(length, spacing float64) int {
	n := max(1, int(length/spacing))
	if r := length / spacing; r > math.Sqrt(float64(n)*float64(n+1)) {
		n++
	}
	return n
}

// axis holds the grid lines across one axis of the grid.
type axis struct {
	breaks []float64 // lines that the outline asks for, ascending; the others are fitted between them
	parts  []int     // number of panels between one break and the next
	roof   []float64 // all lines for roof nodes, ascending
	inner  []float64 // lines for inner nodes, ascending; may reach beyond the roof
}

// fitAxis lays grid lines across axis k (0 or 1): one along every long edge that runs along the grid, the longest first,
// and one at each end of the outlines; between them panels of equal width, at most spacing wide. On a rectangle these are
// the bounding box fitted evenly; on an L-shape the lines also meet the inner corner.
func fitAxis(k int, roofs []area, spacing float64) axis {
	type line struct{ at, length float64 }
	var lines []line
	lo, hi := math.Inf(1), math.Inf(-1)
	for _, a := range roofs {
		for _, r := range a {
			l, h := r.box()
			lo, hi = math.Min(lo, l[k]), math.Max(hi, h[k])
			for i, p := range r {
				q := r[(i+1)%len(r)]
				across, along := math.Abs(q[k]-p[k]), math.Abs(q[1-k]-p[1-k])
				if along >= breakLength*spacing && across <= alongGrid*along {
					lines = append(lines, line{(p[k] + q[k]) / 2, along})
				}
			}
		}
	}
	slices.SortStableFunc(lines, func(a, b line) int { return cmp.Compare(b.length, a.length) })
	lines = append(lines, line{at: lo}, line{at: hi})
	var x axis
	for _, l := range lines {
		near := func(b float64) bool { return math.Abs(b-l.at) < keepApart*spacing }
		if !slices.ContainsFunc(x.breaks, near) {
			x.breaks = append(x.breaks, l.at)
		}
	}
	slices.Sort(x.breaks)
	for i, b := range x.breaks[:len(x.breaks)-1] {
		w := x.breaks[i+1] - b
		n := panels(w, spacing)
		x.parts = append(x.parts, n)
		for j := range n {
			x.roof = append(x.roof, tidied(b+w*float64(j)/float64(n)))
		}
	}
	x.roof = append(x.roof, tidied(x.breaks[len(x.breaks)-1]))
	return x
}

// fitInner lays the lines for inner nodes: the panels of the roof are halved, cut in three and so on, or taken together,
// whatever comes nearest to the spacing, so that every coarse line is a fine line too. Beyond the roof the lines go on
// as far as lo and hi.
func (x *axis) fitInner(spacing, lo, hi float64) {
	x.inner = nil
	at := 0
	for _, n := range x.parts {
		panel := (x.roof[at+n] - x.roof[at]) / float64(n)
		if k := nearestParts(panel, spacing); k > 1 || panel >= spacing {
			for i := range n {
				a, b := x.roof[at+i], x.roof[at+i+1]
				for j := range k {
					x.inner = append(x.inner, tidied(a+(b-a)*float64(j)/float64(k)))
				}
			}
		} else {
			m := min(n, nearestParts(panel*float64(n), spacing))
			for j := range m {
				x.inner = append(x.inner, x.roof[at+int(math.Round(float64(j*n)/float64(m)))])
			}
		}
		at += n
	}
	x.inner = append(x.inner, x.roof[at])
	if len(x.inner) < 2 {
		return
	}
	step := x.inner[1] - x.inner[0]
	for v := x.inner[0] - step; v >= lo-fitSlack*step; v -= step {
		x.inner = append([]float64{tidied(v)}, x.inner...)
	}
	step = x.inner[len(x.inner)-1] - x.inner[len(x.inner)-2]
	for v := x.inner[len(x.inner)-1] + step; v <= hi+fitSlack*step; v += step {
		x.inner = append(x.inner, tidied(v))
	}
}

// evenly returns n+1 numbers from a to b.
func evenly(a, b float64, n int) []float64 {
	out := make([]float64, n+1)
	for i := range out {
		out[i] = a + (b-a)*float64(i)/float64(n)
	}
	out[n] = b
	return out
}
