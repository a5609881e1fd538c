package optics

// reversal is the working memory of the reverse pass over one block that was
// solved with its history.
type reversal struct {
	use    [2]bool // polarisations with a share in the light
	normal bool

	film  filmRow
	turn  turnRow
	slope [2]slopeRow
	walk  [2]pullRow

	passes       []passRow
	media        []mediumSlope // of the incoherent films
	groupWeights [2]groupWeights

	// The weights of the objective, times the share of the polarisation.
	r, t [2][lanes]float64
	a    [2][]float64 // [film*lanes+lane]

	// The results: dF = Re((xr + i xi) dε) + dd dThickness for every film.
	xr, xi, dd []float64 // [film*lanes+lane]
	back       mediumSlope
	unused     mediumSlope // of the front medium, which is no variable
}

// passRow holds the adjoint intensities in one incoherent film: the change of
// the objective per flux that is added to the film at its front, or to the
// flux that starts backwards at its back.
type passRow struct {
	rho, gamma      [2][lanes]float64 // adjoint at the front: gamma + e rho (adjoint at the back)
	phi, psi        [2][lanes]float64 // adjoint at the back: phi + psi (adjoint behind the film in front)
	front, back     [2][lanes]float64
	ahead, returned [2][lanes]float64 // weighted absorption of flux that meets the next group, the same for the returned flux
}

// prepare sizes the memory for the stack of bl and chooses the polarisations.
func (rv *reversal) prepare(bl *block, films int, ws, wp float64, normal bool) {
	rv.normal = normal
	rv.use = [2]bool{ws > 0 || normal, wp > 0 && !normal}
	for p := range 2 {
		rv.a[p] = grow(rv.a[p], films*lanes)
	}
	rv.xr, rv.xi, rv.dd = grow(rv.xr, films*lanes), grow(rv.xi, films*lanes), grow(rv.dd, films*lanes)
	if n := len(bl.thick); len(rv.passes) < n {
		rv.passes, rv.media = make([]passRow, n), make([]mediumSlope, n)
	}
}

// run finds the derivatives of the objective whose weights stand in r, t and
// a for b lanes of the solved block.
func (rv *reversal) run(bl *block, films *filmTable, b int) {
	for at := 0; at < len(rv.xr); at += lanes {
		clear(rv.xr[at:][:b])
		clear(rv.xi[at:][:b])
		clear(rv.dd[at:][:b])
	}
	rv.back = mediumSlope{}
	n := len(bl.thick)
	for i := range n {
		rv.media[i] = mediumSlope{}
	}
	for p := range 2 {
		if rv.use[p] && n > 0 {
			rv.adjointBack(bl, p, b)
			rv.adjointFront(bl, p, b)
		}
	}
	for i := 0; i <= n; i++ {
		var in *mediumSlope
		back := &rv.back
		if i > 0 {
			in = &rv.media[i-1]
		}
		if i < n {
			back = &rv.media[i]
		}
		rv.weighForward(bl, i, b)
		rv.pull(&bl.forward[i], &bl.wave, films, &rv.groupWeights, b, in, back)
		if i == n {
			break
		}
		rv.weighReverse(bl, i, b)
		if in == nil {
			in = &rv.unused
		}
		rv.pull(&bl.reverse[i], &bl.wave, films, &rv.groupWeights, b, back, in)
	}
	for i, j := range bl.thick {
		rv.pullBulk(bl, i, j, films.d[j], b)
	}
}

// absorbed returns the weighted absorption of one unit of flux that meets g in
// lane i, without that in the medium of incidence.
func (rv *reversal) absorbed(g *group, p, i int) float64 {
	sum := 0.0
	for j := range g.count {
		sum += rv.a[p][(g.first+j*g.step)*lanes+i] * g.a[p][j*lanes+i]
	}
	return sum
}

// adjointBack eliminates from the back to the front, with the denominators of
// the forward pass.
//
// derived: with F_i the flux that enters incoherent film i at its front and
// H_i the one that starts backwards at its back, the balance is
//
//	F_i = e F_(i-1) t_i + e H_i r'_i,  H_i = e F_i r_(i+1) + e H_(i+1) t'_(i+1)
//
// and the transposed equations have the same form with F and H exchanged.
func (rv *reversal) adjointBack(bl *block, p, b int) {
	n := len(bl.thick)
	last := &bl.forward[n]
	next, rho := rv.t[p], last.r[p]
	for i := n - 1; i >= 0; i-- {
		f, r, g, k, x := &bl.forward[i], &bl.reverse[i], &bl.forward[i+1], &bl.bulk[i], &rv.passes[i]
		for l := range b {
			e, w := k.e[l], rv.a[p][bl.thick[i]*lanes+l]
			x.rho[p][l] = rho[l]
			den := k.denominator[p][l]
			if e == 0 || den == 0 { // no light comes back from the film, or none enters it
				x.gamma[p][l], x.phi[p][l], x.psi[p][l] = w, 0, 0
				next[l], rho[l] = w, f.r[p][l]
				continue
			}
			x.ahead[p][l] = rv.absorbed(g, p, l) + w*g.d[p][l]
			x.returned[p][l] = rv.absorbed(r, p, l) + w*r.d[p][l]
			x.gamma[p][l] = w*k.m[l] + e*(x.ahead[p][l]+g.t[p][l]*next[l])
			x.phi[p][l] = (w*k.m[l] + e*(x.returned[p][l]+r.r[p][l]*x.gamma[p][l])) / den
			x.psi[p][l] = e * r.t[p][l] / den
			next[l] = x.gamma[p][l] + e*rho[l]*x.phi[p][l]
			rho[l] = f.r[p][l] + f.t[p][l]*e*rho[l]*x.psi[p][l]
		}
	}
}

