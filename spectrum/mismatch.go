package spectrum

import "fmt"

// Response is a spectral responsivity, linear between its wavelengths and zero
// outside them.
type Response struct {
	Wavelength []float64 // nm, strictly ascending
	Value      []float64 // relative or A/W, >= 0, one per wavelength
}

// Responsivity returns the spectral responsivity in A/W of a quantum efficiency
// at a wavelength (nm): EQE e λ/(hc), IEC 60904-8.
func Responsivity(wavelength, eqe float64) float64 {
	return eqe * wavelength / WavelengthOfEnergy
}

// Mismatch returns the spectral mismatch factor of IEC 60904-7 for a device
// under test that is measured with a reference device under a spectrum that is
// not the reference spectrum:
//
//	∫E_ref S_ref ∫E_meas S_dut / (∫E_meas S_ref ∫E_ref S_dut)
//
// (formula from memory). It is 1 if both spectra or both responsivities are
// proportional. The integrals are exact for piecewise linear inputs. The
// responsivities must lie inside both spectra; errors wrap [ErrRange] and
// [ErrInput].
func Mismatch(reference, measured Spectrum, referenceDevice, device Response) (float64, error) {
	var q [2][2]float64
	for i, s := range []Spectrum{reference, measured} {
		for j, r := range []Response{referenceDevice, device} {
			v, err := integral(s, r.Wavelength, r.Value, Power)
			if err != nil {
				return 0, fmt.Errorf("mismatch: %w", err)
			}
			if !(v > 0) {
				return 0, fmt.Errorf("spectrum: mismatch: a device gives no current under %q: %w", s.Name, ErrInput)
			}
			q[i][j] = v
		}
	}
	return q[0][0] * q[1][1] / (q[1][0] * q[0][1]), nil
}
