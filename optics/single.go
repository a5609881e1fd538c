package optics

import "math"

// A single wavelength would use one lane of the rows. Instead the lanes hold the
// films: everything but the fields is found for many films at a time, by the
// same operations as in a block of wavelengths.

// singleRow is the work of a single wavelength.
type singleRow struct {
	wave    waveRow // n0 and q0sq of lane 0 in every lane; k0 times the thickness of the film
	n, k, d [lanes]float64
	e       [lanes]float64
}

// set stores film i.
func (o *singleRow) set(i int, n, k, d, k0 float64) {
	o.n[i], o.k[i], o.d[i], o.wave.k0[i] = n, k, d, k0*d
}

// crossSingle is crossRows for lane 0 alone.
func (g *group) crossSingle(w *waveRow, films *filmTable, normal bool) {
	f := &g.film
	cur := 0
	if g.history {
		cur = g.count
	}
	for end := g.count; end > 0; {
		start := max(0, end-lanes)
		for j := start; j < end; j++ {
			film := g.first + j*g.step
			n, k := films.row(film, 1)
			g.single.set(j-start, n[0], k[0], films.d[film], w.k0[0])
		}
		g.matrices(w, g.single.e[:], end-start, normal)
		for j := end - 1; j >= start; j-- {
			next := cur
			if g.history {
				next = j
			}
			at := j * lanes
			g.e[at] = g.single.e[j-start]
			fieldsRow(f, &f.matrix[0], &g.fields[cur][0], &g.fields[next][0], g.a[0][at:at+1], j-start)
			if !normal {
				fieldsRow(f, &f.matrix[1], &g.fields[cur][1], &g.fields[next][1], g.a[1][at:at+1], j-start)
			}
			cur = next
			g.keepOrder(cur, j, 1, normal)
		}
		end = start
	}
}

// matrices finds the matrices of the first b films in the lanes for the wave in
// lane 0, and their transmittances.
func (g *group) matrices(w *waveRow, e []float64, b int, normal bool) {
	f, o := &g.film, &g.single
	// Whole vectors: what is left in the lanes behind the last film fills up.
	full := min((b+vectorLanes-1)/vectorLanes*vectorLanes, lanes)
	if n0, q0sq := w.n0[0], w.q0sq[0]; !normal {
		for i := range full {
			o.wave.n0[i], o.wave.q0sq[i] = n0, q0sq
		}
	}
	n, k, e := o.n[:full], o.k[:full], e[:full]
	long := f.paths(&o.wave, n, k, 1, normal)
	fastPhaseFactorRow(f, e)
	if long {
		for i := range b {
			f.correctLane(i, w, 0, n[i], k[i], o.d[i])
		}
	}
	if normal {
		fastNormalMatrixRow(f, n, k, e)
	} else {
		fastMatrixRows(f, n, k, e)
	}
}

// solveSingle finds the response of a coherent stack. It is the short way of
// run and deliver for one wave without history: the films are packed (e and a
// of film j at position j), and what belongs to the wave stays in registers. The
// operations, and so the bits, are those of the rows.
func (bl *block) solveSingle(dst *Response, st *Stack, wave *Wave, ws, wp float64) {
	w, n0 := &bl.wave, real(st.Front)
	w.angle.set(wave.Angle)
	q0 := n0 * w.angle.cos
	w.wavelength[0], w.k0[0], w.n0[0], w.q0sq[0] = wave.Wavelength, 2*math.Pi/wave.Wavelength, n0, q0*q0

	n, k := real(st.Back), imag(st.Back)
	qr, qi, normal := n, k, wave.Angle == 0
	if !normal {
		qr, qi, _ = normalWave(n, k, n0, q0*q0)
		qr, qi = w.criticalRoot(0, qr, qi, n, k)
	}
	er, ei := (n-k)*(n+k), 2*n*k

	if len(bl.forward) == 0 {
		bl.forward = append(bl.forward, group{})
	}
	g := &bl.forward[0]
	g.count, g.first, g.step = len(st.Films), 0, 1
	g.growSingle()
	s, p := &g.fields[0][0], &g.fields[0][1]
	s.ur[0], s.ui[0], s.vr[0], s.vi[0] = 1, 0, qr, qi
	p.ur[0], p.ui[0], p.vr[0], p.vi[0] = qr, qi, er, ei
	g.crossPacked(w, st.Films, normal, wp == 0)

	dst.A = grow(dst.A, g.count)
	rs, gs := s.incident(q0, 1)
	if wp == 0 {
		dst.R, dst.T = ws*rs, g.deliverPacked(dst.A, ws*gs)*qr
		return
	}
	rp, gp := p.incident(n0*n0, q0)
	gs, gp = g.deliverMeanPacked(dst.A, ws*gs, wp*gp)
	dst.R = float64(ws*rs) + float64(wp*rp)
	dst.T = float64(gs*qr) + float64(gp*dot(er, ei, qr, qi))
}

