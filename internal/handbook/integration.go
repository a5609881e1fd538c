package handbook

import (
	"fmt"
	"math"
	"sort"
	"strings"

	"photonledger/internal/check"
	"photonledger/lighttrap"
	"photonledger/nk"
	"photonledger/optics"
	"photonledger/spectrum"
)

// integrationQuantity computes a row that needs several packages.
func integrationQuantity(r check.Row) (float64, error) {
	switch r.Quantity {
	case "slab_current":
		return slabCurrent(r)
	case "weighted_reflectance":
		return weightedReflectance(r)
	}
	return 0, fmt.Errorf("quantity %q is not known here", r.Quantity)
}

// slabCurrent is the photocurrent of a silicon slab without reflection, by the
// rule that the rows name: linear n and log-linear alpha between the rows of the
// table, on the rows of the spectrum.
func slabCurrent(r check.Row) (float64, error) {
	table, err := nk.MaterialTable(r.Inputs["material"])
	if err != nil {
		return 0, err
	}
	last := table.Wavelength[len(table.Wavelength)-1]
	light, err := spectrum.AM15G().Slice(280, last)
	if err != nil {
		return 0, err
	}
	share := make([]float64, len(light.Wavelength))
	for i, l := range light.Wavelength {
		n, alpha := betweenRows(table, l)
		slab := lighttrap.Slab{Absorption: alpha, Thickness: r.Num("um") * nmPerMicron, FrontInternal: 1 - 1/(n*n), RearReflectance: 1}
		x := alpha * slab.Thickness * cmPerNM
		var balance lighttrap.Balance
		switch r.Inputs["model"] {
		case "single pass":
			slab.RearReflectance = 0
			balance, err = slab.Planar(1)
		case "double pass":
			slab.FrontInternal = 0
			balance, err = slab.Planar(1)
		case "limit":
			balance.Absorbed = lighttrap.LimitAbsorptance(x, n)
		case "lambertian":
			balance, err = slab.Lambertian()
		default:
			err = fmt.Errorf("model %q", r.Inputs["model"])
		}
		if err != nil {
			return 0, err
		}
		share[i] = balance.Absorbed
	}
	return spectrum.Photocurrent(light, light.Wavelength, share)
}

// betweenRows returns n and the absorption coefficient (1/cm) of a table, n linear
// and the coefficient log-linear between its rows: the rule of the published
// figures, not that of the library.
func betweenRows(table nk.Table, l float64) (n, alpha float64) {
	j := max(1, sort.SearchFloat64s(table.Wavelength, l))
	a, b := table.Wavelength[j-1], table.Wavelength[j]
	t := (l - a) / (b - a)
	n = table.N[j-1] + t*(table.N[j]-table.N[j-1])
	return n, math.Exp((1-t)*math.Log(nk.AbsorptionCoefficient(table.K[j-1], a)) + t*math.Log(nk.AbsorptionCoefficient(table.K[j], b)))
}

// weightedReflectance is the mean reflectance of coated planar silicon over the
// photons of AM1.5 global, sampled at every nm, with n and k linear between the
// rows of the table: the rule of the published figures, not that of the library.
func weightedReflectance(r check.Row) (float64, error) {
	var light spectrum.Spectrum
	for l := r.Num("from"); l <= r.Num("to"); l++ {
		light.Wavelength = append(light.Wavelength, l)
	}
	standard := spectrum.AM15G()
	for _, l := range light.Wavelength {
		e, err := standard.At(l)
		if err != nil {
			return 0, err
		}
		light.Irradiance = append(light.Irradiance, e)
	}
	table, err := nk.MaterialTable("si_green2008")
	if err != nil {
		return 0, err
	}
	wavelength := light.Wavelength
	index := make([]complex128, len(wavelength))
	for i, l := range wavelength {
		j := max(1, sort.SearchFloat64s(table.Wavelength, l))
		t := (l - table.Wavelength[j-1]) / (table.Wavelength[j] - table.Wavelength[j-1])
		index[i] = complex(table.N[j-1]+t*(table.N[j]-table.N[j-1]), table.K[j-1]+t*(table.K[j]-table.K[j-1]))
	}
	films := strings.Fields(r.Inputs["films"])
	sweep := optics.NewSweep(wavelength, len(films))
	if err := sweep.SetBack(index); err != nil {
		return 0, err
	}
	for j, f := range films {
		var n float64
		if _, err := fmt.Sscanf(f, "%g@%g", &n, &sweep.Thickness[j]); err != nil {
			return 0, fmt.Errorf("film %q: %w", f, err)
		}
		for i := range wavelength {
			sweep.N[j*len(wavelength)+i] = n
		}
	}
	response, err := sweep.Run()
	if err != nil {
		return 0, err
	}
	return spectrum.Mean(light, wavelength, response.R, spectrum.Photons)
}
