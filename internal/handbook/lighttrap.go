package handbook

import (
	"math"

	"photonledger/internal/check"
	"photonledger/lighttrap"
)

const cmPerNM = 1e-7

// lighttrapQuantity computes a row about slabs and diffuse light.
func lighttrapQuantity(row check.Row) (float64, error) {
	n, x := row.Num("n"), row.Num("x")
	// A slab of 1 µm with ideal transparent Lambertian faces of index n.
	slab := lighttrap.Slab{Thickness: 1e3, FrontInternal: 1 - 1/(n*n), RearReflectance: row.Num("rb")}
	switch row.Quantity {
	case "diffuse_transmittance":
		t, _ := lighttrap.DiffuseTransmittance(x)
		return t, nil
	case "diffuse_loss":
		_, loss := lighttrap.DiffuseTransmittance(x)
		return loss, nil
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
		return lighttrap.LimitAbsorptance(x, n), nil
	case "path_limit":
		return lighttrap.PathLimit(n), nil
	case "path_limit_acceptance":
		return lighttrap.PathLimitAcceptance(n, row.Num("angle")*math.Pi/180), nil
	case "diffuse_outside":
		out, _ := lighttrap.DiffuseReflectance(n)
		return out, nil
	case "diffuse_inside":
		_, in := lighttrap.DiffuseReflectance(n)
		return in, nil
	}
	return textureQuantity(row)
}
