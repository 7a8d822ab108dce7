package export

import (
	"math"
	"sort"

	"boughwork/geom"
)

// principalAxes returns the axes of the rectangle of least area round some places in plan, u along its longer side. Of
// the two ways that u can point it takes the one nearer to east, so that north stays as far up on the sheet as it can; a
// square is turned by 45 degrees at most.
func principalAxes(places []geom.Vec) axes {
	hull := convexHull(places)
	if len(hull) == 0 {
		return axes{cos: 1}
	}
	best, bestArea := axes{centre: hull[0], cos: 1}, math.Inf(1)
	for i := range hull {
		j := (i + 1) % len(hull)
		d := hull[j].Sub(hull[i])
		l := math.Hypot(d.X, d.Y)
		if l == 0 {
			continue
		}
		a := axes{cos: d.X / l, sin: d.Y / l}
		e := planExtent(a, hull)
		// A later side must be clearly better, so that rounding does not choose among equals.
		if area := e.w() * e.h(); area < bestArea*(1-equalShare)-equalShare {
			bestArea, best = area, a.settled(e)
		}
	}
	e := planExtent(axes{cos: best.cos, sin: best.sin}, hull)
	u, v := (e.x0+e.x1)/2, (e.y0+e.y1)/2
	best.centre = geom.Vec{X: best.cos*u - best.sin*v, Y: best.sin*u + best.cos*v}
	return best
}

// equalShare is the share by which two lengths or areas may differ and still count as equal: far above rounding and
// far below what can be drawn.
const equalShare = 1e-6

// settled turns axes by quarters so that u runs along the longer side of the extent and points east rather than west.
func (a axes) settled(e extent) axes {
	quarter := axes{cos: -a.sin, sin: a.cos}
	switch {
	case math.Abs(e.w()-e.h()) <= equalShare*e.w():
		if math.Abs(quarter.cos) > math.Abs(a.cos)+equalShare {
			a = quarter
		}
	case e.h() > e.w():
		a = quarter
	}
	if a.cos < -equalShare || math.Abs(a.cos) <= equalShare && a.sin < 0 {
		a.cos, a.sin = -a.cos, -a.sin
	}
	if math.Abs(a.sin) <= equalShare {
		a.cos, a.sin = 1, 0
	}
	return a
}

func planExtent(a axes, places []geom.Vec) extent {
	e := emptyExtent()
	for _, p := range places {
		q := a.to(p)
		e.take(q.X, q.Y)
	}
	return e
}

// convexHull returns the corners of the convex hull in plan, anticlockwise (Andrew 1979, monotone chain).
func convexHull(places []geom.Vec) []geom.Vec {
	ps := append([]geom.Vec(nil), places...)
	sort.SliceStable(ps, func(i, j int) bool { return ps[i].X < ps[j].X || ps[i].X == ps[j].X && ps[i].Y < ps[j].Y })
	turn := func(a, b, c geom.Vec) float64 { return (b.X-a.X)*(c.Y-a.Y) - (b.Y-a.Y)*(c.X-a.X) }
	var hull []geom.Vec
	half := func(from int, p geom.Vec) {
		for len(hull) >= from+2 && turn(hull[len(hull)-2], hull[len(hull)-1], p) <= 0 {
			hull = hull[:len(hull)-1]
		}
		hull = append(hull, p)
	}
	for _, p := range ps {
		half(0, p)
	}
	lower := len(hull) - 1
	for i := len(ps) - 2; i >= 0; i-- {
		half(lower, ps[i])
	}
	if len(hull) > 1 {
		hull = hull[:len(hull)-1]
	}
	return hull
}
