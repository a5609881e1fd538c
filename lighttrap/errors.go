package lighttrap

import (
	"errors"
	"fmt"
	"math"
)

// ErrInput is wrapped by every error about a value that a slab, a texture, a
// grid or a source of light cannot have; the text names the place and the value.
var ErrInput = errors.New("invalid input")

// checkShare accepts 0..1.
func checkShare(name string, v float64) error {
	if !(v >= 0 && v <= 1) {
		return fmt.Errorf("lighttrap: %s %g is not between 0 and 1: %w", name, v, ErrInput)
	}
	return nil
}

// checkAmount accepts finite numbers >= 0.
func checkAmount(name, unit string, v float64) error {
	if !(v >= 0) || math.IsInf(v, 1) {
		return fmt.Errorf("lighttrap: %s %g%s is negative or not finite: %w", name, v, unit, ErrInput)
	}
	return nil
}
