package lighttrap

import "math"

// PathLimit returns the largest mean path length, in units of the thickness, of
// weakly absorbed light in a slab of index n with an ideal mirror behind it:
// 4n², for isotropic light from the whole half space. Source: E. Yablonovitch,
// J. Opt. Soc. Am. 72, 899 (1982).
//
// Special case: NaN unless n >= 1.
func PathLimit(n float64) float64 {
	if !(n >= 1) {
		return math.NaN()
	}
	return 4 * n * n
}

// PathLimitAcceptance is [PathLimit] for a slab that exchanges light only with a
// cone of the given half angle (rad) about its normal: 4n²/sin²θ (from memory).
//
// Special case: NaN unless n >= 1 and 0 < halfAngle <= π/2.
func PathLimitAcceptance(n, halfAngle float64) float64 {
	if !(halfAngle > 0 && halfAngle <= math.Pi/2) {
		return math.NaN()
	}
	sin := math.Sin(halfAngle)
	return PathLimit(n) / (sin * sin)
}

// LimitAbsorptance returns the absorptance x/(x + 1/(4n²)) of a slab of optical
// thickness x = αW with ideal faces, good for weak absorption. Source: T. Tiedje,
// E. Yablonovitch, G. D. Cody, B. G. Brooks, IEEE Trans. Electron Devices 31, 711
// (1984); formula from memory, its weak limit 4n² x exact.
//
// Special case: NaN unless x >= 0 and n >= 1.
func LimitAbsorptance(x, n float64) float64 {
	if !(x >= 0) {
		return math.NaN()
	}
	if math.IsInf(x, 1) {
		return PathLimit(n) / PathLimit(n) // 1, or NaN for a bad n
	}
	return x / (x + 1/PathLimit(n))
}

// LimitAbsorptanceSlope returns the derivative of [LimitAbsorptance] with respect
// to x: 4n²/(1 + 4n² x)².
//
// Special case: NaN unless x >= 0 and n >= 1.
func LimitAbsorptanceSlope(x, n float64) float64 {
	if !(x >= 0) {
		return math.NaN()
	}
	d := 1 + PathLimit(n)*x
	return PathLimit(n) / d / d
}

// TwoPassAbsorptance returns (1 - e)/(1 - (1-1/n²) e) with e = exp(-4x), the
// absorptance of a slab with ideal faces whose light takes a mean path of four
// thicknesses between its visits to the front. Source: H. W. Deckman, C. R.
// Wronski, H. Witzke, E. Yablonovitch, Appl. Phys. Lett. 42, 968 (1983); from
// memory, its weak limit 4n² x exact.
//
// Special case: NaN unless x >= 0 and n >= 1.
func TwoPassAbsorptance(x, n float64) float64 {
	if !(x >= 0 && n >= 1) {
		return math.NaN()
	}
	loss, e := -math.Expm1(-4*x), math.Exp(-4*x)
	return loss / (loss + e/(n*n))
}

// TwoPassAbsorptanceSlope returns the derivative of [TwoPassAbsorptance] with
// respect to x: (4/n²) e/(1 - (1-1/n²) e)².
//
// Special case: NaN unless x >= 0 and n >= 1.
func TwoPassAbsorptanceSlope(x, n float64) float64 {
	if !(x >= 0 && n >= 1) {
		return math.NaN()
	}
	e := math.Exp(-4 * x)
	d := -math.Expm1(-4*x) + e/(n*n)
	return 4 / (n * n) * e / d / d
}
