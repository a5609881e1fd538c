package spectrum

import "testing"

// TestAllocations: workers and functions with a dst allocate nothing.
func TestAllocations(t *testing.T) {
	s := AM15G()
	share := make([]float64, len(s.Wavelength))
	for i, l := range s.Wavelength {
		share[i] = l / 4000
	}
	factor := Curve{Wavelength: []float64{280, 4000}, Value: []float64{0.9, 0.95}}
	dst := make([]float64, len(s.Wavelength))
	var in Integrator
	if err := in.Prepare(s, s.Wavelength, Photons); err != nil {
		t.Fatal(err)
	}
	var c Colorimeter
	if err := c.Prepare(s.Wavelength); err != nil {
		t.Fatal(err)
	}
	for name, f := range map[string]func() error{
		"Integrator.Prepare":        func() error { return in.Prepare(s, s.Wavelength, Photons) },
		"Integrator.PrepareProduct": func() error { return in.PrepareProduct(s, factor, s.Wavelength, Photons) },
		"Integrator.Integral":       func() error { _, err := in.Integral(share); return err },
		"Integrator.Mean":           func() error { _, err := in.Mean(share); return err },
		"Colorimeter.Colour":        func() error { _, err := c.Colour(share); return err },
		"Weights":                   func() error { _, err := Weights(dst, s, s.Wavelength, Photons); return err },
		"Cumulative":                func() error { _, err := Cumulative(dst, s, s.Wavelength, share, Photons); return err },
		"CellIntegrals":             func() error { _, err := CellIntegrals(dst[1:], s, s.Wavelength, Photons); return err },
		"Spectrum.PhotonFlux":       func() error { _, err := s.PhotonFlux(dst); return err },
		"Spectrum.Values":           func() error { _, err := s.Values(dst, s.Wavelength); return err },
	} {
		var err error
		if n := testing.AllocsPerRun(10, func() { err = f() }); n != 0 || err != nil {
			t.Errorf("%s: %g allocations, error %v", name, n, err)
		}
	}
}
