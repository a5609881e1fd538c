package optics

import (
	"math"
	"math/rand/v2"
	"testing"
)

// randomStack makes films with k = 0 and k > 0, incoherent ones among them
// when mixed is set.
func randomGradientCase(r *rand.Rand, mixed bool) (Stack, Wave) {
	lambda := 300 + 900*r.Float64()
	st := Stack{Front: complex(1+0.6*r.Float64(), 0), Back: complex(1+3*r.Float64(), 0)}
	if r.IntN(2) == 0 {
		st.Back += complex(0, r.Float64())
	}
	for range 1 + r.IntN(6) {
		f := Film{Index: complex(1.2+2.5*r.Float64(), 0), Thickness: 300 * r.Float64()}
		if r.IntN(2) == 0 {
			f.Index += complex(0, math.Exp(-8*r.Float64()))
		}
		if mixed && r.IntN(3) == 0 {
			f.Incoherent = true
			f.Thickness = 5000 + 1e5*r.Float64()
			f.Index = complex(real(f.Index), imag(f.Index)*2e-3)
		}
		st.Films = append(st.Films, f)
	}
	w := Wave{Wavelength: lambda, Angle: 1.3 * r.Float64(), Polarization: Polarization(r.IntN(3))}
	if r.IntN(4) == 0 {
		w.Angle = 0
	}
	return st, w
}

func randomWeights(r *rand.Rand, films int) Weights {
	w := Weights{R: r.NormFloat64(), T: r.NormFloat64()}
	for range films {
		w.A = append(w.A, r.NormFloat64())
	}
	return w
}

func (w Weights) of(r Response) float64 {
	f := w.R*r.R + w.T*r.T
	for j, v := range w.A {
		f += v * r.A[j]
	}
	return f
}

// TestGradientDifferences compares with central differences of Solve, which
// are good to about 1e-6.
func TestGradientDifferences(t *testing.T) {
	rnd := rand.New(rand.NewPCG(1, 2))
	var s GradientSolver
	var g Gradient
	var r Response
	for c := range 400 {
		st, w := randomGradientCase(rnd, c%2 == 1)
		wt := randomWeights(rnd, len(st.Films))
		if err := s.Solve(&g, &r, st, w, wt); err != nil {
			t.Fatalf("case %d: %v", c, err)
		}
		value := func() float64 {
			x, err := Solve(st, w)
			if err != nil {
				t.Fatalf("case %d: %v", c, err)
			}
			return wt.of(x)
		}
		// Second order, one-sided where k = 0.
		slope := func(v float64, h float64, set func(float64)) float64 {
			defer set(v)
			at := func(x float64) float64 { set(x); return value() }
			if v < h {
				return (-3*at(v) + 4*at(v+h) - at(v+2*h)) / (2 * h)
			}
			return (at(v+h) - at(v-h)) / (2 * h)
		}
		scaleD, scaleN := 0.0, 1e-3
		var got, want []float64
		for j := range st.Films {
			f := &st.Films[j]
			n, k := real(f.Index), imag(f.Index)
			got = append(got, g.Thickness[j]*w.Wavelength, g.N[j], g.K[j])
			h := 1e-6
			if f.Incoherent {
				h = 1e-7
			}
			want = append(want,
				slope(f.Thickness, h*w.Wavelength, func(x float64) { f.Thickness = x })*w.Wavelength,
				slope(n, h, func(x float64) { f.Index = complex(x, k) }),
				slope(k, h, func(x float64) { f.Index = complex(n, x) }))
		}
		n, k := real(st.Back), imag(st.Back)
		got = append(got, g.BackN, g.BackK)
		want = append(want, slope(n, 1e-6, func(x float64) { st.Back = complex(x, k) }), slope(k, 1e-6, func(x float64) { st.Back = complex(n, x) }))
		for i := range want {
			scaleD = math.Max(scaleD, math.Abs(want[i]))
		}
		for i := range want {
			if dev := math.Abs(got[i] - want[i]); !(dev <= 1e-5*(scaleD+scaleN)) {
				t.Errorf("case %d, %+v %+v: derivative %d = %g, difference quotient %g, deviation %.2g of %.2g", c, st, w, i, got[i], want[i], dev, scaleD)
			}
		}
	}
}
