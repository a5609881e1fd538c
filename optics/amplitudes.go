package optics

import (
	"fmt"
	"math"
	"math/cmplx"
)

// Amplitudes are the complex coefficients of a coherent stack, ratios of
// electric fields at its front and back faces. RP has the sign of ellipsometry:
// RP = -RS at normal incidence. Phases follow exp(-iωt).
type Amplitudes struct {
	RS, RP complex128 // reflection
	TS, TP complex128 // transmission
}

// Ellipsometric returns the angles ψ in [0, π/2] and Δ in (-π, π] (rad) with
// tan ψ exp(-iΔ) = RP/RS. The sign of Δ is that of the usual tables, which
// write the time dependence as exp(+iωt): bare absorbing substrates have
// 0 <= Δ <= π.
//
// Source: R. M. A. Azzam, N. M. Bashara, Ellipsometry and Polarized Light
// (1977), sec. 4.2; from memory.
func (a Amplitudes) Ellipsometric() (psi, delta float64) {
	psi = math.Atan2(cmplx.Abs(a.RP), cmplx.Abs(a.RS))
	delta = -cmplx.Phase(a.RP * cmplx.Conj(a.RS))
	if delta <= -math.Pi {
		delta = math.Pi
	}
	return psi, delta
}

// SolveAmplitudes returns the amplitude coefficients of a coherent stack. It
// ignores w.Polarization. A stack with an incoherent film has no phase: an
// error that wraps [ErrInput].
func SolveAmplitudes(st Stack, w Wave) (Amplitudes, error) {
	var s Solver
	return s.Amplitudes(st, w)
}

// Amplitudes is [SolveAmplitudes] with the memory of s.
func (s *Solver) Amplitudes(st Stack, w Wave) (Amplitudes, error) {
	for j, f := range st.Films {
		if f.Incoherent {
			return Amplitudes{}, fmt.Errorf("optics: film %d is incoherent: its stack has no amplitude coefficients: %w", j, ErrInput)
		}
	}
	normal, err := s.load(st, w, true)
	if err != nil {
		return Amplitudes{}, err
	}
	bl := &s.block
	bl.solve(&s.table, 1, normal)
	g := &bl.forward[0]
	var a Amplitudes
	a.RS = complex(g.rr[0][0], g.ri[0][0])
	f := &g.fields[0]
	q0 := bl.front.qr[0]
	pass := math.Sqrt(g.passed(0))
	a.TS = complex(2*q0*pass, 0) / complex(q0*f[0].ur[0]+f[0].vr[0], q0*f[0].ui[0]+f[0].vi[0])
	if normal {
		a.RP, a.TP = -a.RS, a.TS
		return a, nil
	}
	a.RP = -complex(g.rr[1][0], g.ri[1][0])
	n0 := real(st.Front)
	pass = math.Sqrt(g.passed(1))
	// derived: the p fields start at the back with E = q, and E of a p wave is
	// its tangential part over cosθ.
	a.TP = complex(2*n0*q0*pass, 0) * st.Back /
		complex(n0*n0*f[1].ur[0]+q0*f[1].vr[0], n0*n0*f[1].ui[0]+q0*f[1].vi[0])
	return a, nil
}

// passed returns the product of the power factors taken out of the films, for
// polarisation p in lane 0.
func (g *group) passed(p int) float64 {
	v := 1.0
	for j := range g.count {
		v *= g.e[j*lanes]
		if g.scaled[j] {
			v *= g.scale[(2*j+p)*lanes]
		}
	}
	return v
}
