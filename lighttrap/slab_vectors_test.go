package lighttrap

import (
	"bufio"
	"encoding/json"
	"math"
	"os"
	"testing"
)

// TestSlabVectors compares every share, slope and path factor with the linear
// system of fluxes solved with 500 digits (testdata/vectors/make_slabs.py), in
// relative terms however small they are.
func TestSlabVectors(t *testing.T) {
	file, err := os.Open("../testdata/vectors/slabs.jsonl")
	if err != nil {
		t.Fatal(err)
	}
	defer file.Close()
	rows := 0
	for lines := bufio.NewScanner(file); lines.Scan(); rows++ {
		var v struct {
			Model               string
			X, Cos              float64
			Front, Inside, Rear float64
			Absorbed, Escaped   float64
			RearLoss            float64 `json:"rear_loss"`
			Slope               float64
			EscapedSlope        float64 `json:"escaped_slope"`
			RearLossSlope       float64 `json:"rear_loss_slope"`
			Path                float64
		}
		if err := json.Unmarshal(lines.Bytes(), &v); err != nil {
			t.Fatal(err)
		}
		s := Slab{
			Absorption: 1, Thickness: v.X / cmPerNM,
			FrontReflectance: v.Front, FrontInternal: v.Inside, RearReflectance: v.Rear,
		}
		solve := map[string]func() (Balance, error){
			"lambertian":      s.Lambertian,
			"lambertian rear": func() (Balance, error) { return s.LambertianRear(v.Cos) },
			"planar":          func() (Balance, error) { return s.Planar(v.Cos) },
		}[v.Model]
		b, err := solve()
		if err != nil {
			t.Fatal(err)
		}
		// Transmittances are good to 1e-14, and x, 2e-16 off by its way through 1/cm and
		// nm, changes them by 2e-16 x/cos.
		tol := 3e-14 + 1e-15*v.X/v.Cos
		for _, c := range []struct {
			name      string
			got, want float64
		}{
			{"absorbed", b.Absorbed, v.Absorbed},
			{"escaped", b.Escaped, v.Escaped},
			{"rear loss", b.RearLoss, v.RearLoss},
			{"slope", b.Slope, v.Slope},
			{"slope of escaped", b.EscapedSlope, v.EscapedSlope},
			{"slope of rear loss", b.RearLossSlope, v.RearLossSlope},
			{"path factor", b.PathFactor, v.Path},
		} {
			if !(math.Abs(c.got-c.want) <= tol*math.Abs(c.want)) {
				t.Errorf("row %d, %s, x = %g: %s %.17g, want %.17g, off by %.1e > %.1e",
					rows+1, v.Model, v.X, c.name, c.got, c.want, c.got/c.want-1, tol)
			}
		}
	}
	if rows != 240 {
		t.Errorf("%d rows, want 240", rows)
	}
}
