package lighttrap

import (
	"fmt"
	"math"
)

// Texture is the shape of a face of a wafer.
type Texture int

// The shapes. Pyramids have square bases that cover the face without gaps, all
// with their edges along the same two directions; grooves run along the second.
const (
	Planar           Texture = iota
	RegularPyramids          // upright, on a square lattice
	RandomPyramids           // upright; each is displaced along its edge by a random amount against the one before
	InvertedPyramids         // pits on a square lattice, without land between them
	Grooves                  // symmetric ridges
	Lambertian               // sends all light on into an isotropic distribution
	CosinePower              // sends all light on with a radiant intensity that goes with a power of the cosine
	textureKinds     = iota
)

// String returns the name of the texture in plain words.
func (k Texture) String() string {
	names := [textureKinds]string{"planar", "regular pyramids", "random pyramids", "inverted pyramids", "grooves", "lambertian", "cosine power"}
	if k < 0 || int(k) >= textureKinds {
		return fmt.Sprintf("Texture(%d)", int(k))
	}
	return names[k]
}

// PyramidAngle is the angle between the base and the facets of pyramids that
// anisotropic etching of (100) silicon leaves, arctan √2 = 54.7356°: the angle
// between (100) and (111) planes.
const PyramidAngle = 0.95531661812450927816385710251575775

// Face is one face of a [Wafer]. The zero value is a planar bare face in vacuum.
type Face struct {
	Texture  Texture
	Angle    float64     // rad, between facets and the plane of the wafer, 0 < Angle < π/2; pyramids and grooves only
	Azimuth  float64     // rad, direction of the first edge of the pyramids, from the x axis about the outward z axis of the front
	Period   float64     // nm, lattice of regular textures; 0: light from the other side of the wafer meets them at a random place
	Exponent float64     // > 0, of a cosine-power face; 1 is Lambertian
	Specular float64     // 0..1, share of the light that a scattering face treats like a planar one
	Medium   float64     // real index of the medium outside, > 0; 0 means 1, vacuum
	Opaque   bool        // light that passes the films is absorbed in the medium outside (a metal)
	Films    *FacetTable // response of the films; nil: none, Fresnel's equations with the indices of both media
}

// Cover is a plane transparent plate or layer over the front of a wafer, for
// example glass or encapsulant, thick enough for intensities to add.
type Cover struct {
	Index      float64     // real, > 0
	Absorption float64     // 1/cm, >= 0
	Thickness  float64     // nm, >= 0
	Films      *FacetTable // films on its outer face; nil: none. Their absorptance counts as the cover's
}

// Wafer is an absorbing wafer with two faces, at one wavelength. Its textures
// are large against the wavelength and flat against its thickness.
type Wafer struct {
	Index        float64 // real part of the refractive index, > 0
	Absorption   float64 // band-to-band absorption coefficient, 1/cm, >= 0
	FreeCarriers float64 // free-carrier absorption coefficient, 1/cm, >= 0
	Thickness    float64 // nm, >= 0, mean distance of the faces
	Front, Rear  Face
	Covers       []Cover // over the front, from outside; Front.Medium is then the medium outside of them
}

// Polarization selects the polarisation of a [Light]. The zero value is
// unpolarised light.
type Polarization int

// The polarisations, with respect to the plane of incidence on the wafer; at
// normal incidence this plane contains the direction of the azimuth.
const (
	Unpolarized Polarization = iota
	S
	P
)

// Light is the light that falls on a wafer: collimated, or isotropic within a cone
// about the normal.
type Light struct {
	Angle        float64 // rad, angle of incidence in the outermost medium, 0 <= Angle < π/2
	Azimuth      float64 // rad, direction of the projection of the rays onto the wafer, from the x axis
	Cone         float64 // rad, half angle of a cone of isotropic light, 0..π/2; Angle is then 0
	Polarization Polarization
	FromRear     bool
}

// textured says whether the face has facets.
func (k Texture) textured() bool { return k >= RegularPyramids && k <= Grooves }

// scatters says whether the face sends light into a distribution.
func (k Texture) scatters() bool { return k == Lambertian || k == CosinePower }

func (f *Face) medium() float64 {
	if f.Medium == 0 {
		return 1
	}
	return f.Medium
}

func checkIndex(name string, n float64) error {
	if !(n > 0) || math.IsInf(n, 1) {
		return fmt.Errorf("lighttrap: %s %g is not positive and finite: %w", name, n, ErrInput)
	}
	return nil
}

