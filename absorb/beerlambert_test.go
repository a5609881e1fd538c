package absorb

import (
	"errors"
	"math"
	"testing"
)

// TestBeerLambertForms: the scalar forms invert each other and keep their
// relative accuracy over all magnitudes.
func TestBeerLambertForms(t *testing.T) {
	r := newRand()
	for i := range 2000 {
		alpha, d := logUniform(r, 1e-8, 1e7), logUniform(r, 1e-2, 1e7)
		a := Absorptance(alpha, d)
		if x := OpticalDepth(alpha, d); x < 10 && relative(ThicknessFor(alpha, a), d) > 1e-15*(2+math.Expm1(x)/x) {
			t.Errorf("case %d: alpha %g, %g nm: thickness for %g is %g", i, alpha, d, a, ThicknessFor(alpha, a))
		}
		if s := Intensity(alpha, d) + a; math.Abs(s-1) > 3e-16 {
			t.Errorf("case %d: intensity and absorptance add up to %.17g", i, s)
		}
		rear := r.Float64()
		two := MirrorAbsorptance(alpha, d, rear)
		slab, err := Slab{Absorption: alpha, Thickness: d, RearReflectance: rear}.Shares()
		if err != nil || relative(two, slab.Absorbed) > 1e-15 || two < a {
			t.Errorf("case %d: mirror %.17g, slab %.17g, single pass %g (%v)", i, two, slab.Absorbed, a, err)
		}
		if full := MirrorAbsorptance(alpha, d, 1); relative(full, -math.Expm1(-2*OpticalDepth(alpha, d))) > 1e-15 {
			t.Errorf("case %d: perfect mirror %.17g", i, full)
		}
		lambda := logUniform(r, 100, 5000)
		if k := ExtinctionCoefficient(alpha, lambda); relative(AbsorptionCoefficient(k, lambda), alpha) > 1e-15 {
			t.Errorf("case %d: alpha %g at %g nm comes back as %g", i, alpha, lambda, AbsorptionCoefficient(k, lambda))
		}
		if got := Absorptance(alpha, PenetrationDepth(alpha)); relative(got, 1-1/math.E) > 1e-15 {
			t.Errorf("case %d: absorptance of the penetration depth %g", i, got)
		}
		limit := 0.001 + 0.99*r.Float64()
		for _, f := range []float64{1 - 1e-12, 1 + 1e-12} {
			thick, err := OpticallyThick(alpha, f*ThicknessFor(alpha, 1-limit), limit)
			if err != nil || thick != (f > 1) {
				t.Errorf("case %d: at %g times the limit: optically thick %t (%v)", i, f, thick, err)
			}
		}
	}
	// 1-exp(-x) would leave three digits here.
	if got := Absorptance(1e-6, 1e0); relative(got, 1e-13) > 1e-13 {
		t.Errorf("weak absorption %.17g, want 1e-13", got)
	}
}

func TestBeerLambertSpecialCases(t *testing.T) {
	nan, inf := math.NaN(), math.Inf(1)
	for _, c := range []struct {
		name      string
		got, want float64
	}{
		{"no absorption", Absorptance(0, 1e5), 0},
		{"no thickness", Absorptance(1e5, 0), 0},
		{"opaque", Absorptance(1e200, 1e200), 1},
		{"overflowing depth", OpticalDepth(1e200, 1e200), inf},
		{"nothing left", Intensity(1e200, 1e200), 0},
		{"negative alpha", Absorptance(-1, 1), nan},
		{"infinite thickness", Intensity(1, inf), nan},
		{"NaN depth", OpticalDepth(1, nan), nan},
		{"depth without absorption", PenetrationDepth(0), inf},
		{"depth of NaN", PenetrationDepth(nan), nan},
		{"thickness for 0", ThicknessFor(0, 0), 0},
		{"thickness for 1", ThicknessFor(1, 1), inf},
		{"thickness without absorption", ThicknessFor(0, 0.5), inf},
		{"thickness for more than 1", ThicknessFor(1, 1.5), nan},
		{"mirror above 1", MirrorAbsorptance(1, 1, 1.1), nan},
		{"mirror NaN", MirrorAbsorptance(1, 1, nan), nan},
		{"k negative", AbsorptionCoefficient(-1, 500), nan},
		{"wavelength 0", AbsorptionCoefficient(1, 0), nan},
		{"wavelength infinite", ExtinctionCoefficient(1, inf), nan},
		{"share of nothing", BandToBandShare(0, 0), 0},
		{"share without pairs", BandToBandShare(0, 5), 0},
		{"share without free carriers", BandToBandShare(5, 0), 1},
		{"share negative", BandToBandShare(-1, 1), nan},
	} {
		if !(c.got == c.want || math.IsNaN(c.got) && math.IsNaN(c.want)) {
			t.Errorf("%s: %g, want %g", c.name, c.got, c.want)
		}
	}
	for _, v := range [][3]float64{{-1, 1, 0.1}, {1, nan, 0.1}, {1, 1, 0}, {1, 1, 1}, {1, 1, nan}} {
		if _, err := OpticallyThick(v[0], v[1], v[2]); !errors.Is(err, ErrInput) {
			t.Errorf("OpticallyThick%v: %v", v, err)
		}
	}
}

