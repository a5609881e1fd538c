package optics

import "math"

// mediumRow is a medium that holds no interference on the lit side or behind a
// group of coherent films: its normal wave number and permittivity.
type mediumRow struct {
	qr, qi, er, ei [lanes]float64
	one, zero      [lanes]float64
	lossless       bool // the medium in front: q and ε are real and d stays 0
}

// set fills the lanes of n. It reports whether |q|² of a lane is less than the
// share of n0² below which q² has lost digits.
func (m *mediumRow) set(w *waveRow, n, k []float64, normal bool) (critical bool) {
	b := len(n)
	if b > lanes {
		b = lanes
	}
	n, k = n[:b], k[:b]
	for i := range n {
		m.er[i], m.ei[i], m.one[i] = (n[i]-k[i])*(n[i]+k[i]), 2*n[i]*k[i], 1
	}
	if normal {
		copy(m.qr[:b], n)
		copy(m.qi[:b], k)
		return false
	}
	for i := range n {
		kr := float64((n[i]-w.n0[i])*(n[i]+w.n0[i])) - float64(k[i]*k[i]) + w.q0sq[i]
		qr, qi := rootUpper(kr, 2*n[i]*k[i])
		m.qr[i], m.qi[i] = qr, qi
		if dot(qr, qi, qr, qi) < nearCritical*w.n0[i]*w.n0[i] {
			critical = true
		}
	}
	return critical
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

// filmTable is what the kernel reads of the films: film j at lane i of a block
// is n[j*stride+offset+i].
type filmTable struct {
	n, k           []float64
	d              []float64 // nm
	stride, offset int
}

func (t *filmTable) row(j, b int) (n, k []float64) {
	at := j*t.stride + t.offset
	return t.n[at : at+b], t.k[at : at+b]
}

// group is the response of consecutive coherent films, seen from one side,
// for one block of wavelengths. Index 0 is s, 1 is p; at normal incidence only
// s is filled.
type group struct {
	first, count, step int  // films in the order in which the light meets them
	history            bool // keep the fields of every interface
	mixed              bool // part of a mixed stack, whose balance needs asum and d

	fields []fieldRow // one in all, or count+1 with history: row j lies in front of film j, row count behind the last
	film   filmRow
	single singleRow
	e      []float64    // [film*lanes+lane]: exp(-2y), of the power
	a      [2][]float64 // the same: absorptance
	scale  []float64    // power factor taken out behind a film, s then p, when scaled
	scaled []bool       // per film

	back, in *mediumRow

	rr, ri [2][lanes]float64 // amplitude reflection coefficient of the tangential electric field
	g      [2][lanes]float64 // flux per unit of the scaled fields in front
	r, t   [2][lanes]float64 // reflectance; flux of the single wave behind
	d      [2][lanes]float64 // 1 - r - t - sum a: interference flux in an absorbing medium of incidence
	asum   [2][lanes]float64
}

// rescaleEvery is the number of films after which the fields are brought back
// to the order of one. The bounds of the indices keep them finite in between.
const rescaleEvery = 4

func grow(s []float64, n int) []float64 {
	if cap(s) < n {
		return make([]float64, n)
	}
	return s[:n]
}

// run solves the group for b lanes.
func (g *group) run(w *waveRow, films *filmTable, in, back *mediumRow, b int, normal bool) {
	g.in, g.back = in, back
	rows, pols := 1, 2
	if g.history {
		rows += g.count
	}
	if normal {
		pols = 1
	}
	if len(g.fields) < rows {
		g.fields = make([]fieldRow, rows)
	}
	g.e = grow(g.e, g.count*lanes)
	if len(g.scaled) < g.count {
		g.scaled = make([]bool, g.count)
	}
	for p := range pols {
		g.a[p] = grow(g.a[p], g.count*lanes)
		g.begin(&g.fields[rows-1][p], p, b)
	}
	if b == 1 {
		g.crossSingle(w, films, normal)
	} else {
		g.crossRows(w, films, b, normal)
	}
	for p := range pols {
		g.amplitudes(p, b)
		g.fluxes(p, b)
	}
}

// begin sets the fields of the single wave behind the films, and its flux.
func (g *group) begin(f *polarRow, p, b int) {
	if b > lanes {
		b = lanes
	}
	hr, hi, lr, li := g.back.wave(p)
	t := &g.t[p]
	for i := range b {
		f.ur[i], f.ui[i], f.vr[i], f.vi[i] = lr[i], li[i], hr[i], hi[i]
		t[i] = dot(hr[i], hi[i], lr[i], li[i])
	}
}

// crossRows carries the fields of b lanes through the films, from the back to
// the front.
func (g *group) crossRows(w *waveRow, films *filmTable, b int, normal bool) {
	f := &g.film
	cur := 0
	if g.history {
		cur = g.count
	}
	for j := g.count - 1; j >= 0; j-- {
		next := cur
		if g.history {
			next = j
		}
		film := g.first + j*g.step
		n, k := films.row(film, b)
		at := j * lanes
		e := g.e[at : at+b]
		for i := range b {
			f.kd[i] = w.k0[i] * films.d[film]
		}
		if f.phases(w, n, k, e, normal) {
			f.correctPhase(w, n, k, films.d[film])
		}
		if normal {
			normalMatrixRow(f, n, k, e)
		} else {
			matrixRows(f, n, k, e)
			fieldsRow(f, &f.matrix[1], &g.fields[cur][1], &g.fields[next][1], g.a[1][at:at+b], 0)
		}
		fieldsRow(f, &f.matrix[0], &g.fields[cur][0], &g.fields[next][0], g.a[0][at:at+b], 0)
		cur = next
		g.keepOrder(cur, j, b, normal)
	}
}

// phases finds path and phase factor of each lane from kd and reports whether a
// phase is long.
func (f *filmRow) phases(w *waveRow, n, k, e []float64, normal bool) (long bool) {
	b := len(n)
	if normal {
		long = normalPathRow(f, n, k)
	} else {
		long = pathRow(f, w, n, k)
	}
	sincosRow(f.sin[:b], f.cos[:b], f.phase[:b])
	expRow(e, f.m[:b], f.decay[:b])
	return long
}

// singleRow is the work of a single wavelength, for which the lanes hold films
// instead.
type singleRow struct {
	wave    waveRow // of lane 0 in every lane
	n, k, e [lanes]float64
}

// crossSingle does the same for lane 0 alone: everything but the fields is
// found for many films at a time.
func (g *group) crossSingle(w *waveRow, films *filmTable, normal bool) {
	f, o := &g.film, &g.single
	cur := 0
	if g.history {
		cur = g.count
	}
	for end := g.count; end > 0; {
		start := max(0, end-lanes)
		b := end - start
		for i := range b {
			film := g.first + (start+i)*g.step
			n, k := films.row(film, 1)
			o.n[i], o.k[i], f.kd[i] = n[0], k[0], w.k0[0]*films.d[film]
			o.wave.n0[i], o.wave.q0sq[i] = w.n0[0], w.q0sq[0]
		}
		if f.phases(&o.wave, o.n[:b], o.k[:b], o.e[:b], normal) {
			for i := range b {
				f.correctLane(i, w, 0, o.n[i], o.k[i], films.d[g.first+(start+i)*g.step])
			}
		}
		if normal {
			normalMatrixRow(f, o.n[:b], o.k[:b], o.e[:b])
		} else {
			matrixRows(f, o.n[:b], o.k[:b], o.e[:b])
		}
		for i := b - 1; i >= 0; i-- {
			j := start + i
			next := cur
			if g.history {
				next = j
			}
			g.e[j*lanes] = o.e[i]
			fieldsRow(f, &f.matrix[0], &g.fields[cur][0], &g.fields[next][0], g.a[0][j*lanes:j*lanes+1], i)
			if !normal {
				fieldsRow(f, &f.matrix[1], &g.fields[cur][1], &g.fields[next][1], g.a[1][j*lanes:j*lanes+1], i)
			}
			cur = next
			g.keepOrder(cur, j, 1, normal)
		}
		end = start
	}
}

// keepOrder looks at the fields in front of film j every few films.
func (g *group) keepOrder(row, j, b int, normal bool) {
	g.scaled[j] = false
	if j%rescaleEvery == 0 && j > 0 {
		g.rescale(&g.fields[row], j, b, normal)
	}
}

// Bounds of the squared fields between which nothing is rescaled.
const (
	largeField = 0x1p200
	smallField = 0x1p-200
)

// rescale brings fields that have grown or shrunk beyond the bounds back to
// the order of one, by an exact power of two, and notes the factor.
func (g *group) rescale(f *fieldRow, j, b int, normal bool) {
	out := outOfOrder(&f[0], b)
	if !normal {
		out = out || outOfOrder(&f[1], b)
	}
	if !out {
		return
	}
	g.scaled[j] = true
	g.scale = grow(g.scale, 2*g.count*lanes)
	at := 2 * j * lanes
	rescaleFields(&f[0], g.scale[at:at+b], g.a[0][j*lanes:])
	if !normal {
		rescaleFields(&f[1], g.scale[at+lanes:at+lanes+b], g.a[1][j*lanes:])
	}
}

// outOfOrder reports whether the fields of a lane are beyond the bounds.
func outOfOrder(f *polarRow, b int) (out bool) {
	if b > lanes {
		b = lanes
	}
	for i := range b {
		s := dot(f.ur[i], f.ui[i], f.ur[i], f.ui[i]) + dot(f.vr[i], f.vi[i], f.vr[i], f.vi[i])
		if !(s < largeField && s > smallField) {
			out = true
		}
	}
	return out
}

func rescaleFields(f *polarRow, scale, a []float64) {
	for i := range scale {
		_, exp := math.Frexp(math.Abs(f.ur[i]) + math.Abs(f.ui[i]) + math.Abs(f.vr[i]) + math.Abs(f.vi[i]))
		c := math.Ldexp(1, -exp)
		f.ur[i], f.ui[i], f.vr[i], f.vi[i] = c*f.ur[i], c*f.ui[i], c*f.vr[i], c*f.vi[i]
		scale[i] = c * c
		a[i] *= c * c
	}
}

// amplitudes finds r, the reflectance and the flux per field in front, for
// polarisation p.
func (g *group) amplitudes(p, b int) {
	if b > lanes {
		b = lanes
	}
	in, f := g.in, &g.fields[0][p]
	hr, hi, lr, li := in.wave(p)
	rr, ri, r, gain, d := &g.rr[p], &g.ri[p], &g.r[p], &g.g[p], &g.d[p]
	if in.lossless {
		losslessAmplitudeRow(r, rr, ri, gain, hr, lr, f, b)
		return
	}
	for i := range b {
		ur, ui := mulRe(hr[i], hi[i], f.ur[i], f.ui[i]), mulIm(hr[i], hi[i], f.ur[i], f.ui[i])
		vr, vi := mulRe(lr[i], li[i], f.vr[i], f.vi[i]), mulIm(lr[i], li[i], f.vr[i], f.vi[i])
		pr, pi, mr, mi := ur+vr, ui+vi, ur-vr, ui-vi
		inv := 1 / dot(pr, pi, pr, pi)
		r[i] = dot(mr, mi, mr, mi) * inv
		rr[i], ri[i] = dot(mr, mi, pr, pi)*inv, cross(mr, mi, pr, pi)*inv
		gain[i], d[i] = 0, 0
		// A wave that decays faster than it oscillates carries no flux of its own.
		if re := dot(hr[i], hi[i], lr[i], li[i]); re > 0 && in.qi[i] < in.qr[i] {
			ie := 1 / re
			gain[i] = 4 * dot(hr[i], hi[i], hr[i], hi[i]) * dot(lr[i], li[i], lr[i], li[i]) * inv * ie
			// derived: the net flux of a(1+r) and η a(1-r) is
			// |a|² [Re η (1-|r|²) + 2 Im η Im r].
			d[i] = -2 * cross(hr[i], hi[i], lr[i], li[i]) * ie * ri[i]
		}
	}
}

// losslessAmplitudeRow is amplitudes for a medium of incidence with real h and
// l. There is no interference flux in it.
func losslessAmplitudeRow(r, rr, ri, gain, h, l *[lanes]float64, f *polarRow, b int) {
	if b > lanes {
		b = lanes
	}
	for i := range b {
		ur, ui, vr, vi := float64(h[i]*f.ur[i]), float64(h[i]*f.ui[i]), float64(l[i]*f.vr[i]), float64(l[i]*f.vi[i])
		pr, pi, mr, mi := ur+vr, ui+vi, ur-vr, ui-vi
		inv := 1 / dot(pr, pi, pr, pi)
		r[i] = dot(mr, mi, mr, mi) * inv
		rr[i], ri[i] = dot(mr, mi, pr, pi)*inv, cross(mr, mi, pr, pi)*inv
		gain[i] = 4 * h[i] * l[i] * inv
	}
}

// fluxes turns the losses in units of the fields into absorptances.
func (g *group) fluxes(p, b int) {
	gain, t, a := g.film.phase[:b], g.t[p][:b], g.a[p]
	copy(gain, g.g[p][:b])
	for j := range g.count {
		fluxRow(gain, a[j*lanes:j*lanes+b], g.e[j*lanes:j*lanes+b])
		if g.scaled[j] {
			scale := g.scale[(2*j+p)*lanes:][:b]
			for i := range scale {
				gain[i] *= scale[i]
			}
		}
	}
	for i := range t {
		t[i] *= gain[i]
	}
	if !g.mixed {
		return
	}
	sum := g.asum[p][:b]
	clear(sum)
	for j := range g.count {
		for i, v := range a[j*lanes : j*lanes+b] {
			sum[i] += v
		}
	}
}

// fluxRow multiplies the losses of a film by the flux per field in front of it,
// and that flux by the film's transmittance.
func fluxRow(gain, a, e []float64) {
	a, e = a[:len(gain)], e[:len(gain)]
	for i, v := range gain {
		a[i] *= v
		gain[i] = v * e[i]
	}
}
