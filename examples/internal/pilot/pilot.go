// Package pilot holds what the example programs share: the invented pilot line,
// its grid, doping and films, and the few lines that join the packages of the
// library for its wafers. The line is invented; optical constants are published
// data.
package pilot

import (
	"math"
	"math/cmplx"
	"slices"

	"photonledger/lighttrap"
	"photonledger/nk"
	"photonledger/optics"
)

// Conversions of lengths.
const (
	NMPerMicron = 1e3
	NMPerMM     = 1e6
)

// The invented figures of the line.
const (
	RearOxide = 100.0 // nm, silicon dioxide between wafer and rear metal
	Electrons = 2e15  // 1/cm³, free carriers of the n-type wafer
)

// Grid is the metal grid of the line: fine fingers and round wires.
var Grid = lighttrap.Grid{
	FingerWidth: 35 * NMPerMicron, FingerPitch: 1.4 * NMPerMM, FingerFactor: 0.9,
	BusbarWidth: 0.3 * NMPerMM, BusbarPitch: 18 * NMPerMM, BusbarFactor: 0.8,
}

// Media holds the optical constants of the line at the wavelengths of a program,
// one value each.
type Media struct {
	Wavelength                         []float64 // nm
	Nitride, Silicon, Oxide, Aluminium []complex128
	BandToBand, FreeCarriers           []float64 // absorption coefficients of the wafer, 1/cm
}

// NewMedia samples the published data at wavelengths from first to last (nm).
func NewMedia(first, last, step float64) (*Media, error) {
	m := &Media{}
	for i := 0; first+float64(i)*step <= last+1e-9; i++ {
		m.Wavelength = append(m.Wavelength, first+float64(i)*step)
	}
	for _, v := range []struct {
		name string
		dst  *[]complex128
	}{{"sinx209_vogt2015", &m.Nitride}, {"si_green2008", &m.Silicon}, {"al_rakic1995", &m.Aluminium}} {
		material, err := nk.Material(v.name)
		if err != nil {
			return nil, err
		}
		if *v.dst, err = material.Sample(nil, m.Wavelength); err != nil {
			return nil, err
		}
	}
	silica, err := nk.Formula("sio2_malitson1965")
	if err != nil {
		return nil, err
	}
	law := nk.FreeCarriersGreen1995()
	for i, l := range m.Wavelength {
		n, err := silica.Index(l)
		if err != nil {
			return nil, err
		}
		m.Oxide = append(m.Oxide, n)
		m.BandToBand = append(m.BandToBand, nk.AbsorptionCoefficient(imag(m.Silicon[i]), l))
		m.FreeCarriers = append(m.FreeCarriers, law.Alpha(l, Electrons, 0))
	}
	return m, nil
}

// FrontFilms and RearFilms are the films on the faces of a wafer at wavelength
// number i, from outside.
func (m *Media) FrontFilms(i int, nitride float64) []optics.Film {
	return []optics.Film{{Index: m.Nitride[i], Thickness: nitride}}
}

// RearFilms is the oxide in front of the rear metal.
func (m *Media) RearFilms(i int) []optics.Film {
	return []optics.Film{{Index: m.Oxide[i], Thickness: RearOxide}}
}

// Wafer returns a wafer of the line at wavelength number i: nitride on the given
// texture in front, oxide and aluminium on a planar rear. Thicknesses are in nm.
func (m *Media) Wafer(i int, texture lighttrap.Texture, thickness, nitride float64) (w lighttrap.Wafer, err error) {
	w = lighttrap.Wafer{
		Index: real(m.Silicon[i]), Absorption: m.BandToBand[i], FreeCarriers: m.FreeCarriers[i], Thickness: thickness,
		Front: lighttrap.Face{Texture: texture, Films: &lighttrap.FacetTable{}},
		Rear:  lighttrap.Face{Films: &lighttrap.FacetTable{}, Opaque: true},
	}
	if texture != lighttrap.Planar {
		w.Front.Angle = lighttrap.PyramidAngle
	}
	n := complex(w.Index, 0)
	front, rear := m.FrontFilms(i, nitride), m.RearFilms(i)
	// From outside the full index counts: in the ultraviolet k makes half of the
	// reflectance. Light from inside the wafer exists only where k is small.
	if w.Front.Films.Outside, err = m.side(i, optics.Stack{Front: 1, Films: front, Back: m.Silicon[i]}, w.Index, false); err != nil {
		return w, err
	}
	if w.Front.Films.Inside, err = m.side(i, optics.Stack{Front: n, Films: front, Back: 1}, 1, true); err != nil {
		return w, err
	}
	if w.Rear.Films.Inside, err = m.side(i, optics.Stack{Front: n, Films: rear, Back: m.Aluminium[i]}, real(m.Oxide[i]), true); err != nil {
		return w, err
	}
	w.Rear.Films.Outside, err = lighttrap.TabulateFacet([]float64{0, 1}, func(float64) (lighttrap.FacetPoint, error) {
		// No light comes out of the metal.
		return lighttrap.FacetPoint{RS: 1, RP: 1, AS: make([]float64, len(rear)), AP: make([]float64, len(rear))}, nil
	})
	return w, err
}

// side fills one side of a facet table. The films of the stack are listed from
// outside; reversed says that the light comes from the wafer. The angles are dense
// around the critical angle against the index beyond.
func (m *Media) side(i int, stack optics.Stack, beyond float64, reversed bool) (lighttrap.FacetSide, error) {
	const intervals = 32
	if reversed {
		stack.Films = slices.Clone(stack.Films)
		slices.Reverse(stack.Films)
	}
	var solver optics.Solver
	last := 0.0 // phases follow each other without jumps of 2π
	return lighttrap.TabulateFacet(lighttrap.FacetCosines(real(stack.Front), beyond, intervals), func(cos float64) (p lighttrap.FacetPoint, err error) {
		w := optics.Wave{Wavelength: m.Wavelength[i], Angle: math.Acos(cos), Polarization: optics.S}
		var s, pp optics.Response
		if err = solver.Solve(&s, stack, w); err != nil {
			return p, err
		}
		w.Polarization = optics.P
		if err = solver.Solve(&pp, stack, w); err != nil {
			return p, err
		}
		a, err := solver.Amplitudes(stack, w)
		if err != nil {
			return p, err
		}
		p = lighttrap.FacetPoint{RS: s.R, RP: pp.R, TS: s.T, TP: pp.T, AS: s.A, AP: pp.A}
		p.Phase = cmplx.Phase(a.RS * cmplx.Conj(a.RP))
		p.Phase -= 2 * math.Pi * math.Round((p.Phase-last)/(2*math.Pi))
		p.TransmittedPhase = cmplx.Phase(a.TS * cmplx.Conj(a.TP))
		last = p.Phase
		if reversed {
			slices.Reverse(p.AS)
			slices.Reverse(p.AP)
		}
		return p, nil
	})
}
