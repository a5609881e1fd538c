package lighttrap

import (
	"errors"
	"math"
	"math/rand/v2"
	"testing"

	"gonum.org/v1/gonum/integrate/quad"
)

func sum(b Balance) float64 {
	return b.Reflected + b.Absorbed + b.FreeCarriers + b.Escaped + b.RearLoss
}

// TestBalances: shares add up to 1, none is negative, the slope is that of
// central differences, weak absorption is the path factor times αW.
func TestBalances(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 2))
	for range 5000 {
		s := Slab{
			Thickness: 1e3, FrontReflectance: rng.Float64(), FrontInternal: rng.Float64(), RearReflectance: rng.Float64(),
		}
		if rng.IntN(3) == 0 {
			s.FrontInternal = 1
		}
		if rng.IntN(3) == 0 {
			s.RearReflectance = 1
		}
		x := math.Pow(10, -12+14*rng.Float64())
		cos := 1 - 0.5*rng.Float64()
		for name, solve := range map[string]func(Slab) (Balance, error){
			"lambertian":      Slab.Lambertian,
			"planar":          func(s Slab) (Balance, error) { return s.Planar(cos) },
			"lambertian rear": func(s Slab) (Balance, error) { return s.LambertianRear(cos) },
		} {
			at := func(x float64) Balance {
				s.Absorption, s.FreeCarriers = 0.7*x/(s.Thickness*cmPerNM), 0.3*x/(s.Thickness*cmPerNM)
				b, err := solve(s)
				if err != nil {
					t.Fatal(err)
				}
				return b
			}
			b := at(x)
			if dev := math.Abs(sum(b) - 1); !(dev <= 4e-16*4) {
				t.Errorf("%s x = %g %+v: shares add up to 1%+g", name, x, s, sum(b)-1)
			}
			if low := min(b.Reflected, b.Absorbed, b.FreeCarriers, b.Escaped, b.RearLoss); !(low >= 0) {
				t.Errorf("%s: negative share in %+v", name, b)
			}
			h := 1e-5 * x
			up, down := at(x+h), at(x-h)
			for _, d := range []struct {
				name                   string
				up, down, share, slope float64
			}{
				{"absorbed", up.Absorbed + up.FreeCarriers, down.Absorbed + down.FreeCarriers, b.Absorbed + b.FreeCarriers, b.Slope},
				{"escaped", up.Escaped, down.Escaped, b.Escaped, b.EscapedSlope},
				{"rear loss", up.RearLoss, down.RearLoss, b.RearLoss, b.RearLossSlope},
			} {
				slope := (d.up - d.down) / (2 * h)
				// The difference of two shares near a is known to 2e-16 a / 2h, and misses
				// the third derivative: (h/x)² of the slope, and (1 + x/c)² times as much
				// where the share goes like exp(-x/c), c >= 1/2.
				far := 1 + 4*x
				tol := 1e-10*(1+far*far)*math.Abs(slope) + 4e-16*(1+far)/h*d.share
				if !(math.Abs(slope-d.slope) <= tol) {
					t.Errorf("%s x = %g: slope of %s %g, differences give %g, tolerance %g", name, x, d.name, d.slope, slope, tol)
				}
			}
			if b.Slope < 0 || b.EscapedSlope > 0 || b.RearLossSlope > 0 {
				t.Errorf("%s x = %g: more absorption must take from escape %g and rear loss %g, gives %g", name, x, b.EscapedSlope, b.RearLossSlope, b.Slope)
			}
		}
	}
}

