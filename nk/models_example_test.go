package nk_test

import (
	"fmt"
	"log"
	"math"
	"math/cmplx"
	"math/rand/v2"

	"photonledger/nk"
)

// A dispersion model is a plain struct; its gradient says what each parameter
// does to the index.
func ExampleTaucLorentz() {
	m := &nk.TaucLorentz{A: 122, E0: 3.45, C: 2.54, Eg: 1.2, EpsInf: 1.15}
	grad, n, err := m.Gradient(nil, 633)
	if err != nil {
		log.Fatal(err)
	}
	fmt.Printf("N = %.4f\n", n)
	for j, p := range m.Parameters() {
		fmt.Printf("dN/d%-6s = %.4f per %s\n", p.Name, grad[j], p.Unit)
	}
	// Output:
	// N = (4.1967+0.4168i)
	// dN/dA      = (0.0161+0.0018i) per eV
	// dN/dE0     = (-0.0704-0.3887i) per eV
	// dN/dC      = (-0.2698+0.1004i) per eV
	// dN/dEg     = (-1.9721-0.9028i) per eV
	// dN/dEpsInf = (0.1180-0.0117i) per 1
}

// A transparent conductor: bound electrons and free carriers add up.
func ExampleSum() {
	free, err := nk.DrudeFromCarriers(0, 4.1e20, 0.35, 34.2)
	if err != nil {
		log.Fatal(err)
	}
	ito := &nk.Sum{&nk.Lorentz{EpsInf: 1, Strength: 2.9, E0: 6.5, Damping: 0.1}, &free}
	for _, lambda := range []float64{500, 1000, 2000} {
		n, err := ito.Index(lambda)
		if err != nil {
			log.Fatal(err)
		}
		fmt.Printf("%4.0f nm  n %.3f  k %.4f\n", lambda, real(n), imag(n))
	}
	// Output:
	//  500 nm  n 2.033  k 0.0083
	// 1000 nm  n 1.722  k 0.0263
	// 2000 nm  n 0.496  k 0.6499
}

// The formulas with published coefficients, by name, within their range.
func ExampleFormula() {
	f, err := nk.Formula("mgf2_o_dodge1984")
	if err != nil {
		log.Fatal(err)
	}
	n, err := f.Index(632.8)
	fmt.Printf("%s, %s: %.6f %v\n", f.Material, f.Conditions, real(n), err)
	_, err = f.Index(150)
	fmt.Println(err)
	// Output:
	// magnesium fluoride, ordinary ray, 19 °C: 1.376984 <nil>
	// nk: mgf2_o_dodge1984: 150 nm is outside 200-7000 nm: out of range
}

// The usual layer between silicon and air for a rough surface: half silicon,
// half voids.
func ExampleBruggeman() {
	n, err := nk.Bruggeman([]complex128{3.940 + 0.019934i, 1}, []float64{0.5, 0.5})
	if err != nil {
		log.Fatal(err)
	}
	fmt.Printf("%.4f\n", n)
	// Output: (2.3524+0.0091i)
}

// How far the n of a measured table is from the transform of its k, with the
// part that the ultraviolet beyond the table may be worth.
func ExampleKramersKronig() {
	m := &nk.TaucLorentz{A: 122, E0: 3.45, C: 2.54, Eg: 1.2, EpsInf: 1.15}
	var lambda []float64
	for l := 100.0; l <= 1500; l += 5 {
		lambda = append(lambda, l)
	}
	n, err := nk.Evaluate(nil, m, lambda)
	if err != nil {
		log.Fatal(err)
	}
	for i, l := range lambda {
		if l > 500 && l < 600 {
			n[i] += 0.1 // somebody's mistake
		}
	}
	r, err := nk.KramersKronig(lambda, n, nk.KramersKronigSettings{Low: 300, High: 1200, Anchor: 1000})
	if err != nil {
		log.Fatal(err)
	}
	fmt.Printf("max %.2f at %.0f nm, missing ultraviolet %.2f\n", r.Max, r.MaxAt, r.MissingBelow)
	// Output: max 0.10 at 505 nm, missing ultraviolet 0.01
}

// Index and thickness of a film from a reflectance spectrum (made here, with
// noise of 0.003): the caller brings the model of the measurement.
func ExampleFit() {
	reflectance := func(dst, p []float64) error {
		film := nk.Cauchy{A: p[0], B: p[1]}
		for i := range dst {
			lambda := 400 + 10*float64(i)
			n, err := film.Index(lambda)
			if err != nil {
				return err
			}
			// Airy's formula: air, film, substrate of index 3.7
			phase := cmplx.Exp(4i * math.Pi * n * complex(p[2]/lambda, 0))
			r1, r2 := (1-n)/(1+n), (n-3.7)/(n+3.7)
			r := cmplx.Abs((r1 + r2*phase) / (1 + r1*r2*phase))
			dst[i] = r * r
		}
		return nil
	}
	data := make([]float64, 61)
	if err := reflectance(data, []float64{1.62, 0.008, 500}); err != nil {
		log.Fatal(err)
	}
	rng := rand.New(rand.NewPCG(1, 1))
	sigma := make([]float64, len(data))
	for i := range data {
		sigma[i] = 0.003
		data[i] += sigma[i] * rng.NormFloat64()
	}
	res, err := nk.Fit(nk.FitProblem{
		Model: reflectance, Data: data, Sigma: sigma,
		Start: []float64{1.7, 0.01, 480}, Lower: []float64{1.3, 0, 300}, Upper: []float64{2.5, 0.1, 700},
	})
	if err != nil {
		log.Fatal(err)
	}
	fmt.Printf("A  %.3f ± %.3f\n", res.Params[0], res.StdErr[0])
	fmt.Printf("B  %.4f ± %.4f µm²\n", res.Params[1], res.StdErr[1])
	fmt.Printf("d  %.1f ± %.1f nm\n", res.Params[2], res.StdErr[2])
	fmt.Printf("reduced chi-square %.2f, correlation of A and d %.2f\n", res.ReducedChiSquare, res.Correlation[0][2])
	// Output:
	// A  1.619 ± 0.004
	// B  0.0079 ± 0.0002 µm²
	// d  500.1 ± 1.3 nm
	// reduced chi-square 0.99, correlation of A and d -0.98
}

// A model fitted to a table of n and k (an invented film), with its own
// derivatives.
func ExampleIndexProblem() {
	lambda := []float64{300, 350, 400, 450, 500, 550, 600, 700, 800, 1000}
	table := []complex128{2.22, 2.153, 2.11, 2.081, 2.061, 2.046, 2.035, 2.02, 2.01, 1.999}
	film := &nk.Sellmeier{Offset: 1, B: []float64{2.5}, C: []float64{0.15}}
	p, err := nk.IndexProblem(film, lambda, table)
	if err != nil {
		log.Fatal(err)
	}
	p.Lower, p.Upper = []float64{1, 0, 0}, []float64{1, 9, 0.25} // the constant is held at 1
	res, err := nk.Fit(p)
	if err != nil {
		log.Fatal(err)
	}
	if err := film.SetParameters(res.Params); err != nil {
		log.Fatal(err)
	}
	for j, q := range film.Parameters() {
		fmt.Printf("%-6s %.4f ± %.4f %s\n", q.Name, q.Value, res.StdErr[j], q.Unit)
	}
	// Output:
	// Offset 1.0000 ± 0.0000 1
	// B[0]   2.9417 ± 0.0043 1
	// C[0]   0.1516 ± 0.0007 µm
}
