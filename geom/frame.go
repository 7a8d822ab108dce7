package geom

import "math"

// originStep is the step to which the origin of a geographic frame is rounded, degrees: 11 mm on the ground, and few
// enough decimals that the origin prints and reads back exactly.
const originStep = 1e-7

// geographicCRS is the label of a site in longitude and latitude.
const geographicCRS = "EPSG:4326"

// NewFrame returns the geographic frame whose origin is (lon, lat) in degrees, rounded to 1e-7 degrees.
func NewFrame(lon, lat float64) Frame {
	steps := math.Round(1 / originStep)
	return Frame{
		Geographic: true,
		Lon:        math.Round(wrapDegrees(lon)*steps) / steps,
		Lat:        math.Round(lat*steps) / steps,
		CRS:        geographicCRS,
	}
}

// ToLocal returns local metres (x east, y north) of a longitude and latitude in degrees. In a frame that is not
// geographic the numbers are metres already and come back as they are.
func (f Frame) ToLocal(lon, lat float64) (x, y float64) {
	if !f.Geographic {
		return lon, lat
	}
	x, y = mercator(wrapDegrees(lon-f.Lon), lat)
	_, y0 := mercator(0, f.Lat)
	return x, y - y0
}

// ToLonLat returns the longitude (-180 to 180) and latitude in degrees of a place in local metres: the inverse of
// ToLocal.
func (f Frame) ToLonLat(x, y float64) (lon, lat float64) {
	if !f.Geographic {
		return x, y
	}
	_, y0 := mercator(0, f.Lat)
	dlon, lat := inverseMercator(x, y+y0)
	return wrapDegrees(f.Lon + dlon), lat
}

// wrapDegrees brings an angle into -180 to 180 degrees, exactly.
func wrapDegrees(d float64) float64 {
	if d >= -180 && d <= 180 {
		return d
	}
	return math.Remainder(d, 360)
}
