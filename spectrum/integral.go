package spectrum

import (
	"fmt"
	"math"
)

// Integrator integrates many shares that stand on the same grid under the same
// spectrum. Its zero value is ready for Prepare; afterwards nothing is
// allocated, and Prepare itself allocates only for a longer grid than before.
// One Integrator belongs to one goroutine while it is prepared; the other methods
// only read.
type Integrator struct {
	Weights []float64 // one per wavelength, see the function Weights; set by Prepare
}

// Prepare computes the weights for a spectrum, a grid (nm, ascending) and a
// weighting. Errors as in the function [Weights]; the weights are empty then.
func (in *Integrator) Prepare(s Spectrum, wavelength []float64, weighting Weighting) error {
	return in.prepare(s, Curve{}, wavelength, weighting)
}

// PrepareProduct computes the weights of [ProductWeights], so that the integrals
// are those of spectrum times factor times share.
func (in *Integrator) PrepareProduct(s Spectrum, factor Curve, wavelength []float64, weighting Weighting) error {
	in.Weights = in.Weights[:0]
	if err := factor.Validate(); err != nil {
		return err
	}
	return in.prepare(s, factor, wavelength, weighting)
}

func (in *Integrator) prepare(s Spectrum, factor Curve, wavelength []float64, weighting Weighting) error {
	w := in.Weights[:0]
	in.Weights = w
	if n := len(wavelength); n <= cap(w) && n > 0 {
		w = w[:n]
	} else {
		w = make([]float64, n)
	}
	w, err := fillWeights(w, s, factor, wavelength, weighting)
	if err == nil {
		in.Weights = w
	}
	return err
}

// Integral returns the integral of spectrum times share in mA/cm² or W/m². The
// share has one finite value for each wavelength of Prepare; anything else is an
// error that wraps [ErrInput].
func (in *Integrator) Integral(share []float64) (float64, error) {
	if len(in.Weights) == 0 || len(share) != len(in.Weights) {
		return 0, fmt.Errorf("spectrum: integral: %d shares for %d prepared weights: %w", len(share), len(in.Weights), ErrInput)
	}
	v := dot(in.Weights, share)
	if finite(v) {
		return v, nil
	}
	for i, x := range share {
		if !finite(x) {
			return 0, fmt.Errorf("spectrum: integral: share %d: %g is not finite: %w", i, x, ErrInput)
		}
	}
	return 0, fmt.Errorf("spectrum: integral: overflow: %w", ErrInput)
}

// Mean returns the mean of a share over the grid, weighed with the spectrum: the
// integral of spectrum times share over that of the spectrum. Without light
// there is none, which is an error that wraps [ErrInput].
func (in *Integrator) Mean(share []float64) (float64, error) {
	v, err := in.Integral(share)
	if err != nil {
		return 0, err
	}
	total := 0.0
	for _, w := range in.Weights {
		total += w
	}
	if v /= total; total == 0 || !finite(v) {
		return 0, fmt.Errorf("spectrum: mean: the spectrum holds no light in the range of the share: %w", ErrInput)
	}
	return v, nil
}

func dot(a, b []float64) float64 {
	sum := 0.0
	for i, v := range a {
		sum += v * b[i]
	}
	return sum
}

// Photocurrent returns the current density in mA/cm² of a share, for example an
// external quantum efficiency or an absorptance, given at ascending wavelengths
// (nm) and linear between them: e times the integral of photon flux times
// share, exact for these piecewise linear functions. Shares are 0..1, never
// percent; any finite value is accepted, so that noise around 0 or a difference of
// two shares can be integrated.
//
// The integral runs over the range of the wavelengths, which must lie inside the
// spectrum (an error that wraps [ErrRange] otherwise): outside its grid a share is
// not known, and nothing is cut off in silence.
func Photocurrent(s Spectrum, wavelength, share []float64) (float64, error) {
	var in Integrator
	if err := in.Prepare(s, wavelength, Photons); err != nil {
		return 0, err
	}
	return in.Integral(share)
}

