package optics

import "math"

// slopeRow holds the matrix (C, S/η; Sη, C) of one film for one polarisation
// and one block, and what its derivatives need.
//
// derived: with H = (0, x; y, 0), x = 1 and y = q² for s, x = q²/ε and y = ε
// for p, the matrix is exp(-i k0 d H), without the factor exp(-y). Hence d/dd
// multiplies it by -i k0 H. A change of q² turns the phase φ = k0 d q, which
// multiplies it by -i k0 d H/(2q²), and changes η; with σ = S/q and dq²/dε = 1
// the latter adds
//
//	s: σ/2 to d(Sη)/dε,            -σ/(2q²) to d(S/η)/dε,
//	p: σ (1 - ε/(2q²)),             (σ/ε)(1/2 - q²/ε).
type slopeRow struct {
	cr, ci   [lanes]float64 // C
	ar, ai   [lanes]float64 // S/η
	br, bi   [lanes]float64 // Sη
	xr, xi   [lanes]float64 // x of the generator
	yr, yi   [lanes]float64 // y
	uur, uui [lanes]float64 // part of d(Sη)/dε
	vvr, vvi [lanes]float64 // part of d(S/η)/dε
	e        [lanes]float64 // determinant, exp(-2y)
}

// turnRow is the part of the derivative with respect to ε that is the same
// for both polarisations.
type turnRow struct {
	kd     [lanes]float64 // k0 d
	gr, gi [lanes]float64 // 1/(2q²), or zero where the phase is small
	cr, ci [lanes]float64 // dC/dε where the phase is small
}

// smallPhase is |k0 d q|² below which the two parts of dσ/dq² would cancel and
// its series is used instead.
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

// trace finds the phase factors of the film once more, as the forward pass
// did; e are the values of exp(-2y) found there.
func (rv *reversal) trace(w *waveRow, n, k []float64, d float64, e []float64) {
	f, s, b := &rv.film, &rv.slope[0], len(n)
	if b > lanes {
		b = lanes
	}
	n, k, e = n[:b], k[:b], e[:b]
	for i := range n {
		var qr, qi, kr float64
		if rv.normal {
			qr, qi, kr = n[i], k[i], (n[i]-k[i])*(n[i]+k[i])
		} else {
			qr, qi, kr = normalWave(n[i], k[i], w.n0[i], w.q0sq[i])
		}
		kd := w.k0[i] * d
		v := -2 * kd * qi
		m := 1 - e[i]
		if v > -0.01 {
			m = -v * (1 + v*(0.5+v*(1.0/6+v*(1.0/24+v*(1.0/120+v*(1.0/720))))))
		}
		f.qr[i], f.qi[i], f.kr[i], f.m[i], f.phase[i] = qr, qi, kr, m, kd*qr
		s.e[i], rv.turn.kd[i] = e[i], kd
	}
	sincosRow(f.sin[:b], f.cos[:b], f.phase[:b])
	f.correctPhase(w, n, k, d)
	rv.slope[1].e = s.e
}

// slopes fills the rows of the polarisations in use.
func (rv *reversal) slopes(n, k []float64) {
	f, t, s, p := &rv.film, &rv.turn, &rv.slope[0], &rv.slope[1]
	b := len(n)
	if b > lanes {
		b = lanes
	}
	n, k = n[:b], k[:b]
	for i := range n {
		h := 0.5 * f.m[i]
		g := 1 - h
		cr, ci := f.cos[i]*g, -f.sin[i]*h
		sr, si := f.cos[i]*h, -f.sin[i]*g
		qr, qi, kr, ki := f.qr[i], f.qi[i], f.kr[i], 2*n[i]*k[i]
		iq := 1 / (qr*qr + qi*qi)
		ar, ai := (sr*qr+si*qi)*iq, (si*qr-sr*qi)*iq
		br, bi := ar*kr-ai*ki, ar*ki+ai*kr
		hr, hi := 0.5*kr*iq*iq, -0.5*ki*iq*iq // 1/(2q²)
		s.cr[i], s.ci[i], s.ar[i], s.ai[i], s.br[i], s.bi[i] = cr, ci, ar, ai, br, bi
		s.xr[i], s.xi[i], s.yr[i], s.yi[i] = 1, 0, kr, ki
		s.uur[i], s.uui[i] = 0.5*ar, 0.5*ai
		s.vvr[i], s.vvi[i] = ai*hi-ar*hr, -ar*hi-ai*hr
		t.gr[i], t.gi[i] = hr, hi
		if t.kd[i]*t.kd[i] < smallPhase*iq {
			rv.smallPhase(i, complex(kr, ki), complex(cr, ci), complex(ar, ai))
		}
	}
	if !rv.use[1] {
		return
	}
	p.cr, p.ci = s.cr, s.ci
	for i := range n {
		er, ei := (n[i]-k[i])*(n[i]+k[i]), 2*n[i]*k[i]
		ie := 1 / (er*er + ei*ei)
		ir, ii := er*ie, -ei*ie // 1/ε
		ar, ai, br, bi := s.ar[i], s.ai[i], s.br[i], s.bi[i]
		xr, xi := s.yr[i]*ir-s.yi[i]*ii, s.yr[i]*ii+s.yi[i]*ir
		pr, pi := br*ir-bi*ii, br*ii+bi*ir
		p.xr[i], p.xi[i], p.yr[i], p.yi[i] = xr, xi, er, ei
		p.ar[i], p.ai[i] = pr, pi
		p.br[i], p.bi[i] = ar*er-ai*ei, ar*ei+ai*er
		// S/η and Sη are those of s exchanged, divided and multiplied by ε.
		ur, ui, vr, vi := s.uur[i]-pr, s.uui[i]-pi, s.vvr[i], s.vvi[i]
		p.uur[i], p.uui[i] = ar+vr*er-vi*ei, ai+vr*ei+vi*er
		p.vvr[i], p.vvi[i] = ur*ir-ui*ii, ur*ii+ui*ir
	}
}

// smallPhase replaces the slopes of s light in lane i by the whole derivatives:
//
//	dC/dq² = -i k0 d σ/2,  dσ/dq² = -(i k0 d C + σ)/(2q²),  d(σq²)/dq² = (σ - i k0 d C)/2.
func (rv *reversal) smallPhase(i int, kappa, c, sigma complex128) {
	t, s := &rv.turn, &rv.slope[0]
	kd := t.kd[i]
	series := phaseSeries(kappa * complex(kd*kd, 0))
	scale := 0.5 * kd * kd * kd * math.Sqrt(s.e[i])
	t.gr[i], t.gi[i] = 0, 0
	t.cr[i], t.ci[i] = 0.5*kd*imag(sigma), -0.5*kd*real(sigma)
	s.uur[i], s.uui[i] = 0.5*(real(sigma)+kd*imag(c)), 0.5*(imag(sigma)-kd*real(c))
	s.vvr[i], s.vvi[i] = scale*imag(series), -scale*real(series)
}
