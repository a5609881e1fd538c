package optics

import (
	"math"
	"math/big"
	"math/rand/v2"
	"testing"
)

// bigPrec holds 1 - exp(-700) with 60 digits to spare.
const bigPrec = 1250

// bigExpm1 returns exp(x) - 1 from the series of exp at x/2^40.
func bigExpm1(x float64) *big.Float {
	f := func(v float64) *big.Float { return new(big.Float).SetPrec(bigPrec).SetFloat64(v) }
	z := f(0).SetMantExp(f(x), -40)
	m, term := f(0), f(1)
	for k := 1.0; k < 20; k++ {
		term.Quo(term.Mul(term, z), f(k))
		m.Add(m, term)
	}
	for range 40 { // exp(2z) - 1 = m (m + 2)
		m.Mul(m, f(0).Add(m, f(2)))
	}
	return m
}

// bigSincos returns the sine and cosine of x from their series at x/2^40.
func bigSincos(x float64) (sin, cos *big.Float) {
	f := func(v float64) *big.Float { return new(big.Float).SetPrec(bigPrec).SetFloat64(v) }
	z := f(0).SetMantExp(f(x), -40)
	sin, c1, term := f(0).Set(z), f(0), f(0).Set(z) // c1 = 1 - cos, which keeps its digits
	for k := 2.0; k < 40; k += 2 {
		term.Quo(f(0).Mul(term, z), f(k)) // z^k/k! with the sign of the sine's last term
		c1.Add(c1, term)
		term.Quo(term.Mul(term, z), f(-k-1))
		sin.Add(sin, term)
	}
	for range 40 { // sin 2z = 2 sin z (1 - c1), 1 - cos 2z = 2 sin² z
		c := f(0).Sub(f(1), c1)
		c1.Mul(f(2), f(0).Mul(sin, sin))
		sin.Mul(f(2), f(0).Mul(sin, c))
	}
	return sin, f(0).Sub(f(1), c1)
}

// ulps returns the error of got in units of the last place of want, or of
// 2^floor where want is smaller.
func ulps(got float64, want *big.Float, floor int) float64 {
	dev := new(big.Float).SetPrec(bigPrec).Sub(new(big.Float).SetPrec(bigPrec).SetFloat64(got), want)
	exp := max(want.MantExp(nil), floor)
	d, _ := dev.SetMantExp(dev, 53-exp).Float64()
	return math.Abs(d)
}

// TestSincosRow: sine and cosine err by less than 1.5 units in the last place of
// a number between 1/2 and 1, and relatively by as much where no multiple of π/2
// is taken off. Three roundings of half a unit contribute: the last sum, and for
// the cosine 1 - z/2 and z = r².
func TestSincosRow(t *testing.T) {
	rng := rand.New(rand.NewPCG(11, 12))
	for _, c := range []struct {
		lo, hi float64
		floor  int
	}{{1e-300, 1e-3, math.MinInt32}, {1e-3, math.Pi / 4, math.MinInt32}, {math.Pi / 4, longPhase, 0}, {longPhase, maxFastPhase, 0}} {
		worst := 0.0
		for range 500 {
			x := c.lo + (c.hi-c.lo)*rng.Float64()
			switch rng.IntN(3) {
			case 0:
				x = c.lo * math.Pow(c.hi/c.lo, rng.Float64())
			case 1: // close to a multiple of π/2
				if near := math.Round(x*2/math.Pi) * math.Pi / 2; near > c.lo && near < c.hi {
					x = near
				}
			}
			var s, co [1]float64
			sincosRow(s[:], co[:], []float64{x})
			sin, cos := bigSincos(x)
			worst = max(worst, ulps(s[0], sin, c.floor), ulps(co[0], cos, c.floor))
		}
		t.Logf("sine and cosine of %g..%g rad: %.2f ulp", c.lo, c.hi, worst)
		if !(worst < 1.5) {
			t.Errorf("sine and cosine of %g..%g rad: error %.2f ulp, want < 1.5", c.lo, c.hi, worst)
		}
	}
}

// TestExpRow: exp(z) and 1 - exp(z) keep their relative accuracy over the whole
// range, to the two and three roundings of their last steps; below minExponent
// exp stays at exp(minExponent).
func TestExpRow(t *testing.T) {
	rng := rand.New(rand.NewPCG(13, 14))
	worstE, worstM := 0.0, 0.0
	for range 2000 {
		z := -math.Pow(10, -300*rng.Float64())
		switch rng.IntN(4) {
		case 0:
			z = minExponent * rng.Float64()
		case 1:
			z = -4 * rng.Float64()
		case 2:
			z = -math.Pow(10, 4-20*rng.Float64())
		}
		var e, m [1]float64
		expRow(e[:], m[:], []float64{z})
		want := bigExpm1(max(z, minExponent))
		neg := new(big.Float).Neg(want)
		one := new(big.Float).SetPrec(bigPrec).SetInt64(1)
		worstE = max(worstE, ulps(e[0], one.Add(one, want), math.MinInt32))
		worstM = max(worstM, ulps(m[0], neg, math.MinInt32))
	}
	t.Logf("exp %.2f ulp, 1 - exp %.2f ulp", worstE, worstM)
	if !(worstE < 1 && worstM < 1.5) {
		t.Errorf("exp %.2f ulp, want < 1; 1 - exp %.2f ulp, want < 1.5", worstE, worstM)
	}
	var e, m [3]float64
	expRow(e[:], m[:], []float64{0, -1e300, math.Inf(-1)})
	if e[0] != 1 || m[0] != 0 || m[1] != 1 || m[2] != 1 || !(e[1] > 0 && e[1] < 1e-300) || e[2] != e[1] {
		t.Errorf("exp of 0, -1e300, -Inf = %v, 1 - exp = %v", e, m)
	}
}
