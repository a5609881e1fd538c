package optics

import "math"

// slopeRow holds the matrix (C, S/η; Sη, C) of one film for one polarisation
// and one block, and its derivative with respect to ε. Every entry carries the
// factor exp(-y), which is not differentiated.
//
// derived: with H = (0, x; y, 0), x = 1 and y = q² for s, x = q²/ε and y = ε
// for p, the matrix is exp(-i k0 d H). Hence d/dd multiplies it by -i k0 H,
// and with σ = S/q, dq²/dε = 1:
//
//	dC/dq²     = -i k0 d σ/2
//	dσ/dq²     = -(i k0 d C + σ)/(2q²)
//	d(σq²)/dq² = (σ - i k0 d C)/2
type slopeRow struct {
	cr, ci [lanes]float64 // C
	ar, ai [lanes]float64 // S/η
	br, bi [lanes]float64 // Sη
	xr, xi [lanes]float64 // x of the generator
	yr, yi [lanes]float64 // y
	e      [lanes]float64 // determinant, exp(-2y)

	dcr, dci [lanes]float64 // dC/dε
	dar, dai [lanes]float64 // d(S/η)/dε
	dbr, dbi [lanes]float64 // d(Sη)/dε

	// U dV - V dU in front of the film for dε = 1 is uu U² + uv UV + vv V² with
	// the fields behind it.
	uur, uui [lanes]float64
	uvr, uvi [lanes]float64
	vvr, vvi [lanes]float64
}

// smallPhase is |k0 d q|² below which dσ/dq² is taken from its series.
const smallPhase = 0.25

// phaseSeries returns (φ cos φ - sin φ)/φ³ for z = φ², |z| < smallPhase:
// the sum of (-1)^n 2n/(2n+1)! z^(n-1), to 1e-17.
func phaseSeries(z complex128) complex128 {
	const (
		c1 = -1.0 / 3
		c2 = 1.0 / 30
		c3 = -1.0 / 840
		c4 = 1.0 / 45360
		c5 = -1.0 / 3991680
		c6 = 1.0 / 518918400
		c7 = -1.0 / 93405312000
	)
	s := complex(c7, 0)
	for _, c := range [...]float64{c6, c5, c4, c3, c2, c1} {
		s = s*z + complex(c, 0)
	}
	return s
}

// bulkSlope is what the slopes of both polarisations have in common in one
// lane.
type bulkSlope struct {
	c, sigma, kappa complex128
	dc, dsigma      complex128 // dC/dq², dσ/dq²
	db              complex128 // d(σq²)/dq²
	cs              complex128 // Cσ
	p, q, r         complex128 // see fill
}

// trace finds the phase factors of the film once more, as the forward pass
// did, into f; e receives exp(-2y).
func (f *filmRow) trace(w *waveRow, n, k []float64, d float64, normal bool, e []float64) {
	b := min(len(n), lanes)
	n, k = n[:b], k[:b]
	for i := range n {
		qr, qi, kr := n[i], k[i], (n[i]-k[i])*(n[i]+k[i])
		if !normal {
			qr, qi, kr = normalWave(n[i], k[i], w.n0[i], w.q0sq[i])
		}
		kd := w.k0[i] * d
		f.qr[i], f.qi[i], f.kr[i] = qr, qi, kr
		f.phase[i], f.decay[i] = kd*qr, -2*kd*qi
	}
	sincosRow(f.sin[:b], f.cos[:b], f.phase[:b])
	f.correctPhase(w, n, k, d)
	expRow(e[:b], f.m[:b], f.decay[:b])
}

