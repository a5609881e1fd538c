package spectrum

import (
	"fmt"
	"math"
	"testing"
)

// shareOf is a share with fringes at the wavelengths.
func shareOf(wavelength []float64) []float64 {
	v := make([]float64, len(wavelength))
	for i, l := range wavelength {
		v[i] = 0.5 + 0.4*math.Sin(2e4/l)
	}
	return v
}

// BenchmarkPhotocurrent integrates AM1.5 times a share: on weights prepared
// before, and with the preparation.
func BenchmarkPhotocurrent(b *testing.B) {
	s := AM15G()
	for _, n := range []int{100, 2002} {
		grid := s.Wavelength
		if n != len(grid) {
			grid = make([]float64, n)
			for i := range grid {
				grid[i] = 300 + 900*float64(i)/float64(n-1)
			}
		}
		share := shareOf(grid)
		var in Integrator
		b.Run(fmt.Sprintf("points=%d/prepared", n), func(b *testing.B) {
			if err := in.Prepare(s, grid, Photons); err != nil {
				b.Fatal(err)
			}
			b.ReportAllocs()
			for b.Loop() {
				if _, err := in.Integral(share); err != nil {
					b.Fatal(err)
				}
			}
		})
		b.Run(fmt.Sprintf("points=%d/whole", n), func(b *testing.B) {
			b.ReportAllocs()
			for b.Loop() {
				if err := in.Prepare(s, grid, Photons); err != nil {
					b.Fatal(err)
				}
				if _, err := in.Integral(share); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}

// BenchmarkSample counts the evaluations beside the time.
func BenchmarkSample(b *testing.B) {
	s := AM15G()
	for _, thickness := range []float64{500, 5000} {
		b.Run(fmt.Sprintf("film=%gnm", thickness), func(b *testing.B) {
			var p Sampler
			var out Samples
			f := func(l float64, v []float64) error { airy(2+0.001i, thickness, l, v); return nil }
			b.ReportAllocs()
			for b.Loop() {
				if err := p.Sample(&out, s, 300, 1200, 3, f); err != nil {
					b.Fatal(err)
				}
			}
			b.ReportMetric(float64(out.Calls), "evaluations")
		})
	}
}

// BenchmarkLedger integrates eight destinations at 181 wavelengths.
func BenchmarkLedger(b *testing.B) {
	l := Ledger{Spectrum: AM15G()}
	for x := 300.0; x <= 1200; x += 5 {
		l.Wavelength = append(l.Wavelength, x)
	}
	eighth := make([]float64, len(l.Wavelength))
	for i := range eighth {
		eighth[i] = 0.125
	}
	for _, name := range []string{"a", "b", "c", "d", "e", "f", "g", "h"} {
		l.Entries = append(l.Entries, Entry{Name: name, Share: eighth})
	}
	b.ReportAllocs()
	for b.Loop() {
		if _, err := l.Integrate(); err != nil {
			b.Fatal(err)
		}
	}
}

// BenchmarkColour turns one reflectance on 201 wavelengths into a colour.
func BenchmarkColour(b *testing.B) {
	var grid []float64
	for l := 380.0; l <= 780; l += 2 {
		grid = append(grid, l)
	}
	r := shareOf(grid)
	var c Colorimeter
	if err := c.Prepare(grid); err != nil {
		b.Fatal(err)
	}
	b.ReportAllocs()
	for b.Loop() {
		if _, err := c.Colour(r); err != nil {
			b.Fatal(err)
		}
	}
}
