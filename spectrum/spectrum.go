package spectrum

import (
	"fmt"
	"sort"
)

// Spectrum is a spectral irradiance, linear between its wavelengths and not
// known outside them. The zero value is no spectrum: [Spectrum.Validate] says so.
type Spectrum struct {
	Name, Source string
	Wavelength   []float64 // nm, > 0, strictly ascending, two or more
	Irradiance   []float64 // W m^-2 nm^-1, >= 0, one per wavelength
}

// Curve is a dimensionless or spectral quantity on a grid of its own, linear
// between its wavelengths and not known outside them: a share, a quantum
// efficiency, a responsivity.
type Curve struct {
	Name       string    // for errors
	Wavelength []float64 // nm, > 0, strictly ascending, two or more
	Value      []float64 // finite, one per wavelength
}

// Validate reports the first value that a spectrum cannot have. Errors wrap
// [ErrInput].
func (s Spectrum) Validate() error {
	if err := checkGrid(s.Wavelength); err != nil {
		return fmt.Errorf("spectrum: %q: %w", s.Name, err)
	}
	if err := checkValues("irradiance", s.Irradiance, s.Wavelength); err != nil {
		return fmt.Errorf("spectrum: %q: %w", s.Name, err)
	}
	for i, e := range s.Irradiance {
		if e < 0 {
			return fmt.Errorf("spectrum: %q: irradiance at %g nm: %g is negative: %w", s.Name, s.Wavelength[i], e, ErrInput)
		}
	}
	return nil
}

// Validate reports the first value that a curve cannot have. Errors wrap
// [ErrInput].
func (c Curve) Validate() error {
	if err := checkGrid(c.Wavelength); err != nil {
		return fmt.Errorf("spectrum: %q: %w", c.Name, err)
	}
	if err := checkValues("value", c.Value, c.Wavelength); err != nil {
		return fmt.Errorf("spectrum: %q: %w", c.Name, err)
	}
	return nil
}

// At returns the irradiance (W m^-2 nm^-1) at a wavelength (nm), linear between
// the two neighbours. A wavelength outside the spectrum is an error that wraps
// [ErrRange]. Each call validates the spectrum: for many wavelengths take
// [Spectrum.Values].
func (s Spectrum) At(wavelength float64) (float64, error) {
	if err := s.Validate(); err != nil {
		return 0, err
	}
	if err := checkInside(s.Name, s.Wavelength, wavelength, wavelength); err != nil {
		return 0, fmt.Errorf("spectrum: %w", err)
	}
	return interpolate(s.Wavelength, s.Irradiance, wavelength), nil
}

// Values stores the irradiance (W m^-2 nm^-1) at each wavelength (nm, any order)
// in dst, which is allocated when nil and must have one value per wavelength
// otherwise, and returns it. Errors as in [Spectrum.At].
func (s Spectrum) Values(dst, wavelength []float64) ([]float64, error) {
	if err := s.Validate(); err != nil {
		return nil, err
	}
	dst, err := resize(dst, len(wavelength))
	if err != nil {
		return nil, fmt.Errorf("spectrum: values: %w", err)
	}
	for i, l := range wavelength {
		if err := checkInside(s.Name, s.Wavelength, l, l); err != nil {
			return nil, fmt.Errorf("spectrum: %w", err)
		}
		dst[i] = interpolate(s.Wavelength, s.Irradiance, l)
	}
	return dst, nil
}

// interpolate evaluates the piecewise linear function through (x, y); the place
// must lie inside.
func interpolate(x, y []float64, at float64) float64 {
	i := sort.SearchFloat64s(x, at)
	if x[i] == at {
		return y[i]
	}
	return between(x[i-1], x[i], y[i-1], y[i], at)
}

// between is the straight line from (x0, y0) to (x1, y1) at a place in between.
// It never leaves the range of y0 and y1 by more than rounding.
func between(x0, x1, y0, y1, at float64) float64 {
	t := (at - x0) / (x1 - x0)
	return (1-t)*y0 + t*y1
}

// PhotonFlux stores the spectral photon flux E λ/(hc) in cm^-2 s^-1 nm^-1 at the
// wavelengths of the spectrum in dst, which is allocated when nil and must have
// one value per wavelength otherwise, and returns it. Errors wrap [ErrInput].
func (s Spectrum) PhotonFlux(dst []float64) ([]float64, error) {
	if err := s.Validate(); err != nil {
		return nil, err
	}
	dst, err := resize(dst, len(s.Wavelength))
	if err != nil {
		return nil, fmt.Errorf("spectrum: photon flux: %w", err)
	}
	for i, l := range s.Wavelength {
		dst[i] = photonsPerIrradiance * s.Irradiance[i] * l
		if !finite(dst[i]) {
			return nil, fmt.Errorf("spectrum: photon flux of %q at %g nm overflows: %w", s.Name, l, ErrInput)
		}
	}
	return dst, nil
}

// Total returns the irradiance in W/m²: the exact integral of the piecewise
// linear spectrum. Errors wrap [ErrInput].
func (s Spectrum) Total() (float64, error) {
	if err := s.Validate(); err != nil {
		return 0, err
	}
	sum := 0.0
	for i := 1; i < len(s.Wavelength); i++ {
		sum += (0.5*s.Irradiance[i] + 0.5*s.Irradiance[i-1]) * (s.Wavelength[i] - s.Wavelength[i-1])
	}
	if !finite(sum) {
		return 0, fmt.Errorf("spectrum: irradiance of %q overflows: %w", s.Name, ErrInput)
	}
	return sum, nil
}

// PhotonTotal returns the photon flux in cm^-2 s^-1 of the whole spectrum: the
// exact integral of E λ/(hc). Errors wrap [ErrInput].
func (s Spectrum) PhotonTotal() (float64, error) {
	if err := s.Validate(); err != nil {
		return 0, err
	}
	ends := []float64{s.Wavelength[0], s.Wavelength[len(s.Wavelength)-1]}
	j, err := Photocurrent(s, ends, []float64{1, 1})
	return j / (charge * milliPerOne), err
}
