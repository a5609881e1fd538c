package nk

import (
	"errors"
	"math"
	"math/cmplx"
	"math/rand/v2"
	"testing"
)

func square(n complex128) complex128 { return n * n }

// mix calls a mixing rule that must succeed and returns the permittivity.
func mix(t *testing.T, rule func([]complex128, []float64) (complex128, error), n []complex128, f []float64) complex128 {
	t.Helper()
	v, err := rule(n, f)
	if err != nil {
		t.Fatalf("n %v, f %v: %v", n, f, err)
	}
	if real(v) < 0 || imag(v) < 0 || cmplx.IsNaN(v) {
		t.Fatalf("n %v, f %v: N = %v", n, f, v)
	}
	return square(v)
}

func randomIndex(rng *rand.Rand) complex128 {
	switch rng.IntN(4) {
	case 0: // transparent
		return complex(1+3*rng.Float64(), 0)
	case 1: // metal without loss
		return complex(0, 0.1+5*rng.Float64())
	case 2: // metal
		return complex(rng.Float64(), 0.1+7*rng.Float64())
	}
	return complex(4*rng.Float64()+0.1, 3*rng.Float64())
}

// TestBruggemanEquation: the result solves the equation, has the sign of a
// passive medium, does not depend on the order of the components, and both ways
// to the root agree.
func TestBruggemanEquation(t *testing.T) {
	rng := rand.New(rand.NewPCG(4, 1))
	for trial := range 50000 {
		n := []complex128{randomIndex(rng), randomIndex(rng)}
		f := rng.Float64()
		eps := mix(t, Bruggeman, n, []float64{f, 1 - f})
		e1, e2 := square(n[0]), square(n[1])
		// The quadratic form of the equation, to the rounding of its terms.
		q := complex(3*f-1, 0)*e1 + complex(2-3*f, 0)*e2
		if res := cmplx.Abs(2*eps*eps - q*eps - e1*e2); res > 2e-15*(2*cmplx.Abs(eps*eps)+cmplx.Abs(q*eps)+cmplx.Abs(e1*e2)) {
			t.Errorf("trial %d: n %v, f %g: eps %v misses the equation by %g", trial, n, f, eps, res)
		}
		if other := mix(t, Bruggeman, []complex128{n[1], n[0]}, []float64{1 - f, f}); cmplx.Abs(other-eps) > 1e-7*cmplx.Abs(eps) {
			t.Errorf("trial %d: n %v, f %g: eps %v, exchanged %v", trial, n, f, eps, other)
		}
		if trial%4 == 0 {
			many, err := bruggemanMany(n, []float64{f, 1 - f}, 1)
			if err != nil || cmplx.Abs(many-eps) > 1e-7*cmplx.Abs(eps) {
				t.Errorf("trial %d: n %v, f %g: closed form %v, followed root %v, %v", trial, n, f, eps, many, err)
			}
		}
	}
}

// TestBruggemanMany: three to six components; a component that is given in two
// parts changes nothing.
func TestBruggemanMany(t *testing.T) {
	rng := rand.New(rand.NewPCG(4, 2))
	for trial := range 10000 {
		parts := 2 + rng.IntN(4)
		var n []complex128
		var f []float64
		sum := 0.0
		for range parts {
			n, f = append(n, randomIndex(rng)), append(f, rng.Float64())
			sum += f[len(f)-1]
		}
		for i := range f {
			f[i] /= sum
		}
		a, errA := Bruggeman(n, f)
		n2 := append([]complex128{n[0]}, n...)
		f2 := append([]float64{f[0] / 3}, f...)
		f2[1] *= 2.0 / 3
		b, errB := Bruggeman(n2, f2)
		if errA != nil || errB != nil || cmplx.Abs(a-b) > 1e-7*cmplx.Abs(a) {
			t.Errorf("trial %d: n %v, f %v: N %v, %v; split %v, %v", trial, n, f, a, errA, b, errB)
		}
	}
}