func (g *group) growSingle() {
	if len(g.fields) == 0 {
		g.fields = make([]fieldRow, 1)
	}
	size := g.count + vectorLanes
	g.e, g.a[0], g.a[1] = grow(g.e, size), grow(g.a[0], size), grow(g.a[1], size)
	if len(g.scaled) < g.count {
		g.scaled = make([]bool, g.count)
	}
	clear(g.scaled[:g.count])
}

// crossPacked carries the fields through the films, those of s alone on demand.
func (g *group) crossPacked(w *waveRow, films []Film, normal, onlyS bool) {
	f, io := &g.film, &g.fields[0]
	for end := g.count; end > 0; {
		start := (end - 1) / lanes * lanes
		for i := range films[start:end] {
			film := &films[start+i]
			g.single.set(i&(lanes-1), real(film.Index), imag(film.Index), film.Thickness, w.k0[0])
		}
		g.matrices(w, g.e[start:], end-start, normal)
		for end > start {
			from := (end - 1) / rescaleEvery * rescaleEvery
			fieldsPacked(f, &f.matrix[0], &io[0], g.a[0][from:end], from-start)
			if !onlyS {
				fieldsPacked(f, &f.matrix[1], &io[1], g.a[1][from:end], from-start)
			}
			end = from
			if from > 0 && !(io[0].inOrder(0) && (onlyS || io[1].inOrder(0))) {
				g.rescale(io, from, 1, 1, onlyS)
			}
		}
	}
}

// fieldsPacked is fieldsRow for lane 0 and the films whose matrices are at
// positions at, at+1, ... of the rows, from the last to the first.
func fieldsPacked(f *filmRow, x *matrixRow, io *polarRow, a []float64, at int) {
	ur, ui, vr, vi := io.ur[0], io.ui[0], io.vr[0], io.vi[0]
	for i := len(a) - 1; i >= 0; i-- {
		j := (i + at) & (lanes - 1)
		loss := float64(x.uu[j]*dot(ur, ui, ur, ui)) + float64(x.vv[j]*dot(vr, vi, vr, vi)) +
			(float64(x.vu[j]*dot(vr, vi, ur, ui)) + float64(x.wu[j]*cross(vr, vi, ur, ui)))
		if !(loss > 0) {
			loss = 0
		}
		a[i] = loss
		cr, ci, ar, ai, br, bi := f.cr[j], f.ci[j], x.ar[j], x.ai[j], x.br[j], x.bi[j]
		ur, ui, vr, vi =
			mulRe(cr, ci, ur, ui)+mulRe(ar, ai, vr, vi), mulIm(cr, ci, ur, ui)+mulIm(ar, ai, vr, vi),
			mulRe(cr, ci, vr, vi)+mulRe(br, bi, ur, ui), mulIm(cr, ci, vr, vi)+mulIm(br, bi, ur, ui)
	}
	io.ur[0], io.ui[0], io.vr[0], io.vi[0] = ur, ui, vr, vi
}

// incident is losslessAmplitudeRow for lane 0: the reflectance and the flux per
// field in front of real h and l.
func (f *polarRow) incident(h, l float64) (r, gain float64) {
	ur, ui, vr, vi := float64(h*f.ur[0]), float64(h*f.ui[0]), float64(l*f.vr[0]), float64(l*f.vi[0])
	pr, pi, mr, mi := ur+vr, ui+vi, ur-vr, ui-vi
	inv := 1 / dot(pr, pi, pr, pi)
	return dot(mr, mi, mr, mi) * inv, 4 * h * l * inv
}

// deliverPacked is deliver without the last film: it returns the flux per field
// behind the films.
func (g *group) deliverPacked(dst []float64, gs float64) float64 {
	as, e := g.a[0][:len(dst)], g.e[:len(dst)]
	for j := range dst {
		dst[j] = gs * as[j]
		gs *= e[j]
		if g.scaled[j] {
			gs *= g.scale[2*j*lanes]
		}
	}
	return gs
}

// deliverMeanPacked does so for both polarisations.
func (g *group) deliverMeanPacked(dst []float64, gs, gp float64) (float64, float64) {
	as, ap, e := g.a[0][:len(dst)], g.a[1][:len(dst)], g.e[:len(dst)]
	for j := range dst {
		dst[j] = float64(gs*as[j]) + float64(gp*ap[j])
		gs, gp = gs*e[j], gp*e[j]
		if g.scaled[j] {
			gs, gp = gs*g.scale[2*j*lanes], gp*g.scale[(2*j+1)*lanes]
		}
	}
	return gs, gp
}
