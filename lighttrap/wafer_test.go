package lighttrap_test

import (
	"math"
	"math/cmplx"
	"slices"
	"testing"

	"photonledger/lighttrap"
	"photonledger/nk"
	"photonledger/optics"
	"photonledger/spectrum"
)

// side fills one side of a facet table with the optics of films: light comes
// from front, and back lies behind the films; reversed says that they are
// listed from the other side in the table.
func side(s *optics.Solver, front float64, films []optics.Film, back complex128, reversed bool, wavelength float64, intervals int) (lighttrap.FacetSide, error) {
	return tabulate(s, lighttrap.FacetCosines(front, real(back), intervals), front, films, back, reversed, wavelength)
}

// tabulate is side at given cosines.
func tabulate(s *optics.Solver, cosines []float64, front float64, films []optics.Film, back complex128, reversed bool, wavelength float64) (lighttrap.FacetSide, error) {
	stack := optics.Stack{Front: complex(front, 0), Films: films, Back: back}
	return lighttrap.TabulateFacet(cosines, func(cos float64) (p lighttrap.FacetPoint, err error) {
		var r [2]optics.Response
		w := optics.Wave{Wavelength: wavelength, Angle: math.Acos(cos)}
		for i, polarization := range []optics.Polarization{optics.S, optics.P} {
			w.Polarization = polarization
			if err := s.Solve(&r[i], stack, w); err != nil {
				return p, err
			}
			if reversed {
				slices.Reverse(r[i].A)
			}
		}
		a, err := s.Amplitudes(stack, w)
		p = lighttrap.FacetPoint{RS: r[0].R, RP: r[1].R, TS: r[0].T, TP: r[1].T, AS: r[0].A, AP: r[1].A}
		p.Phase = cmplx.Phase(a.RS * cmplx.Conj(a.RP))
		p.TransmittedPhase = cmplx.Phase(a.TS * cmplx.Conj(a.TP))
		return p, err
	})
}

// siliconWafers are 160 µm wafers at 300 nm to 1200 nm in steps of 10 nm: 75 nm
// silicon nitride on the facets of the front, an oxide under aluminium behind.
func siliconWafers(t testing.TB, front lighttrap.Face) (wavelength []float64, wafers []lighttrap.Wafer) {
	t.Helper()
	must := func(err error) {
		t.Helper()
		if err != nil {
			t.Fatal(err)
		}
	}
	for l := 300.0; l <= 1200; l += 10 {
		wavelength = append(wavelength, l)
	}
	sample := func(name string) []complex128 {
		m, err := nk.Material(name)
		must(err)
		n, err := m.Sample(nil, wavelength)
		must(err)
		return n
	}
	silicon, nitride, metal := sample("si_green2008"), sample("sinx209_vogt2015"), sample("al_rakic1995")
	var s optics.Solver
	for i, l := range wavelength {
		n := real(silicon[i])
		var top, bottom lighttrap.FacetTable
		var err error
		coating := []optics.Film{{Index: nitride[i], Thickness: 75}}
		top.Outside, err = side(&s, 1, coating, silicon[i], false, l, 40)
		must(err)
		top.Inside, err = side(&s, n, coating, 1, true, l, 40)
		must(err)
		bottom.Inside, err = side(&s, n, []optics.Film{{Index: 1.46, Thickness: 120}}, metal[i], true, l, 60)
		must(err)
		bottom.Outside = lighttrap.UniformFacet(1, 1).Outside // no light comes from the metal
		bottom.Outside.AS, bottom.Outside.AP = [][]float64{{0, 0}}, [][]float64{{0, 0}}
		front.Films = &top
		wafers = append(wafers, lighttrap.Wafer{
			Index: n, Absorption: nk.AbsorptionCoefficient(imag(silicon[i]), l), Thickness: 160e3,
			Front: front, Rear: lighttrap.Face{Opaque: true, Films: &bottom},
		})
	}
	return wavelength, wafers
}

// absorberCurrent returns the current of the absorber with its standard error,
// mA/cm² under AM1.5 global.
func absorberCurrent(t testing.TB, wavelength []float64, results []lighttrap.Result) (j, standard float64) {
	t.Helper()
	weights, err := spectrum.Weights(nil, spectrum.AM15G(), wavelength, spectrum.Photons)
	if err != nil {
		t.Fatal(err)
	}
	for i, r := range results {
		j += weights[i] * r.Absorbed.Value
		standard += math.Pow(weights[i]*r.Absorbed.Error, 2)
	}
	return j, math.Sqrt(standard)
}
