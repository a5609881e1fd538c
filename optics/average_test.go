package optics

import (
	"errors"
	"math"
	"testing"
)

// airyMean is the mean of the Airy transmittance 1/(1 + F sin²φ) over a
// uniform spread of φ about φ0 with half width h, in closed form: the integral
// is arctan(sqrt(1+F) tan φ)/sqrt(1+F), continued over its branches.
func airyMean(f, phi0, h float64) float64 {
	root := math.Sqrt(1 + f)
	integral := func(phi float64) float64 {
		n := math.Round(phi / math.Pi)
		return (math.Atan(root*math.Tan(phi-n*math.Pi)) + n*math.Pi) / root
	}
	return (integral(phi0+h) - integral(phi0-h)) / (2 * h)
}

// TestAverageThickness: a lossless plate in air obeys the Airy formula, whose
// mean over a uniform spread of phase is elementary; the limits are the
// coherent and the incoherent plate.
func TestAverageThickness(t *testing.T) {
	const n, lambda, d = 3.0, 600.0, 5e3
	r1 := (n - 1) * (n - 1) / ((n + 1) * (n + 1))
	f := 4 * r1 / ((1 - r1) * (1 - r1))
	st := Stack{Front: 1, Back: 1, Films: []Film{{Index: n, Thickness: d}}}
	w := Wave{Wavelength: lambda}
	var s Solver
	var r Response
	for _, width := range []float64{1e-3, 1, 20, 77, 100, 1234.5, 9000} {
		if err := s.AverageThickness(&r, st, w, 0, Spread{Width: width}); err != nil {
			t.Fatal(err)
		}
		k := 2 * math.Pi / lambda * n
		near(t, "mean T", r.T, airyMean(f, k*d, k*width/2), 1e-9)
		near(t, "R+T", r.R+r.T, 1, 1e-12)
	}
	if err := s.AverageThickness(&r, st, w, 0, Spread{}); err != nil {
		t.Fatal(err)
	}
	near(t, "coherent limit", r.T, solve(t, st, w).T, 0)
	if err := s.AverageThickness(&r, st, w, 0, Spread{Distribution: Gaussian, Width: 300}); err != nil {
		t.Fatal(err)
	}
	near(t, "incoherent limit", r.R, 2*r1/(1+r1), 1e-9)
}

// TestAverageWavelength: the band of a plate approaches the incoherent plate,
// and a narrow one the coherent plate.
func TestAverageWavelength(t *testing.T) {
	const n, lambda, d = 1.5, 600.0, 200e3
	r1 := (n - 1) * (n - 1) / ((n + 1) * (n + 1))
	st := Stack{Front: 1, Back: 1, Films: []Film{{Index: n, Thickness: d}}}
	at := func(float64) (Stack, error) { return st, nil }
	var s Solver
	var r Response
	w := Wave{Wavelength: lambda}
	if err := s.AverageWavelength(&r, at, w, Spread{Distribution: Gaussian, Width: 5}); err != nil {
		t.Fatal(err)
	}
	near(t, "wide band", r.R, 2*r1/(1+r1), 1e-8)
	if err := s.AverageWavelength(&r, at, w, Spread{Width: 1e-6}); err != nil {
		t.Fatal(err)
	}
	near(t, "narrow band", r.R, solve(t, st, w).R, 1e-7)
	broken := errors.New("no data")
	if err := s.AverageWavelength(&r, func(float64) (Stack, error) { return st, broken }, w, Spread{Width: 1}); !errors.Is(err, broken) {
		t.Errorf("error of the stack function: %v", err)
	}
}

func TestAverageErrors(t *testing.T) {
	st := Stack{Front: 1, Back: 1, Films: []Film{{Index: 1.5, Thickness: 100}, {Index: 1.5, Thickness: 1e6, Incoherent: true}}}
	w := Wave{Wavelength: 600}
	var s Solver
	var r Response
	for _, c := range []struct {
		film   int
		spread Spread
	}{
		{-1, Spread{Width: 1}}, {2, Spread{Width: 1}}, {1, Spread{Width: 1}}, {0, Spread{Width: -1}}, {0, Spread{Width: math.NaN()}},
		{0, Spread{Width: 201}}, {0, Spread{Distribution: Gaussian, Width: 13}}, {0, Spread{Distribution: 9}}, {0, Spread{Width: 1, Tolerance: -1}},
	} {
		if err := s.AverageThickness(&r, st, w, c.film, c.spread); !errors.Is(err, ErrInput) {
			t.Errorf("film %d %+v: error %v", c.film, c.spread, err)
		}
	}
}
