package export

import (
	"bytes"
	"encoding/json"
	"fmt"
	"math"
	"os"
	"os/exec"
	"path/filepath"
	"regexp"
	"strings"
	"testing"

	"boughwork/geom"
	"boughwork/ground/layout"
)

// roundTrip is how far a place may move by being written with 8 decimals of a degree, m: half a step is 0.6 mm in each
// direction at the equator.
const roundTrip = 1e-3

type anyFeature struct {
	Type       string         `json:"type"`
	ID         any            `json:"id"`
	Properties map[string]any `json:"properties"`
	Geometry   struct {
		Type        string          `json:"type"`
		Coordinates json.RawMessage `json:"coordinates"`
	} `json:"geometry"`
}

func overlayOf(t *testing.T, rec *layout.Record) (top map[string]json.RawMessage, features []anyFeature) {
	t.Helper()
	var b bytes.Buffer
	if err := Overlay(&b, rec); err != nil {
		t.Fatal(err)
	}
	if err := json.Unmarshal(b.Bytes(), &top); err != nil {
		t.Fatal(err)
	}
	if err := json.Unmarshal(top["features"], &features); err != nil {
		t.Fatal(err)
	}
	if _, ok := top["crs"]; ok {
		t.Error("RFC 7946 has no member crs")
	}
	for _, f := range features {
		if f.Type != "Feature" || f.Properties == nil || f.Properties["kind"] == "" {
			t.Errorf("feature %v: type %q, properties %v", f.ID, f.Type, f.Properties)
		}
	}
	return top, features
}

func ofKind(features []anyFeature, kind string) (out []anyFeature) {
	for _, f := range features {
		if f.Properties["kind"] == kind {
			out = append(out, f)
		}
	}
	return out
}

// The ends of every bar, taken back to local metres, are its nodes; numbers and marks are those of the record.
func TestOverlayBars(t *testing.T) {
	rec := canopy(23)
	place := newPlacer(rec)
	_, features := overlayOf(t, rec)
	bars := ofKind(features, "bar")
	if len(bars) != len(rec.Bars) {
		t.Fatalf("%d bars, want %d", len(bars), len(rec.Bars))
	}
	m := newMarks(rec)
	for i, f := range bars {
		b := rec.Bars[i]
		var line [][3]float64
		if err := json.Unmarshal(f.Geometry.Coordinates, &line); err != nil || f.Geometry.Type != "LineString" || len(line) != 2 {
			t.Fatalf("%v: %s %s: %v", f.ID, f.Geometry.Type, f.Geometry.Coordinates, err)
		}
		for e, p := range line {
			x, y := place.frame.ToLocal(p[0], p[1])
			if d := (geom.Vec{X: x, Y: y, Z: p[2]}).Sub(at(rec, b.Nodes[e])).Norm(); d > roundTrip {
				t.Errorf("%v: end %d is %g m off", f.ID, e, d)
			}
		}
		if f.ID != barMark(i) || f.Properties["from"] != m.node[b.Nodes[0]] || f.Properties["to"] != m.node[b.Nodes[1]] {
			t.Errorf("bar %d: %v, %v", i, f.ID, f.Properties)
		}
		most, least := 0.0, 0.0
		for k, q := range f.Properties["forces_kn"].([]any) {
			if d := q.(float64) - b.ForceKN[k]; math.Abs(d) > 5.1e-5 {
				t.Errorf("%v: force of case %d is off by %g", f.ID, k, d)
			}
			most, least = math.Max(most, q.(float64)), math.Min(least, q.(float64))
		}
		if f.Properties["max_tension_kn"] != most || f.Properties["max_compression_kn"].(float64) != -least {
			t.Errorf("%v: largest forces %v, %v, want %g, %g", f.ID, f.Properties["max_tension_kn"], f.Properties["max_compression_kn"], most, -least)
		}
	}
}

// Outer rings run anticlockwise, holes clockwise, all closed, whatever way the record has them.
func TestOverlayRings(t *testing.T) {
	rec := tripod()
	outer := [][3]float64{{-2, -2, 3}, {-2, 2, 3}, {2, 2, 3}, {2, -2, 3}}
	hole := [][3]float64{{-1, -1, 3}, {1, -1, 3}, {1, 1, 3}, {-1, 1, 3}, {-1, -1, 3}}
	rec.Context.Roof[0].Rings = [][][3]float64{outer, hole}
	rec.Candidates.KeepClear = []layout.RecordPrism{{Name: "Path", Ring: [][2]float64{{0, 0}, {0, 1}, {1, 1}, {0, 0}}, FromM: 0, ToM: 2.5}}
	_, features := overlayOf(t, rec)
	n := 0
	for _, f := range features {
		if f.Geometry.Type != "Polygon" {
			continue
		}
		n++
		var rings [][][]float64
		if err := json.Unmarshal(f.Geometry.Coordinates, &rings); err != nil {
			t.Fatal(err)
		}
		for i, ring := range rings {
			if len(ring) < 4 || fmt.Sprint(ring[0]) != fmt.Sprint(ring[len(ring)-1]) {
				t.Errorf("%v: ring %d is not closed: %v", f.Properties, i, ring)
			}
			var vs []geom.Vec
			for _, p := range ring[:len(ring)-1] {
				vs = append(vs, geom.Vec{X: p[0], Y: p[1]})
			}
			if a := ringArea(vs); (a > 0) != (i == 0) {
				t.Errorf("%v: ring %d has the signed area %g", f.Properties, i, a)
			}
		}
	}
	if n != 2 {
		t.Errorf("%d polygons, want roof and path", n)
	}
	path := ofKind(features, "keep-clear")[0].Properties
	if path["from_m"] != 0.0 || path["to_m"] != 2.5 || path["name"] != "Path" {
		t.Errorf("keep-clear: %v", path)
	}
}

