package optics

import "math"

// mediumRow is a medium that holds no interference on the lit side or behind a
// group of coherent films: its normal wave number and permittivity.
type mediumRow struct {
	qr, qi, er, ei [lanes]float64
	one, zero      [lanes]float64
	lossless       bool // the medium in front: q and ε are real and d stays 0
}

// set fills the lanes of n. It reports whether q of a lane is nearly critical.
func (m *mediumRow) set(w *waveRow, n, k []float64, normal bool) (critical bool) {
	if normal {
		fastNormalMediumRow(m, n, k)
		return false
	}
	return fastObliqueMediumRow(m, w, n, k)
}

func obliqueMediumRow(m *mediumRow, w *waveRow, n, k []float64) (critical bool) {
	b := len(n)
	if b > lanes {
		b = lanes
	}
	n, k = n[:b], k[:b]
	for i := range n {
		m.er[i], m.ei[i], m.one[i] = (n[i]-k[i])*(n[i]+k[i]), 2*n[i]*k[i], 1
		kr := float64((n[i]-w.n0[i])*(n[i]+w.n0[i])) - float64(k[i]*k[i]) + w.q0sq[i]
		qr, qi := rootUpper(kr, 2*n[i]*k[i])
		m.qr[i], m.qi[i] = qr, qi
		if dot(qr, qi, qr, qi) < nearCritical*w.n0[i]*w.n0[i] {
			critical = true
		}
	}
	return critical
}

func normalMediumRow(m *mediumRow, n, k []float64) {
	b := len(n)
	if b > lanes {
		b = lanes
	}
	n, k = n[:b], k[:b]
	for i := range n {
		m.qr[i], m.qi[i] = n[i], k[i]
		m.er[i], m.ei[i], m.one[i] = (n[i]-k[i])*(n[i]+k[i]), 2*n[i]*k[i], 1
	}
}

// wave returns h and l of the admittance η = h/l of polarisation p: q/1 for s
// and ε/q for p, so that q -> 0 costs nothing. The field of a single wave behind
// is U = l, V = h and the incident amplitude in front is hU + lV.
func (m *mediumRow) wave(p int) (hr, hi, lr, li *[lanes]float64) {
	if p == 0 {
		return &m.qr, &m.qi, &m.one, &m.zero
	}
	return &m.er, &m.ei, &m.qr, &m.qi
}

// load sets the waves and the media in front and behind of one block.
func (bl *block) load(theta float64, wavelength, front, backN, backK []float64) {
	w, f := &bl.wave, &bl.front
	w.angle.set(theta)
	f.lossless = true
	b := len(wavelength)
	fastFrontRow(w, f, wavelength, front, w.angle.cos)
	if bl.back.set(w, backN[:b], backK[:b], theta == 0) {
		for i := range b {
			bl.correctBack(i, backN[i], backK[i])
		}
	}
}

func frontRow(w *waveRow, m *mediumRow, wavelength, front []float64, cos float64) {
	b := len(wavelength)
	if b > lanes {
		b = lanes
	}
	wavelength, front = wavelength[:b], front[:b]
	for i := range wavelength {
		n0 := front[i]
		q0 := n0 * cos
		w.wavelength[i], w.k0[i], w.n0[i], w.q0sq[i] = wavelength[i], 2*math.Pi/wavelength[i], n0, q0*q0
		m.qr[i], m.er[i], m.one[i] = q0, n0*n0, 1
	}
}

// nearCritical is the share of n0² below which q² of the back medium has lost
// digits that the transmittance would show.
const nearCritical = 1.0 / 16

// correctBack finds q of lane i of the back medium again if it is near its
// critical angle.
func (bl *block) correctBack(i int, n, k float64) {
	m := &bl.back
	m.qr[i], m.qi[i] = bl.wave.criticalRoot(i, m.qr[i], m.qi[i], n, k)
}

// criticalRoot returns q or, near the critical angle, a better one.
func (w *waveRow) criticalRoot(i int, qr, qi, n, k float64) (float64, float64) {
	if n0 := w.n0[i]; dot(qr, qi, qr, qi) < nearCritical*n0*n0 {
		return rootUpper(squareNormal(n, k, n0, w.angle.sinSquared()).hi, 2*n*k)
	}
	return qr, qi
}
