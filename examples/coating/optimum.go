package main

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/floats"
	"gonum.org/v1/gonum/optimize"

	"photonledger/optics"
)

// coatings returns the bare wafer, the best films of any index, and the best
// thicknesses of the published films, alone and under the outer one.
func (w *wafer) coatings(o options) ([]coating, error) {
	all := []coating{
		{name: "bare silicon"},
		{name: "best index, one film", films: []film{{index: 2}}},
		{name: "best indices, two films", films: []film{{index: 1.5}, {index: 2.5}}},
	}
	outer, err := newFilm(o.outer)
	if err != nil {
		return nil, err
	}
	var pairs []coating
	for _, name := range o.inner() {
		inner, err := newFilm(name)
		if err != nil {
			return nil, err
		}
		all = append(all, coating{name: name, films: []film{inner}})
		pairs = append(pairs, coating{name: o.outer + " on " + name, films: []film{outer, inner}})
	}
	all = append(all, pairs...)
	for i := range all {
		if err := w.improve(all[i].films); err != nil {
			return nil, fmt.Errorf("%s: %w", all[i].name, err)
		}
		if err := w.judge(&all[i], o.spread/100); err != nil {
			return nil, err
		}
	}
	return all, nil
}

// improve changes the thicknesses of films, and the indices of those without a
// material, until most photons enter the wafer. It starts with the best of a few
// thicknesses; the derivatives are those of one reverse pass.
func (w *wafer) improve(films []film) error {
	if len(films) == 0 {
		return nil
	}
	const (
		scale  = 100.0 // nm, brings the roots of the thicknesses to the order of the indices
		flat   = 1e-9  // slope at which to stop
		enough = 1e-6  // slope that will do where rounding hides the way further down
	)
	if err := w.start(films); err != nil {
		return err
	}
	var x []float64
	for _, f := range films {
		x = append(x, math.Sqrt(f.thickness/scale))
	}
	for _, f := range films {
		if f.table == nil {
			x = append(x, f.index)
		}
	}
	set := func(x []float64) {
		k := len(films)
		for j := range films {
			films[j].thickness = scale * x[j] * x[j] // never negative, and smooth at 0
			if films[j].table == nil {
				films[j].index = x[k]
				k++
			}
		}
	}
	var failed error
	weights := optics.SweepWeights{T: w.weights}
	// lost is the share of the photons that do not enter, with its gradient.
	lost := func(gradient, x []float64) float64 {
		set(x)
		s, err := w.sweep(films)
		if err != nil {
			failed = err
			return math.Inf(1)
		}
		_, g, err := s.Gradient(&weights)
		if err != nil {
			failed = err
			return math.Inf(1)
		}
		if gradient != nil {
			k, count := len(films), len(w.wavelength)
			for j, f := range films {
				gradient[j] = -g.Thickness[j] * 2 * scale * x[j]
				if f.table == nil {
					gradient[k] = -floats.Sum(g.N[j*count : (j+1)*count])
					k++
				}
			}
		}
		return 1 - g.Value
	}
	result, err := optimize.Minimize(optimize.Problem{
		Func: func(x []float64) float64 { return lost(nil, x) },
		Grad: func(gradient, x []float64) { lost(gradient, x) },
	}, x, &optimize.Settings{GradientThreshold: flat}, &optimize.BFGS{})
	if failed != nil {
		return failed
	}
	slope := make([]float64, len(x))
	lost(slope, result.X)
	if failed != nil {
		return failed
	}
	if floats.Norm(slope, math.Inf(1)) > enough {
		return fmt.Errorf("no optimum, slope %g: %v", floats.Norm(slope, math.Inf(1)), err)
	}
	return nil
}

// start sets the thicknesses to the best of a grid: eighths to one and a half of a
// quarter wave at the mean wavelength, for each film.
func (w *wafer) start(films []film) error {
	const steps = 12
	s, err := w.sweep(films)
	if err != nil {
		return err
	}
	mean := floats.Dot(w.weights, w.wavelength)
	combinations := 1
	for range films {
		combinations *= steps
	}
	var r optics.SweepResponse
	var sweeper optics.Sweeper
	best := -1.0
	for k := range combinations {
		for j, f := range films {
			s.Thickness[j] = float64(k%steps+1) / 8 * mean / (4 * f.index)
			k /= steps
		}
		if err := sweeper.Run(&r, &s); err != nil {
			return err
		}
		if entered := floats.Dot(w.weights, r.T); entered > best {
			best = entered
			for j := range films {
				films[j].thickness = s.Thickness[j]
			}
		}
	}
	return nil
}
