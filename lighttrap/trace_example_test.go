package lighttrap_test

import (
	"fmt"
	"math"
	"math/cmplx"
	"slices"

	"photonledger/lighttrap"
	"photonledger/optics"
)

// Bare upright pyramids: light of normal incidence meets two facets, or three
// near the edges of the pyramids.
func ExampleTrace() {
	metal := lighttrap.UniformFacet(0, 0.92) // 92 % at every angle
	w := lighttrap.Wafer{
		Index: 3.54, Absorption: 3.5, Thickness: 160e3, // silicon at 1100 nm
		Front: lighttrap.Face{Texture: lighttrap.RegularPyramids, Angle: lighttrap.PyramidAngle},
		Rear:  lighttrap.Face{Opaque: true, Films: &metal},
	}
	r, err := lighttrap.Trace(w, lighttrap.Light{}, lighttrap.Settings{Rays: 1 << 15})
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("two bounces %.2f, three %.2f\n", r.Bounces[2].Value, r.Bounces[3].Value)
	fmt.Printf("reflected %.3f, absorbed %.2f, escaped %.2f, metal %.2f\n", r.Reflected.Value, r.Absorbed.Value, r.Escaped.Value, r.Transmitted.Value)
	fmt.Println("standard error of the absorbed share below 0.001:", r.Absorbed.Error < 0.001)
	// Output:
	// two bounces 0.89, three 0.11
	// reflected 0.100, absorbed 0.40, escaped 0.33, metal 0.17
	// standard error of the absorbed share below 0.001: true
}

// response gives what films between a medium of index n and back do with light
// at 1000 nm, in the order of the list or, for light from the other side, reversed.
func response(n float64, films []optics.Film, back complex128, reversed bool) func(cos float64) (lighttrap.FacetPoint, error) {
	return func(cos float64) (lighttrap.FacetPoint, error) {
		stack := optics.Stack{Front: complex(n, 0), Films: films, Back: back}
		wave := optics.Wave{Wavelength: 1000, Angle: math.Acos(cos), Polarization: optics.S}
		s, err := optics.Solve(stack, wave)
		if err != nil {
			return lighttrap.FacetPoint{}, err
		}
		wave.Polarization = optics.P
		p, err := optics.Solve(stack, wave)
		if err != nil {
			return lighttrap.FacetPoint{}, err
		}
		if reversed {
			slices.Reverse(s.A)
			slices.Reverse(p.A)
		}
		a, err := optics.SolveAmplitudes(stack, wave)
		return lighttrap.FacetPoint{
			RS: s.R, RP: p.R, TS: s.T, TP: p.T, AS: s.A, AP: p.A,
			Phase: cmplx.Phase(a.RS * cmplx.Conj(a.RP)), TransmittedPhase: cmplx.Phase(a.TS * cmplx.Conj(a.TP)),
		}, err
	}
}

// The facets of random pyramids carry silicon nitride; the optics of films fills
// their table. Polarisation is carried from facet to facet with its phase.
func ExampleFacetTable() {
	const n = 3.572 // silicon at 1000 nm
	nitride := []optics.Film{{Index: 1.98 + 0.002i, Thickness: 75}}
	var coated lighttrap.FacetTable
	var err error
	if coated.Outside, err = lighttrap.TabulateFacet(lighttrap.FacetCosines(1, n, 60), response(1, nitride, n, false)); err != nil {
		fmt.Println(err)
		return
	}
	if coated.Inside, err = lighttrap.TabulateFacet(lighttrap.FacetCosines(n, 1, 60), response(n, nitride, 1, true)); err != nil {
		fmt.Println(err)
		return
	}
	metal := lighttrap.UniformFacet(0, 0.95)
	w := lighttrap.Wafer{
		Index: n, Absorption: 64, Thickness: 160e3,
		Front: lighttrap.Face{Texture: lighttrap.RandomPyramids, Angle: lighttrap.PyramidAngle, Films: &coated},
		Rear:  lighttrap.Face{Opaque: true, Films: &metal},
	}
	r, err := lighttrap.Trace(w, lighttrap.Light{}, lighttrap.Settings{Rays: 1 << 15})
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("reflected %.3f, nitride %.3f, absorbed %.2f\n", r.Reflected.Value, r.FrontFilms[0].Value, r.Absorbed.Value)
	// Output:
	// reflected 0.026, nitride 0.002, absorbed 0.94
}

// The same wafer at three wavelengths in a module: glass and encapsulant over
// random pyramids. The cover sends part of the escaping light back.
func ExampleTraceAll() {
	metal := lighttrap.UniformFacet(0, 0.92)
	var wafers []lighttrap.Wafer
	for _, silicon := range [][2]float64{{3.614, 303}, {3.572, 64}, {3.542, 3.5}} { // 900, 1000 and 1100 nm
		wafers = append(wafers, lighttrap.Wafer{
			Index: silicon[0], Absorption: silicon[1], Thickness: 160e3,
			Front:  lighttrap.Face{Texture: lighttrap.RandomPyramids, Angle: lighttrap.PyramidAngle},
			Rear:   lighttrap.Face{Opaque: true, Films: &metal},
			Covers: []lighttrap.Cover{{Index: 1.52, Absorption: 0.02, Thickness: 3.2e6}, {Index: 1.48, Absorption: 0.05, Thickness: 0.45e6}},
		})
	}
	results, err := lighttrap.TraceAll(nil, wafers, lighttrap.Light{}, lighttrap.Settings{Rays: 1 << 15})
	if err != nil {
		fmt.Println(err)
		return
	}
	for _, r := range results {
		fmt.Printf("absorbed %.2f, covers %.3f, sent back %.2f\n", r.Absorbed.Value, r.Covers[0].Value+r.Covers[1].Value, r.SentBack.Value)
	}
	// Output:
	// absorbed 0.93, covers 0.009, sent back 0.01
	// absorbed 0.88, covers 0.009, sent back 0.01
	// absorbed 0.42, covers 0.016, sent back 0.12
}

// Light on an inverted pyramid near the corner of the pit meets three facets.
func ExampleTraceFacets() {
	face := lighttrap.Face{Texture: lighttrap.InvertedPyramids, Angle: lighttrap.PyramidAngle}
	p, err := lighttrap.TraceFacets(face, 3.5, lighttrap.Light{}, -0.45, -0.44)
	if err != nil {
		fmt.Println(err)
		return
	}
	for _, cos := range p.Cos {
		fmt.Printf("%.2f° ", math.Acos(cos)*180/math.Pi)
	}
	fmt.Printf("reflectance %.5f\n", p.Reflectance)
	// Output:
	// 54.74° 78.90° 33.49° reflectance 0.03648
}
