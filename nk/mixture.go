package nk

import (
	"fmt"
	"math"
	"math/cmplx"
)

const (
	// fractionSlack is how far volume fractions may miss the sum 1: their own
	// rounding. They are divided by their sum.
	fractionSlack = 1e-9
	// phaseSlack is the share of |eps| below which an imaginary part says
	// nothing about the root: the square root of the rounding.
	phaseSlack = 1e-8
	// Indices outside these bounds are refused, so that no product overflows.
	smallestIndex, largestIndex = 1e-50, 1e50
)

// Bruggeman returns the index N = n + ik of a mixture in which no component is
// the host: spheres of every component in the mixture itself,
//
//	sum of f_i (eps_i - eps)/(eps_i + 2 eps) = 0
//
// Source: D. A. G. Bruggeman, Ann. Phys. 416, 636 (1935). n holds the indices of
// the components, f their volume fractions 0..1 with the sum 1. The components
// may be metals, also without loss. Of the roots it returns the physical one:
// the limit, with the loss of all components going to its value from above, of
// the only root with positive dissipation (derived: the root is an analytic
// function of an added loss i delta, and for a large one all components are
// alike). With a fraction of exactly 1 the result is exactly that component.
//
// ErrInput: lengths that differ or are 0, a fraction outside 0..1, a sum that is
// not 1, an index that is zero (|N| < 1e-50), not finite (> 1e50), or has n < 0
// or k < 0. ErrConvergence: three or more components without loss, exactly where
// two real roots meet.
func Bruggeman(n []complex128, f []float64) (complex128, error) {
	total, only, err := checkMixture("Bruggeman", n, f)
	if err != nil {
		return 0, err
	}
	if only >= 0 {
		return n[only], nil
	}
	var eps complex128
	if a, b, ok := twoParts(f); ok {
		eps = bruggemanTwo(n[a]*n[a], n[b]*n[b], f[a]/total)
	} else if eps, err = bruggemanMany(n, f, total); err != nil {
		return 0, err
	}
	return mixtureIndex("Bruggeman", eps)
}

// twoParts finds the components with a fraction; ok if there are two.
func twoParts(f []float64) (a, b int, ok bool) {
	a, b = -1, -1
	for i, v := range f {
		switch {
		case v == 0:
		case a < 0:
			a = i
		case b < 0:
			b = i
		default:
			return a, b, false
		}
	}
	return a, b, b >= 0
}

// bruggemanTwo is the root of 2 eps² - q eps - e1 e2 = 0 with
// q = (3 f1 - 1) e1 + (3 f2 - 1) e2.
//
// Derived: the physical root lies in the cone that e1 and e2 span in the upper
// half plane; the other, -e1 e2/(2 eps), lies in the opposite cone. Turned so
// that the cone is around the positive axis, the real parts tell them apart.
// Without loss (one e negative) both may be real: then the physical one is the
// one that gains loss when both components do, d eps/d delta > 0 with
// d eps/d delta = (eps + e1 + e2)/(4 eps - q).
func bruggemanTwo(e1, e2 complex128, f1 float64) complex128 {
	scale := max(cmplx.Abs(e1), cmplx.Abs(e2))
	e1, e2 = e1/complex(scale, 0), e2/complex(scale, 0)
	q := complex(3*f1-1, 0)*e1 + complex(2-3*f1, 0)*e2
	s := cmplx.Sqrt(q*q + 8*e1*e2)
	a := (q + s) / 4
	if cmplx.Abs(q-s) > cmplx.Abs(q+s) {
		a = (q - s) / 4
	}
	b := -e1 * e2 / (2 * a) // the smaller root without cancellation
	turn := cmplx.Rect(1, -(cmplx.Phase(e1)+cmplx.Phase(e2))/2)
	ra, rb := real(a*turn)/cmplx.Abs(a), real(b*turn)/cmplx.Abs(b)
	best := a
	if max(math.Abs(ra), math.Abs(rb)) < phaseSlack {
		if real((b+e1+e2)/(4*b-q)) > real((a+e1+e2)/(4*a-q)) {
			best = b
		}
	} else if rb > ra {
		best = b
	}
	return best * complex(scale, 0)
}

// bruggemanEquation is the equation divided by the largest |eps| (scale), with
// the imaginary part t added to every component.
type bruggemanEquation struct {
	n            []complex128
	f            []float64
	total, scale float64
}

// at returns g = sum of f (e - y)/(e + 2y) and its derivatives with respect to y
// and to a common shift of all e.
func (q *bruggemanEquation) at(y complex128, t float64) (g, gy, ge complex128) {
	for i, v := range q.n {
		if q.f[i] == 0 {
			continue
		}
		e := v*v/complex(q.scale, 0) + complex(0, t)
		w, d := complex(q.f[i]/q.total, 0), 1/(e+2*y)
		g += w * (e - y) * d
		gy -= 3 * w * e * d * d
		ge += 3 * w * y * d * d
	}
	return g, gy, ge
}

// farthest is the relative correction of a guess beyond which it was no good.
const farthest = 0.3

// solve improves a guess of the root by Newton's method; ok if it converged
// without going far.
func (q *bruggemanEquation) solve(guess complex128, t float64) (z complex128, ok bool) {
	z = guess
	step := math.Inf(1)
	for range 30 {
		g, gz, _ := q.at(z, t)
		dz := g / gz
		z -= dz
		if !finite(z) || cmplx.Abs(z-guess) > farthest*cmplx.Abs(z) {
			return z, false
		}
		if step = cmplx.Abs(dz) / cmplx.Abs(z); step <= 4e-16 {
			return z, true
		}
	}
	return z, step < 1e-13 // rounding may keep the steps above the test
}

