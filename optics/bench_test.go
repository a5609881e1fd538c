package optics

import (
	"fmt"
	"math"
	"testing"
)

// workload is a stack of alternating dielectrics, absorbers and a metal,
// 1000 wavelengths from 300 nm in steps of 1 nm, in front of glass.
func workload(films int, angle float64) Sweep {
	const w = 1000
	lambda := make([]float64, w)
	for i := range lambda {
		lambda[i] = 300 + 1000*float64(i)/w
	}
	s := NewSweep(lambda, films)
	s.Angle[0] = angle
	five := []float64{80, 30, 400, 20, 150}
	for i, l := range lambda {
		s.BackN[i], s.BackK[i] = 1.5+5000/(l*l), 1e-7
		for j := range films {
			many := films > 5
			s.Thickness[j] = five[j%5]
			if many {
				s.Thickness[j] = 20 + float64(j*37%83)
			}
			n, k := 0.15+1e-4*l, 1.5+l/170
			switch {
			case !many && j%5 == 0, many && j%2 == 0:
				n, k = 1.9+2e4/(l*l), 1e-4+0.3*math.Exp(-(l-300)/30)+1e-6*l
			case !many && j%5 == 1, many && j%7 != 0:
				n, k = 2.3+4e4/(l*l), 1e-5+0.2*math.Exp(-(l-300)/40)
			case !many && j%5 == 2, many:
				n, k = 2.5+0.3*math.Sin(l/120), 1e-4+0.8/(1+math.Exp((l-780)/12))
			case j%5 == 3:
				n, k = 1.8, 1e-6
			}
			s.N[j*w+i], s.K[j*w+i] = n, k
		}
	}
	return s
}

// BenchmarkSweep reports ns per film, wavelength and polarisation, with R, T
// and every absorptance computed, on one core.
func BenchmarkSweep(b *testing.B) {
	for _, films := range []int{1, 5, 20, 200} {
		for _, angle := range []float64{0, 45} {
			b.Run(fmt.Sprintf("films=%d/angle=%g", films, angle), func(b *testing.B) {
				s := workload(films, angle*math.Pi/180)
				var sw Sweeper
				var r SweepResponse
				b.ReportAllocs()
				for b.Loop() {
					if err := sw.Run(&r, &s); err != nil {
						b.Fatal(err)
					}
				}
				pols := 2.0
				if angle == 0 {
					pols = 1
				}
				mean := 0.0
				for _, v := range r.R {
					mean += v / float64(len(r.R))
				}
				b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/(float64(films*len(r.R))*pols), "ns/film")
				b.ReportMetric(mean, "meanR")
			})
		}
	}
}

// BenchmarkSolve is one wavelength of the five-film stack at a time.
func BenchmarkSolve(b *testing.B) {
	for _, angle := range []float64{0, 45} {
		b.Run(fmt.Sprintf("films=5/angle=%g", angle), func(b *testing.B) {
			s := workload(5, angle*math.Pi/180)
			w := len(s.Wavelength)
			stacks := make([]Stack, w)
			films := make([]Film, 5*w)
			for i := range stacks {
				st := Stack{Front: 1, Films: films[5*i : 5*i+5], Back: complex(s.BackN[i], s.BackK[i])}
				for j, d := range s.Thickness {
					st.Films[j] = Film{Index: complex(s.N[j*w+i], s.K[j*w+i]), Thickness: d}
				}
				stacks[i] = st
			}
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
			pols := 2.0
			if angle == 0 {
				pols = 1
			}
			b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/(5*pols), "ns/film")
		})
	}
}
