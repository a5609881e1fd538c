package spectrum

import (
	"errors"
	"fmt"
	"math"
)

// Every error about a user's data wraps one of these.
var (
	ErrInput   = errors.New("invalid input")        // NaN, negative, unsorted, lengths that differ, text that is no number
	ErrRange   = errors.New("outside the data")     // a wavelength that a spectrum or a share does not cover
	ErrBalance = errors.New("shares do not add up") // a ledger that does not close
	ErrSettle  = errors.New("accuracy not reached") // adaptive sampling that runs out of points
)

// checkGrid accepts two or more positive wavelengths in strictly ascending order.
func checkGrid(wavelength []float64) error {
	if len(wavelength) < 2 {
		return fmt.Errorf("%d wavelengths, want two or more: %w", len(wavelength), ErrInput)
	}
	for i, l := range wavelength {
		switch {
		case !finite(l):
			return fmt.Errorf("wavelength %d: %g nm is not finite: %w", i, l, ErrInput)
		case l <= 0:
			return fmt.Errorf("wavelength %d: %g nm is not positive: %w", i, l, ErrInput)
		case i > 0 && l <= wavelength[i-1]:
			return fmt.Errorf("wavelength %d: %g nm after %g nm is not ascending: %w", i, l, wavelength[i-1], ErrInput)
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
		if !finite(v) {
			return fmt.Errorf("%s at %g nm: %g is not finite: %w", name, wavelength[i], v, ErrInput)
		}
	}
	return nil
}

// checkInside accepts a range inside the wavelengths of a named curve.
func checkInside(name string, wavelength []float64, from, to float64) error {
	lo, hi := wavelength[0], wavelength[len(wavelength)-1]
	for _, l := range [2]float64{from, to} {
		if !(l >= lo && l <= hi) {
			return fmt.Errorf("%g nm is outside %q, %g nm to %g nm: %w", l, name, lo, hi, ErrRange)
		}
	}
	return nil
}

// resize returns dst with n values: a new slice for nil, dst itself if its
// length fits.
func resize(dst []float64, n int) ([]float64, error) {
	if dst == nil {
		return make([]float64, n), nil
	}
	if len(dst) != n {
		return nil, fmt.Errorf("dst has %d values, want %d: %w", len(dst), n, ErrInput)
	}
	return dst, nil
}

func finite(v float64) bool { return !math.IsNaN(v) && !math.IsInf(v, 0) }

// amount reports whether v is finite and not negative.
func amount(v float64) bool { return v >= 0 && !math.IsInf(v, 1) }
