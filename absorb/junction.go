package absorb

import (
	"fmt"
	"math"
)

// Junction is an absorber with a front layer of constant collection (0: a dead
// layer), a depletion region that collects everything, and a base. It is a
// [Collection] for films of the total thickness. The zero Base is invalid.
type Junction struct {
	FrontLayer      float64 // nm, >= 0, thickness of the layer at the lit face
	FrontCollection float64 // 0..1, its collection probability
	Depletion       float64 // nm, >= 0, thickness of the region that collects everything
	Base            Base
}

// Validate returns nil for a junction that can be; the error names the field and
// wraps [ErrInput].
func (j Junction) Validate() error {
	if err := j.check(); err != nil {
		return fmt.Errorf("absorb: junction: %w", err)
	}
	return nil
}

func (j Junction) check() error {
	for _, err := range [...]error{
		checkAmount("front layer", " nm", j.FrontLayer),
		checkShare("front collection", j.FrontCollection),
		checkAmount("depletion region", " nm", j.Depletion),
	} {
		if err != nil {
			return err
		}
	}
	if err := j.Base.check(); err != nil {
		return fmt.Errorf("base: %w", err)
	}
	if math.IsInf(j.Thickness(), 1) {
		return fmt.Errorf("thickness overflows: %w", ErrInput)
	}
	return nil
}

// Thickness returns the total thickness in nm.
func (j Junction) Thickness() float64 { return j.FrontLayer + j.Depletion + j.Base.Thickness }

// At returns the collection probability at the depth z (nm). At the lower face of
// the front layer the probability jumps; there it is that of the depletion
// region.
//
// Special case: NaN outside and for a junction that does not validate.
func (j Junction) At(z float64) float64 {
	front, base := j.FrontLayer, j.FrontLayer+j.Depletion
	switch {
	case j.check() != nil || !inside(z, j.Thickness()):
		return math.NaN()
	case z < front:
		return j.FrontCollection
	case z < base:
		return 1
	}
	value, _ := j.Base.at(min(z-base, j.Base.Thickness))
	return value
}

// Mean returns the mean collection probability between two depths (nm).
//
// Special case: NaN unless 0 <= z1 < z2 <= Thickness, and for a junction that
// does not validate.
func (j Junction) Mean(z1, z2 float64) float64 {
	if j.check() != nil || !(z1 >= 0 && z1 < z2 && inside(z2, j.Thickness())) {
		return math.NaN()
	}
	front, base := j.FrontLayer, j.FrontLayer+j.Depletion
	sum := j.FrontCollection * overlap(z1, z2, 0, front)
	sum += overlap(z1, z2, front, base)
	if z2 > base {
		x1, x2 := max(z1-base, 0), z2-base
		sum += (x2 - x1) * j.Base.mean(x1, x2)
	}
	return sum / (z2 - z1)
}

// overlap returns the common length of z1..z2 and lo..hi.
func overlap(z1, z2, lo, hi float64) float64 { return max(min(z2, hi)-max(z1, lo), 0) }

// Collected returns the share of the incident photons that is collected from the
// film of the profile, exact for any absorption and diffusion length, with
// aL = 1 no exception. The thickness of the film must be that of the junction, but
// for rounding: otherwise the error wraps [ErrRange].
func (j Junction) Collected(p Profile) (float64, error) {
	if err := j.check(); err != nil {
		return 0, fmt.Errorf("absorb: junction: %w", err)
	}
	if err := p.check(); err != nil {
		return 0, fmt.Errorf("absorb: profile: %w", err)
	}
	if d := j.Thickness(); !(math.Abs(d-p.Thickness) <= roundingOfDepth*d) {
		return 0, fmt.Errorf("absorb: junction of %g nm does not fit the film of %g nm: %w", d, p.Thickness, ErrRange)
	}
	front, base := j.FrontLayer, j.FrontLayer+j.Depletion
	sum := 0.0
	if front > 0 && j.FrontCollection > 0 {
		sum += j.FrontCollection * p.integral(0, front)
	}
	if j.Depletion > 0 {
		sum += p.integral(front, base)
	}
	x := p.Decay * j.Base.Thickness
	if p.Forward != 0 {
		sum += p.Forward * math.Exp(-p.Decay*base) * j.Base.beamDown(x)
	}
	if p.Backward != 0 {
		sum += p.Backward * j.Base.beamUp(x)
	}
	if p.Cos != 0 || p.Sin != 0 {
		sum += j.Base.interference(&p, base)
	}
	return sum, nil
}
