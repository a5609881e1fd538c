package nk

import (
	"fmt"
	"math"
)

// TaucLorentz is the interband response of amorphous semiconductors and
// dielectrics, a Lorentz oscillator cut off by the Tauc gap:
//
//	eps2 = A E0 C (E - Eg)²/{[(E² - E0²)² + C² E²] E} for E > Eg, else 0
//
// with eps1 its exact Kramers-Kronig transform plus EpsInf. Source: G. E.
// Jellison and F. A. Modine, Appl. Phys. Lett. 69, 371 (1996), erratum 69, 2137
// (1996). The transform is evaluated by partial fractions in the poles of the
// oscillator (derived: see poles.go), which is the published closed form with
// the erratum's signs where that is defined (C < 2 E0) and holds beyond.
// Accuracy 1e-13 of |eps|, of the derivatives 1e-12 of the largest one; where E0
// is far below Eg (a tenth or less) the form cancels: 1e-9, and ErrRange when
// fewer than 8 digits of eps are left.
type TaucLorentz struct {
	A      float64 // amplitude, eV, >= 0
	E0     float64 // resonance energy, eV, > 0
	C      float64 // broadening, eV, > 0
	Eg     float64 // Tauc gap, eV, >= 0
	EpsInf float64 // background, dimensionless, >= 0
}

func (m *TaucLorentz) check() error {
	return checkLimits("Tauc-Lorentz", limit{"A", m.A, 0, false}, limit{"E0", m.E0, 0, true}, limit{"C", m.C, 0, true},
		limit{"Eg", m.Eg, 0, false}, limit{"EpsInf", m.EpsInf, 0, false})
}

// Permittivity returns eps; see Model.
func (m *TaucLorentz) Permittivity(grad []complex128, lambda float64) (complex128, error) {
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
	r := rational{e: e, low: m.Eg, e0: m.E0, g: m.C, eg: m.Eg}
	j := r.transform()
	k := 2 / math.Pi * m.E0 * m.C
	var s, sEg, sE0, sC float64 // eps2/A and its derivatives
	if d := e - m.Eg; d > 0 {
		p := 1 / lorentzDenominator(e, m.E0, m.C)
		s = m.E0 * m.C * d * d * p / e
		sEg = -2 * m.E0 * m.C * d * p / e
		sE0 = s * (1/m.E0 + 4*m.E0*(e-m.E0)*(e+m.E0)*p)
		sC = s * (1/m.C - 2*m.C*e*e*p)
	}
	if grad != nil {
		grad[0] = complex(k*j.value, s)
		grad[1] = complex(m.A*k*(j.e0+j.value/m.E0), m.A*sE0)
		grad[2] = complex(m.A*k*(j.g+j.value/m.C), m.A*sC)
		grad[3] = complex(m.A*k*j.eg, m.A*sEg)
		grad[4] = 1
	}
	eps := complex(m.EpsInf+m.A*k*j.value, m.A*s)
	if j.lost(m.A*k, eps) {
		return 0, fmt.Errorf("nk: Tauc-Lorentz: parameters too far apart for the closed form (E0 %g, C %g, Eg %g eV) at %g nm: %w", m.E0, m.C, m.Eg, lambda, ErrRange)
	}
	return settle("Tauc-Lorentz", grad, eps, lambda)
}

// lorentzDenominator returns (E² - E0²)² + G² E².
func lorentzDenominator(e, e0, g float64) float64 {
	d := (e - e0) * (e + e0)
	return d*d + g*g*e*e
}

// Index returns N = n + ik; see Model.
func (m *TaucLorentz) Index(lambda float64) (complex128, error) { return indexOf(m, lambda) }

// Gradient returns the derivatives of N; see Model.
func (m *TaucLorentz) Gradient(dst []complex128, lambda float64) ([]complex128, complex128, error) {
	return gradientOf(m, dst, lambda)
}

// NumParameters returns 5.
func (m *TaucLorentz) NumParameters() int { return 5 }

// Parameters returns A, E0, C, Eg, EpsInf.
func (m *TaucLorentz) Parameters() []Parameter {
	return []Parameter{{"A", "eV", m.A}, {"E0", "eV", m.E0}, {"C", "eV", m.C}, {"Eg", "eV", m.Eg}, {"EpsInf", "1", m.EpsInf}}
}

// SetParameters sets A, E0, C, Eg, EpsInf.
func (m *TaucLorentz) SetParameters(v []float64) error {
	if err := checkSet("Tauc-Lorentz", v, m.NumParameters()); err != nil {
		return err
	}
	t := TaucLorentz{v[0], v[1], v[2], v[3], v[4]}
	if err := t.check(); err != nil {
		return err
	}
	*m = t
	return nil
}
