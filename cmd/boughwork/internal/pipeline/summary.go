package pipeline

import (
	"fmt"
	"math"
	"strings"

	"boughwork/export"
	"boughwork/geom"
	"boughwork/lp"
)

// summarise writes what a person reads first. It says no time, so that the same study gives the same file; the command
// adds the time on the terminal.
func (g *growth) summarise() {
	var b strings.Builder
	rec := g.out.Record
	fmt.Fprintf(&b, "%s\n", rec.Title)
	row := func(name, format string, args ...any) {
		fmt.Fprintf(&b, "  %-17s %s\n", name, fmt.Sprintf(format, args...))
	}
	row("status", "%s", statusText(rec.Status))
	if len(rec.Bars) > 0 {
		g.summariseLayout(row)
	}
	if len(rec.Bars) == 0 && rec.Collapse == nil {
		row("layout", "none that carries all cases was found so far")
	}
	if rec.Collapse != nil {
		g.summariseCollapse(row)
	}
	if v := g.out.Verdict; v.OK() {
		row("verified", "%s of the record by itself passed", count(len(v.Checks), "check"))
	} else {
		row("NOT VERIFIED", "the record does not hold what it says: do not use it")
		for _, c := range v.Checks {
			if !c.OK {
				row("", "%s", FailedText(c))
			}
		}
	}
	if o := g.out.Study.Overrides; len(o) > 0 {
		row("above the brief", "%s", strings.Join(o, ", "))
	}
	row("files", "%s", g.out.Dir)
	for _, i := range g.out.Issues {
		fmt.Fprintf(&b, "  %s\n", i)
	}
	b.WriteString("cautions\n")
	for _, c := range rec.Cautions {
		fmt.Fprintf(&b, "  %s\n", c)
	}
	g.out.Summary = b.String()
}

// statusText explains a status of the record.
func statusText(status string) string {
	switch status {
	case lp.Optimal.String():
		return "optimal: the gap that the brief asks for is reached"
	case lp.NoEquilibrium.String():
		return "no equilibrium: no layout exists, the loads cannot be carried"
	case lp.IterationLimit.String():
		return "iteration limit: stopped early; raise solve.rounds, or accept a larger solve.gap"
	case lp.Cancelled.String():
		return "cancelled: stopped early, with the best layout so far"
	case lp.Trouble.String():
		return "numerical trouble: stopped early, with the best layout so far. Try a larger solve.gap, or another grid"
	}
	return status
}

func (g *growth) summariseLayout(row func(name, format string, args ...any)) {
	rec := g.out.Record
	s := export.Summarise(rec)
	row("volume", "%.5g m3", s.VolumeM3)
	if s.ObjectiveM3 != s.VolumeM3 {
		row("objective", "%.5g m3: the volume with the cost of joints, roof bars and feet, which was made least", s.ObjectiveM3)
	}
	row("bound", "%.5g m3: no layout on this ground structure has a smaller objective", s.BoundM3)
	row("gap", "%.3g %%", 100*s.Gap)
	row("mass", "%s of %s", kilograms(s.MassKg), rec.Material.Name)
	if s.WeightShare > ballastShare {
		row("ballast", "the bars weigh %.0f %% of all that acts in a case: where a heavier roof or feet that hold uplift are possible, they need less", 100*s.WeightShare)
	}
	bars := fmt.Sprintf("%d, %.4g m in all, chosen from %d candidates", s.Bars, s.LengthM, rec.Candidates.Count)
	if s.Kept > 0 {
		bars += fmt.Sprintf("; %d of them kept, at no cost", s.Kept)
	}
	row("bars", "%s", bars)
	row("joints", "%d, of which %d feet", s.Joints, s.Feet)
	left := ""
	if s.Omitted > 0 {
		left = fmt.Sprintf("; %d more that cannot govern are left out (omitted_cases in layout.json)", s.Omitted)
	}
	row("cases", "%d, of which %d govern%s", s.Cases, s.Governing, left)
	for _, e := range []struct {
		name string
		at   export.Extreme
	}{
		{"largest reaction", s.LargestReaction},
		{"largest uplift", s.LargestUplift},
		{"most tension", s.LargestTension},
		{"most compression", s.LargestPressure},
	} {
		if e.at.Mark != "" {
			row(e.name, "%.4g kN at %s in case %q", e.at.KN, e.at.Mark, e.at.Case)
		}
	}
}

// ballastShare is the share of the weight of bars in what acts from which they are more than a load-bearing structure:
// common practice has a few per cent, heavy timber ten.
const ballastShare = 0.25

// kilograms writes a mass as a person reads it.
func kilograms(kg float64) string {
	if kg >= 1e4 {
		return fmt.Sprintf("%.4g t", kg/1e3)
	}
	return fmt.Sprintf("%.4g kg", kg)
}

// mostPlaces is how many moving places of a collapse the summary names.
const mostPlaces = 5

func (g *growth) summariseCollapse(row func(name, format string, args ...any)) {
	rec := g.out.Record
	c := rec.Collapse
	row("loads", "those of case %q", c.Case)
	for i, n := range c.Nodes {
		if i == mostPlaces {
			row("", "and %d more places", len(c.Nodes)-i)
			break
		}
		name := ""
		if i == 0 {
			name = "what moves"
		}
		row(name, "node %d at %s, towards %s", n, g.placeText(rec.Nodes[n].XYZ), towards(geom.FromArray(c.Motion[n])))
	}
	row("why", "%s", c.Text)
}

// placeText gives a place in local metres, and on the earth where that is known.
func (g *growth) placeText(p [3]float64) string {
	text := fmt.Sprintf("(%.2f, %.2f, %.2f) m", p[0], p[1], p[2])
	if f := g.out.Site.Frame; f.Geographic {
		lon, lat := f.ToLonLat(p[0], p[1])
		text += fmt.Sprintf(" [%.6f, %.6f]", lon, lat)
	}
	return text
}

// towards says the direction of a motion in words: the main one of up, down and the eight winds.
func towards(v geom.Vec) string {
	h := math.Hypot(v.X, v.Y)
	if math.Abs(v.Z) > h {
		if v.Z < 0 {
			return "the ground"
		}
		return "the sky"
	}
	winds := [...]string{"north", "north-east", "east", "south-east", "south", "south-west", "west", "north-west"}
	eighth := int(math.Round(math.Atan2(v.X, v.Y)/(math.Pi/4))+8) % 8
	return "the " + winds[eighth]
}
