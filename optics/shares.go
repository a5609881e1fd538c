package optics

// fluxes turns the losses in units of the fields into absorptances.
func (g *group) fluxes(p, b int) {
	gain, t, a := g.film.phase[:b], g.t[p][:b], g.a[p]
	copy(gain, g.g[p][:b])
	for j := range g.count {
		aj := a[j*lanes : j*lanes+b]
		fastShareRow(aj, gain, aj, g.e[j*lanes:j*lanes+b])
		if g.scaled[j] {
			multiply(gain, g.scale[(2*j+p)*lanes:])
		}
	}
	multiply(t, gain)
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

// deliver does the work of fluxes for len(r) lanes from lane skip on and stores
// the mean over the polarisations, film j at a[j*stride:]. The weights are powers
// of two, so that the bits are those of weighing later.
func (g *group) deliver(r, t, a []float64, stride, skip int, ws, wp float64) {
	b := len(r)
	gs, gp := g.film.phase[skip:skip+b], g.film.decay[skip:skip+b]
	weigh(r, g.r[0][skip:], g.r[1][skip:], ws, wp)
	fastScaleRow(gs, g.g[0][skip:skip+b], ws)
	if wp != 0 {
		fastScaleRow(gp, g.g[1][skip:skip+b], wp)
	}
	for j := range g.count {
		at := j*lanes + skip
		dst, e, as := a[j*stride:][:b], g.e[at:at+b], g.a[0][at:at+b]
		if wp == 0 {
			fastShareRow(dst, gs, as, e)
		} else {
			fastMeanShareRow(dst, gs, gp, as, g.a[1][at:at+b], e)
		}
		if g.scaled[j] {
			multiply(gs, g.scale[2*j*lanes+skip:])
			multiply(gp, g.scale[(2*j+1)*lanes+skip:])
		}
	}
	// The last flux behind is what passes. Nobody reads the gains afterwards.
	ts, tp := g.t[0][skip:skip+b], g.t[1][skip:skip+b]
	if wp == 0 {
		fastShareRow(t, gs, ts, ts)
	} else {
		fastMeanShareRow(t, gs, gp, ts, tp, ts)
	}
}

func multiply(dst, by []float64) {
	by = by[:len(dst)]
	for i := range dst {
		dst[i] *= by[i]
	}
}

// shareRow multiplies the losses of a film by the flux per field in front of it
// and that flux by the film's transmittance.
func shareRow(dst, gs, as, e []float64) {
	gs, as, e = gs[:len(dst)], as[:len(dst)], e[:len(dst)]
	for i := range dst {
		dst[i] = gs[i] * as[i]
		gs[i] *= e[i]
	}
}

// meanShareRow is shareRow for the sum of both polarisations.
func meanShareRow(dst, gs, gp, as, ap, e []float64) {
	gs, gp, as, ap, e = gs[:len(dst)], gp[:len(dst)], as[:len(dst)], ap[:len(dst)], e[:len(dst)]
	for i := range dst {
		dst[i] = float64(gs[i]*as[i]) + float64(gp[i]*ap[i])
		gs[i] *= e[i]
		gp[i] *= e[i]
	}
}

// weigh stores the mean of the intensities of both polarisations.
func weigh(dst, s, p []float64, ws, wp float64) {
	if wp == 0 {
		fastScaleRow(dst, s[:len(dst)], ws)
	} else {
		fastMeanRow(dst, s[:len(dst)], p[:len(dst)], ws, wp)
	}
}

func scaleRow(dst, s []float64, ws float64) {
	s = s[:len(dst)]
	for i := range dst {
		dst[i] = ws * s[i]
	}
}

func meanRow(dst, s, p []float64, ws, wp float64) {
	s, p = s[:len(dst)], p[:len(dst)]
	for i := range dst {
		dst[i] = float64(ws*s[i]) + float64(wp*p[i])
	}
}
