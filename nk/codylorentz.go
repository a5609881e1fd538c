package nk

import (
	"fmt"
	"math"
)

// CodyLorentz is the interband response of amorphous semiconductors with a gap
// of constant dipole matrix element and an exponential (Urbach) tail:
//
//	E > Et:  eps2 = (E - Eg)²/[(E - Eg)² + Ep²] A E0 Gamma E/[(E² - E0²)² + Gamma² E²]
//	E <= Et: eps2 = (E1/E) exp[(E - Et)/Eu], E1 = Et eps2(Et)
//
// with eps1 its exact Kramers-Kronig transform plus EpsInf. Source: A. S.
// Ferlauto et al., J. Appl. Phys. 92, 2424 (2002). The transform is a closed
// form (derived): partial fractions above Et (poles.go), exponential integrals
// below. Accuracy about 1e-13 of |eps| (ErrRange when fewer than 8 digits are left,
// as with parameters many decades apart); the derivatives have 1e-10 of the largest
// one where Eg + iEp nearly meets the oscillator's pole (Ep near Gamma/2 and Eg²
// near E0² - Gamma²/4), else 1e-12.
// The slope of eps2 jumps at Et, so that the derivative of eps1 with respect to
// Et has no finite value exactly at E = Et (ErrRange).
type CodyLorentz struct {
	A      float64 // amplitude, eV, >= 0
	E0     float64 // resonance energy, eV, > 0
	Gamma  float64 // broadening, eV, > 0
	Eg     float64 // gap, eV, >= 0
	Ep     float64 // distance from the gap where the Lorentz shape takes over, eV, > 0
	Et     float64 // end of the tail, eV, >= Eg and > 0
	Eu     float64 // Urbach energy, eV, > 0
	EpsInf float64 // background, dimensionless, >= 0
}

func (m *CodyLorentz) check() error {
	if err := checkLimits("Cody-Lorentz", limit{"A", m.A, 0, false}, limit{"E0", m.E0, 0, true}, limit{"Gamma", m.Gamma, 0, true},
		limit{"Eg", m.Eg, 0, false}, limit{"Ep", m.Ep, 0, true}, limit{"Et", m.Et, 0, true}, limit{"Eu", m.Eu, 0, true},
		limit{"EpsInf", m.EpsInf, 0, false}); err != nil {
		return err
	}
	if m.Et < m.Eg {
		return fmt.Errorf("nk: Cody-Lorentz: end of the tail Et %g eV below the gap Eg %g eV: %w", m.Et, m.Eg, ErrInput)
	}
	return nil
}

// codyShape is f = E eps2/A of the formula above Et, with its derivatives.
type codyShape struct{ value, e, eg, ep, e0, g float64 }

func (m *CodyLorentz) shape(e float64) codyShape {
	p := 1 / lorentzDenominator(e, m.E0, m.Gamma)
	h, hEg, hEp := codyFactor(e-m.Eg, m.Ep)
	a := m.E0 * m.Gamma * e * e * p
	d2 := (e - m.E0) * (e + m.E0)
	f := a * h
	return codyShape{
		value: f,
		e:     a*(2*h/e-hEg) - f*(4*d2+2*m.Gamma*m.Gamma)*e*p,
		eg:    a * hEg,
		ep:    a * hEp,
		e0:    f * (1/m.E0 + 4*m.E0*d2*p),
		g:     f * (1/m.Gamma - 2*m.Gamma*e*e*p),
	}
}

// tailTransform returns the principal value T of the integral of
// exp[(x - Et)/Eu]/(x² - E²) from 0 to Et, and its derivative with respect to
// Eu. Derived from 5.1.2 of Abramowitz and Stegun; S(x) = exp(-x) Ei(x).
// At E = Et it leaves out log|Et - E|, see rational.logs.
func (m *CodyLorentz) tailTransform(e float64) (t, tEu float64) {
	first := eulerGamma - math.Log(m.Eu)
	if e != m.Et {
		first = scaledEi((m.Et - e) / m.Eu)
	}
	low := math.Exp(-m.Et / m.Eu)
	u := first - low*scaledEi(-e/m.Eu)
	v := scaledEi((m.Et+e)/m.Eu) - low*scaledEi(e/m.Eu)
	t = (u - v) / (2 * e)
	return t, -(v/m.Eu + (e-m.Et)/m.Eu*t) / m.Eu
}

