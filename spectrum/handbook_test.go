package spectrum

import (
	"fmt"
	"math"
	"testing"

	"photonledger/internal/check"
)

// TestHandbook compares with the published values of testdata/handbook; each
// row names its source and how it is known.
func TestHandbook(t *testing.T) {
	rows, err := check.Load("../testdata/handbook/spectrum_integrals.csv")
	if err != nil {
		t.Fatal(err)
	}
	for _, row := range rows {
		got, err := evaluate(row)
		if err == nil {
			err = row.Judge(got)
		}
		if err != nil {
			t.Error(err)
		}
	}
}

var standard = map[string]func() Spectrum{"global": AM15G, "direct": AM15D, "extraterrestrial": AM0, "": AM15G}

func evaluate(row check.Row) (float64, error) {
	s := standard[row.Inputs["spectrum"]]()
	window := []float64{row.Num("from"), row.Num("to")}
	all := []float64{1, 1}
	switch row.Quantity {
	case "irradiance":
		return s.Total()
	case "gap_current":
		return MaxPhotocurrent(s, row.Num("gap"))
	case "scaled_gap_current":
		s, err := s.ScaleTo(1000)
		if err != nil {
			return 0, err
		}
		return MaxPhotocurrent(s, row.Num("gap"))
	case "window_current":
		return Photocurrent(s, window, all)
	case "window_irradiance":
		return AbsorbedPower(s, window, all)
	case "photon_flux":
		j, err := Photocurrent(s, []float64{280, 4000}, all)
		return j / (charge * milliPerOne), err
	case "mismatch":
		// Responsivities of ideal devices: proportional to wavelength up to the gap.
		device := func(gap float64) Response {
			edge := WavelengthOfEnergy / gap
			return Response{Wavelength: []float64{280, edge}, Value: []float64{280, edge}}
		}
		return Mismatch(standard[row.Inputs["reference"]](), standard[row.Inputs["measured"]](), device(row.Num("reference_gap")), device(row.Num("device_gap")))
	case "responsivity":
		return Responsivity(row.Num("wavelength"), row.Num("eqe")), nil
	case "radiance":
		return Radiance(row.Num("wavelength"), row.Num("temperature")), nil
	case "photon_energy_constant":
		return WavelengthOfEnergy, nil
	case "exitance":
		// 0.1 to 400 times the wavelength of Wien's law, in equal ratios.
		peak := 2.9e6 / row.Num("temperature")
		var grid []float64
		for x := 0.08; x < 400; x *= 1.001 {
			grid = append(grid, x*peak)
		}
		s, err := Planck(grid, row.Num("temperature"), math.Pi/2)
		if err != nil {
			return 0, err
		}
		return s.Total()
	}
	return 0, fmt.Errorf("quantity %q is not known here", row.Quantity)
}
