package optics

import "math"

// lanes is the number of wavelengths that the kernel carries through the
// films together. It changes speed only: every wavelength is computed by the
// same operations, whatever its neighbours.
const lanes = 64

// tinyRoot keeps a vanishing normal wave number away from 0/0; a film with
// |q| = 1e-100 is indistinguishable from one at its critical angle.
const tinyRoot = 1e-100

// Row functions (…Row, …Rows) are the kernel: one loop without branches over the
// lanes of a block. Package gen turns them into vector instructions, which are
// called by the name of the row function with fast in front and give the same
// bits. For that no bit may depend on whether a processor can fuse a product with
// a sum: every product that is added to something is rounded by an explicit
// conversion, most of them in mulRe, mulIm, dot and cross.
//
//go:generate go run ./gen

// mulRe and mulIm return the real and the imaginary part of a b.
func mulRe(ar, ai, br, bi float64) float64 { return float64(ar*br) - float64(ai*bi) }
func mulIm(ar, ai, br, bi float64) float64 { return float64(ar*bi) + float64(ai*br) }

// dot and cross return the real and the imaginary part of a b*.
func dot(ar, ai, br, bi float64) float64   { return float64(ar*br) + float64(ai*bi) }
func cross(ar, ai, br, bi float64) float64 { return float64(ai*br) - float64(ar*bi) }

// waveRow holds what the waves of one block have in common for all films.
type waveRow struct {
	wavelength [lanes]float64 // nm
	k0         [lanes]float64 // 1/nm
	n0         [lanes]float64 // index of the front medium
	q0sq       [lanes]float64 // (n0 cosθ)²

	angle angle // of all waves
}

// fieldRow holds the fields at one interface: of s and of p light.
type fieldRow [2]polarRow

// polarRow holds the scaled tangential fields E and H of one polarisation, as
// u and v: real and imaginary parts.
type polarRow struct {
	ur, ui, vr, vi [lanes]float64
}

// filmRow is the work of one film on one block: the optical path of each wave,
// the parts of its complex phase factor and what they do to the fields.
type filmRow struct {
	qr, qi   [lanes]float64 // normal wave number over k0, Im q >= 0
	kr       [lanes]float64 // Re q²
	phase    [lanes]float64 // x = k0 d Re q
	decay    [lanes]float64 // -2y = -2 k0 d Im q
	sin, cos [lanes]float64 // of x
	m        [lanes]float64 // 1 - exp(-2y)

	cr, ci [lanes]float64 // C
	matrix [2]matrixRow   // of s and p
}

// matrixRow is the part of a film's matrix that depends on the polarisation,
// and the form that gives its loss.
type matrixRow struct {
	ar, ai         [lanes]float64 // S/η
	br, bi         [lanes]float64 // S η
	uu, vv, vu, wu [lanes]float64 // factors of |U|², |V|², Re VU*, Im VU*
}

// normalWave returns q = sqrt(q²) with Im q >= 0, Re q >= 0 and Re q² for the
// index n + ik. The difference form of q² keeps its digits at critical angles;
// derived: n² - k² - n0² sin²θ = (n-n0)(n+n0) - k² + (n0 cosθ)².
func normalWave(n, k, n0, q0sq float64) (qr, qi, kr float64) {
	kr = float64((n-n0)*(n+n0)) - float64(k*k) + q0sq
	qr, qi = rootUpper(kr, 2*n*k)
	return qr, qi, kr
}

// rootUpper returns the square root of kr + i ki, ki >= 0, with Im >= 0 and
// Re >= 0.
func rootUpper(kr, ki float64) (qr, qi float64) {
	t := math.Sqrt(0.5 * (math.Sqrt(float64(kr*kr)+float64(ki*ki)) + math.Abs(kr)))
	if t < tinyRoot {
		t = tinyRoot
	}
	u := 0.5 * ki / t
	if kr >= 0 {
		return t, u
	}
	return u, t
}

// obliquePathRow finds the path of each wave through a film of thickness d at
// oblique incidence. It reports whether a phase is long.
func obliquePathRow(f *filmRow, w *waveRow, n, k []float64, d float64) (long bool) {
	b := len(n)
	if b > lanes {
		b = lanes
	}
	n, k = n[:b], k[:b]
	_, _ = f.qr[0], w.n0[0] // so that the loop need not ask whether they are nil
	for i := range n {
		kr := float64((n[i]-w.n0[i])*(n[i]+w.n0[i])) - float64(k[i]*k[i]) + w.q0sq[i]
		qr, qi := rootUpper(kr, 2*n[i]*k[i])
		kd := w.k0[i] * d
		x := kd * qr
		f.qr[i], f.qi[i], f.kr[i] = qr, qi, kr
		f.phase[i], f.decay[i] = x, -2*kd*qi
		if x > longPhase {
			long = true
		}
	}
	return long
}

