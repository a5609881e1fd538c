package lighttrap

import (
	"fmt"
	"math"
)

// cmPerNM turns 1/cm times nm into a plain number.
const cmPerNM = 1e-7

// Slab is an absorbing wafer or thick film in which intensities add. Its faces
// are described by their reflectances; the optics of films gives them for
// planar, [DiffuseReflectance] for bare Lambertian faces.
type Slab struct {
	Absorption       float64 // band-to-band absorption coefficient, 1/cm, >= 0
	FreeCarriers     float64 // free-carrier absorption coefficient, 1/cm, >= 0
	Thickness        float64 // nm, >= 0
	FrontReflectance float64 // of the incident light, 0..1
	FrontInternal    float64 // of the light that meets the front from inside, 0..1
	RearReflectance  float64 // of the light that meets the rear from inside, 0..1
}

// Balance says where the light that falls on a slab goes. The five shares add up
// to 1.
type Balance struct {
	Reflected    float64 // at the front, without entering
	Absorbed     float64 // by band-to-band absorption
	FreeCarriers float64 // by free carriers, without carriers of its own
	Escaped      float64 // out of the front after passes through the slab
	RearLoss     float64 // not reflected at the rear: absorbed there or let through

	// PathFactor is the length in units of the thickness of a straight path
	// that absorbs as much of the light that enters: -ln(1-a)/(αW). Its value
	// for vanishing absorption is the mean path length.
	PathFactor float64

	// Derivatives with respect to αW, α of both kinds together: of Absorbed +
	// FreeCarriers, of Escaped and of RearLoss. They add up to 0.
	Slope, EscapedSlope, RearLossSlope float64
}

func (s Slab) check() error {
	for _, v := range []struct {
		name, unit string
		value      float64
	}{{"absorption coefficient", " /cm", s.Absorption}, {"free-carrier absorption coefficient", " /cm", s.FreeCarriers}, {"thickness", " nm", s.Thickness}} {
		if err := checkAmount(v.name, v.unit, v.value); err != nil {
			return err
		}
	}
	if x := s.opticalThickness(); !(x <= math.MaxFloat64) {
		return fmt.Errorf("lighttrap: slab: %g /cm and %g /cm in %g nm are not a finite optical thickness: %w", s.Absorption, s.FreeCarriers, s.Thickness, ErrInput)
	}
	for _, v := range []struct {
		name  string
		value float64
	}{{"front reflectance", s.FrontReflectance}, {"internal front reflectance", s.FrontInternal}, {"rear reflectance", s.RearReflectance}} {
		if err := checkShare(v.name, v.value); err != nil {
			return err
		}
	}
	if s.FrontInternal == 1 && s.RearReflectance == 1 && s.FrontReflectance < 1 && s.opticalThickness() == 0 {
		return fmt.Errorf("lighttrap: slab: no absorption and no way out for the light that enters: %w", ErrInput)
	}
	return nil
}

func (s Slab) opticalThickness() float64 {
	return (s.Absorption + s.FreeCarriers) * s.Thickness * cmPerNM
}

// pass is the transmittance of one pass, 1 minus it, its derivative with respect
// to αW, the mean path of weak absorption and the shortest path in thicknesses.
type pass struct{ t, loss, slope, path, shortest float64 }

func diffusePass(x float64) pass {
	t, loss := DiffuseTransmittance(x)
	return pass{t, loss, DiffuseTransmittanceSlope(x), 2, 1}
}

func straightPass(x, cos float64) pass {
	t := math.Exp(-x / cos)
	return pass{t, -math.Expm1(-x / cos), -t / cos, 1 / cos, 1 / cos}
}

// Lambertian returns the balance of a slab whose faces scatter all light into an
// isotropic distribution, at any absorption: with t = 2 E3(αW) of every pass
//
//	A = (1-R) (1-t) (1 + Rb t) / (1 - Rf Rb t²).
//
// Source: A. Goetzberger, Proc. 15th IEEE PVSC (1981) 867 and M. A. Green, Prog.
// Photovolt. 10, 235 (2002) for the model, from memory; content derived from the
// balance of fluxes.
func (s Slab) Lambertian() (Balance, error) {
	if err := s.check(); err != nil {
		return Balance{}, err
	}
	p := diffusePass(s.opticalThickness())
	return s.balance(p, p), nil
}

// Planar returns the balance of a slab with planar faces, whose light runs at
// the angle with cosine cos to the normal, all passes added as intensities.
// Refraction is the caller's: cos is that inside, see [RefractedCosine].
func (s Slab) Planar(cos float64) (Balance, error) {
	if err := s.check(); err != nil {
		return Balance{}, err
	}
	if err := checkCos(cos); err != nil {
		return Balance{}, err
	}
	p := straightPass(s.opticalThickness(), cos)
	return s.balance(p, p), nil
}

// LambertianRear returns the balance of a slab with a planar front, through
// which the light enters at the angle with cosine cos inside, and a rear that
// scatters all it reflects; FrontInternal is then met by isotropic light.
func (s Slab) LambertianRear(cos float64) (Balance, error) {
	if err := s.check(); err != nil {
		return Balance{}, err
	}
	if err := checkCos(cos); err != nil {
		return Balance{}, err
	}
	x := s.opticalThickness()
	return s.balance(straightPass(x, cos), diffusePass(x)), nil
}

func checkCos(cos float64) error {
	if !(cos > 0 && cos <= 1) {
		return fmt.Errorf("lighttrap: cosine %g of the angle inside is not in (0, 1]: %w", cos, ErrInput)
	}
	return nil
}

// balance adds all passes: the first one down, then pairs up and down. Every
// difference is written as a sum of losses, so that weak absorption costs no
// digits.
//
// derived: behind the first pass the flux f.t meets the rear; what is reflected
// there makes the geometric series of the factor Rf Rb t².
func (s Slab) balance(f, p pass) Balance {
	rf, rb := s.FrontInternal, s.RearReflectance
	in := 1 - s.FrontReflectance
	b := Balance{Reflected: s.FrontReflectance}
	// 1 - Rf Rb t²
	den := (1 - rf) + rf*((1-rb)+rb*p.loss*(1+p.t))
	if den == 0 || in == 0 {
		return b // nothing enters (checked), or all of it is reflected
	}
	rear := f.t / den // flux that meets the rear in all passes
	up := rb * rear
	absorbed := f.loss + up*p.loss*(1+rf*p.t)
	b.Escaped = in * up * p.t * (1 - rf)
	b.RearLoss = in * (1 - rb) * rear
	x := s.opticalThickness()
	if x > 0 {
		share := s.Absorption / (s.Absorption + s.FreeCarriers)
		b.Absorbed = in * absorbed * share
		b.FreeCarriers = in * absorbed * (1 - share)
		left := (b.Escaped + b.RearLoss) / in
		switch {
		case absorbed < 0.5:
			b.PathFactor = -math.Log1p(-absorbed) / x
		case left > 0:
			b.PathFactor = -math.Log(left) / x
		default:
			b.PathFactor = f.shortest // what strong absorption tends to
		}
	} else {
		b.PathFactor = f.path + rb*p.path*(1+rf)/den
	}
	rearSlope := (f.slope + 2*rf*rb*p.t*p.slope*rear) / den
	upSlope := rb * rearSlope
	b.EscapedSlope = in * (1 - rf) * (upSlope*p.t + up*p.slope)
	b.RearLossSlope = in * (1 - rb) * rearSlope
	b.Slope = -(b.EscapedSlope + b.RearLossSlope) // two negative terms
	return b
}
