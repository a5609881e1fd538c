package absorb

import (
	"fmt"
	"path/filepath"
	"testing"

	"photonledger/internal/check"
)

// TestHandbook compares with the published values of absorb_*.csv; each row names
// its source and how it is known.
func TestHandbook(t *testing.T) {
	files, err := filepath.Glob("testdata/handbook/absorb_*.csv")
	if err != nil || len(files) == 0 {
		t.Fatal("no rows", err)
	}
	for _, f := range files {
		rows, err := check.Load(f)
		if err != nil {
			t.Fatal(err)
		}
		for _, row := range rows {
			got, err := absorbQuantity(row)
			if err == nil {
				err = row.Judge(got)
			}
			if err != nil {
				t.Error(err)
			}
		}
	}
}

const nmPerUM = 1e3

// absorbQuantity computes a row about absorption and collection.
func absorbQuantity(row check.Row) (float64, error) {
	alpha, thickness := row.Num("alpha"), row.Num("um")*nmPerUM
	base := Base{Thickness: row.Num("W") * nmPerUM, DiffusionLength: row.Num("L") * nmPerUM, Diffusivity: row.Num("D"), RearVelocity: row.Num("S")}
	switch row.Quantity {
	case "absorption_coefficient":
		return AbsorptionCoefficient(row.Num("k"), row.Num("nm")), nil
	case "penetration_depth":
		return PenetrationDepth(alpha) / nmPerUM, nil
	case "absorptance":
		return Absorptance(alpha, thickness), nil
	case "mirror_absorptance":
		return MirrorAbsorptance(alpha, thickness, row.Num("rear")), nil
	case "slab_absorptance":
		s, err := Slab{Absorption: alpha, Thickness: thickness, FrontReflectance: row.Num("front"), FrontInternal: row.Num("inside"), RearReflectance: row.Num("rear")}.Shares()
		return s.Absorbed, err
	case "effective_length":
		return base.EffectiveLength() / nmPerUM, nil
	case "collection_length":
		return base.CollectionLength() / nmPerUM, nil
	case "rear_collection":
		return base.RearCollection(), nil
	case "base_iqe":
		return base.IQE(alpha), nil
	case "band_to_band_share":
		return BandToBandShare(alpha, row.Num("free")), nil
	}
	return 0, fmt.Errorf("quantity %q is not known here", row.Quantity)
}
