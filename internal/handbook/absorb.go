package handbook

import (
	"fmt"

	"photonledger/absorb"
	"photonledger/internal/check"
)

// absorbQuantity computes a row about absorption and collection.
func absorbQuantity(row check.Row) (float64, error) {
	alpha, thickness := row.Num("alpha"), row.Num("um")*nmPerMicron
	base := absorb.Base{Thickness: row.Num("W") * nmPerMicron, DiffusionLength: row.Num("L") * nmPerMicron, Diffusivity: row.Num("D"), RearVelocity: row.Num("S")}
	switch row.Quantity {
	case "absorption_coefficient":
		return absorb.AbsorptionCoefficient(row.Num("k"), row.Num("nm")), nil
	case "penetration_depth":
		return absorb.PenetrationDepth(alpha) / nmPerMicron, nil
	case "absorptance":
		return absorb.Absorptance(alpha, thickness), nil
	case "mirror_absorptance":
		return absorb.MirrorAbsorptance(alpha, thickness, row.Num("rear")), nil
	case "slab_absorptance":
		s, err := absorb.Slab{Absorption: alpha, Thickness: thickness, FrontReflectance: row.Num("front"), FrontInternal: row.Num("inside"), RearReflectance: row.Num("rear")}.Shares()
		return s.Absorbed, err
	case "effective_length":
		return base.EffectiveLength() / nmPerMicron, nil
	case "collection_length":
		return base.CollectionLength() / nmPerMicron, nil
	case "rear_collection":
		return base.RearCollection(), nil
	case "base_iqe":
		return base.IQE(alpha), nil
	case "band_to_band_share":
		return absorb.BandToBandShare(alpha, row.Num("free")), nil
	}
	return 0, fmt.Errorf("quantity %q is not known here", row.Quantity)
}
