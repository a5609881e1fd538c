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
}

// Positions of the absorbers among the layers.
const (
	perovskite = 2
	silicon    = 4
)

// cell is the stack as a sweep, with the weights of both photocurrents.
type cell struct {
	layers      []layer
	sweep       optics.Sweep
	sweeper     optics.GradientSweeper
	weights     []float64            // mA/cm² of one electron per photon
	top, bottom *optics.SweepWeights // of the two photocurrents
}

// point is the state at one thickness of the perovskite; currents in mA/cm².
type point struct {
	thickness, top, bottom, tail float64
	slope                        float64 // of top - bottom, per nm of perovskite

	takes                         []float64 // by each layer
	topSlopes, bottomSlopes       []float64 // derivatives of the currents per nm of each layer
	reflected, transmitted, total float64
	response                      optics.SweepResponse
}

func newCell(o options) (*cell, error) {
	c := &cell{layers: []layer{
		{"magnesium fluoride", "mgf2_rodriguez2017", 100},
		{"front oxide", "ito_minenkov2024", o.front},
		{"perovskite", "mapbi3_phillips2015", 500},
		{"junction oxide", "ito_minenkov2024", o.back},
		{"silicon", "si_green2008", o.wafer * pilot.NMPerMicron},
		{"rear oxide", "sio2_rodriguez2016", pilot.RearOxide},
	}}
	var wavelength []float64
	for l := 302.0; l <= 1200; l += 2 {
		wavelength = append(wavelength, l)
	}
	c.sweep = optics.NewSweep(wavelength, len(c.layers))
	c.sweep.Incoherent[silicon] = true
	c.sweep.Workers = 0
	for j, l := range c.layers {
		index, err := sample(l.material, wavelength)
		if err != nil {
			return nil, err
		}
		if err := c.sweep.SetFilm(j, index, l.thickness); err != nil {
			return nil, err
		}
	}
	metal, err := sample("al_rakic1995", wavelength)
	if err != nil {
		return nil, err
	}
	if err := c.sweep.SetBack(metal); err != nil {
		return nil, err
	}
	if c.weights, err = spectrum.Weights(nil, spectrum.AM15G(), wavelength, spectrum.Photons); err != nil {
		return nil, err
	}
	w := len(wavelength)
	c.top, c.bottom = &optics.SweepWeights{A: make([]float64, len(c.layers)*w)}, &optics.SweepWeights{A: make([]float64, len(c.layers)*w)}
	edge, _ := slices.BinarySearch(wavelength, bandEdge)
	copy(c.top.A[perovskite*w:perovskite*w+edge], c.weights)
	copy(c.bottom.A[silicon*w:(silicon+1)*w], c.weights)
	return c, nil
}

func sample(name string, wavelength []float64) ([]complex128, error) {
	material, err := nk.Material(name)
	if err != nil {
		return nil, err
	}
	return material.Sample(nil, wavelength)
}

// at computes currents and derivatives at a thickness of the perovskite.
func (c *cell) at(thickness float64) (point, error) {
	c.sweep.Thickness[perovskite] = thickness
	return c.atPresent()
}

// atPresent computes currents and derivatives at the thicknesses of the sweep.
func (c *cell) atPresent() (point, error) {
	p := point{thickness: c.sweep.Thickness[perovskite]}
	var top, bottom optics.SweepGradient
	if err := c.sweeper.Run(&top, &p.response, &c.sweep, c.top); err != nil {
		return p, err
	}
	if err := c.sweeper.Run(&bottom, nil, &c.sweep, c.bottom); err != nil {
		return p, err
	}
	p.top, p.bottom = top.Value, bottom.Value
	p.topSlopes, p.bottomSlopes = top.Thickness, bottom.Thickness
	p.slope = top.Thickness[perovskite] - bottom.Thickness[perovskite]
	w := len(c.weights)
	for j := range c.layers {
		p.takes = append(p.takes, floats.Dot(c.weights, p.response.A[j*w:(j+1)*w]))
	}
	p.tail = p.takes[perovskite] - p.top
	p.reflected, p.transmitted = floats.Dot(c.weights, p.response.R), floats.Dot(c.weights, p.response.T)
	p.total = floats.Sum(p.takes) + p.reflected + p.transmitted
	return p, nil
}

// curve returns n points between two thicknesses.
func (c *cell) curve(from, to float64, n int) ([]point, error) {
	var points []point
	for i := range n {
		p, err := c.at(from + (to-from)*float64(i)/float64(n-1))
		if err != nil {
			return nil, err
		}
		points = append(points, p)
	}
	return points, nil
}

// match finds the thickness of equal currents: Newton's steps with the derivative
// of the sweep, kept between the points of the curve that enclose the zero.
func (c *cell) match(curve []point) (point, error) {
	for i := 1; i < len(curve); i++ {
		lo, hi := curve[i-1], curve[i]
		if (lo.top-lo.bottom)*(hi.top-hi.bottom) > 0 {
			continue
		}
		p := lo
		for range 50 {
			next := p.thickness - (p.top-p.bottom)/p.slope
			if !(next > lo.thickness && next < hi.thickness) {
				next = 0.5 * (lo.thickness + hi.thickness)
			}
			var err error
			if p, err = c.at(next); err != nil {
				return p, err
			}
			difference := p.top - p.bottom
			if difference*(lo.top-lo.bottom) > 0 {
				lo = p
			} else {
				hi = p
			}
			if difference < 1e-10 && difference > -1e-10 {
				return p, nil
			}
		}
		return p, fmt.Errorf("the currents differ by %g mA/cm² after 50 steps", p.top-p.bottom)
	}
	return point{}, fmt.Errorf("the currents do not match between %g nm and %g nm of perovskite", curve[0].thickness, curve[len(curve)-1].thickness)
}
