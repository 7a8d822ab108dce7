package geom

import "strings"

// readCRS looks at the crs member of the 2008 form of GeoJSON, which RFC 7946 has removed but programs still write.
func (rd *siteReader) readCRS(v any) {
	if !rd.opt.Metric {
		rd.site.Frame = Frame{Geographic: true, CRS: geographicCRS}
	} else {
		rd.site.Frame = Frame{CRS: rd.opt.CRS}
	}
	if v == nil {
		return
	}
	name := ""
	if obj, ok := v.(map[string]any); ok {
		if props, ok := obj["properties"].(map[string]any); ok {
			name, _ = props["name"].(string)
		}
	}
	label := crsLabel(name)
	if rd.opt.Metric {
		rd.metricCRS(label)
		return
	}
	switch label {
	case "EPSG:4326", "EPSG:4979", "CRS84", "CRS84H":
	case "EPSG:4258", "EPSG:4269", "EPSG:4283", "EPSG:7844":
		rd.issues.Add(Warning, "", "crs", "the file says %s; it is read as WGS 84, which differs by up to about 2 m in place and not in shape", label)
	case "":
		rd.issues.Add(Error, "", "crs", "the crs member names no coordinate system; leave it out if positions are WGS 84 longitude and latitude, "+
			"or set `coordinates: metres` and `epsg` in the brief's site if they are metres")
	default:
		rd.issues.Add(Error, "", "crs", "the file says %s, not WGS 84; export the plan in longitude and latitude (EPSG:4326), "+
			"or set `coordinates: metres` and `epsg` in the brief's site if positions are metres", label)
	}
}

// metricCRS compares the crs member with the label of the brief.
func (rd *siteReader) metricCRS(label string) {
	switch {
	case label == "EPSG:4326" || label == "EPSG:4979" || strings.HasPrefix(label, "CRS84"):
		rd.issues.Add(Error, "", "crs", "the file says longitude and latitude (%s) and the brief says metres; set `coordinates: lonlat` in the brief's site", label)
	case label == "":
	case rd.site.Frame.CRS == "":
		rd.site.Frame.CRS = label
	case !strings.EqualFold(rd.site.Frame.CRS, label):
		rd.issues.Add(Warning, "", "crs", "the file says %s and the brief says %s; the brief's is used as the label", label, rd.site.Frame.CRS)
	}
}

// crsLabel shortens a name such as urn:ogc:def:crs:EPSG::28992 to EPSG:28992.
func crsLabel(name string) string {
	parts := strings.FieldsFunc(strings.ToUpper(strings.TrimSpace(name)), func(r rune) bool { return r == ':' || r == '/' || r == '#' })
	if len(parts) == 0 {
		return ""
	}
	last := parts[len(parts)-1]
	if strings.HasPrefix(last, "CRS84") {
		return last
	}
	for _, p := range parts {
		if p == "EPSG" {
			return "EPSG:" + last
		}
	}
	return strings.TrimSpace(name)
}
