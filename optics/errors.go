package optics

import "errors"

// ErrInput is wrapped by every error about a value that no stack, wave or
// sweep can have: NaN, infinite, negative, out of its range, or a length that
// does not fit. The text names the place and the value.
var ErrInput = errors.New("invalid input")
