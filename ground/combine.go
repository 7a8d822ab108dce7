package ground

import (
	"fmt"
	"math"
	"strconv"
	"strings"

	"boughwork/geom"
)

// Factor is the factor of one action in a case.
type Factor struct {
	Action string
	Factor float64
}

// combo is a combination of actions before it becomes a case.
type combo struct {
	permanent float64   // factor of all permanent actions and of self-weight
	factor    []float64 // per action of the spec; permanent ones are 0 here
}

// names of compass directions of the local axes for the nominal sideways load, in the order of the cases.
var sideways = [...]struct {
	name    string
	towards geom.Vec
}{
	{"east", geom.Vec{X: 1}},
	{"north", geom.Vec{Y: 1}},
	{"west", geom.Vec{X: -1}},
	{"south", geom.Vec{Y: -1}},
}

// maxCases is the largest number of combinations that are made; more than that points to a missing group.
const maxCases = 1000

// combine makes the load cases of the study.
func (b *builder) combine(effects []effect) []Case {
	if b.spec.Combination == CombineListed {
		return b.listed(effects)
	}
	choices, ok := b.choices(effects)
	if !ok {
		return nil
	}
	var combos []combo
	switch b.spec.Combination {
	case CombineASCE7:
		combos = b.asce7(choices, effects)
	case CombineEN1990ab:
		combos = b.en1990(choices, effects, true)
	default:
		combos = b.en1990(choices, effects, false)
	}
	combos = b.essential(b.distinct(combos), effects)
	var cases []Case
	for _, c := range combos {
		cases = append(cases, b.toCase(c, effects))
	}
	return b.addSideways(cases, combos)
}

// choices returns every set of variable actions that may act together, each as ascending indices: at most one of a group,
// and imposed load on a roof not with snow (EN 1991-1-1:2002, 3.3.2; ASCE 7 says "Lr or S"; both from memory). The empty
// set comes first, then in the order of the brief.
func (b *builder) choices(effects []effect) ([][]int, bool) {
	var groups [][]int
	place := map[string]int{}
	for i, a := range b.spec.Actions {
		if a.Kind == Permanent || !effects[i].used {
			continue
		}
		g, known := place[a.Group]
		if a.Group == "" || !known {
			g = len(groups)
			groups = append(groups, nil)
			if a.Group != "" {
				place[a.Group] = g
			}
		}
		groups[g] = append(groups[g], i)
	}
	sets := [][]int{nil}
	for _, g := range groups {
		grown := sets
		for _, i := range g {
			for _, s := range sets {
				if b.mayJoin(s, i) {
					grown = append(grown[:len(grown):len(grown)], append(s[:len(s):len(s)], i))
				}
			}
		}
		if sets = grown; len(sets) > maxCases {
			b.issues.Add(geom.Error, "", "loads.actions", "the actions give more than %d combinations; put actions that exclude "+
				"each other (snow on all and on one half, wind from several sides) into one group, or list the cases", maxCases)
			return nil, false
		}
	}
	return sets, true
}

// mayJoin reports whether action i may act together with a set of others.
func (b *builder) mayJoin(set []int, i int) bool {
	for _, j := range set {
		p, q := b.spec.Actions[i].Kind, b.spec.Actions[j].Kind
		if (p == Imposed && q == Snow) || (p == Snow && q == Imposed) {
			return false
		}
	}
	return true
}

// heavy reports whether the permanent actions of the study can be felt at all: loads or self-weight.
func (b *builder) heavy(effects []effect) bool {
	for i, a := range b.spec.Actions {
		if a.Kind == Permanent && effects[i].used {
			return true
		}
	}
	return b.spec.SelfWeight
}

// light reports whether a set of variable actions calls for permanent actions at their favourable value: at least one
// of them acts upwards or sideways or is wind, and none presses down on the whole roof, for that would help as they do.
func (b *builder) light(set []int, effects []effect) bool {
	relieved := false
	for _, i := range set {
		if effects[i].whole {
			return false
		}
		relieved = relieved || effects[i].relieves() || b.spec.Actions[i].Kind == Wind
	}
	return relieved
}

