package lighttrap

import "fmt"

// Grid is the metal grid on the front of a cell: parallel fingers and, across
// them, parallel busbars. All lengths are in nm like everywhere in this library:
// a finger of 40 µm is 40e3.
type Grid struct {
	FingerWidth  float64 // nm, >= 0
	FingerPitch  float64 // nm, from finger to finger, >= FingerWidth; 0 for no fingers
	BusbarWidth  float64 // nm, >= 0
	BusbarPitch  float64 // nm, >= BusbarWidth; 0 for no busbars
	FingerFactor float64 // optical width factor of a finger: optical over geometrical width, 0..1
	BusbarFactor float64 // that of a busbar
}

// GridShares are shares of the incident light.
type GridShares struct {
	Covered   float64 // falls on metal
	Shaded    float64 // is lost there
	Recovered float64 // falls on metal and still reaches the cell: Covered - Shaded
}

// Shares returns what the grid takes from the incident light. Crossings count
// once, as busbars. A finger of round cross section under glass sends part of
// its light back into the cell, which the optical width factor says: below 1
// inside a module, 1 in air for flat fingers (common practice, no source).
func (g Grid) Shares() (GridShares, error) {
	finger, err := coverage(stripeNames{"finger width", "finger pitch", "optical width factor of a finger"}, g.FingerWidth, g.FingerPitch, g.FingerFactor)
	if err != nil {
		return GridShares{}, err
	}
	busbar, err := coverage(stripeNames{"busbar width", "busbar pitch", "optical width factor of a busbar"}, g.BusbarWidth, g.BusbarPitch, g.BusbarFactor)
	if err != nil {
		return GridShares{}, err
	}
	s := GridShares{
		Covered: busbar + (1-busbar)*finger,
		Shaded:  busbar*g.BusbarFactor + (1-busbar)*finger*g.FingerFactor,
	}
	s.Recovered = busbar*(1-g.BusbarFactor) + (1-busbar)*finger*(1-g.FingerFactor)
	return s, nil
}

// stripeNames names the numbers of one kind of stripe in errors.
type stripeNames struct{ width, pitch, factor string }

// coverage returns the share of the area under parallel stripes.
func coverage(n stripeNames, width, pitch, factor float64) (float64, error) {
	if err := checkAmount(n.width, " nm", width); err != nil {
		return 0, err
	}
	if err := checkAmount(n.pitch, " nm", pitch); err != nil {
		return 0, err
	}
	if err := checkShare(n.factor, factor); err != nil {
		return 0, err
	}
	if pitch == 0 {
		if width > 0 {
			return 0, fmt.Errorf("lighttrap: %s %g nm without a pitch: %w", n.width, width, ErrInput)
		}
		return 0, nil
	}
	if width > pitch {
		return 0, fmt.Errorf("lighttrap: %s %g nm exceeds its pitch %g nm: %w", n.width, width, pitch, ErrInput)
	}
	return width / pitch, nil
}
