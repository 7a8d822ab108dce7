package geom

import (
	"fmt"
	"slices"
	"strings"
)

// maxHeight bounds heights above and below the datum, m: no place on land is beyond it.
const maxHeight = 9000.0

// commonKeys are the properties of every role.
var commonKeys = []string{"role", "name", "id"}

// roleKeys are the properties that a role has besides the common ones.
var roleKeys = map[string][]string{
	roleRoof:      {"elevation_m"},
	roleFooting:   {"elevation_m", "no_uplift", "vertical_only", "vertical_kn", "uplift_kn", "sideways_kn", "cost_m3_per_kn"},
	roleKeepClear: {"from_m", "to_m"},
	roleEnvelope:  {"from_m", "to_m"},
	roleWall:      {"elevation_m", "top_m"},
	roleKept:      {"elevation_m", "area_cm2", "area_m2"},
}

// otherWords are words that plans often use for a property of ours.
var otherWords = map[string]string{
	"height": "elevation_m", "height_m": "elevation_m", "z": "elevation_m", "ele": "elevation_m", "level_m": "elevation_m",
	"bottom_m": "from_m", "base_m": "from_m", "clearance_m": "to_m", "headroom_m": "to_m", "until_m": "to_m",
}

// checkKeys warns of properties that look like a misspelling, or that belong to another role: they would be dropped in
// silence. Other properties are the user's own.
func (rd *siteReader) checkKeys(f *feature) {
	known := append(slices.Clone(roleKeys[f.role]), commonKeys...)
	var keys []string
	for k := range f.props {
		if !slices.Contains(known, k) {
			keys = append(keys, k)
		}
	}
	slices.Sort(keys)
	for _, k := range keys {
		path := f.at("properties." + k)
		near := nearest(k, known)
		if other := otherWords[plainWord(k)]; near == "" && slices.Contains(known, other) {
			near = other
		}
		switch {
		case near != "":
			rd.issues.Add(Warning, f.name, path, "%s is not a property of a %s and is ignored; did you mean %s?", shown(k), f.role, near)
		case slices.ContainsFunc(roles, func(r string) bool { return slices.Contains(roleKeys[r], k) }):
			rd.issues.Add(Warning, f.name, path, "%s is not a property of a %s and is ignored; a %s has %s", k, f.role, f.role, strings.Join(roleKeys[f.role], ", "))
		}
	}
}

// plainWord is plainKey with underscores, as otherWords is written.
func plainWord(k string) string { return strings.ReplaceAll(plainKey(k), "-", "_") }

// value returns a number among the properties, and whether it is given. Anything but a number is an Error.
func (rd *siteReader) value(f *feature, key string) (float64, bool) {
	v, given := f.props[key]
	if !given || v == nil {
		return 0, false
	}
	x, ok := number(v)
	if !ok {
		rd.fault(f, f.at("properties."+key), "%s is %s; write a finite number without quotes", key, kindOf(v))
	}
	return x, ok
}

// heightValue is value for a height in m.
func (rd *siteReader) heightValue(f *feature, key string) (float64, bool) {
	x, ok := rd.value(f, key)
	if ok && (x < -maxHeight || x > maxHeight) {
		rd.fault(f, f.at("properties."+key), "%s is %g m, beyond the %g m that a height may have; write metres, or leave it out for no limit", key, x, maxHeight)
		return 0, false
	}
	return x, ok
}

// limit returns a number that must not be negative, times scale; nil if it is not given.
func (rd *siteReader) limit(f *feature, key string, scale float64) *float64 {
	x, ok := rd.value(f, key)
	if !ok {
		return nil
	}
	if x < 0 {
		rd.fault(f, f.at("properties."+key), "%s is %g; it is an amount and must not be negative", key, x)
		return nil
	}
	x *= scale
	return &x
}

// flag returns a property that is true or false.
func (rd *siteReader) flag(f *feature, key string) bool {
	v, given := f.props[key]
	if !given || v == nil {
		return false
	}
	b, ok := v.(bool)
	if !ok {
		rd.fault(f, f.at("properties."+key), "%s is %s; write true or false without quotes", key, kindOf(v))
	}
	return b
}

// elevation returns the height of positions that have none.
func (rd *siteReader) elevation(f *feature) float64 {
	if !slices.Contains(roleKeys[f.role], "elevation_m") {
		return 0
	}
	x, _ := rd.heightValue(f, "elevation_m")
	return x
}

// fault reports an Error in a feature and marks it as broken.
func (rd *siteReader) fault(f *feature, path, format string, args ...any) {
	f.broken = true
	rd.issues.Add(Error, f.name, path, "%s", fmt.Sprintf(format, args...))
}

// Scales from the units of the file to SI.
const (
	newtonPerKN = 1e3
	kNPerNewton = 1e-3 // for a cost per kN
	m2PerCM2    = 1e-4
)

// footLimits reads what a footing can take.
func (rd *siteReader) footLimits(f *feature) FootLimits {
	l := FootLimits{
		NoUplift:     rd.flag(f, "no_uplift"),
		VerticalOnly: rd.flag(f, "vertical_only"),
		Vertical:     rd.limit(f, "vertical_kn", newtonPerKN),
		Uplift:       rd.limit(f, "uplift_kn", newtonPerKN),
		Sideways:     rd.limit(f, "sideways_kn", newtonPerKN),
	}
	if cost := rd.limit(f, "cost_m3_per_kn", kNPerNewton); cost != nil {
		l.Cost = *cost
	}
	return l
}

// keptArea reads the area of a kept member in m2.
func (rd *siteReader) keptArea(f *feature) float64 {
	cm2, inCM2 := rd.value(f, "area_cm2")
	m2, inM2 := rd.value(f, "area_m2")
	if f.broken {
		return 0
	}
	path := f.at("properties.area_cm2")
	if inCM2 && inM2 {
		rd.fault(f, path, "both area_cm2 and area_m2 are given; leave one out")
		return 0
	}
	if inCM2 {
		m2 = cm2 * m2PerCM2
	} else if inM2 {
		path = f.at("properties.area_m2")
	}
	if !(m2 > 0) {
		rd.fault(f, path, "a kept member needs the area of its section; give area_cm2 (or area_m2), larger than 0")
	}
	return m2
}
