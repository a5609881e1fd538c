package absorb

import (
	"errors"
	"math"
	"testing"

	"gonum.org/v1/gonum/mat"
)

// TestFitLengthExact: for a base without end the line is exact (Basore 1993).
func TestFitLengthExact(t *testing.T) {
	for _, want := range []float64{5e3, 1e5, 8e5} {
		b := Base{Thickness: 60 * want, DiffusionLength: want, Diffusivity: 30, RearVelocity: 1e5}
		var alpha, iqe []float64
		for _, depth := range []float64{0.1, 0.3, 0.5, 0.8, 1} {
			a := nmPerCM / (depth * want)
			alpha, iqe = append(alpha, a), append(iqe, b.IQE(a))
		}
		for _, through := range []bool{false, true} {
			f, err := FitLength(alpha, iqe, LengthSettings{ThroughOne: through})
			if err != nil {
				t.Fatal(err)
			}
			if relative(f.Length, want) > 1e-13 || f.LengthError > 1e-13*want || math.Abs(f.Intercept-1) > 1e-13 || f.Points != 5 {
				t.Errorf("%+v, want length %g", f, want)
			}
		}
	}
}

// TestFitLengthWafer: in a wafer the fit over ever shorter penetration depths
// approaches the effective length of the closed form, linearly in the range.
func TestFitLengthWafer(t *testing.T) {
	for _, b := range []Base{{300e3, 200e3, 30, 1000}, {180e3, 500e3, 30, 100}} {
		last := math.Inf(1)
		for _, range0 := range []float64{0.1, 0.03, 0.01, 0.003} {
			var alpha, iqe []float64
			for k := 1; k <= 20; k++ {
				a := nmPerCM / (range0 * b.Thickness * float64(k) / 20)
				alpha, iqe = append(alpha, a), append(iqe, b.IQE(a))
			}
			f, err := FitLength(alpha, iqe, LengthSettings{ThroughOne: true})
			if err != nil {
				t.Fatal(err)
			}
			miss := relative(f.Length, b.EffectiveLength())
			// The term left out is of the order of depth times length over L².
			if bound := 2 * range0 * b.Thickness * (b.EffectiveLength()/(b.DiffusionLength*b.DiffusionLength) + 1/b.EffectiveLength()); miss > bound || miss > last {
				t.Errorf("%+v up to %g W: length %g, closed form %g, relative %g > %g or %g", b, range0, f.Length, b.EffectiveLength(), miss, bound, last)
			}
			last = miss
		}
	}
}

// TestFitLengthStatistics: the standard errors are those of the
// normal equations, whose inverse comes from gonum/mat, and their spread over
// simulated measurements is the true one.
func TestFitLengthStatistics(t *testing.T) {
	r := newRand()
	const length, front, sigma, n, repeats = 2e5, 1.02, 0.005, 25, 4000
	alpha, iqe := make([]float64, n), make([]float64, n)
	var sum, square, variance float64
	for rep := range repeats {
		for i := range alpha {
			x := 2e3 + 4e4*float64(i)/n
			alpha[i] = nmPerCM / x
			iqe[i] = 1 / (front + x/length + sigma*r.NormFloat64())
		}
		f, err := FitLength(alpha, iqe, LengthSettings{})
		if err != nil {
			t.Fatal(err)
		}
		slope := 1 / f.Length
		sum, square = sum+slope, square+slope*slope
		slopeError := f.LengthError / (f.Length * f.Length)
		variance += slopeError * slopeError
		if rep > 0 {
			continue
		}
		design, data := mat.NewDense(n, 2, nil), mat.NewVecDense(n, nil)
		for i := range alpha {
			design.SetRow(i, []float64{1, nmPerCM / alpha[i] / length})
			data.SetVec(i, 1/iqe[i])
		}
		var normal, inverse mat.Dense
		normal.Mul(design.T(), design)
		if err := inverse.Inverse(&normal); err != nil {
			t.Fatal(err)
		}
		var line, residual mat.VecDense
		if err := line.SolveVec(design, data); err != nil {
			t.Fatal(err)
		}
		residual.MulVec(design, &line)
		residual.SubVec(data, &residual)
		s2 := mat.Dot(&residual, &residual) / (n - 2)
		want := LengthFit{Length: length / line.AtVec(1), Intercept: line.AtVec(0), InterceptError: math.Sqrt(s2 * inverse.At(0, 0))}
		want.LengthError = want.Length / line.AtVec(1) * math.Sqrt(s2*inverse.At(1, 1))
		for name, v := range map[string][2]float64{"length": {f.Length, want.Length}, "its error": {f.LengthError, want.LengthError}, "intercept": {f.Intercept, want.Intercept}, "error of intercept": {f.InterceptError, want.InterceptError}} {
			if relative(v[0], v[1]) > 1e-11 {
				t.Errorf("%s %.14g, normal equations %.14g", name, v[0], v[1])
			}
		}
	}
	mean := sum / repeats
	// The variance of 4000 repeats is known to sqrt(2/4000) = 2.2 %; four of them.
	if got, want := variance/repeats, square/repeats-mean*mean; math.Abs(got/want-1) > 0.09 {
		t.Errorf("mean squared standard error of the slope %g, variance over repeats %g", got, want)
	}
	if math.Abs(mean*length-1) > 4*math.Sqrt(variance/repeats/repeats)*length {
		t.Errorf("mean slope %g, want %g", mean, 1/length)
	}
}