// at returns the slopes of lane i. kd is k0 d, kappaIm is Im q², e is exp(-2y).
//
// derived: for s the form uu U² + uv UV + vv V² has uu = p, uv = q, vv = r with
// p = (Cσ - i k0 d e)/2, q = σ², r = (Cσ + i k0 d e)/(2q²), because
// C² - S² = e; a thick film loses no digits in it.
func (f *filmRow) at(i int, kd, kappaIm, e float64) bulkSlope {
	h := 0.5 * f.m[i]
	p := 1 - h
	qr, qi := f.qr[i], f.qi[i]
	iq := 1 / (qr*qr + qi*qi)
	sr, si := f.cos[i]*h, -f.sin[i]*p
	s := bulkSlope{
		c:     complex(f.cos[i]*p, -f.sin[i]*h),
		sigma: complex((sr*qr+si*qi)*iq, (si*qr-sr*qi)*iq),
		kappa: complex(f.kr[i], kappaIm),
	}
	c, sigma := s.c, s.sigma
	turn := complex(-kd*imag(c), kd*real(c)) // i k0 d C
	s.dc = complex(0.5*kd*imag(sigma), -0.5*kd*real(sigma))
	s.db = complex(0.5*(real(sigma)-real(turn)), 0.5*(imag(sigma)-imag(turn)))
	s.cs = c * sigma
	s.q = sigma * sigma
	s.p = complex(0.5*real(s.cs), 0.5*(imag(s.cs)-kd*e))
	if kd*kd < smallPhase*iq {
		g := phaseSeries(s.kappa * complex(kd*kd, 0))
		scale := 0.5 * kd * kd * kd * math.Sqrt(e)
		s.dsigma = complex(scale*imag(g), -scale*real(g))
		s.r = sigma*s.dc - c*s.dsigma
		return s
	}
	half := complex(0.5*real(s.kappa)*iq*iq, -0.5*imag(s.kappa)*iq*iq) // 1/(2q²)
	s.dsigma = -(turn + sigma) * half
	s.r = complex(real(s.cs), imag(s.cs)+kd*e) * half
	return s
}

// setS stores the slopes of s light in lane i.
func (o *slopeRow) setS(i int, s *bulkSlope) {
	b := s.sigma * s.kappa
	o.cr[i], o.ci[i] = real(s.c), imag(s.c)
	o.ar[i], o.ai[i] = real(s.sigma), imag(s.sigma)
	o.br[i], o.bi[i] = real(b), imag(b)
	o.xr[i], o.xi[i] = 1, 0
	o.yr[i], o.yi[i] = real(s.kappa), imag(s.kappa)
	o.dcr[i], o.dci[i] = real(s.dc), imag(s.dc)
	o.dar[i], o.dai[i] = real(s.dsigma), imag(s.dsigma)
	o.dbr[i], o.dbi[i] = real(s.db), imag(s.db)
	o.uur[i], o.uui[i] = real(s.p), imag(s.p)
	o.uvr[i], o.uvi[i] = real(s.q), imag(s.q)
	o.vvr[i], o.vvi[i] = real(s.r), imag(s.r)
}

// setP stores the slopes of p light in lane i; eps is the permittivity, inv
// its reciprocal.
//
// derived: for p S/η = σq²/ε and Sη = σε exchange their places with s, and
// depend on ε once more by the factor, so uu = Cσ - ε r,
// uv = σ² (2q²/ε - 1), vv = (Cσ q²/ε - p)/ε.
func (o *slopeRow) setP(i int, s *bulkSlope, eps, inv complex128) {
	x := s.kappa * inv
	a, b := s.sigma*x, s.sigma*eps
	da, db := (s.db-a)*inv, s.dsigma*eps+s.sigma
	uu, uv, vv := s.cs-eps*s.r, s.q*(2*x-1), (s.cs*x-s.p)*inv
	o.cr[i], o.ci[i] = real(s.c), imag(s.c)
	o.ar[i], o.ai[i] = real(a), imag(a)
	o.br[i], o.bi[i] = real(b), imag(b)
	o.xr[i], o.xi[i] = real(x), imag(x)
	o.yr[i], o.yi[i] = real(eps), imag(eps)
	o.dcr[i], o.dci[i] = real(s.dc), imag(s.dc)
	o.dar[i], o.dai[i] = real(da), imag(da)
	o.dbr[i], o.dbi[i] = real(db), imag(db)
	o.uur[i], o.uui[i] = real(uu), imag(uu)
	o.uvr[i], o.uvi[i] = real(uv), imag(uv)
	o.vvr[i], o.vvi[i] = real(vv), imag(vv)
}
