package optics

import "math"

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

// run finds r and the losses in units of the fields for b lanes. What they
// are in units of the incident flux is left to fluxes or deliver.
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
	}
}

// begin sets the fields of the single wave behind the films, and its flux.
func (g *group) begin(f *polarRow, p, b int) {
	hr, hi, lr, li := g.back.wave(p)
	fastSingleWaveRow(f, &g.t[p], hr, hi, lr, li, b)
}

func singleWaveRow(f *polarRow, t, hr, hi, lr, li *[lanes]float64, b int) {
	if b > lanes {
		b = lanes
	}
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
		d, at := films.d[film], j*lanes
		e, as := g.e[at:at+b], g.a[0][at:at+b]
		long := f.paths(w, n, k, d, normal)
		fastPhaseFactorRow(f, e)
		if long {
			f.correctPhase(w, n, k, d)
		}
		if normal {
			fastNormalMatrixRow(f, n, k, e)
			fastNormalFields(f, &g.fields[cur], &g.fields[next], as)
		} else {
			fastMatrixRows(f, n, k, e)
			fastBothFields(f, &g.fields[cur], &g.fields[next], as, g.a[1][at:at+b])
		}
		cur = next
		g.keepOrder(cur, j, b, normal)
	}
}

func (f *filmRow) paths(w *waveRow, n, k []float64, d float64, normal bool) (long bool) {
	if normal {
		return fastNormalPathRow(f, w, n, k, d)
	}
	return fastObliquePathRow(f, w, n, k, d)
}

// keepOrder looks at the fields in front of film j every few films.
func (g *group) keepOrder(row, j, b int, normal bool) {
	g.scaled[j] = false
	if j%rescaleEvery == 0 && j > 0 {
		g.rescale(&g.fields[row], j, b, lanes, normal)
	}
}

// Bounds of the squared fields between which nothing is rescaled.
const (
	largeField = 0x1p200
	smallField = 0x1p-200
)

// rescale brings fields that have grown or shrunk beyond the bounds back to
// the order of one, by an exact power of two, and notes the factor. The losses
// of film j are at a[j*stride:].
func (g *group) rescale(f *fieldRow, j, b, stride int, normal bool) {
	out := fastOrderRow(&f[0], b)
	if !normal {
		out = out || fastOrderRow(&f[1], b)
	}
	if !out {
		return
	}
	g.scaled[j] = true
	g.scale = grow(g.scale, 2*g.count*lanes)
	at := 2 * j * lanes
	rescaleFields(&f[0], g.scale[at:at+b], g.a[0][j*stride:])
	if !normal {
		rescaleFields(&f[1], g.scale[at+lanes:at+lanes+b], g.a[1][j*stride:])
	}
}

// orderRow reports whether the fields of a lane are beyond the bounds.
func orderRow(f *polarRow, b int) (out bool) {
	if b > lanes {
		b = lanes
	}
	for i := range b {
		if !f.inOrder(i) {
			out = true
		}
	}
	return out
}

// rescaleFields leaves lanes within the bounds alone, so that the bits of one do
// not depend on its neighbours.
func rescaleFields(f *polarRow, scale, a []float64) {
	for i := range scale {
		scale[i] = 1
		if f.inOrder(i) {
			continue
		}
		_, exp := math.Frexp(math.Abs(f.ur[i]) + math.Abs(f.ui[i]) + math.Abs(f.vr[i]) + math.Abs(f.vi[i]))
		c := math.Ldexp(1, -exp)
		f.ur[i], f.ui[i], f.vr[i], f.vi[i] = c*f.ur[i], c*f.ui[i], c*f.vr[i], c*f.vi[i]
		scale[i] = c * c
		a[i] *= c * c
	}
}

// inOrder reports whether the fields of lane i are within the bounds.
func (f *polarRow) inOrder(i int) bool {
	s := dot(f.ur[i], f.ui[i], f.ur[i], f.ui[i]) + dot(f.vr[i], f.vi[i], f.vr[i], f.vi[i])
	return s < largeField && s > smallField
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
		fastLosslessAmplitudeRow(r, rr, ri, gain, hr, lr, f, b)
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
		hr, lr := h[i], l[i]
		ur, ui, vr, vi := float64(hr*f.ur[i]), float64(hr*f.ui[i]), float64(lr*f.vr[i]), float64(lr*f.vi[i])
		pr, pi, mr, mi := ur+vr, ui+vi, ur-vr, ui-vi
		inv := 1 / dot(pr, pi, pr, pi)
		r[i] = dot(mr, mi, mr, mi) * inv
		rr[i], ri[i] = dot(mr, mi, pr, pi)*inv, cross(mr, mi, pr, pi)*inv
		gain[i] = 4 * hr * lr * inv
	}
}
