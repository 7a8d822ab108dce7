package geom

import (
	"math"

	"github.com/paulmach/orb"
)

// roofAboveGround reports a roof that is not above the places where it can stand: wholly below all of them, or at or
// below a foot that is under it. A foot outside the plan may be higher than the roof, as on a slope.
func (rd *siteReader) roofAboveGround() {
	ground := rd.ground()
	for i, r := range rd.site.Roofs {
		var rings [][]Vec
		for _, g := range r.Regions {
			rings = append(rings, g.Rings...)
		}
		if h := heights(rings...); h.lo <= ground.lo {
			remedy := "check its heights"
			if h.lo == 0 && h.hi == 0 {
				remedy = "give it heights: a third number in each position, elevation_m, or a roof surface in the brief"
			}
			rd.issues.Add(Error, r.Name, rd.roofAt[i], "the roof is below ground: its lowest place is at %.3g m and the lowest foot at %.3g m; %s", h.lo, ground.lo, remedy)
			continue
		}
		rd.feetUnder(r)
	}
}

// feetUnder reports the first foot of each zone and wall that is under a roof and not below it.
func (rd *siteReader) feetUnder(r Roof) {
	check := func(name, path string, places []Vec) {
		for _, v := range places {
			if z := r.Surface.Height(v.X, v.Y); z <= v.Z && r.covers(v) {
				rd.issues.Add(Error, name, path, "the roof %s is at %.3g m above the foot at %s, which is at %.3g m; raise the roof or lower the foot",
					r.Name, z, rd.inWords(orb.Point{v.X, v.Y}), v.Z)
				return
			}
		}
	}
	for i, z := range rd.site.Footings {
		check(z.Name, rd.footAt[i], z.places())
	}
	for i, w := range rd.site.Walls {
		check(w.Name, rd.wallAt[i], w.Points)
	}
}

// covers reports whether a place is under the plan of a roof.
func (r Roof) covers(v Vec) bool {
	for _, g := range r.Regions {
		if ContainsPoint(g.Polygon(), orb.Point{v.X, v.Y}) {
			return true
		}
	}
	return false
}

// footings warns of footings that can hardly be meant.
func (rd *siteReader) footings() {
	for i, z := range rd.site.Footings {
		rd.underNothing(z, rd.footAt[i])
		for _, k := range rd.site.KeepClear {
			if swallows(k, z) {
				rd.issues.Add(Warning, z.Name, rd.footAt[i], "the keep-clear %s covers all of this footing, so that no bar can leave it; move one of them, or let the keep-clear begin higher", k.Name)
			}
		}
	}
}

// underNothing warns of a zone that is farther outside the plan of every roof than the roof is high.
func (rd *siteReader) underNothing(z Zone, path string) {
	low := heights(z.places()).lo
	best, rise := math.Inf(1), 0.0
	for _, r := range rd.site.Roofs {
		for _, g := range r.Regions {
			d, high := z.distance(g.Polygon()), heights(g.Rings...).hi-low
			if d <= high {
				return
			}
			if d < best {
				best, rise = d, high
			}
		}
	}
	rd.issues.Add(Warning, z.Name, path, "the footing is under nothing: it is %.1f m outside the nearest roof, which is %.1f m above it; check its place", best, rise)
}

// shapes returns the plan of a zone as polygons with closed rings, lines and points among them.
func (z Zone) shapes() (out []orb.Polygon) {
	for _, r := range z.Regions {
		out = append(out, r.Polygon())
	}
	for _, l := range z.Lines {
		// There and back: a line is a ring without an inside.
		var ring orb.Ring
		for _, v := range l {
			ring = append(ring, orb.Point{v.X, v.Y})
		}
		for i := len(l) - 2; i >= 0; i-- {
			ring = append(ring, ring[i])
		}
		out = append(out, orb.Polygon{ring})
	}
	for _, v := range z.Points {
		at := orb.Point{v.X, v.Y}
		out = append(out, orb.Polygon{{at, at}})
	}
	return out
}

// distance returns the distance on the plan between a zone and a polygon, 0 if they meet.
func (z Zone) distance(p orb.Polygon) float64 {
	best := math.Inf(1)
	for _, s := range z.shapes() {
		best = math.Min(best, polygonDistance(s, p))
	}
	return best
}

// polygonDistance returns the distance between two polygons, 0 if they meet. The shortest way begins at a corner of one
// of them unless edges cross.
func polygonDistance(p, q orb.Polygon) float64 {
	best := math.Inf(1)
	for range 2 {
		for _, ring := range p {
			for i, a := range ring {
				best = math.Min(best, DistanceToPolygon(q, a))
				if best == 0 {
					return 0
				}
				b := ring[(i+1)%len(ring)]
				for _, other := range q {
					for j := 0; j+1 < len(other); j++ {
						if how, _ := meet(a, b, other[j], other[j+1]); how != apart {
							return 0
						}
					}
				}
			}
		}
		p, q = q, p
	}
	return best
}

// swallows reports whether a keep-clear prism covers a whole zone on the plan and reaches from its feet upwards.
func swallows(k Prism, z Zone) bool {
	for _, v := range z.places() {
		if v.Z < k.From || v.Z >= k.To || !ContainsPoint(k.Polygon, orb.Point{v.X, v.Y}) {
			return false
		}
	}
	for _, s := range z.shapes() {
		if !within(s, k.Polygon) {
			return false
		}
	}
	return true
}
