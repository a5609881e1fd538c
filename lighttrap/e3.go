package lighttrap

import "math"

// euler is the Euler-Mascheroni constant.
const euler = 0.57721566490153286060651209008240243

// DiffuseTransmittance returns the share of isotropic light that passes a slab
// once without absorption, t = 2 E3(x), for the optical thickness x = αW, and
// 1 - t with its own relative accuracy. E3 is the exponential integral; for
// small x the mean path is twice the thickness.
//
// Source: M. Abramowitz, I. A. Stegun, Handbook of Mathematical Functions
// (1964), 5.1.11 and 5.1.14 (series), 5.1.22 (continued fraction). Relative
// accuracy of both results 1e-14 for every x, as long as t is a normal number
// (x < 701).
//
// Special cases: NaN for x < 0 or NaN; 0 and 1 for +Inf.
func DiffuseTransmittance(x float64) (t, loss float64) {
	switch {
	case !(x >= 0):
		return math.NaN(), math.NaN()
	case x == 0:
		return 1, 0
	case x <= 1:
		e1, ex := seriesE1(x), math.Exp(-x)
		// derived: 2 E3 = (1-x) exp(-x) + x² E1, all terms positive.
		return (1-x)*ex + x*x*e1, -math.Expm1(-x) + x*(ex-x*e1)
	}
	t = 2 * fractionEn(3, x)
	return t, 1 - t
}

// DiffuseTransmittanceSlope returns the derivative dt/dx = -2 E2(x) of
// [DiffuseTransmittance] with respect to x = αW, as accurate as that. Source: as
// there, 5.1.26.
//
// Special cases: NaN for x < 0 or NaN; -2 for 0; 0 for +Inf.
func DiffuseTransmittanceSlope(x float64) float64 {
	switch {
	case !(x >= 0):
		return math.NaN()
	case x == 0:
		return -2
	case x <= 1:
		return -2 * (math.Exp(-x) - x*seriesE1(x))
	}
	return -2 * fractionEn(2, x)
}

// seriesE1 returns E1(x) for 0 < x <= 1.
func seriesE1(x float64) float64 {
	sum, term := 0.0, 1.0
	for k := 1.0; k < 40; k++ {
		term *= -x / k
		sum += term / k
	}
	return -euler - math.Log(x) - sum
}

// fractionEn returns En(x) for x >= 1 by the continued fraction, evaluated from
// the front (W. J. Lentz, Appl. Opt. 15, 668 (1976)).
func fractionEn(n int, x float64) float64 {
	if x > 740 {
		return 0
	}
	b := x + float64(n)
	c, d := math.Inf(1), 1/b
	h := d
	for i := 1.0; i < 400; i++ {
		a := -i * (float64(n) - 1 + i)
		b += 2
		d = 1 / (a*d + b)
		c = b + a/c
		step := c * d
		h *= step
		if math.Abs(step-1) < 1e-16 {
			break
		}
	}
	return h * math.Exp(-x)
}
