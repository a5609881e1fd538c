//go:build amd64 && !purego

package optics

import (
	"math"
	"math/rand/v2"
	"testing"
)

// TestVectorTwin: the vector instructions give the bits of the Go functions
// that they were made from.
func TestVectorTwin(t *testing.T) {
	if !hasVectors {
		t.Skip("this processor lacks AVX2")
	}
	defer func() { hasVectors = true }()
	rng := rand.New(rand.NewPCG(31, 32))
	var sv Solver
	for i := range 60 {
		s := randomSweep(rng, 1+rng.IntN(3*lanes), i%2 == 1)
		var all [2]SweepResponse
		var one [2]Response
		st, wave := s.at(0, rng.IntN(len(s.Angle)))
		for v := range 2 {
			hasVectors = v == 0
			var err error
			if all[v], err = s.Run(); err != nil {
				t.Fatal(err)
			}
			if err = sv.Solve(&one[v], st, wave); err != nil {
				t.Fatal(err)
			}
		}
		for _, v := range [][2][]float64{{all[0].R, all[1].R}, {all[0].T, all[1].T}, {all[0].A, all[1].A},
			{one[0].A, one[1].A}, {{one[0].R, one[0].T}, {one[1].R, one[1].T}}} {
			for k := range v[0] {
				if math.Float64bits(v[0][k]) != math.Float64bits(v[1][k]) {
					t.Fatalf("sweep %d (%d wavelengths, %d films): value %d is %v with vectors, %v without",
						i, len(s.Wavelength), len(s.Thickness), k, v[0][k], v[1][k])
				}
			}
		}
	}
}

// TestVectorElementary does the same over the whole range of the elementary
// functions.
func TestVectorElementary(t *testing.T) {
	if !hasVectors {
		t.Skip("this processor lacks AVX2")
	}
	rng := rand.New(rand.NewPCG(33, 34))
	var a, b filmRow
	var ea, eb [lanes]float64
	special := []float64{0, 5e-324, 1e-308, 1, math.Pi / 4, math.Pi / 2, longPhase, maxFastPhase, 1e300, math.Inf(1), math.NaN()}
	for range 2000 {
		for i := range lanes {
			a.phase[i], a.decay[i] = math.Pow(10, 26*rng.Float64()-20), -math.Pow(10, 24*rng.Float64()-20)
			if rng.IntN(8) == 0 {
				a.phase[i], a.decay[i] = special[rng.IntN(len(special))], -special[rng.IntN(len(special))]
			}
		}
		b.phase, b.decay = a.phase, a.decay
		fastPhaseFactorRow(&a, ea[:])
		phaseFactorRow(&b, eb[:])
		for i := range lanes {
			for _, v := range [][2]float64{{a.sin[i], b.sin[i]}, {a.cos[i], b.cos[i]}, {ea[i], eb[i]}, {a.m[i], b.m[i]}} {
				if v[0] != v[1] && !(math.IsNaN(v[0]) && math.IsNaN(v[1])) {
					t.Fatalf("phase %g, decay %g: %v with vectors, %v without", a.phase[i], a.decay[i], v[0], v[1])
				}
			}
		}
	}
}
