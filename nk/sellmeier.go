package nk

import "fmt"

// Sellmeier is the index of a transparent material as a sum of undamped
// resonances, lambda in µm as the coefficients are published:
//
//	n² = Offset + sum of B[i] lambda²/(lambda² - C[i]²)
//
// Source: W. Sellmeier, Ann. Phys. 219, 272 (1871). The published constant is
// mostly 1. B and C must have the same length (ErrInput). Between two
// resonances far from the transparent range n² may be negative: ErrRange.
type Sellmeier struct {
	Offset float64   // dimensionless, 1 in the usual form
	B      []float64 // dimensionless
	C      []float64 // µm, >= 0
}

func (m *Sellmeier) check() error {
	if len(m.B) != len(m.C) {
		return fmt.Errorf("nk: Sellmeier: %d values B and %d values C: %w", len(m.B), len(m.C), ErrInput)
	}
	if err := checkLimits("Sellmeier", limit{"Offset", m.Offset, anyReal, false}); err != nil {
		return err
	}
	for i := range m.B {
		if err := checkLimits("Sellmeier", limit{"B", m.B[i], anyReal, false}, limit{"C", m.C[i], 0, false}); err != nil {
			return err
		}
	}
	return nil
}

// Permittivity returns n²; see Model.
func (m *Sellmeier) Permittivity(grad []complex128, lambda float64) (complex128, error) {
	if _, err := photonEnergy(lambda); err != nil {
		return 0, err
	}
	if err := m.check(); err != nil {
		return 0, err
	}
	if err := checkGrad(grad, m.NumParameters()); err != nil {
		return 0, err
	}
	um := lambda / nmPerUM
	eps := m.Offset
	if grad != nil {
		grad[0] = 1
	}
	for i, b := range m.B {
		q := m.C[i] / um // 1/(1 - q²) does not overflow at long wavelengths
		t := 1 / ((1 - q) * (1 + q))
		eps += b * t
		if grad != nil {
			grad[1+2*i] = complex(t, 0)
			grad[2+2*i] = complex(2*b*q*t*t/um, 0)
		}
	}
	if eps < 0 {
		return 0, fmt.Errorf("nk: Sellmeier: n² = %g at %g nm: %w", eps, lambda, ErrRange)
	}
	return settle("Sellmeier", grad, complex(eps, 0), lambda)
}

// Index returns N = n, k = 0; see Model.
func (m *Sellmeier) Index(lambda float64) (complex128, error) { return indexOf(m, lambda) }

// Gradient returns the derivatives of N; see Model.
func (m *Sellmeier) Gradient(dst []complex128, lambda float64) ([]complex128, complex128, error) {
	return gradientOf(m, dst, lambda)
}

// NumParameters returns 1 + 2 len(B).
func (m *Sellmeier) NumParameters() int { return 1 + 2*len(m.B) }

// Parameters returns Offset, B[0], C[0], B[1], C[1], ...
func (m *Sellmeier) Parameters() []Parameter {
	p := []Parameter{{"Offset", "1", m.Offset}}
	for i := range min(len(m.B), len(m.C)) {
		p = append(p, Parameter{fmt.Sprintf("B[%d]", i), "1", m.B[i]}, Parameter{fmt.Sprintf("C[%d]", i), "µm", m.C[i]})
	}
	return p
}

// SetParameters sets Offset, B[0], C[0], B[1], C[1], ...; the number of terms
// stays.
func (m *Sellmeier) SetParameters(v []float64) error {
	if err := checkSet("Sellmeier", v, m.NumParameters()); err != nil {
		return err
	}
	if err := checkLimits("Sellmeier", limit{"Offset", v[0], anyReal, false}); err != nil {
		return err
	}
	if len(m.B) != len(m.C) {
		return m.check()
	}
	for i := range m.B {
		if err := checkLimits("Sellmeier", limit{"B", v[1+2*i], anyReal, false}, limit{"C", v[2+2*i], 0, false}); err != nil {
			return err
		}
	}
	m.Offset = v[0]
	for i := range m.B {
		m.B[i], m.C[i] = v[1+2*i], v[2+2*i]
	}
	return nil
}
