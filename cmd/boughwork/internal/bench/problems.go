// Package bench holds named layout problems of known size, solves them and measures what that takes. All have unit
// strengths (1 Pa both ways), unit loads, no self-weight and no joint cost, so that volumes are plain numbers. Every pair
// of nodes is a candidate, save those that pass through another node and, on the long roof, those that are too long.
package bench

import (
	"fmt"
	"strings"

	"boughwork/ground"
)

// The gaps to which the problems are solved unless something else is asked for.
const (
	fineGap   = 1e-4
	coarseGap = 1e-3 // for the problems that would take many minutes else
)

// Problem is a named problem.
type Problem struct {
	Name  string
	Gap   float64 // share of the volume between layout and bound at which to stop, unless something else is asked for
	Build func() *ground.Structure
}

// Problems lists all named problems.
var Problems = []Problem{
	cantilever(21, 11, 2),
	cantilever(41, 21, 2),
	cantilever(61, 31, 2),
	cantilever(81, 41, 2),
	cantilever(121, 61, 2),
	cantilever(161, 81, 2),
	cantilever(151, 101, 1.5),
	canopy(2, fineGap, oneCase()),
	canopy(2, fineGap, threeCases()),
	canopy(2, fineGap, fiveCases()),
	canopy(2, fineGap, twelveCases()),
	canopy(1, fineGap, oneCase()),
	canopy(1, coarseGap, threeCases()),
	canopy(1, coarseGap, fiveCases()),
	canopy(1, coarseGap, twelveCases()),
	longRoof(threeCases()),
}

// Small names the problems that take little: those that are run if none is named.
var Small = []string{"cantilever-41x21", "canopy-2m-1", "canopy-2m-5", "canopy-2m-12"}

// Find returns the problem of the given name. The error lists the names that there are.
func Find(name string) (Problem, error) {
	var names []string
	for _, p := range Problems {
		if p.Name == name {
			return p, nil
		}
		names = append(names, p.Name)
	}
	return Problem{}, fmt.Errorf("there is no problem %q; name a brief (.yaml, .yml, .toml, .json) or one of %s", name, strings.Join(names, ", "))
}

// unit returns a structure without nodes and cases that has the material of all problems.
func unit(name string) *ground.Structure {
	return &ground.Structure{Title: name, Material: ground.Material{Name: "unit", Tension: 1, Compression: 1}}
}

// held is a node that cannot move at all.
var held = [3]bool{true, true, true}