// TestFitLengthRange: the settings choose the points, weights of 0 leave points
// out, and an oblique beam lengthens the result by its cosine.
func TestFitLengthRange(t *testing.T) {
	alpha := []float64{1e4, 5e3, 2e3, 1e3, 500, 100}
	iqe := make([]float64, len(alpha))
	for i, a := range alpha {
		iqe[i] = 1 / (1 + nmPerCM/a/1e5)
	}
	iqe[0], iqe[5] = 0.1, 0.1 // outliers that the range leaves out
	f, err := FitLength(alpha, iqe, LengthSettings{Shortest: 1500, Longest: 25e3, Cos: 0.8})
	if err != nil {
		t.Fatal(err)
	}
	if relative(f.Length, 0.8e5) > 1e-12 || f.Points != 4 || relative(f.Shortest, 2e3) > 1e-15 || relative(f.Longest, 2e4) > 1e-15 {
		t.Errorf("%+v", f)
	}
	g, err := FitLength(alpha, iqe, LengthSettings{Cos: 0.8, Weight: []float64{0, 1, 1, 1, 1, 0}})
	if err != nil || relative(g.Length, f.Length) > 1e-12 || g.Points != 4 {
		t.Errorf("by weight %+v (%v), by range %+v", g, err, f)
	}
	// Weights of 2 are points given twice.
	noisy := []float64{0.93, 0.85, 0.72, 0.55}
	w, err := FitLength([]float64{1e4, 4e3, 2e3, 1e3}, noisy, LengthSettings{Weight: []float64{1, 2, 1, 1}})
	if err != nil {
		t.Fatal(err)
	}
	twice, err := FitLength([]float64{1e4, 4e3, 4e3, 2e3, 1e3}, []float64{0.93, 0.85, 0.85, 0.72, 0.55}, LengthSettings{})
	if err != nil || relative(w.Length, twice.Length) > 1e-12 {
		t.Errorf("weight 2: %+v, point twice: %+v (%v)", w, twice, err)
	}
	nan := math.NaN()
	for name, c := range map[string]struct {
		alpha, iqe []float64
		s          LengthSettings
		want       error
	}{
		"lengths":        {alpha, iqe[1:], LengthSettings{}, ErrInput},
		"alpha 0":        {[]float64{0, 1, 2}, []float64{1, 1, 1}, LengthSettings{}, ErrInput},
		"IQE NaN":        {[]float64{3, 1, 2}, []float64{1, nan, 1}, LengthSettings{}, ErrInput},
		"range":          {alpha, iqe, LengthSettings{Shortest: 10, Longest: 5}, ErrInput},
		"cosine":         {alpha, iqe, LengthSettings{Cos: 1.1}, ErrInput},
		"weights":        {alpha, iqe, LengthSettings{Weight: []float64{1}}, ErrInput},
		"two points":     {[]float64{1, 2}, []float64{0.1, 0.2}, LengthSettings{}, ErrFit},
		"one point":      {[]float64{1}, []float64{0.1}, LengthSettings{ThroughOne: true}, ErrFit},
		"same depth":     {[]float64{1, 1, 1}, []float64{0.1, 0.2, 0.3}, LengthSettings{}, ErrFit},
		"falling 1/IQE":  {[]float64{1, 2, 3}, []float64{0.9, 0.5, 0.3}, LengthSettings{}, ErrFit},
		"alpha too low":  {[]float64{1e-310, 2, 3}, []float64{0.1, 0.5, 0.6}, LengthSettings{}, ErrFit},
		"none in range":  {alpha, iqe, LengthSettings{Shortest: 1e9}, ErrFit},
		"IQE above 1":    {[]float64{1, 2, 3}, []float64{2, 2, 2}, LengthSettings{}, ErrFit},
		"all weights 0":  {[]float64{1, 2, 3}, []float64{0.3, 0.4, 0.5}, LengthSettings{Weight: []float64{0, 0, 0}}, ErrFit},
		"through above":  {[]float64{1, 2}, []float64{2, 2}, LengthSettings{ThroughOne: true}, ErrFit},
		"weight below 0": {[]float64{1, 2, 3}, []float64{0.3, 0.4, 0.5}, LengthSettings{Weight: []float64{1, -1, 1}}, ErrInput},
	} {
		if _, err := FitLength(c.alpha, c.iqe, c.s); !errors.Is(err, c.want) {
			t.Errorf("%s: %v, want %v", name, err, c.want)
		}
	}
}
