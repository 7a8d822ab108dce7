package geom

import (
	"strings"
	"testing"
)

// want is an issue that must be there: its severity, its path, and words of its text.
type want struct {
	sev   Severity
	path  string
	words string
}

// roofWith is a roof in metres with the given rings.
func roofWith(rings string) string { return feat(`"role":"roof","elevation_m":6`, "Polygon", rings) }

// What is wrong with a site must be said with its place and what to do about it; what is refused must not come back as
// a site.
func TestIssues(t *testing.T) {
	degrees, m := SiteOptions{}, metric
	square := `[[0,0],[40,0],[40,20],[0,20],[0,0]]`
	cases := []struct {
		name, text string
		opt        SiteOptions
		want       want
	}{
		{"empty", "  \n", m, want{Error, "", "empty"}},
		{"garbage", `{"type":"FeatureCollection","features":[]} x`, m, want{Error, "line 1, column 44", "not JSON"}},
		{"syntax", "{\n  \"type\": ,\n}", m, want{Error, "line 2, column 11", "not JSON"}},
		{"cut off", `{"type":"FeatureCollection"`, m, want{Error, "line 1, column 28", "not JSON"}},
		{"NaN", `{"type":"FeatureCollection","features":[NaN]}`, m, want{Error, "line 1, column 41", "finite"}},
		{"list", `[]`, m, want{Error, "", "FeatureCollection"}},
		{"bare geometry", `{"type":"Point","coordinates":[0,0]}`, m, want{Error, "type", "Wrap"}},
		{"features no list", `{"type":"FeatureCollection","features":{}}`, m, want{Error, "features", "list"}},
		{"feature null", collection("null", metricRoof, metricFoot), m, want{Error, "features[0]", "object"}},
		{"no roof", collection(metricFoot), m, want{Error, "features", "no roof"}},
		{"no feet", collection(metricRoof), m, want{Error, "features", "no place to stand"}},
		{"one number", collection(roofWith(`[[[0,0],[40],[40,20],[0,20],[0,0]]]`), metricFoot), m, want{Error, "features[0].geometry.coordinates[0][1]", "two numbers"}},
		{"no numbers", collection(roofWith(`[[[0,0],[],[40,20],[0,20],[0,0]]]`), metricFoot), m, want{Error, "features[0].geometry.coordinates[0][1]", "two numbers"}},
		{"text", collection(roofWith(`[[[0,0],["40",0],[40,20],[0,20],[0,0]]]`), metricFoot), m, want{Error, "features[0].geometry.coordinates[0][1]", "quotes"}},
		{"null number", collection(roofWith(`[[[0,0],[40,0],[40,20,null],[0,20],[0,0]]]`), metricFoot), m, want{Error, "features[0].geometry.coordinates[0][2]", "number 3"}},
		{"null position", collection(roofWith(`[[[0,0],null,[40,20],[0,20],[0,0]]]`), metricFoot), m, want{Error, "features[0].geometry.coordinates[0][1]", "position is missing or null"}},
		{"too shallow", collection(roofWith(`[[0,0],[40,0],[40,20],[0,0]]`), metricFoot), m, want{Error, "features[0].geometry.coordinates[0][0]", "position is a number"}},
		{"overflow", collection(roofWith(`[[[0,0],[1e999,0],[40,20],[0,0]]]`), metricFoot), m, want{Error, "features[0].geometry.coordinates[0][1]", "too large"}},
		{"unclosed", collection(roofWith(`[[[0,0],[40,0],[40,20],[0,20]]]`), metricFoot), m, want{Error, "features[0].geometry.coordinates[0][3]", "not closed"}},
		{"three positions", collection(roofWith(`[[[0,0],[40,0],[0,0]]]`), metricFoot), m, want{Error, "features[0].geometry.coordinates[0]", "four positions"}},
		{"collapsed", collection(roofWith(`[[[0,0],[40,0],[40,0],[0,0],[0,0]]]`), metricFoot), m, want{Error, "features[0].geometry.coordinates[0]", "2 different places"}},
		{"bow tie", collection(roofWith(`[[[0,0],[40,20],[40,0],[0,20],[0,0]]]`), metricFoot), m, want{Error, "features[0].geometry.coordinates[0][0]", "crosses itself"}},
		{"pinched", collection(roofWith(`[[[0,0],[20,10],[40,0],[40,20],[20,10],[0,20],[0,0]]]`), metricFoot), m, want{Error, "features[0].geometry.coordinates[0][0]", "touches itself"}},
		{"spike", collection(roofWith(`[[[0,0],[60,0],[40,0],[40,20],[0,20],[0,0]]]`), metricFoot), m, want{Error, "features[0].geometry.coordinates[0][0]", "spike"}},
		{"flat triangle", collection(roofWith(`[[[0,0],[20,0],[40,0],[0,0]]]`), metricFoot), m, want{Error, "features[0].geometry.coordinates[0][0]", "spike"}},
		{"hole across", collection(roofWith(`[`+square+`,[[30,5],[50,5],[50,10],[30,10],[30,5]]]`), metricFoot), m, want{Error, "features[0].geometry.coordinates[1][0]", "holes inside"}},
		{"hole outside", collection(roofWith(`[`+square+`,[[50,5],[60,5],[60,10],[50,5]]]`), metricFoot), m, want{Error, "features[0].geometry.coordinates[1]", "not inside"}},
		{"hole around", collection(roofWith(`[[[10,5],[20,5],[20,10],[10,5]],`+square+`]`), metricFoot), m, want{Error, "features[0].geometry.coordinates[1]", "not inside"}},
		{"hole in hole", collection(roofWith(`[`+square+`,[[5,5],[15,5],[15,15],[5,15],[5,5]],[[8,8],[10,8],[10,10],[8,8]]]`), metricFoot), m, want{Error, "features[0].geometry.coordinates[2]", "overlaps the hole"}},
		{"hole is outer", collection(roofWith(`[`+square+`,`+square+`]`), metricFoot), m, want{Error, "features[0].geometry.coordinates[1][0]", "holes inside"}},
		{"too many positions", collection(roofWith(`[[[0,0],`+strings.Repeat(`[1,1],`, 5000)+`[0,0]]]`), metricFoot), m, want{Error, "features[0].geometry.coordinates[0]", "simplify"}},
		{"nothing usable", collection(roofWith(`[[[0,0],[40]]]`), feat(`"role":"footing"`, "Point", `[20]`)), m, want{Error, "features[1].geometry.coordinates", "two numbers"}},
		{"no rings", collection(roofWith(`[]`), metricFoot), m, want{Error, "features[0].geometry.coordinates", "empty list"}},
		{"height", collection(roofWith(`[[[0,0,9001],[40,0],[40,20],[0,0,9001]]]`), metricFoot), m, want{Error, "features[0].geometry.coordinates[0][0]", "height"}},
		{"elevation", collection(feat(`"role":"roof","elevation_m":"6"`, "Polygon", "["+square+"]"), metricFoot), m, want{Error, "features[0].properties.elevation_m", "quotes"}},
		{"line roof", collection(feat(`"role":"roof"`, "LineString", `[[0,0],[1,1]]`), metricRoof, metricFoot), m, want{Error, "features[0].geometry", "must be an area"}},
		{"geometry type", collection(feat(`"role":"roof"`, "Circle", `[0,0]`), metricFoot), m, want{Error, "features[0].geometry.type", "Circle"}},
		{"roof on the ground", collection(feat(`"role":"roof"`, "Polygon", "["+square+"]"), metricFoot), m, want{Error, "features[0].geometry", "below ground"}},
		{"foot above roof", collection(metricRoof, metricFoot, feat(`"role":"footing"`, "Point", `[20,10,7]`)), m, want{Error, "features[2].geometry", "raise the roof"}},
		{"tiny roof", collection(roofWith(`[[[4.3,52.1],[4.3004,52.1],[4.3004,52.1002],[4.3,52.1]]]`), feat(`"role":"footing"`, "Point", `[4.3,52.1]`)), m, want{Error, "features[0].geometry", "coordinates: lonlat"}},
		{"far foot", collection(metricRoof, metricFoot, feat(`"role":"footing"`, "Point", `[20,90000]`)), m, want{Error, "features[2].geometry.coordinates", "90.0 km"}},
		{"kept without area", collection(metricRoof, metricFoot, feat(`"role":"kept"`, "LineString", `[[0,0,0],[0,0,5]]`)), m, want{Error, "features[2].properties.area_cm2", "needs the area"}},
		{"kept area 0", collection(metricRoof, metricFoot, feat(`"role":"kept","area_m2":0`, "LineString", `[[0,0,0],[0,0,5]]`)), m, want{Error, "features[2].properties.area_m2", "larger than 0"}},
		{"kept of no length", collection(metricRoof, metricFoot, feat(`"role":"kept","area_m2":1`, "LineString", `[[0,0,0],[0,0,0]]`)), m, want{Error, "features[2].geometry.coordinates", "two different positions"}},
		{"negative capacity", collection(metricRoof, feat(`"role":"footing","vertical_kn":-4`, "Point", `[20,10]`)), m, want{Error, "features[1].properties.vertical_kn", "negative"}},
		{"flag", collection(metricRoof, feat(`"role":"footing","no_uplift":"yes"`, "Point", `[20,10]`)), m, want{Error, "features[1].properties.no_uplift", "true or false"}},
		{"prism of nothing", collection(metricRoof, metricFoot, feat(`"role":"keep-clear","from_m":3,"to_m":2`, "Polygon", "["+square+"]")), m, want{Error, "features[2].properties", "less than to_m"}},
		{"wall top", collection(metricRoof, metricFoot, feat(`"role":"wall","top_m":-1`, "LineString", `[[0,0],[0,5]]`)), m, want{Error, "features[2].properties.top_m", "below its foot"}},
		{"latitude first", collection(strings.ReplaceAll(strings.ReplaceAll(roofText, "4.3", "114.3"), "52.1", "22.1"), feat(`"role":"footing"`, "Point", `[22.1001,114.3002]`)), degrees, want{Error, "features[1].geometry.coordinates", "mixed up"}},
		{"one feature exchanged", collection(roofText, footText, feat(`"role":"footing"`, "Point", `[52.1001,4.3002]`)), degrees, want{Error, "features[2].geometry.coordinates", "mixed up"}},
		{"metres as degrees", collection(roofWith(`[[[155000,463000],[155040,463000],[155040,463020],[155000,463000]]]`), metricFoot), degrees, want{Error, "features[0].geometry.coordinates[0][0]", "coordinates: metres"}},
		{"small metres as degrees", collection(metricRoof, metricFoot), degrees, want{Error, "features[0].geometry.coordinates", "coordinates: metres"}},
		{"out of range in metres", collection(roofWith(`[[[0,0],[2e8,0],[40,20],[0,0]]]`), metricFoot), m, want{Error, "features[0].geometry.coordinates[0][1]", "out of range"}},
		{"crs", `{"type":"FeatureCollection","crs":{"type":"name","properties":{"name":"urn:ogc:def:crs:EPSG::28992"}},"features":[` + roofText + "," + footText + `]}`, degrees, want{Error, "crs", "EPSG:28992"}},
		{"crs of degrees", `{"type":"FeatureCollection","crs":{"type":"name","properties":{"name":"urn:ogc:def:crs:OGC:1.3:CRS84"}},"features":[` + metricRoof + "," + metricFoot + `]}`, m, want{Error, "crs", "coordinates: lonlat"}},

		{"other crs label", `{"type":"FeatureCollection","crs":{"type":"name","properties":{"name":"EPSG:25831"}},"features":[` + metricRoof + "," + metricFoot + `]}`, m, want{Warning, "crs", "EPSG:25831"}},
		{"unknown role", collection(metricRoof, metricFoot, feat(`"role":"keepclear"`, "Polygon", "[]")), m, want{Warning, "features[2].properties.role", "did you mean keep-clear?"}},
		{"no role", collection(metricRoof, metricFoot, feat(`"name":"x"`, "Polygon", "[]")), m, want{Warning, "features[2].properties.role", "no role"}},
		{"no geometry", collection(metricRoof, metricFoot, `{"type":"Feature","properties":{"role":"wall"},"geometry":null}`), m, want{Warning, "features[2].geometry", "no geometry"}},
		{"misspelt", collection(metricRoof, feat(`"role":"footing","verticl_kn":3`, "Point", `[20,10]`)), m, want{Warning, "features[1].properties.verticl_kn", "did you mean vertical_kn?"}},
		{"without unit", collection(metricRoof, feat(`"role":"footing","Vertical":3`, "Point", `[20,10]`)), m, want{Warning, "features[1].properties.Vertical", "did you mean vertical_kn?"}},
		{"height_m", collection(metricRoof, feat(`"role":"footing","height_m":3`, "Point", `[20,10]`)), m, want{Warning, "features[1].properties.height_m", "did you mean elevation_m?"}},
		{"of another role", collection(metricRoof, feat(`"role":"footing","area_cm2":3`, "Point", `[20,10]`)), m, want{Warning, "features[1].properties.area_cm2", "not a property of a footing"}},
		{"under nothing", collection(metricRoof, metricFoot, feat(`"role":"footing","name":"Far"`, "Point", `[20,27]`)), m, want{Warning, "features[2].geometry", "7.0 m outside"}},
		{"swallowed", collection(metricRoof, metricFoot, feat(`"role":"footing"`, "Polygon", `[[[1,1],[3,1],[3,3],[1,1]]]`), feat(`"role":"keep-clear"`, "Polygon", `[[[0,0],[5,0],[5,5],[0,5],[0,0]]]`)), m, want{Warning, "features[2].geometry", "covers all of this footing"}},
		{"two roofs", collection(metricRoof, metricFoot, roofWith(`[[[30,0],[50,0],[50,20],[30,20],[30,0]]]`)), m, want{Warning, "features[2].geometry", "overlaps roof 1"}},
		{"some heights", collection(feat(`"role":"roof","elevation_m":6`, "Polygon", `[[[0,0,6],[40,0],[40,20],[0,0,6]]]`), metricFoot), m, want{Warning, "features[0].geometry.coordinates", "2 of 4 positions"}},
		{"wall without top", collection(metricRoof, metricFoot, feat(`"role":"wall"`, "LineString", `[[0,0],[0,5]]`)), m, want{Warning, "features[2].properties.top_m", "no top_m"}},
		{"same names", collection(metricRoof, feat(`"role":"footing","name":"A"`, "Point", `[20,10]`), feat(`"role":"footing","name":"A"`, "Point", `[25,10]`)), m, want{Warning, "features[2].geometry", "same name"}},
		{"first height wins", collection(roofWith(`[[[0,0,6],[40,0,6],[40,20,6],[0,0,7]]]`), metricFoot), m, want{Warning, "features[0].geometry.coordinates[0][3]", "first height"}},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			s, is := ReadSite(strings.NewReader(c.text), c.opt)
			if (s == nil) != is.HasError() {
				t.Errorf("site given: %v, issues %v", s != nil, is)
			}
			if (s == nil) != (c.want.sev == Error) {
				t.Errorf("site given: %v, want a %v; issues:\n%v", s != nil, c.want.sev, is)
			}
			for _, i := range is {
				if i.Severity == c.want.sev && i.Path == c.want.path && strings.Contains(i.Text, c.want.words) {
					return
				}
			}
			t.Errorf("want %v at %q with %q; issues:\n%v", c.want.sev, c.want.path, c.want.words, is)
		})
	}
}

