package handbook

import (
	"fmt"
	"math"

	"photonledger/internal/check"
	"photonledger/lighttrap"
)

// textureQuantity computes a row about pyramids with the facet angle arctan √2
// under normal incidence: the way of one ray from the place (x, y) of a cell, or
// the mean over 2^16 rays.
func textureQuantity(row check.Row) (float64, error) {
	textures := map[string]lighttrap.Texture{"upright": lighttrap.RegularPyramids, "inverted": lighttrap.InvertedPyramids}
	face := lighttrap.Face{Texture: textures[row.Inputs["texture"]], Angle: lighttrap.PyramidAngle}
	n := row.Num("n")
	switch row.Quantity {
	case "facet_refraction", "facet_refraction_from_wafer_normal":
		angle := math.Acos(lighttrap.RefractedCosine(1, n, math.Cos(face.Angle)))
		if row.Quantity == "facet_refraction" {
			return angle / degree, nil
		}
		return (face.Angle - angle) / degree, nil
	case "bounce_share", "array_reflectance":
		if row.Quantity == "bounce_share" {
			n = 3.5 // does not matter
		}
		black := lighttrap.UniformFacet(0, 0)
		r, err := lighttrap.Trace(lighttrap.Wafer{Index: n, Front: face, Rear: lighttrap.Face{Opaque: true, Films: &black}},
			lighttrap.Light{}, lighttrap.Settings{Rays: 1 << 16, Workers: 1})
		if err != nil {
			return 0, err
		}
		if row.Quantity == "bounce_share" {
			return r.Bounces[int(row.Num("bounces"))].Value, nil
		}
		return r.Reflected.Value, nil
	case "bounce_angle", "exit_angle", "bounce_reflectance":
		if row.Quantity != "bounce_reflectance" {
			n = 3.5
		}
		path, err := lighttrap.TraceFacets(face, n, lighttrap.Light{}, row.Num("x"), row.Num("y"))
		if err != nil {
			return 0, err
		}
		switch row.Quantity {
		case "bounce_reflectance":
			return path.Reflectance, nil
		case "exit_angle":
			return math.Acos(path.Direction[2]) / degree, nil
		}
		i := int(row.Num("bounce")) - 1
		if i < 0 || i >= len(path.Cos) {
			return 0, fmt.Errorf("the path has %d bounces", len(path.Cos))
		}
		return math.Acos(path.Cos[i]) / degree, nil
	}
	return 0, fmt.Errorf("quantity %q is not known here", row.Quantity)
}
