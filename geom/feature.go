package geom

import (
	"encoding/json"
	"fmt"
	"strings"
)

// The roles of site features.
const (
	roleRoof      = "roof"
	roleFooting   = "footing"
	roleKeepClear = "keep-clear"
	roleEnvelope  = "envelope"
	roleWall      = "wall"
	roleKept      = "kept"
)

var roles = []string{roleRoof, roleFooting, roleKeepClear, roleEnvelope, roleWall, roleKept}

// feature is a feature of the file with its positions as they stand there.
type feature struct {
	role  string
	name  string // name, id or role and count
	path  string // of the feature; empty for a bare Feature
	props map[string]any

	polygons []rawPolygon
	lines    []rawLine
	points   []rawLine // each of one position
	broken   bool      // an Error was found in its positions: judged no further
	faults   int       // malformed positions so far

	elevation float64 // height of positions without one, m
}

// rawLine is a list of positions; element i is at path[i], or at path itself if it is a point.
type rawLine struct {
	path string
	pos  []position
}

// rawPolygon is a polygon's rings.
type rawPolygon struct{ rings []rawLine }

// at returns the path of something inside the feature.
func (f *feature) at(rest string) string {
	if f.path == "" {
		return rest
	}
	return f.path + "." + rest
}

// feature reads one feature; number counts from 1.
func (rd *siteReader) feature(v any, number int, path string) {
	label := fmt.Sprintf("feature %d", number)
	obj, ok := v.(map[string]any)
	if !ok {
		rd.issues.Add(Error, label, path, "the feature is %s; it must be an object of type Feature", kindOf(v))
		return
	}
	f := &feature{path: path}
	f.props, _ = obj["properties"].(map[string]any)
	if obj["type"] != "Feature" {
		rd.issues.Add(Error, label, f.at("type"), "type is %s; it must be Feature", shown(obj["type"]))
		return
	}
	f.name = firstName(f.props["name"], f.props["id"], obj["id"])
	if f.name != "" {
		label = f.name
	}
	if !rd.readRole(f, label) {
		return
	}
	if f.name == "" {
		f.name = rd.countedName(f.role)
	}
	rd.checkKeys(f)
	if obj["geometry"] == nil {
		rd.issues.Add(Warning, f.name, f.at("geometry"), "the feature has no geometry and is ignored")
		return
	}
	f.elevation = rd.elevation(f)
	rd.features = append(rd.features, f)
	rd.geometry(f, obj["geometry"], f.at("geometry"))
}

// readRole sets the role and reports whether the feature is to be read on.
func (rd *siteReader) readRole(f *feature, label string) bool {
	path := f.at("properties.role")
	v, given := f.props["role"]
	role, isText := v.(string)
	switch {
	case !given || v == nil:
		rd.issues.Add(Warning, label, path, "the feature has no role and is ignored; the roles are %s", strings.Join(roles, ", "))
		return false
	case !isText:
		rd.issues.Add(Warning, label, path, "role is %s and the feature is ignored; the roles are %s", kindOf(v), strings.Join(roles, ", "))
		return false
	}
	for _, r := range roles {
		if role == r {
			f.role = r
			return true
		}
	}
	hint := "."
	if near := nearest(role, roles); near != "" {
		hint = fmt.Sprintf("; did you mean %s?", near)
	}
	rd.issues.Add(Warning, label, path, "role %s is unknown and the feature is ignored%s The roles are %s", shown(role), hint, strings.Join(roles, ", "))
	return false
}

// firstName returns the first of some values that can be a name: a text that is not blank or a number.
func firstName(vs ...any) string {
	for _, v := range vs {
		switch v := v.(type) {
		case string:
			if s := strings.TrimSpace(v); s != "" {
				return s
			}
		case json.Number:
			return v.String()
		}
	}
	return ""
}

// countedName returns a name for a feature that has none: its role and its number among the features of that role.
func (rd *siteReader) countedName(role string) string {
	n := 1
	for _, f := range rd.features {
		if f.role == role {
			n++
		}
	}
	return fmt.Sprintf("%s %d", role, n)
}
