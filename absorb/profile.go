package absorb

import (
	"fmt"
	"math"
)

// Profile is the absorption density of one film at one wavelength, per photon
// that falls on the cell. At the depth z (nm) from the lit face of the film
//
//	a(z) = Forward exp(-Decay z) + Backward exp(-Decay (d-z))
//	     + Cos cos(Wavenumber (z-d/2)) + Sin sin(Wavenumber (z-d/2)),
//
// in 1/nm, with d = Thickness: a beam down, a beam up and their interference. The
// integral over the film is its absorptance. Where intensities add, as in wafers
// and in Beer-Lambert's law, Cos and Sin are 0.
//
// The form holds for any plane wave in a homogeneous film; a struct of another
// package with the same fields converts directly. The zero value absorbs nothing
// and has no depth.
type Profile struct {
	Thickness  float64 // nm, >= 0
	Decay      float64 // 1/nm, >= 0: absorption coefficient along the normal, 2 Im kz
	Wavenumber float64 // 1/nm, >= 0: of the interference pattern, 2 Re kz
	Forward    float64 // 1/nm, >= 0, at the lit face
	Backward   float64 // 1/nm, >= 0, at the back face
	Cos, Sin   float64 // 1/nm, about the middle of the film
}

// excess is how far rounding may take the absorptance of a film above 1.
const excess = 1e-9

// longestPhase bounds Wavenumber times Thickness where there is interference: up to
// it sines keep their last digits. It is about a metre of glass.
const longestPhase = 1e8

// Validate returns nil for a profile that a film can have. Otherwise the error
// names the field and wraps [ErrInput]. An absorptance above 1 is such an error:
// it is what coefficients in 1/cm instead of 1/nm lead to. So is interference over
// a phase Wavenumber times Thickness above 1e8, and an optical thickness above
// 1e100.
func (p Profile) Validate() error {
	if err := p.check(); err != nil {
		return fmt.Errorf("absorb: profile: %w", err)
	}
	return nil
}

func (p *Profile) check() error {
	switch {
	case !amount(p.Thickness):
		return checkAmount("thickness", " nm", p.Thickness)
	case !amount(p.Decay):
		return checkAmount("decay", " /nm", p.Decay)
	case !amount(p.Wavenumber):
		return checkAmount("wavenumber", " /nm", p.Wavenumber)
	case !amount(p.Forward):
		return checkAmount("forward density", " /nm", p.Forward)
	case !amount(p.Backward):
		return checkAmount("backward density", " /nm", p.Backward)
	case !finite(p.Cos), !finite(p.Sin):
		return fmt.Errorf("interference %g, %g /nm is not finite: %w", p.Cos, p.Sin, ErrInput)
	}
	if x := p.Decay * p.Thickness; !(x < reach) {
		return fmt.Errorf("optical thickness %g is out of proportion: %w", x, ErrInput)
	}
	if phase := p.Wavenumber * p.Thickness; !(phase <= longestPhase) && (p.Cos != 0 || p.Sin != 0) {
		return fmt.Errorf("interference over a phase of %g is not resolved: %w", phase, ErrInput)
	}
	if a := p.integral(0, p.Thickness); !(math.Abs(a) <= 1+excess) {
		return fmt.Errorf("absorptance %g is above 1: %w", a, ErrInput)
	}
	return nil
}

// At returns the absorption density (1/nm) at the depth z (nm) from the lit
// face of the film.
//
// Special case: NaN outside the film, but for rounding.
func (p Profile) At(z float64) float64 {
	if !inside(z, p.Thickness) {
		return math.NaN()
	}
	beams := p.Forward*math.Exp(-p.Decay*z) + p.Backward*math.Exp(-p.Decay*(p.Thickness-z))
	if p.Cos == 0 && p.Sin == 0 {
		return beams
	}
	sin, cos := sinCosAt(p.Wavenumber, z, 0.5*p.Thickness)
	return beams + p.Cos*cos + p.Sin*sin
}

// Between returns the share of the incident photons that is absorbed between the
// depths z1 <= z2 (nm): the exact integral of the density, without loss of digits
// for weak absorption, thin slices or long wavelengths.
//
// Special case: NaN unless 0 <= z1 <= z2 <= Thickness.
func (p Profile) Between(z1, z2 float64) float64 {
	if !(z1 >= 0 && z1 <= z2 && inside(z2, p.Thickness)) {
		return math.NaN()
	}
	return p.integral(z1, z2)
}

// Absorptance returns the share of the incident photons absorbed in the film.
//
// Special case: NaN if Thickness is negative or NaN.
func (p Profile) Absorptance() float64 { return p.Between(0, p.Thickness) }

// Scale returns the profile with all densities multiplied by share, for example
// the share of band-to-band absorption; see [Split].
func (p Profile) Scale(share float64) Profile {
	p.Forward *= share
	p.Backward *= share
	p.Cos *= share
	p.Sin *= share
	return p
}

// Reversed returns the profile with the depth counted from the back face.
func (p Profile) Reversed() Profile {
	p.Forward, p.Backward, p.Sin = p.Backward, p.Forward, -p.Sin
	return p
}

func (p *Profile) integral(z1, z2 float64) float64 {
	h := z2 - z1
	sum := 0.0
	if p.Forward != 0 || p.Backward != 0 {
		sum = h * meanExp(p.Decay*h) * (p.Forward*math.Exp(-p.Decay*z1) + p.Backward*math.Exp(-p.Decay*(p.Thickness-z2)))
	}
	if p.Cos == 0 && p.Sin == 0 {
		return sum
	}
	return sum + p.interference(z1, z2)
}

// interference integrates the oscillating part of the density.
func (p *Profile) interference(z1, z2 float64) float64 {
	h, k, middle := z2-z1, p.Wavenumber, 0.5*p.Thickness
	u := 0.5 * k * h
	sin1, cos1 := sinCosAt(k, z1, middle)
	if u > smallAngle {
		sin2, cos2 := sinCosAt(k, z2, middle)
		return (p.Cos*(sin2-sin1) - p.Sin*(cos2-cos1)) / k
	}
	// The density in the middle of the slice times its width and sinc(u).
	sinc, cos := sinCosSmall(u)
	sin := u * sinc
	return h * sinc * (p.Cos*(cos1*cos-sin1*sin) + p.Sin*(sin1*cos+cos1*sin))
}
