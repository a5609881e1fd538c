package nk

import (
	"errors"
	"math"
	"math/cmplx"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"
)

// publishedTaucLorentz is eps1 of the closed form of G. E. Jellison and F. A.
// Modine, Appl. Phys. Lett. 69, 371 (1996) with the signs of the erratum, 69,
// 2137 (1996) (from memory; agrees with quadrature, see nk_models.csv), for
// C < 2 E0.
func publishedTaucLorentz(m *TaucLorentz, e float64) float64 {
	a, e0, c, eg := m.A, m.E0, m.C, m.Eg
	al := math.Sqrt(4*e0*e0 - c*c)
	ga2 := e0*e0 - c*c/2
	z := math.Pow(e*e-ga2, 2) + al*al*c*c/4
	aln := (eg*eg-e0*e0)*e*e + eg*eg*c*c - e0*e0*(e0*e0+3*eg*eg)
	aat := (e*e-e0*e0)*(e0*e0+eg*eg) + eg*eg*c*c
	return m.EpsInf + a*c*aln/(2*math.Pi*z*al*e0)*math.Log((e0*e0+eg*eg+al*eg)/(e0*e0+eg*eg-al*eg)) -
		a*aat/(math.Pi*z*e0)*(math.Pi-math.Atan((2*eg+al)/c)+math.Atan((al-2*eg)/c)) +
		2*a*e0*eg*(e*e-ga2)/(math.Pi*z*al)*(math.Pi+2*math.Atan(2*(ga2-eg*eg)/(al*c))) -
		a*e0*c*(e*e+eg*eg)/(math.Pi*z*e)*math.Log(math.Abs(e-eg)/(e+eg)) +
		2*a*e0*c*eg/(math.Pi*z)*math.Log(math.Abs(e-eg)*(e+eg)/math.Sqrt(math.Pow(e0*e0-eg*eg, 2)+eg*eg*c*c))
}

// TestTaucLorentzPublishedForm compares the evaluation by poles with the
// published closed form over random parameters. That form cancels towards
// C = 2 E0 and at high energies (z); the tolerance is its rounding.
func TestTaucLorentzPublishedForm(t *testing.T) {
	rng := rand.New(rand.NewPCG(9, 1))
	for range 20000 {
		m := &TaucLorentz{A: 300 * rng.Float64(), E0: 1 + 7*rng.Float64(), Eg: 3 * rng.Float64(), EpsInf: 1}
		m.C = m.E0 * (0.05 + 1.8*rng.Float64())
		e := 0.3 + 8*rng.Float64()
		eps, err := m.Permittivity(nil, nmEV/e)
		if err != nil {
			t.Fatal(err)
		}
		if want := publishedTaucLorentz(m, nmEV/(nmEV/e)); math.Abs(real(eps)-want) > 1e-11*(1+cmplx.Abs(eps)) {
			t.Errorf("%+v at %g eV: eps1 %.14g, published form %.14g", *m, e, real(eps), want)
		}
	}
}

// TestScaledEi: values of E1 and Ei in Abramowitz and Stegun, table 5.1 (from
// memory to ten digits), continuity of the three ways to compute it, and the
// differential equation S' = 1/x - S.
func TestScaledEi(t *testing.T) {
	for _, c := range []struct{ x, want float64 }{
		{1, 1.8951178164}, {-1, -0.2193839344}, {0.5, 0.4542199049}, {-0.5, -0.5597735948}, {2, 4.9542343560}, {-2, -0.0489005107},
	} {
		if got := scaledEi(c.x) * math.Exp(c.x); math.Abs(got-c.want) > 0.5e-10+4e-16 {
			t.Errorf("Ei(%g) = %.12g, want %.11g", c.x, got, c.want)
		}
	}
	for _, x := range []float64{-1, eiAsymptotic} {
		a, b := scaledEi(math.Nextafter(x, -100)), scaledEi(math.Nextafter(x, 100))
		if math.Abs(a/b-1) > 1e-14 {
			t.Errorf("scaledEi jumps at %g from %.16g to %.16g", x, a, b)
		}
	}
	for _, x := range []float64{-300, -30, -3, -1.1, -0.9, -0.1, 0.1, 1, 10, 39, 41, 100, 700} {
		h := 1e-3 * math.Abs(x)
		slope := (8*(scaledEi(x+h)-scaledEi(x-h)) - scaledEi(x+2*h) + scaledEi(x-2*h)) / (12 * h)
		if want := 1/x - scaledEi(x); math.Abs(slope-want) > 1e-10/math.Abs(x) {
			t.Errorf("d scaledEi/dx at %g = %.12g, want %.12g", x, slope, want)
		}
	}
	if !math.IsNaN(scaledEi(math.NaN())) || scaledEi(math.Inf(1)) != 0 || scaledEi(math.Inf(-1)) != 0 || !math.IsInf(scaledEi(0), -1) {
		t.Error("special cases of scaledEi")
	}
}

