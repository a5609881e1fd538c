package absorb

import (
	"fmt"
	"math"
)

// BandToBandShare returns bandToBand/(bandToBand+freeCarriers), the share of the
// absorbed photons that make electron-hole pairs where free carriers absorb too.
// Both in 1/cm (or any one unit).
//
// Special cases: 0 if both are 0; NaN if either is negative, NaN or infinite.
func BandToBandShare(bandToBand, freeCarriers float64) float64 {
	switch {
	case !amount(bandToBand) || !amount(freeCarriers):
		return math.NaN()
	case bandToBand == 0:
		return 0
	}
	return 1 / (1 + freeCarriers/bandToBand)
}

// Split parts the profile of a film, computed with the sum of both absorption
// coefficients (1/cm), into the absorption that makes electron-hole pairs and that
// of free carriers, which makes none. The two add up to p. Errors wrap
// [ErrInput].
func Split(p Profile, bandToBand, freeCarriers float64) (generating, parasitic Profile, err error) {
	if err := p.check(); err != nil {
		return Profile{}, Profile{}, fmt.Errorf("absorb: split: %w", err)
	}
	share := BandToBandShare(bandToBand, freeCarriers)
	if math.IsNaN(share) {
		return Profile{}, Profile{}, fmt.Errorf("absorb: split: absorption coefficient %g or %g /cm is negative or not finite: %w", bandToBand, freeCarriers, ErrInput)
	}
	return p.Scale(share), p.Scale(1 - share), nil
}