// bruggemanMany follows the root from a large loss added to all components down
// to none. eps is analytic in the added loss as long as it is positive, and
// varies over a distance of the loss itself, so steps by a factor are short; one
// that fails is shortened further.
func bruggemanMany(n []complex128, f []float64, total float64) (complex128, error) {
	const (
		start, end = 10.0, 1e-14
		factor     = 0.1
		visible    = 1e-9 // loss down to which the sign of Im y is above its rounding
	)
	q := bruggemanEquation{n: n, f: f, total: total}
	var mean complex128
	for i, v := range n {
		if f[i] > 0 {
			q.scale = max(q.scale, cmplx.Abs(v*v))
			mean += complex(f[i]/total, 0) * v * v
		}
	}
	t, ratio := start, factor
	y := mean/complex(q.scale, 0) + complex(0, t)
	for ratio < 0.9999 {
		next := t * ratio
		if next < end {
			next = 0
		}
		_, gy, ge := q.at(y, t)
		z, ok := q.solve(y-ge/gy*complex(0, next-t), next)
		if !ok || next > visible && imag(z) <= 0 {
			ratio = math.Sqrt(ratio)
			continue
		}
		if next == 0 {
			return z * complex(q.scale, 0), nil
		}
		y, t, ratio = z, next, max(factor, ratio*ratio)
	}
	return 0, fmt.Errorf("nk: Bruggeman: no root found for %d components: %w", len(n), ErrConvergence)
}

// MaxwellGarnett returns the index N = n + ik of spheres of the index inclusion
// in a host, with the volume fraction f of the inclusions:
//
//	(eps - eps_h)/(eps + 2 eps_h) = f (eps_i - eps_h)/(eps_i + 2 eps_h)
//
// Source: J. C. Maxwell Garnett, Phil. Trans. R. Soc. A 203, 385 (1904). It is
// meant for small f; f = 0 and f = 1 give exactly host and inclusion.
// ErrInput: f outside 0..1, an index that is zero, not finite, or has n < 0 or
// k < 0. ErrRange: at the undamped resonance the result is infinite.
func MaxwellGarnett(host, inclusion complex128, f float64) (complex128, error) {
	_, only, err := checkMixture("Maxwell Garnett", []complex128{host, inclusion}, []float64{1 - f, f})
	if err != nil {
		return 0, err
	}
	switch only {
	case 0:
		return host, nil
	case 1:
		return inclusion, nil
	}
	eh, ei := host*host, inclusion*inclusion
	w := complex(f, 0)
	return mixtureIndex("Maxwell Garnett", eh*((1+2*w)*ei+(2-2*w)*eh)/((1-w)*ei+(2+w)*eh))
}

// LorentzLorenz returns the index N = n + ik of a mixture whose components keep
// their polarisability per volume in vacuum:
//
//	(eps - 1)/(eps + 2) = sum of f_i (eps_i - 1)/(eps_i + 2)
//
// Sources: H. A. Lorentz, Ann. Phys. 245, 641 (1880), L. Lorenz, Ann. Phys. 247,
// 70 (1880). n holds the indices, f the volume fractions 0..1 with the sum 1; a
// pore is a component of index 1. A fraction of exactly 1 gives exactly that
// component. ErrInput as in Bruggeman; ErrRange where the result is infinite.
func LorentzLorenz(n []complex128, f []float64) (complex128, error) {
	total, only, err := checkMixture("Lorentz-Lorenz", n, f)
	if err != nil {
		return 0, err
	}
	if only >= 0 {
		return n[only], nil
	}
	var l complex128
	for i, v := range n {
		e := v * v
		l += complex(f[i]/total, 0) * ((e - 1) / (e + 2))
	}
	return mixtureIndex("Lorentz-Lorenz", (1+2*l)/(1-l))
}

// mixtureIndex is the root of a permittivity that may miss the real axis by
// rounding.
func mixtureIndex(model string, eps complex128) (complex128, error) {
	if !finite(eps) || eps == 0 || imag(eps) < -phaseSlack*cmplx.Abs(eps) {
		return 0, fmt.Errorf("nk: %s: permittivity %g: %w", model, eps, ErrRange)
	}
	return cmplx.Sqrt(complex(real(eps), max(0, imag(eps)))), nil
}

// checkMixture tests components and fractions; it returns the sum of the
// fractions and the component that has a fraction of 1, or -1.
func checkMixture(model string, n []complex128, f []float64) (total float64, only int, err error) {
	if len(n) == 0 || len(n) != len(f) {
		return 0, 0, fmt.Errorf("nk: %s: %d indices and %d fractions: %w", model, len(n), len(f), ErrInput)
	}
	only = -1
	for i, v := range n {
		if a := cmplx.Abs(v); !(a >= smallestIndex && a <= largestIndex) || real(v) < 0 || imag(v) < 0 {
			return 0, 0, fmt.Errorf("nk: %s: component %d: index %g: %w", model, i, v, ErrInput)
		}
		if !(f[i] >= 0 && f[i] <= 1) {
			return 0, 0, fmt.Errorf("nk: %s: component %d: fraction %g: %w", model, i, f[i], ErrInput)
		}
		total += f[i]
		if f[i] == 1 {
			only = i
		}
	}
	if math.Abs(total-1) > fractionSlack {
		return 0, 0, fmt.Errorf("nk: %s: the fractions add up to %g: %w", model, total, ErrInput)
	}
	return total, only, nil
}
