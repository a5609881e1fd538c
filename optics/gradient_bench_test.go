package optics

import (
	"fmt"
	"math"
	"testing"
)

// BenchmarkGradient compares one stack at 45 degrees, unpolarised, with
// and without the derivatives by every thickness, n and k.
func BenchmarkGradient(b *testing.B) {
	for _, films := range []int{5, 20} {
		s := workload(films, 45*math.Pi/180)
		w := len(s.Wavelength)
		stacks := make([]Stack, w)
		for i := range stacks {
			st := Stack{Front: 1, Back: complex(s.BackN[i], s.BackK[i])}
			for j, d := range s.Thickness {
				st.Films = append(st.Films, Film{Index: complex(s.N[j*w+i], s.K[j*w+i]), Thickness: d})
			}
			stacks[i] = st
		}
		weights := Weights{R: 1, A: make([]float64, films)}
		weights.A[films/2] = -1
		b.Run(fmt.Sprintf("films=%d/forward", films), func(b *testing.B) {
			var sv Solver
			var r Response
			b.ReportAllocs()
			i := 0
			for b.Loop() {
				if err := sv.Solve(&r, stacks[i], Wave{Wavelength: s.Wavelength[i], Angle: s.Angle[0]}); err != nil {
					b.Fatal(err)
				}
				if i++; i == w {
					i = 0
				}
			}
		})
		b.Run(fmt.Sprintf("films=%d/gradient", films), func(b *testing.B) {
			var sv GradientSolver
			var r Response
			var g Gradient
			b.ReportAllocs()
			i := 0
			for b.Loop() {
				if err := sv.Solve(&g, &r, stacks[i], Wave{Wavelength: s.Wavelength[i], Angle: s.Angle[0]}, weights); err != nil {
					b.Fatal(err)
				}
				if i++; i == w {
					i = 0
				}
			}
		})
	}
}

// BenchmarkGradientSweep is the same for sweeps over 1000 wavelengths with all
// weights set, in ns per film, wavelength and polarisation.
func BenchmarkGradientSweep(b *testing.B) {
	const films = 20
	for _, angle := range []float64{0, 45} {
		s := workload(films, angle*math.Pi/180)
		pols := 2.0
		if angle == 0 {
			pols = 1
		}
		per := func(b *testing.B) {
			b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/(films*float64(len(s.Wavelength))*pols), "ns/film")
		}
		b.Run(fmt.Sprintf("films=%d/angle=%g/forward", films, angle), func(b *testing.B) {
			var sw Sweeper
			var r SweepResponse
			b.ReportAllocs()
			for b.Loop() {
				if err := sw.Run(&r, &s); err != nil {
					b.Fatal(err)
				}
			}
			per(b)
		})
		b.Run(fmt.Sprintf("films=%d/angle=%g/gradient", films, angle), func(b *testing.B) {
			var sw GradientSweeper
			var r SweepResponse
			var g SweepGradient
			weights := SweepWeights{R: make([]float64, len(s.Wavelength)), A: make([]float64, films*len(s.Wavelength))}
			for i := range weights.R {
				weights.R[i], weights.A[i] = 1, -1
			}
			b.ReportAllocs()
			for b.Loop() {
				if err := sw.Run(&g, &r, &s, &weights); err != nil {
					b.Fatal(err)
				}
			}
			per(b)
		})
	}
}
