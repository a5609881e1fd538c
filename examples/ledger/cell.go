package main

import (
	"fmt"
	"math"

	"photonledger/lighttrap"
	"photonledger/nk"
	"photonledger/optics"
	"photonledger/spectrum"
)

const (
	nmPerMicron = 1e3
	nmPerMM     = 1e6
)

// The invented pilot line: a grid of fine fingers and round wires, a lightly
// doped n-type wafer, a rear oxide under full-area metal.
var (
	grid = lighttrap.Grid{
		FingerWidth: 35 * nmPerMicron, FingerPitch: 1.4 * nmPerMM, FingerFactor: 0.9,
		BusbarWidth: 0.3 * nmPerMM, BusbarPitch: 18 * nmPerMM, BusbarFactor: 0.8,
	}
	rearOxide = 100.0 // nm
	electrons = 2e15  // free carriers of the wafer, 1/cm³
)

// cell holds the optical constants of all media on the wavelengths of the
// ledger.
type cell struct {
	wavelength                         []float64
	nitride, silicon, oxide, aluminium []complex128
	freeCarriers                       []float64 // 1/cm
	wafer, film                        float64   // nm
	shaded                             float64
}

// newCell samples the published data from 300 nm to 1200 nm.
func newCell(wafer, film float64) (*cell, error) {
	c := &cell{wafer: wafer, film: film}
	for l := 300.0; l <= 1200; l += 5 {
		c.wavelength = append(c.wavelength, l)
	}
	for _, m := range []struct {
		name string
		dst  *[]complex128
	}{{"sinx209_vogt2015", &c.nitride}, {"si_green2008", &c.silicon}, {"al_rakic1995", &c.aluminium}} {
		material, err := nk.Material(m.name)
		if err != nil {
			return nil, err
		}
		if *m.dst, err = material.Sample(nil, c.wavelength); err != nil {
			return nil, err
		}
	}
	silica, err := nk.Formula("sio2_malitson1965")
	if err != nil {
		return nil, err
	}
	if c.oxide, err = nk.Evaluate(nil, silica.Model, c.wavelength); err != nil {
		return nil, err
	}
	law := nk.FreeCarriersGreen1995()
	for _, l := range c.wavelength {
		c.freeCarriers = append(c.freeCarriers, law.Alpha(l, electrons, 0))
	}
	shares, err := grid.Shares()
	c.shaded = shares.Shaded
	return c, err
}

// shares collects one destination after the other.
type shares struct{ shaded, reflected, escaped, coating, carriers, freeCarriers, oxide, metal []float64 }

// variants are the ways in which the wafer can be finished.
var variants = map[string]func(*cell) (spectrum.Ledger, error){
	"planar":     (*cell).planar,
	"lambertian": (*cell).lambertian,
}

// index returns the index of the wafer with its free carriers, and the share of
// its absorption that makes carriers.
func (c *cell) index(i int) (n complex128, generating float64) {
	l := c.wavelength[i]
	alpha := nk.AbsorptionCoefficient(imag(c.silicon[i]), l)
	total := alpha + c.freeCarriers[i]
	return complex(real(c.silicon[i]), nk.ExtinctionCoefficient(total, l)), alpha / total
}

// frontStack is the coated front of the wafer.
func (c *cell) frontStack(i int) optics.Stack {
	n, _ := c.index(i)
	return optics.Stack{Front: 1, Films: []optics.Film{{Index: c.nitride[i], Thickness: c.film}}, Back: n}
}

// planar has flat faces: thin films coherent, the wafer incoherent.
func (c *cell) planar() (spectrum.Ledger, error) {
	var s shares
	var solver optics.Solver
	var whole, front optics.Response
	for i, l := range c.wavelength {
		w := optics.Wave{Wavelength: l}
		n, generating := c.index(i)
		stack := optics.Stack{Front: 1, Back: c.aluminium[i], Films: []optics.Film{
			{Index: c.nitride[i], Thickness: c.film},
			{Index: n, Thickness: c.wafer, Incoherent: true},
			{Index: c.oxide[i], Thickness: rearOxide},
		}}
		if err := solver.Solve(&whole, stack, w); err != nil {
			return spectrum.Ledger{}, fmt.Errorf("%g nm: %w", l, err)
		}
		if err := solver.Solve(&front, c.frontStack(i), w); err != nil {
			return spectrum.Ledger{}, fmt.Errorf("%g nm: %w", l, err)
		}
		escaped := max(0, whole.R-front.R) // rounding where nothing comes back
		s.add(c.shaded, front.R, escaped, whole.A[0], whole.A[1]*generating, whole.A[1]*(1-generating), whole.A[2], whole.T)
	}
	return c.ledger(s), nil
}

