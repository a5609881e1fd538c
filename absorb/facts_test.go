package absorb

import (
	"testing"

	"photonledger/nk"
)

// silicon returns the absorption coefficient (1/cm) of a published table.
func silicon(t *testing.T, name string) func(lambda float64) float64 {
	t.Helper()
	table, err := nk.Material(name)
	if err != nil {
		t.Fatal(err)
	}
	return func(lambda float64) float64 {
		n, err := table.At(lambda)
		if err != nil {
			t.Fatal(err)
		}
		return AbsorptionCoefficient(imag(n), lambda)
	}
}

// TestSiliconFacts holds what every practitioner knows (common practice, no
// source) against both published tables of silicon.
func TestSiliconFacts(t *testing.T) {
	for _, name := range []string{"si_green2008", "si_schinke2015"} {
		alpha := silicon(t, name)

		// The red end of the visible needs about 60 µm to be absorbed almost fully.
		if a := Absorptance(alpha(800), 60e3); !(a > 0.99) {
			t.Errorf("%s: 60 µm absorb %.4f at 800 nm, want more than 0.99", name, a)
		}
		if d := ThicknessFor(alpha(800), 0.99); !(d > 50e3 && d < 60e3) {
			t.Errorf("%s: 0.99 at 800 nm needs %.1f nm, want 50 to 60 µm", name, d)
		}
		// Light absorbed to only 10 % in 100 µm lies between 1055 and 1070 nm.
		if a, b := Absorptance(alpha(1055), 100e3), Absorptance(alpha(1070), 100e3); !(a > 0.1 && b < 0.1) {
			t.Errorf("%s: 100 µm absorb %.4f at 1055 nm and %.4f at 1070 nm, want 0.1 between them", name, a, b)
		}
		// Blue is gone within a micron.
		if thick, err := OpticallyThick(alpha(400), 1e3, 1e-3); err != nil || !thick {
			t.Errorf("%s: 1 µm lets %g of 400 nm pass (%v)", name, Intensity(alpha(400), 1e3), err)
		}

		// Generation is highest at the lit face and falls all the way down.
		var wavelength, flux, a []float64
		for l := 300.; l <= 1200; l += 10 {
			wavelength, flux, a = append(wavelength, l), append(flux, 4e14), append(a, alpha(l))
		}
		photons, err := TrapezoidPhotons(nil, wavelength, flux)
		if err != nil {
			t.Fatal(err)
		}
		mesh := randomMesh(newRand(), 300, 0, 160e3)
		rate, err := GenerationFromAlpha(mesh, photons, a)
		if err != nil {
			t.Fatal(err)
		}
		for c := 1; c < len(rate); c++ {
			if rate[c] >= rate[c-1] {
				t.Errorf("%s: generation %g at %g nm after %g", name, rate[c], mesh[c], rate[c-1])
			}
		}
	}
}
