package nk

import "math"

// Cauchy is the index of a transparent film over the squared wavelength,
// optionally with an exponential tail of absorption:
//
//	n = A + B/lambda² + C/lambda⁴ (lambda in µm), k = K exp[(E - Edge)/Width]
//
// Source: A. L. Cauchy (1836) for n; F. Urbach, Phys. Rev. 92, 1324 (1953) for
// the exponential edge. The zero value of K, Edge and Width means k = 0; with
// K > 0 a Width > 0 is needed. K and Edge say the same thing twice (the tail
// shifted along the energy), so a fit must hold one of them. The real part does
// not follow from the tail by Kramers-Kronig; Urbach does that.
type Cauchy struct {
	A     float64 // dimensionless
	B     float64 // µm²
	C     float64 // µm⁴
	K     float64 // extinction coefficient at Edge, >= 0
	Edge  float64 // eV
	Width float64 // Urbach energy, eV, >= 0
}

func (m *Cauchy) check() error {
	return checkLimits("Cauchy", limit{"A", m.A, anyReal, false}, limit{"B", m.B, anyReal, false}, limit{"C", m.C, anyReal, false},
		limit{"K", m.K, 0, false}, limit{"Edge", m.Edge, anyReal, false}, limit{"Width", m.Width, 0, m.K > 0})
}

// index is the formula itself, with the derivatives of N in grad.
func (m *Cauchy) index(grad []complex128, lambda float64) (complex128, error) {
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
	um := lambda / nmPerUM
	x := 1 / (um * um)
	var tail, k float64
	if m.Width > 0 {
		tail = math.Exp((e - m.Edge) / m.Width)
		if m.K > 0 {
			k = m.K * tail
		}
	}
	if grad != nil {
		grad[0], grad[1], grad[2] = 1, complex(x, 0), complex(x*x, 0)
		grad[3], grad[4], grad[5] = complex(0, tail), 0, 0
		if k > 0 {
			grad[4] = complex(0, -k/m.Width)
			grad[5] = complex(0, -k*(e-m.Edge)/m.Width/m.Width)
		}
	}
	return settleIndex("Cauchy", grad, complex(m.A+x*(m.B+x*m.C), k), lambda)
}

// Permittivity returns N²; see Model.
func (m *Cauchy) Permittivity(grad []complex128, lambda float64) (complex128, error) {
	n, err := m.index(grad, lambda)
	if err != nil {
		return 0, err
	}
	return squared("Cauchy", grad, n, lambda)
}

// Index returns N = n + ik; see Model.
func (m *Cauchy) Index(lambda float64) (complex128, error) { return m.index(nil, lambda) }

// Gradient returns the derivatives of N; see Model.
func (m *Cauchy) Gradient(dst []complex128, lambda float64) ([]complex128, complex128, error) {
	if dst == nil {
		dst = make([]complex128, m.NumParameters())
	}
	n, err := m.index(dst, lambda)
	return dst, n, err
}

// NumParameters returns 6.
func (m *Cauchy) NumParameters() int { return 6 }

// Parameters returns A, B, C, K, Edge, Width.
func (m *Cauchy) Parameters() []Parameter {
	return []Parameter{{"A", "1", m.A}, {"B", "µm²", m.B}, {"C", "µm⁴", m.C}, {"K", "1", m.K}, {"Edge", "eV", m.Edge}, {"Width", "eV", m.Width}}
}

// SetParameters sets A, B, C, K, Edge, Width.
func (m *Cauchy) SetParameters(v []float64) error {
	if err := checkSet("Cauchy", v, m.NumParameters()); err != nil {
		return err
	}
	t := Cauchy{v[0], v[1], v[2], v[3], v[4], v[5]}
	if err := t.check(); err != nil {
		return err
	}
	*m = t
	return nil
}
