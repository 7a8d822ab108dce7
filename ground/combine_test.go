package ground

import (
	"fmt"
	"math"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"

	"boughwork/geom"
)

// snowAndWind is a brief with dead load, snow on all and on each half, and wind up and from the west.
func snowAndWind() Spec {
	spec := plainSpec()
	half := func(bearing float64) Pattern { return Pattern{Half: &HalfPlane{Bearing: bearing}} }
	spec.Actions = append(spec.Actions,
		Action{Name: "snow", Kind: Snow, Group: "snow", Area: []AreaLoad{{Pressure: 800}}},
		Action{Name: "snow west", Kind: Snow, Group: "snow", Area: []AreaLoad{{Pressure: 800, Pattern: half(270)}}},
		Action{Name: "snow east", Kind: Snow, Group: "snow", Area: []AreaLoad{{Pressure: 800, Pattern: half(90)}}},
		Action{Name: "wind up", Kind: Wind, Group: "wind", Area: []AreaLoad{{Pressure: -600, Direction: Normal}}},
		Action{Name: "wind east", Kind: Wind, Group: "wind", Edge: []EdgeLoad{{Force: 500, Direction: Towards, Bearing: 90, Windward: true}}},
	)
	return spec
}

// act returns an action with a load of its own that is no multiple of another's.
func act(name string, kind ActionKind, l PointLoad) Action {
	return Action{Name: name, Kind: kind, Point: []PointLoad{l}}
}

// distinctActions puts every action on a place of its own, so that no combination lies between others by chance.
func distinctActions() Spec {
	spec := plainSpec()
	spec.Actions = []Action{
		act("dead", Permanent, PointLoad{[2]float64{4, 4}, geom.Vec{Z: -100}}),
		act("snow", Snow, PointLoad{[2]float64{12, 4}, geom.Vec{Z: -100}}),
		act("wind", Wind, PointLoad{[2]float64{20, 4}, geom.Vec{X: 100}}),
	}
	return spec
}

func caseNames(s *Structure) []string {
	return mapped(s.Cases, func(c Case) string { return c.Name })
}

func check(t *testing.T, name string, got, want []string) {
	t.Helper()
	if !slices.Equal(got, want) {
		t.Errorf("%s:\n got %s\nwant %s", name, strings.Join(got, "\n     "), strings.Join(want, "\n     "))
	}
}

// EN 1990:2002 expression 6.10 with table A1.2(B) by hand (from memory): dead 1.35 or 1.0, leading 1.5, snow accompanies
// with 1.5 x 0.5 = 0.75 and wind with 1.5 x 0.6 = 0.9. Every action has a place of its own, so none lies between others.
func TestEN1990ByHand(t *testing.T) {
	s := mustBuild(t, hall(), distinctActions())
	check(t, "6.10", caseNames(s), []string{
		"1.35 G",
		"1.35 G + 1.5 snow",
		"1.35 G + 1.5 wind",
		"1.35 G + 1.5 snow + 0.9 wind",
		"1.35 G + 1.5 wind + 0.75 snow",
		"1.0 G + 1.5 wind",
		"1.0 G + 1.5 snow + 0.9 wind",
		"1.0 G + 1.5 wind + 0.75 snow",
	})
	c := s.Cases[4]
	if want := []Factor{{"dead", 1.35}, {"snow", 0.75}, {"wind", 1.5}}; !slices.Equal(c.Factors, want) {
		t.Errorf("factors of %s: %v, want %v", c.Name, c.Factors, want)
	}
	want := map[geom.Vec]geom.Vec{{X: 4, Y: 4, Z: 7}: {Z: -135}, {X: 12, Y: 4, Z: 7}: {Z: -75}, {X: 20, Y: 4, Z: 7}: {X: 150}}
	for _, l := range c.Loads {
		if d := l.Force.Sub(want[s.Nodes[l.Node].At]).Norm(); d > 1e-9 {
			t.Errorf("%s: %v N on %v", c.Name, l.Force, s.Nodes[l.Node].At)
		}
	}
	if len(c.Loads) != 3 || c.Gravity != 1.35 {
		t.Errorf("%s: %d loads, gravity %v", c.Name, len(c.Loads), c.Gravity)
	}
}

// EN 1990 expressions 6.10a and 6.10b by hand (from memory): 1.35 x 0.85 = 1.1475.
func TestEN1990abByHand(t *testing.T) {
	spec := distinctActions()
	spec.Combination = CombineEN1990ab
	s := mustBuild(t, hall(), spec)
	check(t, "6.10a and b", append(caseNames(s), s.Omitted...), []string{
		"1.35 G",
		"1.35 G + 0.75 snow",
		"1.1475 G + 1.5 snow",
		"1.35 G + 0.9 wind",
		"1.1475 G + 1.5 wind",
		"1.35 G + 0.9 wind + 0.75 snow",
		"1.1475 G + 1.5 snow + 0.9 wind",
		"1.1475 G + 1.5 wind + 0.75 snow",
		"1.0 G + 1.5 wind",
		"1.0 G + 1.5 snow + 0.9 wind",
		"1.0 G + 1.5 wind + 0.75 snow",
	})
}

