package spectrum

import (
	"fmt"
	"math"
	"sort"
)

// Weighting says what a share is weighed with.
type Weighting int

// Photons weighs with the photon flux: integrals are current densities in mA/cm²
// at one electron per photon. Power weighs with the irradiance: integrals are
// W/m². Light that ends as carriers weighs with photons.
const (
	Photons Weighting = iota
	Power
)

// Weights stores in dst one weight for each wavelength of a grid (nm, ascending),
// such that the sum of weight times share is the exact integral of spectrum times
// share for a share that is linear between the wavelengths: the current density
// in mA/cm² for [Photons], the irradiance in W/m² for [Power]. A weight is also
// the derivative of that integral with respect to the share at its wavelength.
// dst is allocated when nil and must have one value per wavelength otherwise.
//
// The integral runs over the range of the grid, which must lie inside the
// spectrum: otherwise the error wraps [ErrRange]. All other errors wrap
// [ErrInput].
//
// Exact means: on every cell of the union of both grids the integrand is a
// polynomial of degree three at the most, which three-point Gauss quadrature
// (exact to degree five) integrates to rounding.
func Weights(dst []float64, s Spectrum, wavelength []float64, weighting Weighting) ([]float64, error) {
	return fillWeights(dst, s, Curve{}, wavelength, weighting)
}

// ProductWeights is like [Weights] with a second factor on a grid of its own, for
// example the transmittance of a cover over a quantum efficiency: the sum of
// weight times share is the exact integral of spectrum times factor times share.
// Spectrum and factor must both cover the range of the wavelengths.
func ProductWeights(dst []float64, s Spectrum, factor Curve, wavelength []float64, weighting Weighting) ([]float64, error) {
	if err := factor.Validate(); err != nil {
		return nil, err
	}
	return fillWeights(dst, s, factor, wavelength, weighting)
}

func fillWeights(dst []float64, s Spectrum, factor Curve, wavelength []float64, weighting Weighting) ([]float64, error) {
	c, err := newCells(s, factor, wavelength, weighting)
	if err != nil {
		return nil, fmt.Errorf("spectrum: weights: %w", err)
	}
	if dst, err = resize(dst, len(wavelength)); err != nil {
		return nil, fmt.Errorf("spectrum: weights: %w", err)
	}
	clear(dst)
	for i := 1; i < len(wavelength); i++ {
		left, right := c.next(wavelength[i-1], wavelength[i])
		dst[i-1] += left
		dst[i] += right
	}
	for i, v := range dst {
		if !finite(v) {
			return nil, fmt.Errorf("spectrum: weights: the integral of %q at %g nm overflows: %w", s.Name, wavelength[i], ErrInput)
		}
	}
	return dst, nil
}

// CellIntegrals stores in dst the exact integral of the spectrum over each cell
// between neighbouring wavelengths (nm, ascending), in mA/cm² or W/m². dst is
// allocated when nil and must have one value less than there are wavelengths
// otherwise. Errors as in [Weights].
func CellIntegrals(dst []float64, s Spectrum, wavelength []float64, weighting Weighting) ([]float64, error) {
	c, err := newCells(s, Curve{}, wavelength, weighting)
	if err != nil {
		return nil, fmt.Errorf("spectrum: cell integrals: %w", err)
	}
	if dst, err = resize(dst, len(wavelength)-1); err != nil {
		return nil, fmt.Errorf("spectrum: cell integrals: %w", err)
	}
	for i := range dst {
		left, right := c.next(wavelength[i], wavelength[i+1])
		if dst[i] = left + right; !finite(dst[i]) {
			return nil, fmt.Errorf("spectrum: cell integrals: %q at %g nm overflows: %w", s.Name, wavelength[i], ErrInput)
		}
	}
	return dst, nil
}

// Cumulative stores in dst the exact integral of spectrum times share from the
// first wavelength to each wavelength, in mA/cm² or W/m²; the first value is 0,
// the last the whole integral. dst is allocated when nil and must have one value
// per wavelength otherwise; it may be the share itself. Errors as in [Weights].
func Cumulative(dst []float64, s Spectrum, wavelength, share []float64, weighting Weighting) ([]float64, error) {
	c, err := newCells(s, Curve{}, wavelength, weighting)
	if err == nil {
		err = checkValues("share", share, wavelength)
	}
	if err == nil {
		dst, err = resize(dst, len(wavelength))
	}
	if err != nil {
		return nil, fmt.Errorf("spectrum: cumulative: %w", err)
	}
	sum, before := 0.0, share[0]
	dst[0] = 0
	for i := 1; i < len(wavelength); i++ {
		left, right := c.next(wavelength[i-1], wavelength[i])
		sum += left*before + right*share[i]
		before = share[i]
		if dst[i] = sum; !finite(sum) {
			return nil, fmt.Errorf("spectrum: cumulative: the integral at %g nm overflows: %w", wavelength[i], ErrInput)
		}
	}
	return dst, nil
}

