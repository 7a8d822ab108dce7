package export

import (
	"io"
	"strconv"
	"strings"

	"boughwork/geom"
	"boughwork/ground/layout"
)

// cm2PerM2 turns m2 into cm2.
const cm2PerM2 = 1e4

// BarsCSV writes bars.csv: one line for every bar in every case. The column sizes_the_bar says yes in the one case of
// each bar that uses most of its strength, so that this column alone makes the list of bars. Forces are positive in
// tension; the largest compression is given as a positive number in its own column.
func BarsCSV(w io.Writer, rec *layout.Record) error {
	if err := check(rec); err != nil {
		return err
	}
	m := newMarks(rec)
	t := newTable(w, "bar", "from", "to", "length_m", "area_cm2", "solid_diameter_mm", "mass_kg", "kept", "state", "max_tension_kn",
		"max_compression_kn", "case", "case_name", "force_kn_tension_positive", "utilisation", "sizes_the_bar")
	for i, b := range rec.Bars {
		e, l := extremesOf(b), lengthOf(rec, b)
		fixed := []string{barMark(i), m.node[b.Nodes[0]], m.node[b.Nodes[1]], decimal(l, lengthDecimals), decimal(b.AreaM2*cm2PerM2, areaDecimals),
			decimal(solidDiameter(b.AreaM2), diameterDecimals), decimal(l*b.AreaM2*rec.Material.DensityKgM3, massDecimals), yesNo(b.Kept),
			string(e.state()), decimal(e.tension, forceDecimals), decimal(e.compression, forceDecimals)}
		sizing := sizingCase(rec, b)
		for k, cs := range rec.Cases {
			t.row(append(fixed[:len(fixed):len(fixed)], caseMark(k), cs.Name, decimal(b.ForceKN[k], forceDecimals),
				decimal(utilisation(rec, b, k), shareDecimals), yesNo(k == sizing))...)
		}
	}
	return t.close()
}

// JointsCSV writes joints.csv: one line for every node that the layout uses. Metres are local (x east, y north, z up);
// longitude and latitude (WGS 84) are empty for a site that came in metres. The column held names the directions in which
// a support holds the node; deck says yes where the diaphragm moves it in plan.
func JointsCSV(w io.Writer, rec *layout.Record) error {
	if err := check(rec); err != nil {
		return err
	}
	m := newMarks(rec)
	bars := make([]int, len(rec.Nodes))
	for _, b := range rec.Bars {
		bars[b.Nodes[0]]++
		bars[b.Nodes[1]]++
	}
	deck := onDeck(rec)
	p := newPlacer(rec)
	t := newTable(w, "joint", "role", "x_m", "y_m", "z_m", "lon_deg", "lat_deg", "held", "deck", "bars")
	for _, i := range m.used {
		n := rec.Nodes[i]
		lon, lat := "", ""
		if p.geographic {
			lo, la := p.frame.ToLonLat(n.XYZ[0], n.XYZ[1])
			lon, lat = decimal(lo, degreeDecimals), decimal(la, degreeDecimals)
		}
		t.row(m.node[i], n.Role, decimal(n.XYZ[0], lengthDecimals), decimal(n.XYZ[1], lengthDecimals), decimal(n.XYZ[2], lengthDecimals),
			lon, lat, heldWord(n.Fixed), yesNo(deck[i]), strconv.Itoa(bars[i]))
	}
	return t.close()
}

// onDeck says which nodes a diaphragm moves.
func onDeck(rec *layout.Record) []bool {
	deck := make([]bool, len(rec.Nodes))
	for _, d := range rec.Diaphragms {
		for _, i := range d.Nodes {
			if i >= 0 && i < len(deck) {
				deck[i] = true
			}
		}
	}
	return deck
}

// heldWord names the held directions: "xyz", "xy", "z" ..., or "free".
func heldWord(fixed [3]bool) string {
	var s strings.Builder
	for x, f := range fixed {
		if f {
			s.WriteByte("xyz"[x])
		}
	}
	if s.Len() == 0 {
		return "free"
	}
	return s.String()
}

