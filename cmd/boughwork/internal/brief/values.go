package brief

import (
	"fmt"
	"math"
)

// place returns the two numbers of a place in the coordinates of the site, or nil.
func (s section) place(name string) *[2]float64 {
	v := s.vals[name]
	if v == nil {
		return nil
	}
	p, ok := toPlace(v)
	if !ok {
		s.wrong(name, "found %s; want %s", describe(v), s.key(name).wants())
		return nil
	}
	return &p
}

// neededPlace returns a place that must be given.
func (s section) neededPlace(name string) *[2]float64 {
	if !s.has(name) {
		s.missing(name)
	}
	return s.place(name)
}

// ring returns the places of an open ring; the last place may repeat the first.
func (s section) ring(name string) [][2]float64 {
	v := s.vals[name]
	if v == nil {
		return nil
	}
	elements, _ := v.([]any)
	var ring [][2]float64
	for i, e := range elements {
		p, ok := toPlace(e)
		if !ok {
			s.wrong(fmt.Sprintf("%s[%d]", name, i), "found %s; want two numbers in brackets", describe(e))
			return nil
		}
		ring = append(ring, p)
	}
	if n := len(ring); n > 1 && ring[0] == ring[n-1] {
		ring = ring[:n-1]
	}
	if len(ring) < 3 {
		s.wrong(name, "found %s; want %s", describe(v), s.key(name).wants())
		return nil
	}
	return ring
}

// rows returns a table of numbers with two or more equally long rows of two or more numbers.
func (s section) rows(name string) [][]float64 {
	k := s.key(name)
	lines, _ := s.vals[name].([]any)
	if len(lines) < 2 {
		s.wrong(name, "found %s; want %s", describe(s.vals[name]), k.wants())
		return nil
	}
	var out [][]float64
	for i, line := range lines {
		cells, _ := line.([]any)
		row := make([]float64, len(cells))
		for j, c := range cells {
			x, ok := toNumber(c)
			if !ok || !k.Limits.allow(x) {
				s.wrong(fmt.Sprintf("%s[%d][%d]", name, i, j), "found %s; want %s%s", describe(c), k.Limits, unitWords(k))
				return nil
			}
			row[j] = x
		}
		if len(row) < 2 || len(out) > 0 && len(row) != len(out[0]) {
			s.wrong(fmt.Sprintf("%s[%d]", name, i), "has %d numbers; want %s", len(row), k.wants())
			return nil
		}
		out = append(out, row)
	}
	return out
}

// toPlace reads two finite numbers.
func toPlace(v any) (p [2]float64, ok bool) {
	list, _ := v.([]any)
	if len(list) != 2 {
		return p, false
	}
	for i, e := range list {
		x, ok := toNumber(e)
		if !ok || math.IsNaN(x) || math.IsInf(x, 0) {
			return p, false
		}
		p[i] = x
	}
	return p, true
}

// toNumber reads any number type that the three decoders hand over. Text that looks like a number is none.
func toNumber(v any) (float64, bool) {
	switch v := v.(type) {
	case float64:
		return v, true
	case int:
		return float64(v), true
	case int64:
		return float64(v), true
	case uint64:
		return float64(v), true
	}
	return 0, false
}

// shown is the length at which a quoted text is cut in a message.
const shown = 40

// describe says what was found, short enough for a message.
func describe(v any) string {
	switch v := v.(type) {
	case nil:
		return "nothing"
	case string:
		if r := []rune(v); len(r) > shown {
			return fmt.Sprintf("the text %q...", string(r[:shown]))
		}
		return fmt.Sprintf("the text %q", v)
	case map[string]any:
		return "a section"
	case []any:
		return fmt.Sprintf("a list of %d", len(v))
	case bool:
		return fmt.Sprint(v)
	}
	if x, ok := toNumber(v); ok {
		return plain(x)
	}
	return "a value of another type"
}

// unitWords names the unit of a key in a message.
func unitWords(k Key) string {
	if k.Unit == "" || k.Unit == "1" {
		return ""
	}
	return " (" + k.Unit + ")"
}
