package absorb

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/integrate/quad"
)

// Base is a quasi-neutral layer of constant diffusion length between a junction
// at the lit side, which takes every carrier that reaches it, and a rear face with
// a recombination velocity. The collection probability at the distance x from
// the junction is
//
//	φ(x) = [cosh u + s sinh u]/[cosh w + s sinh w], u = (W-x)/L, w = W/L, s = S L/D,
//
// the normalised solution of the diffusion equation (reciprocity of C. Donolato,
// Appl. Phys. Lett. 46, 270 (1985), from memory). As a [Collection] it stands for
// a film that is all base. For light from the rear, use [Profile.Reversed].
type Base struct {
	Thickness       float64 // W, nm, > 0
	DiffusionLength float64 // L, nm, > 0; may be far longer than the base
	Diffusivity     float64 // D, cm²/s, > 0, of the minority carriers
	RearVelocity    float64 // S, cm/s, >= 0, recombination velocity of the rear
}

// Validate returns nil for a base that can be; the error names the field and
// wraps [ErrInput].
func (b Base) Validate() error {
	if err := b.check(); err != nil {
		return fmt.Errorf("absorb: base: %w", err)
	}
	return nil
}

func (b Base) check() error {
	for _, err := range [...]error{
		checkPositive("thickness", " nm", b.Thickness),
		checkPositive("diffusion length", " nm", b.DiffusionLength),
		checkPositive("diffusivity", " cm²/s", b.Diffusivity),
		checkAmount("rear recombination velocity", " cm/s", b.RearVelocity),
	} {
		if err != nil {
			return err
		}
	}
	w, s := b.shape()
	for _, v := range [...]float64{b.Thickness, b.DiffusionLength, w} {
		if !(v > 1/reach && v < reach) || !(s < reach) {
			return fmt.Errorf("thickness %g nm, diffusion length %g nm or SL/D = %g is out of proportion: %w", b.Thickness, b.DiffusionLength, s, ErrInput)
		}
	}
	return nil
}

// shape returns w = W/L and s = S L/D.
func (b Base) shape() (w, s float64) {
	return b.Thickness / b.DiffusionLength, b.RearVelocity * b.DiffusionLength * cmPerNM / b.Diffusivity
}

// scaled returns exp(-u) (cosh u + s sinh u) and exp(-u) (sinh u + s cosh u) for
// u >= 0: sums of positive terms that do not overflow.
func scaled(u, s float64) (value, slope float64) {
	cosh, sinh := 0.5*(1+math.Exp(-2*u)), -0.5*math.Expm1(-2*u)
	return cosh + s*sinh, sinh + s*cosh
}

// At returns the collection probability at the depth z (nm).
//
// Special case: NaN outside the base and for a base that does not validate.
func (b Base) At(z float64) float64 {
	if b.check() != nil || !inside(z, b.Thickness) {
		return math.NaN()
	}
	value, _ := b.at(min(z, b.Thickness))
	return value
}

// at returns φ and -L φ' at x.
func (b Base) at(x float64) (value, slope float64) {
	w, s := b.shape()
	norm, _ := scaled(w, s)
	value, slope = scaled((b.Thickness-x)/b.DiffusionLength, s)
	f := math.Exp(-x/b.DiffusionLength) / norm
	return value * f, slope * f
}

// Mean returns the mean collection probability between two depths (nm).
//
// Special case: NaN unless 0 <= z1 < z2 <= Thickness, and for a base that does
// not validate.
func (b Base) Mean(z1, z2 float64) float64 {
	if b.check() != nil || !(z1 >= 0 && z1 < z2 && inside(z2, b.Thickness)) {
		return math.NaN()
	}
	return b.mean(z1, z2)
}

// mean returns the mean of φ from x1 to x2.
//
// derived: about x2, φ is A cosh + B sinh of the distance over L, with A and B
// not negative; exponentials taken out.
func (b Base) mean(x1, x2 float64) float64 {
	w, s := b.shape()
	l := b.DiffusionLength
	y := (x2 - x1) / l
	norm, _ := scaled(w, s)
	even, odd := scaled(max(b.Thickness-x2, 0)/l, s)
	return math.Exp(-x1/l) * (even*meanExp(2*y) - odd*0.5*math.Expm1(-y)*meanExp(y)) / norm
}

// Collected returns the share of the incident photons that is collected from a
// film that is all base, whose thickness is that of the profile.
func (b Base) Collected(p Profile) (float64, error) {
	return Junction{Base: b}.Collected(p)
}

