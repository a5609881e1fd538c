package nk

import (
	"errors"
	"math"
	"math/cmplx"
	"math/rand/v2"
	"slices"
	"testing"
)

// filmReflectance is the reflectance of a transparent film (Cauchy, thickness d
// in nm) on a substrate of index 3.7 at normal incidence: Airy's formula.
func filmReflectance(m *Cauchy, d, lambda float64) (float64, error) {
	n, err := m.Index(lambda)
	if err != nil {
		return 0, err
	}
	r1, r2 := (1-n)/(1+n), (n-3.7)/(n+3.7)
	p := cmplx.Exp(2i * complex(2*math.Pi*d/lambda, 0) * n)
	r := cmplx.Abs((r1 + r2*p) / (1 + r1*r2*p))
	return r * r, nil
}

// filmProblem is the fit of A, B and the thickness to a reflectance spectrum.
func filmProblem(data, sigma []float64) FitProblem {
	return FitProblem{
		Model: func(dst, p []float64) error {
			m := Cauchy{A: p[0], B: p[1]}
			for i := range dst {
				r, err := filmReflectance(&m, p[2], 400+float64(i)*10)
				if err != nil {
					return err
				}
				dst[i] = r
			}
			return nil
		},
		Data: data, Sigma: sigma,
		Start: []float64{1.7, 0.005, 490}, Lower: []float64{1.2, 0, 300}, Upper: []float64{3, 0.1, 700},
	}
}

// TestFitCoverage makes many noisy measurements of a known film and asks whether
// the truth lies within one standard error as often as the normal distribution
// says (68.27 %), with sigma known and unknown; whether the standard errors and
// correlations are those of the scatter of the estimates; and whether the
// reduced chi-square is 1. The limits are four standard deviations of each figure.
func TestFitCoverage(t *testing.T) {
	truth := []float64{1.62, 0.008, 500}
	const noise, seeds, points = 0.003, 400, 61
	clean := make([]float64, points)
	if err := filmProblem(clean, nil).Model(clean, truth); err != nil {
		t.Fatal(err)
	}
	sigma := make([]float64, points)
	for i := range sigma {
		sigma[i] = noise
	}
	for _, known := range []bool{true, false} {
		inside, sum, sum2, se := make([]float64, 3), make([]float64, 3), make([]float64, 3), make([]float64, 3)
		cross, corr, chi := 0.0, 0.0, 0.0
		for seed := range uint64(seeds) {
			rng := rand.New(rand.NewPCG(seed, 7))
			data := slices.Clone(clean)
			for i := range data {
				data[i] += noise * rng.NormFloat64()
			}
			p := filmProblem(data, nil)
			if known {
				p.Sigma = sigma
			}
			res, err := Fit(p)
			if err != nil {
				t.Fatalf("seed %d: %v", seed, err)
			}
			for j, v := range res.Params {
				d := v - truth[j]
				if math.Abs(d) < res.StdErr[j] {
					inside[j]++
				}
				sum[j] += d
				sum2[j] += d * d
				se[j] += res.StdErr[j]
			}
			cross += (res.Params[0] - truth[0]) * (res.Params[2] - truth[2])
			corr += res.Correlation[0][2]
			chi += res.ReducedChiSquare
			if res.DOF != points-3 || !res.Converged {
				t.Fatalf("seed %d: %+v", seed, res)
			}
		}
		want := math.Erf(math.Sqrt(0.5))
		for j := range truth {
			scatter := math.Sqrt(sum2[j] / seeds)
			if d := inside[j]/seeds - want; math.Abs(d) > 4*math.Sqrt(want*(1-want)/seeds) {
				t.Errorf("sigma known %v: parameter %d: %.3f within one standard error, want %.3f", known, j, inside[j]/seeds, want)
			}
			if r := se[j] / seeds / scatter; math.Abs(r-1) > 4/math.Sqrt(2*seeds) {
				t.Errorf("sigma known %v: parameter %d: standard error %.3g, scatter %.3g", known, j, se[j]/seeds, scatter)
			}
			if m := sum[j] / seeds; math.Abs(m) > 4*scatter/math.Sqrt(seeds) {
				t.Errorf("sigma known %v: parameter %d: mean error %.3g with scatter %.3g", known, j, m, scatter)
			}
		}
		got, mean := cross/math.Sqrt(sum2[0]*sum2[2]), corr/seeds
		if math.Abs(got-mean) > 4*(1-mean*mean)/math.Sqrt(seeds) {
			t.Errorf("sigma known %v: correlation of n and thickness %.4f, of the estimates %.4f", known, mean, got)
		}
		variance := 1.0
		if !known {
			variance = noise * noise
		}
		if d := chi/seeds/variance - 1; math.Abs(d) > 4*math.Sqrt(2.0/(points-3)/seeds) {
			t.Errorf("sigma known %v: reduced chi-square %.4f too large by %.4f", known, chi/seeds/variance, d)
		}
	}
}

