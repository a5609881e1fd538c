package optics

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/integrate/quad"
)

// Distribution is the shape of a [Spread].
type Distribution int

// The distributions. Width is the full width of a uniform and the standard
// deviation of a Gaussian distribution, which is cut at eight of them.
const (
	Uniform Distribution = iota
	Gaussian
)

// Spread describes how a thickness or a wavelength varies over what a
// measurement sees at once.
type Spread struct {
	Distribution Distribution
	Width        float64 // nm, >= 0
	Tolerance    float64 // of every share; 0 stands for 1e-9
}

const (
	gaussianCut   = 8  // standard deviations; the tails beyond hold 1e-15
	panelNodes    = 16 // Gauss-Legendre nodes of a panel
	maxPanels     = 1 << 14
	defaultSpread = 1e-9
)

// AverageThickness stores in dst the mean response of st over a spread of the
// thickness of one coherent film: partial coherence. A width of 0 gives the
// coherent response; a width of many half waves in the film approaches the
// response with that film incoherent.
//
// The mean is a true one, by Gauss-Legendre quadrature in panels that are
// halved until two results agree within the tolerance. An error wraps
// [ErrInput]: values out of range, a spread that reaches below zero thickness,
// or one so wide that the quadrature does not settle (mark the film Incoherent
// instead).
func (s *Solver) AverageThickness(dst *Response, st Stack, w Wave, film int, spread Spread) error {
	if film < 0 || film >= len(st.Films) {
		return fmt.Errorf("optics: average: film %d: there are %d films: %w", film, len(st.Films), ErrInput)
	}
	if st.Films[film].Incoherent {
		return fmt.Errorf("optics: average: film %d is incoherent already: %w", film, ErrInput)
	}
	films := append(s.films[:0], st.Films...)
	s.films = films
	st.Films = films
	mean := films[film].Thickness
	// Fringes of the film: one for every half wave of thickness.
	period := w.Wavelength / (2 * max(real(films[film].Index), 1e-3))
	return s.average(dst, mean, spread, period, func(d float64) error {
		films[film].Thickness = d
		return s.Solve(&s.sample, st, w)
	})
}

// AverageWavelength stores in dst the mean response over a spread of the vacuum
// wavelength about w.Wavelength: a finite bandwidth. at gives the stack at a
// wavelength (nm), with the dispersion of its media. Errors are those of at, or
// wrap [ErrInput] as in [Solver.AverageThickness].
func (s *Solver) AverageWavelength(dst *Response, at func(wavelength float64) (Stack, error), w Wave, spread Spread) error {
	st, err := at(w.Wavelength)
	if err != nil {
		return err
	}
	path := 0.0
	for _, f := range st.Films {
		if !f.Incoherent {
			path += real(f.Index) * f.Thickness
		}
	}
	mean := w.Wavelength
	// One fringe of the whole stack: λ²/(2 Σ n d).
	period := mean * mean / max(2*path, mean)
	return s.average(dst, mean, spread, period, func(lambda float64) error {
		st, err := at(lambda)
		if err != nil {
			return err
		}
		w.Wavelength = lambda
		return s.Solve(&s.sample, st, w)
	})
}

// average integrates the responses that solve leaves in s.sample over the
// spread. period is the distance of fringes, which sets the first panels.
func (s *Solver) average(dst *Response, mean float64, spread Spread, period float64, solve func(x float64) error) error {
	tol := spread.Tolerance
	if tol == 0 {
		tol = defaultSpread
	}
	half := 0.5 * spread.Width
	if spread.Distribution == Gaussian {
		half = gaussianCut * spread.Width
	}
	switch {
	case spread.Distribution != Uniform && spread.Distribution != Gaussian:
		return fmt.Errorf("optics: average: unknown distribution %d: %w", int(spread.Distribution), ErrInput)
	case !(spread.Width >= 0) || math.IsInf(spread.Width, 1):
		return fmt.Errorf("optics: average: width %g nm is negative or not a number: %w", spread.Width, ErrInput)
	case !(tol > 0):
		return fmt.Errorf("optics: average: tolerance %g is not positive: %w", tol, ErrInput)
	case half > mean:
		return fmt.Errorf("optics: average: a width of %g nm about %g nm reaches below zero: %w", spread.Width, mean, ErrInput)
	}
	if spread.Width == 0 {
		if err := solve(mean); err != nil {
			return err
		}
		dst.set(&s.sample, 1)
		return nil
	}
	panels := max(2, int(math.Min(2*half/period/2, maxPanels)))
	if err := s.panels(dst, mean, half, spread, panels, solve); err != nil {
		return err
	}
	for panels *= 2; panels <= maxPanels; panels *= 2 {
		s.last.set(dst, 1)
		if err := s.panels(dst, mean, half, spread, panels, solve); err != nil {
			return err
		}
		if dst.distance(&s.last) <= tol {
			return nil
		}
	}
	return fmt.Errorf("optics: average: a width of %g nm holds too many fringes for a tolerance of %g: %w", spread.Width, tol, ErrInput)
}

// panels stores the mean with a given number of panels in dst.
func (s *Solver) panels(dst *Response, mean, half float64, spread Spread, panels int, solve func(x float64) error) error {
	if len(s.nodes) == 0 {
		s.nodes, s.weights = make([]float64, panelNodes), make([]float64, panelNodes)
		quad.Legendre{}.FixedLocations(s.nodes, s.weights, -1, 1)
	}
	total := 0.0
	for p := range panels {
		lo, width := mean-half+2*half*float64(p)/float64(panels), 2*half/float64(panels)
		for i, node := range s.nodes {
			x := lo + 0.5*width*(1+node)
			weight := s.weights[i]
			if spread.Distribution == Gaussian {
				z := (x - mean) / spread.Width
				weight *= math.Exp(-0.5 * z * z)
			}
			if err := solve(x); err != nil {
				return err
			}
			if total == 0 {
				dst.set(&s.sample, weight)
			} else {
				dst.add(&s.sample, weight)
			}
			total += weight
		}
	}
	dst.R /= total
	dst.T /= total
	for j := range dst.A {
		dst.A[j] /= total
	}
	return nil
}

func (r *Response) set(from *Response, weight float64) {
	r.R, r.T = weight*from.R, weight*from.T
	r.A = grow(r.A, len(from.A))
	for j, a := range from.A {
		r.A[j] = weight * a
	}
}

func (r *Response) add(from *Response, weight float64) {
	r.R += weight * from.R
	r.T += weight * from.T
	for j, a := range from.A {
		r.A[j] += weight * a
	}
}

// distance returns the largest difference of any share.
func (r *Response) distance(to *Response) float64 {
	d := max(math.Abs(r.R-to.R), math.Abs(r.T-to.T))
	for j, a := range r.A {
		d = max(d, math.Abs(a-to.A[j]))
	}
	return d
}
