package optics

import (
	"errors"
	"math"
	"math/cmplx"
	"math/rand/v2"
	"testing"
)

func indices(st Stack) (list []complex128) {
	for _, f := range st.Films {
		list = append(list, f.Index)
	}
	return list
}

func roughSum(r RoughResponse) (sum, low float64) {
	sum, low = r.R+r.T, min(r.R, r.T)
	for _, list := range [][]float64{r.A, r.ScatteredFront, r.ScatteredBack} {
		for _, v := range list {
			sum += v
			low = min(low, v)
		}
	}
	return sum, low
}

// TestRoughClosure: what leaves the specular beam stays in the balance (each of
// the nine interfaces may miss 1e-11 by rounding); without roughness the
// response is that of the smooth stack.
func TestRoughClosure(t *testing.T) {
	rng := rand.New(rand.NewPCG(15, 16))
	worst, refused := 0.0, 0
	for i := range 3000 {
		st, w := randomStack(rng, 8)
		// Scalar theory ends where waves run along the interfaces.
		flat := math.Cos(w.Angle) < 0.2
		for _, n := range append(indices(st), st.Back) {
			flat = flat || cmplx.Abs(n*RefractedCosine(st.Front, n, w.Angle)) < 0.2
		}
		if flat {
			continue
		}
		metals := 0
		if imag(st.Back) > 0.01 {
			metals++
		}
		for j := range st.Films {
			st.Films[j].Thickness = min(st.Films[j].Thickness, 2*w.Wavelength)
			if imag(st.Films[j].Index) > 0.01 {
				metals++
			}
		}
		sigma := make([]float64, len(st.Films)+1)
		r, err := SolveRough(st, sigma, w)
		if err != nil {
			t.Fatal(err)
		}
		smooth := solve(t, st, w)
		near(t, "smooth R", r.R, smooth.R, 1e-10)
		near(t, "smooth T", r.T, smooth.T, 1e-10)
		for j := range sigma {
			sigma[j] = 50 * rng.Float64()
		}
		if r, err = SolveRough(st, sigma, w); err != nil {
			if metals == 0 {
				t.Fatalf("%v\n%+v %+v", err, st, w)
			}
			refused++
			continue
		}
		sum, low := roughSum(r)
		worst = max(worst, math.Abs(sum-1))
		if !(math.Abs(sum-1) <= 9e-11) || low < 0 {
			t.Errorf("stack %d: sum - 1 = %g, lowest %g\n%+v\n%+v\n%v\n%+v", i, sum-1, low, st, w, sigma, r)
		}
	}
	t.Logf("largest |sum-1| = %.2g; %d stacks refused", worst, refused)
}

// TestRoughInterfaceIsMean: the specular beam of one interface in a stack is the
// mean over interfaces displaced by h: a film of the front medium's index and
// thickness d + h in front of it gives each of them exactly.
func TestRoughInterfaceIsMean(t *testing.T) {
	const sigma, lambda = 12.0, 600.0
	w := Wave{Wavelength: lambda, Angle: 0.5, Polarization: S}
	st := Stack{Front: 1.3, Back: 2.4}
	r, err := SolveRough(st, []float64{sigma}, w)
	if err != nil {
		t.Fatal(err)
	}
	var re, im, total float64
	for h := -8 * sigma; h <= 8*sigma; h += sigma / 16 {
		weight := math.Exp(-0.5 * h * h / (sigma * sigma))
		a, err := SolveAmplitudes(Stack{Front: 1.3, Back: 2.4, Films: []Film{{Index: 1.3, Thickness: 200 + h}}}, w)
		if err != nil {
			t.Fatal(err)
		}
		re, im, total = re+weight*real(a.RS), im+weight*imag(a.RS), total+weight
	}
	near(t, "R of the mean amplitude", r.R, (re*re+im*im)/(total*total), 1e-12)
	near(t, "scattered to the front", r.ScatteredFront[0], solve(t, st, w).R-r.R, 1e-14)
	near(t, "scattered to the back", r.ScatteredBack[0], solve(t, st, w).T-r.T, 1e-14)
}

func TestRoughErrors(t *testing.T) {
	st := Stack{Front: 1, Back: 1, Films: []Film{{Index: 1.5, Thickness: 1e6}}}
	w := Wave{Wavelength: 600}
	for _, sigma := range [][]float64{nil, {1}, {1, -1}, {math.NaN(), 1}, {1, math.Inf(1)}} {
		if _, err := SolveRough(st, sigma, w); !errors.Is(err, ErrInput) {
			t.Errorf("roughness %v: error %v", sigma, err)
		}
	}
	st.Films[0].Incoherent = true
	if _, err := SolveRough(st, []float64{1, 1}, w); !errors.Is(err, ErrInput) {
		t.Errorf("incoherent film: error %v", err)
	}
}
