package lighttrap

import (
	"fmt"
	"testing"
)

// BenchmarkSlab is one slab, over a range of absorption.
func BenchmarkSlab(b *testing.B) {
	for _, c := range []struct {
		name  string
		solve func(Slab) (Balance, error)
	}{
		{"lambertian", Slab.Lambertian},
		{"lambertian-rear", func(s Slab) (Balance, error) { return s.LambertianRear(0.98) }},
		{"planar", func(s Slab) (Balance, error) { return s.Planar(0.98) }},
	} {
		b.Run("faces="+c.name, func(b *testing.B) {
			b.ReportAllocs()
			i := 0
			for b.Loop() {
				s := Slab{Absorption: 0.1 * float64(1+i%1000), Thickness: 160e3, FrontInternal: 0.92, RearReflectance: 0.95}
				if _, err := c.solve(s); err != nil {
					b.Fatal(err)
				}
				i++
			}
		})
	}
}

func BenchmarkDiffuseTransmittance(b *testing.B) {
	for _, x := range []float64{1e-6, 0.5, 1.5, 30} {
		b.Run(fmt.Sprintf("x=%g", x), func(b *testing.B) {
			b.ReportAllocs()
			for b.Loop() {
				DiffuseTransmittance(x)
			}
		})
	}
}

func BenchmarkDiffuseReflectance(b *testing.B) {
	for _, n := range []float64{1.01, 1.5, 2.4, 3.5} {
		b.Run(fmt.Sprintf("n=%g", n), func(b *testing.B) {
			b.ReportAllocs()
			for b.Loop() {
				DiffuseReflectance(n)
			}
		})
	}
}

func TestClosedFormsAllocate(t *testing.T) {
	s := Slab{Absorption: 10, Thickness: 160e3, FrontInternal: 0.92, RearReflectance: 0.95}
	g := Grid{FingerWidth: 40e3, FingerPitch: 1.6e6, FingerFactor: 0.5}
	cos, r := []float64{0, 0.5, 1}, []float64{1, 0.1, 0.04}
	if n := testing.AllocsPerRun(100, func() {
		_, e1 := s.Lambertian()
		_, e2 := s.LambertianRear(0.9)
		_, e3 := s.Planar(0.9)
		_, e4 := g.Shares()
		if e1 != nil || e2 != nil || e3 != nil || e4 != nil {
			t.Fatal(e1, e2, e3, e4)
		}
		DiffuseTransmittance(0.3)
		DiffuseTransmittance(3)
		DiffuseReflectance(1.5)
		DiffuseReflectance(3.5)
		DiffuseMean(cos, r)
		ScatterDirection(2, 0.3, 0.7)
	}); n != 0 {
		t.Errorf("%g allocations, want 0", n)
	}
}