// adjointFront substitutes from the front to the back.
func (rv *reversal) adjointFront(bl *block, p, b int) {
	h := &rv.r[p]
	for i := range bl.thick {
		k, x := &bl.bulk[i], &rv.passes[i]
		for l := range b {
			x.back[p][l] = x.phi[p][l] + x.psi[p][l]*h[l]
			x.front[p][l] = x.gamma[p][l] + k.e[l]*x.rho[p][l]*x.back[p][l]
		}
		h = &x.back[p]
	}
}

// weighForward fills the weights of forward group i.
func (rv *reversal) weighForward(bl *block, i, b int) {
	for p := range 2 {
		if !rv.use[p] {
			continue
		}
		wt := &rv.groupWeights[p]
		for l := range b {
			flux, r, t, d := 1.0, rv.r[p][l], rv.t[p][l], 0.0
			if i > 0 {
				flux = bl.bulk[i-1].forward[p][l] * bl.bulk[i-1].e[l]
				r, d = rv.passes[i-1].back[p][l], rv.a[p][bl.thick[i-1]*lanes+l]
			}
			if i < len(bl.thick) {
				t = rv.passes[i].front[p][l]
			}
			wt.flux[l], wt.r[l], wt.t[l], wt.d[l] = flux, flux*r, flux*t, flux*d
		}
	}
}

// weighReverse fills the weights of reverse group i.
func (rv *reversal) weighReverse(bl *block, i, b int) {
	for p := range 2 {
		if !rv.use[p] {
			continue
		}
		wt := &rv.groupWeights[p]
		for l := range b {
			flux, t := bl.bulk[i].returned[p][l], rv.r[p][l]
			if i > 0 {
				t = rv.passes[i-1].back[p][l]
			}
			w := rv.a[p][bl.thick[i]*lanes+l]
			wt.flux[l], wt.r[l], wt.t[l], wt.d[l] = flux, flux*rv.passes[i].front[p][l], flux*t, flux*w
		}
	}
}

// pullBulk adds the derivatives of incoherent film i, number j of the stack,
// by the transmittance of one pass, and collects those by its boundaries.
func (rv *reversal) pullBulk(bl *block, i, j int, d float64, b int) {
	m, k := &bl.media[i], &bl.bulk[i]
	for l := range b {
		at := j*lanes + l
		x := complex(rv.media[i].xr[l], rv.media[i].xi[l])
		if k.e[l] > 0 {
			sum := 0.0
			for p := range 2 {
				if rv.use[p] {
					sum += rv.onePass(bl, i, p, l)
				}
			}
			// log e = -2 k0 d Im q, dq = dε/(2q).
			q := complex(m.qr[l], m.qi[l])
			x += complex(0, sum*bl.wave.k0[l]*d) / q
			rv.dd[at] -= 2 * bl.wave.k0[l] * m.qi[l] * sum
		}
		rv.xr[at] += real(x)
		rv.xi[at] += imag(x)
	}
}

// onePass returns the derivative with respect to log e of incoherent film i.
func (rv *reversal) onePass(bl *block, i, p, l int) float64 {
	k, x := &bl.bulk[i], &rv.passes[i]
	g, r := &bl.forward[i+1], &bl.reverse[i]
	w := rv.a[p][bl.thick[i]*lanes+l]
	ahead, behind := rv.t[p][l], rv.r[p][l]
	if i+1 < len(bl.thick) {
		ahead = rv.passes[i+1].front[p][l]
	}
	if i > 0 {
		behind = rv.passes[i-1].back[p][l]
	}
	forward := g.r[p][l]*x.back[p][l] + g.t[p][l]*ahead + x.ahead[p][l] - w
	backward := r.r[p][l]*x.front[p][l] + r.t[p][l]*behind + x.returned[p][l] - w
	return k.e[l] * (k.forward[p][l]*forward + k.turned[p][l]*backward)
}