// TestBruggemanPercolation: a perfect conductor (|eps| without limit) in eps 1
// has eps = 1/(1 - 3f) below f = 1/3 and eps = eps_metal (3f - 1)/2 above
// (closed forms of the equation in that limit).
func TestBruggemanPercolation(t *testing.T) {
	for _, metal := range []complex128{complex(1e10, 1e10), complex(0, 1e10)} {
		for _, f := range []float64{1e-6, 0.1, 0.3, 0.333, 0.334, 0.4, 0.7, 0.999} {
			eps := mix(t, Bruggeman, []complex128{metal, 1}, []float64{f, 1 - f})
			want := complex(1/(1-3*f), 0)
			if f > 1.0/3 {
				want = metal * metal * complex((3*f-1)/2, 0)
			}
			if cmplx.Abs(eps-want) > 1e-9*cmplx.Abs(want) {
				t.Errorf("f = %g: eps %v, want %v", f, eps, want)
			}
		}
	}
}

// TestBruggemanContinuous follows silver in glass over all fractions: without a
// jump, from one end exactly to the other.
func TestBruggemanContinuous(t *testing.T) {
	for _, metal := range []complex128{complex(0.05, 4), complex(0, 4), complex(1e-9, 1.2)} {
		n := []complex128{metal, 1.5}
		const steps = 20000
		last := complex(0, 0)
		for i := 0; i <= steps; i++ {
			f := float64(i) / steps
			eps := mix(t, Bruggeman, n, []float64{f, 1 - f})
			if i == 0 && eps != square(1.5) || i == steps && eps != square(metal) {
				t.Errorf("metal %v: f = %g gives %v", metal, f, eps)
			}
			// Where two real roots meet eps has a square root in f: steps of sqrt(1/steps).
			if i > 0 && cmplx.Abs(eps-last) > 5*cmplx.Abs(square(metal)-square(1.5))*math.Sqrt(1.0/steps) {
				t.Errorf("metal %v: jump at f = %g from %v to %v", metal, f, last, eps)
			}
			last = eps
		}
	}
}

// TestMixtureBounds: for transparent components every rule lies within the
// Wiener bounds, and Maxwell Garnett is the Hashin-Shtrikman bound (Z. Hashin,
// S. Shtrikman, J. Appl. Phys. 33, 3125 (1962)) while Bruggeman lies between both.
func TestMixtureBounds(t *testing.T) {
	rng := rand.New(rand.NewPCG(4, 3))
	for range 5000 {
		a, b, f := 1+3*rng.Float64(), 1+3*rng.Float64(), rng.Float64()
		ea, eb := a*a, b*b
		n := []complex128{complex(a, 0), complex(b, 0)}
		fr := []float64{1 - f, f}
		low, high := 1/((1-f)/ea+f/eb), (1-f)*ea+f*eb
		br := real(mix(t, Bruggeman, n, fr))
		mgA := real(mix(t, func(n []complex128, f []float64) (complex128, error) { return MaxwellGarnett(n[0], n[1], f[1]) }, n, fr))
		mgB := real(mix(t, func(n []complex128, f []float64) (complex128, error) { return MaxwellGarnett(n[1], n[0], f[0]) }, n, fr))
		ll := real(mix(t, LorentzLorenz, n, fr))
		hs := func(host, incl, f float64) float64 { return host + f/(1/(incl-host)+(1-f)/(3*host)) }
		const tol = 1e-13
		for what, v := range map[string]float64{"Bruggeman": br, "Maxwell Garnett": mgA, "Maxwell Garnett exchanged": mgB, "Lorentz-Lorenz": ll} {
			if v < low*(1-tol) || v > high*(1+tol) {
				t.Errorf("%s: eps %g outside the Wiener bounds %g-%g (%g, %g, f %g)", what, v, low, high, ea, eb, f)
			}
		}
		if math.Abs(mgA-hs(ea, eb, f)) > 1e-12*mgA {
			t.Errorf("Maxwell Garnett %g, bound of Hashin and Shtrikman %g (%g, %g, f %g)", mgA, hs(ea, eb, f), ea, eb, f)
		}
		if br < min(mgA, mgB)*(1-tol) || br > max(mgA, mgB)*(1+tol) {
			t.Errorf("Bruggeman %g outside %g-%g (%g, %g, f %g)", br, mgA, mgB, ea, eb, f)
		}
	}
}

