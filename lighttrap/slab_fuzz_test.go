package lighttrap

import (
	"errors"
	"math"
	"testing"
)

// FuzzSlab: any numbers give an error that wraps ErrInput, or shares of 0 to 1
// that add up to 1.
func FuzzSlab(f *testing.F) {
	f.Add(64.0, 0.1, 160e3, 0.02, 0.92, 0.95, 0.9)
	f.Add(0.0, 0.0, 0.0, 0.0, 1.0, 1.0, 1.0)
	f.Add(1e300, 1e300, 1e300, 1.0, 0.0, 0.5, 1e-300)
	f.Fuzz(func(t *testing.T, alpha, free, thickness, r, rf, rb, cos float64) {
		s := Slab{alpha, free, thickness, r, rf, rb}
		for _, solve := range []func() (Balance, error){
			s.Lambertian, func() (Balance, error) { return s.Planar(cos) }, func() (Balance, error) { return s.LambertianRear(cos) },
		} {
			b, err := solve()
			if err != nil {
				if !errors.Is(err, ErrInput) {
					t.Fatalf("error %v does not wrap ErrInput", err)
				}
				continue
			}
			total := sum(b)
			if !(math.Abs(total-1) <= 1e-12) || !(min(b.Reflected, b.Absorbed, b.FreeCarriers, b.Escaped, b.RearLoss) >= 0) || math.IsNaN(b.PathFactor) || !(b.Slope >= 0 && b.EscapedSlope <= 0 && b.RearLossSlope <= 0) {
				t.Fatalf("%+v, cosine %g: %+v adds up to %g", s, cos, b, total)
			}
		}
	})
}

// FuzzGrid: any numbers give an error that wraps ErrInput, or shares of 0 to 1.
func FuzzGrid(f *testing.F) {
	f.Add(40e3, 1.6e6, 1e6, 50e6, 0.5, 1.0)
	f.Add(0.0, 0.0, 0.0, 0.0, 0.0, 0.0)
	f.Add(1e308, 1e308, 5e-324, 5e-324, 1.0, 1e-300)
	f.Fuzz(func(t *testing.T, width, pitch, busbar, busbarPitch, factor, busbarFactor float64) {
		g := Grid{width, pitch, busbar, busbarPitch, factor, busbarFactor}
		s, err := g.Shares()
		if err != nil {
			if !errors.Is(err, ErrInput) {
				t.Fatalf("error %v does not wrap ErrInput", err)
			}
			return
		}
		if !(s.Covered >= 0 && s.Covered <= 1 && s.Shaded >= 0 && s.Recovered >= 0) || !(math.Abs(s.Shaded+s.Recovered-s.Covered) <= 4e-16) {
			t.Fatalf("%+v: %+v", g, s)
		}
	})
}

// FuzzDiffuse: scalar functions give values within their bounds, or NaN where their
// comments say so.
func FuzzDiffuse(f *testing.F) {
	f.Add(0.3, 1.5, 0.5)
	f.Add(1.0, 1+1e-15, 0.0)
	f.Add(800.0, 1e308, 1.0)
	f.Fuzz(func(t *testing.T, x, n, u float64) {
		between := func(name string, defined bool, low, high float64, values ...float64) {
			for _, v := range values {
				if defined && !(v >= low && v <= high) || !defined && !math.IsNaN(v) {
					t.Fatalf("%s: %g for x = %g, n = %g, u = %g", name, v, x, n, u)
				}
			}
		}
		pass, loss := DiffuseTransmittance(x)
		between("transmittance", x >= 0, 0, 1, pass, loss)
		between("slope", x >= 0, -2, 0, DiffuseTransmittanceSlope(x))
		out, in := DiffuseReflectance(n)
		between("reflectance", n >= 1 && !math.IsInf(n, 1), 0, 1, out, in)
		if n < 1e150 { // n² is finite
			between("absorptance", x >= 0 && n >= 1, 0, 1, LimitAbsorptance(x, n), TwoPassAbsorptance(x, n))
			between("their slopes", x >= 0 && n >= 1, 0, math.MaxFloat64, LimitAbsorptanceSlope(x, n), TwoPassAbsorptanceSlope(x, n))
		}
		power := x >= 0 && !math.IsInf(x, 1)
		a, b, c := ScatterDirection(x, u, n)
		between("direction", power && u >= 0 && u <= 1 && !math.IsInf(n, 0) && !math.IsNaN(n), -1, 1, a, b, c)
		between("share within", power && u >= 0 && u <= math.Pi/2, 0, 1, ScatterWithin(x, u))
		between("mean cosine", power, 0.5, 1, ScatterMeanCosine(x))
	})
}
