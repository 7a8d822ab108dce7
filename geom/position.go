package geom

import "fmt"

// position is a position of the file: longitude and latitude in degrees, or metres, and a height in m.
type position struct {
	x, y, z float64
	high    bool // the height stands in the position itself
	at      Vec  // the position in local metres, once the frame is known
}

// maxMetres bounds the coordinates of a site in metres: no projected system in use on earth goes beyond 4e7 m.
const maxMetres = 1e8

// faultsShown is how many malformed positions of one feature are reported; the others are most likely alike.
const faultsShown = 5

// geometry reads a geometry into the shapes of the feature.
func (rd *siteReader) geometry(f *feature, v any, path string) {
	obj, ok := v.(map[string]any)
	if !ok {
		rd.fault(f, path, "the geometry is %s; it must be an object", kindOf(v))
		return
	}
	c, at := obj["coordinates"], path+".coordinates"
	switch typ := obj["type"]; typ {
	case "Point":
		rd.point(f, c, at)
	case "MultiPoint":
		rd.each(f, c, at, rd.point)
	case "LineString":
		rd.line(f, c, at)
	case "MultiLineString":
		rd.each(f, c, at, rd.line)
	case "Polygon":
		rd.polygon(f, c, at)
	case "MultiPolygon":
		rd.each(f, c, at, rd.polygon)
	case "GeometryCollection":
		rd.each(f, obj["geometries"], path+".geometries", rd.geometry)
	default:
		rd.fault(f, path+".type", "geometry type is %s; it must be Polygon, MultiPolygon, LineString, MultiLineString, Point, MultiPoint or GeometryCollection", shown(typ))
	}
}

// each reads the members of a list.
func (rd *siteReader) each(f *feature, v any, path string, read func(*feature, any, string)) {
	list, ok := v.([]any)
	if !ok || len(list) == 0 {
		rd.fault(f, path, "this is %s; it must be a list with members", kindOf(v))
		return
	}
	for i, m := range list {
		read(f, m, fmt.Sprintf("%s[%d]", path, i))
	}
}

// point reads one position.
func (rd *siteReader) point(f *feature, v any, path string) {
	if p, ok := rd.position(f, v, path); ok {
		f.points = append(f.points, rawLine{path, []position{p}})
	}
}

// line reads the positions of a line.
func (rd *siteReader) line(f *feature, v any, path string) {
	if l, ok := rd.positions(f, v, path); ok {
		f.lines = append(f.lines, l)
	}
}

// polygon reads the rings of a polygon.
func (rd *siteReader) polygon(f *feature, v any, path string) {
	var p rawPolygon
	rd.each(f, v, path, func(f *feature, v any, path string) {
		if l, ok := rd.positions(f, v, path); ok {
			p.rings = append(p.rings, l)
		}
	})
	f.polygons = append(f.polygons, p)
}

// positions reads a list of positions.
func (rd *siteReader) positions(f *feature, v any, path string) (rawLine, bool) {
	l := rawLine{path: path}
	all := true
	rd.each(f, v, path, func(f *feature, v any, path string) {
		p, ok := rd.position(f, v, path)
		l.pos = append(l.pos, p)
		all = all && ok
	})
	return l, all && len(l.pos) > 0
}

// position reads one position and checks its range.
func (rd *siteReader) position(f *feature, v any, path string) (p position, ok bool) {
	text := ""
	list, isList := v.([]any)
	switch {
	case !isList:
		text = fmt.Sprintf("a position is %s; write [longitude, latitude] or [longitude, latitude, height]", kindOf(v))
	case len(list) < 2:
		text = fmt.Sprintf("a position needs two numbers or three and has %d; write [longitude, latitude] or [longitude, latitude, height]", len(list))
	}
	if text == "" {
		p, text = rd.numbers(f, list)
	}
	if text == "" {
		return p, true
	}
	f.faults++
	f.broken = true
	switch {
	case f.faults <= faultsShown:
		rd.fault(f, path, "%s", text)
	case f.faults == faultsShown+1:
		rd.fault(f, path, "more positions of this feature cannot be used; only the first %d are listed", faultsShown)
	}
	return p, false
}

// numbers reads the numbers of a position; text says what is wrong with them.
func (rd *siteReader) numbers(f *feature, list []any) (p position, text string) {
	for i, v := range list {
		x, ok := number(v)
		if !ok {
			return p, fmt.Sprintf("number %d of a position is %s (%s); write finite numbers without quotes", i+1, kindOf(v), shown(v))
		}
		switch i {
		case 0:
			p.x = x
		case 1:
			p.y = x
		case 2:
			p.z, p.high = x, true
		}
	}
	if !p.high {
		p.z = f.elevation
	}
	return p, rd.rangeFault(p)
}

// rangeFault says what is wrong with the size of the numbers of a position.
func (rd *siteReader) rangeFault(p position) string {
	switch {
	case p.z < -maxHeight || p.z > maxHeight:
		return fmt.Sprintf("the height %g m is beyond the %g m that a height may have; write metres above the datum", p.z, maxHeight)
	case rd.opt.Metric:
		if !(p.x >= -maxMetres && p.x <= maxMetres && p.y >= -maxMetres && p.y <= maxMetres) {
			return fmt.Sprintf("(%g, %g) is out of range for metres (%g); check the unit", p.x, p.y, maxMetres)
		}
	case onGlobe(p.x, p.y):
	case onGlobe(p.y, p.x):
		return fmt.Sprintf("longitude %g and latitude %g: latitude is out of range (-90 to 90) and the other way round they are not, "+
			"so the two seem mixed up; write longitude first (or set `coordinates: metres` in the brief's site if they are metres)", p.x, p.y)
	default:
		return fmt.Sprintf("longitude %g and latitude %g are out of range (-180 to 180, -90 to 90); if positions are metres, set `coordinates: metres` in the brief's site", p.x, p.y)
	}
	return ""
}

// onGlobe reports whether degrees are in range.
func onGlobe(lon, lat float64) bool { return lon >= -180 && lon <= 180 && lat >= -90 && lat <= 90 }
