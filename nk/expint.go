package nk

import "math"

const (
	eulerGamma = 0.57721566490153286060651209008240243
	// eiAsymptotic is where the divergent series of Ei takes over: its smallest
	// term there is about exp(-x) = 4e-18.
	eiAsymptotic = 40
)

// scaledEi returns exp(-x) Ei(x), the exponential integral as a principal value
// times its main factor, for any real x. Relative accuracy 1e-14 apart from the
// neighbourhood of the zero at x = 0.3725, absolute 1e-15 there.
// Sources: M. Abramowitz and I. Stegun, Handbook of Mathematical Functions,
// 5.1.10 (series), 5.1.51 (asymptotic), 5.1.22 (continued fraction of E1).
//
// Special cases: x = 0 gives -Inf, ±Inf gives 0, NaN gives NaN.
func scaledEi(x float64) float64 {
	switch {
	case math.IsNaN(x):
		return x
	case math.IsInf(x, 0):
		return 0
	case x == 0:
		return math.Inf(-1)
	case x < -1:
		return -scaledE1(-x)
	case x <= eiAsymptotic:
		// Ei = gamma + log|x| + sum of x^k/(k k!)
		sum, term := 0.0, 1.0
		for k := 1.0; k < 200; k++ {
			term *= x / k
			sum += term / k
			if math.Abs(term) < 1e-18*math.Abs(sum)*k {
				break
			}
		}
		return math.Exp(-x) * (eulerGamma + math.Log(math.Abs(x)) + sum)
	}
	sum, term := 1.0, 1.0
	for k := 1.0; k <= eiAsymptotic; k++ {
		term *= k / x
		sum += term
		if term < 1e-17 {
			break
		}
	}
	return sum / x
}

// scaledE1 returns exp(x) E1(x) for x > 1 by the continued fraction
// 1/(x + 1 - 1/(x + 3 - 4/(x + 5 - ...))), evaluated from the front (Lentz).
func scaledE1(x float64) float64 {
	b := x + 1
	c, d := math.Inf(1), 1/b
	h := d
	for i := 1.0; i < 500; i++ {
		a := -i * i
		b += 2
		d = 1 / (a*d + b)
		c = b + a/c
		del := c * d
		h *= del
		if math.Abs(del-1) < 2e-16 {
			break
		}
	}
	return h
}
