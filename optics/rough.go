package optics

import (
	"fmt"
	"math"
	"math/cmplx"
)

// RoughResponse is the response of a stack with rough interfaces. R, T and A
// belong to the specular beam; R + T + sum(A) + sum of both scattered shares
// = 1 to rounding.
type RoughResponse struct {
	R, T float64   // specular reflectance and transmittance
	A    []float64 // absorptance of each film, from the specular beam

	// Light that each interface scatters out of the specular beam towards the
	// front and towards the back, len(Films)+1 values. Where it goes then, the
	// theory does not say.
	ScatteredFront, ScatteredBack []float64
}

// SolveRough returns the response of a coherent stack whose interfaces have the
// given rms roughness (nm, len(st.Films)+1 values from the front). Scalar
// theory for heights with a Gaussian distribution, equal on both sides of a
// film or not correlated: an interface displaced by h turns the phase of what
// it reflects and transmits, and the mean over h leaves
//
//	r exp(-2 (k0 σ q1)²),  t exp(-(k0 σ (q1-q2))²/2)
//
// in the specular beam, with q = Re(N cosθ) on its sides. The variance of the
// field is what is scattered. For one interface this is the haze of Bennett and
// Porteus (J. Opt. Soc. Am. 51, 123 (1961)) in reflection, 1 - exp[-(4πσ n1
// cosθ/λ)²], and of Carniglia (Opt. Eng. 18, 104 (1979)) in transmission,
// 1 - exp[-(2πσ |n1 cosθ1 - n2 cosθ2|/λ)²].
//
// Valid for slopes that are small and a lateral scale above the wavelength. The
// theory knows no absorption at the interface itself: where strongly absorbing
// media carry waves from both sides it can break the balance of energy, which
// is an error, as are incoherent films. Errors wrap [ErrInput].
func SolveRough(st Stack, roughness []float64, w Wave) (RoughResponse, error) {
	if err := checkRough(st, roughness, w); err != nil {
		return RoughResponse{}, err
	}
	films := len(st.Films)
	sum := RoughResponse{
		A:              make([]float64, films),
		ScatteredFront: make([]float64, films+1),
		ScatteredBack:  make([]float64, films+1),
	}
	ws, wp := w.Polarization.weights()
	for p, weight := range [2]float64{ws, wp} {
		if weight > 0 {
			if err := newRoughBeam(st, roughness, w, p == 1).add(&sum, weight); err != nil {
				return RoughResponse{}, err
			}
		}
	}
	return sum, nil
}

func checkRough(st Stack, roughness []float64, w Wave) error {
	if err := w.Validate(); err != nil {
		return err
	}
	if err := st.Validate(); err != nil {
		return err
	}
	if len(roughness) != len(st.Films)+1 {
		return fmt.Errorf("optics: rough stack: %d values of roughness for %d interfaces: %w", len(roughness), len(st.Films)+1, ErrInput)
	}
	for j, sigma := range roughness {
		if !(sigma >= 0) || math.IsInf(sigma, 1) {
			return fmt.Errorf("optics: rough stack: interface %d: roughness %g nm is negative or not a number: %w", j, sigma, ErrInput)
		}
	}
	for j, f := range st.Films {
		if f.Incoherent {
			return fmt.Errorf("optics: rough stack: film %d is incoherent: %w", j, ErrInput)
		}
		if err := checkPhase(f.Index, f.Thickness, w.Wavelength, false); err != nil {
			return fmt.Errorf("optics: rough stack: film %d: %w", j, err)
		}
	}
	return nil
}

// roughBeam holds the specular waves of one polarisation. Medium 0 is the
// front, medium j+1 film j; interface j lies behind medium j.
type roughBeam struct {
	q, eta    []complex128 // of every medium
	beam      []float64    // weight of the beams in the loss of every medium, 1 for s
	index     []complex128
	sigma     []float64 // k0 σ of every interface
	thickness []float64 // k0 d of every film
	k0        float64
	n         []complex128 // forward wave behind every interface (at its face), index as interfaces
	rho       []complex128 // reflection coefficient of all that follows, at the front of every interface
}

func newRoughBeam(st Stack, roughness []float64, w Wave, p bool) *roughBeam {
	b := &roughBeam{k0: 2 * math.Pi / w.Wavelength}
	b.index = append(b.index, st.Front)
	for _, f := range st.Films {
		b.index = append(b.index, f.Index)
		b.thickness = append(b.thickness, b.k0*f.Thickness)
	}
	b.index = append(b.index, st.Back)
	n0, kx2 := real(st.Front), real(st.Front)*real(st.Front)*sinSquared(w.Angle).hi
	for j, n := range b.index {
		q := complex(n0*math.Cos(w.Angle), 0)
		if j > 0 {
			q = normalComponent(st.Front, n, w.Angle)
			if q == 0 {
				q = tinyRoot
			}
		}
		eta, beam := q, 0.0
		if p {
			eta, beam = n*n/q, kx2/square(q)
		}
		b.q, b.eta, b.beam = append(b.q, q), append(b.eta, eta), append(b.beam, beam)
	}
	for _, s := range roughness {
		b.sigma = append(b.sigma, b.k0*s)
	}
	b.run()
	return b
}

