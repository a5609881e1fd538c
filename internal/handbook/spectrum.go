package handbook

import (
	"fmt"
	"math"
	"strings"

	"gonum.org/v1/gonum/unit/constant"

	"photonledger/internal/check"
	"photonledger/spectrum"
)

const milliPerOne = 1e3

// standard holds the columns of ASTM G173-03.
var standard = map[string]func() spectrum.Spectrum{"global": spectrum.AM15G, "direct": spectrum.AM15D, "extraterrestrial": spectrum.AM0, "": spectrum.AM15G}

// spectrumQuantity computes a row about spectra and their integrals.
func spectrumQuantity(row check.Row) (float64, error) {
	s := standard[row.Inputs["spectrum"]]()
	window := []float64{row.Num("from"), row.Num("to")}
	all := []float64{1, 1}
	if strings.HasPrefix(row.Quantity, "limit_") {
		return limitQuantity(row)
	}
	switch row.Quantity {
	case "white":
		return whiteQuantity(row)
	case "irradiance":
		return s.Total()
	case "gap_current":
		return spectrum.MaxPhotocurrent(s, row.Num("gap"))
	case "scaled_gap_current":
		s, err := s.ScaleTo(1000)
		if err != nil {
			return 0, err
		}
		return spectrum.MaxPhotocurrent(s, row.Num("gap"))
	case "window_current":
		return spectrum.Photocurrent(s, window, all)
	case "window_irradiance":
		return spectrum.AbsorbedPower(s, window, all)
	case "photon_flux":
		j, err := spectrum.Photocurrent(s, []float64{280, 4000}, all)
		return j / (float64(constant.ElementaryCharge) * milliPerOne), err
	case "mismatch":
		// Responsivities of ideal devices: proportional to wavelength up to the gap.
		device := func(gap float64) spectrum.Curve {
			edge := spectrum.WavelengthOfEnergy / gap
			return spectrum.Curve{Wavelength: []float64{280, edge}, Value: []float64{280, edge}}
		}
		return spectrum.Mismatch(standard[row.Inputs["reference"]](), standard[row.Inputs["measured"]](), device(row.Num("reference_gap")), device(row.Num("device_gap")), spectrum.Power)
	case "responsivity":
		return spectrum.Responsivity(row.Num("wavelength"), row.Num("eqe")), nil
	case "radiance":
		return spectrum.Radiance(row.Num("wavelength"), row.Num("temperature")), nil
	case "photon_energy_constant":
		return spectrum.WavelengthOfEnergy, nil
	case "exitance":
		// 0.1 to 400 times the wavelength of Wien's law, in equal ratios.
		peak := 2.9e6 / row.Num("temperature")
		var grid []float64
		for x := 0.08; x < 400; x *= 1.001 {
			grid = append(grid, x*peak)
		}
		s, err := spectrum.Planck(grid, row.Num("temperature"), math.Pi/2)
		if err != nil {
			return 0, err
		}
		return s.Total()
	}
	return 0, fmt.Errorf("quantity %q is not known here", row.Quantity)
}

// limitQuantity computes a figure of the detailed-balance limit.
func limitQuantity(row check.Row) (float64, error) {
	const temperature = 298.15 // K
	s := spectrum.AM15G()
	j, err := spectrum.MaxPhotocurrent(s, row.Num("gap"))
	if err != nil {
		return 0, err
	}
	j0, err := spectrum.RadiativeCurrentOfGap(row.Num("gap"), temperature)
	if err != nil {
		return 0, err
	}
	d, err := spectrum.IdealDiode(j, j0*row.Num("faces"), temperature)
	if err != nil {
		return 0, err
	}
	switch row.Quantity {
	case "limit_current":
		return j, nil
	case "limit_voltage":
		return d.Voc, nil
	case "limit_fill_factor":
		return d.FillFactor, nil
	case "limit_efficiency": // percent of the irradiance
		const percent, milliwattPerCM2 = 100, 10 // 1 mW/cm² is 10 W/m²
		total, err := s.Total()
		if _, ok := row.Inputs["irradiance"]; ok { // as the source rounded it
			total = row.Num("irradiance")
		}
		return percent * milliwattPerCM2 * d.Power / total, err
	}
	return 0, fmt.Errorf("quantity %q is not known here", row.Quantity)
}

// whiteQuantity computes the colour of a perfect white.
func whiteQuantity(row check.Row) (float64, error) {
	c, err := spectrum.Colour([]float64{380, 780}, []float64{1, 1})
	if err != nil {
		return 0, err
	}
	x, y := c.Chromaticity()
	v, ok := map[string]float64{"x": x, "y": y, "X": c.X, "Y": c.Y, "Z": c.Z}[row.Inputs["component"]]
	if !ok {
		return 0, fmt.Errorf("component %q", row.Inputs["component"])
	}
	return v, nil
}
