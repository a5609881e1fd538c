package lighttrap_test

import (
	"math"
	"slices"
	"testing"

	"photonledger/lighttrap"
	"photonledger/optics"
)

// TestPlanarAgainstFilms: a planar wafer with films on both faces, under a cover
// with a film, equals the incoherent stack of package optics: reflectance,
// absorptance of every film, cover and wafer, and what the metal takes, for s,
// p and unpolarised light, normal and oblique. One ray is enough.
//
// Wafer and cover are so thick that their k is about 1e-9: with a larger one,
// the two packages differ by the interference at the faces of an absorbing
// medium, of the order of k/n, which optics counts and rays do not have.
func TestPlanarAgainstFilms(t *testing.T) {
	const (
		wavelength       = 1000.0
		nCover, nWafer   = 1.5, 3.5
		coverNM, waferNM = 4e10, 4e10
		alphaC, alphaW   = 1e-4, 3e-4 // 1/cm
		cmPerNM          = 1e-7
	)
	kOf := func(alpha float64) float64 { return alpha * cmPerNM * wavelength / (4 * math.Pi) }
	metal := 1.3 + 9.5i
	var s optics.Solver
	for _, angle := range []float64{0, 0.4, 1.1, 1.5} {
		for _, covered := range []bool{false, true} {
			c := math.Cos(angle)
			cover := []optics.Film{{Index: 1.3 + 0.001i, Thickness: 120}}
			coat := []optics.Film{{Index: 1.9 + 0.01i, Thickness: 70}, {Index: 2.3 + 0.02i, Thickness: 20}}
			rear := []optics.Film{{Index: 1.46 + 0.003i, Thickness: 90}}
			nFront := 1.0
			stack := optics.Stack{Front: 1, Back: metal}
			w := lighttrap.Wafer{Index: nWafer, Absorption: alphaW, Thickness: waferNM}
			table := func(n1, n2 float64, films []optics.Film, back complex128) *lighttrap.FacetTable {
				// Normal incidence is in every table; oblique light needs its own angles.
				c1 := lighttrap.RefractedCosine(1, n1, c)
				c2 := lighttrap.RefractedCosine(1, n2, c)
				tab := &lighttrap.FacetTable{}
				for i, side := range []*lighttrap.FacetSide{&tab.Outside, &tab.Inside} {
					from, onto, at, films := n1, back, c1, films
					if i == 1 {
						from, onto, at = n2, complex(n1, 0), c2
						films = slices.Clone(films)
						slices.Reverse(films)
					}
					cosines := append(lighttrap.FacetCosines(from, real(onto), 8), at)
					slices.Sort(cosines)
					cosines = slices.Compact(cosines)
					var err error
					if *side, err = tabulate(&s, cosines, from, films, onto, i == 1, wavelength); err != nil {
						t.Fatal(err)
					}
				}
				return tab
			}
			if covered {
				nFront = nCover
				stack.Films = append(stack.Films, cover...)
				stack.Films = append(stack.Films, optics.Film{Index: complex(nCover, kOf(alphaC)), Thickness: coverNM, Incoherent: true})
				w.Covers = []lighttrap.Cover{{Index: nCover, Absorption: alphaC, Thickness: coverNM, Films: table(1, nCover, cover, nCover)}}
			}
			stack.Films = append(stack.Films, coat...)
			stack.Films = append(stack.Films, optics.Film{Index: complex(nWafer, kOf(alphaW)), Thickness: waferNM, Incoherent: true})
			stack.Films = append(stack.Films, rear...)
			w.Front.Films = table(nFront, nWafer, coat, nWafer)
			w.Rear = lighttrap.Face{Opaque: true, Films: rearTable(t, &s, nWafer, rear, metal, lighttrap.RefractedCosine(1, nWafer, c), wavelength)}

			for p, polarization := range map[lighttrap.Polarization]optics.Polarization{
				lighttrap.Unpolarized: optics.Unpolarized, lighttrap.S: optics.S, lighttrap.P: optics.P,
			} {
				want, err := optics.Solve(stack, optics.Wave{Wavelength: wavelength, Angle: angle, Polarization: polarization})
				if err != nil {
					t.Fatal(err)
				}
				got, err := lighttrap.Trace(w, lighttrap.Light{Angle: angle, Polarization: p}, lighttrap.Settings{})
				if err != nil {
					t.Fatal(err)
				}
				compare := func(what string, got, want float64) {
					t.Helper()
					if dev := math.Abs(got - want); !(dev <= 1e-9) {
						t.Errorf("angle %g, covered %v, %v: %s %.12g, films give %.12g: %g", angle, covered, polarization, what, got, want, got-want)
					}
				}
				compare("reflected", got.Reflected.Value+got.Escaped.Value, want.R)
				compare("metal", got.Transmitted.Value, want.T)
				a := want.A
				if covered {
					compare("cover", got.Covers[0].Value, a[0]+a[1])
					a = a[2:]
				}
				compare("first film", got.FrontFilms[0].Value, a[0])
				compare("second film", got.FrontFilms[1].Value, a[1])
				compare("wafer", got.Absorbed.Value, a[2])
				compare("rear film", got.RearFilms[0].Value, a[3])
			}
		}
	}
}

// rearTable is the table of films before a metal, seen from the wafer; it has one
// film and no use for light from the metal.
func rearTable(t *testing.T, s *optics.Solver, n float64, films []optics.Film, metal complex128, at, wavelength float64) *lighttrap.FacetTable {
	t.Helper()
	cosines := append(lighttrap.FacetCosines(n, real(metal), 8), at)
	slices.Sort(cosines)
	inside, err := tabulate(s, slices.Compact(cosines), n, films, metal, true, wavelength)
	if err != nil {
		t.Fatal(err)
	}
	tab := &lighttrap.FacetTable{Inside: inside, Outside: lighttrap.UniformFacet(1, 1).Outside}
	tab.Outside.AS, tab.Outside.AP = [][]float64{{0, 0}}, [][]float64{{0, 0}}
	return tab
}