// normalPathRow is obliquePathRow at normal incidence, where q is the index
// itself.
func normalPathRow(f *filmRow, w *waveRow, n, k []float64, d float64) (long bool) {
	b := len(n)
	if b > lanes {
		b = lanes
	}
	n, k = n[:b], k[:b]
	_, _ = f.phase[0], w.k0[0] // so that the loop need not ask whether they are nil
	for i := range n {
		kd := w.k0[i] * d
		x := kd * n[i]
		f.phase[i], f.decay[i] = x, -2*kd*k[i]
		if x > longPhase {
			long = true
		}
	}
	return long
}

// phaseFactorRow finds the parts of the complex phase factor of the first
// len(e) lanes from their paths.
func phaseFactorRow(f *filmRow, e []float64) {
	b := len(e)
	sincosRow(f.sin[:b], f.cos[:b], f.phase[:b])
	expRow(e, f.m[:b], f.decay[:b])
}

// bothFields carries the fields of a block from the back of a film to its front,
// both polarisations. in and out may be the same rows. as and ap receive the flux
// that stays in the film in units of the scaled fields at its front.
func bothFields(f *filmRow, in, out *fieldRow, as, ap []float64) {
	fieldsRow(f, &f.matrix[0], &in[0], &out[0], as, 0)
	fieldsRow(f, &f.matrix[1], &in[1], &out[1], ap, 0)
}

// normalFields is bothFields at normal incidence, where both polarisations are
// the same.
func normalFields(f *filmRow, in, out *fieldRow, as []float64) {
	fieldsRow(f, &f.matrix[0], &in[0], &out[0], as, 0)
}

// matrixRows finds the matrices of a film for both polarisations.
//
// With C = exp(-y) cos(x+iy), S = -i exp(-y) sin(x+iy) and the admittance η,
// the fields in front are U' = C U + (S/η) V and V' = S η U + C V. Nothing
// grows, because the factor exp(-y) is taken out and remembered in e = exp(-2y).
// s has η = q and p has η = ε/q; dividing S by q first costs no digits where q
// vanishes.
//
// derived: the flux that stays in the film, Re(U'V'*) - e Re(UV*), is
//
//	(P Re η + Q Im η) |U|² + [(P Re η - Q Im η) |V|² +
//	2 (M (Re η)² - E (Im η)²) Re VU* + 2 (M + E) Re η Im η Im VU*] / |η|²
//
// with P = m(1+e)/4, Q = e sin x cos x, M = m²/4, E = e sin² x. Every factor is of
// the order of Im η or m, so that tiny absorptances keep their relative
// accuracy, and vanishes where k = 0.
func matrixRows(f *filmRow, n, k, e []float64) {
	b := len(n)
	if b > lanes {
		b = lanes
	}
	n, k, e = n[:b], k[:b], e[:b]
	s, p := &f.matrix[0], &f.matrix[1]
	for i := range n {
		qr, qi := f.qr[i], f.qi[i]
		er, ei := (n[i]-k[i])*(n[i]+k[i]), 2*n[i]*k[i]
		e2 := float64(er*er) + float64(ei*ei)
		qr2, qi2 := float64(qr*qr), float64(qi*qi)
		q2 := qr2 + qi2
		inv := 1 / (e2 * q2)
		iq, ie := inv*e2, inv*q2

		h := 0.5 * f.m[i]
		g := 1 - h
		es := e[i] * f.sin[i]
		lp, lq := h*g, es*f.cos[i]
		lm, le := float64(h*h), float64(es*f.sin[i])
		both := lm + le
		pr, qq := float64(lp*qr), float64(lq*qi)
		s.uu[i], s.vv[i] = pr+qq, (pr-qq)*iq
		s.vu[i] = 2 * (float64(lm*qr2) - float64(le*qi2)) * iq
		s.wu[i] = both * ei * iq
		hr, hi := dot(er, ei, qr, qi), cross(er, ei, qr, qi) // η |q|²
		pr, qq = float64(lp*hr), float64(lq*hi)
		p.uu[i], p.vv[i] = (pr+qq)*iq, (pr-qq)*ie
		inv *= 2
		p.vu[i] = (float64(lm*float64(hr*hr)) - float64(le*float64(hi*hi))) * inv
		p.wu[i] = both * hr * hi * inv

		sr, si := f.cos[i]*h, -f.sin[i]*g
		f.cr[i], f.ci[i] = f.cos[i]*g, -f.sin[i]*h
		ar, ai := dot(sr, si, qr, qi)*iq, cross(sr, si, qr, qi)*iq       // σ = S/q
		br, bi := mulRe(ar, ai, f.kr[i], ei), mulIm(ar, ai, f.kr[i], ei) // σ q²
		s.ar[i], s.ai[i], s.br[i], s.bi[i] = ar, ai, br, bi
		p.br[i], p.bi[i] = mulRe(ar, ai, er, ei), mulIm(ar, ai, er, ei)     // σ ε
		p.ar[i], p.ai[i] = dot(br, bi, er, ei)*ie, cross(br, bi, er, ei)*ie // σ q²/ε
	}
}