// TestFitIndexProblem recovers a Tauc-Lorentz model from its own table with the
// analytic Jacobian; the table is exact, so the parameters must be.
func TestFitIndexProblem(t *testing.T) {
	truth := &TaucLorentz{122, 3.45, 2.54, 1.2, 1.15}
	var lambda []float64
	for l := 250.0; l <= 1200; l += 10 {
		lambda = append(lambda, l)
	}
	n, err := Evaluate(nil, truth, lambda)
	if err != nil {
		t.Fatal(err)
	}
	m := &TaucLorentz{90, 3.8, 2, 1.4, 1.5}
	p, err := IndexProblem(m, lambda, n)
	if err != nil {
		t.Fatal(err)
	}
	for name, jac := range map[string]func(dst, params []float64) error{"analytic": p.Jacobian, "differences": nil} {
		p.Jacobian = jac
		res, err := Fit(p)
		if err != nil {
			t.Fatalf("%s: %v", name, err)
		}
		for j, want := range values(truth) {
			if math.Abs(res.Params[j]-want) > 1e-9*want {
				t.Errorf("%s: parameter %d = %.12g, want %g", name, j, res.Params[j], want)
			}
		}
		if res.ChiSquare > 1e-18 || res.Iterations > 40 {
			t.Errorf("%s: chi-square %g after %d steps", name, res.ChiSquare, res.Iterations)
		}
	}
}

// TestFitJacobian: analytic derivatives and differences give the same estimate
// and statistics for noisy data.
func TestFitJacobian(t *testing.T) {
	rng := rand.New(rand.NewPCG(5, 5))
	truth := &Sum{&Lorentz{2, 1.5, 4, 0.6}, &Drude{0, 1.3, 0.12}}
	var lambda []float64
	for l := 250.0; l <= 2500; l += 25 {
		lambda = append(lambda, l)
	}
	n, err := Evaluate(nil, truth, lambda)
	if err != nil {
		t.Fatal(err)
	}
	for i := range n {
		n[i] += complex(0.01*rng.NormFloat64(), 0.01*rng.NormFloat64())
	}
	m := &Sum{&Lorentz{1.8, 1.3, 4.2, 0.5}, &Drude{0, 1, 0.1}}
	p, err := IndexProblem(m, lambda, n)
	if err != nil {
		t.Fatal(err)
	}
	p.Lower = []float64{0, 0, 1, 0, 0, 0, 0}
	p.Upper = []float64{9, 9, 9, 9, 0, 9, 9} // the second background is held at 0
	a, err := Fit(p)
	if err != nil {
		t.Fatal(err)
	}
	p.Jacobian = nil
	b, err := Fit(p)
	if err != nil {
		t.Fatal(err)
	}
	for j := range a.Params {
		if math.Abs(a.Params[j]-b.Params[j]) > 1e-6*a.StdErr[j] || math.Abs(a.StdErr[j]-b.StdErr[j]) > 1e-7*a.StdErr[j] {
			t.Errorf("parameter %d: %.12g ± %.9g with derivatives, %.12g ± %.9g with differences", j, a.Params[j], a.StdErr[j], b.Params[j], b.StdErr[j])
		}
		for i := range a.Params {
			if c := a.Correlation[j][i]; c != a.Correlation[i][j] || math.Abs(c) > 1 || math.Abs(c-b.Correlation[j][i]) > 1e-6 {
				t.Errorf("correlation %d, %d: %g, %g, with differences %g", i, j, c, a.Correlation[i][j], b.Correlation[j][i])
			}
		}
	}
	if a.Params[4] != 0 || a.StdErr[4] != 0 || a.AtBound[4] || a.DOF != 2*len(lambda)-6 {
		t.Errorf("held parameter: %+v", a)
	}
}

