package lighttrap

import "fmt"

// FacetPoint is what the films of a facet do at one angle.
type FacetPoint struct {
	RS, RP, TS, TP          float64   // 0..1
	AS, AP                  []float64 // absorptance of the films, listed from outside on both sides
	Phase, TransmittedPhase float64   // rad, as in [FacetSide]
}

// TabulateFacet calls at for each cosine but grazing incidence, where everything
// is reflected, and collects one side of a [FacetTable]. cos is ascending from 0
// to 1, see [FacetCosines].
//
// Errors: that of at with the cosine, and [ErrInput] where the number of films changes.
func TabulateFacet(cos []float64, at func(cos float64) (FacetPoint, error)) (FacetSide, error) {
	var s FacetSide
	n := len(cos)
	s.Cos = append(s.Cos, cos...)
	for _, column := range []*[]float64{&s.RS, &s.RP, &s.TS, &s.TP, &s.Phase, &s.TransmittedPhase} {
		*column = make([]float64, n)
	}
	// From the last angle, which knows the number of films, to grazing incidence.
	for i := n - 1; i >= 0; i-- {
		if cos[i] == 0 && i < n-1 {
			s.RS[i], s.RP[i], s.Phase[i], s.TransmittedPhase[i] = 1, 1, s.Phase[i+1], s.TransmittedPhase[i+1]
			continue
		}
		p, err := at(cos[i])
		if err != nil {
			return FacetSide{}, fmt.Errorf("lighttrap: cosine %d: %g: %w", i, cos[i], err)
		}
		if i == n-1 {
			for range p.AS {
				s.AS, s.AP = append(s.AS, make([]float64, n)), append(s.AP, make([]float64, n))
			}
		}
		if len(p.AS) != len(s.AS) || len(p.AP) != len(s.AP) {
			return FacetSide{}, fmt.Errorf("lighttrap: cosine %d: %d and %d films, %d before: %w", i, len(p.AS), len(p.AP), len(s.AS), ErrInput)
		}
		s.RS[i], s.RP[i], s.TS[i], s.TP[i] = p.RS, p.RP, p.TS, p.TP
		s.Phase[i], s.TransmittedPhase[i] = p.Phase, p.TransmittedPhase
		for j := range s.AS {
			s.AS[j][i], s.AP[j][i] = p.AS[j], p.AP[j]
		}
	}
	return s, nil
}