// ASCE 7-16 section 2.3.1 by hand (from memory), L = 0.
func TestASCE7ByHand(t *testing.T) {
	spec := distinctActions()
	spec.Combination = CombineASCE7
	spec.Actions = append(spec.Actions, act("roof live", Imposed, PointLoad{[2]float64{28, 4}, geom.Vec{Z: -100}}))
	s := mustBuild(t, hall(), spec)
	check(t, "2.3.1", caseNames(s), []string{
		"1.4 D",
		"1.2 D + 1.6 snow",
		"1.2 D + 1.0 wind",
		"1.2 D + 1.6 snow + 0.5 wind",
		"1.2 D + 1.0 wind + 0.5 snow",
		"1.2 D + 1.6 roof live",
		"1.2 D + 1.6 roof live + 0.5 wind",
		"1.2 D + 1.0 wind + 0.5 roof live",
		"0.9 D + 1.0 wind",
	})
}

// Imposed load on a roof is not combined with snow, and with psi0 = 0 it never accompanies (EN 1991-1-1 3.3.2, EN 1990
// table A1.1; from memory).
func TestImposedLoadOnRoofs(t *testing.T) {
	spec := distinctActions()
	spec.Actions = append(spec.Actions, act("maintenance", Imposed, PointLoad{[2]float64{28, 4}, geom.Vec{Z: -100}}))
	s := mustBuild(t, hall(), spec)
	found := 0
	for _, n := range append(caseNames(s), s.Omitted...) {
		if strings.Contains(n, "maintenance") {
			found++
			if strings.Contains(n, "snow") || !strings.Contains(n, "1.5 maintenance") {
				t.Errorf("case %q", n)
			}
		}
	}
	if found != 3 { // leading alone, leading with wind and G unfavourable or favourable
		t.Errorf("%d cases with imposed load, want 3: %v", found, caseNames(s))
	}
}

func TestPsi0OfAnAction(t *testing.T) {
	spec := distinctActions()
	high := 0.7
	spec.Actions[1].Psi0 = &high
	if names := caseNames(mustBuild(t, hall(), spec)); !slices.Contains(names, "1.35 G + 1.5 wind + 1.05 snow") {
		t.Errorf("snow with psi0 = 0.7 does not accompany with 1.05: %v", names)
	}
}

// Actions of a group never act together; without the group they do.
func TestGroupsExclude(t *testing.T) {
	spec := distinctActions()
	spec.Actions = append(spec.Actions, act("gale", Wind, PointLoad{[2]float64{28, 4}, geom.Vec{Y: 100}}))
	both := func() bool {
		s := mustBuild(t, hall(), spec)
		return slices.ContainsFunc(append(caseNames(s), s.Omitted...), func(n string) bool {
			return strings.Contains(n, "wind") && strings.Contains(n, "gale")
		})
	}
	if !both() {
		t.Error("two actions without a group never act together")
	}
	spec.Actions[2].Group, spec.Actions[3].Group = "wind", "wind"
	if both() {
		t.Error("two actions of a group act together")
	}
}

// Without permanent loads and self-weight there is no G in the names; with self-weight alone there is.
func TestSelfWeightIsPermanent(t *testing.T) {
	spec := distinctActions()
	spec.Actions = spec.Actions[1:2]
	check(t, "with self-weight", caseNames(mustBuild(t, hall(), spec)), []string{"1.35 G + 1.5 snow"})
	spec.SelfWeight = false
	s := mustBuild(t, hall(), spec)
	check(t, "without", caseNames(s), []string{"1.5 snow"})
	if s.Cases[0].Gravity != 0 {
		t.Errorf("gravity %v without self-weight", s.Cases[0].Gravity)
	}
}

// A share of the vertical load sideways, in four directions, for every case without wind.
func TestSideways(t *testing.T) {
	spec := distinctActions()
	spec.SidewaysShare = 0.005
	s := mustBuild(t, hall(), spec)
	want := map[string]geom.Vec{"east": {X: 1}, "north": {Y: 1}, "west": {X: -1}, "south": {Y: -1}}
	found := 0
	for k, c := range s.Cases {
		_, direction, ok := strings.Cut(c.Name, ", 0.5 % sideways ")
		if strings.Contains(c.Name, "wind") && ok {
			t.Errorf("%q has wind in it", c.Name)
		}
		if !ok {
			continue
		}
		found++
		f, _ := s.Resultant(k)
		w := want[direction].Scale(-0.005 * f.Z)
		if math.Abs(f.X-w.X) > 1e-9 || math.Abs(f.Y-w.Y) > 1e-9 || f.Z >= 0 {
			t.Errorf("%q pushes with %v", c.Name, f)
		}
		if last := c.Factors[len(c.Factors)-1]; last != (Factor{"sideways " + direction, 0.005}) {
			t.Errorf("%q has the factors %v", c.Name, c.Factors)
		}
	}
	if found != 8 { // four for 1.35 G, four for 1.35 G + 1.5 snow
		t.Errorf("%d sideways cases, want 8: %v", found, caseNames(s))
	}
}

