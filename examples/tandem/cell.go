package main

import (
	"fmt"
	"slices"

	"gonum.org/v1/gonum/floats"

	"photonledger/examples/internal/pilot"
	"photonledger/nk"
	"photonledger/optics"
	"photonledger/spectrum"
)

// bandEdge of the perovskite, nm: beyond it the k of the table does not vanish,
// which is a property of that fit and not absorption.
const bandEdge = 800.0

// layer is one layer of the invented tandem.
type layer struct {
	name, material string
	thickness      float64 // nm
	origin         string  // of the optical constants
}

// Positions of the absorbers among the layers.
const (
	perovskite = 2
	silicon    = 4
)

// cell is the stack as a sweep, with the weights of both photocurrents.
type cell struct {
	layers      []layer
	metal       layer // behind the last one
	sweep       optics.Sweep
	sweeper     optics.GradientSweeper
	weights     []float64            // mA/cm² of one electron per photon
	top, bottom *optics.SweepWeights // of the two photocurrents
}

// effect holds what the thickness of one layer changes, per nm: both currents
// (mA/cm²), and at the match its place (nm of perovskite) and its current.
type effect struct{ top, bottom, match, matched float64 }

// point is the state at one thickness of the perovskite; currents in mA/cm².
type point struct {
	thickness, top, bottom float64
	takes                  []float64 // by each layer
	tail                   float64   // of what the perovskite takes, beyond its band edge
	reflected, transmitted float64
	total                  float64
	effects                []effect // of each layer
	response               optics.SweepResponse
}

// newCell fills the sweep. Without the tail, the k of the perovskite is 0 beyond
// its band edge. All tables cover the wavelengths: that of the perovskite begins
// at 300.01 nm.
func newCell(o options, tail bool) (*cell, error) {
	c := &cell{
		layers: []layer{
			{name: "magnesium fluoride", material: "mgf2_rodriguez2017", thickness: o.fluoride},
			{name: "front oxide", material: "ito_minenkov2024", thickness: o.front},
			{name: "perovskite", material: "mapbi3_phillips2015"},
			{name: "junction oxide", material: "ito_minenkov2024", thickness: o.back},
			{name: "silicon", material: "si_green2008", thickness: o.wafer * pilot.NMPerMicron},
			{name: "rear oxide", material: "sio2_rodriguez2016", thickness: pilot.RearOxide},
		},
		metal: layer{name: "rear metal", material: "al_rakic1995"},
	}
	var wavelength []float64
	for l := 302.0; l <= 1200; l += 2 {
		wavelength = append(wavelength, l)
	}
	edge, _ := slices.BinarySearch(wavelength, bandEdge)
	c.sweep = optics.NewSweep(wavelength, len(c.layers))
	c.sweep.Incoherent[silicon] = true
	for j := range c.layers {
		index, err := c.layers[j].sample(wavelength)
		if err != nil {
			return nil, err
		}
		if j == perovskite && !tail {
			for i := edge; i < len(index); i++ {
				index[i] = complex(real(index[i]), 0)
			}
		}
		if err := c.sweep.SetFilm(j, index, c.layers[j].thickness); err != nil {
			return nil, err
		}
	}
	metal, err := c.metal.sample(wavelength)
	if err != nil {
		return nil, err
	}
	if err := c.sweep.SetBack(metal); err != nil {
		return nil, err
	}
	w := len(wavelength)
	if c.weights, err = spectrum.Weights(nil, spectrum.AM15G(), wavelength, spectrum.Photons); err != nil {
		return nil, err
	}
	c.top = &optics.SweepWeights{A: make([]float64, len(c.layers)*w)}
	c.bottom = &optics.SweepWeights{A: make([]float64, len(c.layers)*w)}
	copy(c.bottom.A[silicon*w:], c.weights)
	_, err = spectrum.Weights(c.top.A[perovskite*w:perovskite*w+edge+1], spectrum.AM15G(), wavelength[:edge+1], spectrum.Photons)
	return c, err
}

// sample returns the indices of a layer and notes where they come from.
func (l *layer) sample(wavelength []float64) ([]complex128, error) {
	table, err := nk.MaterialTable(l.material)
	if err != nil {
		return nil, err
	}
	low, high := table.Range()
	l.origin = fmt.Sprintf("%s, %.5g nm to %.5g nm; %s", table.Source, low, high, table.Conditions)
	material, err := table.Interpolate()
	if err != nil {
		return nil, err
	}
	return material.Sample(nil, wavelength)
}

// at computes currents and derivatives at a thickness of the perovskite.
func (c *cell) at(thickness float64) (point, error) {
	c.sweep.Thickness[perovskite] = thickness
	p := point{thickness: thickness}
	var top, bottom optics.SweepGradient
	if err := c.sweeper.Run(&top, &p.response, &c.sweep, c.top); err != nil {
		return p, err
	}
	if err := c.sweeper.Run(&bottom, nil, &c.sweep, c.bottom); err != nil {
		return p, err
	}
	p.top, p.bottom = top.Value, bottom.Value
	// The match moves along top = bottom: its slope follows from the implicit
	// function theorem.
	slope := top.Thickness[perovskite] - bottom.Thickness[perovskite]
	for j, t := range top.Thickness {
		b := bottom.Thickness[j]
		move := (b - t) / slope
		p.effects = append(p.effects, effect{top: t, bottom: b, match: move, matched: t + top.Thickness[perovskite]*move})
	}
	w := len(c.weights)
	for j := range c.layers {
		p.takes = append(p.takes, floats.Dot(c.weights, p.response.A[j*w:(j+1)*w]))
	}
	p.tail = p.takes[perovskite] - p.top
	p.reflected, p.transmitted = floats.Dot(c.weights, p.response.R), floats.Dot(c.weights, p.response.T)
	p.total = floats.Sum(p.takes) + p.reflected + p.transmitted
	return p, nil
}

// design returns the currents over the thickness of the perovskite, and the match.
func (c *cell) design() (curve []point, match point, err error) {
	for d := 100.0; d <= 1000; d += 20 {
		p, err := c.at(d)
		if err != nil {
			return nil, p, err
		}
		curve = append(curve, p)
	}
	match, err = c.match(curve)
	return curve, match, err
}

// match finds the thickness of equal currents: Newton's steps with the derivative
// of the sweep, kept between the points of the curve that enclose the zero.
func (c *cell) match(curve []point) (point, error) {
	const enough = 1e-10 // mA/cm²
	for i := 1; i < len(curve); i++ {
		lo, hi := curve[i-1], curve[i]
		if (lo.top-lo.bottom)*(hi.top-hi.bottom) > 0 {
			continue
		}
		p := lo
		for range 50 {
			next := p.thickness - (p.top-p.bottom)/(p.effects[perovskite].top-p.effects[perovskite].bottom)
			if !(next > lo.thickness && next < hi.thickness) {
				next = 0.5 * (lo.thickness + hi.thickness)
			}
			var err error
			if p, err = c.at(next); err != nil {
				return p, err
			}
			difference := p.top - p.bottom
			if difference < enough && difference > -enough {
				return p, nil
			}
			if difference*(lo.top-lo.bottom) > 0 {
				lo = p
			} else {
				hi = p
			}
		}
		return p, fmt.Errorf("the currents differ by %g mA/cm² after 50 steps", p.top-p.bottom)
	}
	return point{}, fmt.Errorf("the currents do not match between %g nm and %g nm of perovskite", curve[0].thickness, curve[len(curve)-1].thickness)
}
