package lighttrap

import "testing"

// BenchmarkSlab is one slab with Lambertian faces, over a range of absorption.
func BenchmarkSlab(b *testing.B) {
	b.ReportAllocs()
	i := 0
	for b.Loop() {
		s := Slab{Absorption: 0.1 * float64(1+i%1000), Thickness: 160e3, FrontInternal: 0.92, RearReflectance: 0.95}
		if _, err := s.Lambertian(); err != nil {
			b.Fatal(err)
		}
		i++
	}
}

func TestSlabAllocates(t *testing.T) {
	s := Slab{Absorption: 10, Thickness: 160e3, FrontInternal: 0.92, RearReflectance: 0.95}
	if n := testing.AllocsPerRun(100, func() {
		if _, err := s.Lambertian(); err != nil {
			t.Fatal(err)
		}
		DiffuseTransmittance(0.3)
		DiffuseTransmittance(3)
	}); n != 0 {
		t.Errorf("%g allocations, want 0", n)
	}
}
