package spectrum

import (
	"fmt"
	"math"
)

// Planck returns the irradiance of a black body that fills the solid angle of a
// cone about the normal, at the given wavelengths (nm, ascending): π sin²θ times
// the radiance. halfAngle (rad, 0 < θ <= π/2) is θ; π/2 gives the exitance of the
// surface itself, 0.00465 about the sun as seen from the earth. The temperature
// is in K. Between the wavelengths the result is linear, so the grid must resolve
// the curve. Errors wrap [ErrInput]. Source: M. Planck, Ann. Phys. 309, 553
// (1901).
func Planck(wavelength []float64, temperature, halfAngle float64) (Spectrum, error) {
	if !(temperature > 0) || math.IsInf(temperature, 1) {
		return Spectrum{}, fmt.Errorf("spectrum: Planck: temperature %g K is not positive and finite: %w", temperature, ErrInput)
	}
	if !(halfAngle > 0 && halfAngle <= math.Pi/2) {
		return Spectrum{}, fmt.Errorf("spectrum: Planck: half angle %g rad is not in (0, π/2]: %w", halfAngle, ErrInput)
	}
	if err := checkGrid(wavelength); err != nil {
		return Spectrum{}, fmt.Errorf("spectrum: Planck: %w", err)
	}
	s := Spectrum{
		Name:       fmt.Sprintf("black body, %g K", temperature),
		Source:     "Planck's law",
		Wavelength: append([]float64(nil), wavelength...),
		Irradiance: make([]float64, len(wavelength)),
	}
	sin := math.Sin(halfAngle)
	for i, l := range wavelength {
		s.Irradiance[i] = math.Pi * sin * sin * Radiance(l, temperature)
		if !finite(s.Irradiance[i]) {
			return Spectrum{}, fmt.Errorf("spectrum: Planck: %g K at %g nm overflows: %w", temperature, l, ErrInput)
		}
	}
	return s, nil
}

// Radiance returns the spectral radiance of a black body (W m^-2 sr^-1 nm^-1) at
// a wavelength (nm) and temperature (K): 2hc²/λ⁵/(exp(hc/λkT) - 1), Planck's law.
//
// Special cases: NaN unless both are positive and finite; +Inf where the
// radiance overflows.
func Radiance(wavelength, temperature float64) float64 {
	if !(wavelength > 0 && temperature > 0) || math.IsInf(wavelength, 1) || math.IsInf(temperature, 1) {
		return math.NaN()
	}
	// Written as the Rayleigh-Jeans law times x/(exp(x) - 1), which neither
	// underflows nor cancels at long wavelengths.
	l := wavelength * metrePerNM
	x := planck * light / boltzmann / l / temperature
	rayleighJeans := 2 * light * boltzmann * temperature / (l * l) / (l * l) * metrePerNM
	switch {
	case x > 700: // below 1e-300 of the Rayleigh-Jeans law
		return 0
	case x == 0:
		return rayleighJeans
	}
	return rayleighJeans * (x / math.Expm1(x))
}
