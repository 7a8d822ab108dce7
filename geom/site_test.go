package geom

import (
	"fmt"
	"math"
	"strings"
	"testing"
)

// Pieces of an invented site near the invented landing place of Ferrywick, in degrees.
const (
	roofRing = `[[4.3,52.1,6],[4.3005,52.1,6],[4.3005,52.1002,7],[4.3,52.1002,7],[4.3,52.1,6]]`
	roofText = `{"type":"Feature","properties":{"role":"roof","name":"Canopy"},"geometry":{"type":"Polygon","coordinates":[` + roofRing + `]}}`
	footText = `{"type":"Feature","properties":{"role":"footing","name":"Quay"},"geometry":{"type":"Point","coordinates":[4.3002,52.1001]}}`
)

// collection joins features to a file.
func collection(features ...string) string {
	return `{"type":"FeatureCollection","features":[` + strings.Join(features, ",\n") + `]}`
}

// feat writes a feature from its properties and its geometry.
func feat(props, typ, coordinates string) string {
	return fmt.Sprintf(`{"type":"Feature","properties":{%s},"geometry":{"type":%q,"coordinates":%s}}`, props, typ, coordinates)
}

// metric reads a site in metres; the roof is 40 m x 20 m at 6 m and a foot stands in the middle.
var metric = SiteOptions{Metric: true, CRS: "EPSG:28992"}

const (
	metricRoof = `{"type":"Feature","properties":{"role":"roof","elevation_m":6},"geometry":{"type":"Polygon","coordinates":[[[0,0],[40,0],[40,20],[0,20],[0,0]]]}}`
	metricFoot = `{"type":"Feature","properties":{"role":"footing"},"geometry":{"type":"Point","coordinates":[20,10]}}`
)

func mustRead(t *testing.T, text string, opt SiteOptions) *Site {
	t.Helper()
	s, is := ReadSite(strings.NewReader(text), opt)
	if s == nil {
		t.Fatalf("refused: %v", is)
	}
	return s
}

// The whole way: lengths, heights, names and limits must arrive, in SI units.
func TestReadSiteGeographic(t *testing.T) {
	s := mustRead(t, collection(roofText, footText,
		feat(`"role":"footing","id":7,"no_uplift":true,"vertical_kn":400,"sideways_kn":0,"cost_m3_per_kn":0.002,"elevation_m":-1.5`, "MultiPoint", `[[4.3001,52.1001],[4.3004,52.1001,-1]]`),
		feat(`"role":"keep-clear","name":"Lane","to_m":4.5`, "Polygon", `[[[4.3003,52.0999],[4.3003,52.1003],[4.30033,52.1003],[4.30033,52.0999],[4.3003,52.0999]]]`),
		feat(`"role":"wall","name":"Old wall","top_m":3`, "LineString", `[[4.3,52.10025],[4.3005,52.10025]]`),
		feat(`"role":"kept","name":"Mast","area_cm2":40`, "LineString", `[[4.3002,52.1001,0],[4.3002,52.1001,5]]`),
	), SiteOptions{})
	if f := s.Frame; !f.Geographic || f.Lon != 4.30025 || f.Lat != 52.1001 || f.CRS != "EPSG:4326" {
		t.Errorf("frame %+v", f)
	}
	ring := s.Roofs[0].Regions[0].Rings[0]
	// Degrees at 52.1 N are 68 486 m and 111 270 m long (any table of the WGS 84 ellipsoid, here by its radii of
	// curvature), so the roof is 34.24 m x 22.25 m.
	sin := math.Sin(52.1 * degree)
	e2 := wgs84Flattening * (2 - wgs84Flattening)
	w := math.Sqrt(1 - e2*sin*sin)
	wide := wgs84Radius / w * math.Cos(52.1*degree) * 0.0005 * degree
	deep := wgs84Radius * (1 - e2) / (w * w * w) * 0.0002 * degree
	if got := Area(s.Roofs[0].Regions[0].Polygon()); math.Abs(got/(wide*deep)-1) > 1e-5 {
		t.Errorf("area %v, want %v", got, wide*deep)
	}
	if len(ring) != 4 || ring[0].Z != 6 || ring[2].Z != 7 {
		t.Errorf("ring %v", ring)
	}
	if z := s.Roofs[0].Surface.Height(0, 0); math.Abs(z-6.5) > 1e-4 {
		t.Errorf("the middle of the roof is at %v", z)
	}
	z := s.Footings[1]
	if z.Name != "7" || !z.Limits.NoUplift || *z.Limits.Vertical != 400e3 || *z.Limits.Sideways != 0 || z.Limits.Uplift != nil || z.Limits.Cost != 0.002e-3 {
		t.Errorf("zone %+v", z)
	}
	if z.Points[0].Z != -1.5 || z.Points[1].Z != -1 {
		t.Errorf("heights of the zone %v", z.Points)
	}
	if k := s.KeepClear[0]; k.Name != "Lane" || k.From != -2.5 || k.To != 4.5 {
		t.Errorf("keep-clear %+v", k)
	}
	if w := s.Walls[0]; w.Top != 3 || len(w.Points) != 2 {
		t.Errorf("wall %+v", w)
	}
	if k := s.Kept[0]; math.Abs(k.Area-40e-4) > 1e-15 || k.Points[1].Z != 5 {
		t.Errorf("kept %+v", k)
	}
}

