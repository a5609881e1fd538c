package nk

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/diff/fd"
	"gonum.org/v1/gonum/floats"
	"gonum.org/v1/gonum/mat"
)

const (
	offsetGoal  = 1e-9  // relative offset at which a fit has converged
	stalledGoal = 1e-5  // the same when no step lowers the sum of squares any more
	resolution  = 1e-13 // relative change of the sum of squares that counts as rounding
	blindSteps  = 3     // nearly undamped steps taken below that resolution
	stepGoal    = 1e-11 // relative change of the parameters, same
	exactGoal   = 1e-13 // residual over data that counts as rounding
	smallDamp   = 1e-3  // damping up to which a step counts as nearly undamped
	firstDamp   = 1e-3
	largestDamp = 1e30
	// diffStep is the relative step of the differences, of order 4: with a model
	// that varies over 1 % of a parameter (a line at 450 nm) truncation and
	// rounding both stay below 1e-11.
	diffStep = 3e-5
)

// fitState is a fit under way. Residuals and Jacobian are divided by sigma.
type fitState struct {
	p           *FitProblem
	x, trial    []float64 // parameters
	r, rTrial   []float64 // residuals
	chi         float64   // |r|²
	jac         *mat.Dense
	raw         []float64 // Jacobian as the caller gives it
	scale       []float64 // largest norm of each column so far
	free        []int     // parameters that may move
	damp, raise float64
	blind       int // steps taken below the resolution
	iterations  int
	evaluations int
}

func newFitState(p *FitProblem) *fitState {
	m, n := len(p.Data), len(p.Start)
	return &fitState{
		p: p, x: append([]float64(nil), p.Start...), trial: make([]float64, n),
		r: make([]float64, m), rTrial: make([]float64, m),
		jac: mat.NewDense(m, n, nil), raw: make([]float64, m*n), scale: make([]float64, n),
		damp: firstDamp, raise: 2,
	}
}

// predict calls the caller's function and demands finite values.
func (s *fitState) predict(dst, x []float64) error {
	s.evaluations++
	if err := s.p.Model(dst, x); err != nil {
		return err
	}
	for i, v := range dst {
		if math.IsNaN(v) || math.IsInf(v, 0) {
			return fmt.Errorf("model value %d is %g: %w", i, v, ErrInput)
		}
	}
	return nil
}

// residuals stores (data - model)/sigma at x in dst and returns its square.
func (s *fitState) residuals(dst, x []float64) (float64, error) {
	if err := s.predict(dst, x); err != nil {
		return 0, err
	}
	for i := range dst {
		d := s.p.Data[i] - dst[i]
		if s.p.Period != nil && s.p.Period[i] > 0 {
			d = math.Remainder(d, s.p.Period[i])
		}
		if s.p.Sigma != nil {
			d /= s.p.Sigma[i]
		}
		dst[i] = d
	}
	chi := floats.Dot(dst, dst)
	if math.IsInf(chi, 0) || math.IsNaN(chi) {
		return 0, fmt.Errorf("sum of squares is %g: %w", chi, ErrInput)
	}
	return chi, nil
}

func (s *fitState) start() error {
	var err error
	if s.chi, err = s.residuals(s.r, s.x); err != nil {
		return fmt.Errorf("nk: fit: at the start: %w", err)
	}
	if err := s.jacobian(); err != nil {
		return fmt.Errorf("nk: fit: derivatives at the start: %w", err)
	}
	return nil
}

// jacobian stores the derivatives of the model over sigma at s.x.
func (s *fitState) jacobian() error {
	m, n := s.jac.Dims()
	if s.p.Jacobian != nil {
		if err := s.p.Jacobian(s.raw, s.x); err != nil {
			return err
		}
	} else if err := s.differences(); err != nil {
		return err
	}
	for i := range m {
		for j := range n {
			d := s.raw[i*n+j]
			if lo, hi := s.p.bounds(j); lo == hi {
				d = 0
			}
			if s.p.Sigma != nil {
				d /= s.p.Sigma[i]
			}
			if math.IsNaN(d) || math.IsInf(d, 0) {
				return fmt.Errorf("derivative of datum %d with respect to parameter %d is %g: %w", i, j, d, ErrInput)
			}
			s.jac.Set(i, j, d)
		}
	}
	for j := range n {
		s.scale[j] = max(s.scale[j], mat.Norm(s.jac.ColView(j), 2))
	}
	return nil
}