// normalMatrixRow is matrixRows at normal incidence.
func normalMatrixRow(f *filmRow, n, k, e []float64) {
	b := len(n)
	if b > lanes {
		b = lanes
	}
	n, k, e = n[:b], k[:b], e[:b]
	s := &f.matrix[0]
	for i := range n {
		h := 0.5 * f.m[i]
		g := 1 - h
		sr, si := f.cos[i]*h, -f.sin[i]*g
		f.cr[i], f.ci[i] = f.cos[i]*g, -f.sin[i]*h
		es := e[i] * f.sin[i]
		lp, lq := h*g, es*f.cos[i]
		lm, le := float64(h*h), float64(es*f.sin[i])

		qr, qi := n[i], k[i]
		qr2, qi2 := float64(qr*qr), float64(qi*qi)
		iq := 1 / (qr2 + qi2)
		s.ar[i], s.ai[i] = dot(sr, si, qr, qi)*iq, cross(sr, si, qr, qi)*iq
		s.br[i], s.bi[i] = mulRe(sr, si, qr, qi), mulIm(sr, si, qr, qi)
		pr, qq := float64(lp*qr), float64(lq*qi)
		s.uu[i], s.vv[i] = pr+qq, (pr-qq)*iq
		iq *= 2
		s.vu[i] = (float64(lm*qr2) - float64(le*qi2)) * iq
		s.wu[i] = (lm + le) * qr * qi * iq
	}
}

// fieldsRow carries the fields of one polarisation. The film's matrix for lane i
// is at position i+at.
func fieldsRow(f *filmRow, x *matrixRow, in, out *polarRow, a []float64, at int) {
	b := len(a)
	if b > lanes {
		b = lanes
	}
	a = a[:b]
	_, _, _, _ = f.cr[0], x.ar[0], in.ur[0], out.ur[0] // so that the loop need not ask whether they are nil
	for i := range a {
		j := (i + at) & (lanes - 1)
		ur, ui, vr, vi := in.ur[i], in.ui[i], in.vr[i], in.vi[i]
		loss := float64(x.uu[j]*dot(ur, ui, ur, ui)) + float64(x.vv[j]*dot(vr, vi, vr, vi)) +
			(float64(x.vu[j]*dot(vr, vi, ur, ui)) + float64(x.wu[j]*cross(vr, vi, ur, ui)))
		if !(loss > 0) {
			loss = 0
		}
		cr, ci, ar, ai, br, bi := f.cr[j], f.ci[j], x.ar[j], x.ai[j], x.br[j], x.bi[j]
		out.ur[i] = mulRe(cr, ci, ur, ui) + mulRe(ar, ai, vr, vi)
		out.ui[i] = mulIm(cr, ci, ur, ui) + mulIm(ar, ai, vr, vi)
		out.vr[i] = mulRe(cr, ci, vr, vi) + mulRe(br, bi, ur, ui)
		out.vi[i] = mulIm(cr, ci, vr, vi) + mulIm(br, bi, ur, ui)
		a[i] = loss
	}
}

// longPhase is the phase in rad above which its rounding is made good: there
// one rounding of the phase would outweigh all others.
const longPhase = 256

// correctPhase turns sine and cosine by what the rounded phase of a thick film
// misses.
func (f *filmRow) correctPhase(w *waveRow, n, k []float64, d float64) {
	for i := range n {
		f.correctLane(i, w, i, n[i], k[i], d)
	}
}

// correctLane does that for lane i, which holds wave number l of w.
func (f *filmRow) correctLane(i int, w *waveRow, l int, n, k, d float64) {
	x := f.phase[i]
	if !(x > longPhase) {
		return
	}
	if x > maxFastPhase {
		f.sin[i], f.cos[i] = math.Sincos(x)
	}
	qr, qi, _ := normalWave(n, k, w.n0[l], w.q0sq[l])
	miss := phaseError(x, w.wavelength[l], d, n, k, w.n0[l], qr, qi, w.angle.sinSquared())
	s, c := f.sin[i], f.cos[i]
	f.sin[i], f.cos[i] = s+miss*c, c-miss*s
}