// IQE returns the internal quantum efficiency of the base for light that enters at
// the junction and passes once, with an absorption coefficient alpha in 1/cm:
// the closed form of the textbooks,
//
//	IQE = aL/(a²L²-1) {aL - [s cosh w + sinh w + (aL-s) exp(-aW)]/[cosh w + s sinh w]},
//
// which is 0/0 for aL = 1 and loses its digits about there and for weak
// absorption; it is computed in a form that does neither.
//
// Special cases: NaN if alpha is negative or NaN or aW is above 1e100, and for a
// base that does not validate.
func (b Base) IQE(alpha float64) float64 {
	x := OpticalDepth(alpha, b.Thickness)
	if b.check() != nil || !(x < reach) {
		return math.NaN()
	}
	return alpha * cmPerNM * b.beamDown(x)
}

// beamDown returns the integral of exp(-a x) φ(x) over the base, x = aW.
//
// derived: φ is a convolution kernel, so that the integral is
// W {exp[-x, -w] + (1+s) w exp[-x, w, -w]}/(cosh w + s sinh w) with divided
// differences of the exponential function, all positive; times exp(-w) above and
// below.
func (b Base) beamDown(x float64) float64 {
	w, s := b.shape()
	norm, _ := scaled(w, s)
	return b.Thickness * (dividedExp2(-x-w, -2*w) + (1+s)*w*dividedExp3(-x-w, 0, -2*w)) / norm
}

// beamUp returns the integral of exp(-a (W-x)) φ(x): as beamDown with a replaced
// by -a, times exp(-aW).
func (b Base) beamUp(x float64) float64 {
	w, s := b.shape()
	norm, _ := scaled(w, s)
	return b.Thickness * (dividedExp2(-w, -2*w-x) + (1+s)*w*dividedExp3(-w, -x, -2*w-x)) / norm
}

// gaussPoints is the number of nodes of Gauss-Legendre quadrature that integrates
// exp(cx) over a unit interval to 2e-16 for |c| <= 1.
const gaussPoints = 6

// interference returns the integral of the oscillating density of p times φ over
// the base, which begins at the depth z0 of the film.
//
// derived: as d²g = -K² g and d²φ = φ/L², partial integration gives
// (1/L²+K²) ∫gφ = [g dφ - dg φ]. Where the base is short against both lengths the
// bracket cancels, and quadrature with a few nodes is exact.
func (b Base) interference(p *Profile, z0 float64) float64 {
	k, middle, width := p.Wavenumber, 0.5*p.Thickness, b.Thickness
	beta := 1 / b.DiffusionLength
	both := math.Hypot(k, beta)
	density := func(x float64) (g, slope float64) {
		sin, cos := sinCosAt(k, z0+x, middle)
		return p.Cos*cos + p.Sin*sin, k * (p.Sin*cos - p.Cos*sin)
	}
	if both*width < 1 {
		var nodes, weights [gaussPoints]float64
		quad.Legendre{}.FixedLocations(nodes[:], weights[:], 0, width)
		sum := 0.0
		for i, x := range nodes {
			g, _ := density(x)
			value, _ := b.at(x)
			sum += weights[i] * g * value
		}
		return sum
	}
	bracket := func(x float64) float64 {
		g, slope := density(x)
		value, fall := b.at(x)
		return (-g*fall*beta - slope*value) / both
	}
	return (bracket(width) - bracket(0)) / both
}

// EffectiveLength returns the length in nm that the internal quantum efficiency of
// strongly absorbed light tells,
//
//	L_Q = L (s sinh w + cosh w)/(s cosh w + sinh w),
//
// -1/φ'(0): IQE = 1 - 1/(aL_Q) + ... (R. Brendel, Thin-Film Crystalline Silicon
// Solar Cells (2003), eq. C.10; P. A. Basore, Proc. 23rd IEEE PVSC (1993) 147,
// from memory).
//
// Special case: NaN for a base that does not validate.
func (b Base) EffectiveLength() float64 {
	if b.check() != nil {
		return math.NaN()
	}
	value, slope := scaled(b.shape())
	return b.DiffusionLength * value / slope
}

// CollectionLength returns the integral of the collection probability over the
// base in nm, the length that weakly absorbed light tells,
//
//	L_C = L [s (cosh w - 1) + sinh w]/(s sinh w + cosh w)
//
// (R. Brendel, Thin-Film Crystalline Silicon Solar Cells (2003), eq. C.12).
//
// Special case: NaN for a base that does not validate.
func (b Base) CollectionLength() float64 {
	if b.check() != nil {
		return math.NaN()
	}
	return b.Thickness * b.mean(0, b.Thickness)
}

// RearCollection returns φ(W) = 1/(cosh w + s sinh w), the collection probability
// at the rear and the limit of the quantum efficiency for strongly absorbed light
// from there (R. Brendel, Thin-Film Crystalline Silicon Solar Cells (2003), eq.
// C.9).
//
// Special case: NaN for a base that does not validate.
func (b Base) RearCollection() float64 { return b.At(b.Thickness) }