// faces returns the mean coefficients of interface j: r, t from the front, back
// reflection and transmission from behind.
func (b *roughBeam) faces(j int) (r, t, rBack, tBack complex128) {
	e1, e2 := b.eta[j], b.eta[j+1]
	r0, s := (e1-e2)/(e1+e2), b.sigma[j]
	q1, q2 := real(b.q[j]), real(b.q[j+1])
	pass := complex(math.Exp(-0.5*s*s*(q1-q2)*(q1-q2)), 0)
	r, rBack = r0*complex(math.Exp(-2*s*s*q1*q1), 0), -r0*complex(math.Exp(-2*s*s*q2*q2), 0)
	return r, (1 + r0) * pass, rBack, (1 - r0) * pass
}

func (b *roughBeam) pass(j int) complex128 {
	return cmplx.Exp(complex(0, b.thickness[j]) * b.q[j+1])
}

// run finds the waves: from the back the reflection of all that follows, from
// the front the forward waves.
func (b *roughBeam) run() {
	last := len(b.sigma) - 1
	b.rho, b.n = make([]complex128, last+1), make([]complex128, last+1)
	b.rho[last], _, _, _ = b.faces(last)
	for j := last - 1; j >= 0; j-- {
		r, t, rb, tb := b.faces(j)
		round := b.pass(j) * b.pass(j) * b.rho[j+1]
		b.rho[j] = r + t*tb*round/(1-rb*round)
	}
	in := complex(1, 0)
	for j := range b.n {
		_, t, rb, _ := b.faces(j)
		if j < last {
			b.n[j] = t * in / (1 - rb*b.pass(j)*b.pass(j)*b.rho[j+1])
			in = b.n[j] * b.pass(j)
		} else {
			b.n[j] = t * in
		}
	}
}

// waves returns what arrives at interface j from the front and from behind.
func (b *roughBeam) waves(j int) (front, behind complex128) {
	front = 1
	if j > 0 {
		front = b.n[j-1] * b.pass(j-1)
	}
	if j < len(b.n)-1 {
		behind = b.n[j] * b.pass(j) * b.pass(j) * b.rho[j+1]
	}
	return front, behind
}

// add adds the shares of the beam to sum.
func (b *roughBeam) add(sum *RoughResponse, weight float64) error {
	unit := weight / real(b.eta[0])
	sum.R += weight * square(b.rho[0])
	last := len(b.n) - 1
	sum.T += unit * real(b.eta[last+1]) * square(b.n[last])
	for j := range b.thickness {
		m := j + 1
		n, q := b.index[m], b.q[m]
		if imag(n) == 0 {
			continue
		}
		a, back := b.n[j], b.n[j]*b.pass(j)*b.rho[j+1]
		density := unit * 2 * real(n) * imag(n) * b.k0
		cross := 2 * density * (1 - b.beam[m]) * math.Exp(-b.thickness[j]*imag(q))
		ab := a * cmplx.Conj(back)
		p := Profile{
			Thickness: b.thickness[j] / b.k0, Decay: 2 * b.k0 * imag(q), Wavenumber: 2 * b.k0 * real(q),
			Forward: density * (1 + b.beam[m]) * square(a), Backward: density * (1 + b.beam[m]) * square(back),
			Cos: cross * real(ab), Sin: -cross * imag(ab),
		}
		sum.A[j] += p.Absorptance()
	}
	for j := range b.sigma {
		front, back, err := b.scattered(j)
		if err != nil {
			return err
		}
		sum.ScatteredFront[j] += unit * front
		sum.ScatteredBack[j] += unit * back
	}
	return nil
}

// scattered returns the flux that interface j takes out of the specular beam.
// What leaves follows from the fluxes on both sides, so that the balance
// closes; the variances of the fields share it between front and back.
func (b *roughBeam) scattered(j int) (front, back float64, err error) {
	s := b.sigma[j]
	if s == 0 {
		return 0, 0, nil
	}
	in, behind := b.waves(j)
	total := netFlux(b.eta[j], in, b.rho[j]*in) - netFlux(b.eta[j+1], b.n[j], behind)
	if rounding := 1e-11 * real(b.eta[0]); total < -rounding {
		return 0, 0, fmt.Errorf("optics: rough stack: interface %d, rms %g nm: scalar theory breaks the balance of energy by %.2g between these absorbing media: %w",
			j, s/b.k0, total/real(b.eta[0]), ErrInput)
	}
	total = max(0, total)
	e1, e2 := b.eta[j], b.eta[j+1]
	r0 := (e1 - e2) / (e1 + e2)
	q1, q2 := s*real(b.q[j]), s*real(b.q[j+1])
	v1 := real(e1) * variance(r0*in, (1-r0)*behind, 2*q1, q1-q2)
	v2 := real(e2) * variance((1+r0)*in, -r0*behind, q1-q2, -2*q2)
	if v1+v2 == 0 {
		return total, 0, nil
	}
	return total * v1 / (v1 + v2), total * v2 / (v1 + v2), nil
}

// netFlux is that of a forward wave a and a backward wave c in one medium.
func netFlux(eta, a, c complex128) float64 {
	return real((a + c) * cmplx.Conj(eta*(a-c)))
}

// variance of a exp(iαh) + c exp(iγh) for h normal with variance 1.
func variance(a, c complex128, alpha, gamma float64) float64 {
	va, vc := -math.Expm1(-alpha*alpha), -math.Expm1(-gamma*gamma)
	both := math.Exp(-0.5*(alpha-gamma)*(alpha-gamma)) - math.Exp(-0.5*(alpha*alpha+gamma*gamma))
	return max(0, square(a)*va+square(c)*vc+2*real(a*cmplx.Conj(c))*both)
}
