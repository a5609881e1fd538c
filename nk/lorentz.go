package nk

// Lorentz is one damped oscillator over a constant background:
//
//	eps = EpsInf + Strength E0²/(E0² - E² - i E Damping)
//
// so that Strength is what the oscillator adds to eps at E = 0. Several
// oscillators are a Sum, with EpsInf zero in all but one.
// Source: H. A. Lorentz, The Theory of Electrons (1909).
type Lorentz struct {
	EpsInf   float64 // background, dimensionless, >= 0
	Strength float64 // dimensionless, >= 0
	E0       float64 // resonance energy, eV, > 0
	Damping  float64 // full width, eV, >= 0
}

func (m *Lorentz) check() error {
	return checkLimits("Lorentz", limit{"EpsInf", m.EpsInf, 0, false}, limit{"Strength", m.Strength, 0, false},
		limit{"E0", m.E0, 0, true}, limit{"Damping", m.Damping, 0, false})
}

// Permittivity returns eps; see Model. Without damping there is no finite value
// at E = E0 (ErrRange).
func (m *Lorentz) Permittivity(grad []complex128, lambda float64) (complex128, error) {
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
	// with x = E/E0, g = Damping/E0: 1/(1 - x² - i x g)
	x, g := e/m.E0, m.Damping/m.E0
	re, im := (1-x)*(1+x), x*g
	d := re*re + im*im
	q := complex(re/d, im/d)
	s := complex(m.Strength, 0)
	if grad != nil {
		grad[0], grad[1] = 1, q
		// d(1 - x² - i x g)/dE0 = 2x²/E0 + 2 i x g/E0
		grad[2] = -s * q * q * complex(2*x*x/m.E0, 2*x*g/m.E0)
		grad[3] = s * q * q * complex(0, x/m.E0)
	}
	return settle("Lorentz", grad, complex(m.EpsInf, 0)+s*q, lambda)
}

// Index returns N = n + ik; see Model.
func (m *Lorentz) Index(lambda float64) (complex128, error) { return indexOf(m, lambda) }

// Gradient returns the derivatives of N; see Model.
func (m *Lorentz) Gradient(dst []complex128, lambda float64) ([]complex128, complex128, error) {
	return gradientOf(m, dst, lambda)
}

// NumParameters returns 4.
func (m *Lorentz) NumParameters() int { return 4 }

// Parameters returns EpsInf, Strength, E0, Damping.
func (m *Lorentz) Parameters() []Parameter {
	return []Parameter{{"EpsInf", "1", m.EpsInf}, {"Strength", "1", m.Strength}, {"E0", "eV", m.E0}, {"Damping", "eV", m.Damping}}
}

// SetParameters sets EpsInf, Strength, E0, Damping.
func (m *Lorentz) SetParameters(v []float64) error {
	if err := checkSet("Lorentz", v, m.NumParameters()); err != nil {
		return err
	}
	t := Lorentz{v[0], v[1], v[2], v[3]}
	if err := t.check(); err != nil {
		return err
	}
	*m = t
	return nil
}