// TestSlab: the shares add up to 1, and agree with a sum over single passes and
// with the integrals of the profiles.
func TestSlab(t *testing.T) {
	r := newRand()
	for i := range 3000 {
		s := Slab{
			Absorption: logUniform(r, 1e-6, 1e6), Thickness: logUniform(r, 1, 1e6),
			FrontReflectance: r.Float64(), FrontInternal: r.Float64(), RearReflectance: r.Float64(),
		}
		switch i % 5 {
		case 0:
			s.FreeCarriers = logUniform(r, 1e-3, 1e3)
		case 1:
			s.FrontInternal, s.RearReflectance = 1, 1
		case 2:
			s.FrontInternal = 0
		}
		got, err := s.Shares()
		if err != nil {
			t.Fatalf("case %d: %v", i, err)
		}
		if sum := got.Reflected + got.Absorbed + got.FreeCarriers + got.Escaped + got.Transmitted; math.Abs(sum-1) > 1e-14 {
			t.Errorf("case %d: %+v: shares %+v add up to %.17g", i, s, got, sum)
		}
		p, err := s.Profile()
		if err != nil {
			t.Fatalf("case %d: %v", i, err)
		}
		if err := p.Validate(); err != nil {
			t.Errorf("case %d: %+v: %v", i, s, err)
		}
		if relative(p.Absorptance(), got.Absorbed) > 1e-14 {
			t.Errorf("case %d: %+v: profile %.17g, share %.17g", i, s, p.Absorptance(), got.Absorbed)
		}
		// Pass by pass, where that ends soon.
		x := (s.Absorption + s.FreeCarriers) * cmPerNM * s.Thickness
		pass := math.Exp(-x)
		if loop := s.FrontInternal * s.RearReflectance * pass * pass; loop < 0.99 {
			flux, absorbed := 1-s.FrontReflectance, 0.0
			for flux > 1e-18 {
				absorbed += flux * Absorptance(s.Absorption+s.FreeCarriers, s.Thickness) * (1 + pass*s.RearReflectance)
				flux *= loop
			}
			if relative(got.Absorbed+got.FreeCarriers, absorbed) > 1e-12 {
				t.Errorf("case %d: %+v: absorbed %.17g, pass by pass %.17g", i, s, got.Absorbed+got.FreeCarriers, absorbed)
			}
		}
	}
}

func TestSlabErrors(t *testing.T) {
	good := Slab{Absorption: 1, Thickness: 1e5}
	nan := math.NaN()
	for name, change := range map[string]func(*Slab){
		"negative alpha":        func(s *Slab) { s.Absorption = -1 },
		"NaN free carriers":     func(s *Slab) { s.FreeCarriers = nan },
		"infinite thickness":    func(s *Slab) { s.Thickness = math.Inf(1) },
		"reflectance above 1":   func(s *Slab) { s.FrontReflectance = 1.01 },
		"reflectance NaN":       func(s *Slab) { s.FrontInternal = nan },
		"reflectance negative":  func(s *Slab) { s.RearReflectance = -0.1 },
		"thickness overflows":   func(s *Slab) { s.Absorption, s.Thickness = 1e300, 1e300 },
		"light without way out": func(s *Slab) { s.Absorption, s.FrontInternal, s.RearReflectance = 0, 1, 1 },
	} {
		s := good
		change(&s)
		if _, err := s.Shares(); !errors.Is(err, ErrInput) {
			t.Errorf("%s: Shares %v", name, err)
		}
		if _, err := s.Profile(); !errors.Is(err, ErrInput) {
			t.Errorf("%s: Profile %v", name, err)
		}
		if _, err := s.FreeCarrierProfile(); !errors.Is(err, ErrInput) {
			t.Errorf("%s: FreeCarrierProfile %v", name, err)
		}
	}
	// Nothing enters, so nothing is trapped.
	mirror, err := Slab{FrontReflectance: 1, FrontInternal: 1, RearReflectance: 1}.Shares()
	if err != nil || mirror != (Shares{Reflected: 1}) {
		t.Errorf("perfect mirror: %+v (%v)", mirror, err)
	}
}