func TestListedCases(t *testing.T) {
	spec := distinctActions()
	spec.Combination = CombineListed
	spec.Cases = []UserCase{
		{Name: "winter", Gravity: 1.2, Factors: map[string]float64{"dead": 1.2, "snow": 1.6}},
		{Name: "idle", Gravity: 1},
		{Name: "storm", Gravity: 0.9, Factors: map[string]float64{"dead": 0.9, "wind": -1}},
	}
	s, issues := Build(hall(), spec)
	if s == nil {
		t.Fatal(issues)
	}
	check(t, "listed", caseNames(s), []string{"winter", "storm"})
	if s.Cases[1].Gravity != 0.9 || !slices.Equal(s.Cases[1].Factors, []Factor{{"dead", 0.9}, {"wind", -1}}) {
		t.Errorf("storm is %+v", s.Cases[1])
	}
	if !strings.Contains(joined(issues), "idle: combinations.cases[1]: the case has no load") {
		t.Errorf("no warning of the idle case: %v", issues)
	}
}

// Too many actions without groups are an error that names the remedy, not a long wait.
func TestTooManyCombinations(t *testing.T) {
	spec := plainSpec()
	for i := range 14 {
		spec.Actions = append(spec.Actions, act(fmt.Sprint("wind ", i), Wind, PointLoad{[2]float64{1 + float64(i), 3}, geom.Vec{X: 1}}))
	}
	if s, issues := Build(hall(), spec); s != nil || !strings.Contains(joined(issues), "group") {
		t.Errorf("structure %v, issues %v", s != nil, issues)
	}
}

// A combination that is left out never asks for more than those that stay: in any direction of load space some case that
// stays, or no load, reaches as far. And those that stay are all needed: each is the furthest in some direction.
func TestOmittedCombinationsCannotGovern(t *testing.T) {
	spec := snowAndWind()
	all := spec
	all.Combination = CombineListed
	s := mustBuild(t, hall(), spec)
	if len(s.Omitted) == 0 {
		t.Fatal("flat roof, uniform loads: some combination must lie between others")
	}
	// The omitted ones again, as listed cases, from their names.
	for _, name := range s.Omitted {
		u := UserCase{Name: name, Factors: map[string]float64{}}
		for _, term := range strings.Split(name, " + ") {
			number, action, _ := strings.Cut(term, " ")
			var f float64
			fmt.Sscan(number, &f)
			if action == "G" {
				u.Gravity, action = f, "dead"
			}
			u.Factors[action] = f
		}
		all.Cases = append(all.Cases, u)
	}
	o := mustBuild(t, hall(), all)
	if len(o.Cases) != len(s.Omitted) {
		t.Fatalf("%d of %d omitted combinations rebuilt", len(o.Cases), len(s.Omitted))
	}
	rnd := rand.New(rand.NewPCG(15, 16))
	for range 3000 {
		d := make([]float64, 3*len(s.Nodes)+1)
		for i := range d {
			d[i] = rnd.NormFloat64()
		}
		d[len(d)-1] *= 1e4
		along := func(c Case) float64 {
			v := d[len(d)-1] * c.Gravity
			for _, l := range c.Loads {
				v += d[3*l.Node]*l.Force.X + d[3*l.Node+1]*l.Force.Y + d[3*l.Node+2]*l.Force.Z
			}
			return v
		}
		furthest := 0.0
		for _, c := range s.Cases {
			furthest = max(furthest, along(c))
		}
		for _, c := range o.Cases {
			if v := along(c); v > furthest+1e-6*math.Abs(furthest)+1e-3 {
				t.Fatalf("%q reaches %v, the cases that stay only %v", c.Name, v, furthest)
			}
		}
	}
}

func TestLeastResidual(t *testing.T) {
	square := [][]float64{{0, 0}, {1, 0}, {1, 1}, {0, 1}}
	for _, c := range []struct {
		p    []float64
		want bool
	}{
		{[]float64{0.5, 0.5}, true}, {[]float64{1, 1}, true}, {[]float64{0.3, 0.999}, true}, {[]float64{0, 0}, true},
		{[]float64{1.0001, 0.5}, false}, {[]float64{-0.0001, 0.5}, false}, {[]float64{2, 2}, false},
	} {
		if got := meanOf(square, c.p); got != c.want {
			t.Errorf("%v inside the unit square: %v", c.p, got)
		}
	}
	// The hull always holds the origin: points on a ray inside, beyond not.
	if !meanOf([][]float64{{3, 4}}, []float64{1.5, 2}) || meanOf([][]float64{{3, 4}}, []float64{3.3, 4.4}) || meanOf(nil, []float64{1, 0}) {
		t.Error("a scaled-down case must count as carried, a larger one not")
	}
}
