package geom

import (
	"bufio"
	"fmt"
	"math"
	"math/rand/v2"
	"os"
	"strings"
	"testing"
)

// geodesic is one line of testdata/geodesics.txt.
type geodesic struct{ lon1, lat1, lon2, lat2, dist float64 }

func readGeodesics(t *testing.T) (rows []geodesic) {
	t.Helper()
	f, err := os.Open("testdata/geodesics.txt")
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	for sc := bufio.NewScanner(f); sc.Scan(); {
		if strings.HasPrefix(sc.Text(), "#") {
			continue
		}
		var g geodesic
		if _, err := fmt.Sscan(sc.Text(), &g.lon1, &g.lat1, &g.lon2, &g.lat2, &g.dist); err != nil {
			t.Fatalf("%q: %v", sc.Text(), err)
		}
		rows = append(rows, g)
	}
	if len(rows) < 50 {
		t.Fatalf("only %d reference distances", len(rows))
	}
	return rows
}

// A site measured in local metres must have the lengths that a surveyor measures: GeographicLib's geodesics, to 1 mm
// in 1 km, with the origin at an end of the line and with the origin about half a kilometre off.
func TestToLocalKeepsGeodesicDistances(t *testing.T) {
	const allowed = 1e-3 // m, the accuracy that the site reader promises over 1 km
	worst := 0.0
	for _, g := range readGeodesics(t) {
		first := NewFrame(g.lon1, g.lat1)
		ox, oy := first.ToLocal(g.lon2, g.lat2)
		ax, ay := first.ToLocal(g.lon1, g.lat1)
		// The frame in the middle of the line, turned a quarter.
		offLon, offLat := first.ToLonLat((ax+ox)/2-(oy-ay)/2, (ay+oy)/2+(ox-ax)/2)
		for _, f := range []Frame{first, NewFrame(offLon, offLat)} {
			x1, y1 := f.ToLocal(g.lon1, g.lat1)
			x2, y2 := f.ToLocal(g.lon2, g.lat2)
			diff := math.Abs(math.Hypot(x2-x1, y2-y1) - g.dist)
			worst = math.Max(worst, diff)
			if diff > allowed {
				t.Errorf("from %v to %v in the frame %v: %.6f m off the geodesic", []float64{g.lon1, g.lat1}, []float64{g.lon2, g.lat2}, f, diff)
			}
		}
	}
	t.Logf("largest difference %.2e m", worst)
}

// The meridian distance from the equator to the pole on WGS 84 is 10 001 965.729 m (published in many places, for
// example EPSG guidance note 7-2; from memory): it would betray a wrong radius or a wrong coefficient of the series.
func TestQuarterMeridian(t *testing.T) {
	_, y := mercator(0, 90)
	if math.Abs(y-10001965.729) > 1e-3 {
		t.Errorf("quarter meridian %.4f m", y)
	}
}

// What is written back must be the place that was read.
func TestRoundTrip(t *testing.T) {
	const allowed = 1e-9 // degrees
	rnd := rand.New(rand.NewPCG(1, 2))
	for range 4000 {
		f := NewFrame(rnd.Float64()*360-180, rnd.Float64()*179.8-89.9)
		x, y := rnd.Float64()*20000-10000, rnd.Float64()*20000-10000
		lon, lat := f.ToLonLat(x, y)
		x2, y2 := f.ToLocal(lon, lat)
		if math.Hypot(x2-x, y2-y) > 1e-6 {
			t.Fatalf("%v: (%v, %v) m came back as (%v, %v)", f, x, y, x2, y2)
		}
		lon2, lat2 := f.ToLonLat(x2, y2)
		if math.Abs(wrapDegrees(lon2-lon)) > allowed || math.Abs(lat2-lat) > allowed {
			t.Fatalf("%v: (%v, %v) degrees came back as (%v, %v)", f, lon, lat, lon2, lat2)
		}
		if lon < -180 || lon > 180 || lat < -90 || lat > 90 {
			t.Fatalf("%v: (%v, %v) degrees is out of range", f, lon, lat)
		}
	}
}

// East is +x and north is +y on both hemispheres, and across the antimeridian.
func TestDirections(t *testing.T) {
	for _, f := range []Frame{NewFrame(4.3, 52.1), NewFrame(-70.6, -33.4), NewFrame(180, -17), NewFrame(-179.9999, 66)} {
		if x, y := f.ToLocal(f.Lon, f.Lat); x != 0 || y != 0 {
			t.Errorf("%v: the origin is at (%v, %v)", f, x, y)
		}
		x, y := f.ToLocal(wrapDegrees(f.Lon+0.001), f.Lat)
		if x < 10 || x > 120 || math.Abs(y) > 1 {
			t.Errorf("%v: a place to the east is at (%v, %v)", f, x, y)
		}
		if x, y = f.ToLocal(f.Lon, f.Lat+0.001); math.Abs(x) > 1e-9 || y < 110 || y > 112 {
			t.Errorf("%v: a place to the north is at (%v, %v)", f, x, y)
		}
	}
}

// A frame in metres changes nothing, and an origin prints with at most seven decimals.
func TestFrameDetails(t *testing.T) {
	if x, y := (Frame{CRS: "EPSG:28992"}).ToLocal(155000.25, 463000.5); x != 155000.25 || y != 463000.5 {
		t.Errorf("metres came back as (%v, %v)", x, y)
	}
	if lon, lat := (Frame{}).ToLonLat(1, 2); lon != 1 || lat != 2 {
		t.Errorf("metres came back as (%v, %v)", lon, lat)
	}
	f := NewFrame(4.123456789, -52.987654321)
	if s := fmt.Sprint(f.Lon, f.Lat); s != "4.1234568 -52.9876543" {
		t.Errorf("the origin prints as %s", s)
	}
}
