package optics

import (
	"fmt"
	"math"
)

// Response is what a stack does with the light of one wave, as shares of the
// incident flux. R + T + sum(A) = 1 to rounding.
type Response struct {
	R float64   // reflectance, 0..1
	T float64   // transmittance into the back medium, 0..1
	A []float64 // absorptance of each film, 0..1, in the order of Stack.Films
}

// Solve returns reflectance, transmittance and the absorptance of every film
// of st for the wave w.
//
// Films marked Incoherent add intensities, all others amplitudes. The
// absorptance of a film is the net flux that it takes in; it is exactly 0
// where k = 0. An error wraps [ErrInput] and names the value.
//
// Solve allocates; in a loop use a [Solver].
func Solve(st Stack, w Wave) (Response, error) {
	var s Solver
	var r Response
	err := s.Solve(&r, st, w)
	return r, err
}

// Solver is the working memory for many evaluations. The zero value is ready.
// It must not be used by two goroutines at a time. In the steady state (no
// more films than before) its methods allocate nothing.
type Solver struct {
	block      block
	table      filmTable
	incoherent []bool
	media      [4]float64 // wavelength, front, back n and k

	films          []Film    // of averages and graded films
	slices         []Film    // of graded films
	sample, last   Response  // the same
	nodes, weights []float64 // the same
}

// Solve is the function [Solve] with the memory of s. dst.A is grown when it is
// too short and holds len(st.Films) values after a call without error.
func (s *Solver) Solve(dst *Response, st Stack, w Wave) error {
	mixed, err := st.validateFor(&w)
	if err != nil {
		return err
	}
	normal := w.Angle == 0
	ws, wp := w.Polarization.weights()
	if normal {
		ws, wp = 1, 0
	}
	if !mixed {
		s.block.solveSingle(dst, &st, &w, ws, wp)
		return nil
	}
	s.prepare(&st, &w, mixed, false)
	s.block.solve(&s.table, 1, normal)
	s.respond(dst, len(st.Films), ws, wp)
	return nil
}

// respond copies lane 0 of the solved block.
func (s *Solver) respond(r *Response, films int, ws, wp float64) {
	bl := &s.block
	r.A = grow(r.A, films)
	if wp == 0 {
		r.R, r.T = ws*bl.r[0][0], ws*bl.t[0][0]
		for j := range r.A {
			r.A[j] = ws * bl.a[0][j*lanes]
		}
		return
	}
	r.R = float64(ws*bl.r[0][0]) + float64(wp*bl.r[1][0])
	r.T = float64(ws*bl.t[0][0]) + float64(wp*bl.t[1][0])
	for j := range r.A {
		r.A[j] = float64(ws*bl.a[0][j*lanes]) + float64(wp*bl.a[1][j*lanes])
	}
}

// load checks the stack and the wave and copies them into lane 0. It reports
// whether the light is incident normally.
func (s *Solver) load(st Stack, w Wave, history bool) (normal bool, err error) {
	mixed, err := st.validateFor(&w)
	if err != nil {
		return false, err
	}
	s.prepare(&st, &w, mixed, history)
	return w.Angle == 0, nil
}

// prepare does what load does with a stack that has been checked.
func (s *Solver) prepare(st *Stack, w *Wave, mixed, history bool) {
	s.copyFilms(st.Films)
	bl := &s.block
	bl.history = history
	if mixed {
		bl.prepare(s.incoherent, len(st.Films))
	} else {
		bl.prepare(nil, len(st.Films))
	}
	s.media = [4]float64{w.Wavelength, real(st.Front), real(st.Back), imag(st.Back)}
	bl.load(w.Angle, s.media[:1], s.media[1:2], s.media[2:3], s.media[3:])
}

// validateFor reports the first value that is out of its range, and whether a
// film is incoherent.
func (s *Stack) validateFor(w *Wave) (mixed bool, err error) {
	if err := w.Validate(); err != nil {
		return false, err
	}
	mixed, usual := checkFilms(s.Films, w.Wavelength)
	if usual && imag(s.Front) == 0 && usualIndex(real(s.Front), 0) && usualIndex(real(s.Back), imag(s.Back)) {
		return mixed, nil
	}
	return mixed, s.validateAt(w.Wavelength)
}

// checkFilms reports whether a film is incoherent, and whether all films are
// coherent and well inside their limits.
func checkFilms(films []Film, wavelength float64) (mixed, usual bool) {
	path := MaxPhase / (2 * math.Pi) * wavelength
	usual = true
	for j := range films {
		f := &films[j]
		re, im := real(f.Index), imag(f.Index)
		mixed = mixed || f.Incoherent
		usual = usual && usualIndex(re, im) && f.Thickness >= 0 && (re+im)*f.Thickness <= path
	}
	return mixed, usual && !mixed
}

// copyFilms fills the table and the list of incoherent films.
func (s *Solver) copyFilms(films []Film) {
	t, n := &s.table, len(films)
	t.n, t.k, t.d = grow(t.n, n), grow(t.k, n), grow(t.d, n)
	t.stride, t.offset = 1, 0
	if cap(s.incoherent) < n {
		s.incoherent = make([]bool, n)
	}
	s.incoherent = s.incoherent[:n]
	for j, f := range films {
		t.n[j], t.k[j], t.d[j], s.incoherent[j] = real(f.Index), imag(f.Index), f.Thickness, f.Incoherent
	}
}

// validateAt reports the first value of the stack that is out of its range at
// the wavelength.
func (s *Stack) validateAt(wavelength float64) error {
	if err := s.Validate(); err != nil {
		return err
	}
	for j, f := range s.Films {
		if err := checkPhase(f.Index, f.Thickness, wavelength, f.Incoherent); err != nil {
			return fmt.Errorf("optics: film %d: %w", j, err)
		}
	}
	return nil
}

// usualIndex reports whether an index is well inside its limits, so that
// checkIndex need not be asked: the modulus lies between (n+k)/√2 and n+k.
func usualIndex(n, k float64) bool {
	return n >= 0 && k >= 0 && n+k >= 2*MinIndex && n+k <= MaxIndex
}
