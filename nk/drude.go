package nk

import (
	"math"

	"gonum.org/v1/gonum/unit/constant"
)

const (
	vacuumPermittivity = 8.8541878188e-12                                                              // F/m, CODATA 2022
	electronMass       = 9.1093837139e-31                                                              // kg, CODATA 2022
	reducedPlanckEV    = float64(constant.Planck) / (2 * math.Pi) / float64(constant.ElementaryCharge) // eV s

	perM3PerCM3 = 1e6  // 1/m³ in 1/cm³
	m2PerCM2    = 1e-4 // m² in cm²
)

// Drude is the response of free carriers over a constant background:
//
//	eps = EpsInf - Plasma²/(E² + i E Damping)
//
// with the photon energy E. Plasma is the unscreened plasma energy (it does not
// contain EpsInf). Source: P. Drude, Ann. Phys. 306, 566 (1900).
type Drude struct {
	EpsInf  float64 // background, dimensionless, >= 0
	Plasma  float64 // plasma frequency times ħ, eV, >= 0
	Damping float64 // ħ over the scattering time, eV, >= 0
}

// DrudeFromCarriers returns the Drude model of free carriers from the
// electrical figures: the background permittivity, the carrier density (1/cm³),
// the effective mass over the free electron's and the optical mobility (cm²/Vs):
// Plasma = ħ sqrt(N e²/(eps0 m)), Damping = ħ e/(m mobility). It returns
// ErrInput unless the background is >= 0, the density >= 0, mass and mobility > 0.
func DrudeFromCarriers(epsInf, density, mass, mobility float64) (Drude, error) {
	if err := checkLimits("Drude", limit{"EpsInf", epsInf, 0, false}, limit{"density", density, 0, false},
		limit{"mass", mass, 0, true}, limit{"mobility", mobility, 0, true}); err != nil {
		return Drude{}, err
	}
	const e = float64(constant.ElementaryCharge)
	m := mass * electronMass
	d := Drude{
		EpsInf:  epsInf,
		Plasma:  reducedPlanckEV * e * math.Sqrt(density*perM3PerCM3/vacuumPermittivity/m),
		Damping: reducedPlanckEV * e / (m * mobility * m2PerCM2),
	}
	return d, d.check()
}

func (m *Drude) check() error {
	return checkLimits("Drude", limit{"EpsInf", m.EpsInf, 0, false}, limit{"Plasma", m.Plasma, 0, false}, limit{"Damping", m.Damping, 0, false})
}

// Permittivity returns eps; see Model.
func (m *Drude) Permittivity(grad []complex128, lambda float64) (complex128, error) {
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
	// 1/(E² + iEG) = (1 - iG/E)/(E² + G²)
	q := complex(1, -m.Damping/e) * complex(1/(e*e+m.Damping*m.Damping), 0)
	s := complex(m.Plasma, 0) * q
	if grad != nil {
		grad[0] = 1
		grad[1] = -2 * s
		grad[2] = s * q * complex(0, m.Plasma*e)
	}
	return settle("Drude", grad, complex(m.EpsInf, 0)-complex(m.Plasma, 0)*s, lambda)
}

// Index returns N = n + ik; see Model.
func (m *Drude) Index(lambda float64) (complex128, error) { return indexOf(m, lambda) }

// Gradient returns the derivatives of N; see Model.
func (m *Drude) Gradient(dst []complex128, lambda float64) ([]complex128, complex128, error) {
	return gradientOf(m, dst, lambda)
}

// NumParameters returns 3.
func (m *Drude) NumParameters() int { return 3 }

// Parameters returns EpsInf, Plasma, Damping.
func (m *Drude) Parameters() []Parameter {
	return []Parameter{{"EpsInf", "1", m.EpsInf}, {"Plasma", "eV", m.Plasma}, {"Damping", "eV", m.Damping}}
}

// SetParameters sets EpsInf, Plasma, Damping.
func (m *Drude) SetParameters(v []float64) error {
	if err := checkSet("Drude", v, m.NumParameters()); err != nil {
		return err
	}
	t := Drude{v[0], v[1], v[2]}
	if err := t.check(); err != nil {
		return err
	}
	*m = t
	return nil
}
