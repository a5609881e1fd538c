package nk

import (
	"fmt"
	"math"
)

// ForouhiBloomer is the interband index of amorphous semiconductors and
// dielectrics with one term:
//
//	k = A (E - Eg)²/(E² - B E + C) for E > Eg, else 0
//	n = NInf + (B0 E + C0)/(E² - B E + C)
//	B0 = (A/Q)(-B²/2 + Eg B - Eg² + C), C0 = (A/Q)[(Eg² + C) B/2 - 2 Eg C], Q = sqrt(4C - B²)/2
//
// Source: A. R. Forouhi and I. Bloomer, Phys. Rev. B 34, 7018 (1986). The
// paper's n is the transform of its k over all energies, negative ones and
// those below Eg included, so n and k agree with Kramers-Kronig only roughly;
// k = 0 below Eg is common practice. n is not a free function of the
// parameters that stays positive: ErrRange where it does not.
type ForouhiBloomer struct {
	A    float64 // dimensionless, >= 0
	B    float64 // eV
	C    float64 // eV², 4C > B²
	Eg   float64 // gap, eV, >= 0
	NInf float64 // index at high energy, dimensionless, >= 0
}

func (m *ForouhiBloomer) check() error {
	if err := checkLimits("Forouhi-Bloomer", limit{"A", m.A, 0, false}, limit{"B", m.B, anyReal, false}, limit{"C", m.C, 0, true},
		limit{"Eg", m.Eg, 0, false}, limit{"NInf", m.NInf, 0, false}); err != nil {
		return err
	}
	if !(4*m.C > m.B*m.B) {
		return fmt.Errorf("nk: Forouhi-Bloomer: 4C - B² is not positive with C %g eV² and B %g eV: %w", m.C, m.B, ErrInput)
	}
	return nil
}

func (m *ForouhiBloomer) index(grad []complex128, lambda float64) (complex128, error) {
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
	q := math.Sqrt(4*m.C-m.B*m.B) / 2
	t := 1 / (e*(e-m.B) + m.C)
	// b and c are B0 Q/A and C0 Q/A.
	b := m.Eg*(m.B-m.Eg) + m.C - m.B*m.B/2
	c := (m.Eg*m.Eg+m.C)*m.B/2 - 2*m.Eg*m.C
	g := (b*e + c) * t / q // (n - NInf)/A
	var d, h float64       // E - Eg above the gap, k/A
	if e > m.Eg {
		d = e - m.Eg
		h = d * d * t
	}
	if grad != nil {
		dqB, dqC := -m.B/(4*q), 1/(2*q) // derivatives of Q
		bB, bC, bEg := m.Eg-m.B, 1.0, m.B-2*m.Eg
		cB, cC, cEg := (m.Eg*m.Eg+m.C)/2, m.B/2-2*m.Eg, m.Eg*m.B-2*m.C
		grad[0] = complex(g, h)
		grad[1] = complex(m.A*((bB*e+cB)*t/q+g*(e*t-dqB/q)), m.A*h*e*t)
		grad[2] = complex(m.A*((bC*e+cC)*t/q-g*(t+dqC/q)), -m.A*h*t)
		grad[3] = complex(m.A*(bEg*e+cEg)*t/q, -2*m.A*d*t)
		grad[4] = 1
	}
	return settleIndex("Forouhi-Bloomer", grad, complex(m.NInf+m.A*g, m.A*h), lambda)
}

// Permittivity returns N²; see Model.
func (m *ForouhiBloomer) Permittivity(grad []complex128, lambda float64) (complex128, error) {
	n, err := m.index(grad, lambda)
	if err != nil {
		return 0, err
	}
	return squared("Forouhi-Bloomer", grad, n, lambda)
}

// Index returns N = n + ik; see Model.
func (m *ForouhiBloomer) Index(lambda float64) (complex128, error) { return m.index(nil, lambda) }

// Gradient returns the derivatives of N; see Model.
func (m *ForouhiBloomer) Gradient(dst []complex128, lambda float64) ([]complex128, complex128, error) {
	if dst == nil {
		dst = make([]complex128, m.NumParameters())
	}
	n, err := m.index(dst, lambda)
	return dst, n, err
}

// NumParameters returns 5.
func (m *ForouhiBloomer) NumParameters() int { return 5 }

// Parameters returns A, B, C, Eg, NInf.
func (m *ForouhiBloomer) Parameters() []Parameter {
	return []Parameter{{"A", "1", m.A}, {"B", "eV", m.B}, {"C", "eV²", m.C}, {"Eg", "eV", m.Eg}, {"NInf", "1", m.NInf}}
}

// SetParameters sets A, B, C, Eg, NInf.
func (m *ForouhiBloomer) SetParameters(v []float64) error {
	if err := checkSet("Forouhi-Bloomer", v, m.NumParameters()); err != nil {
		return err
	}
	t := ForouhiBloomer{v[0], v[1], v[2], v[3], v[4]}
	if err := t.check(); err != nil {
		return err
	}
	*m = t
	return nil
}
