package brief

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"boughwork/geom"
)

// section is a part of the brief: its values, where it stands, and the pattern of the table for what may stand in it.
type section struct {
	vals    map[string]any
	path    string // loads.actions[1]
	pattern string // loads.actions[]
	issues  *geom.Issues
}

func (s section) wrong(name, format string, args ...any) {
	s.issues.Add(geom.Error, "brief", join(s.path, name), format, args...)
}

// key returns the key of the table; asking for one that is not there is a fault of the program.
func (s section) key(name string) Key {
	k, ok := find(join(s.pattern, name))
	if !ok {
		panic("brief: no key " + join(s.pattern, name) + " in the table")
	}
	return k
}

// checkKeys reports every key of the section that is not in the table, in alphabetical order.
func (s section) checkKeys() {
	known := children(s.pattern)
	var unknown []string
	for name := range s.vals {
		if !slices.Contains(known, name) {
			unknown = append(unknown, name)
		}
	}
	slices.Sort(unknown)
	for _, name := range unknown {
		s.wrong(name, "unknown key; %s", remedyForKey(name, s.pattern))
	}
}

// has reports whether the section gives the key.
func (s section) has(name string) bool { return s.vals[name] != nil }

// sub returns a section inside this one; an absent one is empty.
func (s section) sub(name string) section {
	in := section{path: join(s.path, name), pattern: join(s.pattern, name), issues: s.issues}
	switch v := s.vals[name].(type) {
	case nil:
	case map[string]any:
		in.vals = v
	default:
		s.wrong(name, "found %s; want a section with the keys %s", describe(v), strings.Join(children(in.pattern), ", "))
	}
	in.checkKeys()
	return in
}

// list returns the sections of a list; an absent one is empty.
func (s section) list(name string) []section {
	pattern := join(s.pattern, name) + "[]"
	elements, ok := s.vals[name].([]any)
	if !ok && s.vals[name] != nil {
		s.wrong(name, "found %s; want a list of sections with the keys %s", describe(s.vals[name]), strings.Join(children(pattern), ", "))
	}
	var out []section
	for i, e := range elements {
		in := section{path: fmt.Sprintf("%s[%d]", join(s.path, name), i), pattern: pattern, issues: s.issues}
		m, ok := e.(map[string]any)
		if !ok {
			in.issues.Add(geom.Error, "brief", in.path, "found %s; want a section with the keys %s", describe(e),
				strings.Join(children(pattern), ", "))
			continue
		}
		in.vals = m
		in.checkKeys()
		out = append(out, in)
	}
	return out
}

// number returns the number of the key, its default, or NaN after an issue or if it is absent and has no default.
func (s section) number(name string) float64 {
	k := s.key(name)
	v := s.vals[name]
	if v == nil {
		if d, ok := k.Default.(float64); ok {
			return d
		}
		return math.NaN()
	}
	x, ok := toNumber(v)
	if !ok || !k.Limits.allow(x) {
		s.wrong(name, "found %s; want %s%s", describe(v), k.wants(), unitWords(k))
		return math.NaN()
	}
	return x
}

// needed returns the number of a key that must be given.
func (s section) needed(name string) float64 {
	if !s.has(name) {
		s.missing(name)
		return math.NaN()
	}
	return s.number(name)
}

// missing reports that a key must be given.
func (s section) missing(name string) {
	k := s.key(name)
	s.wrong(name, "missing; give %s%s: %s", k.wants(), unitWords(k), k.Meaning)
}

// optional returns the number of the key, or nil.
func (s section) optional(name string) *float64 {
	if !s.has(name) {
		return nil
	}
	x := s.number(name)
	if math.IsNaN(x) {
		return nil
	}
	return &x
}

// whole returns the whole number of the key, its default, or 0.
func (s section) whole(name string) int {
	k := s.key(name)
	v := s.vals[name]
	if v == nil {
		d, _ := k.Default.(int)
		return d
	}
	x, ok := toNumber(v)
	if !ok || x != math.Trunc(x) || !k.Limits.allow(x) {
		s.wrong(name, "found %s; want %s", describe(v), k.wants())
		return 0
	}
	return int(x)
}

// text returns the text of the key or its default.
func (s section) text(name string) string {
	k := s.key(name)
	switch v := s.vals[name].(type) {
	case nil:
		d, _ := k.Default.(string)
		return d
	case string:
		return strings.TrimSpace(v)
	default:
		s.wrong(name, "found %s; want text, in quotation marks if it looks like something else", describe(v))
		return ""
	}
}

// neededText returns the text of a key that must be given and not be empty.
func (s section) neededText(name string) string {
	if !s.has(name) {
		s.missing(name)
		return ""
	}
	t := s.text(name)
	if _, isText := s.vals[name].(string); isText && t == "" {
		s.wrong(name, "is empty; give %s", s.key(name).Meaning)
	}
	return t
}

// choice returns the index of the chosen word in Key.Choices, that of the default, or -1 after an issue.
func (s section) choice(name string) int {
	k := s.key(name)
	v := s.vals[name]
	if v == nil {
		d, ok := k.Default.(string)
		if !ok {
			s.missing(name)
		}
		return slices.Index(k.Choices, d)
	}
	word, _ := v.(string)
	i := slices.Index(k.Choices, strings.TrimSpace(word))
	if i < 0 {
		hint := ""
		if near, ok := nearest(word, k.Choices); ok && word != "" {
			hint = fmt.Sprintf("; did you mean %q?", near)
		}
		s.wrong(name, "found %s; want %s%s", describe(v), k.wants(), hint)
	}
	return i
}

// on returns the switch's value or its default.
func (s section) on(name string) bool {
	k := s.key(name)
	switch v := s.vals[name].(type) {
	case nil:
		d, _ := k.Default.(bool)
		return d
	case bool:
		return v
	default:
		s.wrong(name, "found %s; want true or false", describe(v))
		return false
	}
}
