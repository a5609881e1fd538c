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

	films          []Film    // of averages and graded films
	slices         []Film    // of graded films
	sample, last   Response  // the same
	nodes, weights []float64 // the same
}

// Solve is the function [Solve] with the memory of s. dst.A is grown when it is
// too short and holds len(st.Films) values after a call without error.
func (s *Solver) Solve(dst *Response, st Stack, w Wave) error {
	normal, err := s.load(st, w, false)
	if err != nil {
		return err
	}
	s.block.solve(&s.table, 1, normal)
	ws, wp := w.Polarization.weights()
	if normal {
		ws, wp = 1, 0
	}
	bl := &s.block
	dst.A = grow(dst.A, len(st.Films))
	dst.R = bl.mean(&bl.r, ws, wp)
	dst.T = bl.mean(&bl.t, ws, wp)
	for j := range dst.A {
		a := ws * bl.a[0][j*lanes]
		if wp > 0 {
			a += wp * bl.a[1][j*lanes]
		}
		dst.A[j] = a
	}
	return nil
}

// mean weighs the polarisations of lane 0.
func (bl *block) mean(v *[2][lanes]float64, ws, wp float64) float64 {
	m := ws * v[0][0]
	if wp > 0 {
		m += wp * v[1][0]
	}
	return m
}

// load checks the stack and the wave and copies them into lane 0. It reports
// whether the light is incident normally.
func (s *Solver) load(st Stack, w Wave, history bool) (normal bool, err error) {
	if err := w.Validate(); err != nil {
		return false, err
	}
	if err := st.Validate(); err != nil {
		return false, err
	}
	n := len(st.Films)
	s.table.n, s.table.k = grow(s.table.n, n), grow(s.table.k, n)
	s.table.d = grow(s.table.d, n)
	s.table.stride, s.table.offset = 1, 0
	if cap(s.incoherent) < n {
		s.incoherent = make([]bool, n)
	}
	s.incoherent = s.incoherent[:n]
	for j, f := range st.Films {
		if err := checkPhase(f.Index, f.Thickness, w.Wavelength, f.Incoherent); err != nil {
			return false, fmt.Errorf("optics: film %d: %w", j, err)
		}
		s.table.n[j], s.table.k[j], s.table.d[j] = real(f.Index), imag(f.Index), f.Thickness
		s.incoherent[j] = f.Incoherent
	}
	bl := &s.block
	bl.history = history
	bl.prepare(s.incoherent, n)
	normal = w.Angle == 0
	bl.setAngle(w.Angle)
	bl.setWave(0, w.Wavelength, real(st.Front), math.Cos(w.Angle))
	bl.setBack(0, real(st.Back), imag(st.Back))
	return normal, nil
}

// setAngle stores what all lanes share.
func (bl *block) setAngle(angle float64) { bl.wave.sinSq = sinSquared(angle) }

// setWave fills lane i of the wave and of the front medium.
func (bl *block) setWave(i int, wavelength, n0, cos float64) {
	q0 := n0 * cos
	w := &bl.wave
	w.wavelength[i], w.k0[i], w.n0[i], w.q0sq[i] = wavelength, 2*math.Pi/wavelength, n0, q0*q0
	bl.front.qr[i], bl.front.qi[i], bl.front.er[i], bl.front.ei[i] = q0, 0, n0*n0, 0
}

// nearCritical is the share of n0² below which q² of the back medium has lost
// digits that the transmittance would show.
const nearCritical = 1.0 / 16

func (bl *block) setBack(i int, n, k float64) {
	n0 := bl.wave.n0[i]
	bl.back.set(i, n, k, n0, bl.wave.q0sq[i])
	qr, qi := bl.back.qr[i], bl.back.qi[i]
	if qr*qr+qi*qi < nearCritical*n0*n0 {
		kr, ki := squareNormal(n, k, n0, bl.wave.sinSq).hi, 2*n*k
		bl.back.qr[i], bl.back.qi[i] = rootUpper(kr, ki)
	}
}
