package layout

// Record is layout.json, version 1: enough for a stranger to verify the result with no trust in the solver. It lists
// everything that changes the linear program. Units: m, kN, MPa, m2, m3; tension positive; displacements in m3/kN, so
// that the sum of load x displacement is a volume. Every export is made from a Record.
type Record struct {
	Format      string `json:"format"`  // "boughwork-layout"
	Version     int    `json:"version"` // 1
	Title       string `json:"title"`
	MadeBy      string `json:"made_by"`
	BriefSHA256 string `json:"brief_sha256"`
	// Status is the word of lp.Status. Anything but "optimal" and "no equilibrium" may still carry bars: the best
	// feasible layout so far.
	Status     string         `json:"status"`
	Units      Units          `json:"units"`
	Frame      RecordFrame    `json:"frame"`
	Material   RecordMaterial `json:"material"`
	JointCostM float64        `json:"joint_cost_m"`
	Deck       string         `json:"deck"` // free, diaphragm or held

	Nodes []RecordNode `json:"nodes"`
	Cases []RecordCase `json:"cases"`
	// OmittedCases names combinations that whatever carries the cases carries too; they are in no list of this record.
	OmittedCases []string          `json:"omitted_cases,omitempty"`
	Diaphragms   []RecordDiaphragm `json:"diaphragms"`
	Footings     []RecordFooting   `json:"footings"` // zones that limit or charge their reactions
	Bars         []RecordBar       `json:"bars"`
	Candidates   RecordCandidates  `json:"candidates"`

	Certificate RecordCertificate `json:"certificate"`
	// Collapse is the evidence that no layout exists; absent otherwise.
	Collapse *RecordCollapse `json:"collapse,omitempty"`
	Rounds   []RecordRound   `json:"rounds"`
	Context  RecordContext   `json:"context"`
	Cautions []string        `json:"cautions"`
}

// Units names the units of the record.
type Units struct {
	Length string `json:"length"`
	Force  string `json:"force"`
	Stress string `json:"stress"`
	Area   string `json:"area"`
	Volume string `json:"volume"`
}

// RecordFrame says where local (0, 0) is. OriginLonLat is null for a site that came in metres.
type RecordFrame struct {
	OriginLonLat *[2]float64 `json:"origin_lonlat"`
	CRS          string      `json:"crs"`
	Projection   string      `json:"projection"` // words: how lon/lat became metres
}

// RecordMaterial holds the strengths of the linear program.
type RecordMaterial struct {
	Name           string  `json:"name"`
	TensionMPa     float64 `json:"tension_mpa"`
	CompressionMPa float64 `json:"compression_mpa"`
	DensityKgM3    float64 `json:"density_kg_m3"`
}

// RecordNode is a node of the ground structure, used or not.
type RecordNode struct {
	XYZ   [3]float64 `json:"xyz"`
	Fixed [3]bool    `json:"fixed"`
	Role  string     `json:"role"` // footing, roof, inner or wall
}

// RecordCase is one factored set of loads: [node, fx, fy, fz] in kN.
type RecordCase struct {
	Name    string       `json:"name"`
	Gravity float64      `json:"gravity"`
	Loads   [][4]float64 `json:"loads"`
	// Governs is true for a case in which the layout was solved, false for one that was checked against it.
	Governs bool `json:"governs"`
}

// RecordDiaphragm is a set of nodes that move in plan as one rigid body.
type RecordDiaphragm struct {
	Nodes []int `json:"nodes"`
}

// RecordFooting is a footing zone that limits or charges its reactions. Null means no limit. Limits are totals of the
// zone in each case, no_uplift and vertical_only hold at each node. The sideways limit is a regular 12-gon inscribed in
// the circle of radius sideways_kn: the sum of six two-sided forces of at most sideways_kn sin(15 degrees) each, towards
// 0, 30, 60, 90, 120 and 150 degrees anticlockwise from x.
type RecordFooting struct {
	Name         string   `json:"name"`
	Nodes        []int    `json:"nodes"`
	NoUplift     bool     `json:"no_uplift"`
	VerticalOnly bool     `json:"vertical_only"`
	VerticalKN   *float64 `json:"vertical_kn"`
	UpliftKN     *float64 `json:"uplift_kn"`
	SidewaysKN   *float64 `json:"sideways_kn"`
	CostM3PerKN  float64  `json:"cost_m3_per_kn"`
}

