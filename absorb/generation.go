package absorb

import (
	"fmt"
	"math"
)

// Generator computes generation rates on a mesh. The zero value is ready; one per
// goroutine. It allocates nothing once it has seen its largest mesh.
//
// A mesh is a list of cell boundaries in nm, ascending, counted from the lit face
// of the film; it may cover any part of the film. Results are the exact means
// over each cell, so that the sum of rate times width over the cells is the flux
// absorbed between the first and the last boundary, to rounding (1e-13), whatever
// the mesh.
//
// photons holds the photons (cm^-2 s^-1) that each wavelength stands for: spectral
// flux times integration weight, as [TrapezoidPhotons] gives it, or exact weights
// in mA/cm² times [PhotonsPerCurrent].
type Generator struct {
	width          []float64 // nm, of each cell
	widest         float64   // nm, the largest of them
	mean, transmit []float64 // of each cell: mean of exp(-alpha t) over it, exp(-alpha h)
	counts         []float64 // cm^-2 s^-1, photons absorbed in each cell of a histogram
}

// anchor is the number of cells after which a product of transmittances is
// replaced by its exact value: 32 products keep the error below 1e-14.
const anchor = 32

// Profiles stores in dst the generation rate in cm^-3 s^-1 of every cell,
// the sum over all wavelengths of photons times the mean density of the profile.
// dst is allocated when nil and must have one value less than mesh otherwise.
//
// Errors wrap [ErrInput], or [ErrRange] if the mesh leaves a film.
func (g *Generator) Profiles(dst, mesh, photons []float64, profiles []Profile) ([]float64, error) {
	dst, err := g.start(dst, mesh, photons, len(profiles))
	if err != nil {
		return nil, fmt.Errorf("absorb: generation: %w", err)
	}
	last := mesh[len(mesh)-1]
	for i := range profiles {
		if err := profiles[i].check(); err != nil {
			return nil, fmt.Errorf("absorb: generation: profile %d: %w", i, err)
		}
		if err := checkInside("film", last, profiles[i].Thickness); err != nil {
			return nil, fmt.Errorf("absorb: generation: profile %d: %w", i, err)
		}
	}
	clear(dst)
	for i := range profiles {
		p, rate := &profiles[i], photons[i]*nmPerCM
		switch {
		case p.Backward != 0:
			g.addBeams(dst, mesh, p, rate)
		case p.Forward != 0:
			g.addBeam(dst, mesh, p.Decay, p.Forward*rate)
		}
		if p.Cos != 0 || p.Sin != 0 {
			g.addInterference(dst, mesh, p, rate)
		}
	}
	return finish(dst)
}

// Alpha stores in dst the generation rate in cm^-3 s^-1 of every cell by
// Beer-Lambert's law in one pass,
//
//	G(z) = sum over wavelengths of photons alpha exp(-alpha z),
//
// averaged over the cell. photons are those that enter, after reflection; alpha
// is in 1/cm. dst is allocated when nil and must have one value less than mesh
// otherwise. Errors wrap [ErrInput].
func (g *Generator) Alpha(dst, mesh, photons, alpha []float64) ([]float64, error) {
	dst, err := g.start(dst, mesh, photons, len(alpha))
	if err == nil {
		err = checkAmounts("absorption coefficient", " /cm", alpha, len(photons))
	}
	if err != nil {
		return nil, fmt.Errorf("absorb: generation: %w", err)
	}
	clear(dst)
	for i, a := range alpha {
		decay := a * cmPerNM
		g.addBeam(dst, mesh, decay, photons[i]*a)
	}
	return finish(dst)
}

// GenerationFromProfiles is [Generator.Profiles] for one case.
func GenerationFromProfiles(mesh, photons []float64, profiles []Profile) ([]float64, error) {
	var g Generator
	return g.Profiles(nil, mesh, photons, profiles)
}

// GenerationFromAlpha is [Generator.Alpha] for one case.
func GenerationFromAlpha(mesh, photons, alpha []float64) ([]float64, error) {
	var g Generator
	return g.Alpha(nil, mesh, photons, alpha)
}

// start checks mesh, photons and dst and computes the widths of the cells.
func (g *Generator) start(dst, mesh, photons []float64, wavelengths int) ([]float64, error) {
	if err := checkMesh("mesh", mesh); err != nil {
		return nil, err
	}
	if err := checkAmounts("photon flux", " /(cm² s)", photons, wavelengths); err != nil {
		return nil, err
	}
	cells := len(mesh) - 1
	dst, err := resize(dst, cells)
	if err != nil {
		return nil, err
	}
	if cap(g.width) < cells {
		g.width = make([]float64, cells)
		g.mean = make([]float64, cells)
		g.transmit = make([]float64, cells)
	}
	g.width, g.mean, g.transmit = g.width[:cells], g.mean[:cells], g.transmit[:cells]
	g.widest = 0
	for i := range g.width {
		g.width[i] = mesh[i+1] - mesh[i]
		g.widest = max(g.widest, g.width[i])
	}
	return dst, nil
}

