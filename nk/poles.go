package nk

import (
	"math"
	"math/cmplx"
)

// rational is the Kramers-Kronig integral that Tauc-Lorentz and Cody-Lorentz
// share, with the photon energy e and the lower end low, all in eV:
//
//	J = P ∫ (x - Eg)² w(x)/{[(x² - E0²)² + G² x²] (x² - E²)} dx from low to infinity
//
// with w = 1 (Tauc-Lorentz) or w = x²/[(x - Eg)² + Ep²] (Cody-Lorentz).
//
// Derived: the integrand is a rational function that falls off faster than 1/x
// and has simple poles p only, so J = -sum of res(p) log(low - p). Poles off
// the real axis come in conjugate pairs, hence twice the real part of the upper
// ones; the logarithm's main branch is continuous along low - p since the
// imaginary part keeps its sign. The poles at ±E take the logarithm of the
// absolute value (principal value).
type rational struct {
	e, low       float64
	e0, g        float64
	eg, ep       float64
	cody         bool
	twoA, q1, q2 complex128 // poles of the oscillator in the upper half plane, their difference q1 - q2
}

// partial is J with its derivatives at fixed low, and the sum of the absolute
// values of its terms, which tells how much they cancel.
type partial struct{ value, eg, ep, e0, g, size float64 }

const (
	// Where two poles of the upper half plane come close, their residues grow
	// and cancel. J is smooth there in G, so it is interpolated at G from eight
	// values around: error 0.014 (spread G)⁸ times the eighth derivative.
	crowdedOscillator = 0.02   // |q1 - q2|/E0 below which the oscillator's poles are too close
	crowdedCody       = 0.0015 // distance of the Cody pole over G, same
	spread            = 0.004  // step in G, relative

	// Beyond this loss by cancellation, relative to |eps|, there is an error:
	// parameters many decades apart, as a gap of a million times E0.
	largestLoss = 1e-8
)

// nearWeight returns one of the points ±1, ±2, ±3, ±4 and the weight of a
// function's value there when its value at 0 is interpolated (Lagrange).
func nearWeight(i int) (at, weight float64) {
	switch i / 2 {
	case 0:
		at, weight = 1, 4.0/5
	case 1:
		at, weight = 2, -2.0/5
	case 2:
		at, weight = 3, 4.0/35
	default:
		at, weight = 4, -1.0/70
	}
	if i%2 == 1 {
		at = -at
	}
	return at, weight
}

// transform returns J and its derivatives.
func (r *rational) transform() partial {
	r.placePoles()
	if !r.crowded() {
		return r.sum()
	}
	var out partial
	g := r.g
	for i := range 8 {
		at, w := nearWeight(i)
		f := 1 + at*spread
		r.g = g * f
		r.placePoles()
		p := r.sum()
		out.value += w * p.value
		out.size = max(out.size, p.size)
		out.eg += w * p.eg
		out.ep += w * p.ep
		out.e0 += w * p.e0
		out.g += w * f * p.g
	}
	r.g = g
	return out
}

// lost tests whether the terms of J, times factor, cancel so far that eps has
// no digits left to trust.
func (p partial) lost(factor float64, eps complex128) bool {
	const rounding = 2.3e-16
	return !(factor*p.size*rounding <= largestLoss*cmplx.Abs(eps))
}

// placePoles finds the roots of (x² - E0²)² + G² x² in the upper half plane:
// ±a + iG/2 with a² = E0² - G²/4; their product is -E0².
func (r *rational) placePoles() {
	a := cmplx.Sqrt(complex((r.e0-r.g/2)*(r.e0+r.g/2), 0))
	r.twoA = 2 * a
	r.q1 = a + complex(0, r.g/2)
	r.q2 = -complex(r.e0, 0) / r.q1 * complex(r.e0, 0)
}

func (r *rational) crowded() bool {
	if cmplx.Abs(r.twoA) < crowdedOscillator*r.e0 {
		return true
	}
	c := complex(r.eg, r.ep)
	return r.cody && min(cmplx.Abs(r.q1-c), cmplx.Abs(r.q2-c)) < crowdedCody*r.g
}

func (r *rational) sum() partial {
	p := r.realPoles()
	r.oscillatorPole(&p, r.q1, r.twoA)
	r.oscillatorPole(&p, r.q2, -r.twoA)
	if r.cody {
		r.codyPole(&p)
	}
	return p
}

// logs returns log|low - E| and log|low + E|, and their difference without
// cancellation at small E. At E = low the first counts as 0: its factor
// vanishes (Tauc-Lorentz) or it joins that of the tail (Cody-Lorentz).
func (r *rational) logs() (minus, plus, diff float64) {
	plus = math.Log(r.low + r.e)
	if r.e == r.low {
		return 0, plus, -plus
	}
	minus = math.Log(math.Abs(r.low - r.e))
	return minus, plus, -2 * math.Atanh(min(r.e, r.low)/max(r.e, r.low))
}

