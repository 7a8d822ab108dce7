// Package ground builds the ground structure of a study: nodes, supports, load cases and the rules that say which
// pairs of nodes may be joined by a bar. A Structure does not change once it is built.
package ground

import "boughwork/geom"

// Role says what a node is for.
type Role uint8

// The roles of a node.
const (
	Inner   Role = iota // a free joint between roof and ground
	RoofPt              // the deck is picked up here
	Footing             // a foot may stand here
	Wall                // a wall gives support here
)

// String returns the name of the role in the record.
func (r Role) String() string { return [...]string{"inner", "roof", "footing", "wall"}[r] }

// Node is a joint of the ground structure.
type Node struct {
	At    geom.Vec
	Fixed [3]bool // the directions x, y, z in which the node is held
	Role  Role
}

// Structure is a ground structure with its load cases: all that the layout step needs. SI units.
type Structure struct {
	Title      string
	Frame      geom.Frame
	Nodes      []Node
	Cases      []Case
	Material   Material
	JointCost  float64 // s of DESIGN: joint cost as a length, m
	Diaphragms [][]int // sets of nodes that move in plan as one rigid body
	Zones      []Zone  // footing zones with their limits
	Kept       []Kept
	Rules      Rules
	Deck       Deck
	// Tributary is the plan area of roof that each node carries, m2; 0 for nodes off the roof. Nil if the structure was
	// not made by Build.
	Tributary []float64
	// Omitted names the combinations that were left out because no layout for the Cases can fail under them (see
	// essential).
	Omitted []string
}

// Deck says how the roof carries load between its nodes.
type Deck uint8

// The three kinds of deck.
const (
	DeckFree      Deck = iota // bars alone carry everything
	DeckDiaphragm             // stiff in plan: one rigid motion
	DeckHeld                  // something else holds the roof nodes sideways
)

// String returns the word of the brief for the deck.
func (d Deck) String() string { return [...]string{"free", "diaphragm", "held"}[d] }

// Case is one factored set of loads.
type Case struct {
	Name    string
	Gravity float64 // factor on the self-weight of the bars; 0 leaves it out
	Loads   []NodeLoad
	Factors []Factor // the actions in the case with their factors; may be nil
}

// NodeLoad is a force in N on a node.
type NodeLoad struct {
	Node  int
	Force geom.Vec
}

// Material is what the plastic layout is made of.
type Material struct {
	Name        string
	Tension     float64 // design strength, Pa
	Compression float64 // design strength, Pa
	Density     float64 // kg/m3
}

// Zone is a footing zone: its nodes and what they may take. Limits as in geom.FootLimits.
type Zone struct {
	Name   string
	Nodes  []int
	Limits geom.FootLimits
}

// Kept is a member that stands already or is insisted on; it costs nothing up to its area.
type Kept struct {
	A, B int
	Area float64 // m2
}

// RoofBars says whether bars may run between two roof nodes.
type RoofBars uint8

// The three rules for bars between two roof nodes.
const (
	RoofBarsAllowed RoofBars = iota
	RoofBarsCosted           // allowed, at Rules.RoofFactor times the cost
	RoofBarsExcluded
)

// String returns the word of the brief for the rule.
func (r RoofBars) String() string { return [...]string{"allowed", "costed", "excluded"}[r] }

// Rules says which pairs of nodes are candidate bars.
type Rules struct {
	MinLength, MaxLength float64 // m
	KeepClear            []geom.Prism
	Envelope             []geom.Prism // empty: no limit
	RoofBars             RoofBars
	RoofFactor           float64 // cost factor w of bars between two roof nodes when costed; else 1
}

// Gravity is the standard acceleration of free fall, m/s2 (ISO 80000-3; common practice takes 9.81).
const Gravity = 9.80665
