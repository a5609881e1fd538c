package lighttrap

import "math"

// Scattered light of the distributions below has a radiant intensity that goes
// with a power m of the cosine to the normal; m = 1 is Lambertian. They are what
// faces of the textures [Lambertian] and [CosinePower] send on. All follow from the
// power by elementary integrals (derived).

// ScatterIntensity returns the share of scattered light per steradian at the
// cosine cos to the normal, (m+1)/(2π) cos^m. Its integral over the half space is 1.
//
// Special cases: NaN unless m is finite and >= 0 and 0 <= cos <= 1.
func ScatterIntensity(m, cos float64) float64 {
	if !(m >= 0) || math.IsInf(m, 1) || !(cos >= 0 && cos <= 1) {
		return math.NaN()
	}
	return (m + 1) / (2 * math.Pi) * math.Pow(cos, m)
}

// ScatterWithin returns the share of scattered light within the given half angle
// (rad) about the normal, 1 - cos^(m+1); for m = 1 that is the sine squared. With the
// critical angle it is the share that meets the face inside its escape cone.
//
// Special cases: NaN unless m is finite and >= 0 and 0 <= halfAngle <= π/2.
func ScatterWithin(m, halfAngle float64) float64 {
	if !(m >= 0) || math.IsInf(m, 1) || !(halfAngle >= 0 && halfAngle <= math.Pi/2) {
		return math.NaN()
	}
	// ln cos = ln(1 - 2 sin²(θ/2)) keeps the digits of small angles.
	sin := math.Sin(halfAngle / 2)
	return -math.Expm1((m + 1) * math.Log1p(-2*sin*sin))
}

// ScatterExponent returns the power m of scattered light half of whose radiant
// intensity is left at the given half angle (rad): ln ½ / ln cos. An angle of 60°
// is Lambertian.
//
// Special case: NaN unless 0 < halfAngle < π/2.
func ScatterExponent(halfAngle float64) float64 {
	if !(halfAngle > 0 && halfAngle < math.Pi/2) {
		return math.NaN()
	}
	sin := math.Sin(halfAngle / 2)
	return -math.Ln2 / math.Log1p(-2*sin*sin)
}

// ScatterMeanCosine returns the mean cosine to the normal, (m+1)/(m+2): 2/3 for
// Lambertian light.
//
// Special case: NaN unless m is finite and >= 0.
func ScatterMeanCosine(m float64) float64 {
	if !(m >= 0) || math.IsInf(m, 1) {
		return math.NaN()
	}
	return (m + 1) / (m + 2)
}

// ScatterMeanPath returns the mean path of one pass, in thicknesses of the slab,
// without absorption: the mean of 1/cosine, (m+1)/m. It is 2 for Lambertian light.
//
// Special cases: NaN unless m is finite and >= 0; +Inf for m = 0.
func ScatterMeanPath(m float64) float64 {
	if !(m >= 0) || math.IsInf(m, 1) {
		return math.NaN()
	}
	return (m + 1) / m
}

// ScatterDirection maps the unit square onto the directions of scattered light:
// evenly spread points (u, v) give directions of the distribution. The z axis is
// the normal.
//
// Special cases: NaN unless m is finite and >= 0, 0 <= u <= 1 and v is finite.
func ScatterDirection(m, u, v float64) (x, y, z float64) {
	if !(m >= 0) || math.IsInf(m, 1) || !(u >= 0 && u <= 1) || math.IsNaN(v) || math.IsInf(v, 0) {
		return math.NaN(), math.NaN(), math.NaN()
	}
	z = math.Pow(u, 1/(m+1))
	s := math.Sqrt((1 - z) * (1 + z))
	sin, cos := math.Sincos(2 * math.Pi * (v - math.Floor(v)))
	return s * cos, s * sin, z
}
