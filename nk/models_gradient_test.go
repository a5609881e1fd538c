package nk

import (
	"math"
	"math/cmplx"
	"testing"

	"gonum.org/v1/gonum/diff/fd"
)

// central8 is the central difference of order 8.
var central8 = fd.Formula{
	Stencil: []fd.Point{{Loc: -4, Coeff: 1.0 / 280}, {Loc: -3, Coeff: -4.0 / 105}, {Loc: -2, Coeff: 1.0 / 5}, {Loc: -1, Coeff: -4.0 / 5},
		{Loc: 1, Coeff: 4.0 / 5}, {Loc: 2, Coeff: -1.0 / 5}, {Loc: 3, Coeff: 4.0 / 105}, {Loc: 4, Coeff: -1.0 / 280}},
	Derivative: 1,
	Step:       1e-3,
}

// gradientCase is a model with energies (eV) and the relative step of the
// difference, small enough that four steps do not cross a kink.
type gradientCase struct {
	name   string
	model  Model
	energy []float64
	step   float64
	own    float64 // accuracy of the derivatives that the model's comment states, where it is worse than rounding
}

func gradientCases() []gradientCase {
	return []gradientCase{
		{"cauchy", &Cauchy{A: 1.45, B: 0.0035, C: 1e-4}, []float64{0.7, 2, 4}, 1e-2, 0},
		{"cauchy with tail", &Cauchy{1.9, 0.02, 1e-3, 0.05, 3.5, 0.4}, []float64{0.7, 2, 4}, 5e-3, 0},
		{"herzberger", &Herzberger{3.42, 0.16, -0.12, 1.3e-6, -2e-9, 0.028}, []float64{0.06, 0.2, 0.5}, 1e-2, 0},
		{"sellmeier", &Sellmeier{1, []float64{0.6961663, 0.4079426, 0.8974794}, []float64{0.0684043, 0.1162414, 9.896161}}, []float64{0.3, 1, 4}, 5e-3, 0},
		{"drude", &Drude{3.9, 1.27, 0.1}, []float64{0.1, 0.5, 1, 3}, 1e-2, 0},
		{"lorentz", &Lorentz{1.2, 2, 3.5, 0.8}, []float64{0.5, 3.4, 3.5, 6}, 5e-3, 0},
		{"lorentz overdamped", &Lorentz{1.2, 2, 3.5, 12}, []float64{0.5, 3.5, 6}, 5e-3, 0},
		{"tauc-lorentz", &TaucLorentz{122, 3.45, 2.54, 1.2, 1.15}, []float64{0.02, 0.5, 1.1, 1.3, 2, 3.45, 5, 20}, 5e-3, 0},
		{"tauc-lorentz near the gap", &TaucLorentz{122, 3.45, 2.54, 1.2, 1.15}, []float64{1.18, 1.22}, 1e-3, 0},
		{"tauc-lorentz narrow", &TaucLorentz{50, 5, 0.1, 2, 1.5}, []float64{1, 4.9, 5, 5.1, 8}, 5e-4, 0},
		{"tauc-lorentz overdamped", &TaucLorentz{80, 2, 7, 1.2, 1.5}, []float64{0.5, 1.5, 4}, 5e-3, 0},
		{"tauc-lorentz critical", &TaucLorentz{80, 2, 4, 1.2, 1.5}, []float64{0.5, 1.5, 4}, 5e-3, 0},
		{"cody-lorentz", &CodyLorentz{70, 3.8, 2.2, 1.6, 1, 1.8, 0.05, 1}, []float64{0.3, 1.2, 1.7, 1.9, 2.5, 3.8, 6}, 5e-3, 0},
		{"cody-lorentz near the tail", &CodyLorentz{70, 3.8, 2.2, 1.6, 1, 1.8, 0.05, 1}, []float64{1.78, 1.82}, 2e-4, 0},
		{"cody-lorentz critical", &CodyLorentz{70, 2, 4, 1.6, 1, 1.8, 0.05, 1}, []float64{0.3, 1.2, 2.5, 6}, 5e-3, 0},
		// The pole of the gap factor on that of the oscillator: Eg² = E0² - Gamma²/4, Ep = Gamma/2.
		{"cody-lorentz crowded", &CodyLorentz{70, math.Hypot(1.6, 0.9), 1.8, 1.6, 0.9, 1.8, 0.05, 1}, []float64{0.3, 1.2, 2.5, 6}, 5e-3, 1e-10},
		{"cody-lorentz overdamped", &CodyLorentz{50, 2, 5, 1.2, 0.6, 1.4, 0.04, 1.5}, []float64{0.3, 1.2, 2.5, 6}, 5e-3, 0},
		{"forouhi-bloomer", &ForouhiBloomer{0.3, 7, 13, 1.3, 1.5}, []float64{0.5, 1.2, 1.5, 3, 4}, 1e-3, 0},
		{"urbach", &Sum{&Lorentz{3, 4, 5, 1}, &Urbach{0.3, 1.7, 0.06}}, []float64{0.5, 1.5, 1.65, 1.75, 3}, 1e-3, 0},
		{"sum", &Sum{&TaucLorentz{122, 3.45, 2.54, 1.2, 1.15}, &Drude{0.5, 1.2, 0.1}, &Sellmeier{0.5, []float64{1}, []float64{0.1}}}, []float64{0.5, 1.5, 4}, 5e-3, 0},
	}
}

