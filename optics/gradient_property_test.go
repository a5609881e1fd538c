package optics

import (
	"errors"
	"math"
	"math/rand/v2"
	"slices"
	"testing"
)

// largest returns the largest modulus, thicknesses taken in wavelengths.
func (g Gradient) largest(wavelength float64) float64 {
	m := 0.0
	for i, v := range g.flat() {
		if i < len(g.Thickness) {
			v *= wavelength
		}
		m = math.Max(m, math.Abs(v))
	}
	return m
}

// TestGradientClosure: R + T + sum A = 1 whatever the stack is.
func TestGradientClosure(t *testing.T) {
	rnd := rand.New(rand.NewPCG(3, 4))
	var s GradientSolver
	var jac Jacobian
	var r Response
	for c := range 1000 {
		st, w := randomGradientCase(rnd, c%2 == 1)
		if err := s.Jacobian(&jac, &r, st, w); err != nil {
			t.Fatal(err)
		}
		sum, top := jac.R.flat(), jac.R.largest(w.Wavelength)
		for _, g := range append([]Gradient{jac.T}, jac.A...) {
			top = math.Max(top, g.largest(w.Wavelength))
			for i, v := range g.flat() {
				sum[i] += v
			}
		}
		for i, v := range sum {
			if i < len(st.Films) {
				v *= w.Wavelength
			}
			if !(math.Abs(v) <= 1e-12*top) {
				t.Errorf("case %d: the derivatives of all shares by variable %d add up to %g, the largest is %g", c, i, v, top)
			}
		}
	}
}

// TestGradientScale: a stack and a wave ten times as large respond alike, so
// the derivatives by all thicknesses, weighted with them, and that by the
// wavelength add up to 0 (Euler). The latter is a difference quotient.
func TestGradientScale(t *testing.T) {
	rnd := rand.New(rand.NewPCG(5, 6))
	for c := range 200 {
		st, w := randomGradientCase(rnd, false)
		wt := randomWeights(rnd, len(st.Films))
		_, g, err := SolveGradient(st, w, wt)
		if err != nil {
			t.Fatal(err)
		}
		sum := 0.0
		for j, f := range st.Films {
			sum += f.Thickness * g.Thickness[j]
		}
		// Fourth order.
		h := 1e-4 * w.Wavelength
		quotient := 0.0
		for i, k := range []float64{1, -8, 8, -1} {
			at := w
			at.Wavelength += h * []float64{-2, -1, 1, 2}[i]
			r, err := Solve(st, at)
			if err != nil {
				t.Fatal(err)
			}
			quotient += k * wt.of(r)
		}
		sum += w.Wavelength * quotient / (12 * h)
		if scale := g.largest(w.Wavelength) + 1; !(math.Abs(sum) <= 1e-5*scale) {
			t.Errorf("case %d: %g is left of %g", c, sum, scale)
		}
	}
}

// TestGradientLossless: where k = 0 the absorptance of a film is 0, whatever the
// rest is, and only its derivative by its own k differs from 0. In a matched
// film of the wave at normal incidence it is that of 1 - exp(-4πkd/λ).
func TestGradientLossless(t *testing.T) {
	rnd := rand.New(rand.NewPCG(7, 8))
	for c := range 300 {
		st, w := randomGradientCase(rnd, c%2 == 1)
		j := rnd.IntN(len(st.Films))
		st.Films[j].Index = complex(real(st.Films[j].Index), 0)
		wt := Weights{A: make([]float64, len(st.Films))}
		wt.A[j] = 1
		_, g, err := SolveGradient(st, w, wt)
		if err != nil {
			t.Fatal(err)
		}
		own := g.K[j]
		if !(own >= 0) {
			t.Errorf("case %d: dA/dk = %g of a lossless film", c, own)
		}
		g.K[j] = 0
		if rest := g.largest(w.Wavelength); !(rest <= 1e-14*own) {
			t.Errorf("case %d: the absorptance of a lossless film changes by %g, dA/dk = %g", c, rest, own)
		}
	}
	for _, incoherent := range []bool{false, true} {
		st := Stack{Front: 1.5, Films: []Film{{Index: 1.5, Thickness: 2000, Incoherent: incoherent}}, Back: 1.5}
		_, jac, err := SolveJacobian(st, Wave{Wavelength: 500})
		if err != nil {
			t.Fatal(err)
		}
		want := 4 * math.Pi * 2000 / 500
		if got := jac.A[0].K[0]; math.Abs(got-want) > 1e-12*want {
			t.Errorf("incoherent %v: dA/dk = %.15g, want 4πd/λ = %.15g", incoherent, got, want)
		}
		if got := jac.T.K[0]; math.Abs(got+want) > 1e-12*want {
			t.Errorf("incoherent %v: dT/dk = %.15g, want %.15g", incoherent, got, -want)
		}
	}
}

