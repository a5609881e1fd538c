package nk

import (
	"fmt"
	"math"
	"slices"
)

// Table is a list of optical constants over the vacuum wavelength with what is
// known about their origin. Uncertainty is nil where none is published.
type Table struct {
	Name       string // short name without spaces, as of the embedded materials
	Material   string // what the sample was
	Source     string // publication
	Conditions string // temperature, kind of film, remarks on the validity

	Wavelength  []float64 // vacuum wavelength, nm, > 0, strictly ascending
	N           []float64 // refractive index, >= 0
	K           []float64 // extinction coefficient, >= 0
	Uncertainty []float64 // relative standard uncertainty of the absorption coefficient (0.01 is 1 %), >= 0, or nil
}

// Validate returns nil if the table is usable: at least two rows, slices of one
// length, finite values in the ranges given at the fields, wavelengths strictly
// ascending. Else it returns an ErrInput that names the row and the value.
func (t Table) Validate() error {
	if len(t.Wavelength) < 2 {
		return fmt.Errorf("nk: %s: %d rows, at least 2 are needed: %w", t.label(), len(t.Wavelength), ErrInput)
	}
	if len(t.N) != len(t.Wavelength) || len(t.K) != len(t.Wavelength) {
		return fmt.Errorf("nk: %s: %d wavelengths, %d values n, %d values k: %w", t.label(), len(t.Wavelength), len(t.N), len(t.K), ErrInput)
	}
	if t.Uncertainty != nil && len(t.Uncertainty) != len(t.Wavelength) {
		return fmt.Errorf("nk: %s: %d wavelengths, %d uncertainties: %w", t.label(), len(t.Wavelength), len(t.Uncertainty), ErrInput)
	}
	for i, w := range t.Wavelength {
		what, value := "", 0.0
		switch {
		case !(w > 0) || math.IsInf(w, 1):
			what, value = "wavelength", w
		case i > 0 && w <= t.Wavelength[i-1]:
			return fmt.Errorf("nk: %s: row %d: wavelength %g nm follows %g nm: %w", t.label(), i, w, t.Wavelength[i-1], ErrInput)
		case !amount(t.N[i]):
			what, value = "n", t.N[i]
		case !amount(t.K[i]):
			what, value = "k", t.K[i]
		case t.Uncertainty != nil && !amount(t.Uncertainty[i]):
			what, value = "uncertainty", t.Uncertainty[i]
		}
		if what != "" {
			return fmt.Errorf("nk: %s: row %d: %s is %g: %w", t.label(), i, what, value, ErrInput)
		}
	}
	return nil
}

// Range returns the first and the last wavelength in nm; NaN, NaN for a table
// without rows.
func (t Table) Range() (low, high float64) {
	if len(t.Wavelength) == 0 {
		return math.NaN(), math.NaN()
	}
	return t.Wavelength[0], t.Wavelength[len(t.Wavelength)-1]
}

// clone returns a copy that shares no slice.
func (t Table) clone() Table {
	t.Wavelength, t.N, t.K = slices.Clone(t.Wavelength), slices.Clone(t.N), slices.Clone(t.K)
	t.Uncertainty = slices.Clone(t.Uncertainty)
	return t
}

// label names the table in an error.
func (t Table) label() string {
	if t.Name == "" {
		return "table"
	}
	return "table " + t.Name
}

// amount says whether x is finite and not negative.
func amount(x float64) bool { return x >= 0 && !math.IsInf(x, 1) }
