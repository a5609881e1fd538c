package nk

import (
	"fmt"
	"math/rand/v2"
	"testing"
)

func wavelengths(count int, low, high float64) []float64 {
	l := make([]float64, count)
	for i := range l {
		l[i] = low + (high-low)*float64(i)/float64(count-1)
	}
	return l
}

func BenchmarkSample(b *testing.B) {
	m, err := Material("si_green2008")
	if err != nil {
		b.Fatal(err)
	}
	for _, order := range []string{"ascending", "shuffled"} {
		lambda := wavelengths(1000, 300, 1200)
		name := "wavelengths=1000"
		if order == "shuffled" {
			name += "/order=shuffled"
			rand.New(rand.NewPCG(3, 4)).Shuffle(len(lambda), func(i, j int) { lambda[i], lambda[j] = lambda[j], lambda[i] })
		}
		b.Run(name, func(b *testing.B) {
			b.ReportAllocs()
			dst := make([]complex128, len(lambda))
			for b.Loop() {
				if dst, err = m.Sample(dst, lambda); err != nil {
					b.Fatal(err)
				}
			}
			b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N*len(lambda)), "ns/wavelength")
		})
	}
}

func BenchmarkAt(b *testing.B) {
	for _, name := range []string{"si_green2008", "ag_jiang2016"} {
		m, err := Material(name)
		if err != nil {
			b.Fatal(err)
		}
		b.Run(fmt.Sprintf("rows=%d", len(m.Table.N)), func(b *testing.B) {
			b.ReportAllocs()
			l := 300.0
			for b.Loop() {
				if _, err := m.At(l); err != nil {
					b.Fatal(err)
				}
				if l += 37; l > 1200 {
					l -= 900
				}
			}
		})
	}
}

func BenchmarkMaterial(b *testing.B) {
	b.ReportAllocs()
	for b.Loop() {
		if _, err := Material("si_green2008"); err != nil {
			b.Fatal(err)
		}
	}
}

// TestTablesDoNotAllocate: the steady state of a simulator.
func TestTablesDoNotAllocate(t *testing.T) {
	m, err := Material("si_schinke2015")
	if err != nil {
		t.Fatal(err)
	}
	lambda := wavelengths(1000, 250, 1450)
	dst := make([]complex128, len(lambda))
	law := FreeCarriersGreen1995()
	for name, f := range map[string]func(){
		"Sample":              func() { dst, err = m.Sample(dst, lambda) },
		"At":                  func() { _, err = m.At(633) },
		"RelativeUncertainty": func() { _, err = m.RelativeUncertainty(633) },
		"free carriers":       func() { _ = law.Alpha(1100, 1e19, 1e18) },
	} {
		if n := testing.AllocsPerRun(100, f); n != 0 || err != nil {
			t.Errorf("%s: %g allocations, error %v", name, n, err)
		}
	}
}