// finish reports rates that overflow.
func finish(dst []float64) ([]float64, error) {
	for i, v := range dst {
		if !finite(v) {
			return nil, fmt.Errorf("absorb: generation: the rate in cell %d overflows: %w", i, ErrInput)
		}
	}
	return dst, nil
}

// attenuate stores, for each cell lo..hi-1, the mean of exp(-decay t) over its
// width and its value at the end.
func (g *Generator) attenuate(decay float64, lo, hi int) {
	width := g.width[lo:hi]
	mean, transmit := g.mean[lo:hi][:len(width)], g.transmit[lo:hi][:len(width)]
	if decay*g.widest <= tinyExp {
		for i, h := range width {
			q := decay * h
			m := meanExpTiny(q)
			mean[i], transmit[i] = m, 1-q*m
		}
		return
	}
	for i, h := range width {
		q := decay * h
		if q > 4*smallExp {
			t := math.Exp(-q)
			mean[i], transmit[i] = (1-t)/q, t
			continue
		}
		// A quarter of the cell, four times.
		q *= 0.25
		m := meanExpSmall(q)
		t := 1 - q*m
		t2 := t * t
		mean[i], transmit[i] = 0.25*m*(1+t)*(1+t2), t2*t2
	}
}

// addBeam adds a beam that falls off with depth and has the given rate at depth 0.
func (g *Generator) addBeam(dst, mesh []float64, decay, rate float64) {
	for lo := 0; lo < len(dst); lo += anchor {
		here := rate * math.Exp(-decay*mesh[lo])
		if here == 0 {
			return
		}
		hi := min(lo+anchor, len(dst))
		g.attenuate(decay, lo, hi)
		g.addDown(dst, here, lo, hi)
	}
}

// addDown adds a beam with the given rate at the upper face of cell lo.
func (g *Generator) addDown(dst []float64, rate float64, lo, hi int) {
	cells := dst[lo:hi]
	mean, transmit := g.mean[lo:hi][:len(cells)], g.transmit[lo:hi][:len(cells)]
	for i := range cells {
		cells[i] += rate * mean[i]
		rate *= transmit[i]
	}
}

// addBeams adds the beams down and up of p.
func (g *Generator) addBeams(dst, mesh []float64, p *Profile, rate float64) {
	g.attenuate(p.Decay, 0, len(dst))
	for lo := 0; lo < len(dst); lo += anchor {
		here := p.Forward * rate * math.Exp(-p.Decay*mesh[lo])
		if here == 0 {
			break
		}
		g.addDown(dst, here, lo, min(lo+anchor, len(dst)))
	}
	for hi := len(dst); hi > 0; hi -= anchor {
		here := p.Backward * rate * math.Exp(-p.Decay*(p.Thickness-mesh[hi]))
		if here == 0 {
			break
		}
		for i := hi - 1; i >= max(hi-anchor, 0); i-- {
			dst[i] += here * g.mean[i]
			here *= g.transmit[i]
		}
	}
}

// addInterference adds the oscillating part of p. The phase is turned on by half
// a cell at a time; where a cell is wide for that, its ends are computed anew.
func (g *Generator) addInterference(dst, mesh []float64, p *Profile, rate float64) {
	k, middle := p.Wavenumber, 0.5*p.Thickness
	a, b := p.Cos*rate, p.Sin*rate
	for lo := 0; lo < len(dst); lo += anchor {
		sin, cos := sinCosAt(k, mesh[lo], middle)
		for i := lo; i < min(lo+anchor, len(dst)); i++ {
			h := g.width[i]
			u := 0.5 * k * h
			if u > smallAngle {
				s, c := sinCosAt(k, mesh[i+1], middle)
				dst[i] += (a*(s-sin) - b*(c-cos)) / (k * h)
				sin, cos = s, c
				continue
			}
			f, c := sinCosSmall(u)
			s := u * f
			sinMid, cosMid := sin*c+cos*s, cos*c-sin*s
			dst[i] += f * (a*cosMid + b*sinMid)
			sin, cos = sinMid*c+cosMid*s, cosMid*c-sinMid*s
		}
	}
}