// AbsorbedPower returns the irradiance in W/m² that goes into a share; otherwise
// it is like [Photocurrent].
func AbsorbedPower(s Spectrum, wavelength, share []float64) (float64, error) {
	var in Integrator
	if err := in.Prepare(s, wavelength, Power); err != nil {
		return 0, err
	}
	return in.Integral(share)
}

// Product returns the exact integral of spectrum times share times factor in
// mA/cm² or W/m², each linear on its own grid. The integral runs over the range of
// the share; spectrum and factor must cover it (an error that wraps [ErrRange]
// otherwise).
func Product(s Spectrum, share, factor Curve, weighting Weighting) (float64, error) {
	if err := share.Validate(); err != nil {
		return 0, err
	}
	var in Integrator
	if err := in.PrepareProduct(s, factor, share.Wavelength, weighting); err != nil {
		return 0, err
	}
	return in.Integral(share.Value)
}

// Mean returns the mean of a share over the range of its wavelengths, weighed
// with photons or power: the exact integral of spectrum times share over that of
// the spectrum. Errors as in [Photocurrent], and where the spectrum holds no light.
func Mean(s Spectrum, wavelength, share []float64, weighting Weighting) (float64, error) {
	var in Integrator
	if err := in.Prepare(s, wavelength, weighting); err != nil {
		return 0, err
	}
	return in.Mean(share)
}

// Mismatch returns the spectral mismatch factor of IEC 60904-7,
//
//	∫E_ref S_ref · ∫E_meas S_test / (∫E_meas S_ref · ∫E_ref S_test)
//
// by which the short-circuit current of a device under test, measured under the
// spectrum measured against a reference device, must be divided to get that under
// the reference spectrum. The responses stand on their own grids, inside
// both spectra, and each integral runs over the grid of its response: a
// responsivity in A/W (any scale) weighs with [Power], a quantum efficiency with
// [Photons].
//
// Errors wrap [ErrInput] and [ErrRange]; a vanishing or negative integral, which
// leaves the factor undefined, wraps [ErrInput].
func Mismatch(reference, measured Spectrum, referenceDevice, testDevice Curve, weighting Weighting) (float64, error) {
	var current [2][2]float64 // spectrum, device
	for i, s := range [2]Spectrum{reference, measured} {
		for j, c := range [2]Curve{referenceDevice, testDevice} {
			if err := c.Validate(); err != nil {
				return 0, err
			}
			var in Integrator
			if err := in.Prepare(s, c.Wavelength, weighting); err != nil {
				return 0, err
			}
			v, err := in.Integral(c.Value)
			if err != nil {
				return 0, err
			}
			if !(v > 0) {
				return 0, fmt.Errorf("spectrum: mismatch: the response of %q to %q is %g, not positive: %w", c.Name, s.Name, v, ErrInput)
			}
			current[i][j] = v
		}
	}
	f := current[0][0] / current[1][0] * (current[1][1] / current[0][1])
	if !finite(f) {
		return 0, fmt.Errorf("spectrum: mismatch: overflow: %w", ErrInput)
	}
	return f, nil
}

// Responsivity returns the spectral responsivity in A/W of an external quantum
// efficiency at a wavelength (nm): EQE e λ/(hc), IEC 60904-8.
//
// Special case: NaN unless the wavelength is positive and finite.
func Responsivity(wavelength, efficiency float64) float64 {
	if !(wavelength > 0) || math.IsInf(wavelength, 1) {
		return math.NaN()
	}
	return efficiency * (wavelength / WavelengthOfEnergy)
}

// QuantumEfficiency returns the external quantum efficiency of a spectral
// responsivity in A/W at a wavelength (nm), the inverse of [Responsivity].
//
// Special case: NaN unless the wavelength is positive and finite.
func QuantumEfficiency(wavelength, responsivity float64) float64 {
	if !(wavelength > 0) || math.IsInf(wavelength, 1) {
		return math.NaN()
	}
	return responsivity * (WavelengthOfEnergy / wavelength)
}
