package main

import (
	"fmt"

	"photonledger/absorb"
	"photonledger/nk"
	"photonledger/optics"
	"photonledger/spectrum"
)

const nmPerMicron = 1e3

// layer is one film of the invented thin-film cell, a superstrate cell on glass.
type layer struct {
	material   string
	thickness  float64 // nm
	incoherent bool
}

// thinFilm returns the generation in a cadmium telluride absorber behind glass,
// transparent oxide and cadmium sulfide, in front of molybdenum.
func thinFilm(absorber float64, shares []float64) (profile, error) {
	layers := []layer{
		{"glass_lowiron_vogt2016", 3.2e6, true}, {"ito_konig2014", 150, false}, {"cds_treharne2011", 60, false}, {"cdte_treharne2011", absorber, false},
	}
	const absorberLayer = 3
	var wavelength []float64
	for l := 320.0; l <= 900; l += 2 {
		wavelength = append(wavelength, l)
	}
	index := make([][]complex128, len(layers)+1)
	for j, name := range []string{layers[0].material, layers[1].material, layers[2].material, layers[3].material, "mo_kirillova1971"} {
		material, err := nk.Material(name)
		if err != nil {
			return profile{}, err
		}
		if index[j], err = material.Sample(nil, wavelength); err != nil {
			return profile{}, err
		}
	}

	var solver optics.Solver
	var all []optics.Profile
	stack := optics.Stack{Front: 1, Films: make([]optics.Film, len(layers))}
	profiles, share := make([]absorb.Profile, len(wavelength)), make([]float64, len(wavelength))
	for i, l := range wavelength {
		for j, f := range layers {
			stack.Films[j] = optics.Film{Index: index[j][i], Thickness: f.thickness, Incoherent: f.incoherent}
		}
		stack.Back = index[len(layers)][i]
		var err error
		if all, err = solver.Profiles(all, stack, optics.Wave{Wavelength: l}); err != nil {
			return profile{}, fmt.Errorf("%g nm: %w", l, err)
		}
		profiles[i] = absorb.Profile(all[absorberLayer])
		share[i] = profiles[i].Absorptance()
	}
	p := profile{name: fmt.Sprintf("CdTe film, %g nm", absorber), mesh: scaled(shares, absorber)}
	photons, err := photonsAt(wavelength)
	if err != nil {
		return profile{}, err
	}
	if p.rate, err = absorb.GenerationFromProfiles(p.mesh, photons, profiles); err != nil {
		return profile{}, err
	}
	p.absorbed, err = spectrum.Photocurrent(spectrum.AM15G(), wavelength, share)
	return p, err
}

// photonsAt returns the photons (cm^-2 s^-1) that each wavelength stands for in
// the exact integral of the spectrum.
func photonsAt(wavelength []float64) ([]float64, error) {
	weights, err := spectrum.Weights(nil, spectrum.AM15G(), wavelength, spectrum.Photons)
	for i := range weights {
		weights[i] *= absorb.PhotonsPerCurrent
	}
	return weights, err
}

func scaled(shares []float64, thickness float64) []float64 {
	mesh := make([]float64, len(shares))
	for i, s := range shares {
		mesh[i] = s * thickness
	}
	return mesh
}
