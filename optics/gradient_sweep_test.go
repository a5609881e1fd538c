package optics

import (
	"math"
	"slices"
	"testing"
)

// mixedWorkload has an incoherent film, three angles and all weights set.
func mixedWorkload(wavelengths int) (Sweep, SweepWeights) {
	const films = 4
	lambda := make([]float64, wavelengths)
	for i := range lambda {
		lambda[i] = 400 + 3*float64(i)
	}
	s := NewSweep(lambda, films)
	s.Angle = []float64{0, 0.4, 1.1}
	copy(s.Thickness, []float64{75, 30, 2e5, 120})
	s.Incoherent[2] = true
	for i, l := range lambda {
		for j, n := range []float64{1.46, 2.1, 3.5, 1.5} {
			s.N[j*wavelengths+i] = n + 2e3/(l*l)
			s.K[j*wavelengths+i] = []float64{0, 0.05, 1e-6, 0}[j]
		}
		s.BackN[i], s.BackK[i] = 1.1, 5+l/200
	}
	wt := SweepWeights{R: make([]float64, 3*wavelengths), A: make([]float64, 3*films*wavelengths)}
	for i := range wt.R {
		wt.R[i] = math.Sin(float64(i))
	}
	for i := range wt.A {
		wt.A[i] = math.Cos(float64(i))
	}
	return s, wt
}

// TestSweepGradient adds up single gradients.
func TestSweepGradient(t *testing.T) {
	const w = 70
	s, wt := mixedWorkload(w)
	for _, s.Polarization = range []Polarization{Unpolarized, S, P} {
		r, g, err := s.Gradient(&wt)
		if err != nil {
			t.Fatal(err)
		}
		plain, err := s.Run()
		if err != nil {
			t.Fatal(err)
		}
		if !slices.Equal(plain.R, r.R) || !slices.Equal(plain.T, r.T) || !slices.Equal(plain.A, r.A) {
			t.Error("the responses differ from those of the sweep without gradient")
		}
		films := len(s.Thickness)
		var want SweepGradient
		want.Thickness = make([]float64, films)
		want.N, want.K = make([]float64, films*w), make([]float64, films*w)
		want.BackN, want.BackK = make([]float64, w), make([]float64, w)
		for a, angle := range s.Angle {
			for i, l := range s.Wavelength {
				st := Stack{Front: complex(s.Front[i], 0), Back: complex(s.BackN[i], s.BackK[i])}
				weights := Weights{R: wt.R[a*w+i]}
				for j, d := range s.Thickness {
					st.Films = append(st.Films, Film{complex(s.N[j*w+i], s.K[j*w+i]), d, s.Incoherent[j]})
					weights.A = append(weights.A, wt.A[(a*films+j)*w+i])
				}
				r, g, err := SolveGradient(st, Wave{l, angle, s.Polarization}, weights)
				if err != nil {
					t.Fatal(err)
				}
				want.Value += weights.of(r)
				for j := range films {
					want.Thickness[j] += g.Thickness[j]
					want.N[j*w+i] += g.N[j]
					want.K[j*w+i] += g.K[j]
				}
				want.BackN[i] += g.BackN
				want.BackK[i] += g.BackK
			}
		}
		near := func(name string, got, want []float64) {
			for i := range want {
				if math.Abs(got[i]-want[i]) > 1e-12*math.Max(1, math.Abs(want[i])) {
					t.Errorf("%v %s[%d] = %.15g, want %.15g", s.Polarization, name, i, got[i], want[i])
				}
			}
		}
		near("Value", []float64{g.Value}, []float64{want.Value})
		near("Thickness", g.Thickness, want.Thickness)
		near("N", g.N, want.N)
		near("K", g.K, want.K)
		near("BackN", g.BackN, want.BackN)
		near("BackK", g.BackK, want.BackK)
	}
}

// TestSweepGradientWorkers: the same bits from any number of goroutines.
func TestSweepGradientWorkers(t *testing.T) {
	s, wt := mixedWorkload(333)
	_, want, err := s.Gradient(&wt)
	if err != nil {
		t.Fatal(err)
	}
	for _, s.Workers = range []int{0, 2, 3, 7, 100} {
		_, got, err := s.Gradient(&wt)
		if err != nil {
			t.Fatal(err)
		}
		if got.Value != want.Value || !slices.Equal(got.Thickness, want.Thickness) || !slices.Equal(got.N, want.N) ||
			!slices.Equal(got.K, want.K) || !slices.Equal(got.BackN, want.BackN) || !slices.Equal(got.BackK, want.BackK) {
			t.Errorf("%d workers change the gradient", s.Workers)
		}
	}
}

func TestGradientAllocs(t *testing.T) {
	s, wt := mixedWorkload(100)
	st := Stack{Front: 1, Back: complex(1.1, 6)}
	for j, d := range s.Thickness {
		st.Films = append(st.Films, Film{complex(s.N[j*100], s.K[j*100]), d, s.Incoherent[j]})
	}
	w := Wave{Wavelength: 400, Angle: 0.5}
	weights := Weights{R: 1, A: []float64{0, 1, 0, 0}}
	var gs GradientSolver
	var sw GradientSweeper
	var r Response
	var g Gradient
	var jac Jacobian
	var sg SweepGradient
	for name, f := range map[string]func() error{
		"gradient": func() error { return gs.Solve(&g, &r, st, w, weights) },
		"jacobian": func() error { return gs.Jacobian(&jac, &r, st, w) },
		"sweep":    func() error { return sw.Run(&sg, nil, &s, &wt) },
	} {
		if n := testing.AllocsPerRun(10, func() {
			if err := f(); err != nil {
				t.Fatal(err)
			}
		}); n != 0 {
			t.Errorf("%s: %g allocations", name, n)
		}
	}
}
