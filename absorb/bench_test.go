package absorb

import (
	"fmt"
	"math"
	"testing"
)

// wafer is a benchmark case: a silicon-like absorption edge over n wavelengths.
func wafer(cells, n int, thickness float64) (mesh, photons, alpha []float64) {
	mesh = make([]float64, cells+1)
	for i := range mesh {
		mesh[i] = thickness * float64(i) / float64(cells)
	}
	photons, alpha = make([]float64, n), make([]float64, n)
	for w := range photons {
		x := float64(w) / float64(n)
		photons[w] = 4e14 * (1 + x)
		alpha[w] = 1e5 * math.Pow(10, -6*x)
	}
	return mesh, photons, alpha
}

func BenchmarkGeneration(b *testing.B) {
	for _, kind := range []string{"alpha", "beams", "coherent"} {
		for _, size := range [][2]int{{500, 200}} {
			thickness := 160e3
			if kind == "coherent" {
				thickness = 500
			}
			mesh, photons, alpha := wafer(size[0], size[1], thickness)
			profiles := make([]Profile, len(alpha))
			for w := range profiles {
				p, err := Slab{Absorption: alpha[w], Thickness: thickness, FrontReflectance: 0.1, FrontInternal: 0.6, RearReflectance: 0.9}.Profile()
				if err != nil {
					b.Fatal(err)
				}
				if kind == "coherent" {
					p.Wavenumber, p.Cos, p.Sin = 0.05, 0.1*p.Forward, 0.2*p.Forward
				}
				profiles[w] = p
			}
			b.Run(fmt.Sprintf("%s/cells=%d/wavelengths=%d", kind, size[0], size[1]), func(b *testing.B) {
				var g Generator
				dst := make([]float64, size[0])
				if _, err := g.Alpha(dst, mesh, photons, alpha); err != nil {
					b.Fatal(err)
				}
				b.ReportAllocs()
				for b.Loop() {
					var err error
					if kind == "alpha" {
						_, err = g.Alpha(dst, mesh, photons, alpha)
					} else {
						_, err = g.Profiles(dst, mesh, photons, profiles)
					}
					if err != nil {
						b.Fatal(err)
					}
				}
				b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/float64(size[0]*size[1]), "ns/cell")
			})
		}
	}
}
