package absorb

import (
	"fmt"
	"math"
	"sort"
)

// Table is a collection probability given at depths, linear in between: measured,
// or computed by another program. It must cover the film from its lit face.
type Table struct {
	Depth       []float64 // nm, ascending from 0
	Probability []float64 // 0..1, one for each depth
}

// Validate returns nil for two or more ascending depths from 0 with probabilities
// in 0..1; the error names the row and wraps [ErrInput].
func (t Table) Validate() error {
	if err := t.check(); err != nil {
		return fmt.Errorf("absorb: collection table: %w", err)
	}
	return nil
}

func (t Table) check() error {
	if err := checkMesh("list of depths", t.Depth); err != nil {
		return err
	}
	if t.Depth[0] != 0 {
		return fmt.Errorf("first depth is %g nm, want 0: %w", t.Depth[0], ErrInput)
	}
	if len(t.Probability) != len(t.Depth) {
		return fmt.Errorf("%d probabilities for %d depths: %w", len(t.Probability), len(t.Depth), ErrInput)
	}
	for i, v := range t.Probability {
		if err := checkShare("probability", v); err != nil {
			return fmt.Errorf("row %d: %w", i, err)
		}
	}
	return nil
}

// At returns the collection probability at the depth z (nm).
//
// Special case: NaN outside the table and for a table that does not validate.
func (t Table) At(z float64) float64 {
	if t.check() != nil || !inside(z, t.Depth[len(t.Depth)-1]) {
		return math.NaN()
	}
	return t.at(t.piece(z), min(z, t.Depth[len(t.Depth)-1]))
}

// piece returns the index of the upper end of the straight piece that holds z.
func (t Table) piece(z float64) int {
	i := sort.SearchFloat64s(t.Depth, z)
	return min(max(i, 1), len(t.Depth)-1)
}

// at returns the straight line of piece i at z.
func (t Table) at(i int, z float64) float64 {
	a, b := t.Depth[i-1], t.Depth[i]
	f := (z - a) / (b - a)
	return t.Probability[i-1]*(1-f) + t.Probability[i]*f
}

// Mean returns the mean collection probability between two depths (nm).
//
// Special case: NaN unless 0 <= z1 < z2 <= last depth, and for a table that does
// not validate.
func (t Table) Mean(z1, z2 float64) float64 {
	if t.check() != nil {
		return math.NaN()
	}
	return t.mean(z1, z2)
}

// mean is Mean of a table that validates.
func (t Table) mean(z1, z2 float64) float64 {
	if !(z1 >= 0 && z1 < z2 && inside(z2, t.Depth[len(t.Depth)-1])) {
		return math.NaN()
	}
	sum := 0.0
	for i, a := t.piece(z1), z1; a < z2; i++ {
		b := z2
		if i < len(t.Depth)-1 {
			b = min(t.Depth[i], z2)
		}
		sum += (b - a) * 0.5 * (t.at(i, a) + t.at(i, b))
		a = b
	}
	return sum / (z2 - z1)
}

// Collected returns the share of the incident photons that is collected from the
// film of the profile, exact for the straight pieces of the table. The table must
// reach the end of the film, but for rounding: otherwise the error wraps
// [ErrRange].
func (t Table) Collected(p Profile) (float64, error) {
	if err := t.check(); err != nil {
		return 0, fmt.Errorf("absorb: collection table: %w", err)
	}
	if err := p.check(); err != nil {
		return 0, fmt.Errorf("absorb: profile: %w", err)
	}
	last := t.Depth[len(t.Depth)-1]
	if !inside(p.Thickness, last) {
		return 0, fmt.Errorf("absorb: collection table ends at %g nm, the film at %g nm: %w", last, p.Thickness, ErrRange)
	}
	sum := 0.0
	for i, a := 1, 0.0; a < p.Thickness; i++ {
		b := p.Thickness
		if i < len(t.Depth)-1 {
			b = min(t.Depth[i], b)
		}
		sum += p.linear(a, b, t.at(i, a), t.at(i, b))
		a = b
	}
	return sum, nil
}

// linear integrates the density times a straight line that is v1 at z1 and v2 at
// z2.
//
// derived: over t = 0..1 the integral of t exp(-qt) is the divided difference
// exp[-q, -q, 0], that of (1-t) exp(-qt) what it leaves of the mean; about the
// middle of the piece those of the oscillation are sinc and the spherical Bessel
// function j1.
func (p *Profile) linear(z1, z2, v1, v2 float64) float64 {
	h := z2 - z1
	sum := 0.0
	if p.Forward != 0 || p.Backward != 0 {
		q := p.Decay * h
		far := dividedExp3(-q, -q, 0)
		near := meanExp(q) - far // at least half of the mean
		down, up := h*p.Forward*math.Exp(-p.Decay*z1), h*p.Backward*math.Exp(-p.Decay*(p.Thickness-z2))
		sum = down*(v1*near+v2*far) + up*(v2*near+v1*far)
	}
	if p.Cos == 0 && p.Sin == 0 {
		return sum
	}
	u := 0.5 * p.Wavenumber * h
	sin1, cos1 := sinCosAt(p.Wavenumber, z1, 0.5*p.Thickness)
	sinU, cosU := math.Sincos(u)
	sin, cos := sin1*cosU+cos1*sinU, cos1*cosU-sin1*sinU
	even := 0.5 * (v1 + v2) * sinc(u) * (p.Cos*cos + p.Sin*sin)
	odd := 0.5 * (v2 - v1) * linearSine(u) * (p.Sin*cos - p.Cos*sin)
	return sum + h*(even+odd)
}
