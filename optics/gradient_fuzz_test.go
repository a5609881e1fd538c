package optics

import (
	"errors"
	"math"
	"testing"
)

// FuzzGradient: any stack, wave and weights give an error that wraps ErrInput
// or ErrSingular, or finite derivatives. The sweep over one wavelength gives the
// same ones.
func FuzzGradient(f *testing.F) {
	f.Add(seed(600, 0.5, 1, 1.5, 0, 1.9, 0.01, 80, 3.5, 1e-3, 200e3), uint32(8), 1.0, 0.5)
	f.Add(seed(600, 0, 1, 3.9, 0.02), uint32(1), 1.0, 0.0)
	f.Add(seed(1e-300, 1.5, 1e-6, 1e6, 1e6, 1e-6, 0, 1e-290, 1e6, 0, 1e-295), uint32(2), 0.0, 1.0)
	f.Add(seed(600, 0.5, 1, 1.5, 0, 1.9, 0.01, 80, 3.5, 1e-3, 200e3, 1, 0, 5000), uint32(8|1<<31), -1.0, 1.0)
	f.Add(seed(633, 1.5707963, 1, 1, 0, 1, 0, 300, 0.05, 8, 50), uint32(0), 1e300, 1e300)
	f.Add(seed(600, math.Asin(1/1.5), 1.5, 1, 0, 1, 0, 100), uint32(0), 1.0, 1.0)
	f.Fuzz(func(t *testing.T, data []byte, flags uint32, wr, wa float64) {
		st, w := readStack(data, flags)
		weights := Weights{R: wr, T: wa - wr, A: make([]float64, len(st.Films))}
		for j := range weights.A {
			weights.A[j] = wa
		}
		_, g, err := SolveGradient(st, w, weights)
		if err != nil {
			if !errors.Is(err, ErrInput) && !errors.Is(err, ErrSingular) {
				t.Fatalf("error %v wraps neither ErrInput nor ErrSingular", err)
			}
			return
		}
		for i, v := range g.flat() {
			if !finite(v) {
				t.Fatalf("derivative %d is %g\n%+v %+v", i, v, st, w)
			}
		}
		s := NewSweep([]float64{w.Wavelength}, len(st.Films))
		s.Angle[0], s.Polarization, s.Front[0] = w.Angle, w.Polarization, real(st.Front)
		s.BackN[0], s.BackK[0] = real(st.Back), imag(st.Back)
		for j, f := range st.Films {
			s.N[j], s.K[j], s.Thickness[j], s.Incoherent[j] = real(f.Index), imag(f.Index), f.Thickness, f.Incoherent
		}
		_, sg, err := s.Gradient(&SweepWeights{R: []float64{weights.R}, T: []float64{weights.T}, A: weights.A})
		if err != nil {
			t.Fatalf("sweep: %v", err)
		}
		got := Gradient{sg.Thickness, sg.N, sg.K, sg.BackN[0], sg.BackK[0]}.flat()
		for i, v := range g.flat() {
			if got[i] != v {
				t.Fatalf("derivative %d is %g in the sweep, %g alone\n%+v %+v", i, got[i], v, st, w)
			}
		}
	})
}