// realPoles is the part of the poles at ±E.
func (r *rational) realPoles() partial {
	d := lorentzDenominator(r.e, r.e0, r.g)
	minus, plus, diff := r.logs()
	var p partial
	if r.cody {
		// residues ±E/(2D) h(±E) with h(x) = (x - Eg)²/[(x - Eg)² + Ep²]
		hm, hmEg, hmEp := codyFactor(r.e-r.eg, r.ep)
		hp, hpEg, hpEp := codyFactor(-r.e-r.eg, r.ep)
		f := -r.e / (2 * d)
		p.value = f * (hm*minus - hp*plus)
		p.size = math.Abs(f) * (math.Abs(hm*minus) + math.Abs(hp*plus))
		p.eg = f * (hmEg*minus - hpEg*plus)
		p.ep = f * (hmEp*minus - hpEp*plus)
	} else {
		f := -1 / (2 * d)
		p.value = f * ((r.e+r.eg*(r.eg/r.e))*diff - 2*r.eg*(minus+plus))
		p.size = math.Abs(f) * ((r.e+r.eg*(r.eg/r.e))*math.Abs(diff) + 2*r.eg*(math.Abs(minus)+math.Abs(plus)))
		p.eg = f * (2*r.eg/r.e*diff - 2*(minus+plus))
	}
	p.e0 = p.value * 4 * r.e0 * (r.e - r.e0) * (r.e + r.e0) / d
	p.g = -p.value * 2 * r.g * r.e * r.e / d
	return p
}

// codyFactor returns h = x²/(x² + Ep²) and its derivatives with respect to Eg
// (x falls by 1) and Ep.
func codyFactor(x, ep float64) (h, hEg, hEp float64) {
	s := x*x + ep*ep
	h = x * x / s
	return h, -2 * x * ep * ep / s / s, -2 * ep * h / s
}

// oscillatorPole adds the part of one pole q of the oscillator and of its
// conjugate. From q² - E0² - iGq = 0 follow the derivative of the denominator,
// (2q - iG) 2iGq with 2q - iG = twoA, and dq = (2 E0 dE0 + iq dG)/twoA.
func (r *rational) oscillatorPole(p *partial, q, twoA complex128) {
	x := q - complex(r.eg, 0)
	e2 := q*q - complex(r.e*r.e, 0)
	num, dnum := x*x, 2/x // dnum: logarithmic derivative along q
	c, cEg, cEp := complex128(1), complex128(0), complex128(0)
	if r.cody {
		num *= q * q
		dnum += 2 / q
		c = (q - complex(r.eg, r.ep)) * (q - complex(r.eg, -r.ep))
		cEg, cEp = -2*x/c, complex(2*r.ep, 0)/c
	}
	res := num / (twoA * complex(0, 2*r.g) * q * e2 * c)
	low := complex(r.low, 0) - q
	l := cmplx.Log(low)
	p.size += 2 * cmplx.Abs(res*l)
	along := dnum - 1/q - 2*q/e2 + cEg // logarithmic derivative of res along q; that of c along q is -cEg

	p.value -= 2 * real(res*l)
	p.eg -= 2 * real(res*(-2/x-cEg)*l)
	p.ep -= 2 * real(res*-cEp*l)
	dq := complex(2*r.e0, 0) / twoA
	p.e0 -= 2 * real(res*((along*dq-2*dq/twoA)*l-dq/low))
	dq = complex(0, 1) * q / twoA
	p.g -= 2 * real(res*((along*dq-(2*dq-complex(0, 1))/twoA-complex(1/r.g, 0))*l-dq/low))
}

// codyPole adds the part of the poles Eg ± iEp.
func (r *rational) codyPole(p *partial) {
	q := complex(r.eg, r.ep)
	a := q*q - complex(r.e0*r.e0, 0)
	// The same differences of poles as in the other residues: their rounding
	// then cancels with them.
	d := (q - r.q1) * (q - r.q2) * (q - cmplx.Conj(r.q1)) * (q - cmplx.Conj(r.q2))
	e2 := q*q - complex(r.e*r.e, 0)
	res := complex(0, r.ep/2) * q * q / (d * e2)
	low := complex(r.low, 0) - q
	l := cmplx.Log(low)
	p.size += 2 * cmplx.Abs(res*l)
	along := 2/q - (4*q*a+complex(2*r.g*r.g, 0)*q)/d - 2*q/e2

	p.value -= 2 * real(res*l)
	p.eg -= 2 * real(res*(along*l-1/low))
	p.ep -= 2 * real(res*((complex(0, 1)*along+complex(1/r.ep, 0))*l-complex(0, 1)/low))
	p.e0 -= 2 * real(res*complex(4*r.e0, 0)*a/d*l)
	p.g -= 2 * real(res*complex(-2*r.g, 0)*q*q/d*l)
}