// ReactionsCSV writes reactions.csv: the force of every support on the structure in every case (up is positive), and
// after the supports of a case four lines that close its equilibrium: the sum of reactions, the applied loads, the weight
// of the bars, and what remains of all three, which is nothing but rounding. Moments are about the local origin (0, 0,
// 0), right-handed. Roof nodes of a held deck are supports too.
func ReactionsCSV(w io.Writer, rec *layout.Record) error {
	if err := check(rec); err != nil {
		return err
	}
	m := newMarks(rec)
	zones := zoneNames(rec)
	reactions := Reactions(rec)
	t := newTable(w, "case", "case_name", "line", "joint", "role", "zone", "rx_kn", "ry_kn", "rz_kn_up_positive",
		"mx_knm_about_origin", "my_knm_about_origin", "mz_knm_about_origin")
	for k, cs := range rec.Cases {
		write := func(line, joint, role, zone string, r resultant) {
			fields := []string{caseMark(k), cs.Name, line, joint, role, zone}
			for _, v := range append(vec(r.Force), vec(r.Moment)...) {
				fields = append(fields, decimal(v, forceDecimals))
			}
			t.row(fields...)
		}
		var sum resultant
		for _, i := range m.used {
			if !held(rec.Nodes[i]) {
				continue
			}
			var one resultant
			one.add(reactions[k][i], at(rec, i))
			sum = sum.plus(one)
			write("support", m.node[i], rec.Nodes[i].Role, zones[i], one)
		}
		loads, weight := loadsOf(rec, k), weightOf(rec, k)
		write("sum of reactions", "", "", "", sum)
		write("applied loads", "", "", "", loads)
		write("weight of bars", "", "", "", weight)
		write("remainder", "", "", "", sum.plus(loads).plus(weight))
	}
	return t.close()
}

func vec(v geom.Vec) []float64 { return []float64{v.X, v.Y, v.Z} }

// zoneNames gives nodes of footing zones that are in the record the name of their zone.
func zoneNames(rec *layout.Record) []string {
	names := make([]string, len(rec.Nodes))
	for _, f := range rec.Footings {
		for _, i := range f.Nodes {
			if i >= 0 && i < len(names) {
				names[i] = f.Name
			}
		}
	}
	return names
}

// CasesCSV writes cases.csv: one line for every case with the resultant of its loads (moments about the local origin,
// right-handed), the weight of the bars under its gravity factor, whether the layout was solved in it (governs) or
// only checked against it, for how many bars it sets the size, and its largest reaction.
func CasesCSV(w io.Writer, rec *layout.Record) error {
	if err := check(rec); err != nil {
		return err
	}
	m := newMarks(rec)
	reactions := Reactions(rec)
	sizes := make([]int, len(rec.Cases))
	for _, b := range rec.Bars {
		if k := sizingCase(rec, b); k >= 0 {
			sizes[k]++
		}
	}
	t := newTable(w, "case", "case_name", "governs", "gravity_factor", "loads", "fx_kn", "fy_kn", "fz_kn_up_positive",
		"mx_knm_about_origin", "my_knm_about_origin", "mz_knm_about_origin", "weight_of_bars_kn", "bars_sized", "max_reaction_kn", "max_reaction_joint")
	for k, cs := range rec.Cases {
		fields := []string{caseMark(k), cs.Name, yesNo(cs.Governs), short(cs.Gravity, shareDecimals), strconv.Itoa(len(cs.Loads))}
		sum := loadsOf(rec, k)
		for _, v := range append(vec(sum.Force), vec(sum.Moment)...) {
			fields = append(fields, decimal(v, forceDecimals))
		}
		var most Extreme
		for _, i := range m.used {
			most.take(reactions[k][i].Norm(), m.node[i], cs.Name)
		}
		t.row(append(fields, decimal(-weightOf(rec, k).Force.Z, forceDecimals), strconv.Itoa(sizes[k]), decimal(most.KN, forceDecimals), most.Mark)...)
	}
	return t.close()
}