// A plan that is in order must not be talked about.
func TestNoIssues(t *testing.T) {
	files := map[string]struct {
		text string
		opt  SiteOptions
	}{
		"degrees": {collection(roofText, footText), SiteOptions{}},
		"byte order mark and CRS84": {"\xef\xbb\xbf" + `{"type":"FeatureCollection","crs":{"type":"name","properties":{"name":"urn:ogc:def:crs:OGC:1.3:CRS84"}},"features":[` +
			roofText + "," + footText + `]}`, SiteOptions{}},
		"roofs side by side": {collection(metricRoof, metricFoot, roofWith(`[[[40,0],[60,0],[60,20],[40,20],[40,0]]]`)), metric},
		"hole touches the outline once": {collection(roofWith(`[[[0,0],[40,0],[40,20],[0,20],[0,0]],[[0,10],[10,5],[10,15],[0,10]]]`),
			feat(`"role":"footing"`, "Point", `[20,10]`)), metric},
		"own properties": {collection(metricRoof, feat(`"role":"footing","note":"rock","stroke":"#fff"`, "Polygon", `[[[1,1],[3,1],[3,3],[1,1]]]`)), metric},
		"all kinds of geometry": {collection(metricRoof, `{"type":"Feature","id":"z","properties":{"role":"footing"},"geometry":{"type":"GeometryCollection","geometries":[`+
			`{"type":"Point","coordinates":[1,1]},{"type":"LineString","coordinates":[[1,2],[5,2]]},{"type":"MultiPolygon","coordinates":[[[[1,3],[3,3],[3,5],[1,3]]]]}]}}`), metric},
		"foot on the slope beside the roof": {collection(metricRoof, metricFoot, feat(`"role":"footing"`, "Point", `[40.5,10,5]`)), metric},
		"keep-clear beside a foot":          {collection(metricRoof, metricFoot, feat(`"role":"keep-clear","from_m":1`, "Polygon", `[[[15,5],[25,5],[25,15],[15,15],[15,5]]]`)), metric},
	}
	for name, f := range files {
		if s, is := ReadSite(strings.NewReader(f.text), f.opt); s == nil || len(is) > 0 {
			t.Errorf("%s: %v", name, is)
		}
	}
}

