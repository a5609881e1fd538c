package absorb

import (
	"fmt"
	"math"
)

// AbsorptionCoefficient returns alpha = 4 pi k/lambda in 1/cm for an extinction
// coefficient k and a vacuum wavelength in nm.
//
// Special cases: NaN if k is negative or lambda is not positive, or either is
// NaN or infinite; +Inf if alpha overflows.
func AbsorptionCoefficient(k, lambda float64) float64 {
	if !amount(k) || !(lambda > 0) || math.IsInf(lambda, 1) {
		return math.NaN()
	}
	return 4 * math.Pi * k / lambda * nmPerCM
}

// ExtinctionCoefficient returns k = alpha lambda/(4 pi) for an absorption
// coefficient in 1/cm and a vacuum wavelength in nm.
//
// Special cases: NaN if alpha is negative or lambda is not positive, or either
// is NaN or infinite; +Inf if k overflows.
func ExtinctionCoefficient(alpha, lambda float64) float64 {
	if !amount(alpha) || !(lambda > 0) || math.IsInf(lambda, 1) {
		return math.NaN()
	}
	return alpha * cmPerNM * lambda / (4 * math.Pi)
}

// OpticalDepth returns alpha z, dimensionless, for an absorption coefficient in
// 1/cm and a depth in nm.
//
// Special cases: NaN if an argument is negative, NaN or infinite; +Inf if the
// product overflows.
func OpticalDepth(alpha, depth float64) float64 {
	if !amount(alpha) || !amount(depth) {
		return math.NaN()
	}
	return alpha * cmPerNM * depth
}

// Intensity returns exp(-alpha z), the share of the light entering that is left at
// the depth z: Beer-Lambert's law (A. Beer, Ann. Phys. 86, 78 (1852), from
// memory). alpha in 1/cm, depth in nm.
//
// Special cases as in [OpticalDepth], with 0 for an optical depth of +Inf.
func Intensity(alpha, depth float64) float64 {
	return math.Exp(-OpticalDepth(alpha, depth))
}

// Absorptance returns 1-exp(-alpha d), the share of the light entering that is
// absorbed in one pass, to full relative accuracy also where it is tiny. alpha in
// 1/cm, thickness in nm.
//
// Special cases as in [OpticalDepth], with 1 for an optical depth of +Inf.
func Absorptance(alpha, thickness float64) float64 {
	return -math.Expm1(-OpticalDepth(alpha, thickness))
}

// MirrorAbsorptance returns the share of the light entering that is absorbed on
// the way down and, behind a rear mirror of the given reflectance, on the way up
// again: (1-t)(1+rear t) with t = exp(-alpha d), which is 1-exp(-2 alpha d) for a
// perfect mirror. The front lets out all light that comes back; see [Slab] for
// more passes. alpha in 1/cm, thickness in nm.
//
// Special cases: NaN if rear is not in 0..1; otherwise as in [Absorptance].
func MirrorAbsorptance(alpha, thickness, rear float64) float64 {
	if !share(rear) {
		return math.NaN()
	}
	x := OpticalDepth(alpha, thickness)
	return -math.Expm1(-x) * (1 + rear*math.Exp(-x))
}

// PenetrationDepth returns 1/alpha in nm, the depth at which 1/e of the light
// entering is left. alpha in 1/cm.
//
// Special cases: +Inf for alpha = 0; NaN if alpha is negative, NaN or infinite.
func PenetrationDepth(alpha float64) float64 {
	if !amount(alpha) {
		return math.NaN()
	}
	return nmPerCM / alpha
}

// ThicknessFor returns the thickness in nm that absorbs the wanted share of the
// light entering in one pass, -ln(1-absorptance)/alpha. alpha in 1/cm.
//
// Special cases: 0 for absorptance 0; +Inf for absorptance 1, and for alpha = 0
// with an absorptance above 0; NaN if the absorptance is not in 0..1 or alpha is
// negative, NaN or infinite.
func ThicknessFor(alpha, absorptance float64) float64 {
	switch {
	case !amount(alpha) || !share(absorptance):
		return math.NaN()
	case absorptance == 0:
		return 0
	}
	return -math.Log1p(-absorptance) / alpha * nmPerCM
}

// OpticallyThick reports whether a film lets at most the share transmitted of the
// light entering reach its back face in one pass: alpha d >= -ln(transmitted).
// The criterion is the caller's; 0.01 (alpha d >= 4.6) is common practice, without
// a source. alpha in 1/cm, thickness in nm, 0 < transmitted < 1. Errors wrap
// [ErrInput].
func OpticallyThick(alpha, thickness, transmitted float64) (bool, error) {
	x := OpticalDepth(alpha, thickness)
	switch {
	case math.IsNaN(x):
		return false, fmt.Errorf("absorb: optically thick: absorption coefficient %g /cm or thickness %g nm is negative or not finite: %w", alpha, thickness, ErrInput)
	case !(transmitted > 0 && transmitted < 1):
		return false, fmt.Errorf("absorb: optically thick: transmitted share %g is not between 0 and 1: %w", transmitted, ErrInput)
	}
	return x >= -math.Log(transmitted), nil
}
