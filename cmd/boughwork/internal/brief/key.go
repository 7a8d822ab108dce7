// Package brief reads the brief of a study: YAML, TOML or JSON through viper, with environment variables and flags on
// top. Every key, its unit, its default, its meaning and its limits stand in one table (table.go); the reader, the
// `settings` command and the README are made from it.
package brief

import (
	"fmt"
	"math"
	"strings"
)

// Kind is the type of a key's value.
type Kind uint8

// The kinds.
const (
	Text   Kind = iota
	Number      // a finite number
	Whole       // a whole number
	Switch      // true or false
	Choice      // one of Key.Choices
	Place       // two numbers: longitude and latitude, or x and y, as the site has them
	Ring        // three places or more
	Rows        // a list of equally long lists of numbers
)

// String returns the words for the kind in messages and in the table of settings.
func (k Kind) String() string {
	return [...]string{"text", "number", "whole number", "true or false", "one of", "two numbers", "list of places",
		"rows of numbers"}[k]
}

// Key is one key of the brief.
type Key struct {
	// Path is the place of the key; [] stands for the number of an element of a list: loads.actions[].area[].kn_m2.
	Path string
	Kind Kind
	// Unit of the value, "" for text and for numbers that have none. Units other than 1 are in the name too.
	Unit string
	// Default is the value if the key is absent; nil means that there is none.
	Default any
	// Absent says in words what happens without the key, if Default is nil.
	Absent  string
	Meaning string
	Choices []string
	Limits  Limits
}

// Limits bound a number. The zero value allows every finite number.
type Limits struct {
	Min, Max float64
	// Above excludes Min itself.
	Above bool
	Set   bool
}

// from returns limits that allow min <= v <= max.
func from(min, max float64) Limits { return Limits{Min: min, Max: max, Set: true} }

// above returns limits that allow min < v <= max.
func above(min, max float64) Limits { return Limits{Min: min, Max: max, Above: true, Set: true} }

// allow reports whether v is within the limits.
func (l Limits) allow(v float64) bool {
	if math.IsNaN(v) || math.IsInf(v, 0) {
		return false
	}
	return !l.Set || (v > l.Min || v == l.Min && !l.Above) && v <= l.Max
}

// String returns the limits in words.
func (l Limits) String() string {
	switch {
	case !l.Set:
		return "a finite number"
	case l.Above:
		return fmt.Sprintf("a number above %s and up to %s", plain(l.Min), plain(l.Max))
	}
	return fmt.Sprintf("a number from %s to %s", plain(l.Min), plain(l.Max))
}

// wants says in words what the key takes.
func (k Key) wants() string {
	switch k.Kind {
	case Number:
		return k.Limits.String()
	case Whole:
		return strings.Replace(k.Limits.String(), "a number", "a whole number", 1)
	case Choice:
		return "one of " + strings.Join(k.Choices, ", ")
	case Switch:
		return "true or false"
	case Place:
		return "two numbers in brackets, the coordinates of a place as in the site plan"
	case Ring:
		return "three or more places in brackets, [[x, y], [x, y], [x, y]]"
	case Rows:
		return "two or more rows of equally many numbers, two or more a row"
	}
	return "text"
}

// Scalar reports whether the key stands outside every list, so that one environment variable can name it.
func (k Key) Scalar() bool { return !strings.Contains(k.Path, "[]") }

// Env returns the name of the environment variable that overrides the key, or "" for a key inside a list.
func (k Key) Env() string {
	if !k.Scalar() {
		return ""
	}
	return envPrefix + strings.ToUpper(strings.ReplaceAll(k.Path, ".", "_"))
}

// envPrefix begins the name of every environment variable that the brief reads.
const envPrefix = "BOUGHWORK_"

// plain writes a number without an exponent where a person would.
func plain(v float64) string {
	s := fmt.Sprintf("%g", v)
	if strings.Contains(s, "e+") && math.Abs(v) < 1e15 {
		return fmt.Sprintf("%.0f", v)
	}
	return s
}
