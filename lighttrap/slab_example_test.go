package lighttrap_test

import (
	"fmt"
	"math"

	"photonledger/lighttrap"
)

// Where light of 1100 nm goes in a silicon wafer with Lambertian faces and a
// good rear mirror.
func ExampleSlab_Lambertian() {
	const n = 3.54
	_, inside := lighttrap.DiffuseReflectance(n)
	b, err := lighttrap.Slab{
		Absorption: 3.5, Thickness: 160e3, FrontReflectance: 0.02, FrontInternal: inside, RearReflectance: 0.95,
	}.Lambertian()
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("absorbed %.3f, escaped %.3f, rear loss %.3f, reflected %.3f, path factor %.1f\n", b.Absorbed, b.Escaped, b.RearLoss, b.Reflected, b.PathFactor)
	fmt.Printf("limit of the path factor %.1f\n", lighttrap.PathLimit(n))
	// Output:
	// absorbed 0.669, escaped 0.149, rear loss 0.162, reflected 0.020, path factor 20.5
	// limit of the path factor 50.1
}

// The light that a grid of fingers and busbars takes in a module.
func ExampleGrid_Shares() {
	s, err := lighttrap.Grid{
		FingerWidth: 35e3, FingerPitch: 1.4e6, FingerFactor: 0.6, // 35 µm every 1.4 mm
		BusbarWidth: 0.8e6, BusbarPitch: 32e6, BusbarFactor: 1,
	}.Shares()
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("covered %.4f, shaded %.4f, recovered %.4f\n", s.Covered, s.Shaded, s.Recovered)
	// Output:
	// covered 0.0494, shaded 0.0396, recovered 0.0098
}

// How much diffuse light glass reflects, and how much it keeps of the light that is
// scattered inside it.
func ExampleDiffuseReflectance() {
	outside, inside := lighttrap.DiffuseReflectance(1.5)
	fmt.Printf("from outside %.4f, from inside %.4f\n", outside, inside)
	// Output:
	// from outside 0.0918, from inside 0.5963
}

// A rear that scatters into a narrow lobe traps less light than a Lambertian one:
// shorter passes, and more light within the escape cone of the front.
func ExampleScatterWithin() {
	const n = 3.5
	escape := math.Asin(1 / n) // half angle of the cone that leaves
	for _, halfAngle := range []float64{60, 40, 20} {
		m := lighttrap.ScatterExponent(halfAngle * math.Pi / 180)
		fmt.Printf("%g°: exponent %.2f, mean path %.2f, in the escape cone %.3f\n",
			halfAngle, m, lighttrap.ScatterMeanPath(m), lighttrap.ScatterWithin(m, escape))
	}
	// Output:
	// 60°: exponent 1.00, mean path 2.00, in the escape cone 0.082
	// 40°: exponent 2.60, mean path 1.38, in the escape cone 0.142
	// 20°: exponent 11.14, mean path 1.09, in the escape cone 0.404
}
