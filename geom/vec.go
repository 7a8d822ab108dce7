// Package geom holds the geometry that the rest of boughwork stands on: vectors,
// polygons with holes, vertical prisms, the GeoJSON site plan and the projection
// between longitude and latitude and local metres.
//
// Axes: x east, y north, z up. Lengths are metres unless a name says otherwise.
package geom

import "math"

// Vec is a point or a vector in local metres (or any other unit of the caller): x east, y north, z up.
type Vec struct{ X, Y, Z float64 }

// Add returns v + w.
func (v Vec) Add(w Vec) Vec { return Vec{v.X + w.X, v.Y + w.Y, v.Z + w.Z} }

// Sub returns v - w.
func (v Vec) Sub(w Vec) Vec { return Vec{v.X - w.X, v.Y - w.Y, v.Z - w.Z} }

// Scale returns s v.
func (v Vec) Scale(s float64) Vec { return Vec{s * v.X, s * v.Y, s * v.Z} }

// Dot returns the scalar product v . w.
func (v Vec) Dot(w Vec) float64 { return v.X*w.X + v.Y*w.Y + v.Z*w.Z }

// Cross returns the vector product v x w.
func (v Vec) Cross(w Vec) Vec {
	return Vec{v.Y*w.Z - v.Z*w.Y, v.Z*w.X - v.X*w.Z, v.X*w.Y - v.Y*w.X}
}

// Norm returns the Euclidean length of v.
func (v Vec) Norm() float64 { return math.Sqrt(v.Dot(v)) }

// Array returns the three components in order x, y, z.
func (v Vec) Array() [3]float64 { return [3]float64{v.X, v.Y, v.Z} }

// FromArray returns the vector with components a.
func FromArray(a [3]float64) Vec { return Vec{a[0], a[1], a[2]} }

// Finite reports whether no component is NaN or infinite.
func (v Vec) Finite() bool {
	s := v.X + v.Y + v.Z
	return !math.IsNaN(s) && !math.IsInf(s, 0) &&
		!math.IsInf(v.X, 0) && !math.IsInf(v.Y, 0) && !math.IsInf(v.Z, 0)
}
