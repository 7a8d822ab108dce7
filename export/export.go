// Package export writes the files of a result, one format a file of this package, and each from a layout.Record alone:
// the overlay (GeoJSON), the tables (CSV) and the drawing sheet (SVG). Whoever holds layout.json can make them again.
//
// Units are those of the record: m, kN, MPa, m2, m3; where a file uses another, its name says so. Tension is positive.
// Same record, same bytes.
package export

import (
	"fmt"
	"math"

	"boughwork/ground/layout"
)

// check says what makes a record impossible to write down: indices out of range, lists of the wrong length, numbers that
// are not finite. A record that layout.Read returned has the right indices already; one that was just made need not.
func check(rec *layout.Record) error {
	for i, n := range rec.Nodes {
		if !finite(n.XYZ[:]...) {
			return fmt.Errorf("export: nodes[%d]: position %v is not finite", i, n.XYZ)
		}
	}
	for i, b := range rec.Bars {
		for _, n := range b.Nodes {
			if n < 0 || n >= len(rec.Nodes) {
				return fmt.Errorf("export: bars[%d]: node %d of %d", i, n, len(rec.Nodes))
			}
		}
		if len(b.ForceKN) != len(rec.Cases) {
			return fmt.Errorf("export: bars[%d]: %d forces for %d cases", i, len(b.ForceKN), len(rec.Cases))
		}
		if !finite(b.AreaM2) || b.AreaM2 < 0 || !finite(b.ForceKN...) {
			return fmt.Errorf("export: bars[%d]: area %v m2, forces %v kN: not finite or negative", i, b.AreaM2, b.ForceKN)
		}
	}
	if err := checkLoads(rec); err != nil {
		return err
	}
	if o := rec.Frame.OriginLonLat; o != nil && !(math.Abs(o[0]) <= 180 && math.Abs(o[1]) <= 90) {
		return fmt.Errorf("export: frame.origin_lonlat: %v is not a longitude and a latitude in degrees", *o)
	}
	if err := checkContext(rec); err != nil {
		return err
	}
	return checkCollapse(rec)
}

func checkLoads(rec *layout.Record) error {
	for k, c := range rec.Cases {
		if !finite(c.Gravity) {
			return fmt.Errorf("export: cases[%d]: gravity factor %v is not finite", k, c.Gravity)
		}
		for j, l := range c.Loads {
			if !finite(l[:]...) || l[0] < 0 || l[0] >= float64(len(rec.Nodes)) || l[0] != math.Trunc(l[0]) {
				return fmt.Errorf("export: cases[%d].loads[%d]: %v is not a node and a force", k, j, l)
			}
		}
	}
	return nil
}

func checkContext(rec *layout.Record) error {
	for _, list := range [][]layout.RecordRegion{rec.Context.Roof, rec.Context.Footings, rec.Context.Walls} {
		for _, r := range list {
			for _, ring := range r.Rings {
				for _, p := range ring {
					if !finite(p[:]...) {
						return fmt.Errorf("export: context: %s: position %v is not finite", r.Name, p)
					}
				}
			}
		}
	}
	for _, list := range [][]layout.RecordPrism{rec.Candidates.KeepClear, rec.Candidates.Envelope} {
		for _, p := range list {
			for _, ring := range append([][][2]float64{p.Ring}, p.Holes...) {
				for _, v := range ring {
					if !finite(v[:]...) {
						return fmt.Errorf("export: candidates: %s: position %v is not finite", p.Name, v)
					}
				}
			}
		}
	}
	return nil
}

func checkCollapse(rec *layout.Record) error {
	c := rec.Collapse
	if c == nil {
		return nil
	}
	if len(c.Motion) != 0 && len(c.Motion) != len(rec.Nodes) {
		return fmt.Errorf("export: collapse: motion of %d nodes for %d", len(c.Motion), len(rec.Nodes))
	}
	for _, i := range c.Nodes {
		if i < 0 || i >= len(rec.Nodes) {
			return fmt.Errorf("export: collapse: node %d of %d", i, len(rec.Nodes))
		}
	}
	for i, m := range c.Motion {
		if !finite(m[:]...) {
			return fmt.Errorf("export: collapse: motion of node %d: %v is not finite", i, m)
		}
	}
	return nil
}

// finite reports whether no value is NaN or infinite.
func finite(vs ...float64) bool {
	for _, v := range vs {
		if math.IsNaN(v) || math.IsInf(v, 0) {
			return false
		}
	}
	return true
}
