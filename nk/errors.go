package nk

import "errors"

// Every error of this package wraps one of these, so that a caller can tell
// the causes apart with errors.Is.
var (
	// ErrInput: a value handed over is not usable (not finite, negative,
	// unsorted, a length that differs, a text that is not a number).
	ErrInput = errors.New("bad input")
	// ErrRange: a wavelength lies outside the range of a table or a formula.
	// Nothing is ever extrapolated.
	ErrRange = errors.New("out of range")
	// ErrUnknown: no material has this name, or no such figure is published
	// for it.
	ErrUnknown = errors.New("unknown")
	// ErrConvergence: an iteration ended without an answer.
	ErrConvergence = errors.New("no convergence")
)
