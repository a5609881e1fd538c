package absorb

import (
	"fmt"
	"math"
)

// Slab is a planar film or wafer in which intensities add, with all passes
// between its faces. The zero reflectances leave Beer-Lambert's single pass;
// RearReflectance alone adds one pass back.
//
// For light that runs obliquely, divide both absorption coefficients by the cosine
// of its angle to the normal inside the slab.
type Slab struct {
	Absorption       float64 // band-to-band absorption coefficient, 1/cm, >= 0
	FreeCarriers     float64 // free-carrier absorption coefficient, 1/cm, >= 0
	Thickness        float64 // nm, >= 0
	FrontReflectance float64 // of the incident light, 0..1
	FrontInternal    float64 // of the light that meets the front from inside, 0..1
	RearReflectance  float64 // of the light that meets the rear from inside, 0..1
}

// Shares says where the light that falls on a slab goes. They add up to 1.
type Shares struct {
	Reflected    float64 // at the front, without entering
	Absorbed     float64 // by band-to-band absorption
	FreeCarriers float64 // by free carriers, without carriers of its own
	Escaped      float64 // out of the front after passes through the slab
	Transmitted  float64 // through the rear, or lost in it
}

func (s Slab) check() error {
	for _, err := range [...]error{
		checkAmount("absorption coefficient", " /cm", s.Absorption),
		checkAmount("free-carrier absorption coefficient", " /cm", s.FreeCarriers),
		checkAmount("thickness", " nm", s.Thickness),
		checkShare("front reflectance", s.FrontReflectance),
		checkShare("internal front reflectance", s.FrontInternal),
		checkShare("rear reflectance", s.RearReflectance),
	} {
		if err != nil {
			return err
		}
	}
	if x := (s.Absorption + s.FreeCarriers) * cmPerNM * s.Thickness; !(x < reach) {
		return fmt.Errorf("optical thickness %g is out of proportion: %w", x, ErrInput)
	} else if s.FrontInternal == 1 && s.RearReflectance == 1 && s.FrontReflectance < 1 && x < smallestTrapped {
		return fmt.Errorf("no absorption and no way out for the light that enters: %w", ErrInput)
	}
	return nil
}

// smallestTrapped is the optical thickness below which light between two perfect
// mirrors counts as not absorbed at all: its passes could not be counted.
const smallestTrapped = 1e-280

// beams are the shares of the incident light that start downwards at the front
// and upwards at the rear, all passes added, with the optical thickness.
func (s Slab) beams() (down, up, x float64) {
	x = (s.Absorption + s.FreeCarriers) * cmPerNM * s.Thickness
	rf, rb := s.FrontInternal, s.RearReflectance
	if s.FrontReflectance == 1 {
		return 0, 0, x
	}
	// 1 - Rf Rb t², a sum of losses so that weak absorption costs no digits
	den := (1 - rf) + rf*((1-rb)-rb*math.Expm1(-2*x))
	down = (1 - s.FrontReflectance) / den
	return down, down * rb * math.Exp(-x), x
}

// Shares returns where the light goes:
//
//	A = (1-R) (1-t) (1 + Rb t) / (1 - Rf Rb t²), t = exp(-alpha d).
//
// derived: the geometric series over pairs of passes. Errors wrap [ErrInput].
func (s Slab) Shares() (Shares, error) {
	if err := s.check(); err != nil {
		return Shares{}, fmt.Errorf("absorb: slab: %w", err)
	}
	down, up, x := s.beams()
	t, loss := math.Exp(-x), -math.Expm1(-x)
	r := Shares{Reflected: s.FrontReflectance, Escaped: up * t * (1 - s.FrontInternal), Transmitted: down * t * (1 - s.RearReflectance)}
	if x > 0 {
		generating := BandToBandShare(s.Absorption, s.FreeCarriers)
		absorbed := loss * (down + up)
		r.Absorbed, r.FreeCarriers = absorbed*generating, absorbed*(1-generating)
	}
	return r, nil
}

// Profile returns the density of the band-to-band absorption, from which
// generation and quantum efficiency follow. Errors wrap [ErrInput].
func (s Slab) Profile() (Profile, error) { return s.profile(s.Absorption) }

// FreeCarrierProfile returns the density of the free-carrier absorption. Errors
// wrap [ErrInput].
func (s Slab) FreeCarrierProfile() (Profile, error) { return s.profile(s.FreeCarriers) }

// profile returns the density of a part alpha (1/cm) of the absorption.
func (s Slab) profile(alpha float64) (Profile, error) {
	if err := s.check(); err != nil {
		return Profile{}, fmt.Errorf("absorb: slab: %w", err)
	}
	down, up, _ := s.beams()
	alpha *= cmPerNM
	return Profile{
		Thickness: s.Thickness,
		Decay:     (s.Absorption + s.FreeCarriers) * cmPerNM,
		Forward:   alpha * down,
		Backward:  alpha * up,
	}, nil
}
