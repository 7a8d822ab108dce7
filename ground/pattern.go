package ground

import (
	"slices"

	"boughwork/geom"
)

// signed is a cell that counts with a sign.
type signed struct {
	sign float64
	cell cell
}

// mask returns a function that cuts a cell down to what a pattern keeps. A polygon of any shape is the sum of the signed
// triangles from its first corner to each edge, so that areas and moments come out right though it may be concave.
func (d *deck) mask(p Pattern) func(cell) []signed {
	var side []half
	if p.Half != nil {
		side = append(side, d.halfPlane(*p.Half))
	}
	fan := []struct {
		sign  float64
		inner []half
	}{{1, nil}}
	if len(p.Polygon) > 0 {
		fan = fan[:0]
		o := d.local(p.Polygon)
		whole := o.about(o[0]).area
		for i := 1; i+1 < len(o); i++ {
			t, s := ring{o[0], o[i], o[i+1]}, 1.0
			a := t.about(o[0]).area
			if a == 0 {
				continue
			}
			if a < 0 {
				t = ring{o[0], o[i+1], o[i]}
			}
			if (a < 0) != (whole < 0) {
				s = -1
			}
			fan = append(fan, struct {
				sign  float64
				inner []half
			}{s, t.halves()})
		}
	}
	return func(c cell) []signed {
		var out []signed
		if c = c.cut(side...); c.ring == nil {
			return nil
		}
		for _, t := range fan {
			if k := c.cut(t.inner...); k.ring != nil {
				out = append(out, signed{t.sign, k})
			}
		}
		return out
	}
}

// halfPlane returns the half-plane of a pattern.
func (d *deck) halfPlane(h HalfPlane) half {
	x, y := geom.Towards(h.Bearing)
	n := pt{-x, -y}
	t := d.centroid()
	if h.Through != nil {
		t = pt{h.Through[0] - d.origin.X, h.Through[1] - d.origin.Y}
	}
	return half{n, n[0]*t[0] + n[1]*t[1]}
}

// centroid returns the centre of area of the roof's plan.
func (d *deck) centroid() pt {
	var s integrals
	for _, a := range d.areas {
		for _, r := range a {
			s = s.add(1, r.about(pt{}))
		}
	}
	return pt{s.mx / s.area, s.my / s.area}
}

// local returns places of the site from the deck's origin.
func (d *deck) local(ps [][2]float64) ring {
	out := make(ring, len(ps))
	for i, p := range ps {
		out[i] = pt{p[0] - d.origin.X, p[1] - d.origin.Y}
	}
	return out
}

// stretch is a part of a segment, in shares of its length.
type stretch struct{ from, to float64 }

// stretches returns the parts of the segment a b that a pattern keeps.
func (d *deck) stretches(p Pattern, a, b pt) []stretch {
	out := []stretch{{0, 1}}
	at := func(t float64) pt { return pt{a[0] + t*(b[0]-a[0]), a[1] + t*(b[1]-a[1])} }
	cut := func(cuts []float64, keep func(pt) bool) {
		cuts = append(cuts, 0, 1)
		slices.Sort(cuts)
		var kept []stretch
		for _, s := range out {
			for i := 0; i+1 < len(cuts); i++ {
				lo, hi := max(cuts[i], s.from), min(cuts[i+1], s.to)
				if hi > lo && keep(at((lo+hi)/2)) {
					kept = append(kept, stretch{lo, hi})
				}
			}
		}
		out = kept
	}
	if p.Half != nil {
		h := d.halfPlane(*p.Half)
		side := func(q pt) float64 { return h.n[0]*q[0] + h.n[1]*q[1] - h.d }
		cut(crossing(side(a), side(b)), func(q pt) bool { return side(q) <= 0 })
	}
	if len(p.Polygon) > 0 {
		o := d.local(p.Polygon)
		var cuts []float64
		for i, q := range o {
			r := o[(i+1)%len(o)]
			side := func(s pt) float64 { return (r[0]-q[0])*(s[1]-q[1]) - (r[1]-q[1])*(s[0]-q[0]) }
			cuts = append(cuts, crossing(side(a), side(b))...)
		}
		cut(cuts, o.contains)
	}
	return out
}

// crossing returns where a linear function with values a and b at the ends is zero between them.
func crossing(a, b float64) []float64 {
	if (a < 0) == (b < 0) {
		return nil
	}
	if t := a / (a - b); t > 0 && t < 1 {
		return []float64{t}
	}
	return nil
}
