package absorb

import "math"

// meanExp returns (1-exp(-q))/q, the mean of exp(-q t) over t = 0..1, for q >= 0.
func meanExp(q float64) float64 {
	if q == 0 {
		return 1
	}
	return -math.Expm1(-q) / q
}

// smallExp and tinyExp are the largest arguments of meanExpSmall and meanExpTiny.
const (
	smallExp = 1. / 4
	tinyExp  = 1. / 32
)

// meanExpSmall returns meanExp(q) for 0 <= q <= smallExp: the Taylor series, whose
// first term left out is below 2e-17 there.
func meanExpSmall(q float64) float64 {
	q2 := q * q
	q4 := q2 * q2
	// Pairs of terms, so that the multiplications do not wait for each other.
	a := (1 - q*(1./2)) + q2*(1./6-q*(1./24))
	b := (1./120 - q*(1./720)) + q2*(1./5040-q*(1./40320))
	c := (1./362880 - q*(1./3628800)) + q2*(1./39916800-q*(1./479001600))
	return a + q4*(b+q4*c)
}

// meanExpTiny is meanExpSmall for 0 <= q <= tinyExp, where fewer terms do.
func meanExpTiny(q float64) float64 {
	q2 := q * q
	a := (1 - q*(1./2)) + q2*(1./6-q*(1./24))
	b := (1./120 - q*(1./720)) + q2*(1./5040-q*(1./40320))
	return a + q2*q2*b
}

// sinc returns sin(u)/u.
func sinc(u float64) float64 {
	if u == 0 {
		return 1
	}
	return math.Sin(u) / u
}

// smallAngle is the largest argument of sinCosSmall.
const smallAngle = 0.4

// sinCosSmall returns sin(u)/u and cos(u) for 0 <= u <= smallAngle, the Taylor
// series with the first term left out below 4e-17.
func sinCosSmall(u float64) (sinc, cos float64) {
	v := u * u
	sinc = 1 - v*(1./6-v*(1./120-v*(1./5040-v*(1./362880-v*(1./39916800-v*(1./6227020800))))))
	cos = 1 - v*(1./2-v*(1./24-v*(1./720-v*(1./40320-v*(1./3628800-v*(1./479001600))))))
	return sinc, cos
}

// sinCosAt returns sine and cosine of k (z-m). The roundings of the difference and
// of the product are carried along: behind many periods they would be seen.
func sinCosAt(k, z, m float64) (sin, cos float64) {
	y := z - m
	b := z - y
	lost := (z - (y + b)) + (b - m)
	phase := k * y
	rest := math.FMA(k, y, -phase) + k*lost
	sin, cos = math.Sincos(phase)
	return sin + cos*rest, cos - sin*rest
}

// linearSine returns (sin u - u cos u)/u², the spherical Bessel function j1.
func linearSine(u float64) float64 {
	if math.Abs(u) >= 1 {
		sin, cos := math.Sincos(u)
		return (sin/u - cos) / u
	}
	// u/3 (1 - u²/10 (1 - u²/28 (...))), ratio of terms u²/(2k (2k+3))
	v := u * u
	sum := 1.0
	for k := 9.; k >= 1; k-- {
		sum = 1 - v*sum/(2*k*(2*k+3))
	}
	return u / 3 * sum
}

// dividedExp2 returns the divided difference exp[a, b] = (e^b-e^a)/(b-a).
func dividedExp2(a, b float64) float64 {
	return math.Exp(max(a, b)) * meanExp(math.Abs(b-a))
}

// dividedExp3 returns the divided difference exp[a, b, c] of second order, which is
// positive; equal arguments are no exception. The integrals of two exponentials
// and of an exponential times a straight line are such differences, so that
// resonances and vanishing exponents need no case of their own.
func dividedExp3(a, b, c float64) float64 {
	if a > b {
		a, b = b, a
	}
	if b > c {
		b, c = c, b
	}
	if a > b {
		a, b = b, a
	}
	if c-a > 1 {
		// The two means differ by a third of the larger one or more.
		return (dividedExp2(b, c) - dividedExp2(a, b)) / (c - a)
	}
	// derived: exp[a,b,c] = e^a sum over k of h_k(y, x)/(k+2)!, h_k the sum of
	// all products of k factors y = b-a and x = c-a; all terms are positive.
	y, x := b-a, c-a
	h, power, factorial, sum := 1.0, 1.0, 2.0, 0.5
	for k := 1.; k <= 18; k++ {
		power *= y
		h = x*h + power
		factorial *= k + 2
		term := h / factorial
		sum += term
		if term < 0x1p-60 {
			break
		}
	}
	return math.Exp(a) * sum
}
