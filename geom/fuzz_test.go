package geom

import (
	"bytes"
	"math"
	"strings"
	"testing"
)

// FuzzReadSite: no input may panic the reader, and a site that it lets through keeps what Site promises.
func FuzzReadSite(f *testing.F) {
	for _, text := range []string{
		"", "{}", "[]", "null", collection(roofText, footText), collection(metricRoof, metricFoot), roofText,
		collection(feat(`"role":"roof","elevation_m":6`, "MultiPolygon", `[[[[0,0],[40,0],[40,20],[0,20],[0,0]],[[5,5],[9,5],[9,9],[5,5]]],[[[50,0],[60,0],[60,9],[50,0]]]]`),
			feat(`"role":"footing","vertical_kn":3`, "LineString", `[[1,1],[4,1]]`),
			feat(`"role":"keep-clear","to_m":4.5`, "Polygon", `[[[0,0],[5,0],[5,5],[0,5],[0,0]]]`),
			feat(`"role":"envelope"`, "Polygon", `[[[-9,-9],[99,-9],[99,99],[-9,-9]]]`),
			feat(`"role":"wall","top_m":4`, "MultiLineString", `[[[0,21],[40,21]]]`),
			feat(`"role":"kept","area_cm2":4`, "LineString", `[[0,21,0],[40,21,4]]`)),
		collection(roofText, `{"type":"Feature","properties":{"role":"footing"},"geometry":{"type":"GeometryCollection","geometries":[{"type":"Point","coordinates":[4.3,52.1]}]}}`),
		collection(strings.ReplaceAll(roofText, "52.1", "89.9"), strings.ReplaceAll(footText, "52.1", "89.9")),
		collection(feat(`"role":"roof","elevation_m":6`, "Polygon", `[[[179.9999,0],[-179.9999,0],[-179.9999,0.0001],[179.9999,0]]]`), feat(`"role":"footing"`, "Point", `[180,0]`)),
		`{"type":"FeatureCollection","crs":{"type":"name","properties":{"name":"EPSG:4326"}},"features":[null,{"type":"Feature"}]}`,
	} {
		f.Add([]byte(text), false)
		f.Add([]byte(text), true)
	}
	f.Fuzz(func(t *testing.T, text []byte, metres bool) {
		s, is := ReadSite(bytes.NewReader(text), SiteOptions{Metric: metres})
		if (s == nil) != is.HasError() {
			t.Fatalf("site given: %v, issues %v", s != nil, is)
		}
		for _, i := range is {
			if i.Text == "" || strings.Contains(i.String(), "%!") {
				t.Fatalf("an issue says nothing: %v", i)
			}
		}
		if s != nil {
			checkSite(t, s)
		}
	})
}

// checkSite fails if a site breaks what Site promises.
func checkSite(t *testing.T, s *Site) {
	t.Helper()
	regions := func(rs []Region) {
		for _, r := range rs {
			for k, ring := range r.Rings {
				checkPlaces(t, ring, 3)
				if a, _, _ := Moments(Region{[][]Vec{ring}}.Polygon()[0]); (a > 0) != (k == 0) {
					t.Fatalf("ring %d has the area %v: %v", k, a, ring)
				}
			}
		}
	}
	if len(s.Roofs) == 0 || len(s.Footings)+len(s.Walls) == 0 {
		t.Fatal("no roof or no place to stand")
	}
	for _, r := range s.Roofs {
		regions(r.Regions)
		for _, g := range r.Regions {
			for _, ring := range g.Rings {
				for _, v := range ring {
					if z := r.Surface.Height(v.X, v.Y); !(math.Abs(z-v.Z) <= 1e-5) {
						t.Fatalf("the roof is at %v where its outline is at %v", z, v.Z)
					}
				}
			}
			c := Centroid(g.Polygon())
			zx, zy := r.Surface.Gradient(c[0], c[1])
			if !(Vec{zx, zy, r.Surface.Height(c[0], c[1])}).Finite() {
				t.Fatalf("the surface is not finite at %v", c)
			}
		}
	}
	for _, z := range s.Footings {
		regions(z.Regions)
		for _, l := range z.Lines {
			checkPlaces(t, l, 2)
		}
		checkPlaces(t, z.Points, 0)
		if len(z.places()) == 0 || z.Name == "" {
			t.Fatalf("an empty footing: %+v", z)
		}
	}
	for _, ps := range [][]Prism{s.KeepClear, s.Envelope} {
		for _, p := range ps {
			if !(p.From < p.To) || p.From < -NoLimit || p.To > NoLimit || len(p.Polygon) == 0 || len(p.Polygon[0]) < 4 {
				t.Fatalf("a prism of nothing: %+v", p)
			}
		}
	}
	for _, w := range s.Walls {
		checkPlaces(t, w.Points, 2)
		if w.Area != 0 {
			t.Fatalf("wall %+v", w)
		}
	}
	for _, k := range s.Kept {
		checkPlaces(t, k.Points, 2)
		if !(k.Area > 0) {
			t.Fatalf("kept %+v", k)
		}
	}
}

// checkPlaces fails if places are too few or not finite.
func checkPlaces(t *testing.T, vs []Vec, least int) {
	t.Helper()
	if len(vs) < least {
		t.Fatalf("only %d places, want %d", len(vs), least)
	}
	for _, v := range vs {
		if !v.Finite() {
			t.Fatalf("%v is not finite", v)
		}
	}
}

// The same file gives the same issues and the same site, in the same order.
func TestReadSiteIsStable(t *testing.T) {
	text := collection(metricRoof, metricFoot, feat(`"role":"footing","verticl_kn":1,"uplft_kn":2,"sidways_kn":3,"nam":4`, "Point", `[1,1]`),
		feat(`"role":"keep-clear","area_m2":1,"top_m":2,"from":3`, "Polygon", `[[[0,0],[5,5],[5,0],[0,5],[0,0]],[[1,1],[9,1],[9,3],[1,1]]]`))
	_, first := ReadSite(strings.NewReader(text), metric)
	for range 20 {
		_, again := ReadSite(strings.NewReader(text), metric)
		if len(first) != len(again) {
			t.Fatal("another number of issues")
		}
		for i := range first {
			if first[i] != again[i] {
				t.Fatalf("issue %d was %v and is %v", i, first[i], again[i])
			}
		}
	}
}
