package export

import (
	"bytes"
	"encoding/csv"
	"io"
	"math"
	"strconv"
	"strings"
	"testing"

	"boughwork/ground/layout"
)

// lines reads a table as one map of column to field a line, and checks RFC 4180: CR LF and equal counts of fields.
func lines(t *testing.T, write func(io.Writer, *layout.Record) error, rec *layout.Record) []map[string]string {
	t.Helper()
	var b bytes.Buffer
	if err := write(&b, rec); err != nil {
		t.Fatal(err)
	}
	if n, m := strings.Count(b.String(), "\n"), strings.Count(b.String(), "\r\n"); n != m || !strings.HasSuffix(b.String(), "\r\n") {
		t.Errorf("%d lines of which %d end in CR LF", n, m)
	}
	all, err := csv.NewReader(&b).ReadAll() // wants equal counts of fields
	if err != nil {
		t.Fatal(err)
	}
	var out []map[string]string
	for _, row := range all[1:] {
		line := map[string]string{}
		for i, name := range all[0] {
			line[name] = row[i]
		}
		out = append(out, line)
	}
	return out
}

func value(t *testing.T, line map[string]string, column string) float64 {
	t.Helper()
	v, err := strconv.ParseFloat(line[column], 64)
	if err != nil {
		t.Fatalf("column %s: %v", column, err)
	}
	return v
}

func TestBarsTable(t *testing.T) {
	rec := canopy(23)
	table := lines(t, BarsCSV, rec)
	if len(table) != len(rec.Bars)*len(rec.Cases) {
		t.Fatalf("%d lines, want %d bars x %d cases", len(table), len(rec.Bars), len(rec.Cases))
	}
	sized, mass := map[string]int{}, 0.0
	for n, line := range table {
		i, k := n/len(rec.Cases), n%len(rec.Cases)
		if line["bar"] != barMark(i) || line["case"] != caseMark(k) || line["case_name"] != rec.Cases[k].Name {
			t.Fatalf("line %d: %v", n, line)
		}
		if d := value(t, line, "force_kn_tension_positive") - rec.Bars[i].ForceKN[k]; math.Abs(d) > 5.1e-5 {
			t.Errorf("line %d: force is off by %g kN", n, d)
		}
		if d := value(t, line, "area_cm2")/1e4 - rec.Bars[i].AreaM2; math.Abs(d) > 5.1e-9 {
			t.Errorf("line %d: area is off by %g m2", n, d)
		}
		// A solid round bar of the diameter given has the area given.
		if d := math.Pi*math.Pow(value(t, line, "solid_diameter_mm"), 2)/400 - value(t, line, "area_cm2"); math.Abs(d) > 1e-3 {
			t.Errorf("line %d: the diameter is of an area that is off by %g cm2", n, d)
		}
		if line["sizes_the_bar"] == "yes" {
			sized[line["bar"]]++
			mass += value(t, line, "mass_kg")
			if u := value(t, line, "utilisation"); math.Abs(u-1) > 1e-6 {
				t.Errorf("%s is sized by a force that uses %g of its strength", line["bar"], u)
			}
		}
	}
	for i := range rec.Bars {
		if sized[barMark(i)] != 1 {
			t.Errorf("%s is sized in %d cases", barMark(i), sized[barMark(i)])
		}
	}
	if want := Summarise(rec).MassKg; math.Abs(mass-want) > 1e-3*float64(len(rec.Bars)) {
		t.Errorf("masses sum to %g kg, want %g", mass, want)
	}
}

// What comes from the tables closes equilibrium: the remainder of every case is rounding, and the lines above it sum to it.
func TestReactionsTableCloses(t *testing.T) {
	columns := []string{"rx_kn", "ry_kn", "rz_kn_up_positive", "mx_knm_about_origin", "my_knm_about_origin", "mz_knm_about_origin"}
	for _, rec := range []*layout.Record{tripod(), fan(9)} {
		table := lines(t, ReactionsCSV, rec)
		ends := 0
		for _, column := range columns {
			supports, sum, loads, weight, n := 0.0, 0.0, 0.0, 0.0, 0
			for _, line := range table {
				v := value(t, line, column)
				switch line["line"] {
				case "support":
					supports, n = supports+v, n+1
				case "sum of reactions":
					sum = v
					if math.Abs(supports-sum) > float64(n+1)*0.5e-4 {
						t.Errorf("%s, %s: supports sum to %g, the line says %g", rec.Title, column, supports, sum)
					}
				case "applied loads":
					loads = v
				case "weight of bars":
					weight = v
				case "remainder":
					if v != 0 || math.Abs(sum+loads+weight) > 1.6e-4 {
						t.Errorf("%s, %s: %g + %g + %g leaves %g", rec.Title, column, sum, loads, weight, v)
					}
					supports, n, ends = 0, 0, ends+1
				default:
					t.Errorf("unknown line %q", line["line"])
				}
			}
		}
		if ends != len(columns)*len(rec.Cases) {
			t.Errorf("%s: %d closing lines", rec.Title, ends)
		}
	}
}