// TestFitBound: a minimum outside the bounds ends on the bound, and the other
// parameter is at its minimum there. Straight line y = a + b x, closed form.
func TestFitBound(t *testing.T) {
	x := []float64{0, 1, 2, 3, 4}
	y := []float64{1, 2.9, 5.2, 7.1, 8.8}
	line := func(dst, p []float64) error {
		for i := range dst {
			dst[i] = p[0] + p[1]*x[i]
		}
		return nil
	}
	res, err := Fit(FitProblem{Model: line, Data: y, Start: []float64{0, 0.5}, Lower: []float64{-10, 0}, Upper: []float64{10, 1.5}})
	if err != nil {
		t.Fatal(err)
	}
	mean := 0.0
	for i := range x {
		mean += (y[i] - 1.5*x[i]) / 5
	}
	// The goal of Fit is 1e-9 standard errors.
	if res.Params[1] != 1.5 || !res.AtBound[1] || res.AtBound[0] || math.Abs(res.Params[0]-mean) > 1e-9*res.StdErr[0] || !math.IsNaN(res.StdErr[1]) {
		t.Errorf("%+v, want b = 1.5 at its bound, a = %g", res, mean)
	}
	sum := 0.0
	for _, r := range res.Residuals {
		sum += r * r
	}
	if want := math.Sqrt(sum / 4 / 5); math.Abs(res.StdErr[0]-want) > 1e-9*want {
		t.Errorf("standard error of a %g, want %g (a mean of 5 residuals)", res.StdErr[0], want)
	}
	// Free line: textbook slope, intercept and standard errors.
	res, err = Fit(FitProblem{Model: line, Data: y, Start: []float64{0, 0}})
	if err != nil {
		t.Fatal(err)
	}
	var sx, sy, sxx, sxy float64
	for i := range x {
		sx, sy, sxx, sxy = sx+x[i], sy+y[i], sxx+x[i]*x[i], sxy+x[i]*y[i]
	}
	b := (5*sxy - sx*sy) / (5*sxx - sx*sx)
	if math.Abs(res.Params[1]-b) > 1e-9*res.StdErr[1] || math.Abs(res.StdErr[1]-math.Sqrt(res.ReducedChiSquare*5/(5*sxx-sx*sx))) > 1e-9*res.StdErr[1] ||
		math.Abs(res.Correlation[0][1]+sx/math.Sqrt(5*sxx)) > 1e-9 {
		t.Errorf("line: %+v, want slope %g", res, b)
	}
}

// TestFitPeriod: an angle near 360 degrees and one near 0 are close.
func TestFitPeriod(t *testing.T) {
	data := []float64{359.5, 0.5, 359, 1, 358.5, 1.5}
	p := FitProblem{
		Model: func(dst, p []float64) error {
			for i := range dst {
				dst[i] = p[0]
			}
			return nil
		},
		Data: data, Period: []float64{360, 360, 360, 360, 360, 360}, Start: []float64{20},
	}
	res, err := Fit(p)
	if err != nil || math.Abs(res.Params[0]) > 1e-9 {
		t.Errorf("mean angle %v, %v, want 0", res.Params, err)
	}
}

// TestFitEllipsometry fits index and thickness of a film to psi and delta
// (degrees, 70°, film on a substrate of 3.9 + 0.02i) where delta passes through
// 360. The three-phase formula is that of R. M. A. Azzam and N. M. Bashara,
// Ellipsometry and Polarized Light (1977), section 4.3.
func TestFitEllipsometry(t *testing.T) {
	const points, degree = 41, math.Pi / 180
	model := func(dst, p []float64) error {
		film := Cauchy{A: p[0], B: p[1]}
		sin0, cos0 := complex(math.Sin(70*degree), 0), complex(math.Cos(70*degree), 0)
		ns := complex(3.9, 0.02)
		for i := range points {
			lambda := 400 + 10*float64(i)
			n, err := film.Index(lambda)
			if err != nil {
				return err
			}
			cos1, cos2 := cmplx.Sqrt(1-sin0*sin0/(n*n)), cmplx.Sqrt(1-sin0*sin0/(ns*ns))
			s := func(na, ca, nb, cb complex128) complex128 { return (na*ca - nb*cb) / (na*ca + nb*cb) }
			x := cmplx.Exp(complex(0, 4*math.Pi*p[2]/lambda) * n * cos1)
			total := func(a, b complex128) complex128 { return (a + b*x) / (1 + a*b*x) }
			rho := total(s(n, cos0, 1, cos1), s(ns, cos1, n, cos2)) / total(s(1, cos0, n, cos1), s(n, cos1, ns, cos2))
			dst[i] = math.Atan(cmplx.Abs(rho)) / degree
			dst[points+i] = math.Mod(cmplx.Phase(rho)/degree+360, 360)
		}
		return nil
	}
	truth := []float64{1.95, 0.015, 90}
	p := FitProblem{Model: model, Data: make([]float64, 2*points), Start: []float64{2.1, 0.01, 85}, Period: make([]float64, 2*points)}
	if err := model(p.Data, truth); err != nil {
		t.Fatal(err)
	}
	for i := range points {
		p.Period[points+i] = 360
	}
	if span := slices.Max(p.Data[points:]) - slices.Min(p.Data[points:]); span < 300 {
		t.Fatalf("delta spans %g degrees only: it does not pass through 360", span)
	}
	res, err := Fit(p)
	if err != nil {
		t.Fatal(err)
	}
	for j, v := range truth {
		if math.Abs(res.Params[j]-v) > 1e-9*v {
			t.Errorf("parameter %d = %.12g, want %g", j, res.Params[j], v)
		}
	}
}

