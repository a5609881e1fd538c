package absorb

import (
	"math"
	"math/big"
	"testing"
)

// TestSeries compares the series of the hot loops with the functions of package
// math over their whole ranges.
func TestSeries(t *testing.T) {
	for i := range 10001 {
		q := smallExp * float64(i) / 10000
		if got, want := meanExpSmall(q), meanExp(q); relative(got, want) > 4e-16 {
			t.Fatalf("meanExpSmall(%g) = %.17g, want %.17g", q, got, want)
		}
		if q = tinyExp * float64(i) / 10000; relative(meanExpTiny(q), meanExp(q)) > 4e-16 {
			t.Fatalf("meanExpTiny(%g) = %.17g, want %.17g", q, meanExpTiny(q), meanExp(q))
		}
		u := smallAngle * float64(i) / 10000
		s, c := sinCosSmall(u)
		if relative(s, sinc(u)) > 4e-16 || relative(c, math.Cos(u)) > 4e-16 {
			t.Fatalf("sinCosSmall(%g) = %.17g, %.17g", u, s, c)
		}
		if u = 4 * float64(i) / 10000; i > 1000 {
			// Against the definition; the terms 1 and u round to 2^-53 in each of four steps.
			if want := (math.Sin(u) - u*math.Cos(u)) / (u * u); math.Abs(linearSine(u)-want) > 4*0x1p-53*(1+u)/(u*u) {
				t.Fatalf("linearSine(%g) = %.17g, want %.17g", u, linearSine(u), want)
			}
		}
	}
}

// TestDividedExp3 compares with series of 300 bits, over spread and nearly equal
// arguments.
func TestDividedExp3(t *testing.T) {
	r := newRand()
	for i := range 2000 {
		a, spread := -20*r.Float64(), logUniform(r, 1e-12, 20)
		b, c := a+spread*r.Float64(), a+spread*r.Float64()
		if i%7 == 0 {
			b = a
		}
		if i%11 == 0 {
			c = b
		}
		if got, want := dividedExp3(a, b, c), bigDividedExp(a, b, c); relative(got, want) > 4e-15 {
			t.Errorf("case %d: exp[%g, %g, %g] = %.17g, want %.17g", i, a, b, c, got, want)
		}
		if x, y := dividedExp3(a, b, c), dividedExp3(c, a, b); x != y {
			t.Errorf("case %d: order of arguments changes %g to %g", i, x, y)
		}
	}
}

// bigDividedExp returns exp[a, b, c] = sum of h_k(a, b, c)/(k+2)!, h_k the sum of all
// products of k arguments, in 300 bits.
func bigDividedExp(a, b, c float64) float64 {
	num := func(v float64) *big.Float { return new(big.Float).SetPrec(300).SetFloat64(v) }
	x := [3]*big.Float{num(a), num(b), num(c)}
	one, two, h := num(1), num(1), num(1) // h_k of a; of a, b; of a, b, c
	factorial, sum := num(2), num(0)
	for k := 1.; k < 160; k++ {
		sum.Add(sum, new(big.Float).Quo(h, factorial))
		one.Mul(one, x[0])
		two.Add(one, two.Mul(two, x[1]))
		h.Add(two, h.Mul(h, x[2]))
		factorial.Mul(factorial, num(k+2))
	}
	v, _ := sum.Float64()
	return v
}

// TestSinCosAt: the phase behind many periods is that of the exact product of the
// exact difference.
func TestSinCosAt(t *testing.T) {
	r := newRand()
	for range 2000 {
		k, z, m := logUniform(r, 1e-3, 1), 1e7*r.Float64(), 1e7*r.Float64()
		exact := new(big.Float).SetPrec(300).SetFloat64(z)
		exact.Sub(exact, new(big.Float).SetFloat64(m))
		exact.Mul(exact, new(big.Float).SetFloat64(k))
		// Whole turns taken off with 2 pi in 200 bits or more.
		turn, _ := new(big.Float).SetPrec(300).SetString("6.283185307179586476925286766559005768394338798750211641949889184615632812572")
		n, _ := new(big.Float).Quo(exact, turn).Int(nil)
		exact.Sub(exact, turn.Mul(turn, new(big.Float).SetPrec(300).SetInt(n)))
		phase, _ := exact.Float64()
		sin, cos := sinCosAt(k, z, m)
		if math.Abs(sin-math.Sin(phase)) > 1e-15 || math.Abs(cos-math.Cos(phase)) > 1e-15 {
			t.Errorf("k %g, z %g, m %g: %.17g, %.17g, want %.17g, %.17g", k, z, m, sin, cos, math.Sin(phase), math.Cos(phase))
		}
	}
}