// cells walks along a spectrum and a factor, cell by cell of a third grid.
type cells struct {
	spectrum, factor line
	photons          bool
}

// newCells checks everything that an integral over the wavelengths needs. A zero
// Curve stands for a factor of 1.
func newCells(s Spectrum, factor Curve, wavelength []float64, weighting Weighting) (cells, error) {
	if err := s.Validate(); err != nil {
		return cells{}, err
	}
	if err := checkGrid(wavelength); err != nil {
		return cells{}, err
	}
	from, to := wavelength[0], wavelength[len(wavelength)-1]
	if err := checkInside(s.Name, s.Wavelength, from, to); err != nil {
		return cells{}, err
	}
	c := cells{spectrum: newLine(s.Wavelength, s.Irradiance, from), photons: weighting == Photons}
	if factor.Wavelength != nil {
		if err := checkInside(factor.Name, factor.Wavelength, from, to); err != nil {
			return cells{}, err
		}
		c.factor = newLine(factor.Wavelength, factor.Value, from)
	}
	if weighting != Photons && weighting != Power {
		return cells{}, fmt.Errorf("unknown weighting %d: %w", int(weighting), ErrInput)
	}
	return c, nil
}

// Three-point Gauss quadrature on 0..1: share of the way and weight.
const gaussOffset = 0.112701665379258311482073460022 // (1 - sqrt(3/5))/2

var gauss3 = [3][2]float64{{gaussOffset, 5.0 / 18}, {0.5, 8.0 / 18}, {1 - gaussOffset, 5.0 / 18}}

// next integrates over lo..hi, the cell that follows the one before, against
// the two hat functions that fall from 1 at lo to 0 at hi and rise from 0 to 1.
//
// All factors are straight on a piece, so they are evaluated at its ends only:
// a wavelength between them, rounded, would cost digits on narrow pieces.
func (c *cells) next(lo, hi float64) (left, right float64) {
	for a := lo; a < hi; {
		b := min(hi, c.spectrum.end(), c.factor.end())
		ea, eb := c.spectrum.at(a)*(b-a), c.spectrum.at(b)*(b-a)
		fa, fb := c.factor.at(a), c.factor.at(b)
		ta, tb := (a-lo)/(hi-lo), (b-lo)/(hi-lo)
		pa, pb := 1.0, 1.0
		if c.photons {
			pa, pb = a*currentPerIrradiance, b*currentPerIrradiance
		}
		for _, g := range gauss3 {
			u := g[0]
			f := g[1] * ((1-u)*ea + u*eb) * ((1-u)*pa + u*pb) * ((1-u)*fa + u*fb)
			t := (1-u)*ta + u*tb
			left += f * (1 - t)
			right += f * t
		}
		c.spectrum.pass(b)
		c.factor.pass(b)
		a = b
	}
	return left, right
}

// line is a piecewise linear function with a position between rows i-1 and i.
// Without rows it is 1 everywhere.
type line struct {
	x, y []float64
	i    int
}

func newLine(x, y []float64, from float64) line {
	i := sort.SearchFloat64s(x, from)
	if i < len(x)-1 && x[i] == from || i == 0 {
		i++
	}
	return line{x, y, i}
}

// end is the wavelength up to which the present straight piece goes.
func (l *line) end() float64 {
	if l.x == nil {
		return math.Inf(1)
	}
	return l.x[l.i]
}

// pass goes on to the next piece at its beginning.
func (l *line) pass(at float64) {
	if l.x != nil && at >= l.x[l.i] && l.i < len(l.x)-1 {
		l.i++
	}
}

func (l *line) at(x float64) float64 {
	if l.x == nil {
		return 1
	}
	return between(l.x[l.i-1], l.x[l.i], l.y[l.i-1], l.y[l.i], x)
}
