package lighttrap

import (
	"fmt"
	"math"
	"math/cmplx"
)

// FacetResponse is what the films on a facet do with one polarisation at one
// angle.
type FacetResponse struct {
	R, T float64   // reflectance and transmittance
	A    []float64 // absorptance of each film, in the order in which the light meets them

	// Amplitude coefficients of the electric field, rp = -rs at normal incidence;
	// only their phases count. 0 where they are not known.
	Reflected, Transmitted complex128
}

// FillFacet returns the table of a facet of a wafer of index n in a medium of
// index outside (real parts) from a function that solves its films at one angle,
// for light from outside and from the wafer. intervals sets the number of
// angles, see [FacetCosines]; 32 keep the error of thin films below 1e-3 of the
// incident light. Grazing light counts as reflected.
//
// Behind an opaque medium, for example a rear metal, only light from the wafer is
// solved, and what the films transmit ends there.
//
// Errors are those of solve, or wrap [ErrInput].
func FillFacet(outside, n float64, intervals int, opaque bool, solve func(fromWafer bool, cos float64) (s, p FacetResponse, err error)) (FacetTable, error) {
	var t FacetTable
	if opaque {
		outside = n
	}
	for i, side := range []*FacetSide{&t.Inside, &t.Outside} {
		fromWafer := i == 0
		n1, n2 := outside, n
		if fromWafer {
			n1, n2 = n, outside
		}
		cos := FacetCosines(n1, n2, intervals)
		if cos == nil {
			return t, fmt.Errorf("lighttrap: facet: indices %g and %g, %d intervals: %w", outside, n, intervals, ErrInput)
		}
		if opaque && !fromWafer {
			*side = mirrorSide(len(t.Inside.AS))
			continue
		}
		if err := side.fill(cos, fromWafer, solve); err != nil {
			return t, err
		}
	}
	return t, nil
}

// fill solves one side at the cosines.
func (f *FacetSide) fill(cos []float64, fromWafer bool, solve func(fromWafer bool, cos float64) (s, p FacetResponse, err error)) error {
	f.Cos = cos
	for i := len(cos) - 1; i >= 0; i-- { // from normal incidence, which tells the number of films
		var s, p FacetResponse
		if cos[i] > 0 {
			var err error
			if s, p, err = solve(fromWafer, cos[i]); err != nil {
				return fmt.Errorf("lighttrap: facet at cosine %g: %w", cos[i], err)
			}
		} else {
			s, p = FacetResponse{R: 1, A: make([]float64, len(f.AS))}, FacetResponse{R: 1, A: make([]float64, len(f.AS))}
		}
		if f.RS == nil {
			f.allocate(len(cos), len(s.A))
		}
		if len(s.A) != len(f.AS) || len(p.A) != len(f.AS) {
			return fmt.Errorf("lighttrap: facet at cosine %g: %d and %d films, want %d: %w", cos[i], len(s.A), len(p.A), len(f.AS), ErrInput)
		}
		f.RS[i], f.RP[i], f.TS[i], f.TP[i] = s.R, p.R, s.T, p.T
		for j := range f.AS {
			// The table lists the films from outside.
			from := j
			if fromWafer {
				from = len(f.AS) - 1 - j
			}
			f.AS[j][i], f.AP[j][i] = s.A[from], p.A[from]
		}
		f.Phase[i] = cmplx.Phase(s.Reflected * cmplx.Conj(p.Reflected))
		f.TransmittedPhase[i] = cmplx.Phase(s.Transmitted * cmplx.Conj(p.Transmitted))
	}
	unwrap(f.Phase)
	unwrap(f.TransmittedPhase)
	return nil
}

// unwrap takes the jumps of 2π out of phases that are interpolated.
func unwrap(phase []float64) {
	for i := len(phase) - 2; i >= 0; i-- {
		phase[i] -= 2 * math.Pi * math.Round((phase[i]-phase[i+1])/(2*math.Pi))
	}
}

func (f *FacetSide) allocate(n, films int) {
	f.RS, f.RP, f.TS, f.TP = make([]float64, n), make([]float64, n), make([]float64, n), make([]float64, n)
	f.Phase, f.TransmittedPhase = make([]float64, n), make([]float64, n)
	for range films {
		f.AS, f.AP = append(f.AS, make([]float64, n)), append(f.AP, make([]float64, n))
	}
}

// mirrorSide is the side of an opaque medium, which no light meets.
func mirrorSide(films int) FacetSide {
	f := FacetSide{Cos: []float64{0, 1}}
	f.allocate(2, films)
	f.RS[0], f.RS[1], f.RP[0], f.RP[1] = 1, 1, 1, 1
	f.Phase, f.TransmittedPhase = nil, nil
	return f
}
