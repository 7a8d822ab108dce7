package export

import (
	"encoding/json"
	"io"
	"math"

	"boughwork/geom"
	"boughwork/ground/layout"
)

// Overlay writes overlay.geojson: the result on the site plan, as GeoJSON by RFC 7946 in longitude and latitude on WGS 84
// with heights in metres. The property kind says what a feature is:
//
//	roof, wall, footing        the site as it came; polygons, lines or points with heights
//	keep-clear, envelope       the plan of a prism, without heights; from_m and to_m say where it stands
//	foot, wall support, roof support
//	                           a supported node with its reactions: arrays in the order of the cases, and the largest
//	bar                        a line from joint to joint with its area, length and forces (tension is positive; the largest
//	                           compression is a positive number in its own property)
//	motion                     only where no layout exists: the path of a node in the collapse motion
//
// Marks are those of the tables and the sheet. The member cases names the cases in the order of all arrays. Outer rings run
// anticlockwise and holes clockwise; what crosses the antimeridian is cut there (RFC 7946, 3.1.6 and 3.1.9).
//
// A site that came in metres has no known place on the earth, so its longitudes and latitudes cannot be told. Such a
// record is written in the site's own metres, and the member coordinates_in carries the label of its coordinate system
// (RFC 7946, 4, has other coordinates by prior arrangement; most programs let the user assign the system when they open
// the file).
func Overlay(w io.Writer, rec *layout.Record) error {
	if err := check(rec); err != nil {
		return err
	}
	o := overlay{rec: rec, place: newPlacer(rec), marks: newMarks(rec)}
	o.context()
	o.supports()
	o.bars()
	o.motion()
	c := collection{Type: "FeatureCollection", Name: rec.Title, Cases: caseNames(rec),
		Note: "Preliminary, for exploring forms; not a design. Made by " + rec.MadeBy + ". Forces in kN, tension positive."}
	if !o.place.geographic {
		label := rec.Frame.CRS
		if label == "" {
			label = "metres of the site plan"
		}
		c.CoordinatesIn = &label
	}
	return c.write(w, o.out)
}

type overlay struct {
	rec   *layout.Record
	place placer
	marks marks
	out   []feature
}

func caseNames(rec *layout.Record) []string {
	names := make([]string, len(rec.Cases))
	for k, c := range rec.Cases {
		names[k] = c.Name
	}
	return names
}

func (o *overlay) add(id string, properties any, g geometry) {
	o.out = append(o.out, feature{ID: id, Properties: properties, Geometry: g})
}

type namedProperties struct {
	Kind string `json:"kind"`
	Name string `json:"name"`
}

type prismProperties struct {
	Kind  string      `json:"kind"`
	Name  string      `json:"name"`
	FromM json.Number `json:"from_m"`
	ToM   json.Number `json:"to_m"`
}

func (o *overlay) context() {
	c := o.rec.Context
	for _, list := range []struct {
		kind    string
		regions []layout.RecordRegion
	}{{"roof", c.Roof}, {"wall", c.Walls}, {"footing", c.Footings}} {
		for _, r := range list.regions {
			if g, ok := o.place.region(r); ok {
				o.add("", namedProperties{list.kind, r.Name}, g)
			}
		}
	}
	for _, list := range []struct {
		kind   string
		prisms []layout.RecordPrism
	}{{"keep-clear", o.rec.Candidates.KeepClear}, {"envelope", o.rec.Candidates.Envelope}} {
		for _, p := range list.prisms {
			if !finite(p.FromM, p.ToM) {
				continue // a prism without an end has no number to write
			}
			rings := make([][]geom.Vec, 0, 1+len(p.Holes))
			for _, ring := range append([][][2]float64{p.Ring}, p.Holes...) {
				rings = append(rings, o.place.flatRing(ring))
			}
			if g, ok := o.place.polygon(rings, true); ok {
				o.add("", prismProperties{list.kind, p.Name, number(p.FromM, lengthDecimals), number(p.ToM, lengthDecimals)}, g)
			}
		}
	}
}

type supportProperties struct {
	Kind          string        `json:"kind"`
	Mark          string        `json:"mark"`
	Zone          string        `json:"zone"`
	MaxDownKN     json.Number   `json:"max_down_kn"`
	MaxDownCase   string        `json:"max_down_case"`
	MaxUpliftKN   json.Number   `json:"max_uplift_kn"`
	MaxUpliftCase string        `json:"max_uplift_case"`
	MaxSideKN     json.Number   `json:"max_sideways_kn"`
	MaxSideCase   string        `json:"max_sideways_case"`
	RxKN          []json.Number `json:"rx_kn"`
	RyKN          []json.Number `json:"ry_kn"`
	RzKN          []json.Number `json:"rz_kn"`
}