func TestFitErrors(t *testing.T) {
	flat := func(dst, p []float64) error {
		for i := range dst {
			dst[i] = p[0] + p[1]
		}
		return nil
	}
	fails := errors.New("no value here")
	inf := math.Inf(1)
	good := FitProblem{Model: flat, Data: []float64{1, 2, 3}, Start: []float64{1, 1}}
	for name, c := range map[string]struct {
		change func(*FitProblem)
		want   error
	}{
		"no model":       {func(p *FitProblem) { p.Model = nil }, ErrInput},
		"no parameters":  {func(p *FitProblem) { p.Start = nil }, ErrInput},
		"NaN datum":      {func(p *FitProblem) { p.Data = []float64{1, math.NaN(), 2} }, ErrInput},
		"few data":       {func(p *FitProblem) { p.Data = p.Data[:2] }, ErrInput},
		"sigma length":   {func(p *FitProblem) { p.Sigma = []float64{1} }, ErrInput},
		"sigma 0":        {func(p *FitProblem) { p.Sigma = []float64{1, 0, 1} }, ErrInput},
		"period":         {func(p *FitProblem) { p.Period = []float64{1, -1, 1} }, ErrInput},
		"start outside":  {func(p *FitProblem) { p.Lower = []float64{2, 0} }, ErrInput},
		"NaN bound":      {func(p *FitProblem) { p.Upper = []float64{math.NaN(), 9} }, ErrInput},
		"infinite start": {func(p *FitProblem) { p.Start = []float64{inf, 1} }, ErrInput},
		"all held":       {func(p *FitProblem) { p.Lower, p.Upper = p.Start, p.Start }, ErrInput},
		"iterations":     {func(p *FitProblem) { p.MaxIterations = -1 }, ErrInput},
		"model fails":    {func(p *FitProblem) { p.Model = func(_, _ []float64) error { return fails } }, fails},
		"model NaN":      {func(p *FitProblem) { p.Model = func(d, _ []float64) error { d[0] = math.NaN(); return nil } }, ErrInput},
		"Jacobian fails": {func(p *FitProblem) { p.Jacobian = func(_, _ []float64) error { return fails } }, fails},
		"Jacobian NaN":   {func(p *FitProblem) { p.Jacobian = func(d, _ []float64) error { d[0] = math.NaN(); return nil } }, ErrInput},
		"not determined": {func(p *FitProblem) {}, ErrSingular},
		"changes nothing": {func(p *FitProblem) {
			p.Model = func(d, q []float64) error { d[0], d[1], d[2] = q[0], q[0], q[0]; return nil }
		}, ErrSingular},
		"too few steps": {func(p *FitProblem) {
			p.MaxIterations = 1
			p.Start = []float64{3, -2}
			p.Model = func(d, q []float64) error {
				for i := range d {
					d[i] = math.Exp(q[0]*float64(i)) + q[1]
				}
				return nil
			}
		}, ErrConvergence},
		"wrong Jacobian": {func(p *FitProblem) {
			p.Start = []float64{3, -2}
			p.Model = func(d, q []float64) error {
				for i := range d {
					d[i] = q[0] + q[1]*float64(i)
				}
				return nil
			}
			p.Jacobian = func(d, _ []float64) error { copy(d, []float64{-1, 0, -1, -1, -1, -2}); return nil }
		}, ErrConvergence},
	} {
		p := good
		c.change(&p)
		res, err := Fit(p)
		if !errors.Is(err, c.want) {
			t.Errorf("%s: error %v, want %v", name, err, c.want)
		}
		if (c.want == ErrSingular || c.want == ErrConvergence) && (len(res.Params) != 2 || res.ChiSquare < 0 || !math.IsNaN(res.StdErr[0])) {
			t.Errorf("%s: no last estimate: %+v", name, res)
		}
	}
	if _, err := IndexProblem(&Cauchy{A: 1.5}, []float64{500}, nil); !errors.Is(err, ErrInput) {
		t.Errorf("IndexProblem without indices: %v", err)
	}
}

// TestFitAvoidsHoles: a model without a value beyond some parameter is not
// asked to have one; the fit finds the minimum at the near side.
func TestFitAvoidsHoles(t *testing.T) {
	res, err := Fit(FitProblem{
		Model: func(dst, p []float64) error {
			if p[0] < 0 {
				return errors.New("negative")
			}
			for i := range dst {
				dst[i] = math.Sqrt(p[0]) * float64(i+1)
			}
			return nil
		},
		Data: []float64{0.1, 0.2, 0.3}, Start: []float64{400},
	})
	if err != nil || math.Abs(res.Params[0]-0.01) > 1e-10 {
		t.Errorf("%v, %v, want 0.01", res.Params, err)
	}
}
