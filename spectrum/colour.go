package spectrum

import (
	_ "embed"
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"
)

// The colour matching functions of the CIE 1931 standard observer and the
// illuminant D65, 380 nm to 780 nm in steps of 5 nm.
//
//go:embed data/cie1931_d65.csv
var cie1931 string

// Tristimulus is a colour in the CIE 1931 system (2 degrees). Y is 100 for a
// perfect white, as in CIE 15.
type Tristimulus struct{ X, Y, Z float64 }

// Colorimeter turns reflectances on one grid into the colours of a surface under
// daylight (CIE standard illuminant D65, seen by the CIE 1931 observer). Its zero
// value is ready for Prepare; afterwards nothing is allocated. One Colorimeter
// belongs to one goroutine while it is prepared.
//
// CIE 15 replaces the integral by the sum over steps of 5 nm. Here the product of
// illuminant and colour matching function is linear between those steps, and the
// reflectance linear on the user's grid: for that the integral is exact, and for
// a constant reflectance it is the sum of CIE 15. The tables were typed from
// memory; their sums, the chromaticity of the illuminant and a published fit of
// the functions confirm them (see the tests).
type Colorimeter struct {
	X, Y, Z []float64 // weights of the reflectance at each wavelength; set by Prepare
}

// Prepare computes the weights for wavelengths (nm, ascending) that cover 380 nm
// to 780 nm: an error that wraps [ErrRange] otherwise, [ErrInput] for a bad grid.
func (c *Colorimeter) Prepare(wavelength []float64) error {
	w := [3][]float64{c.X, c.Y, c.Z}
	c.X, c.Y, c.Z = nil, nil, nil
	if err := checkGrid(wavelength); err != nil {
		return fmt.Errorf("spectrum: colour: %w", err)
	}
	observer, illuminant := colourTables()
	lo, hi := observer[0], observer[len(observer)-1]
	if err := checkInside("reflectance", wavelength, lo, hi); err != nil {
		return fmt.Errorf("spectrum: colour: %w", err)
	}
	inner := []float64{lo}
	for _, l := range wavelength {
		if l > lo && l < hi {
			inner = append(inner, l)
		}
	}
	inner = append(inner, hi)
	step := observer[1] - observer[0]
	scale := 0.0 // so that white has Y = 100
	for _, v := range illuminant[1] {
		scale += v * step / 100
	}
	for j := range w {
		s := Spectrum{Name: "D65 times colour matching function", Wavelength: observer, Irradiance: illuminant[j]}
		v, err := Weights(nil, s, inner, Power)
		if err != nil {
			return err
		}
		// The sum of CIE 15 counts the first and last step whole.
		v[0] += 0.5 * step * illuminant[j][0]
		v[len(v)-1] += 0.5 * step * illuminant[j][len(observer)-1]
		w[j] = fit(w[j], len(wavelength))
		clear(w[j])
		for i, l := range inner {
			spread(w[j], wavelength, l, v[i]/scale)
		}
	}
	c.X, c.Y, c.Z = w[0], w[1], w[2]
	return nil
}

// spread adds the weight of a place to the two grid points around it, as linear
// interpolation shares it.
func spread(dst, grid []float64, at, weight float64) {
	i, exact := slices.BinarySearch(grid, at)
	if exact {
		dst[i] += weight
		return
	}
	t := (at - grid[i-1]) / (grid[i] - grid[i-1])
	dst[i-1] += (1 - t) * weight
	dst[i] += t * weight
}

// colourTables returns the wavelengths and the products of illuminant and colour
// matching functions. The table is part of the program: a row that cannot be read
// is a bug.
func colourTables() (wavelength []float64, product [3][]float64) {
	for line := range strings.Lines(cie1931) {
		if line[0] == '#' || line[0] == 'w' {
			continue
		}
		var v [5]float64
		for i, field := range strings.Split(strings.TrimSpace(line), ",") {
			var err error
			if v[i], err = strconv.ParseFloat(field, 64); err != nil {
				panic("spectrum: embedded colour table: bad row " + line)
			}
		}
		wavelength = append(wavelength, v[0])
		for j := range product {
			product[j] = append(product[j], v[1+j]*v[4])
		}
	}
	return wavelength, product
}

// Colour returns the colour of a reflectance (0..1, one value for each wavelength
// of Prepare, linear in between). Errors wrap [ErrInput].
func (c *Colorimeter) Colour(reflectance []float64) (Tristimulus, error) {
	if len(c.X) == 0 || len(reflectance) != len(c.X) {
		return Tristimulus{}, fmt.Errorf("spectrum: colour: %d reflectances for %d prepared weights: %w", len(reflectance), len(c.X), ErrInput)
	}
	for i, r := range reflectance {
		if !(r >= -shareRounding && r <= 1+shareRounding) {
			return Tristimulus{}, fmt.Errorf("spectrum: colour: reflectance %d: %g is not between 0 and 1: %w", i, r, ErrInput)
		}
	}
	return Tristimulus{dot(c.X, reflectance), dot(c.Y, reflectance), dot(c.Z, reflectance)}, nil
}

// Colour returns the colour of a surface with a reflectance (0..1) at ascending
// wavelengths (nm) that cover 380 nm to 780 nm, under D65 for the CIE 1931
// observer; see [Colorimeter], which it uses once. Errors wrap [ErrInput] and
// [ErrRange].
func Colour(wavelength, reflectance []float64) (Tristimulus, error) {
	var c Colorimeter
	if err := c.Prepare(wavelength); err != nil {
		return Tristimulus{}, err
	}
	return c.Colour(reflectance)
}

// Chromaticity returns x = X/(X+Y+Z) and y = Y/(X+Y+Z).
//
// Special case: NaN for black.
func (t Tristimulus) Chromaticity() (x, y float64) {
	sum := t.X + t.Y + t.Z
	return t.X / sum, t.Y / sum
}

// SRGB returns the display values 0..1 of the colour for a screen whose white is
// D65 with Y = 100, by IEC 61966-2-1 (coefficients from memory). Colours that a
// screen cannot show are moved to its limits, and inside is false then.
func (t Tristimulus) SRGB() (rgb [3]float64, inside bool) {
	x, y, z := t.X/100, t.Y/100, t.Z/100
	inside = true
	for i, m := range [3][3]float64{
		{3.2406, -1.5372, -0.4986},
		{-0.9689, 1.8758, 0.0415},
		{0.0557, -0.2040, 1.0570},
	} {
		v := m[0]*x + m[1]*y + m[2]*z
		// White misses 1 by the rounding of the published coefficients.
		inside = inside && v >= -srgbRounding && v <= 1+srgbRounding
		switch v = min(max(v, 0), 1); {
		case v <= 0.0031308:
			rgb[i] = 12.92 * v
		default:
			rgb[i] = 1.055*math.Pow(v, 1/2.4) - 0.055
		}
	}
	return rgb, inside
}

const srgbRounding = 1e-3
