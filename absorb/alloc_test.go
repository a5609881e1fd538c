package absorb

import "testing"

func TestNoAllocations(t *testing.T) {
	const d = 500.0
	mesh, photons, alpha := wafer(100, 20, d)
	profiles := make([]Profile, len(alpha))
	for i := range profiles {
		profiles[i] = Profile{Thickness: d, Decay: alpha[i] * cmPerNM, Wavenumber: 0.05, Forward: 1e-4, Backward: 5e-5, Cos: 1e-5, Sin: 1e-5}
	}
	shares := make([]float64, 20*100)
	for i := range shares {
		shares[i] = 0.005
	}
	base := Base{Thickness: d, DiffusionLength: 1e3, Diffusivity: 1, RearVelocity: 1e4}
	short := Base{Thickness: 5, DiffusionLength: 1e3, Diffusivity: 1, RearVelocity: 1e4}
	shortProfiles := []Profile{{Thickness: 5, Decay: 1e-3, Wavenumber: 0.05, Forward: 1e-4, Backward: 5e-5, Cos: 1e-5, Sin: 1e-5}}
	collections := []Collection{Constant(0.9), base, Junction{FrontLayer: 10, Depletion: 20, Base: Base{Thickness: d - 30, DiffusionLength: 1e3, Diffusivity: 1}}, Table{Depth: []float64{0, 100, d}, Probability: []float64{0, 1, 0.5}}}
	var g Generator
	rate, eqe, one := make([]float64, 100), make([]float64, 20), make([]float64, 1)
	var brief Collection = short
	for name, f := range map[string]func() error{
		"profiles":  func() error { _, err := g.Profiles(rate, mesh, photons, profiles); return err },
		"alpha":     func() error { _, err := g.Alpha(rate, mesh, photons, alpha); return err },
		"histogram": func() error { _, err := g.Histogram(rate, mesh, photons, mesh, shares); return err },
		"photons":   func() error { _, err := TrapezoidPhotons(rate, mesh[1:], rate); return err },
		"quantum efficiency": func() error {
			for _, c := range collections {
				if _, err := QuantumEfficiency(eqe, profiles, c); err != nil {
					return err
				}
			}
			return nil
		},
		"short base": func() error { _, err := QuantumEfficiency(one, shortProfiles, brief); return err },
		"current": func() error {
			for _, c := range collections {
				if _, err := CollectedCurrent(mesh, rate, c); err != nil {
					return err
				}
			}
			return nil
		},
	} {
		if err := f(); err != nil {
			t.Fatalf("%s: %v", name, err)
		}
		if n := testing.AllocsPerRun(20, func() { _ = f() }); n != 0 {
			t.Errorf("%s: %g allocations", name, n)
		}
	}
}
