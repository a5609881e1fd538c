package nk

import (
	"errors"
	"fmt"
	"math"
)

// ErrSingular: the data of a fit do not determine its parameters. The last
// estimate is returned with it.
var ErrSingular = errors.New("parameters not determined by the data")

// defaultIterations is the limit of a fit when the problem gives none.
const defaultIterations = 200

// FitProblem is a least-squares problem: parameters of a dispersion model, a
// film thickness, a volume fraction, whatever the caller's function computes a
// measurement from. The measurement may be a table of n and k, or R, T, psi and
// delta, one after the other in one slice.
type FitProblem struct {
	// Model stores the predicted data at params in dst, which has the length of
	// Data. It must keep no reference to either. An error or a value that is
	// not finite makes the fit try a shorter step; at Start it ends the fit.
	Model func(dst, params []float64) error
	// Jacobian stores the derivatives in dst, dst[i*len(params)+j] that of
	// datum i with respect to parameter j. nil: central differences.
	Jacobian func(dst, params []float64) error

	Data   []float64
	Sigma  []float64 // standard deviation of each datum, > 0; nil: one unknown value for all
	Period []float64 // period of each datum (360 for an angle delta in degrees), 0 for none; nil: none

	Start        []float64 // first values of the parameters, within the bounds
	Lower, Upper []float64 // bounds, ±Inf allowed; nil: none. Lower = Upper holds a parameter.

	MaxIterations int // 0: 200
}

// FitResult is the outcome of a fit. Standard errors and correlations are those
// of the linearised problem at the solution. With Sigma given they follow from
// it alone; without, from the scatter of the residuals.
type FitResult struct {
	Params []float64
	// StdErr holds the standard errors: 0 for a held parameter, NaN for one
	// that ended at a bound, where the linearised problem says nothing.
	StdErr      []float64
	Correlation [][]float64 // correlation of the estimates; 0 off the diagonal for held parameters and those at a bound
	AtBound     []bool      // the data would push the parameter beyond its bound

	Residuals        []float64 // data - model, in the unit of the data
	ChiSquare        float64   // sum of (residual/sigma)², or of residual² without Sigma
	ReducedChiSquare float64   // ChiSquare/DOF; NaN if DOF is 0
	DOF              int       // number of data less number of parameters estimated

	Iterations  int  // accepted steps
	Evaluations int  // calls of Model, those for differences included
	Converged   bool // see Fit
}

// Fit minimises the sum of squares of (data - model)/sigma within the bounds, by
// the Levenberg-Marquardt method (K. Levenberg, Q. Appl. Math. 2, 164 (1944),
// D. W. Marquardt, J. SIAM 11, 431 (1963)) with parameters scaled by the columns
// of the Jacobian and steps projected on the bounds. It is written here because
// gonum/optimize has no least-squares method: its general minimisers lose the
// residuals' structure, hence the last digits and the covariance. QR and singular values
// are gonum's.
//
// It has converged when what a full step could still gain is below 1e-9
// standard errors (relative offset: D. M. Bates and D. G. Watts, Technometrics
// 23, 179 (1981)), when a nearly undamped step changes no parameter by more than
// 1e-11 of its value, or when the data are met to rounding. Where the rounding
// of the model hides the way to that, 1e-5 standard errors count.
//
// The minimum is that of the valley in which Start lies: with a film thickness
// among the parameters, try several starts.
//
// Errors: ErrInput for a bad problem (and what Model returns at Start);
// ErrConvergence when the iterations end before that; ErrSingular when the data
// leave a combination of parameters free. With both of the latter the result
// holds the last estimate, without standard errors (NaN).
func Fit(p FitProblem) (FitResult, error) {
	if err := p.check(); err != nil {
		return FitResult{}, err
	}
	s := newFitState(&p)
	if err := s.start(); err != nil {
		return FitResult{}, err
	}
	converged, err := s.iterate()
	res := s.result(converged)
	if err != nil {
		return res, err
	}
	if !converged {
		return res, fmt.Errorf("nk: fit: after %d steps and %d evaluations: %w", res.Iterations, res.Evaluations, ErrConvergence)
	}
	return res, s.statistics(&res)
}