// TestDiffuseTransmittance compares with adaptive quadrature of its definition,
// the integral of 2 c exp(-x/c) over the cosine, and its loss with the series
// for small x: 1 - t = 2x - x² (3/2 - γ - ln x) + ...
func TestDiffuseTransmittance(t *testing.T) {
	for _, x := range []float64{1e-3, 0.01, 0.3, 0.999999, 1, 1.000001, 2, 7, 30, 200} {
		want := quad.Fixed(func(y float64) float64 {
			// c = exp(-y) spreads the steep end.
			c := math.Exp(-y)
			return 2 * c * c * math.Exp(-x/c)
		}, 0, 30, 400, quad.Legendre{}, 0)
		got, loss := DiffuseTransmittance(x)
		// The quadrature rounds x/c before its exponential.
		if !(math.Abs(got-want) <= (2e-14+8e-16*x)*want) {
			t.Errorf("t(%g) = %.17g, quadrature %.17g", x, got, want)
		}
		if !(math.Abs(got+loss-1) <= 2e-16) {
			t.Errorf("x = %g: t + loss = 1%+g", x, got+loss-1)
		}
	}
	for _, x := range []float64{1e-12, 1e-9, 1e-7} {
		_, loss := DiffuseTransmittance(x)
		want := 2*x - x*x*(1.5-euler-math.Log(x))
		if !(math.Abs(loss-want) <= 1e-14*want) {
			t.Errorf("loss(%g) = %.17g, series %.17g", x, loss, want)
		}
	}
	if got, loss := DiffuseTransmittance(1e3); got != 0 && got > 1e-300 || loss != 1 {
		t.Errorf("t(1000) = %g, loss %g", got, loss)
	}
	if got, _ := DiffuseTransmittance(-1); !math.IsNaN(got) {
		t.Errorf("t(-1) = %g, want NaN", got)
	}
}

func TestDiffuseMean(t *testing.T) {
	// A linear function a + b c has the mean a + 2b/3.
	if got := DiffuseMean([]float64{0, 0.3, 1}, []float64{1, 1.6, 3}); math.Abs(got-(1+4.0/3)) > 1e-15 {
		t.Errorf("mean of 1 + 2c = %.17g, want 7/3", got)
	}
	for _, c := range [][]float64{nil, {0, 1, 0.5}, {0.1, 1, 1}} {
		if got := DiffuseMean(c, make([]float64, 3)); !math.IsNaN(got) {
			t.Errorf("cosines %v: %g, want NaN", c, got)
		}
	}
}

func TestGrid(t *testing.T) {
	g := Grid{FingerWidth: 40e3, FingerPitch: 1.6e6, FingerFactor: 0.5, BusbarWidth: 1e6, BusbarPitch: 50e6, BusbarFactor: 1}
	s, err := g.Shares()
	if err != nil {
		t.Fatal(err)
	}
	// By hand: busbars 1/50, fingers 1/40 of the rest.
	if covered := 0.02 + 0.98*0.025; math.Abs(s.Covered-covered) > 1e-16 || math.Abs(s.Shaded-(0.02+0.98*0.0125)) > 1e-16 || math.Abs(s.Shaded+s.Recovered-s.Covered) > 1e-17 {
		t.Errorf("shares %+v", s)
	}
	if s, err := (Grid{}).Shares(); err != nil || s.Covered != 0 {
		t.Errorf("no grid: %+v, %v", s, err)
	}
}

func TestErrors(t *testing.T) {
	nan := math.NaN()
	for _, s := range []Slab{
		{Absorption: -1}, {Absorption: nan}, {FreeCarriers: -1}, {Thickness: -1}, {Thickness: math.Inf(1)},
		{FrontReflectance: 1.1}, {FrontInternal: nan}, {RearReflectance: -0.1}, {FrontInternal: 1, RearReflectance: 1},
	} {
		if _, err := s.Lambertian(); !errors.Is(err, ErrInput) {
			t.Errorf("%+v: error %v", s, err)
		}
	}
	for _, cos := range []float64{0, -1, 1.1, nan} {
		if _, err := (Slab{}).Planar(cos); !errors.Is(err, ErrInput) {
			t.Errorf("cosine %g: error %v", cos, err)
		}
		if _, err := (Slab{}).LambertianRear(cos); !errors.Is(err, ErrInput) {
			t.Errorf("cosine %g: error %v", cos, err)
		}
	}
	for _, g := range []Grid{{FingerWidth: 1}, {FingerWidth: 2, FingerPitch: 1}, {FingerPitch: -1}, {FingerFactor: 2}, {BusbarWidth: nan}} {
		if _, err := g.Shares(); !errors.Is(err, ErrInput) {
			t.Errorf("%+v: error %v", g, err)
		}
	}
	for _, v := range []float64{PathLimit(0.5), PathLimitAcceptance(3.5, 0), LimitAbsorptance(-1, 3), TwoPassAbsorptance(1, 0.9)} {
		if !math.IsNaN(v) {
			t.Errorf("want NaN, got %g", v)
		}
	}
	if got := TwoPassAbsorptance(1e-9, 3.5) / 1e-9; math.Abs(got-49) > 49*49*2e-9 {
		t.Errorf("weak limit %g, want 49", got)
	}
}
