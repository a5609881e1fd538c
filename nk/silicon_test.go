package nk

import (
	"errors"
	"math"
	"strings"
	"testing"
)

// TestScaleTemperature: the derivative at t0 is x C, the definition of the
// coefficient, and C = 1/t0 makes x proportional to the temperature.
func TestScaleTemperature(t *testing.T) {
	if x := ScaleTemperature(3.5, 0, 300, 350); x != 3.5 {
		t.Errorf("no coefficient: %g", x)
	}
	if x := ScaleTemperature(3.5, 2e-4, 300, 300); x != 3.5 {
		t.Errorf("same temperature: %g", x)
	}
	if x := ScaleTemperature(0.01, 1.0/300, 300, 330); math.Abs(x-0.011) > 1e-17 {
		t.Errorf("proportional: %g", x)
	}
	for _, c := range []float64{-3e-4, 2e-4, 1e-2} {
		const h = 1e-3
		d := (ScaleTemperature(2, c, 300, 300+h) - ScaleTemperature(2, c, 300, 300-h)) / (2 * h)
		// the rounding of 2 over the step of 2e-3 is 2e-13; the third derivative adds less
		if math.Abs(d-2*c) > 1e-12 {
			t.Errorf("coefficient %g: derivative %g", c, d/2)
		}
	}
	nan, inf := math.NaN(), math.Inf(1)
	for _, c := range [][4]float64{{-1, 0, 300, 300}, {nan, 0, 300, 300}, {inf, 0, 300, 300}, {1, nan, 300, 300}, {1, inf, 300, 300}, {0, nan, 300, 300}, {1, 0, 0, 300}, {1, 0, 300, -5}, {1, 0, inf, 300}, {1, 0, 300, inf}, {1, 0, nan, 300}} {
		if x := ScaleTemperature(c[0], c[1], c[2], c[3]); !math.IsNaN(x) {
			t.Errorf("%v gives %g, want NaN", c, x)
		}
	}
	if x := ScaleTemperature(0, 1e300, 1e5, 1e6); x != 0 {
		t.Errorf("nothing scales to %g", x)
	}
}

func TestAtTemperature(t *testing.T) {
	tb := tab([3]float64{900, 3.6, 0.002}, [3]float64{1000, 3.5, 0})
	tb.Conditions, tb.Uncertainty = "300 K", []float64{0.1, 0.1}
	cn, ck := []float64{1e-4, 2e-4}, []float64{5e-3, 1e-2}
	got, err := tb.AtTemperature(300, 330, cn, ck)
	if err != nil {
		t.Fatal(err)
	}
	if got.N[0] != ScaleTemperature(3.6, 1e-4, 300, 330) || got.K[0] != ScaleTemperature(0.002, 5e-3, 300, 330) || got.K[1] != 0 {
		t.Errorf("scaled to %v, %v", got.N, got.K)
	}
	if got.Uncertainty != nil || !strings.HasPrefix(got.Conditions, "300 K; scaled from 300 K to 330 K") || tb.N[0] != 3.6 {
		t.Errorf("uncertainty %v, conditions %q, n of the original %g", got.Uncertainty, got.Conditions, tb.N[0])
	}
	for name, call := range map[string]func() (Table, error){
		"table":             func() (Table, error) { return Table{}.AtTemperature(300, 330, nil, nil) },
		"coefficients of n": func() (Table, error) { return tb.AtTemperature(300, 330, cn[:1], ck) },
		"of k":              func() (Table, error) { return tb.AtTemperature(300, 330, cn, nil) },
		"temperature 0 K":   func() (Table, error) { return tb.AtTemperature(0, 330, cn, ck) },
		"temperature NaN K": func() (Table, error) { return tb.AtTemperature(300, math.NaN(), cn, ck) },
		"row 0":             func() (Table, error) { return tb.AtTemperature(300, 330, []float64{math.NaN(), 0}, ck) },
		"row 1":             func() (Table, error) { return tb.AtTemperature(300, 330, []float64{0, 1e9}, ck) },
	} {
		if _, err := call(); !errors.Is(err, ErrInput) || !strings.Contains(err.Error(), name) {
			t.Errorf("%s: %v", name, err)
		}
	}
}

// TestFreeCarriers: both kinds add up, nothing comes from no carriers, and the
// laws rise with the wavelength by their exponent.
func TestFreeCarriers(t *testing.T) {
	for _, f := range allFreeCarriers() {
		if f.Source == "" || !strings.Contains(f.Source, "from memory") {
			t.Errorf("%s: source %q", f.Name, f.Source)
		}
		both, n, p := f.Alpha(1100, 1e18, 3e18), f.Alpha(1100, 1e18, 0), f.Alpha(1100, 0, 3e18)
		if both != n+p || f.Alpha(1100, 0, 0) != 0 || !(n > 0 && p > 0) {
			t.Errorf("%s: %g, %g, %g", f.Name, both, n, p)
		}
		if r := f.Electrons.CrossSection(2000) / f.Electrons.CrossSection(1000); math.Abs(r-math.Pow(2, f.Electrons.Exponent)) > 1e-13 {
			t.Errorf("%s: electrons rise by %g", f.Name, r)
		}
		for _, c := range [][3]float64{{0, 1, 1}, {-5, 1, 1}, {math.NaN(), 0, 0}, {math.Inf(1), 0, 0}, {1000, -1, 0}, {1000, 0, math.NaN()}, {1000, math.Inf(1), 0}} {
			if a := f.Alpha(c[0], c[1], c[2]); !math.IsNaN(a) {
				t.Errorf("%s: %v gives %g, want NaN", f.Name, c, a)
			}
		}
		if a := f.Alpha(1e300, 0, 0); a != 0 {
			t.Errorf("%s: no carriers absorb %g", f.Name, a)
		}
	}
	for _, p := range []PowerLaw{{}, {1, 1, -1}, {-1, 1, 1}, {math.NaN(), 1, 1}, {1, math.Inf(1), 1}, {1, 1, math.Inf(1)}} {
		if s := p.CrossSection(1000); !math.IsNaN(s) {
			t.Errorf("%+v gives %g, want NaN", p, s)
		}
	}
}