// Permittivity returns eps; see Model.
func (m *CodyLorentz) Permittivity(grad []complex128, lambda float64) (complex128, error) {
	e, err := photonEnergy(lambda)
	if err != nil {
		return 0, err
	}
	if err := m.check(); err != nil {
		return 0, err
	}
	if err := checkGrad(grad, m.NumParameters()); err != nil {
		return 0, err
	}
	r := rational{e: e, low: m.Et, e0: m.E0, g: m.Gamma, eg: m.Eg, ep: m.Ep, cody: true}
	j := r.transform()
	k := m.E0 * m.Gamma
	edge := m.shape(m.Et)
	t, tEu := m.tailTransform(e)
	re := k*j.value + edge.value*t // (eps1 - EpsInf)/A, times pi/2
	s, w := edge, math.Exp((e-m.Et)/m.Eu)/e
	if e > m.Et {
		s, w = m.shape(e), 1/e
	}
	im := s.value * w
	if grad != nil {
		a := m.A * 2 / math.Pi
		grad[0] = complex(re*2/math.Pi, im)
		grad[1] = complex(a*(k*(j.e0+j.value/m.E0)+edge.e0*t), m.A*s.e0*w)
		grad[2] = complex(a*(k*(j.g+j.value/m.Gamma)+edge.g*t), m.A*s.g*w)
		grad[3] = complex(a*(k*j.eg+edge.eg*t), m.A*s.eg*w)
		grad[4] = complex(a*(k*j.ep+edge.ep*t), m.A*s.ep*w)
		// The moving border between both parts adds nothing: eps2 is continuous.
		slope := edge.e - edge.value/m.Eu
		grad[5], grad[6], grad[7] = complex(a*slope*t, 0), complex(a*edge.value*tEu, 0), 1
		if e == m.Et && slope != 0 {
			grad[5] = complex(math.Inf(1), 0)
		}
		if e <= m.Et {
			grad[5] += complex(0, m.A*slope*w)
			grad[6] += complex(0, -im*m.A*(e-m.Et)/m.Eu/m.Eu)
		}
	}
	eps := complex(m.EpsInf+m.A*re*2/math.Pi, m.A*im)
	if j.lost(m.A*k*2/math.Pi, eps) {
		return 0, fmt.Errorf("nk: Cody-Lorentz: parameters too far apart for the closed form (E0 %g, Gamma %g, Eg %g, Ep %g eV) at %g nm: %w", m.E0, m.Gamma, m.Eg, m.Ep, lambda, ErrRange)
	}
	return settle("Cody-Lorentz", grad, eps, lambda)
}

// Index returns N = n + ik; see Model.
func (m *CodyLorentz) Index(lambda float64) (complex128, error) { return indexOf(m, lambda) }

// Gradient returns the derivatives of N; see Model.
func (m *CodyLorentz) Gradient(dst []complex128, lambda float64) ([]complex128, complex128, error) {
	return gradientOf(m, dst, lambda)
}

// NumParameters returns 8.
func (m *CodyLorentz) NumParameters() int { return 8 }

// Parameters returns A, E0, Gamma, Eg, Ep, Et, Eu, EpsInf.
func (m *CodyLorentz) Parameters() []Parameter {
	return []Parameter{{"A", "eV", m.A}, {"E0", "eV", m.E0}, {"Gamma", "eV", m.Gamma}, {"Eg", "eV", m.Eg}, {"Ep", "eV", m.Ep},
		{"Et", "eV", m.Et}, {"Eu", "eV", m.Eu}, {"EpsInf", "1", m.EpsInf}}
}

// SetParameters sets A, E0, Gamma, Eg, Ep, Et, Eu, EpsInf.
func (m *CodyLorentz) SetParameters(v []float64) error {
	if err := checkSet("Cody-Lorentz", v, m.NumParameters()); err != nil {
		return err
	}
	t := CodyLorentz{v[0], v[1], v[2], v[3], v[4], v[5], v[6], v[7]}
	if err := t.check(); err != nil {
		return err
	}
	*m = t
	return nil
}
