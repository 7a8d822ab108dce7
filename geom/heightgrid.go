package geom

import (
	"fmt"
	"math"
)

// HeightGrid is a surface given by heights at the points of a regular grid, bilinear between them. Outside the grid the
// surface goes on level from its edge. Make it with NewHeightGrid.
type HeightGrid struct {
	x, y     float64 // first point, local metres
	dx, dy   float64 // spacing, m
	nx, ny   int
	z        []float64 // z[j*nx+i]
	sin, cos float64   // of the turn
}

// NewHeightGrid returns the surface through heights at grid points. rows[j][i] is the height (m) of the point that lies
// i dx along the first axis and j dy along the second from (x, y) in local metres. The first axis points east and the
// second north, both turned clockwise by turn degrees. There must be two rows and two columns or more, all rows equally
// long, dx and dy positive (m), every number finite.
func NewHeightGrid(x, y, dx, dy, turn float64, rows [][]float64) (*HeightGrid, error) {
	if !(dx > 0) || !(dy > 0) || math.IsInf(dx+dy, 0) {
		return nil, fmt.Errorf("the spacing of a height grid must be positive in both directions, not %g m and %g m", dx, dy)
	}
	if s := x + y + turn; math.IsNaN(s) || math.IsInf(s, 0) {
		return nil, fmt.Errorf("the first point and the turn of a height grid must be finite numbers")
	}
	if len(rows) < 2 || len(rows[0]) < 2 {
		return nil, fmt.Errorf("a height grid needs two rows and two columns or more")
	}
	g := &HeightGrid{x: x, y: y, dx: dx, dy: dy, nx: len(rows[0]), ny: len(rows)}
	g.sin, g.cos = Towards(turn)
	for j, row := range rows {
		if len(row) != g.nx {
			return nil, fmt.Errorf("row %d of the height grid has %d heights and row 1 has %d; make them equal", j+1, len(row), g.nx)
		}
		for i, z := range row {
			if math.IsNaN(z) || math.IsInf(z, 0) {
				return nil, fmt.Errorf("height %d of row %d of the height grid is not a finite number", i+1, j+1)
			}
			g.z = append(g.z, z)
		}
	}
	return g, nil
}

// Height returns z at (x, y), local metres.
func (g *HeightGrid) Height(x, y float64) float64 {
	u, v := g.locate(x, y)
	i, s, _ := cell(u, g.nx)
	j, t, _ := cell(v, g.ny)
	a, b, c, d := g.corners(i, j)
	return (1-t)*((1-s)*a+s*b) + t*((1-s)*c+s*d)
}

// Gradient returns dz/dx and dz/dy, exact inside a cell; on a grid line it is that of the cell on the far side. In a
// direction in which the place is outside the grid the surface is level.
func (g *HeightGrid) Gradient(x, y float64) (zx, zy float64) {
	u, v := g.locate(x, y)
	i, s, inU := cell(u, g.nx)
	j, t, inV := cell(v, g.ny)
	a, b, c, d := g.corners(i, j)
	var zu, zv float64
	if inU {
		zu = ((1-t)*(b-a) + t*(d-c)) / g.dx
	}
	if inV {
		zv = ((1-s)*(c-a) + s*(d-b)) / g.dy
	}
	return g.cos*zu + g.sin*zv, -g.sin*zu + g.cos*zv
}

// locate returns the place in grid units along the two axes.
func (g *HeightGrid) locate(x, y float64) (u, v float64) {
	ex, ny := x-g.x, y-g.y
	return (g.cos*ex - g.sin*ny) / g.dx, (g.sin*ex + g.cos*ny) / g.dy
}

// cell returns the cell of a coordinate among n grid points, the place in it from 0 to 1, and whether the coordinate is
// inside the grid.
func cell(u float64, n int) (i int, s float64, inside bool) {
	last := float64(n - 1)
	if !(u >= 0) {
		return 0, 0, false
	}
	if u > last {
		return n - 2, 1, false
	}
	i = min(int(u), n-2)
	return i, u - float64(i), true
}

// corners returns the heights at the corners of a cell: (0,0), (1,0), (0,1), (1,1).
func (g *HeightGrid) corners(i, j int) (a, b, c, d float64) {
	k := j*g.nx + i
	return g.z[k], g.z[k+1], g.z[k+g.nx], g.z[k+g.nx+1]
}
