package layout

import (
	"cmp"
	"fmt"
	"math"
	"slices"

	"boughwork/geom"
	"boughwork/ground"
	"boughwork/lp"
)

// Format and FormatVersion name the record's file format.
const (
	Format        = "boughwork-layout"
	FormatVersion = 1
)

// Cautions stand in every record.
var Cautions = []string{
	"Preliminary: a plastic layout under fixed strengths, for exploring forms. It is not a design.",
	"Buckling, stiffness, joints, foundations and erection are not checked; CAUTIONS.md lists what else is not.",
	"Local codes and a licensed engineer decide.",
}

const (
	kilo = 1e3
	mega = 1e6
)

// NewRecord writes a result down in the units of the record.
func NewRecord(s *ground.Structure, r *Result, meta Meta) *Record {
	rec := &Record{Format: Format, Version: FormatVersion, Title: s.Title, MadeBy: meta.MadeBy, BriefSHA256: meta.BriefSHA256,
		Status: r.Status.String(), Units: Units{"m", "kN", "MPa", "m2", "m3"}, Frame: recordFrame(s.Frame),
		Material:   RecordMaterial{s.Material.Name, s.Material.Tension / mega, s.Material.Compression / mega, s.Material.Density},
		JointCostM: s.JointCost, Deck: s.Deck.String(), Diaphragms: []RecordDiaphragm{}, Footings: []RecordFooting{}, Bars: []RecordBar{},
		Rounds: []RecordRound{}, Context: meta.Context, Cautions: Cautions}
	for _, n := range s.Nodes {
		rec.Nodes = append(rec.Nodes, RecordNode{XYZ: n.At.Array(), Fixed: n.Fixed, Role: n.Role.String()})
	}
	rec.OmittedCases = slices.Clone(s.Omitted)
	for k, c := range s.Cases {
		rc := RecordCase{Name: c.Name, Gravity: c.Gravity, Governs: k < len(r.Governs) && r.Governs[k], Loads: [][4]float64{}}
		for _, l := range c.Loads {
			rc.Loads = append(rc.Loads, [4]float64{float64(l.Node), l.Force.X / kilo, l.Force.Y / kilo, l.Force.Z / kilo})
		}
		rec.Cases = append(rec.Cases, rc)
	}
	for _, d := range s.Diaphragms {
		rec.Diaphragms = append(rec.Diaphragms, RecordDiaphragm{slices.Clone(d)})
	}
	for _, z := range s.Zones {
		if f, ok := recordFooting(z); ok {
			rec.Footings = append(rec.Footings, f)
		}
	}
	for _, b := range r.Bars {
		rb := RecordBar{Nodes: [2]int{b.A, b.B}, AreaM2: b.Area, Kept: b.Kept}
		for _, q := range b.Force {
			rb.ForceKN = append(rb.ForceKN, q/kilo)
		}
		rec.Bars = append(rec.Bars, rb)
	}
	rec.Candidates = recordCandidates(s, r.Candidates)
	rec.Certificate = recordCertificate(r)
	for _, round := range r.Rounds {
		rec.Rounds = append(rec.Rounds, RecordRound{Cases: round.Cases, Bars: round.Bars, VolumeM3: round.Volume, BoundM3: math.Max(round.Bound, 0), Gap: gap(round.Volume, round.Bound)})
	}
	if r.Collapse != nil {
		rec.Collapse = recordCollapse(s, r.Collapse)
	}
	return rec
}

func gap(volume, bound float64) float64 {
	if volume <= 0 {
		return 0
	}
	return (volume - math.Max(bound, 0)) / volume
}

func recordFrame(f geom.Frame) RecordFrame {
	out := RecordFrame{CRS: f.CRS, Projection: "local metres as given"}
	if f.Geographic {
		out.OriginLonLat = &[2]float64{f.Lon, f.Lat}
		out.Projection = "transverse Mercator on WGS 84, scale 1 on the central meridian, origin at origin_lonlat"
	}
	return out
}

func recordFooting(z ground.Zone) (RecordFooting, bool) {
	l := z.Limits
	kn := func(v *float64) *float64 {
		if v == nil {
			return nil
		}
		w := *v / kilo
		return &w
	}
	f := RecordFooting{Name: z.Name, Nodes: slices.Clone(z.Nodes), NoUplift: l.NoUplift, VerticalOnly: l.VerticalOnly, VerticalKN: kn(l.Vertical),
		UpliftKN: kn(l.Uplift), SidewaysKN: kn(l.Sideways), CostM3PerKN: l.Cost * kilo}
	return f, l.NoUplift || l.VerticalOnly || l.Vertical != nil || l.Uplift != nil || l.Sideways != nil || l.Cost > 0
}

