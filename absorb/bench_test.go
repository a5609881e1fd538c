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
	const cells, wavelengths = 500, 200
	for _, kind := range []string{"alpha", "beams", "coherent"} {
		thickness := 160e3
		if kind == "coherent" {
			thickness = 500
		}
		mesh, photons, alpha := wafer(cells, wavelengths, thickness)
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
		b.Run(fmt.Sprintf("cells=%d/wavelengths=%d/%s", cells, wavelengths, kind), func(b *testing.B) {
			var g Generator
			dst := make([]float64, cells)
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
			b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/float64(cells*wavelengths), "ns/cell")
		})
	}
}

func BenchmarkQuantumEfficiency(b *testing.B) {
	const d = 160e3
	_, _, alpha := wafer(1, 200, d)
	profiles := make([]Profile, len(alpha))
	for w := range profiles {
		var err error
		if profiles[w], err = (Slab{Absorption: alpha[w], Thickness: d, FrontInternal: 0.6, RearReflectance: 0.9}).Profile(); err != nil {
			b.Fatal(err)
		}
	}
	base := Base{Thickness: d - 500, DiffusionLength: 400e3, Diffusivity: 30, RearVelocity: 100}
	table := Table{Depth: make([]float64, 101), Probability: make([]float64, 101)}
	for i := range table.Depth {
		table.Depth[i], table.Probability[i] = d*float64(i)/100, 1-float64(i)/200
	}
	for _, c := range []struct {
		name string
		c    Collection
	}{{"junction", Junction{FrontLayer: 200, FrontCollection: 0.8, Depletion: 300, Base: base}}, {"table=100", table}} {
		b.Run(c.name+"/wavelengths=200", func(b *testing.B) {
			dst := make([]float64, len(profiles))
			b.ReportAllocs()
			for b.Loop() {
				if _, err := QuantumEfficiency(dst, profiles, c.c); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}
