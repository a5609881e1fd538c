package spectrum_test

import (
	"fmt"
	"log"
	"math"
	"strings"

	"photonledger/spectrum"
)

// The photocurrent of a measured quantum efficiency under AM1.5 global.
func ExamplePhotocurrent() {
	wavelength := []float64{300, 400, 500, 900, 1000, 1100, 1200}
	eqe := []float64{0.30, 0.85, 0.95, 0.96, 0.80, 0.25, 0}
	j, err := spectrum.Photocurrent(spectrum.AM15G(), wavelength, eqe)
	if err != nil {
		log.Fatal(err)
	}
	limit, err := spectrum.MaxPhotocurrent(spectrum.AM15G(), 1.12)
	if err != nil {
		log.Fatal(err)
	}
	fmt.Printf("%.2f of %.2f mA/cm²\n", j, limit)
	// Output: 38.59 of 43.81 mA/cm²
}

// A ledger of three destinations with a standard error from a ray tracer, as text.
func ExampleLedger() {
	wavelength := []float64{300, 600, 900, 1200}
	l := spectrum.Ledger{Spectrum: spectrum.AM15G(), Wavelength: wavelength, Entries: []spectrum.Entry{
		{Name: "carriers", Share: []float64{0.50, 0.96, 0.95, 0.02}, StdError: []float64{2e-3, 1e-3, 1e-3, 2e-3}},
		{Name: "coating", Share: []float64{0.25, 0, 0, 0}},
		{Name: "reflected", Share: []float64{0.25, 0.04, 0.05, 0.98}, StdError: []float64{2e-3, 1e-3, 1e-3, 2e-3}},
	}}
	account, err := l.Integrate()
	if err != nil {
		log.Fatal(err)
	}
	for _, r := range account.Rows {
		fmt.Printf("%-10s %.4f  %6.3f +- %.3f mA/cm²\n", r.Name, r.Share, r.Current, r.StdError)
	}
	fmt.Printf("%-10s %.4f  %6.3f of %.3f mA/cm²\n", "total", account.Total.Share, account.Total.Current, account.Incident)
	// Output:
	// carriers   0.7902  36.709 +- 0.030 mA/cm²
	// coating    0.0248   1.154 +- 0.000 mA/cm²
	// reflected  0.1850   8.594 +- 0.030 mA/cm²
	// total      1.0000  46.456 of 46.456 mA/cm²
}

// The reflectance of a film with fringes, integrated with an error bound without
// choosing wavelengths by hand; here a film of index 2 in air.
func ExampleSample() {
	film := func(wavelength float64, shares []float64) error {
		const n, thickness = 2.0, 3000.0
		r := (n - 1) * (n - 1) / ((n + 1) * (n + 1))
		s := math.Sin(2 * math.Pi * n * thickness / wavelength)
		finesse := 4 * r / ((1 - r) * (1 - r))
		shares[1] = 1 / (1 + finesse*s*s)
		shares[0] = 1 - shares[1]
		return nil
	}
	am15 := spectrum.AM15G()
	samples, err := spectrum.Sample(am15, 300, 1200, 2, 1e-6, film)
	if err != nil {
		log.Fatal(err)
	}
	ledger, err := samples.Ledger(am15, []string{"reflected", "let through"})
	if err != nil {
		log.Fatal(err)
	}
	account, err := ledger.Integrate()
	if err != nil {
		log.Fatal(err)
	}
	for _, r := range account.Rows {
		fmt.Printf("%-11s %.4f mA/cm², bound below 0.0001: %t\n", r.Name, r.Current, r.Bound < 1e-4)
	}
	// Output:
	// reflected   9.0346 mA/cm², bound below 0.0001: true
	// let through 37.4217 mA/cm², bound below 0.0001: true
}

// A spectrum of one's own, from a file with units in its header.
func ExampleReadCSV() {
	file := "# name: lamp\nwavelength (nm);irradiance (W m-2 nm-1)\n400;0,9\n700;1,5\n1100;0,7\n"
	lamp, err := spectrum.ReadCSV(strings.NewReader(file))
	if err != nil {
		log.Fatal(err)
	}
	total, err := lamp.Total()
	if err != nil {
		log.Fatal(err)
	}
	fmt.Printf("%s: %.0f W/m²\n", lamp.Name, total)
	_, err = spectrum.ReadCSV(strings.NewReader("wavelength (nm),irradiance\n"))
	fmt.Println(err)
	// Output:
	// lamp: 800 W/m²
	// spectrum: csv: line 1, column 17: "irradiance" in the header does not name its unit, W m-2 nm-1, W m-2 µm-1 or mW cm-2 nm-1: invalid input
}

// Many shares on one grid, without allocation.
func ExampleIntegrator() {
	wavelength := []float64{300, 500, 800, 1200}
	var in spectrum.Integrator
	if err := in.Prepare(spectrum.AM15G(), wavelength, spectrum.Photons); err != nil {
		log.Fatal(err)
	}
	for _, share := range [][]float64{{1, 1, 1, 1}, {0.3, 0.1, 0.1, 0.4}} {
		j, err := in.Integral(share)
		if err != nil {
			log.Fatal(err)
		}
		mean, err := in.Mean(share)
		if err != nil {
			log.Fatal(err)
		}
		fmt.Printf("%.3f mA/cm², mean %.4f\n", j, mean)
	}
	// Output:
	// 46.456 mA/cm², mean 1.0000
	// 7.592 mA/cm², mean 0.1634
}

// The detailed-balance limit of a band gap of 1.34 eV that emits to the front.
func ExampleIdealDiode() {
	const gap, temperature = 1.34, 298.15
	am15 := spectrum.AM15G()
	j, err := spectrum.MaxPhotocurrent(am15, gap)
	if err != nil {
		log.Fatal(err)
	}
	j0, err := spectrum.RadiativeCurrentOfGap(gap, temperature)
	if err != nil {
		log.Fatal(err)
	}
	d, err := spectrum.IdealDiode(j, j0, temperature)
	if err != nil {
		log.Fatal(err)
	}
	fmt.Printf("%.2f mA/cm², %.3f V, fill factor %.3f, %.1f mW/cm²\n", j, d.Voc, d.FillFactor, d.Power)
	// Output: 35.03 mA/cm², 1.083 V, fill factor 0.890, 33.8 mW/cm²
}

// The colour of a surface that reflects the short waves: what a thin coating on a
// wafer looks like.
func ExampleColour() {
	c, err := spectrum.Colour([]float64{380, 450, 550, 780}, []float64{0.30, 0.20, 0.04, 0.03})
	if err != nil {
		log.Fatal(err)
	}
	x, y := c.Chromaticity()
	rgb, inside := c.SRGB()
	fmt.Printf("Y %.1f, x %.3f, y %.3f, display %.2f %.2f %.2f, inside %t\n", c.Y, x, y, rgb[0], rgb[1], rgb[2], inside)
	// Output:
	// Y 6.0, x 0.200, y 0.181, display 0.15 0.26 0.50, inside true
}