func TestOverlayFeet(t *testing.T) {
	rec := tripod()
	_, features := overlayOf(t, rec)
	feet := ofKind(features, "foot")
	if len(feet) != 3 || feet[0].Geometry.Type != "Point" {
		t.Fatalf("%d feet", len(feet))
	}
	reactions := Reactions(rec)
	for i, f := range feet {
		up := f.Properties["rz_kn"].([]any)
		for k := range rec.Cases {
			if d := up[k].(float64) - reactions[k][i].Z; math.Abs(d) > 5.1e-5 {
				t.Errorf("%v, case %d: off by %g kN", f.ID, k, d)
			}
		}
		if f.Properties["max_down_kn"] != up[0] || f.Properties["max_down_case"] != "1.35 Roofing" || f.Properties["max_uplift_kn"] != 0.0 {
			t.Errorf("%v: %v", f.ID, f.Properties)
		}
	}
}

// A site in metres stays in metres and says in which.
func TestOverlayInMetres(t *testing.T) {
	rec := metric(tripod())
	top, features := overlayOf(t, rec)
	if string(top["coordinates_in"]) != `"EPSG:28992"` {
		t.Errorf("coordinates_in is %s", top["coordinates_in"])
	}
	var p [3]float64
	if err := json.Unmarshal(ofKind(features, "foot")[0].Geometry.Coordinates, &p); err != nil || p != [3]float64{1.2, 0, 0} {
		t.Errorf("first foot at %v (%v), want 1.2 0 0", p, err)
	}
	if top, _ := overlayOf(t, tripod()); top["coordinates_in"] != nil {
		t.Error("coordinates_in stands in a file in longitude and latitude")
	}
}

func TestOverlayCollapse(t *testing.T) {
	rec := collapsed()
	_, features := overlayOf(t, rec)
	moved := 0
	for _, m := range rec.Collapse.Motion {
		if geom.FromArray(m).Norm() > leastMotion {
			moved++
		}
	}
	if got := len(ofKind(features, "motion")); got != moved || moved == 0 {
		t.Errorf("%d motions, want %d", got, moved)
	}
}

// What crosses the antimeridian is cut there, and nothing is lost: areas of the parts sum to the whole, and no part
// spans the world.
func TestOverlayAcrossTheAntimeridian(t *testing.T) {
	for _, lon := range []float64{179.9999, -179.9999, 180, -180} {
		rec := canopy(23)
		rec.Frame.OriginLonLat = &[2]float64{lon, -16.8}
		// A roof like a comb, so that the cut makes several parts.
		comb := [][3]float64{{-30, -30, 5}, {30, -30, 5}, {30, -20, 5}, {-20, -20, 5}, {-20, 0, 5}, {30, 0, 5}, {30, 10, 5}, {-30, 10, 5}}
		hole := [][3]float64{{-28, -28, 5}, {-28, -22, 5}, {28, -22, 5}, {28, -28, 5}}
		rec.Context.Roof[0].Rings = [][][3]float64{comb, hole}
		want := ringArea(vecs(comb)) + ringArea(vecs(hole))
		place := newPlacer(rec)
		_, features := overlayOf(t, rec)
		got := 0.0
		for _, f := range features {
			if s := spread(t, f); s > 1 {
				t.Errorf("origin %g: %v spans %g degrees", lon, f.Properties, s)
			}
			if f.Properties["kind"] != "roof" {
				continue
			}
			var parts [][][][]float64
			if f.Geometry.Type != "MultiPolygon" {
				t.Fatalf("origin %g: the roof is a %s", lon, f.Geometry.Type)
			}
			if err := json.Unmarshal(f.Geometry.Coordinates, &parts); err != nil {
				t.Fatal(err)
			}
			for _, rings := range parts {
				for _, ring := range rings {
					var vs []geom.Vec
					for _, p := range ring[:len(ring)-1] {
						x, y := place.frame.ToLocal(p[0], p[1])
						vs = append(vs, geom.Vec{X: x, Y: y})
					}
					got += ringArea(vs)
				}
			}
		}
		if math.Abs(got-want) > 0.2 { // 8 decimals on some 300 m of outline
			t.Errorf("origin %g: the parts have %g m2, want %g", lon, got, want)
		}
	}
}

