package optics

import "math"

// lanes is the number of wavelengths that the kernel carries through the
// films together. It changes speed only: every wavelength is computed by the
// same operations, whatever its neighbours.
const lanes = 32

// tinyRoot keeps a vanishing normal wave number away from 0/0; a film with
// |q| = 1e-100 is indistinguishable from one at its critical angle.
const tinyRoot = 1e-100

// waveRow holds what the waves of one block have in common for all films.
type waveRow struct {
	wavelength [lanes]float64 // nm
	k0         [lanes]float64 // 1/nm
	n0         [lanes]float64 // index of the front medium
	q0sq       [lanes]float64 // (n0 cosθ)²

	sinSq twofold // sin²θ, the same for all lanes
}

// fieldRow holds the tangential fields at one interface: E and H as u and v
// for s, as x and y for p, real and imaginary parts.
type fieldRow struct {
	ur, ui, vr, vi [lanes]float64
	xr, xi, yr, yi [lanes]float64
}

// filmRow is the work of one film on one block: the optical path of each wave
// and the parts of its complex phase factor.
type filmRow struct {
	qr, qi   [lanes]float64 // normal wave number over k0, Im q >= 0
	kr       [lanes]float64 // Re q²
	phase    [lanes]float64 // x = k0 d Re q
	decay    [lanes]float64 // -2y = -2 k0 d Im q
	sin, cos [lanes]float64 // of x
	m        [lanes]float64 // 1 - exp(-2y)
}

// normalWave returns q = sqrt(q²) with Im q >= 0, Re q >= 0 and Re q² for the
// index n + ik. The difference form of q² keeps its digits at critical angles;
// derived: n² - k² - n0² sin²θ = (n-n0)(n+n0) - k² + (n0 cosθ)².
func normalWave(n, k, n0, q0sq float64) (qr, qi, kr float64) {
	kr = (n-n0)*(n+n0) - k*k + q0sq
	qr, qi = rootUpper(kr, 2*n*k)
	return qr, qi, kr
}

// rootUpper returns the square root of kr + i ki, ki >= 0, with Im >= 0 and
// Re >= 0.
func rootUpper(kr, ki float64) (qr, qi float64) {
	t := math.Sqrt(0.5 * (math.Sqrt(kr*kr+ki*ki) + math.Abs(kr)))
	if t < tinyRoot {
		t = tinyRoot
	}
	u := 0.5 * ki / t
	if kr >= 0 {
		return t, u
	}
	return u, t
}

// crossOblique carries the fields of a block from the back of a film to its
// front, both polarisations. in and out may be the same row. d is the
// thickness in nm; e receives exp(-2y), as and ap the flux that stays in the
// film in units of the scaled fields at its front.
//
// With C = exp(-y) cos(x+iy), S = -i exp(-y) sin(x+iy) and the admittance η,
// U' = C U + (S/η) V and V' = S η U + C V. Nothing grows, because the factor
// exp(-y) is taken out and remembered in e.
func crossOblique(f *filmRow, w *waveRow, in, out *fieldRow, n, k []float64, d float64, e, as, ap []float64) {
	b := len(n)
	if b > lanes {
		b = lanes
	}
	n, k, e, as, ap = n[:b], k[:b], e[:b], as[:b], ap[:b]
	for i := range n {
		qr, qi, kr := normalWave(n[i], k[i], w.n0[i], w.q0sq[i])
		kd := w.k0[i] * d
		f.qr[i], f.qi[i], f.kr[i] = qr, qi, kr
		f.phase[i], f.decay[i] = kd*qr, -2*kd*qi
	}
	sincosRow(f.sin[:b], f.cos[:b], f.phase[:b])
	f.correctPhase(w, n, k, d)
	expRow(e, f.m[:b], f.decay[:b])
	for i := range n {
		m, ei := f.m[i], e[i]
		h := 0.5 * m
		p := 1 - h
		cr, ci := f.cos[i]*p, -f.sin[i]*h
		sr, si := f.cos[i]*h, -f.sin[i]*p
		qr, qi, kr := f.qr[i], f.qi[i], f.kr[i]
		er, ee := (n[i]-k[i])*(n[i]+k[i]), 2*n[i]*k[i]
		em, q2 := er*er+ee*ee, qr*qr+qi*qi
		iq, ie := 1/q2, 1/em
		ar, ai := (sr*qr+si*qi)*iq, (si*qr-sr*qi)*iq // σ = S/q
		br, bi := ar*kr-ai*ee, ar*ee+ai*kr           // σ q²
		gr, gi := (br*er+bi*ee)*ie, (bi*er-br*ee)*ie // σ q²/ε
		hr, hi := ar*er-ai*ee, ar*ee+ai*er           // σ ε

		ur, ui, vr, vi := in.ur[i], in.ui[i], in.vr[i], in.vi[i]
		fb := ei * (ur*vr + ui*vi)
		tr, ti := cr*ur-ci*ui+ar*vr-ai*vi, cr*ui+ci*ur+ar*vi+ai*vr
		zr, zi := cr*vr-ci*vi+br*ur-bi*ui, cr*vi+ci*vr+br*ui+bi*ur
		out.ur[i], out.ui[i], out.vr[i], out.vi[i] = tr, ti, zr, zi
		f1, f2 := tr*zr, ti*zi
		a := f1 + f2 - fb
		if a < cancelling*(math.Abs(f1)+math.Abs(f2)) {
			a = filmLoss(qr, qi, ee, m, ei, f.sin[i], f.cos[i], ur, ui, vr, vi)
		}
		as[i] = a

		ur, ui, vr, vi = in.xr[i], in.xi[i], in.yr[i], in.yi[i]
		fb = ei * (ur*vr + ui*vi)
		tr, ti = cr*ur-ci*ui+gr*vr-gi*vi, cr*ui+ci*ur+gr*vi+gi*vr
		zr, zi = cr*vr-ci*vi+hr*ur-hi*ui, cr*vi+ci*vr+hr*ui+hi*ur
		out.xr[i], out.xi[i], out.yr[i], out.yi[i] = tr, ti, zr, zi
		f1, f2 = tr*zr, ti*zi
		a = f1 + f2 - fb
		if a < cancelling*(math.Abs(f1)+math.Abs(f2)) {
			a = filmLoss((er*qr+ee*qi)*iq, (ee*qr-er*qi)*iq, ee, m, ei, f.sin[i], f.cos[i], ur, ui, vr, vi)
		}
		ap[i] = a
	}
}

