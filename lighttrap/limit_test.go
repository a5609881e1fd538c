package lighttrap_test

import (
	"math"
	"testing"

	"photonledger/lighttrap"
	"photonledger/nk"
	"photonledger/spectrum"
)

// TestPublishedSiliconLimit: the photocurrent of an undoped silicon wafer of
// 110 µm with ideal faces is 43.31 mA/cm² in A. Richter, M. Hermle, S. W. Glunz, IEEE
// J. Photovolt. 3, 1184 (2013), at an open-circuit voltage of 761.3 mV (both figures
// from memory), by the formula of Tiedje et al. with free carriers.
//
// The same formula with the table of Schinke et al. 2015, without free carriers, on
// ASTM G173-03 as tabulated, gives 43.41. What lies between:
//
//   - the spectrum of IEC 60904-3 has 1000 W/m², that of ASTM 1000.37: -0.016;
//   - free carriers of the light itself. At 761.3 mV there are 2.4e16 cm⁻³ of both
//     kinds; with the coefficients of Rüdiger et al. 2013 (from memory): -0.07 if the
//     current was computed at that density, nothing if at short circuit;
//   - the absorption coefficient, whose published standard uncertainty (12 % at
//     1200 nm) moves the current by 0.04. The paper used older data.
//
// So the published figure must lie between the current with all of that taken
// off and the current with none of it.
func TestPublishedSiliconLimit(t *testing.T) {
	const (
		published = 43.31 // mA/cm², from memory
		thickness = 110e3 // nm
		voltage   = 0.7613
		intrinsic = 9.65e9          // cm⁻³ at 300 K, P. P. Altermatt et al., J. Appl. Phys. 93, 1598 (2003), from memory
		thermal   = 0.0258519997864 // V at 300 K, computed
		iec       = 1000 / 1000.37066
		lastNM    = 1450
		cmPerNM   = 1e-7
		nmPerUM   = 1e3
	)
	silicon, err := nk.Material("si_schinke2015")
	if err != nil {
		t.Fatal(err)
	}
	light, err := spectrum.AM15G().Slice(280, lastNM)
	if err != nil {
		t.Fatal(err)
	}
	// current of the wafer with a carrier density (cm⁻³) and the absorption moved by
	// as many standard uncertainties.
	current := func(density, deviations float64) float64 {
		share := make([]float64, len(light.Wavelength))
		for i, l := range light.Wavelength {
			index, err := silicon.At(l)
			if err != nil {
				t.Fatal(err)
			}
			u, err := silicon.RelativeUncertainty(l)
			if err != nil {
				t.Fatal(err)
			}
			// Beyond 1400 nm the uncertainty exceeds the value.
			band := nk.AbsorptionCoefficient(imag(index), l) * math.Max(0, 1+deviations*u)
			um := l / nmPerUM
			free := density * (1.8e-18*math.Pow(um, 2.6) + 2.6e-18*math.Pow(um, 2.4))
			if band > 0 {
				share[i] = lighttrap.LimitAbsorptance((band+free)*thickness*cmPerNM, real(index)) * band / (band + free)
			}
		}
		j, err := spectrum.Photocurrent(light, light.Wavelength, share)
		if err != nil {
			t.Fatal(err)
		}
		return j
	}
	density := intrinsic * math.Exp(voltage/(2*thermal))
	low, high := iec*current(density, -1), current(0, 1)
	if !(low <= published && published <= high) {
		t.Errorf("published %g mA/cm² is not between %.3f and %.3f", published, low, high)
	}
	// The parts named above, to the digit given there.
	plain := current(0, 0)
	for _, c := range []struct {
		name      string
		got, want float64
		tol       float64
	}{
		{"plain", plain, 43.41, 0.005},
		{"spectrum", plain * (iec - 1), -0.016, 0.0005},
		{"free carriers", current(density, 0) - plain, -0.07, 0.005},
		{"absorption", (current(0, 1) - current(0, -1)) / 2, 0.04, 0.005},
	} {
		if math.Abs(c.got-c.want) > c.tol {
			t.Errorf("%s: %.4f, want %g", c.name, c.got, c.want)
		}
	}
}
