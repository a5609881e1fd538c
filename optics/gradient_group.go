package optics

import "math"

// The reverse pass through a group of coherent films.
//
// derived: the objective is w_r r + w_t t + w_d d + sum w_j a_j with d the
// interference flux. Let G_j be the flux per unit of the squared fields in
// front of film j and (D^u, D^v) = (h, l) M_0 ... M_(j-1) the row that finds
// the amplitude D = hU + lV of the incident wave from those fields; h, l = q, 1
// for s and ε, q for p. A change of film i adds (dU, dV) to the fields in front
// of it. What matters is
//
//	ω = U dV - V dU   and   dD/D = (D^u dU + D^v dV)/D,
//
// for the determinant ω is only multiplied by the e of every film on its way
// to the front, and with D held fixed dU = -D^v ω/D, dV = D^u ω/D. So
//
//	dP_j = G_j Re[(D^u U* - D^v V*)/D ω_j]  for the net flux in front of the change,
//	da_i = G_i Re(V* dU + U* dV) - 2 a_i Re(dD/D),
//	da_j = -2 a_j Re(dD/D)                  behind it, and the same for t,
//
// where exp(-y) of film i is not differentiated, since its parts cancel. One
// walk from the front to the back collects the first into one complex number
// W per wave. To W_(j+1) film j adds, by a_j = P_j - P_(j+1),
//
//	2 w_j G_(j+1)/D [D^u (Re(S/η) V* - i Im C U*) - D^v (Re(Sη) U* - i Im C V*)]
//
// with the fields behind it; no term is left of a film without loss.

// pullRow is the state of the walk for one polarisation.
type pullRow struct {
	dur, dui, dvr, dvi [lanes]float64 // D^u/D, D^v/D
	wr, wi             [lanes]float64 // W
	gain               [lanes]float64 // G
	rest               []float64      // [film*lanes+lane]: sum of w a over this film and all behind, with w_t t
}

// groupWeights are the derivatives of the objective with respect to the
// response of a group. The weight of the absorptance of a film is flux times
// the weight that the caller gave to the film.
type groupWeights struct {
	flux, r, t, d [lanes]float64
}

// mediumSlope collects the derivative with respect to the permittivity of a
// medium that is not a coherent film: dF = Re(x dε).
type mediumSlope struct {
	xr, xi [lanes]float64
}

// pull adds the derivatives of one group to the films, to the medium behind
// and to the medium in front unless it is nil.
func (rv *reversal) pull(g *group, w *waveRow, films *filmTable, wt *[2]groupWeights, b int, in, back *mediumSlope) {
	for p := range 2 {
		if rv.use[p] {
			rv.begin(g, p, &wt[p], b)
		}
	}
	for j := range g.count {
		film := g.first + j*g.step
		n, k := films.row(film, b)
		rv.trace(w, n, k, films.d[film], g.e[j*lanes:])
		rv.slopes(n, k)
		for p := range 2 {
			if rv.use[p] {
				rv.step(g, w, p, j, film, b, &wt[p])
			}
		}
	}
	for p := range 2 {
		if rv.use[p] {
			rv.walk[p].end(&g.fields[g.count], p, &wt[p], b)
			back.addBack(g.back, p, &rv.walk[p], b)
			if in != nil {
				in.addFront(g, p, rv, &wt[p], b)
			}
		}
	}
}

// fields returns the rows of the fields of polarisation p.
func (f *fieldRow) polarized(p int) (ur, ui, vr, vi *[lanes]float64) {
	return &f[p].ur, &f[p].ui, &f[p].vr, &f[p].vi
}

// amplitude returns h and l of the incident amplitude hU + lV.
func (m *mediumRow) amplitude(i, p int) (h, l complex128) {
	q := complex(m.qr[i], m.qi[i])
	if p == 0 {
		return q, 1
	}
	return complex(m.er[i], m.ei[i]), q
}

