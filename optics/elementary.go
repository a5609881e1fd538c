package optics

import "math"

// Elementary functions over rows of numbers, branch-free so that the loops
// stay in the arithmetic units and can be turned into vector instructions.
// Products that are added to something are rounded by a conversion, as in
// kernel.go. Accuracy is measured in elementary_test.go: about one unit in the
// last place in the range used by the film kernel.

// Cody-Waite reduction by π/2: the product of the first part, of 33 bits, with
// an integer below 2^20 is exact, and that with the second part errs by less
// than 2^-67 (the splitting of W. J. Cody and W. Waite, Software Manual for the
// Elementary Functions, 1980, ch. 8).
const (
	twoOverPi = 2 / math.Pi
	pio2a     = 1.57079632673412561417e+00 // first 33 bits of π/2
	pio2b     = 6.07710050650619224932e-11 // the rest

	// Adding and subtracting 1.5 · 2^52 rounds to the nearest integer.
	roundMagic = 3 << 51

	maxFastPhase = 1 << 20 // rad; larger phases take math.Sincos, see correctLane
)

// Minimax coefficients of sin and cos on [-π/4, π/4], relative error below
// 2^-58 (the figures of the freely distributable fdlibm, k_sin.c and k_cos.c).
const (
	sin3  = -1.66666666666666324348e-01
	sin5  = 8.33333333332248946124e-03
	sin7  = -1.98412698298579493134e-04
	sin9  = 2.75573137070700676789e-06
	sin11 = -2.50507602534068634195e-08
	sin13 = 1.58969099521155010221e-10

	cos4  = 4.16666666666666019037e-02
	cos6  = -1.38888888888741095749e-03
	cos8  = 2.48015872894767294178e-05
	cos10 = -2.75573143513906633035e-07
	cos12 = 2.08757232129817482790e-09
	cos14 = -1.13596475577881948265e-11
)

// sincosRow stores the sine and cosine of each x with 0 <= x <= maxFastPhase;
// those of larger x are meaningless. Two lanes at a time share the loading of
// the constants.
func sincosRow(sin, cos, x []float64) {
	sin = sin[:len(x)]
	cos = cos[:len(x)]
	for i := 1; i < len(x); i += 2 {
		q0, r0 := reduceAngle(x[i-1])
		q1, r1 := reduceAngle(x[i])
		z0, z1 := float64(r0*r0), float64(r1*r1)
		s0, s1 := sinOctant(r0, z0), sinOctant(r1, z1)
		c0, c1 := cosOctant(z0), cosOctant(z1)
		sin[i-1], cos[i-1] = quadrant(q0, s0, c0)
		sin[i], cos[i] = quadrant(q1, s1, c1)
	}
	for i := len(x) &^ 1; i < len(x); i++ {
		q, r := reduceAngle(x[i])
		z := float64(r * r)
		sin[i], cos[i] = quadrant(q, sinOctant(r, z), cosOctant(z))
	}
}

// reduceAngle takes the nearest multiple of π/2 off v. The two low bits of q are
// the quadrant.
func reduceAngle(v float64) (q uint64, r float64) {
	t := float64(v*twoOverPi) + roundMagic
	f := t - roundMagic
	return math.Float64bits(t), (v - float64(f*pio2a)) - float64(f*pio2b)
}

// sinOctant and cosOctant return the sine and cosine of |r| <= π/4, z = r².
func sinOctant(r, z float64) float64 {
	z2 := float64(z * z)
	return r + float64(r*z*((sin3+float64(z*sin5))+float64(z2*((sin7+float64(z*sin9))+float64(z2*(sin11+float64(z*sin13)))))))
}

func cosOctant(z float64) float64 {
	z2 := float64(z * z)
	return (1 - 0.5*z) + float64(z2*((cos4+float64(z*cos6))+float64(z2*((cos8+float64(z*cos10))+float64(z2*(cos12+float64(z*cos14)))))))
}

// quadrant exchanges sine and cosine in the odd quadrants and sets their signs.
func quadrant(q uint64, s, c float64) (sin, cos float64) {
	sb, cb := math.Float64bits(s), math.Float64bits(c)
	swap := (sb ^ cb) & -(q & 1)
	sb ^= swap ^ (q&2)<<62
	cb ^= swap ^ ((q+1)&2)<<62
	return math.Float64frombits(sb), math.Float64frombits(cb)
}

const (
	log2e = 1 / math.Ln2
	ln2a  = 6.93147180369123816490e-01 // first 32 bits of ln 2
	ln2b  = 1.90821492927058770002e-10 // the rest

	// Below this exponent the transmittance counts as exp(minExponent).
	minExponent = -700
)

// Coefficients of c = r - r² (exp1 + r² exp2 + ...) in exp(r) = 1 + r + r c/(2-c)
// on |r| <= ln 2 / 2, relative error below 2^-59 (the figures of the freely
// distributable fdlibm, e_exp.c).
const (
	exp1 = 1.66666666666666019037e-01
	exp2 = -2.77777777770155933842e-03
	exp3 = 6.61375632143793436117e-05
	exp4 = -1.65339022054652515390e-06
	exp5 = 4.13813679705723846039e-08
)

// expRow stores exp(z) and 1 - exp(z) of each z <= 0, both with their full
// relative accuracy, two lanes at a time.
func expRow(e, m, z []float64) {
	e = e[:len(z)]
	m = m[:len(z)]
	for i := 1; i < len(z); i += 2 {
		q0, r0 := reduceExponent(z[i-1])
		q1, r1 := reduceExponent(z[i])
		p0, p1 := smallExpm1(r0), smallExpm1(r1)
		e[i-1], m[i-1] = scaleExp(q0, p0)
		e[i], m[i] = scaleExp(q1, p1)
	}
	for i := len(z) &^ 1; i < len(z); i++ {
		q, r := reduceExponent(z[i])
		e[i], m[i] = scaleExp(q, smallExpm1(r))
	}
}

// reduceExponent takes the nearest multiple of ln 2 off v; q holds it in its low
// bits.
func reduceExponent(v float64) (q uint64, r float64) {
	if v < minExponent {
		v = minExponent
	}
	t := float64(v*log2e) + roundMagic
	f := t - roundMagic
	return math.Float64bits(t), (v - float64(f*ln2a)) - float64(f*ln2b)
}

// smallExpm1 returns exp(r) - 1 for |r| <= ln 2 / 2.
func smallExpm1(r float64) float64 {
	r2 := float64(r * r)
	r4 := r2 * r2
	c := r - float64(r2*((exp1+float64(r2*exp2))+float64(r4*((exp3+float64(r2*exp4))+float64(r4*exp5)))))
	return r + r*c/(2-c)
}

// scaleExp returns exp and 1 - exp of q ln 2 + r, p = exp(r) - 1.
func scaleExp(q uint64, p float64) (e, m float64) {
	scale := math.Float64frombits((q + 1023) << 52)
	return scale + float64(scale*p), (1 - scale) - float64(scale*p)
}
