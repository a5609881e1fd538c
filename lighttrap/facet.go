package lighttrap

import (
	"fmt"
	"math"
)

// FacetTable holds what the films on a facet do with light that meets them, from
// the medium outside and from the wafer. It is filled with the optics of films,
// or from a measurement. Between the angles every value is linear in the cosine.
type FacetTable struct {
	Outside, Inside FacetSide
}

// FacetSide is one side of a [FacetTable]. All slices are as long as Cos. At
// every angle and for both polarisations R + T + ΣA must be 1 within
// [FacetTolerance]; what is missing is spread over all in proportion.
type FacetSide struct {
	Cos    []float64   // cosine of the angle of incidence, strictly ascending, first 0, last 1
	RS, RP []float64   // reflectance for s and p, 0..1
	TS, TP []float64   // transmittance; 0 beyond the critical angle unless the medium behind is opaque
	AS, AP [][]float64 // [film][angle] absorptance of the films, listed from outside on both sides

	// Phase is arg rs - arg rp of the reflection amplitudes (rad), TransmittedPhase
	// that of the transmission, with rp = -rs at normal incidence. nil: the
	// correlation of s and p is lost, as by a film of uneven thickness.
	Phase, TransmittedPhase []float64
}

// FacetTolerance is how far R + T + ΣA of a table may miss 1.
const FacetTolerance = 1e-9

// UniformFacet returns the table of a facet without films whose reflectances, from
// outside and from inside, do not depend on the angle: a mirror with an opaque
// medium behind it, or one face of a Lambertian slab.
func UniformFacet(outside, inside float64) FacetTable {
	side := func(r float64) FacetSide {
		return FacetSide{
			Cos: []float64{0, 1},
			RS:  []float64{r, r}, RP: []float64{r, r}, TS: []float64{1 - r, 1 - r}, TP: []float64{1 - r, 1 - r},
		}
	}
	return FacetTable{Outside: side(outside), Inside: side(inside)}
}

// FacetCosines returns cosines at which a table for light in a medium of index
// n1 that meets one of index n2 should have its values: intervals equal steps in
// the cosine in the medium of lower index, and as many beyond the critical
// angle, close to it where the response changes fast. Normal incidence is exact.
//
// Special case: nil unless both indices are positive and finite and intervals >= 1.
func FacetCosines(n1, n2 float64, intervals int) []float64 {
	if !(n1 > 0 && n2 > 0) || math.IsInf(n1, 1) || math.IsInf(n2, 1) || intervals < 1 {
		return nil
	}
	var cos []float64
	m := n2 / n1
	critical := 0.0
	if m < 1 {
		critical = math.Sqrt((1 - m) * (1 + m))
		for i := range intervals {
			u := 1 - float64(i)/float64(intervals)
			cos = append(cos, critical*(1-u)*(1+u)) // critical (1 - u²)
		}
	}
	scale := min(m, 1)
	for i := 0; i <= intervals; i++ {
		u := scale * float64(i) / float64(intervals)
		c := math.Sqrt(critical*critical + u*u)
		if n := len(cos); n > 0 && c <= cos[n-1] {
			continue
		}
		cos = append(cos, c)
	}
	cos[len(cos)-1] = 1
	return cos
}

// RefractedCosine returns the cosine of the angle in a medium of index n2 of light
// that comes from one of index n1 at the angle with cosine cos. A table for a
// planar face has no error of interpolation for collimated light if it holds
// these cosines.
//
// Special cases: NaN beyond the critical angle, for cos outside [0, 1], and for
// indices that are not positive.
func RefractedCosine(n1, n2, cos float64) float64 {
	if !(n1 > 0 && n2 > 0 && cos >= 0 && cos <= 1) {
		return math.NaN()
	}
	return math.Sqrt(refracted(n1/n2, cos))
}

// check reports the first value of a table that is out of its range.
func (t *FacetTable) check() error {
	if err := t.Outside.check(); err != nil {
		return fmt.Errorf("outside: %w", err)
	}
	if err := t.Inside.check(); err != nil {
		return fmt.Errorf("inside: %w", err)
	}
	if a, b := len(t.Outside.AS), len(t.Inside.AS); a != b {
		return fmt.Errorf("%d films from outside, %d from inside: %w", a, b, ErrInput)
	}
	return nil
}

func (s *FacetSide) check() error {
	n := len(s.Cos)
	if n < 2 {
		return fmt.Errorf("table of %d angles, want at least cosines 0 and 1: %w", n, ErrInput)
	}
	if s.Cos[0] != 0 || s.Cos[n-1] != 1 {
		return fmt.Errorf("cosines from %g to %g, want 0 to 1: %w", s.Cos[0], s.Cos[n-1], ErrInput)
	}
	for i := 1; i < n; i++ {
		if !(s.Cos[i] > s.Cos[i-1]) {
			return fmt.Errorf("cosine %d: %g does not follow %g in ascending order: %w", i, s.Cos[i], s.Cos[i-1], ErrInput)
		}
	}
	if len(s.AS) != len(s.AP) {
		return fmt.Errorf("%d films for s, %d for p: %w", len(s.AS), len(s.AP), ErrInput)
	}
	if err := s.checkColumns(n); err != nil {
		return err
	}
	for _, phase := range [][]float64{s.Phase, s.TransmittedPhase} {
		if phase != nil && len(phase) != n {
			return fmt.Errorf("%d phases for %d angles: %w", len(phase), n, ErrInput)
		}
		for i, v := range phase {
			if math.IsNaN(v) || math.IsInf(v, 0) {
				return fmt.Errorf("cosine %d: phase %g rad is not finite: %w", i, v, ErrInput)
			}
		}
	}
	for i := range n {
		sumS, sumP := s.RS[i]+s.TS[i], s.RP[i]+s.TP[i]
		for j := range s.AS {
			sumS, sumP = sumS+s.AS[j][i], sumP+s.AP[j][i]
		}
		if dev := max(math.Abs(sumS-1), math.Abs(sumP-1)); !(dev <= FacetTolerance) {
			return fmt.Errorf("cosine %d: R + T + ΣA is %.12g for s and %.12g for p, not 1: %w", i, sumS, sumP, ErrInput)
		}
	}
	return nil
}

// checkColumns checks the lengths and that all values are shares.
func (s *FacetSide) checkColumns(n int) error {
	column := func(name string, film int, v []float64) error {
		if film >= 0 {
			name = fmt.Sprintf("%s of film %d", name, film)
		}
		if len(v) != n {
			return fmt.Errorf("%s has %d values for %d angles: %w", name, len(v), n, ErrInput)
		}
		for i, x := range v {
			if !(x >= 0 && x <= 1+FacetTolerance) {
				return fmt.Errorf("cosine %d: %s %g is not between 0 and 1: %w", i, name, x, ErrInput)
			}
		}
		return nil
	}
	for _, c := range []struct {
		name string
		v    []float64
	}{{"RS", s.RS}, {"RP", s.RP}, {"TS", s.TS}, {"TP", s.TP}} {
		if err := column(c.name, -1, c.v); err != nil {
			return err
		}
	}
	for j := range s.AS {
		if err := column("AS", j, s.AS[j]); err != nil {
			return err
		}
		if err := column("AP", j, s.AP[j]); err != nil {
			return err
		}
	}
	return nil
}