// Longitude and latitude that are mixed up in the whole plan can be told by the corners of a roof that is turned
// against north, and by nothing else.
func TestMixedUpByCorners(t *testing.T) {
	// A right-angled roof of 40 m x 20 m, turned by 30 degrees.
	f := NewFrame(4.3, 52.1)
	corner := func(u, v float64, back bool) string {
		lon, lat := f.ToLonLat(u*0.866025403784-v*0.5, u*0.5+v*0.866025403784)
		if back {
			lon, lat = lat, lon
		}
		return "[" + num(lon) + "," + num(lat) + ",6]"
	}
	for _, back := range []bool{false, true} {
		var ring []string
		for _, c := range [][2]float64{{0, 0}, {40, 0}, {40, 20}, {0, 20}, {0, 0}} {
			ring = append(ring, corner(c[0], c[1], back))
		}
		text := collection(feat(`"role":"roof"`, "Polygon", "[["+strings.Join(ring, ",")+"]]"), feat(`"role":"footing"`, "Point", strings.Replace(corner(20, 10, back), ",6]", "]", 1)))
		s, is := ReadSite(strings.NewReader(text), SiteOptions{})
		if back != (s == nil) {
			t.Errorf("exchanged %v: site given %v, %v", back, s != nil, is)
		}
		if back && !strings.Contains(is.Err().Error(), "mixed up") {
			t.Error(is)
		}
	}
}
