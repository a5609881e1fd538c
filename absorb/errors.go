package absorb

import (
	"errors"
	"fmt"
	"math"
)

// Every error about a user's data wraps one of these.
var (
	ErrInput = errors.New("invalid input")              // NaN, infinite, negative, not ascending, lengths that differ
	ErrRange = errors.New("outside the data")           // a depth that a film, a histogram or a collection probability does not cover
	ErrFit   = errors.New("not determined by the data") // a regression without a meaningful result
)

// roundingOfDepth is the part of a thickness by which a depth may miss it: a mesh
// made by repeated addition need not end on the last bit.
const roundingOfDepth = 1e-12

// reach bounds lengths in nm and ratios of lengths where products of three of them
// must not overflow.
const reach = 1e100

// checkMesh accepts two or more cell boundaries, not negative and in strictly
// ascending order.
func checkMesh(name string, mesh []float64) error {
	if len(mesh) < 2 {
		return fmt.Errorf("%s has %d boundaries, want two or more: %w", name, len(mesh), ErrInput)
	}
	for i, z := range mesh {
		switch {
		case !amount(z):
			return fmt.Errorf("%s: boundary %d: %g nm is negative or not finite: %w", name, i, z, ErrInput)
		case i > 0 && z <= mesh[i-1]:
			return fmt.Errorf("%s: boundary %d: %g nm after %g nm is not ascending: %w", name, i, z, mesh[i-1], ErrInput)
		}
	}
	return nil
}

// inside reports whether a depth lies in 0..end, but for rounding.
func inside(z, end float64) bool { return z >= 0 && z <= end*(1+roundingOfDepth) }

// checkInside accepts a last boundary inside a film or table that ends at the
// given depth, but for rounding.
func checkInside(name string, last, end float64) error {
	if !inside(last, end) {
		return fmt.Errorf("mesh ends at %g nm, %s at %g nm: %w", last, name, end, ErrRange)
	}
	return nil
}

// checkAmounts accepts finite values that are not negative, n of them.
func checkAmounts(name, unit string, values []float64, n int) error {
	if len(values) != n {
		return fmt.Errorf("%d values of %s, want %d: %w", len(values), name, n, ErrInput)
	}
	for i, v := range values {
		if err := checkAmount(name, unit, v); err != nil {
			return fmt.Errorf("value %d: %w", i, err)
		}
	}
	return nil
}

func checkAmount(name, unit string, v float64) error {
	if !amount(v) {
		return fmt.Errorf("%s %g%s is negative or not finite: %w", name, v, unit, ErrInput)
	}
	return nil
}

func checkPositive(name, unit string, v float64) error {
	if !(v > 0) || math.IsInf(v, 1) {
		return fmt.Errorf("%s %g%s is not positive and finite: %w", name, v, unit, ErrInput)
	}
	return nil
}

func checkShare(name string, v float64) error {
	if !share(v) {
		return fmt.Errorf("%s %g is not in 0..1: %w", name, v, ErrInput)
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

func share(v float64) bool { return v >= 0 && v <= 1 }