// TestGradientAbsent: a film of no thickness changes nothing by its index, and
// cutting a film in two shares its derivatives out.
func TestGradientAbsent(t *testing.T) {
	rnd := rand.New(rand.NewPCG(9, 10))
	for c := range 200 {
		st, w := randomGradientCase(rnd, false)
		wt := Weights{R: 1, T: -0.5}
		_, whole, err := SolveGradient(st, w, wt)
		if err != nil {
			t.Fatal(err)
		}
		j := rnd.IntN(len(st.Films))
		for _, part := range []float64{0, 0.3} {
			cut := st
			cut.Films = slices.Insert(slices.Clone(st.Films), j, st.Films[j])
			cut.Films[j].Thickness *= part
			cut.Films[j+1].Thickness *= 1 - part
			_, g, err := SolveGradient(cut, w, wt)
			if err != nil {
				t.Fatal(err)
			}
			top := whole.largest(w.Wavelength)
			for _, v := range [][3]float64{
				{g.Thickness[j] * w.Wavelength, whole.Thickness[j] * w.Wavelength, 1},
				{g.Thickness[j+1] * w.Wavelength, whole.Thickness[j] * w.Wavelength, 1},
				{g.N[j] + g.N[j+1], whole.N[j], 1}, {g.K[j] + g.K[j+1], whole.K[j], 1}, {g.BackN, whole.BackN, 1},
			} {
				if !(math.Abs(v[0]-v[1]) <= 1e-12*top) {
					t.Errorf("case %d, part %g: %.15g, want %.15g; the largest is %g", c, part, v[0], v[1], top)
				}
			}
			if part == 0 && (g.N[j] != 0 || g.K[j] != 0) {
				t.Errorf("case %d: derivatives %g, %g by the index of a film of no thickness", c, g.N[j], g.K[j])
			}
		}
	}
}

// TestGradientPlate: the closed form of the incoherent plate, R = 2r/(1+r),
// r = ((n-1)/(n+1))²; derived: dR/dn = 2/(1+r)² · 4(n-1)/(n+1)³ when the plate's
// index moves.
func TestGradientPlate(t *testing.T) {
	for _, n := range []float64{1.5, 1.52, 3.5} {
		st := Stack{Front: 1, Films: []Film{{Index: complex(n, 0), Thickness: 1e6, Incoherent: true}}, Back: 1}
		r, g, err := SolveGradient(st, Wave{Wavelength: 600}, Weights{R: 1})
		if err != nil {
			t.Fatal(err)
		}
		r1 := (n - 1) * (n - 1) / ((n + 1) * (n + 1))
		want := 8 * (n - 1) / ((n + 1) * (n + 1) * (n + 1) * (1 + r1) * (1 + r1))
		if math.Abs(r.R-2*r1/(1+r1)) > 1e-15 || math.Abs(g.N[0]-want) > 1e-14 || g.Thickness[0] != 0 {
			t.Errorf("n = %g: R = %g, dR/dn = %.15g, want %.15g, dR/dd = %g", n, r.R, g.N[0], want, g.Thickness[0])
		}
	}
}

// TestGradientManyFilms: 200 films that let 1e-80 of the light through, so that
// their fields leave the range of a double unless they are rescaled, against
// difference quotients of the logarithm of the transmittance.
func TestGradientManyFilms(t *testing.T) {
	st := Stack{Front: 1, Back: 1.52}
	for j := range 200 {
		n := complex(3.5, 1e-5)
		if j%2 == 1 {
			n = 1.3
		}
		st.Films = append(st.Films, Film{Index: n, Thickness: 550 / (4 * real(n))})
	}
	for _, pol := range []Polarization{S, P} {
		w := Wave{Wavelength: 560, Angle: 0.3, Polarization: pol}
		r, g, err := SolveGradient(st, w, Weights{T: 1})
		if err != nil {
			t.Fatal(err)
		}
		if !(r.T > 0 && r.T < 1e-70) {
			t.Errorf("T = %g, want about 1e-80", r.T)
		}
		for _, j := range []int{0, 1, 40, 77, 120, 198, 199} {
			d, h := st.Films[j].Thickness, 1e-3
			at := func(x float64) float64 {
				st.Films[j].Thickness = x
				r, err := Solve(st, w)
				if err != nil {
					t.Fatal(err)
				}
				return math.Log(r.T)
			}
			want := (at(d+h) - at(d-h)) / (2 * h)
			st.Films[j].Thickness = d
			if got := g.Thickness[j] / r.T; !(math.Abs(got-want) <= 1e-8) {
				t.Errorf("%v, film %d: d log T = %g per nm, difference quotient %g", pol, j, got, want)
			}
		}
		at := func(n float64) float64 {
			behind := st
			behind.Back = complex(n, 0)
			r, err := Solve(behind, w)
			if err != nil {
				t.Fatal(err)
			}
			return math.Log(r.T)
		}
		want := (at(1.52+1e-5) - at(1.52-1e-5)) / 2e-5
		if got := g.BackN / r.T; !(math.Abs(got-want) <= 1e-8) {
			t.Errorf("%v: d log T = %g by n of the back medium, difference quotient %g", pol, got, want)
		}
	}
}

