package export

import (
	"math"
	"sort"

	"boughwork/geom"
)

// The record has the outline of a roof and its nodes, but not its surface. For the drawing the surface is the Delaunay
// triangulation of the nodes and the corners in plan, without the triangles outside the outline.

const (
	// meshLimit bounds the places of a mesh: beyond, the outline alone is drawn. The method takes their number squared.
	meshLimit = 6000
	// meshJitter moves places by that share of the extent before they are triangulated, so that no four lie on one circle
	// as on every grid; far less than can be drawn, far more than rounding.
	meshJitter = 1e-7
	// sliver is the height of a triangle as a share of its longest side under which it is left out: along the outline the
	// jitter makes such triangles between places in line.
	sliver = 1e-3
)

// triangle holds three places by index.
type triangle [3]int

// roofMesh returns the triangles between places that lie inside the rings, and the border of these triangles.
func roofMesh(places []geom.Vec, rings [][]geom.Vec) (triangles []triangle, border [][2]int) {
	if len(places) < 3 || len(places) > meshLimit {
		return nil, nil
	}
	for _, t := range delaunay(places) {
		a, b, c := places[t[0]], places[t[1]], places[t[2]]
		if thin(a, b, c) || !inside(rings, (a.X+b.X+c.X)/3, (a.Y+b.Y+c.Y)/3) {
			continue
		}
		triangles = append(triangles, t)
	}
	edges := map[[2]int]int{}
	for _, t := range triangles {
		for i := range t {
			edges[edgeOf(t[i], t[(i+1)%3])]++
		}
	}
	for e, n := range edges {
		if n == 1 {
			border = append(border, e)
		}
	}
	sort.Slice(border, func(i, j int) bool {
		return border[i][0] < border[j][0] || border[i][0] == border[j][0] && border[i][1] < border[j][1]
	})
	return triangles, border
}

func edgeOf(a, b int) [2]int { return [2]int{min(a, b), max(a, b)} }

// inside reports whether a place lies in the rings by the even-odd rule.
func inside(rings [][]geom.Vec, x, y float64) bool {
	in := false
	for _, r := range rings {
		in = in != inRing(r, x, y)
	}
	return in
}

func thin(a, b, c geom.Vec) bool {
	longest := 0.0
	for _, d := range []geom.Vec{b.Sub(a), c.Sub(b), a.Sub(c)} {
		longest = math.Max(longest, math.Hypot(d.X, d.Y))
	}
	return math.Abs(ringArea([]geom.Vec{a, b, c}))*2 < sliver*longest*longest
}

// delaunay triangulates places in plan (Bowyer 1981 and Watson 1981: each place takes away the triangles whose circle it
// lies in, and is joined to the border of the hole).
func delaunay(places []geom.Vec) []triangle {
	e := emptyExtent()
	for _, p := range places {
		e.take(p.X, p.Y)
	}
	size := math.Max(math.Max(e.w(), e.h()), 1e-9)
	n := len(places)
	xy := make([]pt, n, n+3)
	for i, p := range places {
		// Two sequences of the golden ratio and its like: the same jitter every time.
		xy[i] = pt{p.X + meshJitter*size*jitter(i, 0.6180339887498949), p.Y + meshJitter*size*jitter(i, 0.7548776662466927)}
	}
	cx, cy := (e.x0+e.x1)/2, (e.y0+e.y1)/2
	xy = append(xy, pt{cx - 30*size, cy - 20*size}, pt{cx + 30*size, cy - 20*size}, pt{cx, cy + 40*size})
	live := []circumscribed{circled(xy, triangle{n, n + 1, n + 2})}
	for i := range n {
		var hole [][2]int
		kept := live[:0]
		for _, t := range live {
			if math.Hypot(xy[i].x-t.centre.x, xy[i].y-t.centre.y) < t.radius {
				hole = append(hole, [2]int{t.t[0], t.t[1]}, [2]int{t.t[1], t.t[2]}, [2]int{t.t[2], t.t[0]})
			} else {
				kept = append(kept, t)
			}
		}
		live = kept
		for _, edge := range onceOnly(hole) {
			live = append(live, circled(xy, triangle{edge[0], edge[1], i}))
		}
	}
	var out []triangle
	for _, t := range live {
		if t.t[0] < n && t.t[1] < n && t.t[2] < n {
			out = append(out, t.t)
		}
	}
	return out
}

func jitter(i int, ratio float64) float64 {
	_, f := math.Modf(float64(i+1) * ratio)
	return f - 0.5
}

// circumscribed is a triangle with its circle.
type circumscribed struct {
	t      triangle
	centre pt
	radius float64
}

func circled(xy []pt, t triangle) circumscribed {
	a, b, c := xy[t[0]], xy[t[1]], xy[t[2]]
	bx, by, cx, cy := b.x-a.x, b.y-a.y, c.x-a.x, c.y-a.y
	d := 2 * (bx*cy - by*cx)
	if d == 0 {
		return circumscribed{t, a, math.Inf(1)}
	}
	ux := (cy*(bx*bx+by*by) - by*(cx*cx+cy*cy)) / d
	uy := (bx*(cx*cx+cy*cy) - cx*(bx*bx+by*by)) / d
	return circumscribed{t, pt{a.x + ux, a.y + uy}, math.Hypot(ux, uy)}
}

// onceOnly returns the edges that no second triangle has, in the order in which they came.
func onceOnly(edges [][2]int) (out [][2]int) {
	count := map[[2]int]int{}
	for _, e := range edges {
		count[edgeOf(e[0], e[1])]++
	}
	for _, e := range edges {
		if count[edgeOf(e[0], e[1])] == 1 {
			out = append(out, e)
		}
	}
	return out
}
