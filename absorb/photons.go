package absorb

import (
	"fmt"
	"math"
)

// TrapezoidPhotons stores in dst the photons (cm^-2 s^-1) that each wavelength of a
// grid (nm, ascending) stands for: the spectral photon flux (cm^-2 s^-1 nm^-1)
// times the weight of the trapezoid rule. It is meant for spectra given on the
// grid itself; where the spectrum has its own grid, exact weights keep its
// photons. dst is allocated when nil and must have one value per wavelength
// otherwise; it may be flux itself. Errors wrap [ErrInput].
func TrapezoidPhotons(dst, wavelength, flux []float64) ([]float64, error) {
	err := checkMesh("grid of wavelengths", wavelength)
	if err == nil {
		err = checkAmounts("photon flux", " /(cm² s nm)", flux, len(wavelength))
	}
	if err == nil {
		dst, err = resize(dst, len(wavelength))
	}
	if err != nil {
		return nil, fmt.Errorf("absorb: photons: %w", err)
	}
	last := len(wavelength) - 1
	for i, f := range flux {
		dst[i] = f * 0.5 * (wavelength[min(i+1, last)] - wavelength[max(i-1, 0)])
		if math.IsInf(dst[i], 1) {
			return nil, fmt.Errorf("absorb: photons: flux %g at %g nm overflows: %w", f, wavelength[i], ErrInput)
		}
	}
	return dst, nil
}

// GenerationCurrent returns the current density in mA/cm² that a generation rate
// (cm^-3 s^-1, mean of each cell of the mesh in nm) makes when every carrier is
// collected. Errors wrap [ErrInput].
func GenerationCurrent(mesh, rate []float64) (float64, error) {
	return CollectedCurrent(mesh, rate, Constant(1))
}

// CollectedCurrent returns the current density in mA/cm² that a generation rate
// (cm^-3 s^-1, mean of each cell of the mesh in nm) makes with a collection
// probability: the sum of rate times width times the mean probability of each
// cell, which is exact where the rate is constant in a cell. [QuantumEfficiency]
// with the profiles themselves has no such condition.
//
// Errors wrap [ErrInput], or [ErrRange] if the collection does not cover the mesh.
func CollectedCurrent(mesh, rate []float64, c Collection) (float64, error) {
	err := checkMesh("mesh", mesh)
	if err == nil {
		err = checkAmounts("generation rate", " /(cm³ s)", rate, len(mesh)-1)
	}
	if err == nil && c == nil {
		err = fmt.Errorf("no collection probability: %w", ErrInput)
	}
	if err == nil {
		err = c.Validate()
	}
	if err != nil {
		return 0, fmt.Errorf("absorb: current: %w", err)
	}
	sum := 0.0
	table, isTable := c.(Table)
	for i, g := range rate {
		var mean float64
		if isTable { // checked once is enough
			mean = table.mean(mesh[i], mesh[i+1])
		} else {
			mean = c.Mean(mesh[i], mesh[i+1])
		}
		if math.IsNaN(mean) {
			return 0, fmt.Errorf("absorb: current: cell %d, %g nm to %g nm, has no collection probability: %w", i, mesh[i], mesh[i+1], ErrRange)
		}
		sum += g * (mesh[i+1] - mesh[i]) * mean
	}
	if sum *= cmPerNM / PhotonsPerCurrent; math.IsInf(sum, 1) {
		return 0, fmt.Errorf("absorb: current: the sum over the cells overflows: %w", ErrInput)
	}
	return sum, nil
}
