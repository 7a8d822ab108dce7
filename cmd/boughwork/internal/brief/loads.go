package brief

import (
	"math"

	"boughwork/geom"
	"boughwork/ground"
)

// readActions reads the list of actions; forces become N, pressures Pa, line loads N/m.
func readActions(in section) []ground.Action {
	list := in.list("actions")
	if len(list) == 0 {
		in.wrong("actions", "no loads; give at least one action with a name, a kind and an area, edge or point load")
	}
	var actions []ground.Action
	names := map[string]bool{}
	for _, a := range list {
		action := ground.Action{
			Name:  a.neededText("name"),
			Kind:  ground.ActionKind(max(0, a.choice("kind"))),
			Group: a.text("group"),
			Psi0:  a.optional("psi0"),
		}
		if names[action.Name] && action.Name != "" {
			a.wrong("name", "%q is given twice; every action needs its own name", action.Name)
		}
		names[action.Name] = true
		area, edge, point := a.list("area"), a.list("edge"), a.list("point")
		if len(area)+len(edge)+len(point) == 0 {
			a.wrong("area", "the action %q has no load; give it an area, edge or point load", action.Name)
		}
		for _, l := range area {
			action.Area = append(action.Area, readArea(l))
		}
		for _, l := range edge {
			action.Edge = append(action.Edge, readEdge(l))
		}
		for _, l := range point {
			action.Point = append(action.Point, readPoint(l))
		}
		actions = append(actions, action)
	}
	return actions
}

func readArea(in section) ground.AreaLoad {
	l := ground.AreaLoad{
		Pressure:  in.needed("kn_m2") * 1e3,
		Direction: ground.Direction(max(0, in.choice("acts"))),
		Pattern:   readPattern(in.sub("where")),
	}
	l.Bearing = readBearing(in, l.Direction == ground.Towards)
	if l.Pressure < 0 && l.Direction != ground.Normal {
		in.wrong("kn_m2", "found %s; a negative pressure is suction and needs acts: normal", plain(l.Pressure/1e3))
	}
	return l
}

func readEdge(in section) ground.EdgeLoad {
	l := ground.EdgeLoad{Force: in.needed("kn_m") * 1e3, Direction: ground.Down, Pattern: readPattern(in.sub("where"))}
	if in.choice("acts") == 1 {
		l.Direction = ground.Towards
		l.Windward = in.on("windward_only")
	}
	l.Bearing = readBearing(in, l.Direction == ground.Towards)
	return l
}

func readPoint(in section) ground.PointLoad {
	var l ground.PointLoad
	if at := in.neededPlace("at"); at != nil {
		l.At = *at
	}
	down, towards := in.number("down_kn")*1e3, in.number("towards_kn")*1e3
	if down == 0 && towards == 0 {
		in.wrong("down_kn", "a point load of nothing; give down_kn or towards_kn")
	}
	b := readBearing(in, towards != 0) * math.Pi / 180
	l.Force = geom.Vec{X: towards * math.Sin(b), Y: towards * math.Cos(b), Z: -down}
	if towards == 0 {
		l.Force.X, l.Force.Y = 0, 0
	}
	return l
}

// readBearing returns the bearing of a load, in degrees clockwise from north, and sees that it is there exactly if it
// is needed.
func readBearing(in section, needed bool) float64 {
	switch {
	case needed:
		return in.needed("bearing_deg")
	case in.has("bearing_deg"):
		in.wrong("bearing_deg", "this load has no horizontal direction; take the bearing out, or say acts: towards (towards_kn at a point)")
	}
	return 0
}

func readPattern(in section) ground.Pattern {
	var p ground.Pattern
	through, half := in.place("through"), in.optional("half_bearing_deg")
	if half != nil {
		p.Half = &ground.HalfPlane{Through: through, Bearing: *half}
	} else if through != nil {
		in.wrong("through", "says where the roof is parted, but not which side is loaded; give half_bearing_deg")
	}
	p.Polygon = in.ring("polygon")
	return p
}

// readCombinations reads the rule and the listed cases.
func readCombinations(in section, spec *ground.Spec) {
	spec.Combination = ground.Combination(max(0, in.choice("rule")))
	list := in.list("cases")
	listed := spec.Combination == ground.CombineListed
	if listed && len(list) == 0 {
		in.wrong("cases", "rule: listed needs a list of cases")
	}
	if !listed && len(list) > 0 {
		in.wrong("cases", "are only used with rule: listed; say so, or take them out")
	}
	var actions []string
	for _, a := range spec.Actions {
		actions = append(actions, a.Name)
	}
	names := map[string]bool{}
	for _, c := range list {
		uc := ground.UserCase{Name: c.neededText("name"), Gravity: c.number("gravity"), Factors: map[string]float64{}}
		if names[uc.Name] && uc.Name != "" {
			c.wrong("name", "%q is given twice; every case needs its own name", uc.Name)
		}
		names[uc.Name] = true
		for _, f := range c.list("factors") {
			readFactor(f, actions, uc.Factors)
		}
		if len(uc.Factors) == 0 {
			c.wrong("factors", "the case %q has no load; give it the factor of one action or more", uc.Name)
		}
		spec.Cases = append(spec.Cases, uc)
	}
}

func readFactor(f section, actions []string, factors map[string]float64) {
	name, factor := f.neededText("action"), f.needed("factor")
	if name == "" {
		return
	}
	known := false
	for _, a := range actions {
		known = known || a == name
	}
	if !known {
		hint := "the actions are " + quoted(actions)
		if near, ok := nearest(name, actions); ok {
			hint = "did you mean " + quoted([]string{near}) + "?"
		}
		f.wrong("action", "no action is called %q; %s", name, hint)
	}
	if _, twice := factors[name]; twice {
		f.wrong("action", "%q has two factors in one case; keep one", name)
	}
	factors[name] = factor
}
