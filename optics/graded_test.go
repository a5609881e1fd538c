package optics

import (
	"errors"
	"math"
	"math/cmplx"
	"testing"
)

// rayleighLayer returns the reflectance at normal incidence of a film whose
// index is n = c/(z+b) between lossless half spaces, in closed form: the field
// is (z+b)^p with p(p-1) = -(k0 c)² (Lord Rayleigh, Proc. London Math. Soc. 11,
// 51 (1880); the equation E” + k0² n² E = 0 is solved by insertion).
func rayleighLayer(n0, ns, c, b, d, k0 float64) float64 {
	root := cmplx.Sqrt(complex(0.25-k0*k0*c*c, 0))
	p1, p2 := 0.5+root, 0.5-root
	field := func(z float64, p complex128) (e, slope complex128) {
		e = cmplx.Pow(complex(z+b, 0), p)
		return e, p * e / complex(z+b, 0)
	}
	// E = A e1 + B e2 with E' = i k0 ns E at the back.
	ik := complex(0, k0)
	e1, s1 := field(d, p1)
	e2, s2 := field(d, p2)
	a, bb := s2-ik*complex(ns, 0)*e2, -(s1 - ik*complex(ns, 0)*e1)
	e1, s1 = field(0, p1)
	e2, s2 = field(0, p2)
	e, s := a*e1+bb*e2, (a*s1+bb*s2)/ik // E and the tangential magnetic field
	r := (complex(n0, 0)*e - s) / (complex(n0, 0)*e + s)
	return square(r)
}

func TestGradedFilm(t *testing.T) {
	const n0, ns, d, lambda = 1.0, 3.5, 300.0, 600.0
	const b = 700.0
	c := 3.0 * b // index 3 at the lit face, 2.1 at the back
	index := func(z float64) complex128 { return complex(c/(z+b), 0) }
	want := rayleighLayer(n0, ns, c, b, d, 2*math.Pi/lambda)
	w := Wave{Wavelength: lambda}

	// The error falls by four with every doubling.
	last := 0.0
	for slices := 8; slices <= 512; slices *= 2 {
		films, err := Grade(nil, index, d, slices)
		if err != nil {
			t.Fatal(err)
		}
		dev := math.Abs(solve(t, Stack{Front: n0, Back: ns, Films: films}, w).R - want)
		if last > 0 {
			if order := math.Log2(last / dev); math.Abs(order-2) > 0.05 {
				t.Errorf("%d slices: error %.3g, order %.2f, want 2", slices, dev, order)
			}
		}
		last = dev
	}
	var s Solver
	var r Response
	for _, tol := range []float64{1e-4, 1e-6, 1e-8} {
		slices, bound, err := s.SolveGraded(&r, Stack{Front: n0, Back: ns}, GradedFilm{Index: index, Thickness: d}, w, tol)
		if err != nil {
			t.Fatal(err)
		}
		near(t, "R", r.R, want, tol)
		if !(math.Abs(r.R-want) <= 1.5*bound) || bound > tol || len(r.A) != 1 {
			t.Errorf("tolerance %g: %d slices, bound %g, error %g", tol, slices, bound, math.Abs(r.R-want))
		}
	}
}

// TestGradedConstant: a film that does not vary is the film, between others.
func TestGradedConstant(t *testing.T) {
	st := Stack{Front: 1, Back: 3.5, Films: []Film{{Index: 1.46, Thickness: 90}, {Index: 2.2 + 0.1i, Thickness: 70}}}
	w := Wave{Wavelength: 500, Angle: 0.7, Polarization: P}
	full := st
	full.Films = []Film{st.Films[0], {Index: 1.8 + 0.02i, Thickness: 50}, st.Films[1]}
	want := solve(t, full, w)
	var s Solver
	var r Response
	if _, _, err := s.SolveGraded(&r, st, GradedFilm{Index: func(float64) complex128 { return 1.8 + 0.02i }, Thickness: 50, Before: 1}, w, 1e-10); err != nil {
		t.Fatal(err)
	}
	near(t, "R", r.R, want.R, 1e-14)
	for j := range want.A {
		near(t, "A", r.A[j], want.A[j], 1e-14)
	}
	for _, g := range []GradedFilm{
		{Thickness: 50}, {Index: func(float64) complex128 { return -1 }, Thickness: 50},
		{Index: func(float64) complex128 { return 1 }, Thickness: -1}, {Index: func(float64) complex128 { return 1 }, Before: 3},
	} {
		if _, _, err := s.SolveGraded(&r, st, g, w, 1e-6); !errors.Is(err, ErrInput) {
			t.Errorf("%+v: error %v", g, err)
		}
	}
}
