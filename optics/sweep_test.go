package optics

import (
	"fmt"
	"math"
	"math/rand/v2"
	"testing"
)

// randomSweep draws stacks as randomStack does, each film with another index at
// every wavelength: thin and very thick films, lossless and absorbing ones side
// by side.
func randomSweep(rng *rand.Rand, w int, mixed bool) Sweep {
	lambda := make([]float64, w)
	for i := range lambda {
		lambda[i] = 200 + 1800*rng.Float64()
	}
	films := rng.IntN(12)
	if rng.IntN(10) == 0 {
		films = 40 + rng.IntN(60)
	}
	s := NewSweep(lambda, films)
	s.Polarization = Polarization(rng.IntN(3))
	s.Angle = []float64{0, 1e-9, 0.3, 1.2, math.Pi/2 - 1e-6}
	for i := range lambda {
		st, _ := randomStack(rng, 12)
		s.Front[i], s.BackN[i], s.BackK[i] = real(st.Front), real(st.Back), imag(st.Back)
		for j := range films {
			st, _ := randomStack(rng, 12)
			index := st.Back
			s.N[j*w+i], s.K[j*w+i] = real(index), imag(index)
		}
	}
	for j := range films {
		s.Thickness[j] = 1000 * rng.Float64()
		if rng.IntN(6) == 0 {
			s.Thickness[j] = math.Pow(10, 7*rng.Float64())
		}
		if mixed && rng.IntN(4) == 0 {
			s.Incoherent[j], s.Thickness[j] = true, math.Pow(10, 5+2*rng.Float64())
		}
	}
	return s
}

// at returns the stack and the wave of one wavelength and angle.
func (s *Sweep) at(i, a int) (Stack, Wave) {
	w := len(s.Wavelength)
	st := Stack{Front: complex(s.Front[i], 0), Back: complex(s.BackN[i], s.BackK[i])}
	for j, d := range s.Thickness {
		st.Films = append(st.Films, Film{complex(s.N[j*w+i], s.K[j*w+i]), d, s.Incoherent[j]})
	}
	return st, Wave{s.Wavelength[i], s.Angle[a], s.Polarization}
}

// TestSweepIsSolve: a sweep gives the bits of single evaluations, whatever the
// number of wavelengths and so the place of each in a block.
func TestSweepIsSolve(t *testing.T) {
	rng := rand.New(rand.NewPCG(21, 22))
	var sw Sweeper
	var sv Solver
	var r SweepResponse
	var one Response
	for _, w := range []int{1, 2, 3, 4, 5, 7, 8, 31, 32, 33, 37, 63, 64, 65, 97, 130} {
		for _, mixed := range []bool{false, true} {
			s := randomSweep(rng, w, mixed)
			if err := sw.Run(&r, &s); err != nil {
				t.Fatal(err)
			}
			films := len(s.Thickness)
			for a := range s.Angle {
				for i := range w {
					st, wave := s.at(i, a)
					if err := sv.Solve(&one, st, wave); err != nil {
						t.Fatal(err)
					}
					same := one.R == r.R[a*w+i] && one.T == r.T[a*w+i]
					for j, v := range one.A {
						same = same && v == r.A[(a*films+j)*w+i]
					}
					if !same {
						t.Fatalf("%d wavelengths, %d films, mixed %v: wavelength %d, angle %g: sweep gives R %v T %v, single evaluation %v %v",
							w, films, mixed, i, s.Angle[a], r.R[a*w+i], r.T[a*w+i], one.R, one.T)
					}
				}
			}
		}
	}
}

// TestSweepWorkers: no bit depends on the number of workers.
func TestSweepWorkers(t *testing.T) {
	rng := rand.New(rand.NewPCG(23, 24))
	for _, mixed := range []bool{false, true} {
		s := randomSweep(rng, 333, mixed)
		want, err := s.Run()
		if err != nil {
			t.Fatal(err)
		}
		for _, s.Workers = range []int{0, 2, 3, 7, 100} {
			got, err := s.Run()
			if err != nil {
				t.Fatal(err)
			}
			for _, v := range [][2][]float64{{got.R, want.R}, {got.T, want.T}, {got.A, want.A}} {
				for i := range v[0] {
					if v[0][i] != v[1][i] {
						t.Fatalf("mixed %v, %d workers: value %d is %v, with one worker %v", mixed, s.Workers, i, v[0][i], v[1][i])
					}
				}
			}
		}
	}
}

// TestAllocs: no allocation in the steady state.
func TestAllocs(t *testing.T) {
	for _, angle := range []float64{0, 0.7} {
		for _, mixed := range []bool{false, true} {
			s := workload(20, angle)
			if mixed {
				s.Incoherent[3], s.Thickness[3] = true, 1e5
			}
			var sw Sweeper
			var r SweepResponse
			var sv Solver
			var one Response
			st, wave := s.at(500, 0)
			check := func(name string, f func() error) {
				if n := testing.AllocsPerRun(20, func() {
					if err := f(); err != nil {
						t.Fatal(err)
					}
				}); n != 0 {
					t.Errorf("%s at %g rad, mixed %v: %g allocations", name, angle, mixed, n)
				}
			}
			check("Sweeper.Run", func() error { return sw.Run(&r, &s) })
			check("Solver.Solve", func() error { return sv.Solve(&one, st, wave) })
		}
	}
}

// BenchmarkSweepWorkers is a sweep of 20 films over 1000 wavelengths and 16
// angles.
func BenchmarkSweepWorkers(b *testing.B) {
	for _, workers := range []int{1, 2} {
		b.Run(fmt.Sprintf("workers=%d", workers), func(b *testing.B) {
			s := workload(20, 0)
			s.Workers = workers
			s.Angle = s.Angle[:0]
			for a := range 16 {
				s.Angle = append(s.Angle, 0.1*float64(a))
			}
			var sw Sweeper
			var r SweepResponse
			b.ReportAllocs()
			for b.Loop() {
				if err := sw.Run(&r, &s); err != nil {
					b.Fatal(err)
				}
			}
			b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/(20*float64(len(r.R))*31/16), "ns/film")
		})
	}
}
