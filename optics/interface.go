package optics

import (
	"fmt"
	"math"
	"math/cmplx"
)

// Coefficients describe one plane interface for a wave that meets it from one
// side. Amplitudes are ratios of electric fields. The sign of RP is that of
// ellipsometry: RP = -RS at normal incidence.
type Coefficients struct {
	RS, RP, TS, TP complex128 // amplitude coefficients

	ReflectanceS, ReflectanceP     float64 // |r|²
	TransmittanceS, TransmittanceP float64 // flux of the refracted wave over that of the incident one
}

// Fresnel returns the coefficients of the interface between two media for light
// that comes from the front medium at the given angle (rad), and for light that
// comes from the back medium with the same tangential wave number.
//
// The front medium must be lossless. For light from an absorbing back medium
// R + T differs from 1 by the interference of the incident and the reflected
// wave, of the order k/n; a wave that only decays carries no flux, and its
// transmittance is 0. An error wraps [ErrInput].
//
// Source: M. Born, E. Wolf, Principles of Optics, sec. 1.5.2 and 14.2, written
// with q = N cosθ.
func Fresnel(front, back complex128, angle float64) (forward, reverse Coefficients, err error) {
	if err := checkFront(front); err != nil {
		return forward, reverse, err
	}
	if err := checkIndex(back); err != nil {
		return forward, reverse, fmt.Errorf("optics: back medium: %w", err)
	}
	if err := checkAngle(angle); err != nil {
		return forward, reverse, fmt.Errorf("optics: %w", err)
	}
	q1 := complex(real(front)*math.Cos(angle), 0)
	q2 := normalComponent(front, back, angle)
	return oneSide(front, back, q1, q2), oneSide(back, front, q2, q1), nil
}

// oneSide evaluates the Fresnel formulas for q = N cosθ of both media.
func oneSide(n1, n2, q1, q2 complex128) Coefficients {
	s := q1 + q2
	// Multiplied by N1 N2, so that neither cosine is needed.
	e1, e2 := n1*n1, n2*n2
	p := e2*q1 + e1*q2
	c := Coefficients{
		RS: (q1 - q2) / s,
		TS: 2 * q1 / s,
		RP: (e2*q1 - e1*q2) / p,
		TP: 2 * n1 * n2 * q1 / p,
	}
	c.ReflectanceS, c.ReflectanceP = square(c.RS), square(c.RP)
	if real(q1) > 0 {
		c.TransmittanceS = real(q2) / real(q1) * square(c.TS)
	}
	// The flux of a p wave is that of N* cosθ |E|² = (ε* q/|N|²) |E|².
	f1, f2 := real(cmplx.Conj(e1)*q1)/square(n1), real(cmplx.Conj(e2)*q2)/square(n2)
	if f1 > 0 {
		c.TransmittanceP = f2 / f1 * square(c.TP)
	}
	return c
}

func square(z complex128) float64 { return real(z)*real(z) + imag(z)*imag(z) }

// normalComponent returns q = N cosθ in a medium behind a lossless front
// medium; see [RefractedCosine].
func normalComponent(front, medium complex128, angle float64) complex128 {
	n0 := real(front)
	q0 := n0 * math.Cos(angle)
	qr, qi, _ := normalWave(real(medium), imag(medium), n0, q0*q0)
	if qr*qr+qi*qi < nearCritical*n0*n0 {
		qr, qi = rootUpper(squareNormal(real(medium), imag(medium), n0, sinSquared(angle)).hi, 2*real(medium)*imag(medium))
	}
	if qr <= tinyRoot {
		qr = 0
	}
	return complex(qr, qi)
}

// RefractedCosine returns cosθ in a medium of index n + ik for light that comes
// from a lossless front medium at the given angle (rad): Snell's law with the
// branch of the wave that decays or travels away from the interface,
// Im(N cosθ) >= 0. Beyond the critical angle it is imaginary.
//
// Special case: NaN + NaN i for arguments that [Fresnel] refuses.
func RefractedCosine(front, medium complex128, angle float64) complex128 {
	if checkFront(front) != nil || checkIndex(medium) != nil || checkAngle(angle) != nil {
		return cmplx.NaN()
	}
	return normalComponent(front, medium, angle) / medium
}

// RefractionAngle returns the angle (rad) behind an interface between lossless
// media of indices n1 and n2, Snell's law n1 sinθ1 = n2 sinθ2.
//
// Special cases: NaN beyond the critical angle, for indices that are not
// positive, and for angles outside [0, π/2].
func RefractionAngle(n1, n2, angle float64) float64 {
	if !(n1 > 0 && n2 > 0 && angle >= 0 && angle <= math.Pi/2) {
		return math.NaN()
	}
	return math.Asin(n1 / n2 * math.Sin(angle))
}

// BrewsterAngle returns the angle (rad) in the medium of index n1 at which p
// light is not reflected by the lossless medium of index n2: arctan(n2/n1).
//
// Special case: NaN for indices that are not positive.
func BrewsterAngle(n1, n2 float64) float64 {
	if !(n1 > 0 && n2 > 0) {
		return math.NaN()
	}
	return math.Atan2(n2, n1)
}

// CriticalAngle returns the smallest angle (rad) in the medium of index n1 at
// which light is totally reflected by the lossless medium of index n2:
// arcsin(n2/n1).
//
// Special case: NaN if n1 <= n2 or an index is not positive.
func CriticalAngle(n1, n2 float64) float64 {
	if !(n1 > n2 && n2 > 0) {
		return math.NaN()
	}
	return math.Asin(n2 / n1)
}

// TotalReflectionPhase returns the phases (rad) of the amplitude coefficients
// RS and RP on total reflection between lossless media, in the convention
// exp(-iωt):
//
//	tan(φs/2) = -g/(n1 cosθ),  tan(φp/2) = -n1 g/(n2² cosθ),  g = sqrt(n1² sin²θ - n2²).
//
// Source: M. Born, E. Wolf, Principles of Optics, sec. 1.5.4, in our variables.
//
// Special cases: NaN below the critical angle and for arguments out of range.
func TotalReflectionPhase(n1, n2, angle float64) (s, p float64) {
	if !(n1 > n2 && n2 > 0 && angle >= 0 && angle < math.Pi/2) {
		return math.NaN(), math.NaN()
	}
	g2 := -squareNormal(n2, 0, n1, sinSquared(angle)).hi
	if g2 < 0 {
		return math.NaN(), math.NaN()
	}
	g, q1 := math.Sqrt(g2), n1*math.Cos(angle)
	return -2 * math.Atan2(g, q1), -2 * math.Atan2(n1*n1*g, n2*n2*q1)
}