// toCase makes the case of a combination.
func (b *builder) toCase(c combo, effects []effect) Case {
	out := Case{Name: b.comboName(c, effects)}
	if b.spec.SelfWeight {
		out.Gravity = c.permanent
	}
	factors := make([]float64, len(effects))
	for i, a := range b.spec.Actions {
		factors[i] = c.factor[i]
		if a.Kind == Permanent {
			factors[i] = c.permanent
		}
	}
	out.Factors, out.Loads = b.sum(factors, effects)
	return out
}

// sum returns the loads of a case and its factors: permanent actions first, then the largest.
func (b *builder) sum(factors []float64, effects []effect) ([]Factor, []NodeLoad) {
	var fs []Factor
	total := make([]geom.Vec, len(b.nodes))
	for _, permanent := range [...]bool{true, false} {
		for i, a := range b.spec.Actions {
			if (a.Kind == Permanent) != permanent || factors[i] == 0 {
				continue
			}
			fs = append(fs, Factor{a.Name, factors[i]})
			for n, f := range effects[i].force {
				total[n] = total[n].Add(f.Scale(factors[i]))
			}
		}
	}
	var loads []NodeLoad
	for n, f := range total {
		if f != (geom.Vec{}) {
			loads = append(loads, NodeLoad{n, f})
		}
	}
	return fs, loads
}

// comboName returns a name such as 1.35 G + 1.5 snow west + 0.9 wind east: G (D with ASCE 7) for all permanent actions
// and self-weight, then the leading action, then the others in the order of the brief.
func (b *builder) comboName(c combo, effects []effect) string {
	var parts []string
	if b.heavy(effects) {
		letter := " G"
		if b.spec.Combination == CombineASCE7 {
			letter = " D"
		}
		parts = append(parts, number(c.permanent)+letter)
	}
	lead := 0.0
	for _, f := range c.factor {
		lead = max(lead, f)
	}
	for _, first := range [...]bool{true, false} {
		for i, a := range b.spec.Actions {
			if f := c.factor[i]; f != 0 && (f == lead) == first {
				parts = append(parts, number(f)+" "+a.Name)
			}
		}
	}
	return strings.Join(parts, " + ")
}

// number writes a factor with at least one decimal and without digits that are only rounding.
func number(f float64) string {
	whole, decimals, _ := strings.Cut(strconv.FormatFloat(f, 'f', 4, 64), ".")
	return whole + "." + decimals[:1] + strings.TrimRight(decimals[1:], "0")
}

// product returns the product of two factors as one would write it: 0.9, not 0.8999999999999999.
func product(a, b float64) float64 { return math.Round(a*b*1e9) / 1e9 }

// addSideways adds, after each case without wind and with a net load downwards, four cases in which a share of the
// vertical load of every node also acts sideways, towards the east, north, west and south of the local axes. The weight
// of the bars takes no part in it.
func (b *builder) addSideways(cases []Case, combos []combo) []Case {
	share := b.spec.SidewaysShare
	if share == 0 {
		return cases
	}
	var out []Case
	for k, c := range cases {
		out = append(out, c)
		var net float64
		for _, l := range c.Loads {
			net += l.Force.Z
		}
		if net >= 0 || b.windy(combos[k]) {
			continue
		}
		for _, s := range sideways {
			v := Case{
				Name:    fmt.Sprintf("%s, %s %% sideways %s", c.Name, strconv.FormatFloat(math.Round(1e6*share)/1e4, 'f', -1, 64), s.name),
				Gravity: c.Gravity,
				Factors: append(c.Factors[:len(c.Factors):len(c.Factors)], Factor{"sideways " + s.name, share}),
			}
			for _, l := range c.Loads {
				v.Loads = append(v.Loads, NodeLoad{l.Node, l.Force.Add(s.towards.Scale(-share * l.Force.Z))})
			}
			out = append(out, v)
		}
	}
	return out
}

// windy reports whether a combination has wind in it.
func (b *builder) windy(c combo) bool {
	for i, a := range b.spec.Actions {
		if a.Kind == Wind && c.factor[i] != 0 {
			return true
		}
	}
	return false
}
