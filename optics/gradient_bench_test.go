package optics

import (
	"fmt"
	"math"
	"testing"
	"time"
)

// pace runs both functions in turn, so that they meet the same machine, and
// reports the time of each per unit and their ratio.
func pace(b *testing.B, units float64, forward, gradient func() error) {
	b.ReportAllocs()
	var first, second time.Duration
	for b.Loop() {
		t0 := time.Now()
		err := forward()
		t1 := time.Now()
		if err == nil {
			err = gradient()
		}
		first += t1.Sub(t0)
		second += time.Since(t1)
		if err != nil {
			b.Fatal(err)
		}
	}
	b.ReportMetric(float64(first.Nanoseconds())/float64(b.N)/units, "forward-ns/film")
	b.ReportMetric(float64(second.Nanoseconds())/float64(b.N)/units, "gradient-ns/film")
	b.ReportMetric(float64(second)/float64(first), "ratio")
}

// BenchmarkGradient compares one stack at a time without and with the
// derivatives by every thickness, n and k, for 50 wavelengths in turn; ns per
// film, wavelength and polarisation.
func BenchmarkGradient(b *testing.B) {
	const count = 50
	for _, films := range []int{5, 20} {
		for _, angle := range []float64{0, 45} {
			b.Run(fmt.Sprintf("films=%d/angle=%g", films, angle), func(b *testing.B) {
				s := workload(films, angle*math.Pi/180)
				w, pols := len(s.Wavelength), 2.0
				if angle == 0 {
					pols = 1
				}
				var stacks [count]Stack
				var waves [count]Wave
				for i := range stacks {
					at := i * w / count
					waves[i] = Wave{Wavelength: s.Wavelength[at], Angle: s.Angle[0]}
					stacks[i] = Stack{Front: 1, Back: complex(s.BackN[at], s.BackK[at])}
					for j, d := range s.Thickness {
						stacks[i].Films = append(stacks[i].Films, Film{Index: complex(s.N[j*w+at], s.K[j*w+at]), Thickness: d})
					}
				}
				weights := Weights{R: 1, A: make([]float64, films)}
				weights.A[films/2] = -1
				var sv Solver
				var gs GradientSolver
				var r Response
				var g Gradient
				forward := func() error {
					for i := range stacks {
						if err := sv.Solve(&r, stacks[i], waves[i]); err != nil {
							return err
						}
					}
					return nil
				}
				gradient := func() error {
					for i := range stacks {
						if err := gs.Solve(&g, &r, stacks[i], waves[i], weights); err != nil {
							return err
						}
					}
					return nil
				}
				pace(b, count*float64(films)*pols, forward, gradient)
			})
		}
	}
}

// BenchmarkGradientSweep does the same for sweeps over 1000 wavelengths.
func BenchmarkGradientSweep(b *testing.B) {
	const films = 20
	for _, angle := range []float64{0, 45} {
		b.Run(fmt.Sprintf("films=%d/angle=%g", films, angle), func(b *testing.B) {
			s := workload(films, angle*math.Pi/180)
			w, pols := len(s.Wavelength), 2.0
			if angle == 0 {
				pols = 1
			}
			weights := SweepWeights{R: make([]float64, w), A: make([]float64, films*w)}
			for i := range weights.R {
				weights.R[i], weights.A[i+films/2*w] = 1, -1
			}
			var sw Sweeper
			var gs GradientSweeper
			var r SweepResponse
			var g SweepGradient
			pace(b, films*float64(w)*pols,
				func() error { return sw.Run(&r, &s) },
				func() error { return gs.Run(&g, &r, &s, &weights) })
		})
	}
}