// TestModelLimits: far above all resonances only the background is left, below
// the gap there is no absorption, and an index squared is the permittivity.
func TestModelLimits(t *testing.T) {
	for _, c := range gradientCases() {
		for _, e := range c.energy {
			lambda := nmEV / e
			eps, err := c.model.Permittivity(nil, lambda)
			if err != nil {
				t.Fatal(err)
			}
			n, err := c.model.Index(lambda)
			if err != nil {
				t.Fatal(err)
			}
			if cmplx.Abs(n*n-eps) > 4e-16*cmplx.Abs(eps)*2 || real(n) < 0 || imag(n) < 0 {
				t.Errorf("%s at %g eV: N = %v, eps = %v", c.name, e, n, eps)
			}
		}
	}
	const high = nmEV / 1e6
	for _, m := range []Model{&Drude{2, 5, 1}, &Lorentz{2, 3, 4, 1}, &TaucLorentz{122, 3.45, 2.54, 1.2, 2}, &CodyLorentz{70, 3.8, 2.2, 1.6, 1, 1.8, 0.05, 2}} {
		// what is left is of the order of A E0 C/E² < 1e-9
		if eps, err := m.Permittivity(nil, high); err != nil || cmplx.Abs(eps-2) > 1e-9 {
			t.Errorf("%T at 1 MeV: %v, %v, want 2", m, eps, err)
		}
	}
	tl := &TaucLorentz{122, 3.45, 2.54, 1.2, 1.15}
	if n, err := tl.Index(nmEV / 1.1); err != nil || imag(n) != 0 {
		t.Errorf("Tauc-Lorentz below the gap: %v, %v", n, err)
	}
	// A sharp Urbach edge of a Cody-Lorentz model falls by e over Eu in k E.
	cl := &CodyLorentz{70, 3.8, 2.2, 1.6, 1, 1.8, 0.05, 1}
	a, _ := cl.Permittivity(nil, nmEV/1.5)
	b, _ := cl.Permittivity(nil, nmEV/1.55)
	if r := imag(b) * 1.55 / (imag(a) * 1.5); math.Abs(r-math.E) > 1e-12 {
		t.Errorf("tail rises by %.15g over its width, want e", r)
	}
}

// TestModelsAgree: one model is a limit of another.
func TestModelsAgree(t *testing.T) {
	const lambda = 700
	// A Lorentz oscillator without damping is a Sellmeier term.
	l := &Lorentz{1, 1.3, nmEV / 120, 0}
	s := &Sellmeier{1, []float64{1.3}, []float64{0.120}}
	a, _ := l.Index(lambda)
	b, _ := s.Index(lambda)
	if cmplx.Abs(a-b) > 1e-14 {
		t.Errorf("Lorentz %v, Sellmeier %v", a, b)
	}
	// One with a resonance far below E is a Drude gas: Strength E0² = Plasma².
	d := &Drude{4, 2, 0.1}
	l = &Lorentz{4, 4e12, 1e-6, 0.1}
	a, _ = d.Permittivity(nil, lambda)
	b, _ = l.Permittivity(nil, lambda)
	if cmplx.Abs(a-b) > 1e-11 { // (E0/E)² is 3e-13
		t.Errorf("Drude %v, Lorentz %v", a, b)
	}
	// Herzberger without infrared terms is Cauchy.
	h := &Herzberger{A: 1.5, B: 0.004, C: 1e-4}
	c := &Cauchy{A: 1.5, B: 0.004, C: 1e-4}
	a, _ = h.Index(lambda)
	b, _ = c.Index(lambda)
	if cmplx.Abs(a-b) > 1e-15 {
		t.Errorf("Herzberger %v, Cauchy %v", a, b)
	}
	// Tauc-Lorentz in a sum with an empty term is itself.
	m := &TaucLorentz{122, 3.45, 2.54, 1.2, 1.15}
	a, _ = m.Index(lambda)
	b, _ = (&Sum{m, &Drude{0, 0, 0}}).Index(lambda)
	if a != b {
		t.Errorf("alone %v, in a sum %v", a, b)
	}
}

