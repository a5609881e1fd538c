package nk

import "math"

// Urbach is an exponential absorption edge to be added to a model in a Sum:
//
//	eps2 = Strength (Edge/E) exp(-|E - Edge|/Width)
//
// so that n k E, hence the absorption coefficient where n varies little, is
// exactly exponential below Edge (F. Urbach, Phys. Rev. 92, 1324 (1953)). Above
// Edge, where the band-to-band model of the sum dominates, it falls off with
// the same width, which keeps it continuous and integrable. eps1 is its exact
// Kramers-Kronig transform (derived, exponential integrals), with no
// background. The derivative with respect to Edge has no finite value exactly
// at E = Edge (ErrRange). Alone it has eps1 < 0 above Edge.
type Urbach struct {
	Strength float64 // eps2 at Edge, dimensionless, >= 0
	Edge     float64 // eV, > 0
	Width    float64 // Urbach energy, eV, > 0
}

func (m *Urbach) check() error {
	return checkLimits("Urbach", limit{"Strength", m.Strength, 0, false}, limit{"Edge", m.Edge, 0, true}, limit{"Width", m.Width, 0, true})
}

// transforms returns the principal values u, v of the integrals of
// exp(-|x - Edge|/Width)/(x - E) and /(x + E) over x from 0 to infinity, and
// their derivatives with respect to Edge and Width.
func (m *Urbach) transforms(e float64) (u, v [3]float64) {
	u = m.cauchyIntegral(e)
	v = m.cauchyIntegral(-e)
	return u, v
}

// cauchyIntegral returns the integral of exp(-|x - Edge|/Width)/(x - p) over
// x > 0 with its derivatives with respect to Edge and Width. With
// y = (Edge - p)/Width and S(x) = exp(-x) Ei(x) it is
//
//	S(y) - exp(-Edge/Width) S(-p/Width) - S(-y)
func (m *Urbach) cauchyIntegral(p float64) [3]float64 {
	w := m.Width
	y := (m.Edge - p) / w
	low := math.Exp(-m.Edge/w) * scaledEi(-p/w)
	if y == 0 {
		// S(y) - S(-y) vanishes; its derivative is infinite.
		return [3]float64{-low, math.Inf(1), math.Exp(-m.Edge/w) / w}
	}
	a, b := scaledEi(y), scaledEi(-y)
	// S' = 1/x - S, so d(S(y) - S(-y))/dy = -S(y) - S(-y), the 1/y cancelling.
	d := -a - b
	return [3]float64{
		a - b - low,
		d/w + low/w,
		// d/dWidth: y' = -y/w; low' = low (Edge - p)/w² - exp(-Edge/w)/w
		-y*d/w - low*(m.Edge-p)/w/w + math.Exp(-m.Edge/w)/w,
	}
}

// Permittivity returns eps; see Model.
func (m *Urbach) Permittivity(grad []complex128, lambda float64) (complex128, error) {
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
	u, v := m.transforms(e)
	// eps1 = 2/pi P ∫ x eps2/(x² - E²) dx, 1/(x² - E²) = [1/(x-E) - 1/(x+E)]/2E
	c := m.Edge / (math.Pi * e)
	g := c * (u[0] - v[0])
	distance := math.Abs(e - m.Edge)
	s := m.Edge / e * math.Exp(-distance/m.Width)
	if grad != nil {
		sign := 1.0
		if e < m.Edge {
			sign = -1
		}
		grad[0] = complex(g, s)
		grad[1] = complex(m.Strength*(g/m.Edge+c*(u[1]-v[1])), m.Strength*s*(1/m.Edge+sign/m.Width))
		grad[2] = complex(m.Strength*c*(u[2]-v[2]), m.Strength*s*distance/m.Width/m.Width)
	}
	return settle("Urbach", grad, complex(m.Strength*g, m.Strength*s), lambda)
}

// Index returns N = n + ik; see Model.
func (m *Urbach) Index(lambda float64) (complex128, error) { return indexOf(m, lambda) }

// Gradient returns the derivatives of N; see Model.
func (m *Urbach) Gradient(dst []complex128, lambda float64) ([]complex128, complex128, error) {
	return gradientOf(m, dst, lambda)
}

// NumParameters returns 3.
func (m *Urbach) NumParameters() int { return 3 }

// Parameters returns Strength, Edge, Width.
func (m *Urbach) Parameters() []Parameter {
	return []Parameter{{"Strength", "1", m.Strength}, {"Edge", "eV", m.Edge}, {"Width", "eV", m.Width}}
}

// SetParameters sets Strength, Edge, Width.
func (m *Urbach) SetParameters(v []float64) error {
	if err := checkSet("Urbach", v, m.NumParameters()); err != nil {
		return err
	}
	t := Urbach{v[0], v[1], v[2]}
	if err := t.check(); err != nil {
		return err
	}
	*m = t
	return nil
}
