package nk

import (
	"math"
	"math/cmplx"
	"testing"
)

// fuzzModel makes the model of a kind; the parameters come by SetParameters.
func fuzzModel(kind uint8) Model {
	switch kind % 10 {
	case 0:
		return &Cauchy{}
	case 1:
		return &Herzberger{}
	case 2:
		return &Sellmeier{B: make([]float64, 2), C: make([]float64, 2)}
	case 3:
		return &Drude{}
	case 4:
		return &Lorentz{}
	case 5:
		return &TaucLorentz{}
	case 6:
		return &CodyLorentz{}
	case 7:
		return &ForouhiBloomer{}
	case 8:
		return &Urbach{}
	}
	return &Sum{&Lorentz{E0: 1}, &Urbach{Edge: 1, Width: 1}}
}

// FuzzModel: whatever the parameters and the wavelength, there is an error or a
// finite index with n, k >= 0, and finite derivatives or an error.
func FuzzModel(f *testing.F) {
	for kind, c := range gradientCases() {
		p := append(values(c.model), make([]float64, 8)...)
		for k := range uint8(10) {
			f.Add(k, nmEV/c.energy[kind%len(c.energy)], p[0], p[1], p[2], p[3], p[4], p[5], p[6], p[7])
		}
	}
	f.Add(uint8(6), 1000.0, 70.0, 3.8, 2.2, 1.6, 1.0, 1.6, 1e-300, 1.0)
	f.Add(uint8(5), 1e-3, 1e300, 1e-300, 1e300, 1e-300, 1.0, 0.0, 0.0, 0.0)
	f.Fuzz(func(t *testing.T, kind uint8, lambda, p0, p1, p2, p3, p4, p5, p6, p7 float64) {
		m := fuzzModel(kind)
		p := []float64{p0, p1, p2, p3, p4, p5, p6, p7}[:m.NumParameters()]
		if err := m.SetParameters(p); err != nil {
			return
		}
		eps, err := m.Permittivity(nil, lambda)
		if err == nil && (!finite(eps) || imag(eps) < 0) {
			t.Fatalf("%T %v at %g nm: eps = %v", m, p, lambda, eps)
		}
		n, errN := m.Index(lambda)
		if errN == nil && (!finite(n) || real(n) < 0 || imag(n) < 0) {
			t.Fatalf("%T %v at %g nm: N = %v", m, p, lambda, n)
		}
		if err == nil && errN != nil {
			t.Fatalf("%T %v at %g nm: eps = %v, but no N: %v", m, p, lambda, eps, errN)
		}
		grad, ng, errG := m.Gradient(nil, lambda)
		if errG != nil {
			return
		}
		if errN != nil || ng != n {
			t.Fatalf("%T %v at %g nm: Gradient gives %v, Index %v, %v", m, p, lambda, ng, n, errN)
		}
		for j, g := range grad {
			if !finite(g) {
				t.Fatalf("%T %v at %g nm: derivative %d = %v", m, p, lambda, j, g)
			}
		}
	})
}

// FuzzMixture: an error or a finite index with n, k >= 0.
func FuzzMixture(f *testing.F) {
	f.Add(0.05, 4.0, 1.5, 0.0, 2.0, 0.1, 0.3, 0.3)
	f.Add(0.0, 1.2, 1.5, 0.0, 1.0, 0.0, 0.5, 0.0)
	f.Add(1e40, 0.0, 1e-40, 0.0, 0.0, 1.0, 1e-20, 0.5)
	f.Fuzz(func(t *testing.T, n1, k1, n2, k2, n3, k3, f1, f2 float64) {
		n := []complex128{complex(n1, k1), complex(n2, k2), complex(n3, k3)}
		check := func(what string, v complex128, err error) {
			if err == nil && (!finite(v) || real(v) < 0 || imag(v) < 0) {
				t.Fatalf("%s of %v, fractions %g, %g: %v", what, n, f1, f2, v)
			}
		}
		v, err := Bruggeman(n, []float64{f1, f2, 1 - f1 - f2})
		check("Bruggeman", v, err)
		v, err = Bruggeman(n[:2], []float64{f1, 1 - f1})
		check("Bruggeman", v, err)
		v, err = MaxwellGarnett(n[0], n[1], f1)
		check("Maxwell Garnett", v, err)
		v, err = LorentzLorenz(n, []float64{f1, f2, 1 - f1 - f2})
		check("Lorentz-Lorenz", v, err)
	})
}

// FuzzKramersKronig: an error or finite figures.
func FuzzKramersKronig(f *testing.F) {
	f.Add(400.0, 10.0, 1.1, 3.0, 0.1, 0.0, 500.0, 450.0)
	f.Add(1e-3, 1e-9, 1.0, 1e30, 1e30, 0.0, 1.0, 0.0)
	f.Fuzz(func(t *testing.T, start, step, ratio, n, k, low, high, anchor float64) {
		var lambda []float64
		var index []complex128
		l := start
		for i := range 8 {
			lambda = append(lambda, l)
			index = append(index, complex(n+float64(i), k*float64(i%3)))
			l = l*ratio + step
		}
		r, err := KramersKronig(lambda, index, KramersKronigSettings{Low: low, High: high, Anchor: anchor})
		if err != nil {
			return
		}
		sum := r.RMS + r.Max + r.MaxAt + r.MissingAbove + r.MissingBelow + r.Anchor
		for _, v := range r.N {
			sum += v
		}
		if math.IsNaN(sum) || math.IsInf(sum, 0) {
			t.Fatalf("%v %v: %+v", lambda, index, r)
		}
	})
}

// FuzzFit: an error or finite estimates; no standard error is negative.
func FuzzFit(f *testing.F) {
	f.Add(1.0, 0.5, 0.1, 2.0, 3.0, 1.0, -10.0, 10.0)
	f.Add(1e200, 1e-200, 1.0, -2.0, 3.0, 1e-100, math.Inf(-1), math.Inf(1))
	f.Fuzz(func(t *testing.T, a, b, y0, y1, y2, sigma, lower, upper float64) {
		res, err := Fit(FitProblem{
			Model: func(dst, p []float64) error {
				for i := range dst {
					dst[i] = p[0] * cmplx.Abs(cmplx.Exp(complex(p[1]*float64(i), 0)))
				}
				return nil
			},
			Data: []float64{y0, y1, y2, y1, y0}, Sigma: []float64{sigma, 1, 1, 1, 2},
			Start: []float64{a, b}, Lower: []float64{lower, lower}, Upper: []float64{upper, upper},
		})
		if err != nil {
			return
		}
		for j, v := range res.Params {
			if math.IsNaN(v) || math.IsInf(v, 0) || v < lower || v > upper {
				t.Fatalf("parameter %d = %g", j, v)
			}
			if s := res.StdErr[j]; s < 0 || math.IsInf(s, 0) || math.IsNaN(s) != res.AtBound[j] {
				t.Fatalf("standard error %d = %g, at bound %v", j, s, res.AtBound[j])
			}
		}
	})
}
