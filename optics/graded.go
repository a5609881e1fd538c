package optics

import (
	"fmt"
	"math"
)

// Grade returns slices films of equal thickness that stand for a film whose
// index n + ik varies with the depth z (nm) from its lit face. Each slice takes
// the mean of the permittivity over its thickness, by two Gauss-Legendre nodes;
// the response then converges with the second power of the number of slices.
// dst is grown when it is too short. An error wraps [ErrInput].
func Grade(dst []Film, index func(z float64) complex128, thickness float64, slices int) ([]Film, error) {
	if err := checkThickness(thickness); err != nil {
		return nil, fmt.Errorf("optics: graded film: %w", err)
	}
	if slices < 1 || slices > maxSlices {
		return nil, fmt.Errorf("optics: graded film: %d slices, want 1 to %d: %w", slices, maxSlices, ErrInput)
	}
	if cap(dst) < slices {
		dst = make([]Film, slices)
	}
	dst = dst[:slices]
	h := thickness / float64(slices)
	offset := h / (2 * math.Sqrt(3))
	for i := range dst {
		mid := (float64(i) + 0.5) * h
		a, b := index(mid-offset), index(mid+offset)
		for _, n := range [2]complex128{a, b} {
			if err := checkIndex(n); err != nil {
				return nil, fmt.Errorf("optics: graded film: depth %g nm: %w", mid, err)
			}
		}
		eps := 0.5 * (a*a + b*b)
		re, im := rootUpper(real(eps), imag(eps))
		if a == b {
			re, im = real(a), imag(a)
		}
		dst[i] = Film{Index: complex(re, im), Thickness: h}
	}
	return dst, nil
}

// maxSlices bounds the work on a film that never settles.
const maxSlices = 1 << 14

// GradedFilm is a film whose index varies with depth, for [Solver.SolveGraded].
type GradedFilm struct {
	Index     func(z float64) complex128 // n + ik at the depth z (nm) from the lit face
	Thickness float64                    // nm
	Before    int                        // number of films of the stack that lie in front of it
}

// SolveGraded stores in dst the response of st with a graded film between its
// films. dst.A has one value more than st.Films: that of the graded film stands
// at position g.Before. The number of slices is doubled until the error of R, T
// and each A, estimated from the second-order convergence, is below tol; the
// function returns that estimate and the number of slices. An error wraps
// [ErrInput].
func (s *Solver) SolveGraded(dst *Response, st Stack, g GradedFilm, w Wave, tol float64) (slices int, bound float64, err error) {
	if !(tol > 0) {
		return 0, 0, fmt.Errorf("optics: graded film: tolerance %g is not positive: %w", tol, ErrInput)
	}
	if g.Before < 0 || g.Before > len(st.Films) {
		return 0, 0, fmt.Errorf("optics: graded film: %d films in front of it, the stack has %d: %w", g.Before, len(st.Films), ErrInput)
	}
	if g.Index == nil {
		return 0, 0, fmt.Errorf("optics: graded film: no index function: %w", ErrInput)
	}
	front, behind := st.Films[:g.Before], st.Films[g.Before:]
	for slices = 8; slices <= maxSlices; slices *= 2 {
		graded, err := Grade(s.slices, g.Index, g.Thickness, slices)
		if err != nil {
			return 0, 0, err
		}
		s.slices = graded
		s.films = append(append(append(s.films[:0], front...), graded...), behind...)
		st.Films = s.films
		if err := s.Solve(&s.sample, st, w); err != nil {
			return 0, 0, err
		}
		sum := 0.0
		for _, a := range s.sample.A[g.Before : g.Before+slices] {
			sum += a
		}
		s.last.set(dst, 1)
		dst.R, dst.T = s.sample.R, s.sample.T
		dst.A = append(append(append(dst.A[:0], s.sample.A[:g.Before]...), sum), s.sample.A[g.Before+slices:]...)
		if slices == 8 {
			continue
		}
		// The error falls by four with every doubling, so that what is left is a
		// third of the last change.
		if bound = dst.distance(&s.last) / 3; bound <= tol {
			return slices, bound, nil
		}
	}
	return 0, 0, fmt.Errorf("optics: graded film: not settled to %g with %d slices: %w", tol, maxSlices, ErrInput)
}