// A national grid is taken as it is, and its code is carried through.
func TestReadSiteMetric(t *testing.T) {
	s := mustRead(t, collection(metricRoof, metricFoot), metric)
	if f := s.Frame; f.Geographic || f.CRS != "EPSG:28992" {
		t.Errorf("frame %+v", f)
	}
	if v := s.Roofs[0].Regions[0].Rings[0][2]; v != (Vec{40, 20, 6}) {
		t.Errorf("corner %v", v)
	}
	if s.Roofs[0].Name != "roof 1" || s.Footings[0].Name != "footing 1" {
		t.Errorf("names %q, %q", s.Roofs[0].Name, s.Footings[0].Name)
	}
}

// Ring direction does not matter: the outer ring comes back anticlockwise and holes clockwise, with the same heights.
func TestRingDirection(t *testing.T) {
	outer := []string{`[0,0,5]`, `[40,0,6]`, `[40,20,7]`, `[0,20,8]`}
	hole := []string{`[10,5,6]`, `[20,5,6]`, `[20,15,6]`, `[10,15,6]`}
	ring := func(ps []string, back bool) string {
		out := append([]string{}, ps...)
		if back {
			for i, j := 0, len(out)-1; i < j; i, j = i+1, j-1 {
				out[i], out[j] = out[j], out[i]
			}
		}
		return "[" + strings.Join(append(out, out[0]), ",") + "]"
	}
	for k := range 4 {
		s := mustRead(t, collection(feat(`"role":"roof"`, "Polygon", "["+ring(outer, k&1 > 0)+","+ring(hole, k&2 > 0)+"]"),
			feat(`"role":"footing"`, "Point", `[5,5]`)), metric)
		rings := s.Roofs[0].Regions[0].Rings
		for i, r := range rings {
			a, _, _ := Moments(Region{[][]Vec{r}}.Polygon()[0])
			if (a > 0) != (i == 0) {
				t.Errorf("variant %d: ring %d has the area %v", k, i, a)
			}
		}
		if a := Area(s.Roofs[0].Regions[0].Polygon()); math.Abs(a-700) > 1e-9 {
			t.Errorf("variant %d: area %v, want 800 - 100", k, a)
		}
		if z := s.Roofs[0].Surface.Height(40, 20); z != 7 {
			t.Errorf("variant %d: the corner is at %v", k, z)
		}
	}
}

// A site across the antimeridian stays in one piece, whichever way its longitudes are written.
func TestAntimeridian(t *testing.T) {
	for _, east := range []string{"-179.9998", "180.0002"} {
		text := collection(feat(`"role":"roof","elevation_m":5`, "Polygon", strings.ReplaceAll(`[[[179.9998,-17],[E,-17],[E,-16.9998],[179.9998,-16.9998],[179.9998,-17]]]`, "E", east)),
			feat(`"role":"footing"`, "Point", `[180,-16.9999]`))
		s, is := ReadSite(strings.NewReader(text), SiteOptions{})
		if east == "180.0002" {
			if s != nil {
				t.Error("a longitude of 180.0002 was taken")
			}
			continue
		}
		if s == nil {
			t.Fatal(is)
		}
		b := s.Roofs[0].Regions[0].Polygon().Bound()
		if w := b.Max[0] - b.Min[0]; w < 42 || w > 43 {
			t.Errorf("the roof is %v m wide", w)
		}
		if p := s.Footings[0].Points[0]; math.Abs(p.X) > 0.01 {
			t.Errorf("the foot is at %v", p)
		}
	}
}

// The brief's surface replaces the heights of the outline.
func TestSurfaceFromBrief(t *testing.T) {
	opt := metric
	opt.Surface = func(f Frame) Surface { return Plane{X: 20, Y: 10, Z: 9, SlopeX: 0.1} }
	s := mustRead(t, collection(metricRoof, metricFoot), opt)
	if v := s.Roofs[0].Regions[0].Rings[0][1]; v.Z != 11 {
		t.Errorf("corner %v", v)
	}
	opt.Surface = func(f Frame) Surface { return Plane{Z: math.NaN()} }
	if s, _ := ReadSite(strings.NewReader(collection(metricRoof, metricFoot)), opt); s != nil {
		t.Error("a surface of NaN was taken")
	}
}

// num writes degrees with eight decimals, as plans do.
func num(x float64) string { return fmt.Sprintf("%.8f", x) }
