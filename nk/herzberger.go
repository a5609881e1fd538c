package nk

// Herzberger is the index of a transparent crystal or glass as a polynomial in
// lambda² and L = 1/(lambda² - Pole), lambda in µm:
//
//	n = A + B L + C L² + D lambda² + E lambda⁴
//
// Source: M. Herzberger, Opt. Acta 6, 197 (1959) (from memory). With Pole = 0
// it is a Cauchy series continued to the infrared.
type Herzberger struct {
	A    float64 // dimensionless
	B    float64 // µm²
	C    float64 // µm⁴
	D    float64 // 1/µm²
	E    float64 // 1/µm⁴
	Pole float64 // µm², >= 0
}

func (m *Herzberger) check() error {
	return checkLimits("Herzberger", limit{"A", m.A, anyReal, false}, limit{"B", m.B, anyReal, false}, limit{"C", m.C, anyReal, false},
		limit{"D", m.D, anyReal, false}, limit{"E", m.E, anyReal, false}, limit{"Pole", m.Pole, 0, false})
}

func (m *Herzberger) index(grad []complex128, lambda float64) (complex128, error) {
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
	x := um * um
	l := 1 / (x - m.Pole)
	if grad != nil {
		grad[0], grad[1], grad[2] = 1, complex(l, 0), complex(l*l, 0)
		grad[3], grad[4] = complex(x, 0), complex(x*x, 0)
		grad[5] = complex(l*l*(m.B+2*m.C*l), 0)
	}
	return settleIndex("Herzberger", grad, complex(m.A+l*(m.B+l*m.C)+x*(m.D+x*m.E), 0), lambda)
}

// Permittivity returns N²; see Model.
func (m *Herzberger) Permittivity(grad []complex128, lambda float64) (complex128, error) {
	n, err := m.index(grad, lambda)
	if err != nil {
		return 0, err
	}
	return squared("Herzberger", grad, n, lambda)
}

// Index returns N = n, k = 0; see Model.
func (m *Herzberger) Index(lambda float64) (complex128, error) { return m.index(nil, lambda) }

// Gradient returns the derivatives of N; see Model.
func (m *Herzberger) Gradient(dst []complex128, lambda float64) ([]complex128, complex128, error) {
	if dst == nil {
		dst = make([]complex128, m.NumParameters())
	}
	n, err := m.index(dst, lambda)
	return dst, n, err
}

// NumParameters returns 6.
func (m *Herzberger) NumParameters() int { return 6 }

// Parameters returns A, B, C, D, E, Pole.
func (m *Herzberger) Parameters() []Parameter {
	return []Parameter{{"A", "1", m.A}, {"B", "µm²", m.B}, {"C", "µm⁴", m.C}, {"D", "µm⁻²", m.D}, {"E", "µm⁻⁴", m.E}, {"Pole", "µm²", m.Pole}}
}

// SetParameters sets A, B, C, D, E, Pole.
func (m *Herzberger) SetParameters(v []float64) error {
	if err := checkSet("Herzberger", v, m.NumParameters()); err != nil {
		return err
	}
	t := Herzberger{v[0], v[1], v[2], v[3], v[4], v[5]}
	if err := t.check(); err != nil {
		return err
	}
	*m = t
	return nil
}
