package bench

import "boughwork/geom"

// The loads on a roof in N, for a total of 1 N down.
const (
	sideways = 0.1 // of the horizontal load
	uplift   = 0.4 // of the load up, such as wind under a roof
)

var down = geom.Vec{Z: -1}

// all is the whole load down.
var all = roofCase{name: "all", force: down}

// with is a load of the given height (N, up) and a sideways one.
func with(name string, up, x, y float64) roofCase {
	return roofCase{name: name, force: geom.Vec{X: sideways * x, Y: sideways * y, Z: up}}
}

// oneCase is the whole load.
func oneCase() []roofCase { return []roofCase{all} }

// threeCases are the whole load and either half along the roof.
func threeCases() []roofCase {
	return []roofCase{all, {name: "low x", force: down, halfX: -1}, {name: "high x", force: down, halfX: 1}}
}

// fiveCases are three and the whole load with some of it sideways.
func fiveCases() []roofCase {
	return append(threeCases(), with("all and x", -1, 1, 0), with("all and y", -1, 0, 1))
}

// twelveCases are like those of a real brief: all, four halves, four directions sideways, uplift and a quarter.
func twelveCases() []roofCase {
	return append(threeCases(),
		roofCase{name: "low y", force: down, halfY: -1},
		roofCase{name: "high y", force: down, halfY: 1},
		with("all and x", -1, 1, 0),
		with("all and -x", -1, -1, 0),
		with("all and y", -1, 0, 1),
		with("all and -y", -1, 0, -1),
		with("uplift and x", uplift, 1, 0),
		with("uplift and y", uplift, 0, 1),
		roofCase{name: "quarter", force: down, halfX: 1, halfY: 1},
	)
}
