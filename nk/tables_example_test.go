package nk_test

import (
	"fmt"
	"log"
	"strings"

	"photonledger/nk"
)

// The optical constants of an embedded material at the wavelengths of a user,
// ready for a stack of films.
func ExampleMaterial() {
	silicon, err := nk.Material("si_green2008")
	if err != nil {
		log.Fatal(err)
	}
	n, err := silicon.Sample(nil, []float64{400, 800, 1100})
	if err != nil {
		log.Fatal(err)
	}
	fmt.Println(silicon.Table.Source)
	for _, v := range n {
		fmt.Printf("%.3f %.3g\n", real(v), imag(v))
	}
	// Output:
	// M. A. Green, Sol. Energy Mater. Sol. Cells 92, 1305-1310 (2008)
	// 5.613 0.296
	// 3.675 0.00541
	// 3.542 3.06e-05
}

// A user's own file: units stand in the header, rows may go either way.
func ExampleReadCSV() {
	table, err := nk.ReadCSV(strings.NewReader(`# material: silicon nitride, line 2 of an invented plant
# source: own measurement
Energy (eV);n;alpha (1/cm)
1,55;1,98;0
2,10;2,01;0
3,10;2,08;3,1e3
`))
	if err != nil {
		log.Fatal(err)
	}
	for i, w := range table.Wavelength {
		fmt.Printf("%.1f nm: n %.2f, k %.4f\n", w, table.N[i], table.K[i])
	}
	// Output:
	// 399.9 nm: n 2.08, k 0.0099
	// 590.4 nm: n 2.01, k 0.0000
	// 799.9 nm: n 1.98, k 0.0000
}

// The absorption coefficient with its published uncertainty.
func ExampleInterpolant_RelativeUncertainty() {
	silicon, err := nk.Material("si_schinke2015")
	if err != nil {
		log.Fatal(err)
	}
	for _, lambda := range []float64{600, 1000, 1200} {
		n, err := silicon.At(lambda)
		if err != nil {
			log.Fatal(err)
		}
		u, err := silicon.RelativeUncertainty(lambda)
		if err != nil {
			log.Fatal(err)
		}
		fmt.Printf("%4.0f nm: %.4g /cm ± %.2g %%\n", lambda, nk.AbsorptionCoefficient(imag(n), lambda), 100*u)
	}
	// Output:
	//  600 nm: 3879 /cm ± 11 %
	// 1000 nm: 61.6 /cm ± 1.4 %
	// 1200 nm: 0.01456 /cm ± 12 %
}

// What free carriers take from a heavily doped layer at the band edge.
func ExampleFreeCarriers_Alpha() {
	law := nk.FreeCarriersGreen1995()
	fmt.Printf("%.1f /cm\n", law.Alpha(1100, 2e19, 0))
	// Output:
	// 69.2 /cm
}