// RecordBar is a bar of the layout with its force in every case.
type RecordBar struct {
	Nodes   [2]int    `json:"nodes"`
	AreaM2  float64   `json:"area_m2"`
	ForceKN []float64 `json:"force_kn"`
	// Kept is true for a member that costs nothing; its area is the given one.
	Kept bool `json:"kept,omitempty"`
}

// RecordCandidates says which pairs of nodes were candidate bars: those with min_length <= length <= max_length that
// enter no keep-clear prism, stay inside the envelope if there is one, pass within through_node_m of no other node,
// do not join two wholly fixed nodes, and obey the rule for roof bars.
type RecordCandidates struct {
	Count        int64         `json:"count"` // -1 if the study ended before they were counted
	MaxLengthM   float64       `json:"max_length_m"`
	MinLengthM   float64       `json:"min_length_m"`
	ThroughNodeM float64       `json:"through_node_m"`
	RoofBars     string        `json:"roof_bars"` // allowed, costed or excluded
	RoofFactor   float64       `json:"roof_bar_factor"`
	KeepClear    []RecordPrism `json:"keep_clear"`
	Envelope     []RecordPrism `json:"envelope"` // null: no envelope
	// Kept members are in the program whatever their length, at the given area and no cost.
	Kept []RecordKept `json:"kept,omitempty"`
}

// RecordKept is a member that stands already or is insisted on.
type RecordKept struct {
	Nodes  [2]int  `json:"nodes"`
	AreaM2 float64 `json:"area_m2"`
}

// RecordPrism is a vertical prism; rings are closed, local metres.
type RecordPrism struct {
	Name  string         `json:"name"`
	Ring  [][2]float64   `json:"ring"`
	Holes [][][2]float64 `json:"holes"`
	FromM float64        `json:"from_m"`
	ToM   float64        `json:"to_m"`
}

// RecordCertificate proves how far the layout is from the least possible on this ground structure.
type RecordCertificate struct {
	ObjectiveM3 float64 `json:"objective_m3"`
	VolumeM3    float64 `json:"volume_m3"` // of the bars that cost, kept members left out
	BoundM3     float64 `json:"bound_m3"`
	Gap         float64 `json:"gap"`
	// WorstViolation is the largest price of a candidate divided by its cost, less one, before scaling; the
	// displacement below is after scaling.
	WorstViolation float64        `json:"worst_violation"`
	Displacement   [][][3]float64 `json:"displacement"` // [case][node][x y z], m3/kN
}

// RecordCollapse is a motion that the loads of a case drive and that no candidate bar resists.
type RecordCollapse struct {
	Case string `json:"case"` // whose loads drive the motion
	// Nodes are the loaded nodes that the motion moves along their load, the most work first.
	Nodes []int `json:"nodes"`
	// Motion is [node][x y z], scaled so that the largest component is 1 m.
	Motion [][3]float64 `json:"motion"`
	// WorkKJ is what the loads do on the motion, less what limited feet and kept members can absorb.
	WorkKJ float64 `json:"work_kj"`
	// LeastVolumeM3 is the volume that any layout would need at least: beyond all reason; absent if it has no end.
	LeastVolumeM3 float64 `json:"least_volume_m3,omitempty"`
	Text          string  `json:"text"`
	// Others are motions of further cases, in the same scale, where only several cases together prove it.
	Others []RecordMotion `json:"others,omitempty"`
}

// RecordMotion is the motion that the loads of a case drive, [node][x y z].
type RecordMotion struct {
	Case   string       `json:"case"`
	Motion [][3]float64 `json:"motion"`
}

// RecordRound is one round of member adding.
type RecordRound struct {
	Cases    int     `json:"cases"`
	Bars     int     `json:"bars"`
	VolumeM3 float64 `json:"volume_m3"`
	BoundM3  float64 `json:"bound_m3"`
	Gap      float64 `json:"gap"`
}

// RecordContext is what the drawings need beside the layout, in local metres: open rings with heights.
type RecordContext struct {
	Roof     []RecordRegion `json:"roof"`
	Footings []RecordRegion `json:"footings"`
	Walls    []RecordRegion `json:"walls"`
}

// RecordRegion is a named polygon with holes (rings[0] is the outside), a line (one ring, closed false) or a point.
type RecordRegion struct {
	Name   string         `json:"name"`
	Closed bool           `json:"closed"`
	Rings  [][][3]float64 `json:"rings"`
}