// TestGradient compares every analytic derivative with central differences of
// order 8 at two steps. What the difference may be off is derived: its
// truncation falls by 2⁸ with the step halved, so it is below the change over
// 100; its rounding is that of values good to 2e-14 over the step.
func TestGradient(t *testing.T) {
	for _, c := range gradientCases() {
		for _, e := range c.energy {
			lambda := nmEV / e
			eval := map[string]func() (complex128, error){
				"eps": func() (complex128, error) { return c.model.Permittivity(nil, lambda) },
				"N":   func() (complex128, error) { return c.model.Index(lambda) },
			}
			grads := map[string][]complex128{"eps": make([]complex128, c.model.NumParameters())}
			if _, err := c.model.Permittivity(grads["eps"], lambda); err != nil {
				t.Errorf("%s: %v", c.name, err)
				continue
			}
			var n complex128
			var err error
			if grads["N"], n, err = c.model.Gradient(nil, lambda); err != nil {
				t.Errorf("%s: %v", c.name, err)
				continue
			}
			if want, err := c.model.Index(lambda); err != nil || n != want {
				t.Errorf("%s at %g eV: Gradient returns N = %v, Index %v, %v", c.name, e, n, want, err)
			}
			for q, f := range eval {
				compareGradient(t, c, q, e, f, grads[q])
			}
		}
	}
}

func compareGradient(t *testing.T, c gradientCase, q string, e float64, f func() (complex128, error), grad []complex128) {
	t.Helper()
	start := values(c.model)
	defer func() {
		if err := c.model.SetParameters(start); err != nil {
			t.Fatal(err)
		}
	}()
	value, err := f()
	if err != nil {
		t.Fatal(err)
	}
	largest := 0.0
	for j, g := range grad {
		largest = max(largest, cmplx.Abs(g)*math.Abs(start[j]))
	}
	for j, p := range start {
		if p == 0 {
			continue // the parameter is switched off in this case
		}
		part := func(pick func(complex128) float64, h float64) float64 {
			return fd.Derivative(func(x float64) float64 {
				v := append([]float64(nil), start...)
				v[j] = x
				if err := c.model.SetParameters(v); err != nil {
					t.Fatal(err)
				}
				z, err := f()
				if err != nil {
					t.Fatal(err)
				}
				return pick(z)
			}, p, &fd.Settings{Formula: central8, Step: h})
		}
		h := c.step * math.Abs(p)
		re := func(z complex128) float64 { return real(z) }
		im := func(z complex128) float64 { return imag(z) }
		wide := complex(part(re, h), part(im, h))
		fine := complex(part(re, h/2), part(im, h/2))
		tol := cmplx.Abs(wide-fine)/100 + 2e-14*cmplx.Abs(value)/(h/2) + c.own*largest/math.Abs(p)
		if dev := cmplx.Abs(fine - grad[j]); !(dev <= tol) {
			t.Errorf("%s: d%s/d%s at %g eV = %.13g, difference gives %.13g, deviation %.2g > %.2g",
				c.name, q, c.model.Parameters()[j].Name, e, grad[j], fine, dev, tol)
		}
		// The comparison must mean something: tighter than 1e-9 of the largest
		// component (times its parameter) or of the value.
		if tol*math.Abs(p) > 1e-9*max(largest, cmplx.Abs(value)) {
			t.Errorf("%s: d%s/d%s at %g eV: tolerance %.2g is too wide to tell anything", c.name, q, c.model.Parameters()[j].Name, e, tol)
		}
	}
}

func values(m Model) []float64 {
	var v []float64
	for _, p := range m.Parameters() {
		v = append(v, p.Value)
	}
	return v
}
