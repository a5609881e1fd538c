package optics_test

import (
	"fmt"
	"math"

	"photonledger/optics"
)

// Where light of 1000 nm goes in a coated silicon wafer with a metal behind it:
// thin films coherent, the wafer incoherent.
func ExampleSolve() {
	stack := optics.Stack{
		Front: 1,
		Films: []optics.Film{
			{Index: 1.98, Thickness: 75},                                   // silicon nitride
			{Index: 3.572 + 5.093e-4i, Thickness: 160e3, Incoherent: true}, // silicon
			{Index: 1.46, Thickness: 120},                                  // silicon dioxide
		},
		Back: 1.35 + 9.6i, // aluminium
	}
	r, err := optics.Solve(stack, optics.Wave{Wavelength: 1000, Angle: 8 * math.Pi / 180})
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("reflected %.4f, coating %.4f, wafer %.4f, oxide %.4f, rear metal %.4f\n", r.R, r.A[0], r.A[1], r.A[2], r.T)
	// Output:
	// reflected 0.2356, coating 0.0000, wafer 0.7531, oxide 0.0000, rear metal 0.0113
}

// Reflectance of a quarter-wave film of magnesium fluoride on crown glass over
// the visible, at three angles.
func ExampleSweep() {
	lambda := []float64{450, 550, 650}
	sweep := optics.NewSweep(lambda, 1)
	sweep.Angle = []float64{0, math.Pi / 6, math.Pi / 3}
	if err := sweep.SetFilm(0, []complex128{1.38, 1.38, 1.38}, 550/(4*1.38)); err != nil {
		fmt.Println(err)
		return
	}
	if err := sweep.SetBack([]complex128{1.52, 1.52, 1.52}); err != nil {
		fmt.Println(err)
		return
	}
	r, err := sweep.Run()
	if err != nil {
		fmt.Println(err)
		return
	}
	for a, angle := range sweep.Angle {
		fmt.Printf("%2.0f deg: %.4f\n", angle*180/math.Pi, r.R[a*len(lambda):(a+1)*len(lambda)])
	}
	// Output:
	//  0 deg: [0.0162 0.0126 0.0144]
	// 30 deg: [0.0150 0.0138 0.0168]
	// 60 deg: [0.0480 0.0534 0.0604]
}

// The depth at which a thin film absorbs, on cells of a user's mesh.
func ExampleSolveProfiles() {
	stack := optics.Stack{
		Front: 1.5,
		Films: []optics.Film{{Index: 2.6 + 0.1i, Thickness: 400}},
		Back:  0.2 + 4i,
	}
	profiles, err := optics.SolveProfiles(stack, optics.Wave{Wavelength: 700})
	if err != nil {
		fmt.Println(err)
		return
	}
	p := profiles[0]
	for z := 0.0; z < p.Thickness; z += 100 {
		fmt.Printf("%3.0f to %3.0f nm: %.4f\n", z, z+100, p.Between(z, z+100))
	}
	fmt.Printf("whole film: %.4f\n", p.Absorptance())
	// Output:
	//   0 to 100 nm: 0.1579
	// 100 to 200 nm: 0.1113
	// 200 to 300 nm: 0.1520
	// 300 to 400 nm: 0.1721
	// whole film: 0.5933
}