// check reports the first value of a face that is out of its range. name is
// "front" or "rear".
func (f *Face) check(name string) error {
	if f.Texture < 0 || int(f.Texture) >= textureKinds {
		return fmt.Errorf("lighttrap: %s: unknown texture %d: %w", name, int(f.Texture), ErrInput)
	}
	if f.Texture.textured() {
		if !(f.Angle > 0 && f.Angle < math.Pi/2) {
			return fmt.Errorf("lighttrap: %s: facet angle %g rad is not between 0 and π/2: %w", name, f.Angle, ErrInput)
		}
	} else if f.Angle != 0 || f.Period != 0 {
		return fmt.Errorf("lighttrap: %s: facet angle %g rad and period %g nm on a face that is %s: %w", name, f.Angle, f.Period, f.Texture, ErrInput)
	}
	if f.Texture == RandomPyramids && f.Period != 0 {
		return fmt.Errorf("lighttrap: %s: period %g nm of random pyramids: %w", name, f.Period, ErrInput)
	}
	if math.IsNaN(f.Azimuth) || math.IsInf(f.Azimuth, 0) {
		return fmt.Errorf("lighttrap: %s: azimuth %g rad is not finite: %w", name, f.Azimuth, ErrInput)
	}
	if !(f.Period >= 0) || math.IsInf(f.Period, 1) {
		return checkAmount(name+": period", " nm", f.Period)
	}
	if f.Texture == CosinePower {
		if !(f.Exponent > 0) || math.IsInf(f.Exponent, 1) {
			return fmt.Errorf("lighttrap: %s: exponent %g of the cosine is not positive and finite: %w", name, f.Exponent, ErrInput)
		}
	} else if f.Exponent != 0 {
		return fmt.Errorf("lighttrap: %s: exponent %g on a face that is %s: %w", name, f.Exponent, f.Texture, ErrInput)
	}
	if !(f.Specular >= 0 && f.Specular <= 1) {
		return checkShare(name+": specular share", f.Specular)
	}
	if f.Specular != 0 && !f.Texture.scatters() {
		return fmt.Errorf("lighttrap: %s: specular share %g on a face that is %s: %w", name, f.Specular, f.Texture, ErrInput)
	}
	if f.Opaque && f.Films == nil {
		return fmt.Errorf("lighttrap: %s: an opaque medium needs a table of the reflectance: %w", name, ErrInput)
	}
	if n := f.medium(); !(n > 0) || math.IsInf(n, 1) {
		return checkIndex(name+": index of the medium outside", n)
	}
	return nil
}

func (w *Wafer) check() error {
	if err := checkIndex("index of the wafer", w.Index); err != nil {
		return err
	}
	for _, v := range []struct {
		name, unit string
		value      float64
	}{{"absorption coefficient", " /cm", w.Absorption}, {"free-carrier absorption coefficient", " /cm", w.FreeCarriers}, {"thickness", " nm", w.Thickness}} {
		if err := checkAmount(v.name, v.unit, v.value); err != nil {
			return err
		}
	}
	if err := w.Front.check("front"); err != nil {
		return err
	}
	if err := w.Rear.check("rear"); err != nil {
		return err
	}
	for i, c := range w.Covers {
		if err := c.check(); err != nil {
			return fmt.Errorf("lighttrap: cover %d: %w", i, err)
		}
	}
	if len(w.Covers) > 0 && w.Front.Opaque {
		return fmt.Errorf("lighttrap: front: covers over an opaque medium: %w", ErrInput)
	}
	return nil
}

func (c *Cover) check() error {
	if !(c.Index > 0) || math.IsInf(c.Index, 1) {
		return fmt.Errorf("index %g is not positive and finite: %w", c.Index, ErrInput)
	}
	if !(c.Absorption >= 0) || math.IsInf(c.Absorption, 1) {
		return fmt.Errorf("absorption coefficient %g /cm is negative or not finite: %w", c.Absorption, ErrInput)
	}
	if !(c.Thickness >= 0) || math.IsInf(c.Thickness, 1) {
		return fmt.Errorf("thickness %g nm is negative or not finite: %w", c.Thickness, ErrInput)
	}
	return nil
}

func (l *Light) check(w *Wafer) error {
	if !(l.Angle >= 0 && l.Angle < math.Pi/2) {
		return fmt.Errorf("lighttrap: light: angle %g rad is not in [0, π/2): %w", l.Angle, ErrInput)
	}
	if math.IsNaN(l.Azimuth) || math.IsInf(l.Azimuth, 0) {
		return fmt.Errorf("lighttrap: light: azimuth %g rad is not finite: %w", l.Azimuth, ErrInput)
	}
	if !(l.Cone >= 0 && l.Cone <= math.Pi/2) {
		return fmt.Errorf("lighttrap: light: half angle %g rad of the cone is not in [0, π/2]: %w", l.Cone, ErrInput)
	}
	if l.Cone > 0 && (l.Angle != 0 || l.Polarization != Unpolarized) {
		return fmt.Errorf("lighttrap: light: a cone of half angle %g rad stands about the normal and is unpolarised: %w", l.Cone, ErrInput)
	}
	if l.Polarization < Unpolarized || l.Polarization > P {
		return fmt.Errorf("lighttrap: light: unknown polarisation %d: %w", int(l.Polarization), ErrInput)
	}
	if lit := w.lit(l.FromRear); lit.Opaque {
		return fmt.Errorf("lighttrap: light falls on a face behind an opaque medium: %w", ErrInput)
	}
	return nil
}

func (w *Wafer) lit(fromRear bool) *Face {
	if fromRear {
		return &w.Rear
	}
	return &w.Front
}