// interfere returns Im η / Re η.
func (m *mediumRow) interfere(i, p int) float64 {
	if p == 0 {
		return m.qi[i] / m.qr[i]
	}
	return (m.ei[i]*m.qr[i] - m.er[i]*m.qi[i]) / (m.er[i]*m.qr[i] + m.ei[i]*m.qi[i])
}

// begin starts the walk in front of the group. Waves without flux or incident
// amplitude have no derivative.
func (rv *reversal) begin(g *group, p int, wt *groupWeights, b int) {
	s := &rv.walk[p]
	rv.collect(g, p, wt, b)
	ur, ui, vr, vi := g.fields[0].polarized(p)
	for i := range b {
		s.dur[i], s.dui[i], s.dvr[i], s.dvi[i] = 0, 0, 0, 0
		s.wr[i], s.wi[i], s.gain[i] = 0, 0, 0
		if wt.flux[i] == 0 || g.g[p][i] == 0 {
			continue
		}
		h, l := g.in.amplitude(i, p)
		inv := 1 / (h*complex(ur[i], ui[i]) + l*complex(vr[i], vi[i]))
		// With D fixed the amplitude r changes by -2hlω/D².
		dr := complex(wt.r[i]*g.rr[p][i], wt.d[i]*g.in.interfere(i, p)-wt.r[i]*g.ri[p][i])
		pull := -4 * h * l * inv * inv * dr
		h, l = h*inv, l*inv
		s.dur[i], s.dui[i], s.dvr[i], s.dvi[i] = real(h), imag(h), real(l), imag(l)
		s.wr[i], s.wi[i] = real(pull), imag(pull)
		s.gain[i] = g.g[p][i]
	}
}

// collect sums the weighted shares from the back, so that small ones keep their
// digits.
func (rv *reversal) collect(g *group, p int, wt *groupWeights, b int) {
	s := &rv.walk[p]
	s.rest = grow(s.rest, (g.count+1)*lanes)
	sum := s.rest[g.count*lanes:][:b]
	for i := range sum {
		sum[i] = wt.t[i] * g.t[p][i]
	}
	for j := g.count - 1; j >= 0; j-- {
		front := s.rest[j*lanes:][:b]
		w, a := rv.a[p][(g.first+j*g.step)*lanes:][:b], g.a[p][j*lanes:][:b]
		for i := range front {
			front[i] = sum[i] + wt.flux[i]*w[i]*a[i]
		}
		sum = front
	}
}

// end adds the derivative of the flux behind the group to W.
func (s *pullRow) end(f *fieldRow, p int, wt *groupWeights, b int) {
	ur, ui, vr, vi := f.polarized(p)
	for i := range b {
		c := wt.t[i] * s.gain[i]
		s.wr[i] += c * (s.dur[i]*ur[i] + s.dui[i]*ui[i] - s.dvr[i]*vr[i] - s.dvi[i]*vi[i])
		s.wi[i] += c * (s.dui[i]*ur[i] - s.dur[i]*ui[i] - s.dvi[i]*vr[i] + s.dvr[i]*vi[i])
	}
}

// thickPhase is k0 d above which the phase of an absorbing film is kept out
// of a difference that would show its rounding.
const thickPhase = 1000

