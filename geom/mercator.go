package geom

import "math"

// The transverse Mercator projection by Krueger's series to the sixth order in the third flattening n. Formulas and
// coefficients: Karney 2011, Transverse Mercator with an accuracy of a few nanometers, Journal of Geodesy 85:475-485,
// equations (7) to (14) and (19) to (21) for the latitudes, (35) and (36) for the coefficients. The error of the
// truncated series is a few nanometres within 3900 km of the central meridian.

// The WGS 84 ellipsoid (NIMA TR8350.2): equatorial radius in m and flattening.
const (
	wgs84Radius     = 6378137.0
	wgs84Flattening = 1 / 298.257223563
)

const degree = math.Pi / 180

// newtonSteps bounds the Newton iteration for the latitude; three steps reach rounding everywhere (Karney 2011, after
// equation 21), the others are a margin.
const newtonSteps = 6

// krueger holds what depends on the ellipsoid alone.
type krueger struct {
	radius      float64    // of the rectifying sphere, m
	e           float64    // first eccentricity
	alpha, beta [6]float64 // coefficients of the series forward and back
}

var wgs84 = newKrueger(wgs84Radius, wgs84Flattening)

// newKrueger evaluates equations (14), (35) and (36) for an ellipsoid with equatorial radius a (m) and flattening f.
func newKrueger(a, f float64) krueger {
	n := f / (2 - f)
	n2 := n * n
	k := krueger{e: math.Sqrt(f * (2 - f)), radius: a / (1 + n) * (1 + n2*(1.0/4+n2*(1.0/64+n2/256)))}
	k.alpha = [6]float64{
		n * (1.0/2 + n*(-2.0/3+n*(5.0/16+n*(41.0/180+n*(-127.0/288+n*7891.0/37800))))),
		n2 * (13.0/48 + n*(-3.0/5+n*(557.0/1440+n*(281.0/630+n*-1983433.0/1935360)))),
		n2 * n * (61.0/240 + n*(-103.0/140+n*(15061.0/26880+n*167603.0/181440))),
		n2 * n2 * (49561.0/161280 + n*(-179.0/168+n*6601661.0/7257600)),
		n2 * n2 * n * (34729.0/80640 + n*-3418889.0/1995840),
		n2 * n2 * n2 * 212378941.0 / 319334400,
	}
	k.beta = [6]float64{
		n * (1.0/2 + n*(-2.0/3+n*(37.0/96+n*(-1.0/360+n*(-81.0/512+n*96199.0/604800))))),
		n2 * (1.0/48 + n*(1.0/15+n*(-437.0/1440+n*(46.0/105+n*-1118711.0/3870720)))),
		n2 * n * (17.0/480 + n*(-37.0/840+n*(-209.0/4480+n*5569.0/90720))),
		n2 * n2 * (4397.0/161280 + n*(-11.0/504+n*-830251.0/7257600)),
		n2 * n2 * n * (4583.0/161280 + n*-108847.0/3991680),
		n2 * n2 * n2 * 20648693.0 / 638668800,
	}
	return k
}

// mercator returns easting and northing (m, scale 1, northing from the equator) of a longitude relative to the central
// meridian and a latitude, both in degrees.
func mercator(dlon, lat float64) (x, y float64) {
	sin, cos := math.Sincos(dlon * degree)
	t := wgs84.conformal(math.Tan(lat * degree))
	xi := math.Atan2(t, cos)
	eta := math.Asinh(sin / math.Hypot(t, cos))
	dx, dy := series(wgs84.alpha, xi, eta)
	return wgs84.radius * (eta + dx), wgs84.radius * (xi + dy)
}

// inverseMercator is the inverse of mercator.
func inverseMercator(x, y float64) (dlon, lat float64) {
	xi, eta := y/wgs84.radius, x/wgs84.radius
	dx, dy := series(wgs84.beta, xi, eta)
	xi, eta = xi-dy, eta-dx
	sinh := math.Sinh(eta)
	sin, cos := math.Sincos(xi)
	t := wgs84.geodetic(sin / math.Hypot(sinh, cos))
	return math.Atan2(sinh, cos) / degree, math.Atan(t) / degree
}

// series sums c_j (cos 2j xi sinh 2j eta, sin 2j xi cosh 2j eta), the corrections of easting and northing.
func series(c [6]float64, xi, eta float64) (dx, dy float64) {
	for j := len(c); j >= 1; j-- {
		sin, cos := math.Sincos(2 * float64(j) * xi)
		dx += c[j-1] * cos * math.Sinh(2*float64(j)*eta)
		dy += c[j-1] * sin * math.Cosh(2*float64(j)*eta)
	}
	return dx, dy
}

// conformal returns the tangent of the conformal latitude from that of the geodetic one: equations (7) to (9).
func (k krueger) conformal(tau float64) float64 {
	root := math.Hypot(1, tau)
	sigma := math.Sinh(k.e * math.Atanh(k.e*tau/root))
	return tau*math.Hypot(1, sigma) - sigma*root
}

// geodetic is the inverse of conformal by Newton's method: equations (19) to (21).
func (k krueger) geodetic(t float64) float64 {
	// Beyond this tangent (89.2 degrees) the asymptotic form is the better start; beyond 2/sqrt(eps) it is exact.
	const steep, exact = 70, 1.3e8
	q := (1 - k.e) * (1 + k.e)
	tau := t / q
	if math.Abs(t) > steep {
		tau = t * math.Exp(k.e*math.Atanh(k.e))
	}
	if !(math.Abs(tau) < exact) {
		return tau
	}
	for range newtonSteps {
		ti := k.conformal(tau)
		step := (t - ti) / math.Hypot(1, ti) * (1 + q*tau*tau) / (q * math.Hypot(1, tau))
		tau += step
		if math.Abs(step) <= 1e-16*math.Max(1, math.Abs(tau)) {
			break
		}
	}
	return tau
}
