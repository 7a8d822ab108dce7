package ground

import "boughwork/geom"

// Spec is what a brief says about a study, in SI units, with every default filled in. Build makes a Structure of it.
type Spec struct {
	Title string

	DeckSpacing   float64  // largest distance between neighbouring roof nodes, m
	InnerSpacing  float64  // horizontal spacing of inner nodes, m
	InnerRise     float64  // vertical spacing of inner nodes, m
	FootSpacing   float64  // spacing of foot positions inside a zone, m
	WallSpacing   float64  // spacing of wall nodes, m
	GridBearing   *float64 // bearing of the grid's first axis, degrees clockwise from north; nil: the roof's longest edge
	MinLength     float64  // m
	MaxLength     float64  // m
	Deck          Deck
	RoofBars      RoofBars
	RoofFactor    float64
	JointCost     float64 // m
	Material      Material
	Limits        map[string]geom.FootLimits // by zone name; overrides what the site says
	Actions       []Action
	SelfWeight    bool    // bars weigh; the factor of permanent actions applies
	SidewaysShare float64 // nominal sideways load as a share of the vertical, in +x, -x, +y and -y; 0: none
	Combination   Combination
	Cases         []UserCase // only with CombineListed
}

// Combination is the rule that makes cases of actions.
type Combination uint8

// The rules.
const (
	CombineEN1990   Combination = iota // EN 1990 expression 6.10
	CombineEN1990ab                    // EN 1990 expressions 6.10a and 6.10b
	CombineASCE7                       // ASCE 7-16 section 2.3.1, strength combinations
	CombineListed                      // the user's own cases
)

// ActionKind is the nature of an action, which chooses its factors.
type ActionKind uint8

// The kinds.
const (
	Permanent ActionKind = iota
	Imposed              // roof imposed load
	Snow
	Wind
)

// Action is a set of loads that come and go together, at its characteristic value.
type Action struct {
	Name string
	Kind ActionKind
	// Group: of the actions that share a group at most one acts at a time (snow on all, snow on one half; wind from one
	// side, from another). Empty: the action is its own group.
	Group string
	Psi0  *float64 // combination factor; nil: the value of the code for the kind
	Area  []AreaLoad
	Edge  []EdgeLoad
	Point []PointLoad
}

// Direction says which way a load acts.
type Direction uint8

// The directions.
const (
	Down    Direction = iota // along -z, per square metre of plan
	Normal                   // onto the surface, per square metre of surface; negative is suction
	Towards                  // horizontally towards AreaLoad.Bearing, per square metre of plan (per metre of edge)
)

// AreaLoad is a pressure on the roof, in Pa.
type AreaLoad struct {
	Pressure  float64
	Direction Direction
	Bearing   float64 // degrees clockwise from north, for Towards
	Pattern   Pattern
}

// EdgeLoad is a line load on the edges of the roof, in N/m.
type EdgeLoad struct {
	Force     float64
	Direction Direction // Down or Towards
	Bearing   float64
	// Windward restricts a horizontal load to the edges that face it: the force per metre is per metre of edge as seen
	// from the bearing.
	Windward bool
	Pattern  Pattern
}

// PointLoad is a force in N at a place of the roof; it goes to the roof nodes around it.
type PointLoad struct {
	At    [2]float64 // local metres
	Force geom.Vec
}

// Pattern restricts a load to part of the roof. The zero value is all of it.
type Pattern struct {
	// Half, if not nil, keeps the side of a line that lies towards Half.Bearing from Half.Through.
	Half *HalfPlane
	// Polygon, if not empty, keeps what is inside; an open ring in local metres.
	Polygon [][2]float64
}

// HalfPlane is the side of a vertical plane.
type HalfPlane struct {
	Through *[2]float64 // local metres; nil: the centroid of the roof
	Bearing float64     // degrees clockwise from north
}

// UserCase is a case listed by the user.
type UserCase struct {
	Name    string
	Gravity float64
	Factors map[string]float64 // by action name
}