// step takes the walk from the front of film j of the group to its back and
// adds the derivatives of the film: everything that depends on its front is
// Re(α dU + β dV) with the fields there.
func (rv *reversal) step(g *group, w *waveRow, p, j, film, b int, wt *groupWeights) {
	s, o, t := &rv.walk[p], &rv.slope[p], &rv.turn
	if g.scaled[j] {
		rv.rescale(p, g.scale[(2*j+p)*lanes:][:b])
	}
	gur, gui, gvr, gvi := g.fields[j].polarized(p)
	fur, fui, fvr, fvi := g.fields[j+1].polarized(p)
	at := film * lanes
	if b > lanes {
		b = lanes
	}
	dd, xr, xi := rv.dd[at:at+b], rv.xr[at:at+b], rv.xi[at:at+b]
	rest, weight, absorbed := s.rest[j*lanes:j*lanes+b], rv.a[p][at:at+b], g.a[p][j*lanes:j*lanes+b]
	for i := range dd {
		dur, dui, dvr, dvi := s.dur[i], s.dui[i], s.dvr[i], s.dvi[i]
		wr, wi, f := s.wr[i], s.wi[i], -2*rest[i]
		hur, hui, hvr, hvi := gur[i], gui[i], gvr[i], gvi[i]
		alr, ali := f*dur-(wr*hvr-wi*hvi), f*dui-(wr*hvi+wi*hvr)
		ber, bei := f*dvr+(wr*hur-wi*hui), f*dvi+(wr*hui+wi*hur)

		// H on the fields in front; the derivative by thickness is Re(-i k0 θ).
		xxr, xxi, yr, yi := o.xr[i], o.xi[i], o.yr[i], o.yi[i]
		xvr, xvi := xxr*hvr-xxi*hvi, xxr*hvi+xxi*hvr
		yur, yui := yr*hur-yi*hui, yr*hui+yi*hur
		thr := alr*xvr - ali*xvi + ber*yur - bei*yui
		thi := alr*xvi + ali*xvr + ber*yui + bei*yur
		ur, ui, vr, vi := fur[i], fui[i], fvr[i], fvi[i]
		e, kd := o.e[i], t.kd[i]
		if kd > thickPhase && e < 0.5 {
			// The form y U² - x V² is that behind the film times e.
			zr := e * (yr*(ur*ur-ui*ui) - 2*yi*ur*ui - xxr*(vr*vr-vi*vi) + 2*xxi*vr*vi)
			zi := e * (2*yr*ur*ui + yi*(ur*ur-ui*ui) - 2*xxr*vr*vi - xxi*(vr*vr-vi*vi))
			// The film's own share from the same fields as the term with V* below,
			// which it nearly cancels: a has roundings of its own.
			own := hur*hvr + hui*hvi - e*(ur*vr+ui*vi)
			f -= 2 * wt.flux[i] * weight[i] * (s.gain[i]*own - absorbed[i])
			thr = wr*zr - wi*zi + f*(dur*xvr-dui*xvi+dvr*yur-dvi*yui)
			thi = wr*zi + wi*zr + f*(dur*xvi+dui*xvr+dvr*yui+dvi*yur)
		}
		cr, ci := o.cr[i], o.ci[i]
		ar, ai, br, bi := o.ar[i], o.ai[i], o.br[i], o.bi[i]
		wr, wi = e*wr, e*wi
		if loss := wt.flux[i] * weight[i] * s.gain[i]; loss != 0 {
			alr, ali, ber, bei = alr+loss*hvr, ali-loss*hvi, ber+loss*hur, bei-loss*hui
			u2, v2 := hur*hur+hui*hui, hvr*hvr+hvi*hvi
			thr, thi = thr+loss*(xxr*v2+yr*u2), thi+loss*(xxi*v2+yi*u2)
			loss *= 2 * e
			pr, pi := ar*vr-ci*ui, -ar*vi-ci*ur
			mr, mi := br*ur-ci*vi, -br*ui-ci*vr
			wr += loss * (dur*pr - dui*pi - dvr*mr + dvi*mi)
			wi += loss * (dur*pi + dui*pr - dvr*mi - dvi*mr)
		}
		s.wr[i], s.wi[i] = wr, wi
		s.gain[i] *= e
		s.dur[i], s.dui[i] = dur*cr-dui*ci+dvr*br-dvi*bi, dur*ci+dui*cr+dvr*bi+dvi*br
		s.dvr[i], s.dvi[i] = dur*ar-dui*ai+dvr*cr-dvi*ci, dur*ai+dui*ar+dvr*ci+dvi*cr

		dd[i] += w.k0[i] * thi
		gr, gi := t.gr[i], t.gi[i]
		er, ei := kd*(gr*thi+gi*thr), kd*(gi*thi-gr*thr) // -i k0 d θ/(2q²)
		if gr == 0 && gi == 0 {
			cr, ci := t.cr[i], t.ci[i]
			sr, si := alr*ur-ali*ui+ber*vr-bei*vi, alr*ui+ali*ur+ber*vi+bei*vr
			er, ei = cr*sr-ci*si, cr*si+ci*sr
		}
		avr, avi := alr*vr-ali*vi, alr*vi+ali*vr
		bur, bui := ber*ur-bei*ui, ber*ui+bei*ur
		xr[i] += er + o.uur[i]*bur - o.uui[i]*bui + o.vvr[i]*avr - o.vvi[i]*avi
		xi[i] += ei + o.uur[i]*bui + o.uui[i]*bur + o.vvr[i]*avi + o.vvi[i]*avr
	}
}