func TestModelErrors(t *testing.T) {
	nan, inf := math.NaN(), math.Inf(1)
	for name, m := range map[string]Model{
		"Cauchy A":              &Cauchy{A: nan},
		"Cauchy K":              &Cauchy{A: 1.5, K: -1, Width: 1},
		"Cauchy Width":          &Cauchy{A: 1.5, K: 1},
		"Herzberger D":          &Herzberger{A: 1.5, D: inf},
		"Herzberger Pole":       &Herzberger{A: 1.5, Pole: -1},
		"Sellmeier B":           &Sellmeier{1, []float64{nan}, []float64{1}},
		"Sellmeier C":           &Sellmeier{1, []float64{1}, []float64{-1}},
		"Sellmeier Offset":      &Sellmeier{inf, nil, nil},
		"Sellmeier 2 values":    &Sellmeier{1, []float64{1, 2}, []float64{1}},
		"Drude EpsInf":          &Drude{-1, 1, 1},
		"Drude Plasma":          &Drude{1, -1, 1},
		"Drude Damping":         &Drude{1, 1, nan},
		"Lorentz Strength":      &Lorentz{1, -1, 1, 1},
		"Lorentz E0":            &Lorentz{1, 1, 0, 1},
		"Lorentz Damping":       &Lorentz{1, 1, 1, -1},
		"Tauc-Lorentz A":        &TaucLorentz{-1, 3, 1, 1, 1},
		"Tauc-Lorentz E0":       &TaucLorentz{1, 0, 1, 1, 1},
		"Tauc-Lorentz C":        &TaucLorentz{1, 3, 0, 1, 1},
		"Tauc-Lorentz Eg":       &TaucLorentz{1, 3, 1, -1, 1},
		"Tauc-Lorentz EpsInf":   &TaucLorentz{1, 3, 1, 1, nan},
		"Cody-Lorentz Gamma":    &CodyLorentz{70, 3.8, 0, 1.6, 1, 1.8, 0.05, 1},
		"Cody-Lorentz Ep":       &CodyLorentz{70, 3.8, 2, 1.6, 0, 1.8, 0.05, 1},
		"Cody-Lorentz Et":       &CodyLorentz{70, 3.8, 2, 1.6, 1, 0, 0.05, 1},
		"tail Et 1.5":           &CodyLorentz{70, 3.8, 2, 1.6, 1, 1.5, 0.05, 1},
		"Cody-Lorentz Eu":       &CodyLorentz{70, 3.8, 2, 1.6, 1, 1.8, 0, 1},
		"Forouhi-Bloomer A":     &ForouhiBloomer{-1, 7, 13, 1, 1},
		"Forouhi-Bloomer 4C":    &ForouhiBloomer{1, 7, 12, 1, 1},
		"Forouhi-Bloomer NInf":  &ForouhiBloomer{1, 7, 13, 1, -1},
		"Urbach Strength":       &Urbach{-1, 1, 1},
		"Urbach Edge":           &Urbach{1, 0, 1},
		"Urbach Width":          &Urbach{1, 1, inf},
		"sum of no models":      &Sum{},
		"sum: term 1 is nil":    &Sum{&Drude{1, 1, 1}, nil},
		"sum: term 1: nk: Urba": &Sum{&Drude{1, 1, 1}, &Urbach{1, 1, 0}},
	} {
		_, err := m.Index(600)
		_, _, errG := m.Gradient(nil, 600)
		if !errors.Is(err, ErrInput) || !errors.Is(errG, ErrInput) {
			t.Errorf("%s: errors %v, %v", name, err, errG)
			continue
		}
		for _, word := range strings.Fields(name) {
			if !strings.Contains(err.Error(), word) {
				t.Errorf("%s: error does not name it: %v", name, err)
			}
		}
	}
	for _, c := range gradientCases() {
		for _, l := range []float64{0, -500, nan, inf} {
			if _, err := c.model.Index(l); !errors.Is(err, ErrInput) {
				t.Errorf("%s at %g nm: %v", c.name, l, err)
			}
		}
		if _, _, err := c.model.Gradient(make([]complex128, 1), 600); !errors.Is(err, ErrInput) {
			t.Errorf("%s: gradient in one place: %v", c.name, err)
		}
		start := values(c.model)
		for _, v := range [][]float64{nil, start[1:], append(slices.Clone(start), 1)} {
			if err := c.model.SetParameters(v); !errors.Is(err, ErrInput) {
				t.Errorf("%s: %d values: %v", c.name, len(v), err)
			}
		}
		for j := range start {
			v := slices.Clone(start)
			for i := range v {
				v[i] *= 1.001
			}
			v[j] = nan
			if err := c.model.SetParameters(v); !errors.Is(err, ErrInput) || !slices.Equal(values(c.model), start) {
				t.Errorf("%s: parameter %d NaN: %v, values %v, were %v", c.name, j, err, values(c.model), start)
			}
		}
	}
	for name, c := range map[string]struct {
		m      Model
		lambda float64
	}{
		"undamped Lorentz at its resonance": {&Lorentz{1, 1, nmEV / 500, 0}, nmEV / (nmEV / 500)},
		"Sellmeier on its pole":             {&Sellmeier{1, []float64{1}, []float64{0.5}}, 500},
		"Sellmeier with n² < 0":             {&Sellmeier{1, []float64{1}, []float64{0.5}}, 450},
		"Cauchy with n < 0":                 {&Cauchy{A: 1, B: -1}, 500},
		"Forouhi-Bloomer with n < 0":        {&ForouhiBloomer{1, 7, 13, 1.3, 0}, nmEV / 6},
	} {
		if n, err := c.m.Index(c.lambda); !errors.Is(err, ErrRange) {
			t.Errorf("%s: %v, %v", name, n, err)
		}
	}
	edge := nmEV / 1.7
	u := &Sum{&Drude{EpsInf: 4}, &Urbach{0.1, nmEV / edge, 0.05}}
	if _, err := u.Index(edge); err != nil {
		t.Errorf("Urbach at its edge: %v", err)
	}
	if _, _, err := u.Gradient(nil, edge); !errors.Is(err, ErrRange) {
		t.Errorf("derivatives of Urbach at its edge: %v", err)
	}
	for _, v := range [][4]float64{{-1, 1, 1, 1}, {1, -1, 1, 1}, {1, 1, 0, 1}, {1, 1, 1, 0}, {1, nan, 1, 1}} {
		if d, err := DrudeFromCarriers(v[0], v[1], v[2], v[3]); !errors.Is(err, ErrInput) {
			t.Errorf("DrudeFromCarriers(%v) = %v, %v", v, d, err)
		}
	}
	if _, err := Evaluate(nil, &Drude{1, 1, 1}, []float64{500, -1}); !errors.Is(err, ErrInput) || !strings.Contains(err.Error(), "wavelength 1") {
		t.Errorf("Evaluate: %v", err)
	}
	if _, err := Evaluate(make([]complex128, 1), &Drude{1, 1, 1}, []float64{500, 600}); !errors.Is(err, ErrInput) {
		t.Errorf("Evaluate in one place: %v", err)
	}
}

