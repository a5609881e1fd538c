package absorb_test

import (
	"fmt"

	"photonledger/absorb"
)

// Generation in a silicon wafer with a rear mirror, on the mesh of a device
// simulator that is fine at the front: exact means over the cells, which add up to
// the absorbed photons.
func ExampleGenerator_Profiles() {
	wavelength := []float64{600, 700, 800, 900, 1000, 1100}           // nm
	flux := []float64{4.6e14, 4.6e14, 4.4e14, 4.2e14, 3.7e14, 2.6e14} // cm^-2 s^-1 nm^-1
	alpha := []float64{4175, 1890, 850, 303, 64, 3.5}                 // 1/cm, silicon at 300 K

	photons, err := absorb.TrapezoidPhotons(nil, wavelength, flux)
	if err != nil {
		fmt.Println(err)
		return
	}
	profiles := make([]absorb.Profile, len(wavelength))
	absorbed := 0.0
	for i, a := range alpha {
		wafer := absorb.Slab{Absorption: a, Thickness: 160e3, FrontReflectance: 0.03, FrontInternal: 0.6, RearReflectance: 0.9}
		if profiles[i], err = wafer.Profile(); err != nil {
			fmt.Println(err)
			return
		}
		absorbed += photons[i] * profiles[i].Absorptance()
	}
	mesh := []float64{0, 100, 1e3, 10e3, 50e3, 160e3} // nm
	var g absorb.Generator
	rate, err := g.Profiles(nil, mesh, photons, profiles)
	if err != nil {
		fmt.Println(err)
		return
	}
	for i, r := range rate {
		fmt.Printf("%6.0f to %6.0f nm: %.3e /(cm³ s)\n", mesh[i], mesh[i+1], r)
	}
	current, err := absorb.GenerationCurrent(mesh, rate)
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("%.3f mA/cm² on the mesh, %.3f absorbed\n", current, absorbed/absorb.PhotonsPerCurrent)
	// Output:
	//      0 to    100 nm: 2.261e+20 /(cm³ s)
	//    100 to   1000 nm: 2.002e+20 /(cm³ s)
	//   1000 to  10000 nm: 8.610e+19 /(cm³ s)
	//  10000 to  50000 nm: 1.401e+19 /(cm³ s)
	//  50000 to 160000 nm: 2.879e+18 /(cm³ s)
	// 29.718 mA/cm² on the mesh, 29.718 absorbed
}

// Quantum efficiency of a wafer cell with a dead layer, and what it would be
// without the dead layer.
func ExampleQuantumEfficiency() {
	const wafer, dead = 160e3, 50.0
	cell := absorb.Junction{
		FrontLayer: dead,
		Base:       absorb.Base{Thickness: wafer - dead, DiffusionLength: 800e3, Diffusivity: 29, RearVelocity: 50},
	}
	best := cell
	best.FrontCollection = 1
	for _, light := range []struct{ nm, alpha, reflectance float64 }{{400, 92991, 0.12}, {700, 1890, 0.02}, {1000, 64, 0.05}} {
		p, err := absorb.Slab{Absorption: light.alpha, Thickness: wafer, FrontReflectance: light.reflectance, FrontInternal: 0.6, RearReflectance: 0.9}.Profile()
		if err != nil {
			fmt.Println(err)
			return
		}
		eqe, err := absorb.QuantumEfficiency(nil, []absorb.Profile{p}, cell)
		if err != nil {
			fmt.Println(err)
			return
		}
		without, err := absorb.QuantumEfficiency(nil, []absorb.Profile{p}, best)
		if err != nil {
			fmt.Println(err)
			return
		}
		fmt.Printf("%4.0f nm: EQE %.4f, IQE %.4f, EQE without dead layer %.4f\n", light.nm, eqe[0], absorb.InternalQuantumEfficiency(eqe[0], 1-light.reflectance), without[0])
	}
	// Output:
	//  400 nm: EQE 0.5528, IQE 0.6281, EQE without dead layer 0.8800
	//  700 nm: EQE 0.9687, IQE 0.9885, EQE without dead layer 0.9779
	// 1000 nm: EQE 0.8447, IQE 0.8892, EQE without dead layer 0.8451
}

// The effective diffusion length of a base from its internal quantum efficiency
// at six absorption coefficients (made here by the closed form), against L_Q of
// the base.
func ExampleFitLength() {
	base := absorb.Base{Thickness: 300e3, DiffusionLength: 200e3, Diffusivity: 30, RearVelocity: 1000}
	alpha := []float64{850, 660, 535, 432, 383, 303} // 1/cm
	iqe := make([]float64, len(alpha))
	for i, a := range alpha {
		iqe[i] = base.IQE(a)
	}
	fit, err := absorb.FitLength(alpha, iqe, absorb.LengthSettings{})
	if err != nil {
		fmt.Println(err)
		return
	}
	const nmPerUM = 1e3
	fmt.Printf("L_eff %.1f ± %.1f µm from %d points, 1/alpha %.1f to %.1f µm\n", fit.Length/nmPerUM, fit.LengthError/nmPerUM, fit.Points, fit.Shortest/nmPerUM, fit.Longest/nmPerUM)
	fmt.Printf("L_Q   %.1f µm\n", base.EffectiveLength()/nmPerUM)
	// Output:
	// L_eff 206.2 ± 0.2 µm from 6 points, 1/alpha 11.8 to 33.0 µm
	// L_Q   204.0 µm
}

// How thick silicon must be for light of 800 nm, and what is left behind it.
func ExampleThicknessFor() {
	alpha := absorb.AbsorptionCoefficient(0.0054113, 800) // k of silicon at 300 K
	const nmPerUM = 1e3
	fmt.Printf("alpha %.0f /cm, penetration depth %.2f µm\n", alpha, absorb.PenetrationDepth(alpha)/nmPerUM)
	fmt.Printf("99 %% absorbed in %.1f µm, with a rear mirror %.4f in half of it\n", absorb.ThicknessFor(alpha, 0.99)/nmPerUM, absorb.MirrorAbsorptance(alpha, absorb.ThicknessFor(alpha, 0.99)/2, 1))
	// Output:
	// alpha 850 /cm, penetration depth 11.76 µm
	// 99 % absorbed in 54.2 µm, with a rear mirror 0.9900 in half of it
}