// rescale follows the forward pass, which brought the fields in front of the
// film back to the order of one.
func (rv *reversal) rescale(p int, scale []float64) {
	o := &rv.slope[p]
	for i, c2 := range scale {
		c := math.Sqrt(c2)
		for _, v := range [...]*[lanes]float64{&o.cr, &o.ci, &o.ar, &o.ai, &o.br, &o.bi, &o.uur, &o.uui, &o.vvr, &o.vvi} {
			v[i] *= c
		}
		o.e[i] *= c2
	}
}

// slope returns l dh - h dl, dh and dl per dε of the medium; the first is also
// the ω of the fields U = l, V = h.
func (m *mediumRow) slope(i, p int) (omega, dh, dl complex128) {
	q := complex(m.qr[i], m.qi[i])
	dq := 0.5 / q
	if p == 0 {
		return dq, dq, 0
	}
	return q - complex(m.er[i], m.ei[i])*dq, 1, dq
}

// addBack adds the derivative with respect to the medium behind, where U = l
// and V = h, so that dF = Re(W ω).
func (x *mediumSlope) addBack(m *mediumRow, p int, s *pullRow, b int) {
	for i := range b {
		if s.wr[i] == 0 && s.wi[i] == 0 {
			continue
		}
		omega, _, _ := m.slope(i, p)
		d := complex(s.wr[i], s.wi[i]) * omega
		x.xr[i] += real(d)
		x.xi[i] += imag(d)
	}
}

// addFront adds the derivative with respect to an absorbing medium of
// incidence.
//
// derived: with η = h/l and D = hU + lV,
//
//	d log g = 2 Re[dh/h - (U dh + V dl)/D] - Re dη / Re η,
//	dr = 2UV (l dh - h dl)/D²,  dη = (l dh - h dl)/l²,
//
// and the interference flux is -2 (Im η / Re η) Im r.
func (x *mediumSlope) addFront(g *group, p int, rv *reversal, wt *groupWeights, b int) {
	ur, ui, vr, vi := g.fields[0].polarized(p)
	for i := range b {
		if wt.flux[i] == 0 || g.g[p][i] == 0 {
			continue
		}
		h, l := g.in.amplitude(i, p)
		omega, dh, dl := g.in.slope(i, p)
		u, v := complex(ur[i], ui[i]), complex(vr[i], vi[i])
		inv := 1 / (h*u + l*v)
		eta, deta := h/l, omega/(l*l)
		dr := 2 * u * v * omega * inv * inv
		all := rv.walk[p].rest[i]
		re, im := real(eta), imag(eta)
		d := complex(all, 0) * (2*dh/h - 2*(u*dh+v*dl)*inv - deta/complex(re, 0))
		d += complex(2*wt.r[i], 0) * complex(g.rr[p][i], -g.ri[p][i]) * dr
		// Im z = Re(-iz).
		d += complex(2*wt.d[i]/re, 0) * (complex(0, g.ri[p][i]) * deta * complex(1, -im/re))
		d += complex(0, 2*wt.d[i]*im/re) * dr
		x.xr[i] += real(d)
		x.xi[i] += imag(d)
	}
}
