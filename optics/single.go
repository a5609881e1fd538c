package optics

// A single wavelength would use one lane of the rows. Instead the lanes hold the
// films: everything but the fields is found for many films at a time, by the
// same operations as in a block of wavelengths.

// singleRow is the work of a single wavelength.
type singleRow struct {
	wave    waveRow // n0 and q0sq of lane 0 in every lane; k0 times the thickness of the film
	n, k, d [lanes]float64
	e       [lanes]float64
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
		g.matrices(w, films, g.single.e[:], start, end-start, normal)
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
			g.keepOrder(cur, j, 1, lanes, normal)
		}
		end = start
	}
}

// crossCompact is crossSingle for groups without history that are a whole
// stack: e and a of film j are at position j, and the fields stay in registers.
func (g *group) crossCompact(w *waveRow, films *filmTable, normal bool) {
	f, io := &g.film, &g.fields[0]
	for end := g.count; end > 0; {
		start := max(0, (end-1)/lanes*lanes)
		g.matrices(w, films, g.e[start:], start, end-start, normal)
		for end > start {
			from := max(0, (end-1)/rescaleEvery*rescaleEvery)
			fieldsSingle(f, &f.matrix[0], &io[0], g.a[0][from:end], from-start)
			if !normal {
				fieldsSingle(f, &f.matrix[1], &io[1], g.a[1][from:end], from-start)
			}
			clear(g.scaled[from:end])
			end = from
			if from > 0 && !(io[0].inOrder(0) && (normal || io[1].inOrder(0))) {
				g.rescale(io, from, 1, 1, normal)
			}
		}
	}
}

// gather copies b films from film number start of the group on into the lanes.
func (g *group) gather(w *waveRow, films *filmTable, start, b int) {
	o, k0 := &g.single, w.k0[0]
	if g.compact {
		for i, f := range films.films[start : start+b] {
			i &= lanes - 1
			o.n[i], o.k[i], o.d[i], o.wave.k0[i] = real(f.Index), imag(f.Index), f.Thickness, k0*f.Thickness
		}
		return
	}
	film := g.first + start*g.step
	for i := range b {
		at := film*films.stride + films.offset
		o.n[i], o.k[i], o.d[i], o.wave.k0[i] = films.n[at], films.k[at], films.d[film], k0*films.d[film]
		film += g.step
	}
}

// matrices finds the matrices of b films from film number start of the group on
// for the wave in lane 0, and their transmittances.
func (g *group) matrices(w *waveRow, films *filmTable, e []float64, start, b int, normal bool) {
	f, o := &g.film, &g.single
	g.gather(w, films, start, b)
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

// fieldsSingle is fieldsRow for lane 0 and the films whose matrices are at
// positions at, at+1, ... of the rows, from the last to the first.
func fieldsSingle(f *filmRow, x *matrixRow, io *polarRow, a []float64, at int) {
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

// deliverSingle is deliver for lane 0 after crossCompact.
func (g *group) deliverSingle(r *Response, ws, wp float64) {
	r.A = grow(r.A, g.count)
	as, e := g.a[0][:len(r.A)], g.e[:len(r.A)]
	gs, gp := ws*g.g[0][0], wp*g.g[1][0]
	if wp == 0 {
		r.R = ws * g.r[0][0]
		for j := range r.A {
			r.A[j] = gs * as[j]
			gs *= e[j]
			if g.scaled[j] {
				gs *= g.scale[2*j*lanes]
			}
		}
		r.T = gs * g.t[0][0]
		return
	}
	ap := g.a[1][:len(r.A)]
	r.R = float64(ws*g.r[0][0]) + float64(wp*g.r[1][0])
	for j := range r.A {
		r.A[j] = float64(gs*as[j]) + float64(gp*ap[j])
		gs, gp = gs*e[j], gp*e[j]
		if g.scaled[j] {
			gs, gp = gs*g.scale[2*j*lanes], gp*g.scale[(2*j+1)*lanes]
		}
	}
	r.T = float64(gs*g.t[0][0]) + float64(gp*g.t[1][0])
}
