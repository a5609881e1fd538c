package main

import (
	"fmt"
	"math"

	"photonledger/examples/internal/pilot"
	"photonledger/lighttrap"
	"photonledger/nk"
	"photonledger/optics"
	"photonledger/spectrum"
)

// cell is the wafer cell of the line on the wavelengths of the ledger.
type cell struct {
	*pilot.Media
	wafer, film float64 // nm
	shaded      float64
	rays        int
}

func newCell(wafer, film float64, rays int) (*cell, error) {
	media, err := pilot.NewMedia(300, 1200, 10)
	if err != nil {
		return nil, err
	}
	shares, err := pilot.Grid.Shares()
	return &cell{media, wafer, film, shares.Shaded, rays}, err
}

// variants are the ways in which the wafer can be finished.
var variants = map[string]func(*cell) (spectrum.Ledger, error){
	"textured":   (*cell).textured,
	"planar":     (*cell).planar,
	"lambertian": (*cell).lambertian,
}

// The destinations, in the order of the table.
const (
	carriers = iota
	freeCarriers
	coating
	rearOxide
	rearMetal
	escaped
	reflected
	shaded
	destinations
)

var names = [destinations]string{"carriers in silicon", "free carriers", "coating", "rear oxide", "rear metal", "escaped", "reflected", "shaded"}

// book enters one wavelength; the shares and standard errors are those of the
// light between the fingers.
func (c *cell) book(l *spectrum.Ledger, shares, errors [destinations]float64) {
	shares[shaded] = c.shaded / (1 - c.shaded)
	for k := range l.Entries {
		e := &l.Entries[k]
		e.Share = append(e.Share, (1-c.shaded)*shares[k])
		e.StdError = append(e.StdError, (1-c.shaded)*errors[k])
	}
}

func (c *cell) ledger() spectrum.Ledger {
	l := spectrum.Ledger{Spectrum: spectrum.AM15G(), Wavelength: c.Wavelength}
	for _, name := range names {
		l.Entries = append(l.Entries, spectrum.Entry{Name: name})
	}
	return l
}

// textured has random pyramids in front and a planar rear, traced by rays.
func (c *cell) textured() (spectrum.Ledger, error) {
	l := c.ledger()
	wafers := make([]lighttrap.Wafer, len(c.Wavelength))
	for i := range wafers {
		var err error
		if wafers[i], err = c.Wafer(i, lighttrap.RandomPyramids, c.wafer, c.film); err != nil {
			return l, err
		}
	}
	results, err := lighttrap.TraceAll(nil, wafers, lighttrap.Light{}, lighttrap.Settings{Rays: c.rays, Seed: 1})
	if err != nil {
		return l, err
	}
	for i := range results {
		var share, stdError [destinations]float64
		r := &results[i]
		for k, e := range [destinations]lighttrap.Estimate{
			carriers: r.Absorbed, freeCarriers: r.FreeCarriers, coating: r.FrontFilms[0], rearOxide: r.RearFilms[0],
			rearMetal: r.Transmitted, escaped: r.Escaped, reflected: r.Reflected,
		} {
			share[k], stdError[k] = e.Value, e.Error
		}
		share[escaped] += r.Unfinished.Value
		c.book(&l, share, stdError)
	}
	return l, nil
}

// planar has flat faces: thin films coherent, the wafer incoherent.
func (c *cell) planar() (spectrum.Ledger, error) {
	ledger := c.ledger()
	var solver optics.Solver
	var whole, front optics.Response
	for i, l := range c.Wavelength {
		total := c.BandToBand[i] + c.FreeCarriers[i]
		n := complex(real(c.Silicon[i]), nk.ExtinctionCoefficient(total, l))
		stack := optics.Stack{Front: 1, Films: c.FrontFilms(i, c.film), Back: n}
		if err := solver.Solve(&front, stack, optics.Wave{Wavelength: l}); err != nil {
			return ledger, fmt.Errorf("%g nm: %w", l, err)
		}
		stack.Films = append(append(stack.Films, optics.Film{Index: n, Thickness: c.wafer, Incoherent: true}), c.RearFilms(i)...)
		stack.Back = c.Aluminium[i]
		if err := solver.Solve(&whole, stack, optics.Wave{Wavelength: l}); err != nil {
			return ledger, fmt.Errorf("%g nm: %w", l, err)
		}
		generating := c.BandToBand[i] / total
		c.book(&ledger, [destinations]float64{
			carriers: whole.A[1] * generating, freeCarriers: whole.A[1] * (1 - generating), coating: whole.A[0], rearOxide: whole.A[2],
			rearMetal: whole.T, escaped: max(0, whole.R-front.R), reflected: front.R,
		}, [destinations]float64{})
	}
	return ledger, nil
}

// lambertian has faces that scatter all light: coating and rear meet isotropic
// light from inside.
func (c *cell) lambertian() (spectrum.Ledger, error) {
	ledger := c.ledger()
	var front optics.Response
	var solver optics.Solver
	for i, l := range c.Wavelength {
		stack := optics.Stack{Front: 1, Films: c.FrontFilms(i, c.film), Back: c.Silicon[i]}
		if err := solver.Solve(&front, stack, optics.Wave{Wavelength: l}); err != nil {
			return ledger, fmt.Errorf("%g nm: %w", l, err)
		}
		wafer, err := c.Wafer(i, lighttrap.Planar, c.wafer, c.film)
		if err != nil {
			return ledger, err
		}
		rf, film := diffuse(wafer.Front.Films.Inside)
		rb, oxide := diffuse(wafer.Rear.Films.Inside)
		b, err := lighttrap.Slab{
			Absorption: c.BandToBand[i], FreeCarriers: c.FreeCarriers[i], Thickness: c.wafer,
			FrontReflectance: front.R + front.A[0], FrontInternal: rf, RearReflectance: rb,
		}.Lambertian()
		if err != nil {
			return ledger, fmt.Errorf("%g nm: %w", l, err)
		}
		// What leaves through a face is shared between its film and what lies behind.
		inFilm, inOxide := b.Escaped*film/(1-rf), b.RearLoss*oxide/(1-rb)
		c.book(&ledger, [destinations]float64{
			carriers: b.Absorbed, freeCarriers: b.FreeCarriers, coating: front.A[0] + inFilm, rearOxide: inOxide,
			rearMetal: b.RearLoss - inOxide, escaped: b.Escaped - inFilm, reflected: front.R,
		}, [destinations]float64{})
	}
	return ledger, nil
}

// diffuse returns reflectance and absorptance of the only film for isotropic
// unpolarised light.
func diffuse(side lighttrap.FacetSide) (reflectance, film float64) {
	s, p := lighttrap.DiffuseMean(side.Cos, side.RS), lighttrap.DiffuseMean(side.Cos, side.RP)
	as, ap := lighttrap.DiffuseMean(side.Cos, side.AS[0]), lighttrap.DiffuseMean(side.Cos, side.AP[0])
	return (s + p) / 2, math.Max(0, (as+ap)/2)
}
