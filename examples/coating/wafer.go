package main

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/floats"
	"gonum.org/v1/gonum/optimize"

	"photonledger/nk"
	"photonledger/optics"
	"photonledger/spectrum"
)

// wafer is planar silicon under a coating of one or two films.
type wafer struct {
	wavelength, weights []float64 // nm; photons of each wavelength, their sum 1
	silicon             []complex128
}

// design is a coating and what it does; shares of the photons.
type design struct {
	name                                  string
	index, thickness                      []float64 // nm
	reflected, absorbed, thinner, thicker float64
	colour                                spectrum.Tristimulus
}

func newWafer(o options) (*wafer, error) {
	w := &wafer{}
	for l := o.first; l <= o.last; l += 5 {
		w.wavelength = append(w.wavelength, l)
	}
	silicon, err := nk.Material("si_green2008")
	if err != nil {
		return nil, err
	}
	if w.silicon, err = silicon.Sample(nil, w.wavelength); err != nil {
		return nil, err
	}
	if w.weights, err = spectrum.Weights(nil, spectrum.AM15G(), w.wavelength, spectrum.Photons); err != nil {
		return nil, err
	}
	floats.Scale(1/floats.Sum(w.weights), w.weights)
	return w, nil
}

// sweep returns the sweep of films of constant index.
func (w *wafer) sweep(index, thickness []float64) (optics.Sweep, error) {
	s := optics.NewSweep(w.wavelength, len(index))
	copy(s.Thickness, thickness)
	for j, n := range index {
		for i := range w.wavelength {
			s.N[j*len(w.wavelength)+i] = n
		}
	}
	return s, s.SetBack(w.silicon)
}

// best minimises the weighted reflectance of constant films over all indices and
// thicknesses, from a start, with the derivatives of one reverse pass.
func (w *wafer) best(index, thickness []float64) (n, d []float64, err error) {
	const scale = 100 // nm: thicknesses of the order of the indices
	films := len(index)
	weights := optics.SweepWeights{R: w.weights}
	evaluate := func(x []float64) (optics.SweepGradient, error) {
		d := make([]float64, films)
		for j := range d {
			d[j] = scale * math.Abs(x[films+j])
		}
		s, err := w.sweep(x[:films], d)
		if err != nil {
			return optics.SweepGradient{}, err
		}
		_, g, err := s.Gradient(&weights)
		return g, err
	}
	var failed error
	problem := optimize.Problem{
		Func: func(x []float64) float64 {
			g, err := evaluate(x)
			if err != nil {
				failed = err
				return math.Inf(1)
			}
			return g.Value
		},
		Grad: func(dst, x []float64) {
			g, err := evaluate(x)
			if err != nil {
				failed = err
				return
			}
			count := len(w.wavelength)
			for j := range films {
				dst[j] = floats.Sum(g.N[j*count : (j+1)*count])
				dst[films+j] = scale * g.Thickness[j] * math.Copysign(1, x[films+j])
			}
		},
	}
	x := append([]float64(nil), index...)
	for _, t := range thickness {
		x = append(x, t/scale)
	}
	result, err := optimize.Minimize(problem, x, &optimize.Settings{GradientThreshold: 1e-9}, &optimize.BFGS{})
	if err == nil {
		err = failed
	}
	if err != nil {
		return nil, nil, fmt.Errorf("optimum: %w", err)
	}
	for j := range films {
		d = append(d, scale*math.Abs(result.X[films+j]))
	}
	return result.X[:films], d, nil
}

// judge fills in what the films of a sweep do.
func (w *wafer) judge(d *design, s optics.Sweep, spread float64) error {
	take := func(factor float64) (reflected, absorbed float64, r optics.SweepResponse, err error) {
		t := s
		t.Thickness = append([]float64(nil), d.thickness...)
		floats.Scale(factor, t.Thickness)
		r, err = t.Run()
		if err != nil {
			return 0, 0, r, err
		}
		for j := range t.Thickness {
			absorbed += floats.Dot(w.weights, r.A[j*len(w.weights):(j+1)*len(w.weights)])
		}
		return floats.Dot(w.weights, r.R), absorbed, r, nil
	}
	var err error
	if d.thinner, _, _, err = take(1 - spread); err != nil {
		return err
	}
	if d.thicker, _, _, err = take(1 + spread); err != nil {
		return err
	}
	var r optics.SweepResponse
	if d.reflected, d.absorbed, r, err = take(1); err != nil {
		return err
	}
	if w.wavelength[0] > 380 || w.wavelength[len(w.wavelength)-1] < 780 {
		return nil // no colour without the visible
	}
	d.colour, err = spectrum.Colour(w.wavelength, r.R)
	return err
}

// designs returns the best constant films and the best thickness of published
// nitrides, for which what is lost in the film counts too.
func (w *wafer) designs(spread float64) ([]design, error) {
	var all []design
	for _, start := range []design{
		{name: "best single layer", index: []float64{2}, thickness: []float64{75}},
		{name: "best double layer", index: []float64{1.5, 2.4}, thickness: []float64{100, 60}},
	} {
		d := design{name: start.name}
		var err error
		if d.index, d.thickness, err = w.best(start.index, start.thickness); err != nil {
			return nil, err
		}
		s, err := w.sweep(d.index, d.thickness)
		if err == nil {
			err = w.judge(&d, s, spread)
		}
		if err != nil {
			return nil, err
		}
		all = append(all, d)
	}
	for _, name := range []string{"sinx191_vogt2015", "sinx209_vogt2015", "sinx213_vogt2015"} {
		d, err := w.nitride(name, spread)
		if err != nil {
			return nil, err
		}
		all = append(all, d)
	}
	return all, nil
}

// nitride finds the thickness of a published nitride that lets most photons into
// the wafer, by the sign of the derivative of that share.
func (w *wafer) nitride(name string, spread float64) (design, error) {
	material, err := nk.Material(name)
	if err != nil {
		return design{}, err
	}
	index, err := material.Sample(nil, w.wavelength)
	if err != nil {
		return design{}, err
	}
	n633, err := material.At(633)
	if err != nil {
		return design{}, err
	}
	s, err := w.sweep([]float64{1}, []float64{0})
	if err == nil {
		err = s.SetFilm(0, index, 75)
	}
	if err != nil {
		return design{}, err
	}
	slope := func(d float64) (float64, error) {
		s.Thickness[0] = d
		_, g, err := s.Gradient(&optics.SweepWeights{T: w.weights})
		if err != nil {
			return 0, err
		}
		return g.Thickness[0], nil
	}
	// That share has one maximum between 40 nm and 120 nm.
	lo, hi := 40.0, 120.0
	for hi-lo > 1e-6 {
		mid := 0.5 * (lo + hi)
		g, err := slope(mid)
		if err != nil {
			return design{}, err
		}
		if g > 0 {
			lo = mid
		} else {
			hi = mid
		}
	}
	d := design{name: name, index: []float64{real(n633)}, thickness: []float64{lo}}
	return d, w.judge(&d, s, spread)
}
