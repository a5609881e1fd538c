package main

import (
	"math"

	"photonledger/absorb"
	"photonledger/examples/internal/pilot"
	"photonledger/lighttrap"
	"photonledger/spectrum"
)

// row holds the photocurrents of one thickness, mA/cm².
type row struct {
	um                                          float64
	single, mirror, pyramids, lambertian, limit float64
	stdError                                    float64 // of pyramids
}

// wafers holds what does not depend on the thickness: the media, the weight of
// each wavelength in the photocurrent, and the traced wafer with its facets.
type wafers struct {
	media       *pilot.Media
	weights     []float64 // mA/cm²
	traced      []lighttrap.Wafer
	reflectance float64
	rays        int
	batch       lighttrap.Batch
	results     []lighttrap.Result
}

func newWafers(o options) (*wafers, error) {
	media, err := pilot.NewMedia(300, 1200, 10)
	if err != nil {
		return nil, err
	}
	w := &wafers{media: media, reflectance: o.reflectance, rays: o.rays}
	if w.weights, err = spectrum.Weights(nil, spectrum.AM15G(), media.Wavelength, spectrum.Photons); err != nil {
		return nil, err
	}
	mirror := lighttrap.UniformFacet(1, o.reflectance)
	for i := range media.Wavelength {
		wafer, err := media.Wafer(i, lighttrap.RandomPyramids, 0, o.nitride)
		if err != nil {
			return nil, err
		}
		wafer.FreeCarriers = 0
		wafer.Rear = lighttrap.Face{Opaque: true, Films: &mirror}
		w.traced = append(w.traced, wafer)
	}
	w.results = make([]lighttrap.Result, len(w.traced))
	return w, nil
}

// row computes the photocurrents of a wafer of um µm; only the pyramids reflect.
func (w *wafers) row(um float64) (row, error) {
	r := row{um: um}
	thickness := um * pilot.NMPerMicron
	for i, weight := range w.weights {
		alpha, n := w.media.BandToBand[i], real(w.media.Silicon[i])
		ideal, err := lighttrap.Slab{
			Absorption: alpha, Thickness: thickness, FrontInternal: 1 - 1/(n*n), RearReflectance: w.reflectance,
		}.Lambertian()
		if err != nil {
			return r, err
		}
		r.single += weight * absorb.Absorptance(alpha, thickness)
		r.mirror += weight * absorb.MirrorAbsorptance(alpha, thickness, w.reflectance)
		r.lambertian += weight * ideal.Absorbed
		r.limit += weight * lighttrap.LimitAbsorptance(absorb.OpticalDepth(alpha, thickness), n)
		w.traced[i].Thickness = thickness
	}
	results, err := w.batch.TraceAll(w.results, w.traced, lighttrap.Light{}, lighttrap.Settings{Rays: w.rays, Seed: 1})
	if err != nil {
		return r, err
	}
	for i, weight := range w.weights {
		r.pyramids += weight * results[i].Absorbed.Value
		r.stdError = math.Hypot(r.stdError, weight*results[i].Absorbed.Error)
	}
	return r, nil
}
