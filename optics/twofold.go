package optics

import "math"

// twofold is an unevaluated sum of two doubles, about 32 digits, for the few
// places where one rounding of an input would be seen in the answer: the phase
// of thick films and a back medium near its critical angle. Error-free
// transformations after T. J. Dekker, Numer. Math. 18, 224 (1971).
type twofold struct{ hi, lo float64 }

func twoSum(a, b float64) twofold {
	s := a + b
	t := s - a
	return twofold{s, (a - (s - t)) + (b - t)}
}

func twoProduct(a, b float64) twofold {
	p := a * b
	return twofold{p, math.FMA(a, b, -p)}
}

func (a twofold) add(b twofold) twofold {
	s := twoSum(a.hi, b.hi)
	return twoSum(s.hi, s.lo+a.lo+b.lo)
}

func (a twofold) sub(b twofold) twofold { return a.add(twofold{-b.hi, -b.lo}) }

func (a twofold) mul(b twofold) twofold {
	p := twoProduct(a.hi, b.hi)
	return twoSum(p.hi, p.lo+(a.hi*b.lo+a.lo*b.hi))
}

func (a twofold) scale(b float64) twofold { return twofold{a.hi * b, a.lo * b} } // b a power of two

func (a twofold) div(b float64) twofold {
	q := a.hi / b
	r := math.FMA(-q, b, a.hi) + a.lo
	return twoSum(q, r/b)
}

// twoPi is 2π to 32 digits.
var twoPi = twofold{2 * math.Pi, 2.4492935982947064e-16}

// sinSquared returns sin²θ for 0 <= θ <= π/2: the series of (1 - cos ψ)/2 at
// ψ = θ/8, then sin²2φ = 4 sin²φ (1 - sin²φ) four times.
func sinSquared(theta float64) twofold {
	psi := theta / 8
	z := twoProduct(psi, psi)
	one := twofold{1, 0}
	s := one
	for k := 23.0; k >= 3; k -= 2 {
		s = one.sub(z.mul(s).div(k * (k + 1)))
	}
	h := z.mul(s).scale(0.25)
	for range 4 {
		h = h.mul(one.sub(h)).scale(4)
	}
	return h
}

// angle is an angle of incidence. Its sin² to 32 digits is found when it is
// first asked for.
type angle struct {
	theta, cos float64 // rad; cos = 0 marks an angle that was never set
	known      bool    // sinSq is
	sinSq      twofold
}

func (a *angle) set(theta float64) {
	if theta != a.theta || a.cos == 0 {
		*a = angle{theta: theta, cos: math.Cos(theta)}
	}
}

func (a *angle) sinSquared() twofold {
	if !a.known {
		a.sinSq, a.known = sinSquared(a.theta), true
	}
	return a.sinSq
}

// squareNormal returns the real part of q² = N² - n0² sin²θ.
func squareNormal(n, k, n0 float64, sinSq twofold) twofold {
	f := twoProduct(n0, n0).mul(sinSq)
	return twoProduct(n, n).sub(twoProduct(k, k)).sub(f)
}

// phaseError returns how much the double x misses k0 d Re q, with q the
// rounded root qr + i qi of q².
func phaseError(x, wavelength, d, n, k, n0, qr, qi float64, sinSq twofold) float64 {
	// One Newton step from the rounded root: δq = (q² - qr² + qi² - 2i qr qi)/(2q).
	kr := squareNormal(n, k, n0, sinSq)
	re := kr.sub(twoProduct(qr, qr)).add(twoProduct(qi, qi)).hi
	im := 2 * twoProduct(n, k).sub(twoProduct(qr, qi)).hi
	dq := 0.5 * (re*qr + im*qi) / (qr*qr + qi*qi)
	exact := twoPi.mul(twofold{d, 0}).div(wavelength).mul(twoSum(qr, dq))
	return exact.sub(twofold{x, 0}).hi
}