// TestFormulas: every published formula has a source, a valid range, values
// within it, an error outside, and is the caller's own.
func TestFormulas(t *testing.T) {
	seen := map[string]bool{}
	for _, name := range Formulas() {
		f, err := Formula(name)
		if err != nil {
			t.Fatal(err)
		}
		if seen[name] || f.Name != name || f.Material == "" || f.Source == "" || f.Conditions == "" || !(f.Low > 0 && f.Low < f.High) {
			t.Errorf("%+v", f)
		}
		seen[name] = true
		for _, l := range []float64{f.Low, math.Sqrt(f.Low * f.High), f.High} {
			// All are solids between water and germanium; fused silica, sapphire and
			// glass come close to their infrared resonances.
			if n, err := f.Index(l); err != nil || real(n) < 1.1 || real(n) > 5.5 || imag(n) < 0 {
				t.Errorf("%s at %g nm: %v, %v", name, l, n, err)
			}
		}
		for _, l := range []float64{math.Nextafter(f.Low, 0), math.Nextafter(f.High, 1e9)} {
			if _, err := f.Index(l); !errors.Is(err, ErrRange) || !strings.Contains(err.Error(), name) {
				t.Errorf("%s at %g nm: %v", name, l, err)
			}
		}
		if _, err := f.Index(math.NaN()); !errors.Is(err, ErrInput) {
			t.Errorf("%s at NaN: %v", name, err)
		}
		v := values(f.Model)
		v[0] *= 1.01
		if err := f.Model.SetParameters(v); err != nil {
			t.Fatal(err)
		}
		again, _ := Formula(name)
		if a := values(again.Model); a[0] == v[0] {
			t.Errorf("%s: changed for everybody", name)
		}
	}
	if _, err := Formula("unobtainium"); !errors.Is(err, ErrUnknown) || !strings.Contains(err.Error(), "unobtainium") {
		t.Errorf("unknown name: %v", err)
	}
	// Two measurements of sapphire, ten years apart, agree to the fourth decimal.
	a, _ := Formula("al2o3_o_malitson1962")
	b, _ := Formula("al2o3_o_malitson1972")
	for l := 300.0; l < 4500; l += 50 {
		na, _ := a.Index(l)
		nb, _ := b.Index(l)
		if cmplx.Abs(na-nb) > 1e-4 {
			t.Errorf("sapphire at %g nm: %v (1962), %v (1972)", l, na, nb)
		}
	}
}

func TestModelAllocations(t *testing.T) {
	for _, c := range gradientCases() {
		grad := make([]complex128, c.model.NumParameters())
		lambda := nmEV / c.energy[1]
		if a := testing.AllocsPerRun(100, func() {
			_, _ = c.model.Index(lambda)
			_, _, _ = c.model.Gradient(grad, lambda)
		}); a != 0 {
			t.Errorf("%s: %g allocations", c.name, a)
		}
	}
}