// lambertian has faces that scatter all light: the coating and the rear meet
// isotropic light from inside.
func (c *cell) lambertian() (spectrum.Ledger, error) {
	var s shares
	var solver optics.Solver
	var front optics.Response
	for i, l := range c.wavelength {
		if err := solver.Solve(&front, c.frontStack(i), optics.Wave{Wavelength: l}); err != nil {
			return spectrum.Ledger{}, fmt.Errorf("%g nm: %w", l, err)
		}
		n := complex(real(c.silicon[i]), 0)
		rf, film, err := diffuse(&solver, optics.Stack{Front: n, Films: []optics.Film{{Index: c.nitride[i], Thickness: c.film}}, Back: 1}, l)
		if err != nil {
			return spectrum.Ledger{}, err
		}
		rb, oxide, err := diffuse(&solver, optics.Stack{Front: n, Films: []optics.Film{{Index: c.oxide[i], Thickness: rearOxide}}, Back: c.aluminium[i]}, l)
		if err != nil {
			return spectrum.Ledger{}, err
		}
		b, err := lighttrap.Slab{
			Absorption: nk.AbsorptionCoefficient(imag(c.silicon[i]), l), FreeCarriers: c.freeCarriers[i], Thickness: c.wafer,
			FrontReflectance: front.R + front.A[0], FrontInternal: rf, RearReflectance: rb,
		}.Lambertian()
		if err != nil {
			return spectrum.Ledger{}, fmt.Errorf("%g nm: %w", l, err)
		}
		// What leaves through a face is shared between its film and what lies behind.
		inFilm, inOxide := b.Escaped*film/(1-rf), b.RearLoss*oxide/(1-rb)
		s.add(c.shaded, front.R, b.Escaped-inFilm, front.A[0]+inFilm, b.Absorbed, b.FreeCarriers, inOxide, b.RearLoss-inOxide)
	}
	return c.ledger(s), nil
}

// diffuse returns reflectance and absorptance of the only film for isotropic
// light inside the wafer.
func diffuse(solver *optics.Solver, st optics.Stack, wavelength float64) (reflectance, film float64, err error) {
	const steps = 400
	cos, r, a := make([]float64, steps+1), make([]float64, steps+1), make([]float64, steps+1)
	r[0] = 1 // grazing light
	var response optics.Response
	for i := 1; i <= steps; i++ {
		cos[i] = float64(i) / steps
		if err := solver.Solve(&response, st, optics.Wave{Wavelength: wavelength, Angle: math.Acos(cos[i])}); err != nil {
			return 0, 0, fmt.Errorf("%g nm: %w", wavelength, err)
		}
		r[i], a[i] = response.R, response.A[0]
	}
	return lighttrap.DiffuseMean(cos, r), lighttrap.DiffuseMean(cos, a), nil
}

// add appends one wavelength; all but the shade are shares of the light between
// the fingers.
func (s *shares) add(shaded, reflected, escaped, coating, carriers, freeCarriers, oxide, metal float64) {
	open := 1 - shaded
	s.shaded = append(s.shaded, shaded)
	s.reflected = append(s.reflected, open*reflected)
	s.escaped = append(s.escaped, open*escaped)
	s.coating = append(s.coating, open*coating)
	s.carriers = append(s.carriers, open*carriers)
	s.freeCarriers = append(s.freeCarriers, open*freeCarriers)
	s.oxide = append(s.oxide, open*oxide)
	s.metal = append(s.metal, open*metal)
}

func (c *cell) ledger(s shares) spectrum.Ledger {
	return spectrum.Ledger{Spectrum: spectrum.AM15G(), Wavelength: c.wavelength, Entries: []spectrum.Entry{
		{Name: "carriers in silicon", Share: s.carriers},
		{Name: "free carriers", Share: s.freeCarriers},
		{Name: "coating", Share: s.coating},
		{Name: "rear oxide", Share: s.oxide},
		{Name: "rear metal", Share: s.metal},
		{Name: "escaped", Share: s.escaped},
		{Name: "reflected", Share: s.reflected},
		{Name: "shaded", Share: s.shaded},
	}}
}
