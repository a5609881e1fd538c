package nk

import (
	"fmt"
	"math"
	"math/cmplx"

	"gonum.org/v1/gonum/unit/constant"
)

const (
	// nmEV is the wavelength in nm of a photon of 1 eV, hc/e: E = nmEV/lambda.
	nmEV = nmPerM * float64(constant.Planck) * float64(constant.LightSpeedInVacuum) / float64(constant.ElementaryCharge)

	nmPerM  = 1e9
	nmPerUM = 1e3
)

// Model is a dispersion model: a closed formula for the optical constants over
// the wavelength, with a few parameters. Every model of this package is a plain
// struct with the parameters as exported fields, and its pointer is a Model.
//
// Wavelengths are vacuum wavelengths in nm. All methods return ErrInput for a
// wavelength or a parameter that is not finite or makes no sense, naming it, and
// ErrRange where the formula has no finite value with n >= 0 and k >= 0.
// Reading methods change nothing, so one model may serve many goroutines as
// long as nobody sets its parameters.
type Model interface {
	// Permittivity returns the relative permittivity eps = (n + ik)². If grad
	// is not nil its length must be NumParameters, and it receives the
	// derivatives of eps with respect to every parameter.
	Permittivity(grad []complex128, lambda float64) (complex128, error)
	// Index returns N = n + ik, n >= 0, k >= 0.
	Index(lambda float64) (complex128, error)
	// Gradient stores the derivatives of N with respect to every parameter in
	// dst and returns dst and N. A nil dst is allocated, else its length must
	// be NumParameters.
	Gradient(dst []complex128, lambda float64) (grad []complex128, n complex128, err error)
	// NumParameters returns the number of parameters.
	NumParameters() int
	// Parameters returns the parameters in the order of the gradient.
	Parameters() []Parameter
	// SetParameters sets all parameters in the order of the gradient. If it
	// returns an error (ErrInput) the model is as it was.
	SetParameters(values []float64) error
}

// Parameter is one parameter of a Model.
type Parameter struct {
	Name  string  // name of the struct's field, with an index where it is a slice
	Unit  string  // "1" if dimensionless
	Value float64 // in Unit
}

// Evaluate stores the index of a model at each wavelength (nm) in dst and
// returns dst. A nil dst is allocated, else its length must be that of lambda
// (ErrInput). An error names the position of the wavelength.
func Evaluate(dst []complex128, m Model, lambda []float64) ([]complex128, error) {
	if dst == nil {
		dst = make([]complex128, len(lambda))
	}
	if len(dst) != len(lambda) {
		return dst, fmt.Errorf("nk: evaluate: %d places for %d wavelengths: %w", len(dst), len(lambda), ErrInput)
	}
	for i, l := range lambda {
		n, err := m.Index(l)
		if err != nil {
			return dst, fmt.Errorf("nk: evaluate: wavelength %d: %w", i, err)
		}
		dst[i] = n
	}
	return dst, nil
}

// photonEnergy returns the photon energy in eV at a vacuum wavelength in nm.
func photonEnergy(lambda float64) (float64, error) {
	e := nmEV / lambda
	if !(lambda > 0) || math.IsInf(lambda, 1) || math.IsInf(e, 1) || e == 0 {
		return 0, fmt.Errorf("nk: wavelength %g nm: %w", lambda, ErrInput)
	}
	return e, nil
}

// checkGrad tests the length of a slice that receives n derivatives.
func checkGrad(grad []complex128, n int) error {
	if grad != nil && len(grad) != n {
		return fmt.Errorf("nk: %d places for the derivatives with respect to %d parameters: %w", len(grad), n, ErrInput)
	}
	return nil
}

// checkSet tests a vector of parameter values before it is stored.
func checkSet(model string, values []float64, n int) error {
	if len(values) != n {
		return fmt.Errorf("nk: %s: %d values for %d parameters: %w", model, len(values), n, ErrInput)
	}
	return nil
}

// limit is the range allowed for one parameter.
type limit struct {
	name    string
	value   float64
	above   float64 // smallest value allowed
	exclude bool    // above itself is not allowed
}

// checkLimits tests parameters: finite and not below their limit.
func checkLimits(model string, limits ...limit) error {
	for _, l := range limits {
		if math.IsNaN(l.value) || math.IsInf(l.value, 0) || l.value < l.above || l.exclude && l.value == l.above {
			return fmt.Errorf("nk: %s: parameter %s is %g: %w", model, l.name, l.value, ErrInput)
		}
	}
	return nil
}

// anyReal is the limit of a parameter that may have any finite value.
const anyReal = -math.MaxFloat64

func finite(z complex128) bool { return !cmplx.IsNaN(z) && !cmplx.IsInf(z) }

// settle is the common end of every evaluation: eps and its derivatives are
// finite and eps2 >= 0, or there is an error.
func settle(model string, grad []complex128, eps complex128, lambda float64) (complex128, error) {
	if !finite(eps) || imag(eps) < 0 {
		return 0, fmt.Errorf("nk: %s: permittivity %g at %g nm: %w", model, eps, lambda, ErrRange)
	}
	for j, g := range grad {
		if !finite(g) {
			return 0, fmt.Errorf("nk: %s: derivative %g of the permittivity with respect to parameter %d at %g nm: %w", model, g, j, lambda, ErrRange)
		}
	}
	if imag(eps) == 0 {
		eps = complex(real(eps), 0) // a negative zero would turn the root over
	}
	return eps, nil
}

// indexOf is Index for the models that are formulas of the permittivity.
func indexOf(m Model, lambda float64) (complex128, error) {
	eps, err := m.Permittivity(nil, lambda)
	if err != nil {
		return 0, err
	}
	return cmplx.Sqrt(eps), nil
}

// gradientOf is Gradient for the models that are formulas of the permittivity:
// dN = d eps/(2N).
func gradientOf(m Model, dst []complex128, lambda float64) ([]complex128, complex128, error) {
	if dst == nil {
		dst = make([]complex128, m.NumParameters())
	}
	eps, err := m.Permittivity(dst, lambda)
	if err != nil {
		return dst, 0, err
	}
	n := cmplx.Sqrt(eps)
	for j := range dst {
		if dst[j] == 0 {
			continue
		}
		if dst[j] /= 2 * n; !finite(dst[j]) {
			return dst, 0, fmt.Errorf("nk: derivative of the index %g at %g nm is not finite: %w", n, lambda, ErrRange)
		}
	}
	return dst, n, nil
}

// squared turns an index and its derivatives into a permittivity, for the
// models that are formulas of the index.
func squared(model string, grad []complex128, n complex128, lambda float64) (complex128, error) {
	for j := range grad {
		grad[j] *= 2 * n
	}
	return settle(model, grad, n*n, lambda)
}

// settleIndex is the common end of the models that are formulas of the index.
func settleIndex(model string, grad []complex128, n complex128, lambda float64) (complex128, error) {
	if !finite(n) || real(n) < 0 || imag(n) < 0 {
		return 0, fmt.Errorf("nk: %s: index %g at %g nm: %w", model, n, lambda, ErrRange)
	}
	for j, g := range grad {
		if !finite(g) {
			return 0, fmt.Errorf("nk: %s: derivative %g of the index with respect to parameter %d at %g nm: %w", model, g, j, lambda, ErrRange)
		}
	}
	return n, nil
}
