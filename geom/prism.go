package geom

import "github.com/paulmach/orb"

// NoLimit stands for a height without limit in a Prism that was read from a site: -NoLimit as From, +NoLimit as To, m.
// It is beyond every height that a site may hold, and unlike an infinity it can be written to a file.
const NoLimit = 10000.0

// EnterTolerance is how deep a bar must be inside a prism to count as entering it, m. A position with eight decimals of
// a degree is rounded by up to 0.8 mm, so zones that share an edge on the plan may overlap by that much; a bar that is
// a millimetre inside is on the face for every practical purpose.
const EnterTolerance = 1e-3

// Enters reports whether the segment a-b has a point that is inside the prism and further than EnterTolerance from every
// face. Touching a face, running along an edge and standing on a corner do not count; a segment wholly inside does, and
// so does a point (a = b). From and To may be infinite. The answer is the same for b-a. NewObstacles prepares many
// prisms for many segments.
func (p Prism) Enters(a, b Vec) bool {
	q, ok := prepare(p)
	return ok && q.enters(a, b)
}

// Contains reports whether a place is inside the prism or on its boundary, within BoundaryTolerance.
func (p Prism) Contains(v Vec) bool {
	return v.Z >= p.From-BoundaryTolerance && v.Z <= p.To+BoundaryTolerance && ContainsPoint(p.Polygon, orb.Point{v.X, v.Y})
}

// Obstacles is a set of prisms that no bar may enter, prepared for many questions. It does not change after
// NewObstacles and may be used by many goroutines at once.
type Obstacles struct {
	boxes  []box
	prisms []solid
}

// NewObstacles prepares prisms. Prisms thinner than twice EnterTolerance cannot be entered and are left out.
func NewObstacles(ps []Prism) *Obstacles {
	o := &Obstacles{}
	for _, p := range ps {
		if q, ok := prepare(p); ok {
			o.boxes = append(o.boxes, q.inner)
			o.prisms = append(o.prisms, q)
		}
	}
	return o
}

// Blocked reports whether the segment a-b enters any of the prisms, in the sense of Prism.Enters.
func (o *Obstacles) Blocked(a, b Vec) bool {
	lo, hi := spanOf(a, b)
	for i := range o.boxes {
		if o.boxes[i].meets(lo, hi) && o.prisms[i].enters(a, b) {
			return true
		}
	}
	return false
}

// BlockedAt reports whether a place is inside any of the prisms and off its faces: where no node may be.
func (o *Obstacles) BlockedAt(v Vec) bool { return o.Blocked(v, v) }

// Envelope is a set of prisms in whose union bars must lie, prepared for many questions. It does not change after
// NewEnvelope and may be used by many goroutines at once.
type Envelope struct{ prisms []solid }

// NewEnvelope prepares prisms. An envelope of no prisms is no limit: it contains every segment.
func NewEnvelope(ps []Prism) *Envelope {
	e := &Envelope{}
	for _, p := range ps {
		q, _ := prepare(p)
		e.prisms = append(e.prisms, q)
	}
	return e
}

// Contains reports whether every point of the segment a-b is inside one of the prisms or within EnterTolerance of it,
// so that a bar may run along a face and from one prism into its neighbour.
func (e *Envelope) Contains(a, b Vec) bool {
	if len(e.prisms) == 0 {
		return true
	}
	for i := range e.prisms {
		if e.prisms[i].convex && e.prisms[i].holds(a) && e.prisms[i].holds(b) {
			return true
		}
	}
	var room [stackIntervals]interval
	covered := room[:0]
	for i := range e.prisms {
		covered = e.prisms[i].cover(covered, a, b)
	}
	return covers(covered)
}

// InsideEnvelope reports whether the whole segment a-b lies in the union of prisms, boundary allowed. No prisms are no
// limit. See Envelope for many questions about the same prisms.
func InsideEnvelope(prisms []Prism, a, b Vec) bool { return NewEnvelope(prisms).Contains(a, b) }
