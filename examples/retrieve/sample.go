package main

import (
	"math"
	"math/rand/v2"

	"photonledger/nk"
	"photonledger/optics"
)

// parameters of the film: n = A + B/λ² + C/λ⁴ with λ in µm, and its thickness.
var parameters = []string{"thickness nm", "A", "B µm²", "C µm⁴"}

// sample is a film on silicon and what was measured of it.
type sample struct {
	wavelength      []float64 // nm
	silicon         []complex128
	measured, sigma []float64
	nitride         *nk.Interpolant // of the invented sample
	film            nk.Cauchy       // scratch of the fit
	sweep           optics.Sweep
	gradient        optics.GradientSolver
	solver          optics.Sweeper
	response        optics.SweepResponse
}

// newSample makes the invented measurement: from 420 nm, where the film is
// transparent, to 1000 nm.
func newSample(o options) (*sample, error) {
	s := &sample{}
	for l := 420.0; l <= 1000; l += 5 {
		s.wavelength = append(s.wavelength, l)
	}
	material, err := nk.Material("si_green2008")
	if err != nil {
		return nil, err
	}
	if s.silicon, err = material.Sample(nil, s.wavelength); err != nil {
		return nil, err
	}
	if s.nitride, err = nk.Material("sinx191_vogt2015"); err != nil {
		return nil, err
	}
	index, err := s.nitride.Sample(nil, s.wavelength)
	if err != nil {
		return nil, err
	}
	s.sweep = optics.NewSweep(s.wavelength, 1)
	if err := s.sweep.SetBack(s.silicon); err != nil {
		return nil, err
	}
	if err := s.sweep.SetFilm(0, index, o.thickness); err != nil {
		return nil, err
	}
	if err := s.solver.Run(&s.response, &s.sweep); err != nil {
		return nil, err
	}
	noise := rand.New(rand.NewPCG(o.seed, 0))
	for _, r := range s.response.R {
		s.measured = append(s.measured, r+o.noise*noise.NormFloat64())
		s.sigma = append(s.sigma, o.noise)
	}
	return s, nil
}

// setFilm brings the parameters of the fit into the sweep.
func (s *sample) setFilm(p []float64) error {
	s.film = nk.Cauchy{A: p[1], B: p[2], C: p[3]}
	s.sweep.Thickness[0] = p[0]
	for i, l := range s.wavelength {
		n, err := s.film.Index(l)
		if err != nil {
			return err
		}
		s.sweep.N[i], s.sweep.K[i] = real(n), imag(n)
	}
	return nil
}

// model predicts the reflectances.
func (s *sample) model(dst, p []float64) error {
	if err := s.setFilm(p); err != nil {
		return err
	}
	if err := s.solver.Run(&s.response, &s.sweep); err != nil {
		return err
	}
	copy(dst, s.response.R)
	return nil
}

// jacobian holds the derivatives of every reflectance: those with respect to the
// index of the film times those of the index with respect to its parameters.
func (s *sample) jacobian(dst, p []float64) error {
	if err := s.setFilm(p); err != nil {
		return err
	}
	var grad []complex128
	var response optics.Response
	var g optics.Gradient
	st := optics.Stack{Front: 1, Films: make([]optics.Film, 1)}
	for i, l := range s.wavelength {
		st.Films[0], st.Back = optics.Film{Index: complex(s.sweep.N[i], s.sweep.K[i]), Thickness: p[0]}, s.silicon[i]
		err := s.gradient.Solve(&g, &response, st, optics.Wave{Wavelength: l}, optics.Weights{R: 1})
		if err != nil {
			return err
		}
		if grad, _, err = s.film.Gradient(grad, l); err != nil {
			return err
		}
		row := dst[i*len(p) : (i+1)*len(p)]
		row[0] = g.Thickness[0]
		for j := 1; j < len(p); j++ {
			row[j] = g.N[0]*real(grad[j-1]) + g.K[0]*imag(grad[j-1])
		}
	}
	return nil
}

// retrieve fits thickness and dispersion.
func (s *sample) retrieve(guess float64) (nk.FitResult, error) {
	return nk.Fit(nk.FitProblem{
		Model: s.model, Jacobian: s.jacobian,
		Data: s.measured, Sigma: s.sigma,
		Start: []float64{guess, 1.9, 0.01, 0},
		Lower: []float64{1, 1, -1, -1}, Upper: []float64{2000, 4, 1, 1},
	})
}

// indexAt returns the fitted index at a wavelength (nm) and its standard error,
// with the correlations of the parameters.
func (s *sample) indexAt(fit nk.FitResult, lambda float64) (n, sigma float64) {
	const nmPerMicron = 1e3
	q := 1 / (lambda / nmPerMicron * lambda / nmPerMicron)
	slope := []float64{0, 1, q, q * q}
	for j := range slope {
		n += slope[j] * fit.Params[j]
		for k := range slope {
			sigma += slope[j] * slope[k] * fit.Correlation[j][k] * fit.StdErr[j] * fit.StdErr[k]
		}
	}
	return n, math.Sqrt(sigma)
}

// trueIndex is that of the invented sample.
func (s *sample) trueIndex(lambda float64) float64 {
	n, err := s.nitride.At(lambda)
	if err != nil {
		return math.NaN()
	}
	return real(n)
}
