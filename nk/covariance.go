package nk

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/mat"
)

const (
	// Singular values of the scaled Jacobian below these shares of the largest
	// are its own errors: rounding, or that of the differences.
	singularExact      = 1e-13
	singularDifference = 1e-9
)

// result collects the estimate; the standard errors stay NaN until statistics.
func (s *fitState) result(converged bool) FitResult {
	n := len(s.x)
	res := FitResult{
		Params: s.x, StdErr: make([]float64, n), Correlation: make([][]float64, n), AtBound: make([]bool, n),
		Residuals: make([]float64, len(s.r)), ChiSquare: s.chi, ReducedChiSquare: math.NaN(),
		Iterations: s.iterations, Evaluations: s.evaluations, Converged: converged,
	}
	s.findFree()
	res.DOF = len(s.r) - len(s.free)
	if res.DOF > 0 {
		res.ReducedChiSquare = s.chi / float64(res.DOF)
	}
	for i, v := range s.r {
		if s.p.Sigma != nil {
			v *= s.p.Sigma[i]
		}
		res.Residuals[i] = v
	}
	for j := range n {
		lo, hi := s.p.bounds(j)
		res.AtBound[j] = lo < hi
		if lo < hi {
			res.StdErr[j] = math.NaN()
		}
		res.Correlation[j] = make([]float64, n)
		res.Correlation[j][j] = 1
	}
	for _, j := range s.free {
		res.AtBound[j] = false
	}
	return res
}

// statistics adds standard errors and correlations from the singular values of
// the Jacobian with its columns scaled to length 1, or returns ErrSingular.
func (s *fitState) statistics(res *FitResult) error {
	m, nf := len(s.r), len(s.free)
	if nf == 0 {
		return nil
	}
	a := mat.NewDense(m, nf, nil)
	norm := make([]float64, nf)
	for k, j := range s.free {
		norm[k] = mat.Norm(s.jac.ColView(j), 2)
		if norm[k] == 0 {
			return fmt.Errorf("nk: fit: parameter %d changes nothing: %w", j, ErrSingular)
		}
		for i := range m {
			a.Set(i, k, s.jac.At(i, j)/norm[k])
		}
	}
	var svd mat.SVD
	if !svd.Factorize(a, mat.SVDThin) {
		return fmt.Errorf("nk: fit: singular values: %w", ErrConvergence)
	}
	sv := svd.Values(nil)
	var v mat.Dense
	svd.VTo(&v)
	limit := singularExact
	if s.p.Jacobian == nil {
		limit = singularDifference
	}
	if last := sv[nf-1]; !(last > limit*sv[0]) {
		worst := 0
		for k := range nf {
			if math.Abs(v.At(k, nf-1)) > math.Abs(v.At(worst, nf-1)) {
				worst = k
			}
		}
		return fmt.Errorf("nk: fit: a combination with parameter %d is free (singular values %.2g to %.2g): %w", s.free[worst], last, sv[0], ErrSingular)
	}
	variance := 1.0
	if s.p.Sigma == nil {
		variance = res.ReducedChiSquare
	}
	cov := func(k, l int) float64 {
		c := 0.0
		for q := range nf {
			c += v.At(k, q) * v.At(l, q) / (sv[q] * sv[q])
		}
		return c
	}
	for k, j := range s.free {
		e := math.Sqrt(variance*cov(k, k)) / norm[k]
		if math.IsInf(e, 0) || math.IsNaN(e) {
			return fmt.Errorf("nk: fit: standard error of parameter %d is %g: %w", j, e, ErrSingular)
		}
		res.StdErr[j] = e
		for l, i := range s.free[:k] {
			c := cov(k, l) / math.Sqrt(cov(k, k)*cov(l, l))
			res.Correlation[j][i], res.Correlation[i][j] = c, c
		}
	}
	return nil
}
