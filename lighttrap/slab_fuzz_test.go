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
			if !(math.Abs(total-1) <= 1e-12) || !(min(b.Reflected, b.Absorbed, b.FreeCarriers, b.Escaped, b.RearLoss) >= 0) || math.IsNaN(b.PathFactor) || math.IsNaN(b.Slope) {
				t.Fatalf("%+v, cosine %g: %+v adds up to %g", s, cos, b, total)
			}
		}
	})
}
