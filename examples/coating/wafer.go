package main

import (
	"math"

	"gonum.org/v1/gonum/floats"

	"photonledger/nk"
	"photonledger/optics"
	"photonledger/spectrum"
)

// grid is a set of wavelengths with the silicon behind the coating.
type grid struct {
	wavelength []float64 // nm
	silicon    []complex128
}

// wafer is planar silicon, taken as thick: what enters it does not come back.
type wafer struct {
	grid
	weights  []float64 // photons of each wavelength, their sum 1
	incident float64   // mA/cm² of one electron per photon
	visible  grid
	eye      spectrum.Colorimeter
}

// film is one film of a coating: of a published material, or of a constant index.
type film struct {
	material  string          // empty for a constant index
	table     *nk.Interpolant // of the material
	index     float64         // constant, or that of the material at 633 nm
	thickness float64         // nm
}

// coating is a stack of films, from outside, and what it does; shares of the
// photons.
type coating struct {
	name                         string
	films                        []film
	reflected, absorbed, entered float64
	thinner, thicker, worst      float64 // entered, with all films thinner, all thicker, or the worst mixture
	colour                       spectrum.Tristimulus
	spectrum, low, high          []float64 // reflectance, and its lowest and highest values for these thicknesses
}

func newWafer(o options) (*wafer, error) {
	w := &wafer{}
	for l := o.first; l < o.last; l++ {
		w.wavelength = append(w.wavelength, l)
	}
	w.wavelength = append(w.wavelength, o.last)
	for l := violet; l <= red; l += 5 {
		w.visible.wavelength = append(w.visible.wavelength, l)
	}
	silicon, err := nk.Material("si_green2008")
	if err != nil {
		return nil, err
	}
	if w.silicon, err = silicon.Sample(nil, w.wavelength); err != nil {
		return nil, err
	}
	if w.visible.silicon, err = silicon.Sample(nil, w.visible.wavelength); err != nil {
		return nil, err
	}
	if err := w.eye.Prepare(w.visible.wavelength); err != nil {
		return nil, err
	}
	if w.weights, err = spectrum.Weights(nil, spectrum.AM15G(), w.wavelength, spectrum.Photons); err != nil {
		return nil, err
	}
	w.incident = floats.Sum(w.weights)
	floats.Scale(1/w.incident, w.weights)
	return w, nil
}

// newFilm is a film of a published material.
func newFilm(material string) (film, error) {
	f := film{material: material}
	var err error
	if f.table, err = nk.Material(material); err != nil {
		return f, err
	}
	n, err := f.table.At(633)
	f.index = real(n)
	return f, err
}

// sweep lays films on the silicon of a grid.
func (g *grid) sweep(films []film) (optics.Sweep, error) {
	s := optics.NewSweep(g.wavelength, len(films))
	s.Workers = 0
	index := make([]complex128, len(g.wavelength))
	for j, f := range films {
		for i := range index {
			index[i] = complex(f.index, 0)
		}
		if f.table != nil {
			if _, err := f.table.Sample(index, g.wavelength); err != nil {
				return s, err
			}
		}
		if err := s.SetFilm(j, index, f.thickness); err != nil {
			return s, err
		}
	}
	return s, s.SetBack(g.silicon)
}

// judge fills in what a coating does.
func (w *wafer) judge(c *coating, spread float64) error {
	s, err := w.sweep(c.films)
	if err != nil {
		return err
	}
	r, err := s.Run()
	if err != nil {
		return err
	}
	c.reflected, c.entered = floats.Dot(w.weights, r.R), floats.Dot(w.weights, r.T)
	c.absorbed = 0
	for j := range c.films {
		c.absorbed += floats.Dot(w.weights, r.A[j*len(w.weights):(j+1)*len(w.weights)])
	}
	c.spectrum = r.R
	c.worst = c.entered
	c.low, c.high = append([]float64(nil), r.R...), append([]float64(nil), r.R...)
	// Every film thinner or thicker, in all mixtures: bit j stands for film j.
	for mixture := range 1 << len(c.films) {
		for j, f := range c.films {
			s.Thickness[j] = f.thickness * (1 - spread)
			if mixture>>j&1 == 1 {
				s.Thickness[j] = f.thickness * (1 + spread)
			}
		}
		if r, err = s.Run(); err != nil {
			return err
		}
		entered := floats.Dot(w.weights, r.T)
		if mixture == 0 {
			c.thinner = entered
		}
		c.thicker = entered // the last one stays
		c.worst = min(c.worst, entered)
		for i, v := range r.R {
			c.low[i], c.high[i] = min(c.low[i], v), max(c.high[i], v)
		}
	}
	c.colour, err = w.look(c.films)
	return err
}

// look returns the colour of the wafer in daylight, at normal incidence.
func (w *wafer) look(films []film) (spectrum.Tristimulus, error) {
	s, err := w.visible.sweep(films)
	if err != nil {
		return spectrum.Tristimulus{}, err
	}
	r, err := s.Run()
	if err != nil {
		return spectrum.Tristimulus{}, err
	}
	return w.eye.Colour(r.R)
}

// chart is the weighted reflectance of one film over thickness and index, and the
// colours of the wafer under the films of the table.
type chart struct {
	thickness, index []float64
	reflected        [][]float64 // [index][thickness]
	films            []film
	colours          [][]spectrum.Tristimulus // [film][thickness]
}

func (w *wafer) chart(o options) (*chart, error) {
	m := &chart{thickness: floats.Span(make([]float64, 81), 40, 200), index: floats.Span(make([]float64, 71), 1.4, 2.8)}
	s, err := w.sweep([]film{{index: 1}})
	if err != nil {
		return nil, err
	}
	var sweeper optics.Sweeper
	var r optics.SweepResponse
	for _, n := range m.index {
		row := make([]float64, len(m.thickness))
		for i := range s.N {
			s.N[i] = n
		}
		for c, d := range m.thickness {
			s.Thickness[0] = d
			if err := sweeper.Run(&r, &s); err != nil {
				return nil, err
			}
			row[c] = floats.Dot(w.weights, r.R)
		}
		m.reflected = append(m.reflected, row)
	}
	for _, name := range o.inner() {
		f, err := newFilm(name)
		if err != nil {
			return nil, err
		}
		row := make([]spectrum.Tristimulus, len(m.thickness))
		for c, d := range m.thickness {
			f.thickness = d
			if row[c], err = w.look([]film{f}); err != nil {
				return nil, err
			}
		}
		m.films, m.colours = append(m.films, f), append(m.colours, row)
	}
	return m, nil
}

// Dims, X, Y and Z make the chart a grid of gonum/plot.
func (m *chart) Dims() (c, r int)   { return len(m.thickness), len(m.index) }
func (m *chart) X(c int) float64    { return m.thickness[c] }
func (m *chart) Y(r int) float64    { return m.index[r] }
func (m *chart) Z(c, r int) float64 { return m.reflected[r][c] }

// least is the smallest value of the chart.
func (m *chart) least() float64 {
	least := math.Inf(1)
	for _, row := range m.reflected {
		least = min(least, floats.Min(row))
	}
	return least
}