// central4 is the central difference of order 4.
func central4() fd.Formula {
	return fd.Formula{
		Stencil:    []fd.Point{{Loc: -2, Coeff: 1.0 / 12}, {Loc: -1, Coeff: -2.0 / 3}, {Loc: 1, Coeff: 2.0 / 3}, {Loc: 2, Coeff: -1.0 / 12}},
		Derivative: 1,
		Step:       diffStep,
	}
}

// oneSided4 is the forward difference of order 4, for parameters at a bound;
// with sign -1 it is the backward one.
func oneSided4(sign float64) fd.Formula {
	return fd.Formula{
		Stencil: []fd.Point{{Loc: 0, Coeff: -25.0 / 12 * sign}, {Loc: sign, Coeff: 4 * sign}, {Loc: 2 * sign, Coeff: -3 * sign},
			{Loc: 3 * sign, Coeff: 4.0 / 3 * sign}, {Loc: 4 * sign, Coeff: -0.25 * sign}},
		Derivative: 1,
		Step:       diffStep,
	}
}

// differences stores the Jacobian by differences that stay within the bounds
// and, if they can, where the model has a value.
func (s *fitState) differences() error {
	m, n := s.jac.Dims()
	col := mat.NewDense(m, 1, nil)
	x := append([]float64(nil), s.x...)
	for j := range n {
		lo, hi := s.p.bounds(j)
		if lo == hi {
			for i := range m {
				s.raw[i*n+j] = 0
			}
			continue
		}
		h := diffStep * s.size(j)
		h = min(h, (hi-lo)/8) // room for one of the formulas
		var err error
		for _, f := range []fd.Formula{central4(), oneSided4(1), oneSided4(-1)} {
			first, last := f.Stencil[0].Loc, f.Stencil[len(f.Stencil)-1].Loc
			if s.x[j]+h*min(first, last) < lo || s.x[j]+h*max(first, last) > hi {
				continue
			}
			err = nil
			fd.Jacobian(col, func(y, v []float64) {
				x[j] = v[0]
				if e := s.predict(y, x); e != nil && err == nil {
					err = e
				}
			}, s.x[j:j+1], &fd.JacobianSettings{Formula: f, Step: h})
			if err == nil {
				break
			}
		}
		x[j] = s.x[j]
		if err != nil {
			return err
		}
		for i := range m {
			s.raw[i*n+j] = col.At(i, 0)
		}
	}
	return nil
}

// size is the magnitude of a parameter for the step of a difference.
func (s *fitState) size(j int) float64 {
	lo, hi := s.p.bounds(j)
	v := max(math.Abs(s.x[j]), 1e-3*math.Abs(s.p.Start[j]))
	if v == 0 && !math.IsInf(hi-lo, 0) {
		v = 1e-2 * (hi - lo)
	}
	if v == 0 {
		v = 1
	}
	return v
}

// findFree lists the parameters that may move: not held, and not at a bound
// with the descent leading out.
func (s *fitState) findFree() {
	s.free = s.free[:0]
	for j := range s.x {
		lo, hi := s.p.bounds(j)
		if lo == hi {
			continue
		}
		g := mat.Dot(s.jac.ColView(j), mat.NewVecDense(len(s.r), s.r))
		if s.x[j] <= lo && g < 0 || s.x[j] >= hi && g > 0 {
			continue
		}
		s.free = append(s.free, j)
	}
}

// step solves the damped linear problem for the free parameters,
// min |r - J d|² + damp |D d|², by QR; D holds the column scales.
func (s *fitState) step(damp float64) ([]float64, error) {
	m, nf := len(s.r), len(s.free)
	a := mat.NewDense(m+nf, nf, nil)
	b := mat.NewVecDense(m+nf, nil)
	for k, j := range s.free {
		w := s.scale[j]
		if w == 0 {
			w = 1
		}
		for i := range m {
			a.Set(i, k, s.jac.At(i, j)/w)
		}
		a.Set(m+k, k, math.Sqrt(damp))
	}
	for i, v := range s.r {
		b.SetVec(i, v)
	}
	var qr mat.QR
	qr.Factorize(a)
	var d mat.VecDense
	if err := qr.SolveVecTo(&d, false, b); err != nil {
		if _, ill := err.(mat.Condition); !ill || damp == 0 {
			return nil, err
		}
	}
	out := make([]float64, len(s.x))
	for k, j := range s.free {
		out[j] = d.AtVec(k)
		if s.scale[j] > 0 {
			out[j] /= s.scale[j]
		}
	}
	return out, nil
}

