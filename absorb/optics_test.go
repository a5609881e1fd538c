package absorb

import (
	"math"
	"testing"

	"photonledger/optics"
)

// TestOpticsProfiles: the profiles of package optics convert, are accepted for any
// stack, and their generation adds up to the absorptance computed without them.
func TestOpticsProfiles(t *testing.T) {
	r := newRand()
	var g Generator
	var solver optics.Solver
	for i := range 2000 {
		st := optics.Stack{Front: 1, Back: complex(1+3*r.Float64(), 5*r.Float64())}
		films := 1 + r.IntN(4)
		thick := r.IntN(2 * films) // half of the stacks hold a wafer
		for f := range films {
			film := optics.Film{Index: complex(1.2+3*r.Float64(), logUniform(r, 1e-6, 1)), Thickness: logUniform(r, 1, 2e3)}
			if f == thick {
				film.Index, film.Thickness, film.Incoherent = complex(3.5, logUniform(r, 1e-7, 1e-2)), logUniform(r, 1e4, 5e5), true
			}
			st.Films = append(st.Films, film)
		}
		w := optics.Wave{Wavelength: 300 + 900*r.Float64(), Angle: 1.5 * r.Float64(), Polarization: optics.Polarization(r.IntN(3))}
		response, err := optics.Solve(st, w)
		if err != nil {
			t.Fatalf("case %d: %v", i, err)
		}
		profiles, err := solver.Profiles(nil, st, w)
		if err != nil {
			t.Fatalf("case %d: %v", i, err)
		}
		for f, p := range profiles {
			own := Profile(p)
			if err := own.Validate(); err != nil {
				t.Errorf("case %d, film %d of %+v: %v", i, f, st, err)
				continue
			}
			mesh := randomMesh(r, 50, 0, own.Thickness)
			rate, err := g.Profiles(nil, mesh, []float64{1e17}, []Profile{own})
			if err != nil {
				t.Errorf("case %d, film %d: %v", i, f, err)
				continue
			}
			sum := 0.0
			for c, v := range rate {
				sum += v * (mesh[c+1] - mesh[c]) * cmPerNM / 1e17
			}
			// Rounding of optics itself: 1e-13 of the film, 1e-15 of the light.
			if want := response.A[f]; !(math.Abs(sum-want) <= 1e-13*want+1e-15) {
				t.Errorf("case %d, film %d: cells add up to %.17g, absorptance %.17g", i, f, sum, want)
			}
		}
	}
}