func vecs(ring [][3]float64) (out []geom.Vec) {
	for _, p := range ring {
		out = append(out, geom.FromArray(p))
	}
	return out
}

// spread is the widest range of longitudes in one part of a geometry.
func spread(t *testing.T, f anyFeature) float64 {
	t.Helper()
	var walk func(v any) (lo, hi, worst float64)
	walk = func(v any) (lo, hi, worst float64) {
		lo, hi = math.Inf(1), math.Inf(-1)
		list := v.([]any)
		if x, ok := list[0].(float64); ok {
			return x, x, 0
		}
		for _, e := range list {
			l, h, w := walk(e)
			lo, hi, worst = math.Min(lo, l), math.Max(hi, h), math.Max(worst, w)
		}
		if first, ok := list[0].([]any); ok {
			if _, ok := first[0].(float64); ok {
				worst = math.Max(worst, hi-lo)
			}
		}
		return lo, hi, worst
	}
	var v any
	if err := json.Unmarshal(f.Geometry.Coordinates, &v); err != nil {
		t.Fatal(err)
	}
	_, _, worst := walk(v)
	return worst
}

// GDAL reads the overlay: one layer, all features, geometries with heights, where the site is.
func TestOverlayReadByGDAL(t *testing.T) {
	tool, err := exec.LookPath("ogrinfo")
	if err != nil {
		if os.Getenv("BOUGHWORK_CI") != "" {
			t.Fatal("ogrinfo is missing; install gdal-bin")
		}
		t.Skip("ogrinfo is missing (install gdal-bin): the overlay is not read by another program here")
	}
	rec := canopy(23)
	path := filepath.Join(t.TempDir(), "overlay.geojson")
	var b bytes.Buffer
	if err := Overlay(&b, rec); err != nil {
		t.Fatal(err)
	}
	if err := os.WriteFile(path, b.Bytes(), 0o644); err != nil {
		t.Fatal(err)
	}
	info := func(args ...string) string {
		out, err := exec.Command(tool, append([]string{"-ro", "-so", "-al"}, append(args, path)...)...).CombinedOutput()
		if err != nil || strings.Contains(string(out), "ERROR") || strings.Contains(string(out), "Warning") {
			t.Fatalf("ogrinfo: %v\n%s", err, out)
		}
		return string(out)
	}
	_, features := overlayOf(t, rec)
	all := info()
	for _, want := range []string{fmt.Sprintf("Feature Count: %d\n", len(features)), `GEOGCRS["WGS 84"`, "forces_kn: RealList", "area_m2: Real", "max_tension_kn: Real", "kind: String"} {
		if !strings.Contains(all, want) {
			t.Errorf("ogrinfo does not say %q:\n%s", want, all)
		}
	}
	bars := info("-where", "kind='bar'")
	if !strings.Contains(bars, fmt.Sprintf("Feature Count: %d\n", len(rec.Bars))) {
		t.Errorf("bars:\n%s", bars)
	}
	full, err := exec.Command(tool, "-ro", "-al", "-q", "-where", "kind='bar'", path).Output()
	if n := strings.Count(string(full), "LINESTRING Z ("); err != nil || n != len(rec.Bars) {
		t.Errorf("%d lines with heights, want %d (%v)", n, len(rec.Bars), err)
	}
	lo, hi := [2]float64{math.Inf(1), math.Inf(1)}, [2]float64{math.Inf(-1), math.Inf(-1)}
	place := newPlacer(rec)
	for _, bar := range rec.Bars {
		for _, n := range bar.Nodes {
			lon, lat := place.frame.ToLonLat(rec.Nodes[n].XYZ[0], rec.Nodes[n].XYZ[1])
			lo[0], lo[1], hi[0], hi[1] = math.Min(lo[0], lon), math.Min(lo[1], lat), math.Max(hi[0], lon), math.Max(hi[1], lat)
		}
	}
	m := regexp.MustCompile(`Extent: \(([-\d.]+), ([-\d.]+)\) - \(([-\d.]+), ([-\d.]+)\)`).FindStringSubmatch(bars)
	if m == nil {
		t.Fatalf("no extent:\n%s", bars)
	}
	for i, want := range []float64{lo[0], lo[1], hi[0], hi[1]} {
		var got float64
		if _, err := fmt.Sscan(m[i+1], &got); err != nil || math.Abs(got-want) > 1.01e-6 { // ogrinfo prints 6 decimals
			t.Errorf("extent: %s, want %.8f", m[i+1], want)
		}
	}
}
