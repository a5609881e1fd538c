package absorb

import (
	"fmt"
	"math"
)

// Collection is the probability that a carrier generated at a depth of the
// absorber reaches the contacts: [Constant], [Base], [Junction] or [Table]. Depths
// are in nm from the lit face of the film.
type Collection interface {
	// Validate returns nil if the parameters make sense; the error wraps ErrInput.
	Validate() error

	// At returns the probability at a depth, NaN outside the range of depths.
	At(z float64) float64

	// Mean returns the exact mean between two depths z1 < z2, NaN outside the
	// range of depths.
	Mean(z1, z2 float64) float64

	// Collected returns the integral of absorption density times probability
	// over the film: the share of the incident photons that becomes current.
	// The error wraps ErrInput, or ErrRange if the depths of film and collection
	// do not fit.
	Collected(p Profile) (float64, error)
}

// Constant is one collection probability for all depths, 0..1.
type Constant float64

// Validate returns nil for a probability in 0..1.
func (c Constant) Validate() error {
	if err := checkShare("collection probability", float64(c)); err != nil {
		return fmt.Errorf("absorb: collection: %w", err)
	}
	return nil
}

// At returns the probability for any depth >= 0, NaN otherwise.
func (c Constant) At(z float64) float64 {
	if !amount(z) {
		return math.NaN()
	}
	return float64(c)
}

// Mean returns the probability for 0 <= z1 < z2, NaN otherwise.
func (c Constant) Mean(z1, z2 float64) float64 {
	if !(z1 >= 0 && z1 < z2) {
		return math.NaN()
	}
	return float64(c)
}

// Collected returns the probability times the absorptance of the film.
func (c Constant) Collected(p Profile) (float64, error) {
	if err := c.Validate(); err != nil {
		return 0, err
	}
	if err := p.Validate(); err != nil {
		return 0, err
	}
	return float64(c) * p.integral(0, p.Thickness), nil
}

// QuantumEfficiency stores in dst the external quantum efficiency of a film for
// one profile per wavelength: electrons collected per incident photon, the exact
// integral of profile times collection probability. dst is allocated when nil and
// must have one value per profile otherwise.
//
// Errors wrap [ErrInput], or [ErrRange] if the depths of a film and of the
// collection do not fit.
func QuantumEfficiency(dst []float64, profiles []Profile, c Collection) ([]float64, error) {
	if c == nil {
		return nil, fmt.Errorf("absorb: quantum efficiency: no collection probability: %w", ErrInput)
	}
	dst, err := resize(dst, len(profiles))
	if err != nil {
		return nil, fmt.Errorf("absorb: quantum efficiency: %w", err)
	}
	for i := range profiles {
		if dst[i], err = c.Collected(profiles[i]); err != nil {
			return nil, fmt.Errorf("absorb: quantum efficiency: profile %d: %w", i, err)
		}
	}
	return dst, nil
}

// InternalQuantumEfficiency returns external/share: electrons collected per photon
// that enters the cell (share = 1-R) or, where that is meant, per photon
// absorbed in the film (share = absorptance).
//
// Special cases: NaN unless 0 < share <= 1 and external is finite and not negative.
func InternalQuantumEfficiency(external, share float64) float64 {
	if !(share > 0 && share <= 1) || !amount(external) {
		return math.NaN()
	}
	return external / share
}
