// Package pilot holds what the example programs share: the invented pilot line,
// its grid, doping and films, and the few lines that join the packages of the
// library for its wafers. The line is invented; optical constants are published
// data.
package pilot

import (
	"fmt"
	"math"

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
func (m *Media) Wafer(i int, texture lighttrap.Texture, thickness, nitride float64) (lighttrap.Wafer, error) {
	front, err := m.facet(i, m.FrontFilms(i, nitride), 1, false)
	if err != nil {
		return lighttrap.Wafer{}, err
	}
	rear, err := m.facet(i, m.RearFilms(i), m.Aluminium[i], true)
	if err != nil {
		return lighttrap.Wafer{}, err
	}
	w := lighttrap.Wafer{
		Index: real(m.Silicon[i]), Absorption: m.BandToBand[i], FreeCarriers: m.FreeCarriers[i], Thickness: thickness,
		Front: lighttrap.Face{Texture: texture, Films: &front},
		Rear:  lighttrap.Face{Films: &rear, Opaque: true},
	}
	if texture != lighttrap.Planar {
		w.Front.Angle = lighttrap.PyramidAngle
	}
	return w, nil
}

// facet fills the table of a facet whose films are listed from outside.
func (m *Media) facet(i int, films []optics.Film, outside complex128, opaque bool) (lighttrap.FacetTable, error) {
	const intervals = 32
	n := complex(real(m.Silicon[i]), 0)
	// From outside the full index counts: in the ultraviolet k makes half of the
	// reflectance. Light from inside the wafer exists only where k is small.
	fromOutside := optics.Stack{Front: outside, Films: films, Back: m.Silicon[i]}
	fromWafer := optics.Stack{Front: n, Back: outside}
	for j := len(films) - 1; j >= 0; j-- {
		fromWafer.Films = append(fromWafer.Films, films[j])
	}
	var solver optics.Solver
	var rs, rp optics.Response
	return lighttrap.FillFacet(real(outside), real(n), intervals, opaque, func(inside bool, cos float64) (s, p lighttrap.FacetResponse, err error) {
		stack := fromOutside
		if inside {
			stack = fromWafer
		}
		w := optics.Wave{Wavelength: m.Wavelength[i], Angle: math.Acos(cos), Polarization: optics.S}
		if err = solver.Solve(&rs, stack, w); err == nil {
			w.Polarization = optics.P
			err = solver.Solve(&rp, stack, w)
		}
		a, err2 := solver.Amplitudes(stack, w)
		if err == nil {
			err = err2
		}
		if err != nil {
			return s, p, fmt.Errorf("%g nm: %w", w.Wavelength, err)
		}
		return lighttrap.FacetResponse{R: rs.R, T: rs.T, A: rs.A, Reflected: a.RS, Transmitted: a.TS},
			lighttrap.FacetResponse{R: rp.R, T: rp.T, A: rp.A, Reflected: a.RP, Transmitted: a.TP}, nil
	})
}
