package main

import (
	"errors"
	"fmt"
	"math"
	"slices"

	"photonledger/nk"
	"photonledger/optics"
)

// dispersion is a model of the film's index with bounds for its parameters; equal
// bounds hold one. start gives the parameters for an index in the visible.
type dispersion struct {
	model        nk.Model
	lower, upper []float64
	start        func(index float64) []float64
}

// dispersions are the models that a user may choose.
var dispersions = map[string]func() dispersion{
	// Without its tail: a transparent film.
	"cauchy": func() dispersion {
		return dispersion{
			model: &nk.Cauchy{}, lower: []float64{1, -0.2, -0.02, 0, 0, 0}, upper: []float64{4, 0.2, 0.02, 0, 0, 0},
			start: func(index float64) []float64 { return []float64{index - 0.03, 0.01, 0, 0, 0, 0} },
		}
	},
	// The resonance lies in the ultraviolet, beyond the measurement; its amplitude
	// sets the index.
	"tauclorentz": func() dispersion {
		return dispersion{
			model: &nk.TaucLorentz{}, lower: []float64{1, 4.2, 0.3, 0.5, 1}, upper: []float64{1000, 20, 20, 8, 1},
			start: func(index float64) []float64 {
				m := nk.TaucLorentz{A: 1, E0: 8, C: 4, Eg: 2.6, EpsInf: 1}
				one, _ := m.Permittivity(nil, 633)
				return []float64{(index*index - 1) / (real(one) - 1), m.E0, m.C, m.Eg, m.EpsInf}
			},
		}
	},
}

// maxThickness bounds the fit, nm.
const maxThickness = 2000.0

// fitter fits a measurement; params are the thickness and those of the model.
type fitter struct {
	*measurement
	dispersion
	solver    optics.Solver
	gradients optics.GradientSolver
	response  optics.Response
	gradient  optics.Gradient
	slopes    []complex128
}

// predict computes the reflectances.
func (f *fitter) predict(reflectance, params []float64) error {
	if err := f.model.SetParameters(params[1:]); err != nil {
		return err
	}
	st := optics.Stack{Front: 1, Films: []optics.Film{{Thickness: params[0]}}}
	for i, l := range f.wavelength {
		n, err := f.model.Index(l)
		if err != nil {
			return err
		}
		st.Films[0].Index, st.Back = n, f.silicon[i]
		if err := f.solver.Solve(&f.response, st, optics.Wave{Wavelength: l}); err != nil {
			return err
		}
		reflectance[i] = f.response.R
	}
	return nil
}

// differentiate computes the derivatives of the reflectances: those with respect
// to the index of the film times those of the index with respect to its parameters.
func (f *fitter) differentiate(jacobian, params []float64) error {
	if err := f.model.SetParameters(params[1:]); err != nil {
		return err
	}
	st := optics.Stack{Front: 1, Films: []optics.Film{{Thickness: params[0]}}}
	for i, l := range f.wavelength {
		slopes, n, err := f.model.Gradient(f.slopes, l)
		if err != nil {
			return err
		}
		f.slopes = slopes
		st.Films[0].Index, st.Back = n, f.silicon[i]
		if err := f.gradients.Solve(&f.gradient, &f.response, st, optics.Wave{Wavelength: l}, optics.Weights{R: 1}); err != nil {
			return err
		}
		row := jacobian[i*len(params) : (i+1)*len(params)]
		row[0] = f.gradient.Thickness[0]
		for j, slope := range slopes {
			row[1+j] = f.gradient.N[0]*real(slope) + f.gradient.K[0]*imag(slope)
		}
	}
	return nil
}

// starts screens thickness and index and returns the best valleys.
func (f *fitter) starts(guess float64) ([][]float64, error) {
	const valleys = 16
	if guess > 0 {
		return [][]float64{append([]float64{guess}, f.start(1.7)...), append([]float64{guess}, f.start(2.1)...)}, nil
	}
	type trial struct {
		params []float64
		misfit float64
	}
	var found []trial
	predicted := make([]float64, len(f.reflectance))
	for index := 1.4; index < 2.6; index += 0.1 {
		var row []trial
		for d := 20.0; d <= 1500; d += 10 {
			t := trial{params: append([]float64{d}, f.start(index)...)}
			if err := f.predict(predicted, t.params); err != nil {
				return nil, err
			}
			for i, r := range predicted {
				t.misfit += (r - f.reflectance[i]) * (r - f.reflectance[i])
			}
			row = append(row, t)
		}
		for i, t := range row {
			if (i == 0 || t.misfit <= row[i-1].misfit) && (i == len(row)-1 || t.misfit <= row[i+1].misfit) {
				found = append(found, t)
			}
		}
	}
	slices.SortFunc(found, func(a, b trial) int { return order(a.misfit, b.misfit) })
	var starts [][]float64
	for _, t := range found[:min(valleys, len(found))] {
		starts = append(starts, t.params)
	}
	return starts, nil
}

func order(a, b float64) int {
	if a < b {
		return -1
	}
	return 1
}

// retrieve fits from many starts: another order of the interference, or an index
// on the other side of the square root of silicon's, is a valley of its own. It
// returns all fits that found one, the best first.
func (f *fitter) retrieve(guess float64) ([]nk.FitResult, error) {
	starts, err := f.starts(guess)
	if err != nil {
		return nil, err
	}
	var fits []nk.FitResult
	var failed error
	for _, start := range starts {
		fit, err := nk.Fit(nk.FitProblem{
			Model: f.predict, Jacobian: f.differentiate,
			Data: f.reflectance, Sigma: f.sigma, Start: start,
			Lower: append([]float64{1}, f.lower...), Upper: append([]float64{maxThickness}, f.upper...),
		})
		switch {
		case err == nil && !slices.Contains(fit.AtBound, true):
			fits = append(fits, fit)
		case err == nil:
			failed = fmt.Errorf("a parameter ends at its bound: %g", fit.Params)
		case errors.Is(err, nk.ErrConvergence) || errors.Is(err, nk.ErrSingular):
			failed = err
		default:
			return nil, err
		}
	}
	if len(fits) == 0 {
		return nil, fmt.Errorf("no fit (try other starts or another model): %w", failed)
	}
	slices.SortFunc(fits, func(a, b nk.FitResult) int { return order(a.ChiSquare, b.ChiSquare) })
	return fits, nil
}

// indexAt returns the fitted index at a wavelength (nm) and its standard error,
// with the correlations of the parameters.
func (f *fitter) indexAt(fit nk.FitResult, lambda float64) (n, sigma float64, err error) {
	if err := f.model.SetParameters(fit.Params[1:]); err != nil {
		return 0, 0, err
	}
	slopes, value, err := f.model.Gradient(nil, lambda)
	for j, a := range slopes {
		for k, b := range slopes {
			sigma += real(a) * real(b) * fit.Correlation[1+j][1+k] * fit.StdErr[1+j] * fit.StdErr[1+k]
		}
	}
	return real(value), math.Sqrt(max(0, sigma)), err
}

// rival returns the best fit with another thickness, and whether the measurement
// cannot tell it from the best one: chi-square larger by less than 9, three
// standard deviations of a normal distribution, in units of the noise.
func rival(fits []nk.FitResult) (other nk.FitResult, open, found bool) {
	best := fits[0]
	for _, other = range fits[1:] {
		if math.Abs(other.Params[0]-best.Params[0]) > 0.5 {
			// The scatter counts as noise: it may be the only one known.
			return other, other.ChiSquare-best.ChiSquare < 9*best.ReducedChiSquare, true
		}
	}
	return other, false, false
}