func recordCandidates(s *ground.Structure, count int64) RecordCandidates {
	c := RecordCandidates{Count: count, MaxLengthM: s.Rules.MaxLength, MinLengthM: s.Rules.MinLength, ThroughNodeM: ground.ThroughNode,
		RoofBars: s.Rules.RoofBars.String(), RoofFactor: 1, KeepClear: recordPrisms(s.Rules.KeepClear)}
	if s.Rules.RoofBars == ground.RoofBarsCosted {
		c.RoofFactor = s.Rules.RoofFactor
	}
	if len(s.Rules.Envelope) > 0 {
		c.Envelope = recordPrisms(s.Rules.Envelope)
	}
	for _, k := range s.Kept {
		c.Kept = append(c.Kept, RecordKept{[2]int{k.A, k.B}, k.Area})
	}
	return c
}

func recordPrisms(ps []geom.Prism) []RecordPrism {
	out := []RecordPrism{}
	for _, p := range ps {
		rp := RecordPrism{Name: p.Name, Holes: [][][2]float64{}, FromM: finite(p.From), ToM: finite(p.To)}
		for i, ring := range p.Polygon {
			var pts [][2]float64
			for _, v := range ring {
				pts = append(pts, v)
			}
			if i == 0 {
				rp.Ring = pts
			} else {
				rp.Holes = append(rp.Holes, pts)
			}
		}
		out = append(out, rp)
	}
	return out
}

// farAway stands for an unlimited height in the record, since JSON has no infinity, m.
const farAway = 1e6

func finite(v float64) float64 { return math.Min(math.Max(v, -farAway), farAway) }

func recordCertificate(r *Result) RecordCertificate {
	c := RecordCertificate{ObjectiveM3: r.Objective, VolumeM3: r.Volume, BoundM3: r.Bound, Gap: r.Gap, WorstViolation: r.WorstViolation, Displacement: [][][3]float64{}}
	for _, uk := range r.Displacement {
		c.Displacement = append(c.Displacement, motion(uk, kilo))
	}
	return c
}

func motion(u []geom.Vec, scale float64) [][3]float64 {
	out := make([][3]float64, len(u))
	for i, v := range u {
		out[i] = v.Scale(scale).Array()
	}
	return out
}

// Nodes that do less than this share of the most work are not named as evidence of a collapse.
const namedWork = 0.05

func recordCollapse(s *ground.Structure, c *Collapse) *RecordCollapse {
	out := &RecordCollapse{Case: s.Cases[c.Case].Name, Nodes: []int{}, Motion: motion(c.Motion, 1), WorkKJ: c.Work / kilo}
	work := make([]float64, len(s.Nodes))
	for _, l := range s.Cases[c.Case].Loads {
		work[l.Node] += l.Force.Dot(c.Motion[l.Node])
	}
	top := slices.Max(work)
	for i, w := range work {
		if w > namedWork*top && w > 0 {
			out.Nodes = append(out.Nodes, i)
		}
	}
	slices.SortStableFunc(out.Nodes, func(a, b int) int { return cmp.Compare(work[b], work[a]) })
	if !math.IsInf(c.LeastVolume, 1) {
		out.LeastVolumeM3 = c.LeastVolume
	}
	for _, o := range c.Others {
		out.Others = append(out.Others, RecordMotion{s.Cases[o.Case].Name, motion(o.Motion, 1)})
	}
	out.Text = collapseText(s, out)
	return out
}

func others(n int) string {
	if n == 1 {
		return "another"
	}
	return fmt.Sprintf("%d others", n)
}

func collapseText(s *ground.Structure, c *RecordCollapse) string {
	if len(c.Nodes) == 0 {
		return fmt.Sprintf("No layout carries the weight of its own bars in case %q.", c.Case)
	}
	at := s.Nodes[c.Nodes[0]].At
	if len(c.Others) > 0 {
		return fmt.Sprintf("No layout of the candidate bars and feet carries case %q together with %s: its loads move %d loaded nodes, most at "+
			"(%.2f, %.2f, %.2f) m, and what would resist one case, be it the weight of bars, fails another. Give that place a foot, a wall or "+
			"room for bars, or let the feet take more.", c.Case, others(len(c.Others)), len(c.Nodes), at.X, at.Y, at.Z)
	}
	return fmt.Sprintf("No layout of the candidate bars and feet carries case %q: its loads move %d loaded nodes, most at (%.2f, %.2f, %.2f) m, "+
		"and nothing resists. Give that place a foot, a wall or room for bars, or let the feet take more.", c.Case, len(c.Nodes), at.X, at.Y, at.Z)
}

// ParseStatus returns the status of a record.
func (r *Record) ParseStatus() (lp.Status, error) {
	for s := lp.Optimal; s <= lp.Trouble; s++ {
		if s.String() == r.Status {
			return s, nil
		}
	}
	return lp.Trouble, fmt.Errorf("layout: record: status %q is not known", r.Status)
}
