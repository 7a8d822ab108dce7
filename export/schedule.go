package export

import (
	"fmt"
	"sort"
	"strings"
)

// numbers writes what came out.
func (d *drawing) numbers(k *column) {
	if len(d.m.rec.Bars) == 0 || !k.heading("Result") {
		return
	}
	s, mat := d.m.sum, d.m.rec.Material
	if s.Status != "optimal" {
		k.paragraph("Stopped early ("+s.Status+"): the best layout so far.", d.paper.small, writing{bold: true})
	}
	k.pair("Volume of bars", figures(s.VolumeM3, 4)+" m³")
	if differ(s.ObjectiveM3, s.VolumeM3) {
		k.pair("Objective (volume with costs of joints, roof bars, feet)", figures(s.ObjectiveM3, 4)+" m³")
	}
	k.pair("Certified lower bound", figures(s.BoundM3, 4)+" m³")
	k.pair("Gap between both", figures(100*s.Gap, 2)+" %")
	k.pair("Mass", figures(s.MassKg, 4)+" kg")
	if s.Kept > 0 {
		k.pair(fmt.Sprintf("Kept, not counted above: %s", counted(s.Kept, "member")), figures(s.KeptVolumeM3, 4)+" m³")
	}
	k.pair("Bars, joints, feet", fmt.Sprintf("%d, %d, %d", s.Bars, s.Joints, s.Feet))
	k.pair("Length of all bars", figures(s.LengthM, 4)+" m")
	d.extreme(k, "Largest tension", s.LargestTension)
	d.extreme(k, "Largest compression", s.LargestPressure)
	d.extreme(k, "Largest reaction", s.LargestReaction)
	k.pair("Material", mat.Name)
	k.pair("Strength in tension, compression", fmt.Sprintf("%s, %s MPa", short(mat.TensionMPa, 1), short(mat.CompressionMPa, 1)))
	k.pair("Roof deck", deckWords(d.m.rec.Deck))
	if d.m.rec.JointCostM > 0 {
		k.pair("Joint cost as a length of bar", short(d.m.rec.JointCostM, 3)+" m")
	}
}

// million m3: beyond that the number says nothing.
const million = 1e6

// differ reports whether two volumes differ by more than a sheet shows.
func differ(a, b float64) bool { return figures(a, 4) != figures(b, 4) }

func (d *drawing) extreme(k *column, name string, e Extreme) {
	if e.KN > 0 {
		k.pair(name, fmt.Sprintf("%s kN at %s", figures(e.KN, 4), e.Mark))
	}
}

func deckWords(deck string) string {
	switch deck {
	case "diaphragm":
		return "diaphragm, stiff in plan"
	case "held":
		return "held sideways by others"
	case "free":
		return "free, carried by bars alone"
	}
	return deck
}

// evidence tells why there is no layout.
func (d *drawing) evidence(k *column) {
	if c := d.m.rec.Collapse; c != nil {
		if k.heading("No layout exists") {
			k.paragraph(c.Text, d.paper.text, writing{})
			k.gap(0.3)
			k.pair("Case that drives the motion", c.Case)
			k.pair("Work of its loads on the motion drawn in metres", figures(c.WorkKJ, 3)+" kJ")
			switch v := c.LeastVolumeM3; {
			case v >= million:
				k.pair("Any layout would need more than", "a million m³")
			case v > 0:
				k.pair("Any layout would need at least", figures(v, 3)+" m³")
			}
		}
		return
	}
	if len(d.m.rec.Bars) > 0 || !k.heading("No bars") {
		return
	}
	words := "The work ended before a layout was found that carries all cases (" + d.m.rec.Status + ")."
	if d.m.rec.Status == "optimal" {
		words = "No bar is needed: every load stands on a support."
	}
	k.paragraph(words, d.paper.text, writing{})
}

// cases lists the cases: those in which the layout was solved first.
func (d *drawing) cases(k *column, most int) {
	s := d.m.sum
	verb := "govern"
	if s.Governing == 1 {
		verb = "governs"
	}
	if s.Cases == 0 || !k.heading(fmt.Sprintf("%s, of which %d %s (dark)", counted(s.Cases, "case"), s.Governing, verb)) {
		return
	}
	p := d.paper
	indent := textWidth(caseMark(s.Cases), p.small, false) + 0.8*p.small
	written, left := 0, s.Cases
	for _, governs := range []bool{true, false} {
		for i, c := range d.m.rec.Cases {
			if c.Governs != governs {
				continue
			}
			if written >= most-1 && left > 1 || k.room(p.small) < 2 && left > 1 {
				k.rest(left, "cases.csv")
				return
			}
			w := writing{colour: greyColour}
			if governs {
				w.colour = inkColour
			}
			k.line(p.small, field{x: k.x0, text: caseMark(i), writing: w},
				field{x: k.x0 + indent, text: trimmed(strings.TrimSpace(c.Name), k.width()-indent, p.small, false), writing: w})
			written, left = written+1, left-1
		}
	}
}

// rest says how many lines had no room, and where they are.
func (k *column) rest(n int, file string) {
	size := k.d.paper.small
	words := trimmed(fmt.Sprintf("and %d more in %s", n, file), k.width(), size, false)
	k.line(size, field{x: k.x0, text: words, writing: writing{colour: greyColour}})
}

// feetTable lists the supports with their largest reactions, in the order of their marks; the most loaded ones if there is no
// room for all.
func (d *drawing) feetTable(k *column) {
	p := d.paper
	feet := make([]drawnFoot, 0, len(d.m.feet))
	for _, f := range d.m.feet {
		if f.mark != "" {
			feet = append(feet, f)
		}
	}
	if len(feet) == 0 || !k.heading("Largest reactions in kN") {
		return
	}
	w := k.width()
	at := []float64{k.x0, k.x0 + 0.45*w, k.x0 + 0.72*w, k.x1}
	row := func(colour string, texts ...string) bool {
		var fields []field
		for i, s := range texts {
			style := writing{colour: colour, anchor: "end"}
			if i == 0 {
				style.anchor = "start"
			}
			fields = append(fields, field{at[i], s, style})
		}
		return k.line(p.small, fields...)
	}
	row(greyColour, "foot", "down", "uplift", "sideways")
	left := 0
	if n := max(0, k.room(p.small)-1); len(feet) > n+1 {
		sort.SliceStable(feet, func(i, j int) bool { return feet[i].support.down.KN > feet[j].support.down.KN })
		left, feet = len(feet)-n, feet[:n]
	}
	for _, f := range feet {
		row(inkColour, f.mark, figures(f.support.down.KN, 4), figures(f.support.uplift.KN, 4), figures(f.support.sideways.KN, 4))
	}
	if left > 0 {
		k.rest(left, "reactions.csv")
	}
}
