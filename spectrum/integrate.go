package spectrum

import (
	"fmt"
	"math"
)

// Total returns the irradiance in W/m²: the exact integral of the piecewise
// linear spectrum.
func (s Spectrum) Total() (float64, error) {
	if err := s.Validate(); err != nil {
		return 0, err
	}
	sum := 0.0
	for i := 1; i < len(s.Wavelength); i++ {
		sum += 0.5 * (s.Irradiance[i] + s.Irradiance[i-1]) * (s.Wavelength[i] - s.Wavelength[i-1])
	}
	return sum, nil
}

// Weighting says what a share is weighed with.
type Weighting int

// Photons weighs with the photon flux, Power with the irradiance. Shares of
// light that end as carriers weigh with photons.
const (
	Photons Weighting = iota
	Power
)

// Weights stores in dst, which is allocated when nil, one weight for each
// wavelength of a grid, such that the sum of weight times share is the exact
// integral of spectrum times share for a share that is linear between the
// wavelengths: the current density in mA/cm² of one electron per photon for
// Photons, the irradiance in W/m² for Power. The integral runs over the grid's
// range, which must lie inside the spectrum.
//
// Exact means: on every cell of the union of both grids the integrand is a
// polynomial of degree three at the most, which Simpson's rule integrates
// without error.
func Weights(dst []float64, s Spectrum, wavelength []float64, weighting Weighting) ([]float64, error) {
	if err := s.Validate(); err != nil {
		return nil, err
	}
	if err := checkGrid(wavelength); err != nil {
		return nil, fmt.Errorf("spectrum: weights: %w", err)
	}
	if err := s.covers(wavelength); err != nil {
		return nil, fmt.Errorf("spectrum: weights: %w", err)
	}
	if weighting != Photons && weighting != Power {
		return nil, fmt.Errorf("spectrum: weights: unknown weighting %d: %w", int(weighting), ErrInput)
	}
	if dst == nil {
		dst = make([]float64, len(wavelength))
	}
	if len(dst) != len(wavelength) {
		return nil, fmt.Errorf("spectrum: weights: dst has %d values for %d wavelengths: %w", len(dst), len(wavelength), ErrInput)
	}
	clear(dst)
	walk := s.walk(wavelength[0])
	for i := 1; i < len(wavelength); i++ {
		lo, hi := wavelength[i-1], wavelength[i]
		for a := lo; a < hi; {
			b := min(hi, walk.next())
			mid := 0.5 * (a + b)
			ea, eb := walk.at(a), walk.at(b)
			fa, fm, fb := ea, 0.5*(ea+eb), eb
			if weighting == Photons {
				fa, fm, fb = fa*a, fm*mid, fb*b
			}
			// Hat functions of the right end at a, the middle and b.
			ra, rm, rb := (a-lo)/(hi-lo), (mid-lo)/(hi-lo), (b-lo)/(hi-lo)
			h := (b - a) / 6
			right := h * (fa*ra + 4*fm*rm + fb*rb)
			dst[i] += right
			dst[i-1] += h*(fa+4*fm+fb) - right
			a = b
			walk.pass(b)
		}
	}
	if weighting == Photons {
		for i := range dst {
			dst[i] *= currentPerIrradiance
		}
	}
	return dst, nil
}

// covers reports whether the ends of a grid lie inside the spectrum.
func (s Spectrum) covers(wavelength []float64) error {
	lo, hi := s.Wavelength[0], s.Wavelength[len(s.Wavelength)-1]
	for _, l := range [2]float64{wavelength[0], wavelength[len(wavelength)-1]} {
		if l < lo || l > hi {
			return fmt.Errorf("%g nm is outside %q, %g nm to %g nm: %w", l, s.Name, lo, hi, ErrRange)
		}
	}
	return nil
}

// walker goes along a spectrum from one of its rows to the next.
type walker struct {
	s Spectrum
	i int // the walker stands between rows i-1 and i
}

func (s Spectrum) walk(from float64) walker {
	w := walker{s, 1}
	for w.i < len(s.Wavelength)-1 && s.Wavelength[w.i] <= from {
		w.i++
	}
	return w
}

func (w *walker) next() float64 { return w.s.Wavelength[w.i] }

func (w *walker) pass(l float64) {
	if l >= w.s.Wavelength[w.i] && w.i < len(w.s.Wavelength)-1 {
		w.i++
	}
}

func (w *walker) at(l float64) float64 {
	x, y := w.s.Wavelength, w.s.Irradiance
	if l == x[w.i] {
		return y[w.i]
	}
	t := (l - x[w.i-1]) / (x[w.i] - x[w.i-1])
	return y[w.i-1] + t*(y[w.i]-y[w.i-1])
}

// Photocurrent returns the current density in mA/cm² of a share, for example an
// external quantum efficiency or an absorptance, given at ascending wavelengths
// (nm) and linear between them: e times the integral of photon flux times
// share, exact for these piecewise linear functions. The integral runs over the
// range of the wavelengths, which must lie inside the spectrum (an error that
// wraps [ErrRange] otherwise).
func Photocurrent(s Spectrum, wavelength, share []float64) (float64, error) {
	return integral(s, wavelength, share, Photons)
}

// AbsorbedPower returns the irradiance in W/m² that goes into a share; otherwise
// it is like [Photocurrent].
func AbsorbedPower(s Spectrum, wavelength, share []float64) (float64, error) {
	return integral(s, wavelength, share, Power)
}

func integral(s Spectrum, wavelength, share []float64, weighting Weighting) (float64, error) {
	w, err := Weights(nil, s, wavelength, weighting)
	if err != nil {
		return 0, err
	}
	if err := checkValues("share", share, wavelength); err != nil {
		return 0, fmt.Errorf("spectrum: %w", err)
	}
	return dot(w, share), nil
}

func dot(a, b []float64) float64 {
	sum := 0.0
	for i, v := range a {
		sum += v * b[i]
	}
	return sum
}

// Mean returns the mean of a share over the range of its wavelengths, weighed
// with photons or power: the exact integral of spectrum times share over that of
// the spectrum.
func Mean(s Spectrum, wavelength, share []float64, weighting Weighting) (float64, error) {
	w, err := Weights(nil, s, wavelength, weighting)
	if err != nil {
		return 0, err
	}
	if err := checkValues("share", share, wavelength); err != nil {
		return 0, fmt.Errorf("spectrum: %w", err)
	}
	total := 0.0
	for _, v := range w {
		total += v
	}
	if total == 0 {
		return 0, fmt.Errorf("spectrum: mean: no light between %g nm and %g nm: %w", wavelength[0], wavelength[len(wavelength)-1], ErrInput)
	}
	return dot(w, share) / total, nil
}

// MaxPhotocurrent returns the current density in mA/cm² of one electron per
// photon with at least the energy of a band gap (eV), from the short end of the
// spectrum to the wavelength of the gap, with exact ends. A gap whose wavelength
// lies outside the spectrum is an error that wraps [ErrRange].
func MaxPhotocurrent(s Spectrum, gap float64) (float64, error) {
	if err := s.Validate(); err != nil {
		return 0, err
	}
	edge := WavelengthOfEnergy / gap
	lo, hi := s.Wavelength[0], s.Wavelength[len(s.Wavelength)-1]
	if !(gap > 0) || !(edge > lo && edge <= hi) || math.IsInf(gap, 0) {
		return 0, fmt.Errorf("spectrum: band gap %g eV: its wavelength %g nm is outside %q: %w", gap, edge, s.Name, ErrRange)
	}
	return Photocurrent(s, []float64{lo, edge}, []float64{1, 1})
}
