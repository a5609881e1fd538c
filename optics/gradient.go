package optics

import (
	"errors"
	"fmt"
	"math"
)

// ErrSingular is wrapped by errors about a derivative that does not exist or
// that a double cannot hold: the back medium is at its critical angle.
var ErrSingular = errors.New("derivative is not finite")

// Weights define an objective F = R r + T t + sum A[j] a[j] of the shares r, t
// and a[j] of a [Response]. The weights may have any sign.
type Weights struct {
	R, T float64   // weight of the reflectance, of the transmittance
	A    []float64 // weight of the absorptance of each film; nil for none
}

// Gradient holds the derivatives of one number with respect to everything in a
// [Stack] but the front medium. A derivative with respect to k is the one-sided
// one where k = 0; there the absorptance of a film is 0 and its derivative is
// not.
type Gradient struct {
	Thickness    []float64 // by the thickness of each film, 1/nm
	N, K         []float64 // by n and by k of each film
	BackN, BackK float64   // by n and by k of the back medium
}

// Jacobian holds the derivatives of all shares of a [Response].
type Jacobian struct {
	R, T Gradient
	A    []Gradient // of the absorptance of each film
}

// SolveGradient returns the response of st to w and the gradient of the
// objective that the weights define; see [GradientSolver.Solve].
func SolveGradient(st Stack, w Wave, weights Weights) (Response, Gradient, error) {
	var s GradientSolver
	var r Response
	var g Gradient
	err := s.Solve(&g, &r, st, w, weights)
	return r, g, err
}

// SolveJacobian returns the response of st to w and the derivatives of all its
// shares; see [GradientSolver.Jacobian].
func SolveJacobian(st Stack, w Wave) (Response, Jacobian, error) {
	var s GradientSolver
	var r Response
	var j Jacobian
	err := s.Jacobian(&j, &r, st, w)
	return r, j, err
}

// GradientSolver is the working memory for many gradients. The zero value is
// ready. It must not be used by two goroutines at a time. In the steady state
// (no more films than before) its methods allocate nothing.
type GradientSolver struct {
	solver  Solver
	reverse reversal
	unit    Weights
}

// Solve stores in r what [Solver.Solve] does and in dst the gradient of the
// objective, found in one reverse pass whose time does not depend on the
// number of variables. The slices of dst and r are grown when they are too
// short. An error wraps [ErrInput], or [ErrSingular] where the derivative is
// infinite.
//
// The derivatives agree with those of 80-digit solutions to 5e-13 of the largest
// one, thicknesses taken in wavelengths, and to 1e-9 where films are up to 10^4
// wavelengths thick (testdata/vectors/derivatives.jsonl). Those of the
// absorptance of a film without loss vanish but for the one by its own k.
func (s *GradientSolver) Solve(dst *Gradient, r *Response, st Stack, w Wave, weights Weights) error {
	if err := weights.validate(len(st.Films)); err != nil {
		return err
	}
	normal, err := s.forward(r, st, w)
	if err != nil {
		return err
	}
	return s.backward(dst, st, w, weights, normal)
}

// Jacobian stores in r what [Solver.Solve] does and in dst the derivatives of
// R, T and every absorptance, by one reverse pass for each.
func (s *GradientSolver) Jacobian(dst *Jacobian, r *Response, st Stack, w Wave) error {
	normal, err := s.forward(r, st, w)
	if err != nil {
		return err
	}
	films := len(st.Films)
	if cap(dst.A) < films {
		dst.A = append(dst.A[:cap(dst.A)], make([]Gradient, films-cap(dst.A))...)
	}
	dst.A = dst.A[:films]
	s.unit.A = grow(s.unit.A, films)
	clear(s.unit.A)
	if err := s.backward(&dst.R, st, w, Weights{R: 1}, normal); err != nil {
		return err
	}
	if err := s.backward(&dst.T, st, w, Weights{T: 1}, normal); err != nil {
		return err
	}
	for j := range dst.A {
		s.unit.A[j] = 1
		if err := s.backward(&dst.A[j], st, w, s.unit, normal); err != nil {
			return err
		}
		s.unit.A[j] = 0
	}
	return nil
}

func (w Weights) validate(films int) error {
	if len(w.A) != films && w.A != nil {
		return fmt.Errorf("optics: %d absorptance weights for %d films: %w", len(w.A), films, ErrInput)
	}
	if !finite(w.R) {
		return fmt.Errorf("optics: weight %g of the reflectance is not finite: %w", w.R, ErrInput)
	}
	if !finite(w.T) {
		return fmt.Errorf("optics: weight %g of the transmittance is not finite: %w", w.T, ErrInput)
	}
	for j, v := range w.A {
		if !finite(v) {
			return fmt.Errorf("optics: film %d: weight %g of the absorptance is not finite: %w", j, v, ErrInput)
		}
	}
	return nil
}

func finite(v float64) bool { return !math.IsNaN(v) && !math.IsInf(v, 0) }

// forward solves the stack and keeps its fields.
func (s *GradientSolver) forward(r *Response, st Stack, w Wave) (normal bool, err error) {
	sv := &s.solver
	if normal, err = sv.load(st, w, true); err != nil {
		return false, err
	}
	sv.block.solve(&sv.table, 1, normal)
	ws, wp := w.Polarization.weights()
	if normal {
		ws, wp = 1, 0
	}
	sv.respond(r, len(st.Films), ws, wp)
	s.reverse.prepare(&sv.block, len(st.Films), ws, wp, normal)
	return normal, nil
}

// backward runs one reverse pass over the solved lane 0.
func (s *GradientSolver) backward(dst *Gradient, st Stack, w Wave, weights Weights, normal bool) error {
	rv, bl := &s.reverse, &s.solver.block
	films := len(st.Films)
	share := [2]float64{1, 0}
	if !normal {
		share[0], share[1] = w.Polarization.weights()
	}
	for p := range 2 {
		rv.r[p][0], rv.t[p][0] = share[p]*weights.R, share[p]*weights.T
		for j := range films {
			rv.a[p][j*lanes] = 0
			if weights.A != nil {
				rv.a[p][j*lanes] = share[p] * weights.A[j]
			}
		}
	}
	rv.run(bl, &s.solver.table, 1)
	dst.Thickness, dst.N, dst.K = grow(dst.Thickness, films), grow(dst.N, films), grow(dst.K, films)
	sum := 0.0
	for j, f := range st.Films {
		dst.Thickness[j] = rv.dd[j*lanes]
		dst.N[j], dst.K[j] = byIndex(real(f.Index), imag(f.Index), rv.xr[j*lanes], rv.xi[j*lanes])
		sum += math.Abs(dst.Thickness[j]) + math.Abs(dst.N[j]) + math.Abs(dst.K[j])
	}
	dst.BackN, dst.BackK = byIndex(real(st.Back), imag(st.Back), rv.back.xr[0], rv.back.xi[0])
	if sum += math.Abs(dst.BackN) + math.Abs(dst.BackK); !(sum < largestSlope) {
		return fmt.Errorf("optics: wavelength %g nm, angle %g rad: %w", w.Wavelength, w.Angle, ErrSingular)
	}
	return nil
}

// largestSlope bounds what can be a derivative: beyond it q of the back medium
// has vanished.
const largestSlope = 1e90

// byIndex turns dF = Re((xr + i xi) dε), ε = (n + ik)², into the derivatives by
// n and by k.
func byIndex(n, k, xr, xi float64) (dn, dk float64) {
	return 2 * (n*xr - k*xi), -2 * (n*xi + k*xr)
}