// TestGradientLongPath: a film of 10^8 rad. An opaque one acts as a back
// medium of its index; a clear one is the same as its two halves.
func TestGradientLongPath(t *testing.T) {
	const d = 1e8 * 500 / (2 * math.Pi)
	for _, pol := range []Polarization{S, P} {
		w := Wave{Wavelength: 500, Angle: 0.7, Polarization: pol}
		for _, n := range []complex128{1.5 + 0.01i, 0.3 + 3i} {
			film := Film{Index: n, Thickness: d}
			_, g, err := SolveGradient(Stack{Front: 1, Films: []Film{film}, Back: 1.5}, w, Weights{R: 1})
			if err != nil {
				t.Fatal(err)
			}
			_, bare, err := SolveGradient(Stack{Front: 1, Back: n}, w, Weights{R: 1})
			if err != nil {
				t.Fatal(err)
			}
			if math.Abs(g.N[0]-bare.BackN) > 1e-14 || math.Abs(g.K[0]-bare.BackK) > 1e-14 || math.Abs(g.Thickness[0])*500 > 1e-14 {
				t.Errorf("%v %v: %g, %g, %g, want %g, %g, 0", pol, n, g.N[0], g.K[0], g.Thickness[0], bare.BackN, bare.BackK)
			}
		}
		clear := Film{Index: 1.5, Thickness: d}
		half := Film{Index: 1.5, Thickness: d / 2}
		_, g, err := SolveGradient(Stack{Front: 1, Films: []Film{clear}, Back: 3.5}, w, Weights{R: 1})
		if err != nil {
			t.Fatal(err)
		}
		_, h, err := SolveGradient(Stack{Front: 1, Films: []Film{half, half}, Back: 3.5}, w, Weights{R: 1})
		if err != nil {
			t.Fatal(err)
		}
		if got, want := h.N[0]+h.N[1], g.N[0]; math.Abs(got-want) > 1e-10*math.Abs(want) {
			t.Errorf("%v: dR/dn = %g of the halves, %g of the whole", pol, got, want)
		}
		if got, want := h.Thickness[1], g.Thickness[0]; math.Abs(got-want) > 1e-10*math.Abs(want) {
			t.Errorf("%v: dR/dd = %g of the half, %g of the whole", pol, got, want)
		}
	}
}

func TestGradientErrors(t *testing.T) {
	st := Stack{Front: 1, Films: []Film{{Index: 1.5, Thickness: 100}}, Back: 3.5}
	w := Wave{Wavelength: 500}
	nan := math.NaN()
	for name, f := range map[string]func() error{
		"weights of two films": func() error { _, _, err := SolveGradient(st, w, Weights{A: []float64{1, 2}}); return err },
		"NaN weight of R":      func() error { _, _, err := SolveGradient(st, w, Weights{R: nan}); return err },
		"infinite weight of T": func() error { _, _, err := SolveGradient(st, w, Weights{T: math.Inf(1)}); return err },
		"NaN weight of A":      func() error { _, _, err := SolveGradient(st, w, Weights{A: []float64{nan}}); return err },
		"bad wave":             func() error { _, _, err := SolveGradient(st, Wave{}, Weights{R: 1}); return err },
		"bad stack":            func() error { _, _, err := SolveJacobian(Stack{}, w); return err },
		"short sweep weights": func() error {
			s := NewSweep([]float64{500, 600}, 1)
			_, _, err := s.Gradient(&SweepWeights{R: []float64{1}})
			return err
		},
		"NaN sweep weight": func() error {
			s := NewSweep([]float64{500, 600}, 1)
			_, _, err := s.Gradient(&SweepWeights{A: []float64{1, nan}})
			return err
		},
	} {
		if err := f(); !errors.Is(err, ErrInput) {
			t.Errorf("%s: %v, want ErrInput", name, err)
		}
	}
}
