package brief

// Surface says where the heights of the roof come from. Places are in the coordinates of the site.
type Surface struct {
	Plane *Plane // surface: plane
	Grid  *Grid  // surface: grid
}

// Plane is a plane roof.
type Plane struct {
	Through [2]float64 // where it has its height
	placed  bool       // false: level, with no place given
	HeightM float64
	Slope   float64 // rise over run
	Bearing float64 // degrees clockwise from north towards which it rises
}

// Grid is a regular grid of heights: Rows[r][c] stands c steps of AlongM from the origin towards Bearing, and r steps
// of AcrossM 90 degrees to the left of that.
type Grid struct {
	Origin          [2]float64
	Bearing         float64
	AlongM, AcrossM float64
	Rows            [][]float64
}

// readSurface reads the heights of the roof. Keys of a surface that was not chosen are errors: they would be ignored.
func readSurface(roof section) Surface {
	var s Surface
	kind := roof.choice("surface")
	plane, grid := roof.sub("plane"), roof.sub("heights")
	switch {
	case kind != 1 && len(plane.vals) > 0:
		roof.wrong("plane", "is only used with surface: plane; say so, or take it out")
	case kind != 2 && len(grid.vals) > 0:
		roof.wrong("heights", "is only used with surface: grid; say so, or take it out")
	}
	switch kind {
	case 1:
		s.Plane = &Plane{
			HeightM: plane.needed("height_m"),
			Slope:   plane.number("slope_percent") / 100,
			Bearing: plane.number("uphill_bearing_deg"),
		}
		// A level plane is the same wherever it has its height.
		if s.Plane.Slope != 0 || plane.has("through") {
			if at := plane.neededPlace("through"); at != nil {
				s.Plane.Through, s.Plane.placed = *at, true
			}
		}
	case 2:
		s.Grid = readHeights(grid)
	}
	return s
}

func readHeights(in section) *Grid {
	g := &Grid{Bearing: in.number("bearing_deg"), AlongM: in.needed("along_m"), AcrossM: in.number("across_m")}
	if !in.has("across_m") {
		g.AcrossM = g.AlongM
	}
	if at := in.neededPlace("origin"); at != nil {
		g.Origin = *at
	}
	if !in.has("rows_m") {
		in.missing("rows_m")
		return g
	}
	g.Rows = in.rows("rows_m")
	return g
}