func TestHeldRoofNodesAreSupports(t *testing.T) {
	rec := fan(5)
	n := 0
	for _, line := range lines(t, ReactionsCSV, rec) {
		if line["role"] == "roof" {
			n++
			if value(t, line, "rz_kn_up_positive") != 0 {
				t.Errorf("%v: a deck that holds sideways carries no weight", line)
			}
		}
	}
	if n != 5*len(rec.Cases) {
		t.Errorf("%d lines of roof nodes, want 5 a case", n)
	}
}

func TestJointsTable(t *testing.T) {
	rec := canopy(23)
	table := lines(t, JointsCSV, rec)
	if s := Summarise(rec); len(table) != s.Joints {
		t.Fatalf("%d lines, want %d joints", len(table), s.Joints)
	}
	seen, ends := map[string]bool{}, 0.0
	place := newPlacer(rec)
	for _, line := range table {
		if seen[line["joint"]] {
			t.Errorf("%s twice", line["joint"])
		}
		seen[line["joint"]] = true
		ends += value(t, line, "bars")
		x, y := place.frame.ToLocal(value(t, line, "lon_deg"), value(t, line, "lat_deg"))
		if d := math.Hypot(x-value(t, line, "x_m"), y-value(t, line, "y_m")); d > roundTrip {
			t.Errorf("%s: longitude and latitude are %g m away from x and y", line["joint"], d)
		}
	}
	if ends != 2*float64(len(rec.Bars)) {
		t.Errorf("%g ends of %d bars", ends, len(rec.Bars))
	}
	for _, line := range lines(t, JointsCSV, metric(tripod())) {
		if line["lon_deg"] != "" || line["lat_deg"] != "" {
			t.Errorf("a site in metres has no longitude: %v", line)
		}
	}
}

func TestCasesTable(t *testing.T) {
	rec := fan(6)
	table := lines(t, CasesCSV, rec)
	if len(table) != len(rec.Cases) {
		t.Fatalf("%d lines", len(table))
	}
	sized := 0.0
	for k, line := range table {
		down := 0.0
		for _, l := range rec.Cases[k].Loads {
			down += l[3]
		}
		if d := value(t, line, "fz_kn_up_positive") - down; math.Abs(d) > 5.1e-5 {
			t.Errorf("%s: resultant is off by %g kN", line["case"], d)
		}
		if line["case_name"] != rec.Cases[k].Name || line["governs"] != yesNo(rec.Cases[k].Governs) {
			t.Errorf("case %d: %v", k, line)
		}
		sized += value(t, line, "bars_sized")
	}
	if sized != 6 {
		t.Errorf("%g bars sized, want 6", sized)
	}
}

func TestDecimal(t *testing.T) {
	for _, c := range []struct {
		v    float64
		n    int
		want string
	}{{-0.00001, 4, "0.0000"}, {-1.5, 0, "-2"}, {-0.2, 0, "0"}, {12.34567, 2, "12.35"}, {-12.3, 1, "-12.3"}} {
		if got := decimal(c.v, c.n); got != c.want {
			t.Errorf("decimal(%g, %d) = %s, want %s", c.v, c.n, got, c.want)
		}
	}
	for _, c := range []struct {
		v    float64
		n    int
		want string
	}{{1.350, 4, "1.35"}, {-0.00001, 3, "0"}, {1000, 2, "1000"}, {2.0049, 2, "2"}} {
		if got := short(c.v, c.n); got != c.want {
			t.Errorf("short(%g, %d) = %s, want %s", c.v, c.n, got, c.want)
		}
	}
}

// Every writer refuses a record that it cannot write down, and says where it is wrong.
func TestBadRecords(t *testing.T) {
	writers := map[string]func(io.Writer, *layout.Record) error{"bars": BarsCSV, "joints": JointsCSV, "reactions": ReactionsCSV, "cases": CasesCSV, "overlay": Overlay}
	for _, c := range []struct {
		name  string
		spoil func(*layout.Record)
		want  string
	}{
		{"nan position", func(r *layout.Record) { r.Nodes[1].XYZ[2] = math.NaN() }, "nodes[1]"},
		{"bar to nowhere", func(r *layout.Record) { r.Bars[2].Nodes[1] = 99 }, "bars[2]"},
		{"force missing", func(r *layout.Record) { r.Bars[0].ForceKN = r.Bars[0].ForceKN[:1] }, "bars[0]"},
		{"infinite force", func(r *layout.Record) { r.Bars[0].ForceKN[1] = math.Inf(1) }, "bars[0]"},
		{"load on nowhere", func(r *layout.Record) { r.Cases[1].Loads[0][0] = 5 }, "cases[1].loads[0]"},
		{"load on half a node", func(r *layout.Record) { r.Cases[1].Loads[0][0] = 1.5 }, "cases[1].loads[0]"},
		{"origin off the earth", func(r *layout.Record) { r.Frame.OriginLonLat[1] = 91 }, "origin_lonlat"},
		{"nan outline", func(r *layout.Record) { r.Context.Roof[0].Rings[0][0][0] = math.NaN() }, "Shelter"},
	} {
		for _, name := range []string{"bars", "joints", "reactions", "cases", "overlay"} {
			rec := tripod()
			c.spoil(rec)
			if err := writers[name](io.Discard, rec); err == nil || !strings.Contains(err.Error(), c.want) {
				t.Errorf("%s of %s: error %v, want one that names %s", name, c.name, err, c.want)
			}
		}
	}
}