// crossNormal is crossOblique at normal incidence, where both polarisations
// are the same and q is the index itself.
func crossNormal(f *filmRow, w *waveRow, in, out *fieldRow, n, k []float64, d float64, e, as []float64) {
	b := len(n)
	if b > lanes {
		b = lanes
	}
	n, k, e, as = n[:b], k[:b], e[:b], as[:b]
	for i := range n {
		kd := w.k0[i] * d
		f.phase[i], f.decay[i] = kd*n[i], -2*kd*k[i]
	}
	sincosRow(f.sin[:b], f.cos[:b], f.phase[:b])
	f.correctPhase(w, n, k, d)
	expRow(e, f.m[:b], f.decay[:b])
	for i := range n {
		m, ei := f.m[i], e[i]
		h := 0.5 * m
		p := 1 - h
		cr, ci := f.cos[i]*p, -f.sin[i]*h
		sr, si := f.cos[i]*h, -f.sin[i]*p
		qr, qi := n[i], k[i]
		iq := 1 / (qr*qr + qi*qi)
		ar, ai := (sr*qr+si*qi)*iq, (si*qr-sr*qi)*iq // S/N
		br, bi := sr*qr-si*qi, sr*qi+si*qr           // S N
		ur, ui, vr, vi := in.ur[i], in.ui[i], in.vr[i], in.vi[i]
		fb := ei * (ur*vr + ui*vi)
		tr, ti := cr*ur-ci*ui+ar*vr-ai*vi, cr*ui+ci*ur+ar*vi+ai*vr
		zr, zi := cr*vr-ci*vi+br*ur-bi*ui, cr*vi+ci*vr+br*ui+bi*ur
		out.ur[i], out.ui[i], out.vr[i], out.vi[i] = tr, ti, zr, zi
		f1, f2 := tr*zr, ti*zi
		a := f1 + f2 - fb
		if a < cancelling*(math.Abs(f1)+math.Abs(f2)) {
			a = filmLoss(qr, qi, 2*qr*qi, m, ei, f.sin[i], f.cos[i], ur, ui, vr, vi)
		}
		as[i] = a
	}
}

// longPhase is the phase in rad above which its rounding is made good: there
// one rounding of the phase would outweigh all others.
const longPhase = 256

// correctPhase turns sine and cosine by what the rounded phase of a thick film
// misses.
func (f *filmRow) correctPhase(w *waveRow, n, k []float64, d float64) {
	for i := range n {
		if x := f.phase[i]; x > longPhase {
			qr, qi, _ := normalWave(n[i], k[i], w.n0[i], w.q0sq[i])
			miss := phaseError(x, w.wavelength[i], d, n[i], k[i], w.n0[i], qr, qi, w.sinSq)
			s, c := f.sin[i], f.cos[i]
			f.sin[i], f.cos[i] = s+miss*c, c-miss*s
		}
	}
}

// cancelling is the share of the passing flux below which the difference of
// two fluxes has lost too many digits and filmLoss replaces it.
const cancelling = 1.0 / 32

// filmLoss returns the flux that stays in a film of admittance η, computed
// without a difference of large numbers, so that tiny absorptances keep their
// relative accuracy. m = 1 - exp(-2y), e = exp(-2y); sin and cos are those of
// x; u and v are the fields at the back of the film. epsIm = Im ε = 2nk, whose
// zero means no loss at all.
//
// derived: insert U' and V' in Re(U'V'*) - e Re(UV*), use cosh, sinh, cos and
// sin of 2y and 2x, and collect; every term is then of the order of Im η or m.
func filmLoss(etaRe, etaIm, epsIm, m, e, sin, cos, ur, ui, vr, vi float64) float64 {
	if epsIm == 0 {
		return 0
	}
	sinh2y := 0.5 * m * (1 + e) // exp(-2y) sinh 2y
	sin2x := 2 * e * sin * cos  // exp(-2y) sin 2x
	inv := 1 / (etaRe*etaRe + etaIm*etaIm)
	wr, wi := ur*vr+ui*vi, vi*ur-vr*ui // V U*
	s2 := 0.25*m*m + e*sin*sin         // |S|²
	a := 0.5*(etaRe*sinh2y+etaIm*sin2x)*(ur*ur+ui*ui) +
		0.5*(etaRe*sinh2y-etaIm*sin2x)*inv*(vr*vr+vi*vi) +
		(0.5*m*m*etaRe*etaRe-2*e*sin*sin*etaIm*etaIm)*inv*wr +
		2*s2*etaRe*etaIm*inv*wi
	if !(a > 0) {
		return 0
	}
	return a
}
