package nk

import (
	"math"
	"testing"
)

// TestAmorphousSiliconSet: the Tauc-Lorentz parameters of amorphous silicon are
// from memory. They must describe measured amorphous silicon (table
// asi_pierce1972) about as well as the best parameters do (rms less than twice
// that of the best fit; a wrong leading digit of A, E0, C or Eg fails that), and
// the best parameters be those to 2 %, the scatter between samples and weights.
func TestAmorphousSiliconSet(t *testing.T) {
	tab, err := MaterialTable("asi_pierce1972")
	if err != nil {
		t.Fatal(err)
	}
	var n []complex128
	for i := range tab.Wavelength {
		n = append(n, complex(tab.N[i], tab.K[i]))
	}
	f, err := Formula("asi_jellison1996")
	if err != nil {
		t.Fatal(err)
	}
	published := values(f.Model)
	p, err := IndexProblem(f.Model, tab.Wavelength, n)
	if err != nil {
		t.Fatal(err)
	}
	chi := func(v []float64) float64 {
		dst := make([]float64, len(p.Data))
		if err := p.Model(dst, v); err != nil {
			t.Fatal(err)
		}
		sum := 0.0
		for i, d := range p.Data {
			sum += (d - dst[i]) * (d - dst[i])
		}
		return sum
	}
	p.Start = []float64{100, 3, 2, 1, 1} // far from the set
	res, err := Fit(p)
	if err != nil {
		t.Fatal(err)
	}
	if r := math.Sqrt(chi(published) / res.ChiSquare); r > 2 {
		t.Errorf("rms of the published set is %.2f times that of the best fit", r)
	}
	for j, v := range published {
		if math.Abs(res.Params[j]/v-1) > 0.02 {
			t.Errorf("parameter %d: fit %.4g ± %.2g, published %.4g (from memory)", j, res.Params[j], res.StdErr[j], v)
		}
		wrong := append([]float64(nil), published...)
		wrong[j] *= 1.1
		if j < 4 && math.Sqrt(chi(wrong)/res.ChiSquare) < 2 {
			t.Errorf("parameter %d off by 10 %% goes unnoticed", j)
		}
	}
}
