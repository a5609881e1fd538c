package spectrum

import (
	"errors"
	"fmt"
	"math"
)

// Every error about a user's data wraps one of these.
var (
	ErrInput   = errors.New("invalid input")        // NaN, negative, unsorted, lengths that differ
	ErrRange   = errors.New("outside the data")     // a wavelength that a spectrum or a share does not cover
	ErrBalance = errors.New("shares do not add up") // a ledger that does not close
	ErrSettle  = errors.New("accuracy not reached") // adaptive sampling that runs out of points
	errFinite  = fmt.Errorf("not finite: %w", ErrInput)
	errOrder   = fmt.Errorf("not ascending: %w", ErrInput)
)

// checkGrid accepts two or more finite wavelengths in strictly ascending order.
func checkGrid(wavelength []float64) error {
	if len(wavelength) < 2 {
		return fmt.Errorf("%d wavelengths, want two or more: %w", len(wavelength), ErrInput)
	}
	for i, l := range wavelength {
		switch {
		case math.IsNaN(l) || math.IsInf(l, 0):
			return fmt.Errorf("wavelength %d: %g nm is %w", i, l, errFinite)
		case l <= 0:
			return fmt.Errorf("wavelength %d: %g nm is not positive: %w", i, l, ErrInput)
		case i > 0 && l <= wavelength[i-1]:
			return fmt.Errorf("wavelength %d: %g nm after %g nm is %w", i, l, wavelength[i-1], errOrder)
		}
	}
	return nil
}

// checkValues accepts finite values, one per wavelength.
func checkValues(name string, values, wavelength []float64) error {
	if len(values) != len(wavelength) {
		return fmt.Errorf("%s has %d values for %d wavelengths: %w", name, len(values), len(wavelength), ErrInput)
	}
	for i, v := range values {
		if math.IsNaN(v) || math.IsInf(v, 0) {
			return fmt.Errorf("%s at %g nm: %g is %w", name, wavelength[i], v, errFinite)
		}
	}
	return nil
}
