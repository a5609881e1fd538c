package lighttrap

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/integrate/quad"
)

// TestScatterIntegrals: shares, mean cosine and mean path are integrals of the
// intensity over the half space.
func TestScatterIntegrals(t *testing.T) {
	over := func(m, from float64, f func(c float64) float64) float64 {
		return 2 * math.Pi * quad.Fixed(func(s float64) float64 {
			// c = s^4 smooths fractional powers near grazing light.
			c := s * s * s * s
			return 4 * s * s * s * ScatterIntensity(m, c) * f(c)
		}, math.Sqrt(math.Sqrt(from)), 1, 200, quad.Legendre{}, 0)
	}
	for _, m := range []float64{0, 0.5, 1, 2, 7.5, 40} {
		for _, c := range []struct {
			name      string
			got, want float64
		}{
			{"total", 1, over(m, 0, func(float64) float64 { return 1 })},
			{"mean cosine", ScatterMeanCosine(m), over(m, 0, func(c float64) float64 { return c })},
			{"within 40°", ScatterWithin(m, 40*math.Pi/180), over(m, math.Cos(40*math.Pi/180), func(float64) float64 { return 1 })},
		} {
			if math.Abs(c.got-c.want) > 1e-12 {
				t.Errorf("m = %g: %s %.15g, quadrature %.15g", m, c.name, c.got, c.want)
			}
		}
		if m > 0 {
			if got, want := ScatterMeanPath(m), over(m, 0, func(c float64) float64 { return 1 / c }); math.Abs(got-want) > 1e-12*want {
				t.Errorf("m = %g: mean path %.15g, quadrature %.15g", m, got, want)
			}
		}
	}
}

// TestScatterLambertian: the figures of isotropic light that every derivation of
// the 4n² limit uses: mean path 2, share 1/n² in the escape cone (common practice).
func TestScatterLambertian(t *testing.T) {
	if got := ScatterMeanPath(1); got != 2 {
		t.Errorf("mean path %g, want 2", got)
	}
	const n = 3.5
	if got := ScatterWithin(1, math.Asin(1/n)); math.Abs(got-1/(n*n)) > 1e-16 {
		t.Errorf("share in the escape cone %.17g, want 1/n²", got)
	}
	if got := ScatterWithin(1, 1e-8); math.Abs(got-1e-16) > 1e-31 {
		t.Errorf("share within 1e-8 rad %g, want 1e-16", got)
	}
	if got := ScatterExponent(math.Pi / 3); math.Abs(got-1) > 1e-15 {
		t.Errorf("exponent of 60° %.17g, want 1", got)
	}
}

// TestScatterDirection: the map takes the share u of the square onto the cone that
// holds the rest, unit vectors, every azimuth alike.
func TestScatterDirection(t *testing.T) {
	for _, m := range []float64{0, 0.3, 1, 5, 80} {
		for i := 0; i <= 16; i++ {
			angle := float64(i) / 16 * math.Pi / 2
			u := 1 - ScatterWithin(m, angle)
			x, y, z := ScatterDirection(m, u, float64(i)/7)
			// u near 1 or 0 is known to 2e-16, which is 2e-16/(dz/du) of z at most.
			if u > 1e-9 && math.Abs(z-math.Cos(angle)) > 1e-15*(1+z/u) {
				t.Errorf("m = %g: cosine %.16g, want %.16g", m, z, math.Cos(angle))
			}
			if math.Abs(x*x+y*y+z*z-1) > 1e-15 {
				t.Errorf("m = %g: length² 1%+g", m, x*x+y*y+z*z-1)
			}
			if want := math.Remainder(2*math.Pi*float64(i)/7, 2*math.Pi); i > 0 && math.Abs(math.Remainder(math.Atan2(y, x)-want, 2*math.Pi)) > 1e-14 {
				t.Errorf("azimuth %g, want %g", math.Atan2(y, x), want)
			}
		}
	}
}

// TestScatterTraced: the tracer's scattering face sends light on with the same mean
// path through a wafer without a rear reflection.
func TestScatterTraced(t *testing.T) {
	black := UniformFacet(0, 0)
	for _, m := range []float64{2.5, 6} {
		r, err := Trace(Wafer{
			Index: 1, Thickness: 1e5, Absorption: 0,
			Front: Face{Texture: CosinePower, Exponent: m},
			Rear:  Face{Opaque: true, Films: &black},
		}, Light{}, Settings{Rays: 1 << 15, Workers: 1, Seed: 3})
		if err != nil {
			t.Fatal(err)
		}
		if want := ScatterMeanPath(m); !(math.Abs(r.Path.Value-want) <= 4*r.Path.Error) || !(r.Path.Error < 0.01) {
			t.Errorf("m = %g: traced path %.5f ± %.5f, want %.5f", m, r.Path.Value, r.Path.Error, want)
		}
	}
}

func TestScatterSpecial(t *testing.T) {
	inf, nan := math.Inf(1), math.NaN()
	x, _, _ := ScatterDirection(1, 1.1, 0)
	y, _, _ := ScatterDirection(1, 0.5, inf)
	z, _, _ := ScatterDirection(-1, 0.5, 0)
	for i, v := range []float64{
		x, y, z, ScatterIntensity(-1, 0.5), ScatterIntensity(1, 1.1), ScatterIntensity(inf, 0.5), ScatterWithin(1, 2), ScatterWithin(nan, 1),
		ScatterExponent(0), ScatterExponent(2), ScatterMeanCosine(-1), ScatterMeanCosine(inf), ScatterMeanPath(-1), ScatterMeanPath(nan),
	} {
		if !math.IsNaN(v) {
			t.Errorf("case %d: %g, want NaN", i, v)
		}
	}
	if got := ScatterMeanPath(0); !math.IsInf(got, 1) {
		t.Errorf("mean path of m = 0: %g, want +Inf", got)
	}
}