// gain is how much the linearised |r|² falls over the step d.
func (s *fitState) gain(d []float64) float64 {
	var jd mat.VecDense
	jd.MulVec(s.jac, mat.NewVecDense(len(d), d))
	g := 0.0
	for i, v := range s.r {
		g += jd.AtVec(i) * (2*v - jd.AtVec(i))
	}
	return g
}

// settled tests the residuals at s.x: exact to rounding, or a full step would
// gain less than goal standard errors.
func (s *fitState) settled(goal float64) bool {
	largest := 0.0
	for i, v := range s.p.Data {
		if s.p.Sigma != nil {
			v /= s.p.Sigma[i]
		}
		largest = max(largest, math.Abs(v))
	}
	if math.Sqrt(s.chi) <= exactGoal*largest || len(s.free) == 0 {
		return true
	}
	d, err := s.step(0)
	if err != nil {
		// Rank lost: the damped gradient still tells whether anything pulls.
		if d, err = s.step(1e-12); err != nil {
			return false
		}
	}
	dof := max(1, len(s.r)-len(s.free))
	return s.gain(d) <= goal*goal*s.chi*float64(len(s.free))/float64(dof)
}

// iterate runs the method; it returns whether it has converged.
func (s *fitState) iterate() (bool, error) {
	limit := s.p.MaxIterations
	if limit == 0 {
		limit = defaultIterations
	}
	for {
		s.findFree()
		if s.settled(offsetGoal) {
			return true, nil
		}
		if s.iterations >= limit {
			return false, nil
		}
		moved, done := s.advance()
		if !moved {
			return s.settled(stalledGoal), nil
		}
		s.iterations++
		if err := s.jacobian(); err != nil {
			return false, fmt.Errorf("nk: fit: derivatives after %d steps: %w", s.iterations, err)
		}
		if done {
			s.findFree()
			return true, nil
		}
	}
}

// advance raises the damping until a step lowers the sum of squares and takes
// it. done: the step is nearly undamped and changes nothing any more.
func (s *fitState) advance() (moved, done bool) {
	for s.damp < largestDamp {
		d, err := s.step(s.damp)
		if err != nil {
			s.reject()
			continue
		}
		change := 0.0
		for j := range d {
			lo, hi := s.p.bounds(j)
			s.trial[j] = min(hi, max(lo, s.x[j]+d[j]))
			d[j] = s.trial[j] - s.x[j]
			if d[j] != 0 {
				change = max(change, math.Abs(d[j])/max(math.Abs(s.x[j]), math.Abs(s.trial[j])))
			}
		}
		chi, err := s.residuals(s.rTrial, s.trial)
		if change <= stepGoal && s.damp <= smallDamp {
			if err == nil && chi <= s.chi {
				s.accept(chi)
			}
			return true, true
		}
		if change == 0 {
			return false, false
		}
		gain := s.gain(d)
		if err == nil && s.damp <= smallDamp && gain <= resolution*s.chi && chi-s.chi <= resolution*s.chi {
			s.accept(chi)
			s.blind++
			return true, s.blind >= blindSteps
		}
		ratio := (s.chi - chi) / gain
		if err != nil || !(ratio > 1e-4) || !(chi < s.chi) {
			s.reject()
			continue
		}
		s.accept(chi)
		// H. B. Nielsen, report IMM-REP-1999-05, Technical University of Denmark
		s.damp *= max(1.0/3, 1-math.Pow(2*ratio-1, 3))
		s.raise = 2
		return true, false
	}
	return false, false
}

func (s *fitState) accept(chi float64) {
	copy(s.x, s.trial)
	copy(s.r, s.rTrial)
	s.chi = chi
}

func (s *fitState) reject() {
	s.damp *= s.raise
	s.raise *= 2
}
