package nk

import "math"

// nmPerCM is the number of nm in one cm: alpha in 1/nm times nmPerCM is alpha
// in 1/cm.
const nmPerCM = 1e7

// AbsorptionCoefficient returns the absorption coefficient alpha = 4 pi k/lambda
// in 1/cm for an extinction coefficient k and a vacuum wavelength in nm
// (M. Born and E. Wolf, Principles of Optics, section on metals; from memory).
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
	return alpha / nmPerCM * lambda / (4 * math.Pi)
}