func (p *FitProblem) check() error {
	bad := func(format string, a ...any) error {
		return fmt.Errorf("nk: fit: "+format+": %w", append(a, ErrInput)...)
	}
	m, n := len(p.Data), len(p.Start)
	switch {
	case p.Model == nil:
		return bad("no model")
	case n == 0:
		return bad("no parameters")
	case p.Sigma != nil && len(p.Sigma) != m:
		return bad("%d standard deviations for %d data", len(p.Sigma), m)
	case p.Period != nil && len(p.Period) != m:
		return bad("%d periods for %d data", len(p.Period), m)
	case p.Lower != nil && len(p.Lower) != n || p.Upper != nil && len(p.Upper) != n:
		return bad("%d lower and %d upper bounds for %d parameters", len(p.Lower), len(p.Upper), n)
	case p.MaxIterations < 0:
		return bad("MaxIterations is %d", p.MaxIterations)
	}
	for i, d := range p.Data {
		if math.IsNaN(d) || math.IsInf(d, 0) {
			return bad("datum %d is %g", i, d)
		}
		if p.Sigma != nil && !(p.Sigma[i] > 0 && !math.IsInf(p.Sigma[i], 1)) {
			return bad("standard deviation %d is %g", i, p.Sigma[i])
		}
		if p.Period != nil && !(p.Period[i] >= 0 && !math.IsInf(p.Period[i], 1)) {
			return bad("period %d is %g", i, p.Period[i])
		}
	}
	free := 0
	for j, v := range p.Start {
		lo, hi := p.bounds(j)
		if math.IsNaN(v) || math.IsInf(v, 0) || !(lo <= v && v <= hi) {
			return bad("parameter %d starts at %g, bounds %g to %g", j, v, lo, hi)
		}
		if lo < hi {
			free++
		}
	}
	if free == 0 {
		return bad("all parameters are held")
	}
	if m < free || p.Sigma == nil && m == free {
		return bad("%d data for %d parameters", m, free)
	}
	return nil
}

func (p *FitProblem) bounds(j int) (lo, hi float64) {
	lo, hi = math.Inf(-1), math.Inf(1)
	if p.Lower != nil {
		lo = p.Lower[j]
	}
	if p.Upper != nil {
		hi = p.Upper[j]
	}
	return lo, hi
}

// IndexProblem returns the problem of fitting the parameters of a model to a
// table of indices at wavelengths in nm: the data are all n, then all k, the
// start is the model as it is, the Jacobian is the model's own. Add bounds and
// Sigma, hand it to Fit, and set the model to the result: while the fit runs m
// is its scratch. ErrInput: lengths that differ, no wavelengths.
func IndexProblem(m Model, lambda []float64, index []complex128) (FitProblem, error) {
	count := len(lambda)
	if count == 0 || len(index) != count {
		return FitProblem{}, fmt.Errorf("nk: fit: %d wavelengths and %d indices: %w", count, len(index), ErrInput)
	}
	p := FitProblem{Data: make([]float64, 2*count)}
	for i, n := range index {
		p.Data[i], p.Data[count+i] = real(n), imag(n)
	}
	for _, q := range m.Parameters() {
		p.Start = append(p.Start, q.Value)
	}
	p.Model = func(dst, params []float64) error {
		if err := m.SetParameters(params); err != nil {
			return err
		}
		for i, l := range lambda {
			n, err := m.Index(l)
			if err != nil {
				return err
			}
			dst[i], dst[count+i] = real(n), imag(n)
		}
		return nil
	}
	grad := make([]complex128, len(p.Start))
	p.Jacobian = func(dst, params []float64) error {
		if err := m.SetParameters(params); err != nil {
			return err
		}
		for i, l := range lambda {
			if _, _, err := m.Gradient(grad, l); err != nil {
				return err
			}
			for j, g := range grad {
				dst[i*len(grad)+j], dst[(count+i)*len(grad)+j] = real(g), imag(g)
			}
		}
		return nil
	}
	return p, nil
}
