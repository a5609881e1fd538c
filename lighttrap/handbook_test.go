package lighttrap

import (
	"fmt"
	"math"
	"testing"

	"photonledger/internal/check"
)

// TestHandbook compares with the published values of testdata/handbook; each
// row names its source and how it is known.
func TestHandbook(t *testing.T) {
	for _, file := range []string{"lighttrap_slab.csv", "lighttrap_diffuse.csv"} {
		rows, err := check.Load("../testdata/handbook/" + file)
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
}

func evaluate(row check.Row) (float64, error) {
	n, x := row.Num("n"), row.Num("x")
	// A slab of 1 µm with ideal transparent Lambertian faces of index n.
	slab := Slab{Thickness: 1e3, FrontInternal: 1 - 1/(n*n), RearReflectance: row.Num("rb")}
	switch row.Quantity {
	case "diffuse_transmittance":
		t, _ := DiffuseTransmittance(x)
		return t, nil
	case "lambertian_absorptance":
		slab.Absorption = x / (slab.Thickness * cmPerNM)
		b, err := slab.Lambertian()
		return b.Absorbed, err
	case "lambertian_path":
		b, err := slab.Lambertian()
		return b.PathFactor, err
	case "lambertian_rear_path":
		b, err := slab.LambertianRear(1)
		return b.PathFactor, err
	case "limit_absorptance":
		return LimitAbsorptance(x, n), nil
	case "path_limit":
		return PathLimit(n), nil
	case "path_limit_acceptance":
		return PathLimitAcceptance(n, row.Num("angle")*math.Pi/180), nil
	case "diffuse_outside":
		out, _ := DiffuseReflectance(n)
		return out, nil
	case "diffuse_inside":
		_, in := DiffuseReflectance(n)
		return in, nil
	}
	return 0, fmt.Errorf("quantity %q is not known here", row.Quantity)
}
