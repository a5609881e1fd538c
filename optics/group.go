package optics

import "math"

// mediumRow is a medium that holds no interference on the lit side or behind a
// group of coherent films: its normal wave number and permittivity.
type mediumRow struct {
	qr, qi, er, ei [lanes]float64
}

func (m *mediumRow) set(i int, n, k, n0, q0sq float64) {
	m.qr[i], m.qi[i], _ = normalWave(n, k, n0, q0sq)
	m.er[i], m.ei[i] = (n-k)*(n+k), 2*n*k
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

	fields []fieldRow // one in all, or count+1 with history: row j lies in front of film j, row count behind the last
	film   filmRow
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
	rows := 1
	if g.history {
		rows += g.count
	}
	if len(g.fields) < rows {
		g.fields = make([]fieldRow, rows)
	}
	g.e, g.a[0] = grow(g.e, g.count*lanes), grow(g.a[0], g.count*lanes)
	if !normal {
		g.a[1] = grow(g.a[1], g.count*lanes)
	}
	if len(g.scaled) < g.count {
		g.scaled = make([]bool, g.count)
	}
	cur := &g.fields[rows-1]
	for i := range b {
		cur.ur[i], cur.ui[i], cur.vr[i], cur.vi[i] = 1, 0, back.qr[i], back.qi[i]
	}
	if !normal {
		for i := range b {
			cur.xr[i], cur.xi[i], cur.yr[i], cur.yi[i] = back.qr[i], back.qi[i], back.er[i], back.ei[i]
		}
	}
	// The back flux must be read before the row is overwritten.
	for i := range b {
		g.t[0][i] = back.qr[i]
		g.t[1][i] = back.qr[i]*back.er[i] + back.qi[i]*back.ei[i]
	}
	for j := g.count - 1; j >= 0; j-- {
		next := cur
		if g.history {
			next = &g.fields[j]
		}
		film := g.first + j*g.step
		n, k := films.row(film, b)
		at := j * lanes
		if normal {
			crossNormal(&g.film, w, cur, next, n, k, films.d[film], g.e[at:at+b], g.a[0][at:at+b])
		} else {
			crossOblique(&g.film, w, cur, next, n, k, films.d[film], g.e[at:at+b], g.a[0][at:at+b], g.a[1][at:at+b])
		}
		cur = next
		g.scaled[j] = false
		if j%rescaleEvery == 0 && j > 0 {
			g.rescale(cur, j, b, normal)
		}
	}
	g.amplitudes(cur, 0, b)
	if !normal {
		g.amplitudes(cur, 1, b)
	}
	g.fluxes(b, normal)
}

// Bounds of the squared fields between which nothing is rescaled.
const (
	largeField = 0x1p200
	smallField = 0x1p-200
)

// rescale brings fields that have grown or shrunk beyond the bounds back to
// the order of one, by an exact power of two, and notes the factor.
func (g *group) rescale(f *fieldRow, j, b int, normal bool) {
	ok := true
	for i := range b {
		s := f.ur[i]*f.ur[i] + f.ui[i]*f.ui[i] + f.vr[i]*f.vr[i] + f.vi[i]*f.vi[i]
		ok = ok && s < largeField && s > smallField
	}
	if !normal {
		for i := range b {
			s := f.xr[i]*f.xr[i] + f.xi[i]*f.xi[i] + f.yr[i]*f.yr[i] + f.yi[i]*f.yi[i]
			ok = ok && s < largeField && s > smallField
		}
	}
	if ok {
		return
	}
	g.scaled[j] = true
	g.scale = grow(g.scale, 2*g.count*lanes)
	at := 2 * j * lanes
	rescaleFields(&f.ur, &f.ui, &f.vr, &f.vi, g.scale[at:at+b], g.a[0][j*lanes:])
	if !normal {
		rescaleFields(&f.xr, &f.xi, &f.yr, &f.yi, g.scale[at+lanes:at+lanes+b], g.a[1][j*lanes:])
	}
}

func rescaleFields(ur, ui, vr, vi *[lanes]float64, scale, a []float64) {
	for i := range scale {
		_, exp := math.Frexp(math.Abs(ur[i]) + math.Abs(ui[i]) + math.Abs(vr[i]) + math.Abs(vi[i]))
		c := math.Ldexp(1, -exp)
		ur[i], ui[i], vr[i], vi[i] = c*ur[i], c*ui[i], c*vr[i], c*vi[i]
		scale[i] = c * c
		a[i] *= c * c
	}
}

// amplitudes finds r, the reflectance and the flux per field in front, for
// polarisation p.
func (g *group) amplitudes(f *fieldRow, p, b int) {
	in := g.in
	for i := range b {
		// For p everything is multiplied by q, so that q -> 0 costs nothing.
		qr, qi := in.qr[i], in.qi[i]
		etaRe, etaIm, etaSq := qr, qi, qr*qr+qi*qi
		ur, ui, vr, vi := f.ur[i], f.ui[i], f.vr[i], f.vi[i]
		if p == 1 {
			er, ei := in.er[i], in.ei[i]
			etaRe, etaIm, etaSq = (er*qr+ei*qi)/etaSq, (ei*qr-er*qi)/etaSq, er*er+ei*ei
			xr, xi, yr, yi := f.xr[i], f.xi[i], f.yr[i], f.yi[i]
			ur, ui, vr, vi = er*xr-ei*xi, er*xi+ei*xr, qr*yr-qi*yi, qr*yi+qi*yr
		} else {
			ur, ui = qr*ur-qi*ui, qr*ui+qi*ur
		}
		pr, pi, mr, mi := ur+vr, ui+vi, ur-vr, ui-vi
		inv := 1 / (pr*pr + pi*pi)
		g.r[p][i] = (mr*mr + mi*mi) * inv
		g.rr[p][i], g.ri[p][i] = (mr*pr+mi*pi)*inv, (mi*pr-mr*pi)*inv
		// A wave that decays faster than it oscillates carries no flux of its own.
		if etaRe > 0 && in.qi[i] < in.qr[i] {
			g.g[p][i] = 4 * etaSq * inv / etaRe
			// derived: the net flux of a(1+r) and η a(1-r) is
			// |a|² [Re η (1-|r|²) + 2 Im η Im r].
			g.d[p][i] = -2 * etaIm / etaRe * g.ri[p][i]
		} else {
			g.g[p][i], g.d[p][i] = 0, 0
		}
	}
}

// fluxes turns the losses in units of the fields into absorptances.
func (g *group) fluxes(b int, normal bool) {
	pols := 2
	if normal {
		pols = 1
	}
	for p := range pols {
		gain, sum, t, a := g.film.phase[:b], g.asum[p][:b], g.t[p][:b], g.a[p]
		copy(gain, g.g[p][:b])
		clear(sum)
		for j := range g.count {
			aj, ej := a[j*lanes:j*lanes+b], g.e[j*lanes:j*lanes+b]
			for i := range aj {
				v := aj[i] * gain[i]
				aj[i] = v
				sum[i] += v
				gain[i] *= ej[i]
			}
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
	}
}
