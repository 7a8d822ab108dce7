package brief

// Bounds of what a brief may ask for. They catch slips of the unit, not of judgement.
const (
	finestM   = 0.05  // spacing, m: finer than a hand's breadth is no place for a joint
	longestM  = 1e4   // length, m: ten kilometres is no roof
	strongest = 1e4   // strength, MPa: above any drawn wire
	heaviest  = 3e4   // density, kg/m3: above any metal
	largestKN = 1e9   // force, kN
	presses   = 1e4   // pressure, kN/m2, and line load, kN/m
	turn      = 360.0 // bearing, degrees
	mostCodes = 999999
	mostTurns = 100000 // rounds of member adding
)

// Table lists every key of the brief in the order in which a person would write it.
var Table = []Key{
	{Path: "title", Kind: Text, Default: "untitled", Meaning: "name of the study, on every drawing and file"},

	{Path: "site.file", Kind: Text, Default: "site.geojson", Meaning: "the site plan, GeoJSON; relative to the brief"},
	{Path: "site.coordinates", Kind: Choice, Choices: []string{"lonlat", "metres"}, Default: "lonlat",
		Meaning: "longitude and latitude in degrees (WGS 84), or metres east and north of any origin"},
	{Path: "site.epsg", Kind: Whole, Limits: from(1, mostCodes), Absent: "no label",
		Meaning: "code of the coordinate system of a site in metres; carried through to the files as a label"},

	{Path: "roof.surface", Kind: Choice, Choices: []string{"site", "plane", "grid"}, Default: "site",
		Meaning: "where the heights of the roof come from: the site plan, or the keys roof.plane or roof.heights"},
	{Path: "roof.plane.through", Kind: Place, Absent: "needed if it slopes", Meaning: "place where the plane has its height"},
	{Path: "roof.plane.height_m", Kind: Number, Unit: "m", Limits: from(-longestM, longestM), Absent: "needed for a plane",
		Meaning: "height of the plane there"},
	{Path: "roof.plane.slope_percent", Kind: Number, Unit: "%", Limits: from(0, 1000), Default: 0.0, Meaning: "slope of the plane"},
	{Path: "roof.plane.uphill_bearing_deg", Kind: Number, Unit: "degrees", Limits: from(-turn, turn), Default: 0.0,
		Meaning: "bearing towards which the plane rises, clockwise from north"},
	{Path: "roof.heights.origin", Kind: Place, Absent: "needed for a grid", Meaning: "place of the first height of the first row"},
	{Path: "roof.heights.bearing_deg", Kind: Number, Unit: "degrees", Limits: from(-turn, turn), Default: 90.0,
		Meaning: "bearing along a row; the rows follow one another 90 degrees to the left of it"},
	{Path: "roof.heights.along_m", Kind: Number, Unit: "m", Limits: from(finestM, longestM), Absent: "needed for a grid",
		Meaning: "distance between neighbouring heights of a row"},
	{Path: "roof.heights.across_m", Kind: Number, Unit: "m", Limits: from(finestM, longestM), Absent: "as along_m",
		Meaning: "distance between neighbouring rows"},
	{Path: "roof.heights.rows_m", Kind: Rows, Unit: "m", Limits: from(-longestM, longestM), Absent: "needed for a grid",
		Meaning: "the heights, row by row"},
	{Path: "roof.deck", Kind: Choice, Choices: []string{"free", "diaphragm", "held"}, Default: "diaphragm",
		Meaning: "free: bars alone carry everything; diaphragm: the deck is stiff in plan; held: something else holds it sideways"},
	{Path: "roof.bars_in_roof", Kind: Choice, Choices: []string{"allowed", "costed", "excluded"}, Default: "allowed",
		Meaning: "bars between two roof nodes"},
	{Path: "roof.bar_cost_factor", Kind: Number, Unit: "1", Limits: above(0, 1e6), Default: 2.0,
		Meaning: "what such a bar costs, as a multiple of any other, if bars_in_roof is costed"},

	{Path: "grid.deck_spacing_m", Kind: Number, Unit: "m", Limits: from(finestM, longestM), Default: 4.0,
		Meaning: "largest distance between neighbouring roof nodes: the span of the deck"},
	{Path: "grid.inner_spacing_m", Kind: Number, Unit: "m", Limits: from(finestM, longestM), Default: 4.0,
		Meaning: "horizontal spacing of the inner nodes"},
	{Path: "grid.inner_rise_m", Kind: Number, Unit: "m", Limits: from(finestM, longestM), Default: 2.0,
		Meaning: "vertical spacing of the inner nodes"},
	{Path: "grid.foot_spacing_m", Kind: Number, Unit: "m", Limits: from(finestM, longestM), Default: 2.0,
		Meaning: "spacing of the places in a footing zone where a foot may stand"},
	{Path: "grid.wall_spacing_m", Kind: Number, Unit: "m", Limits: from(finestM, longestM), Default: 2.0,
		Meaning: "spacing of the nodes on a wall"},
	{Path: "grid.bearing_deg", Kind: Number, Unit: "degrees", Limits: from(-turn, turn), Absent: "along the longest edge of the roof",
		Meaning: "bearing of the first axis of the grid, clockwise from north"},
	{Path: "grid.shortest_m", Kind: Number, Unit: "m", Limits: from(0, longestM), Default: 0.3,
		Meaning: "length of the shortest bar"},
	{Path: "grid.longest_m", Kind: Number, Unit: "m", Limits: above(0, longestM), Default: 20.0,
		Meaning: "length of the longest bar"},

	{Path: "material.name", Kind: Text, Default: "steel S355", Meaning: "name of the material"},
	{Path: "material.tension_mpa", Kind: Number, Unit: "MPa", Limits: above(0, strongest), Default: 355.0,
		Meaning: "design strength in tension; the default is the yield strength of S355 (EN 1993-1-1 table 3.1, up to 40 mm) over gamma_M0 = 1.0 (clause 6.1)"},
	{Path: "material.compression_mpa", Kind: Number, Unit: "MPa", Limits: above(0, strongest), Default: 355.0,
		Meaning: "design strength in compression; the default leaves buckling out: lower it to make an allowance"},
	{Path: "material.density_kg_m3", Kind: Number, Unit: "kg/m3", Limits: above(0, heaviest), Default: 7850.0,
		Meaning: "density (EN 1991-1-1 table A.4: 77.0 kN/m3 for steel)"},

	{Path: "joint_cost_m", Kind: Number, Unit: "m", Limits: from(0, longestM), Default: 0.0,
		Meaning: "what a joint costs, as a length added to each end of a bar; more gives fewer and longer bars"},
	{Path: "self_weight", Kind: Switch, Default: true, Meaning: "the bars weigh, as a permanent action"},
	{Path: "sideways_share", Kind: Number, Unit: "1", Limits: from(0, 1), Default: 0.005,
		Meaning: "nominal sideways load in four directions, as a share of the vertical load; the default is the basic sway 1/200 of EN 1993-1-1 5.3.2"},

	{Path: "loads.actions[].name", Kind: Text, Absent: "needed", Meaning: "name of the action"},
	{Path: "loads.actions[].kind", Kind: Choice, Choices: []string{"permanent", "imposed", "snow", "wind"}, Absent: "needed",
		Meaning: "nature of the action, which chooses its factors"},
	{Path: "loads.actions[].group", Kind: Text, Default: "", Meaning: "of the actions of one group at most one acts at a time"},
	{Path: "loads.actions[].psi0", Kind: Number, Unit: "1", Limits: from(0, 1), Absent: "value of the code for the kind",
		Meaning: "combination factor"},
	{Path: "loads.actions[].area[].kn_m2", Kind: Number, Unit: "kN/m2", Limits: from(-presses, presses), Absent: "needed",
		Meaning: "pressure on the roof; negative is suction, only with acts: normal"},
	{Path: "loads.actions[].area[].acts", Kind: Choice, Choices: []string{"down", "normal", "towards"}, Default: "down",
		Meaning: "down, per area of plan; normal, onto the surface per area of it; towards a bearing, per area of plan"},
	{Path: "loads.actions[].area[].bearing_deg", Kind: Number, Unit: "degrees", Limits: from(-turn, turn), Absent: "needed with acts: towards",
		Meaning: "bearing towards which the load pushes; wind from the west pushes towards 90"},
	{Path: "loads.actions[].area[].where.half_bearing_deg", Kind: Number, Unit: "degrees", Limits: from(-turn, turn), Absent: "the whole roof",
		Meaning: "only the half of the roof that lies towards this bearing"},
	{Path: "loads.actions[].area[].where.through", Kind: Place, Absent: "middle of the roof", Meaning: "place on the line that parts the halves"},
	{Path: "loads.actions[].area[].where.polygon", Kind: Ring, Absent: "the whole roof", Meaning: "only inside this polygon"},
	{Path: "loads.actions[].edge[].kn_m", Kind: Number, Unit: "kN/m", Limits: from(0, presses), Absent: "needed",
		Meaning: "line load on the edges of the roof"},
	{Path: "loads.actions[].edge[].acts", Kind: Choice, Choices: []string{"down", "towards"}, Default: "down", Meaning: "down, or towards a bearing"},
	{Path: "loads.actions[].edge[].bearing_deg", Kind: Number, Unit: "degrees", Limits: from(-turn, turn), Absent: "needed with acts: towards",
		Meaning: "bearing towards which the load pushes"},
	{Path: "loads.actions[].edge[].windward_only", Kind: Switch, Default: true,
		Meaning: "a sideways load only on the edges that face it, per metre of edge as seen from there"},
	{Path: "loads.actions[].edge[].where.half_bearing_deg", Kind: Number, Unit: "degrees", Limits: from(-turn, turn), Absent: "all edges",
		Meaning: "only the edges of the half that lies towards this bearing"},
	{Path: "loads.actions[].edge[].where.through", Kind: Place, Absent: "middle of the roof", Meaning: "place on the line that parts the halves"},
	{Path: "loads.actions[].edge[].where.polygon", Kind: Ring, Absent: "all edges", Meaning: "only inside this polygon"},
	{Path: "loads.actions[].point[].at", Kind: Place, Absent: "needed", Meaning: "place of a point load on the roof"},
	{Path: "loads.actions[].point[].down_kn", Kind: Number, Unit: "kN", Limits: from(-largestKN, largestKN), Default: 0.0,
		Meaning: "its vertical part; negative is upwards"},
	{Path: "loads.actions[].point[].towards_kn", Kind: Number, Unit: "kN", Limits: from(0, largestKN), Default: 0.0, Meaning: "its horizontal part"},
	{Path: "loads.actions[].point[].bearing_deg", Kind: Number, Unit: "degrees", Limits: from(-turn, turn), Absent: "needed with towards_kn",
		Meaning: "bearing towards which the horizontal part pushes"},

	{Path: "combinations.rule", Kind: Choice, Choices: []string{"en1990", "en1990-ab", "asce7", "listed"}, Default: "en1990",
		Meaning: "EN 1990 expression 6.10, or 6.10a and 6.10b; ASCE 7 section 2.3.1; or the cases listed here"},
	{Path: "combinations.cases[].name", Kind: Text, Absent: "needed", Meaning: "name of a listed case"},
	{Path: "combinations.cases[].gravity", Kind: Number, Unit: "1", Limits: from(0, 100), Default: 1.0, Meaning: "factor on the weight of the bars"},
	{Path: "combinations.cases[].factors[].action", Kind: Text, Absent: "needed", Meaning: "name of an action"},
	{Path: "combinations.cases[].factors[].factor", Kind: Number, Unit: "1", Limits: from(-100, 100), Absent: "needed", Meaning: "its factor in this case"},

	{Path: "footings[].zone", Kind: Text, Absent: "needed", Meaning: "name of a footing zone of the site; what stands here replaces what the site says of it"},
	{Path: "footings[].no_uplift", Kind: Switch, Default: false, Meaning: "no foot of the zone can be pulled up"},
	{Path: "footings[].vertical_only", Kind: Switch, Default: false, Meaning: "the feet of the zone slide freely sideways"},
	{Path: "footings[].vertical_kn", Kind: Number, Unit: "kN", Limits: from(0, largestKN), Absent: "no limit", Meaning: "largest force down on the zone in any case"},
	{Path: "footings[].uplift_kn", Kind: Number, Unit: "kN", Limits: from(0, largestKN), Absent: "no limit", Meaning: "largest force up on the zone in any case"},
	{Path: "footings[].sideways_kn", Kind: Number, Unit: "kN", Limits: from(0, largestKN), Absent: "no limit", Meaning: "largest horizontal force on the zone in any case"},
	{Path: "footings[].cost_m3_per_kn", Kind: Number, Unit: "m3/kN", Limits: from(0, 1e3), Default: 0.0,
		Meaning: "material charged for the foundation, per kN of the largest vertical force"},

	{Path: "solve.gap", Kind: Number, Unit: "1", Limits: from(1e-8, 0.5), Default: 0.001,
		Meaning: "gap between the layout and the bound at which to stop, as a share"},
	{Path: "solve.solver", Kind: Choice, Choices: []string{"interior", "glpk"}, Default: "interior",
		Meaning: "the program's own interior-point method, or GLPK in a build with the tag glpk"},
	{Path: "solve.rounds", Kind: Whole, Limits: from(1, mostTurns), Default: 200, Meaning: "largest number of rounds of adding bars and cases"},
}