// supports writes every supported node with the force of the support on the structure.
func (o *overlay) supports() {
	if len(o.rec.Bars) == 0 {
		return
	}
	reactions := Reactions(o.rec)
	zones := zoneNames(o.rec)
	for _, i := range o.marks.used {
		n := o.rec.Nodes[i]
		if !held(n) {
			continue
		}
		s := supportOf(o.rec, reactions, i, o.marks.node[i])
		p := supportProperties{Kind: supportKind(n.Role), Mark: o.marks.node[i], Zone: zones[i],
			MaxDownKN: number(s.down.KN, forceDecimals), MaxDownCase: s.down.Case,
			MaxUpliftKN: number(s.uplift.KN, forceDecimals), MaxUpliftCase: s.uplift.Case,
			MaxSideKN: number(s.sideways.KN, forceDecimals), MaxSideCase: s.sideways.Case,
			RxKN: []json.Number{}, RyKN: []json.Number{}, RzKN: []json.Number{}}
		for k := range o.rec.Cases {
			r := reactions[k][i]
			p.RxKN = append(p.RxKN, number(r.X, forceDecimals))
			p.RyKN = append(p.RyKN, number(r.Y, forceDecimals))
			p.RzKN = append(p.RzKN, number(r.Z, forceDecimals))
		}
		o.add(o.marks.node[i], p, o.place.point(at(o.rec, i)))
	}
}

func supportKind(role string) string {
	switch role {
	case "footing":
		return "foot"
	case "wall":
		return "wall support"
	case "roof":
		return "roof support"
	}
	return "support"
}

// support holds the largest reactions of a node over all cases.
type support struct{ down, uplift, sideways Extreme }

func supportOf(rec *layout.Record, reactions [][]geom.Vec, node int, mark string) (s support) {
	for k, c := range rec.Cases {
		r := reactions[k][node]
		s.down.take(math.Max(r.Z, 0), mark, c.Name)
		s.uplift.take(math.Max(-r.Z, 0), mark, c.Name)
		s.sideways.take(math.Hypot(r.X, r.Y), mark, c.Name)
	}
	return s
}

type barProperties struct {
	Kind               string        `json:"kind"`
	Mark               string        `json:"mark"`
	From               string        `json:"from"`
	To                 string        `json:"to"`
	LengthM            json.Number   `json:"length_m"`
	AreaM2             json.Number   `json:"area_m2"`
	SolidDiameterMM    json.Number   `json:"solid_diameter_mm"`
	State              State         `json:"state"`
	Kept               bool          `json:"kept"`
	MaxTensionKN       json.Number   `json:"max_tension_kn"`
	MaxTensionCase     string        `json:"max_tension_case"`
	MaxCompressionKN   json.Number   `json:"max_compression_kn"`
	MaxCompressionCase string        `json:"max_compression_case"`
	SizingCase         string        `json:"sizing_case"`
	ForcesKN           []json.Number `json:"forces_kn"`
}

// areaM2Decimals of m2: a hundredth of a square millimetre, as in the tables.
const areaM2Decimals = 8

func (o *overlay) bars() {
	name := func(k int) string {
		if k < 0 {
			return ""
		}
		return o.rec.Cases[k].Name
	}
	for i, b := range o.rec.Bars {
		e := extremesOf(b)
		p := barProperties{Kind: "bar", Mark: barMark(i), From: o.marks.node[b.Nodes[0]], To: o.marks.node[b.Nodes[1]],
			LengthM: number(lengthOf(o.rec, b), lengthDecimals), AreaM2: number(b.AreaM2, areaM2Decimals),
			SolidDiameterMM: number(solidDiameter(b.AreaM2), diameterDecimals), State: e.state(), Kept: b.Kept,
			MaxTensionKN: number(e.tension, forceDecimals), MaxTensionCase: name(e.tensionCase),
			MaxCompressionKN: number(e.compression, forceDecimals), MaxCompressionCase: name(e.compressionCase),
			SizingCase: name(sizingCase(o.rec, b)), ForcesKN: []json.Number{}}
		for _, q := range b.ForceKN {
			p.ForcesKN = append(p.ForcesKN, number(q, forceDecimals))
		}
		o.add(p.Mark, p, o.place.line([]geom.Vec{at(o.rec, b.Nodes[0]), at(o.rec, b.Nodes[1])}))
	}
}

type motionProperties struct {
	Kind   string      `json:"kind"`
	Case   string      `json:"case"`
	Node   int         `json:"node"`
	Loaded bool        `json:"loaded"`
	DxM    json.Number `json:"dx_m"`
	DyM    json.Number `json:"dy_m"`
	DzM    json.Number `json:"dz_m"`
}

// motion writes where the nodes go in the collapse motion, its largest component being 1 m.
func (o *overlay) motion() {
	c := o.rec.Collapse
	if c == nil {
		return
	}
	loaded := map[int]bool{}
	for _, i := range c.Nodes {
		loaded[i] = true
	}
	for i, m := range c.Motion {
		v := geom.FromArray(m)
		if v.Norm() < leastMotion {
			continue
		}
		p := motionProperties{"motion", c.Case, i, loaded[i], number(v.X, lengthDecimals), number(v.Y, lengthDecimals), number(v.Z, lengthDecimals)}
		o.add("", p, o.place.line([]geom.Vec{at(o.rec, i), at(o.rec, i).Add(v)}))
	}
}

// leastMotion is the share of the largest component (1 m) under which a node counts as at rest in the collapse motion:
// one hundredth cannot be seen in a drawing.
const leastMotion = 0.01
