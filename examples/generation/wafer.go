package main

import (
	"fmt"
	"math"

	"photonledger/absorb"
	"photonledger/examples/internal/pilot"
	"photonledger/lighttrap"
	"photonledger/spectrum"
)

// texturedWafer returns the generation in a wafer of the line with random
// pyramids in front, from rays traced on the boundaries of the mesh itself.
func texturedWafer(thickness float64, shares []float64) (profile, error) {
	media, err := pilot.NewMedia(300, 1200, 10)
	if err != nil {
		return profile{}, err
	}
	p := profile{name: fmt.Sprintf("textured wafer, %g µm", thickness/nmPerMicron), mesh: scaled(shares, thickness)}
	// The traced cells reach from face to face, the mesh of the user may not.
	edges := p.mesh
	if edges[0] > 0 {
		edges = append([]float64{0}, edges...)
	}
	if edges[len(edges)-1] < thickness {
		edges = append(edges[:len(edges):len(edges)], thickness)
	}
	wafers := make([]lighttrap.Wafer, len(media.Wavelength))
	for i := range wafers {
		if wafers[i], err = media.Wafer(i, lighttrap.RandomPyramids, thickness, 75); err != nil {
			return profile{}, err
		}
	}
	results, err := lighttrap.TraceAll(nil, wafers, lighttrap.Light{}, lighttrap.Settings{Rays: 2048, Seed: 1, Depths: edges})
	if err != nil {
		return profile{}, err
	}
	weights, err := spectrum.Weights(nil, spectrum.AM15G(), media.Wavelength, spectrum.Photons)
	if err != nil {
		return profile{}, err
	}
	var cells []float64
	for i, r := range results {
		p.absorbed += weights[i] * r.Absorbed.Value
		p.stdError = math.Hypot(p.stdError, weights[i]*r.Absorbed.Error)
		for _, e := range r.Profile {
			cells = append(cells, e.Value)
		}
	}
	photons, err := photonsAt(media.Wavelength)
	if err != nil {
		return profile{}, err
	}
	var g absorb.Generator
	p.rate, err = g.Histogram(nil, p.mesh, photons, edges, cells)
	return p, err
}
