package optics_test

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/optimize"

	"photonledger/optics"
)

// The thickness and index of the film that best hides glass of index 1.52 at
// 550 nm: a quarter wave, 550/(4·1.2329) = 111.53 nm, of the index √1.52.
func ExampleSolveGradient() {
	stack := optics.Stack{Front: 1, Films: make([]optics.Film, 1), Back: 1.52}
	wave := optics.Wave{Wavelength: 550}
	var solver optics.GradientSolver
	var r optics.Response
	var g optics.Gradient
	// Thickness in units of 100 nm, so that both variables are of the order of one.
	evaluate := func(x []float64) error {
		stack.Films[0] = optics.Film{Index: complex(x[1], 0), Thickness: 100 * x[0]}
		return solver.Solve(&g, &r, stack, wave, optics.Weights{R: 1})
	}
	problem := optimize.Problem{
		Func: func(x []float64) float64 {
			if evaluate(x) != nil {
				return math.Inf(1)
			}
			return r.R
		},
		Grad: func(grad, x []float64) {
			if evaluate(x) != nil {
				grad[0], grad[1] = math.NaN(), math.NaN()
				return
			}
			grad[0], grad[1] = 100*g.Thickness[0], g.N[0]
		},
	}
	best, err := optimize.Minimize(problem, []float64{0.8, 1.45}, &optimize.Settings{GradientThreshold: 1e-10}, &optimize.BFGS{})
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("%.2f nm of index %.4f\n", 100*best.X[0], best.X[1])
	// Output:
	// 111.53 nm of index 1.2329
}

// How a photocurrent changes with the thickness of each film: silicon nitride
// on silicon, at three wavelengths that stand for bands of a spectrum.
func ExampleSweep_gradient() {
	sweep := optics.NewSweep([]float64{450, 600, 750}, 2)
	silicon := []complex128{4.67 + 0.14i, 3.94 + 0.025i, 3.73 + 0.0087i}
	if err := sweep.SetFilm(0, []complex128{2.02, 1.99, 1.98}, 70); err != nil {
		fmt.Println(err)
		return
	}
	if err := sweep.SetFilm(1, silicon, 5000); err != nil {
		fmt.Println(err)
		return
	}
	sweep.Incoherent[1] = true
	if err := sweep.SetBack([]complex128{1, 1, 1}); err != nil {
		fmt.Println(err)
		return
	}
	// Photocurrent of each band in mA/cm², times the absorptance of film 1.
	bands := []float64{6.5, 9.9, 8.2}
	weights := optics.SweepWeights{A: append(make([]float64, 3), bands...)}
	_, g, err := sweep.Gradient(&weights)
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("%.2f mA/cm²; %.4f per nm of nitride, %.2f per µm of silicon\n", g.Value, g.Thickness[0], 1000*g.Thickness[1])
	// Output:
	// 19.73 mA/cm²; -0.0310 per nm of nitride, 0.79 per µm of silicon
}
