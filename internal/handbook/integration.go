package handbook

import (
	"fmt"
	"math"
	"sort"

	"photonledger/internal/check"
	"photonledger/lighttrap"
	"photonledger/nk"
	"photonledger/spectrum"
)

// integrationQuantity computes a row that needs several packages.
func integrationQuantity(r check.Row) (float64, error) {
	if r.Quantity == "slab_current" {
		return slabCurrent(r)
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
		j := max(1, sort.SearchFloat64s(table.Wavelength, l))
		a, b := table.Wavelength[j-1], table.Wavelength[j]
		t := (l - a) / (b - a)
		n := table.N[j-1] + t*(table.N[j]-table.N[j-1])
		alpha := math.Exp((1-t)*math.Log(nk.AbsorptionCoefficient(table.K[j-1], a)) + t*math.Log(nk.AbsorptionCoefficient(table.K[j], b)))
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
