package nk

import (
	"math"
	"testing"
)

// certified is a nonlinear regression problem of the Statistical Reference
// Datasets of the National Institute of Standards and Technology (USA), with
// the certified estimates, standard deviations and residual sum of squares
// (11 digits). Data and certified values are from memory; that a fit to the
// remembered data gives all the remembered digits speaks for both.
type certified struct {
	name   string
	x, y   []float64
	model  func(b []float64, x float64) float64
	starts [][]float64
	b, sd  []float64
	rss    float64
}

var nistProblems = []certified{
	{
		name: "Misra1a (dental research, monomolecular adsorption, 1978)",
		x:    []float64{77.6, 114.9, 141.1, 190.8, 239.9, 289.0, 332.8, 378.4, 434.8, 477.3, 536.8, 593.1, 689.1, 760.0},
		y:    []float64{10.07, 14.73, 17.94, 23.93, 29.61, 35.18, 40.02, 44.82, 50.76, 55.05, 61.01, 66.40, 75.47, 81.78},
		model: func(b []float64, x float64) float64 {
			return b[0] * (1 - math.Exp(-b[1]*x))
		},
		starts: [][]float64{{500, 0.0001}, {250, 0.0005}},
		b:      []float64{2.3894212918e+02, 5.5015643181e-04},
		sd:     []float64{2.7070075241e+00, 7.2668688436e-06},
		rss:    1.2455138894e-01,
	},
	{
		name: "Eckerle4 (circular interference transmittance)",
		x: []float64{400, 405, 410, 415, 420, 425, 430, 435, 436.5, 438, 439.5, 441, 442.5, 444, 445.5, 447, 448.5, 450,
			451.5, 453, 454.5, 456, 457.5, 459, 460.5, 462, 463.5, 465, 470, 475, 480, 485, 490, 495, 500},
		y: []float64{0.0001575, 0.0001699, 0.0002350, 0.0003102, 0.0004917, 0.0008710, 0.0017418, 0.0046400, 0.0065895, 0.0097302,
			0.0149002, 0.0237310, 0.0401683, 0.0712559, 0.1264458, 0.2073413, 0.2902366, 0.3445623, 0.3698049, 0.3668534, 0.3106727,
			0.2078154, 0.1164354, 0.0616764, 0.0337200, 0.0194023, 0.0117831, 0.0074357, 0.0022732, 0.0008800, 0.0004579, 0.0002345,
			0.0001586, 0.0001143, 0.0000710},
		model: func(b []float64, x float64) float64 {
			u := (x - b[2]) / b[1]
			return b[0] / b[1] * math.Exp(-u*u/2)
		},
		starts: [][]float64{{1, 10, 500}, {1.5, 5, 450}},
		b:      []float64{1.5543827178e+00, 4.0888321754e+00, 4.5154121844e+02},
		sd:     []float64{1.5408051163e-02, 4.6803020753e-02, 4.6800518816e-02},
		rss:    1.4635887487e-03,
	},
}

// TestHandbookFit fits the certified problems from both published starts. Half a
// unit of the 11th digit is allowed, and for the estimate 1e-9 standard errors
// (the goal of Fit).
func TestHandbookFit(t *testing.T) {
	for _, c := range nistProblems {
		for _, start := range c.starts {
			res, err := Fit(FitProblem{
				Model: func(dst, b []float64) error {
					for i, x := range c.x {
						dst[i] = c.model(b, x)
					}
					return nil
				},
				Data: c.y, Start: start,
			})
			if err != nil {
				t.Errorf("%s from %v: %v", c.name, start, err)
				continue
			}
			near := func(what string, got, want, tol float64) {
				if !(math.Abs(got-want) <= tol) {
					t.Errorf("%s from %v: %s = %.11g, certified %.11g, deviation %.2g > %.2g (from memory)", c.name, start, what, got, want, math.Abs(got-want), tol)
				}
			}
			half := 0.5e-10 // half a unit of the 11th digit, relative to the leading decade
			for j := range c.b {
				near("estimate", res.Params[j], c.b[j], half*math.Pow(10, math.Floor(math.Log10(c.b[j])))+1e-9*c.sd[j])
				near("standard deviation", res.StdErr[j], c.sd[j], half*math.Pow(10, math.Floor(math.Log10(c.sd[j])))+1e-9*c.sd[j])
			}
			near("sum of squares", res.ChiSquare, c.rss, 1e-10*c.rss)
			t.Logf("%s from %v: %d steps, %d evaluations", c.name, start, res.Iterations, res.Evaluations)
		}
	}
}