// TestMixtureDilute: to first order in f all rules with a host agree,
// eps = eh + 3 f eh (ei - eh)/(ei + 2 eh).
func TestMixtureDilute(t *testing.T) {
	const f = 1e-7
	for _, incl := range []complex128{2.5, complex(0.05, 4), complex(3, 1)} {
		host := complex128(1.5)
		eh, ei := host*host, incl*incl
		want := 3 * eh * (ei - eh) / (ei + 2*eh)
		mg, err := MaxwellGarnett(host, incl, f)
		if err != nil {
			t.Fatal(err)
		}
		br, err := Bruggeman([]complex128{host, incl}, []float64{1 - f, f})
		if err != nil {
			t.Fatal(err)
		}
		for what, v := range map[string]complex128{"Maxwell Garnett": mg, "Bruggeman": br} {
			// next order: f times a few; rounding of eps over f
			if got := (v*v - eh) / f; cmplx.Abs(got-want) > 100*f*cmplx.Abs(want)+1e-15/f*cmplx.Abs(eh) {
				t.Errorf("%s, inclusion %v: slope %v, want %v", what, incl, got, want)
			}
		}
	}
}

func TestMixtureEnds(t *testing.T) {
	n := []complex128{complex(0.05, 4.123456789), complex(1.47, 1e-9), complex(3.9, 0.02)}
	for i := range n {
		f := []float64{0, 0, 0}
		f[i] = 1
		for name, rule := range map[string]func([]complex128, []float64) (complex128, error){"Bruggeman": Bruggeman, "Lorentz-Lorenz": LorentzLorenz} {
			if v, err := rule(n, f); err != nil || v != n[i] {
				t.Errorf("%s: fraction 1 of %v gives %v, %v", name, n[i], v, err)
			}
		}
	}
	if v, err := MaxwellGarnett(n[0], n[1], 0); err != nil || v != n[0] {
		t.Errorf("Maxwell Garnett: f = 0 gives %v, %v", v, err)
	}
	if v, err := MaxwellGarnett(n[0], n[1], 1); err != nil || v != n[1] {
		t.Errorf("Maxwell Garnett: f = 1 gives %v, %v", v, err)
	}
	// Lorentz-Lorenz with a vacuum host is Maxwell Garnett.
	a, _ := LorentzLorenz([]complex128{1, n[2]}, []float64{0.3, 0.7})
	b, _ := MaxwellGarnett(1, n[2], 0.7)
	if cmplx.Abs(a-b) > 1e-14*cmplx.Abs(a) {
		t.Errorf("Lorentz-Lorenz in vacuum %v, Maxwell Garnett %v", a, b)
	}
}

func TestMixtureErrors(t *testing.T) {
	nan := math.NaN()
	for name, c := range map[string]struct {
		n []complex128
		f []float64
	}{
		"none":         {nil, nil},
		"lengths":      {[]complex128{1, 2}, []float64{1}},
		"sum":          {[]complex128{1, 2}, []float64{0.5, 0.6}},
		"negative":     {[]complex128{1, 2}, []float64{1.5, -0.5}},
		"NaN fraction": {[]complex128{1, 2}, []float64{nan, 0.5}},
		"NaN index":    {[]complex128{complex(nan, 0), 2}, []float64{0.5, 0.5}},
		"k < 0":        {[]complex128{1 - 1i, 2}, []float64{0.5, 0.5}},
		"zero index":   {[]complex128{0, 2}, []float64{0.5, 0.5}},
		"infinite":     {[]complex128{complex(math.Inf(1), 0), 2}, []float64{0.5, 0.5}},
	} {
		if v, err := Bruggeman(c.n, c.f); !errors.Is(err, ErrInput) {
			t.Errorf("Bruggeman, %s: %v, %v", name, v, err)
		}
		if v, err := LorentzLorenz(c.n, c.f); !errors.Is(err, ErrInput) {
			t.Errorf("Lorentz-Lorenz, %s: %v, %v", name, v, err)
		}
	}
	for _, f := range []float64{-0.1, 1.1, nan} {
		if v, err := MaxwellGarnett(1, 2, f); !errors.Is(err, ErrInput) {
			t.Errorf("Maxwell Garnett with f = %g: %v, %v", f, v, err)
		}
	}
}

func TestMixtureAllocations(t *testing.T) {
	n, f := []complex128{complex(0.05, 4), 1.5, 2}, []float64{0.2, 0.5, 0.3}
	if a := testing.AllocsPerRun(100, func() {
		_, _ = Bruggeman(n, f)
		_, _ = Bruggeman(n[:2], []float64{0.2, 0.8})
		_, _ = MaxwellGarnett(n[1], n[0], 0.2)
		_, _ = LorentzLorenz(n, f)
	}); a != 0 {
		t.Errorf("%g allocations", a)
	}
}
