package optics

import "math"

// block carries one block of wavelengths through a whole stack: the coherent
// groups from both sides and the incoherent films between them. It is the
// working memory of a Solver and is used again for every block.
type block struct {
	wave    waveRow
	front   mediumRow
	back    mediumRow
	media   []mediumRow // of the incoherent films
	bulk    []bulkRow   // the same
	thick   []int       // film numbers of the incoherent films
	forward []group     // group i lies in front of incoherent film i, the last one behind all
	reverse []group     // group i seen from incoherent film i
	history bool

	r, t [2][lanes]float64
	a    [2][]float64 // [film*lanes+lane]; those of the only group or sums
	sums [2][]float64
}

// bulkRow holds the intensities in one incoherent film. Index 0 is s, 1 is p.
type bulkRow struct {
	e, m        [lanes]float64    // exp(-2y) and 1 - exp(-2y) of one pass
	forward     [2][lanes]float64 // flux that enters at the front, after all passes
	returned    [2][lanes]float64 // flux that arrives back at the front
	turned      [2][lanes]float64 // flux that starts backwards at the back
	denominator [2][lanes]float64 // 1 - R e² ρ of the passes
}

// prepare lays out groups and incoherent films; it depends on the stack only.
func (bl *block) prepare(incoherent []bool, films int) {
	if incoherent == nil && len(bl.thick) == 0 && len(bl.forward) > 0 {
		f := &bl.forward[0]
		f.first, f.count, f.step, f.history, f.mixed = 0, films, 1, bl.history, false
		return
	}
	bl.thick = bl.thick[:0]
	for j, inc := range incoherent {
		if inc {
			bl.thick = append(bl.thick, j)
		}
	}
	n := len(bl.thick)
	for len(bl.forward) <= n {
		bl.forward = append(bl.forward, group{})
	}
	for len(bl.reverse) < n {
		bl.reverse = append(bl.reverse, group{})
	}
	if len(bl.media) < n {
		bl.media = append(bl.media, make([]mediumRow, n-len(bl.media))...)
		bl.bulk = append(bl.bulk, make([]bulkRow, n-len(bl.bulk))...)
	}
	first := 0
	for i := 0; i <= n; i++ {
		end := films
		if i < n {
			end = bl.thick[i]
			r := &bl.reverse[i]
			r.first, r.count, r.step = end-1, end-first, -1
			r.history, r.mixed = bl.history, true
		}
		f := &bl.forward[i]
		f.first, f.count, f.step = first, end-first, 1
		f.history, f.mixed = bl.history, n > 0
		first = end + 1
	}
	if n > 0 {
		for p := range bl.sums {
			bl.sums[p] = grow(bl.sums[p], films*lanes)
		}
	}
}

// solve computes R, T and the absorptances of b lanes. The wave rows and the
// front and back media are set by the caller.
func (bl *block) solve(films *filmTable, b int, normal bool) {
	bl.run(films, b, normal)
	bl.shares(b, normal)
}

// run solves all groups but for their shares.
func (bl *block) run(films *filmTable, b int, normal bool) {
	n := len(bl.thick)
	for i, j := range bl.thick {
		nn, kk := films.row(j, b)
		bl.media[i].set(&bl.wave, nn, kk, normal)
		bl.onePass(i, films.d[j], b)
	}
	for i := 0; i <= n; i++ {
		in, back := &bl.front, &bl.back
		if i > 0 {
			in = &bl.media[i-1]
		}
		if i < n {
			back = &bl.media[i]
		}
		bl.forward[i].run(&bl.wave, films, in, back, b, normal)
		if i < n {
			bl.reverse[i].run(&bl.wave, films, back, in, b, normal)
		}
	}
}

// shares finds R, T and the absorptances from the solved groups.
func (bl *block) shares(b int, normal bool) {
	bl.a = bl.sums
	bl.sharesOf(0, b)
	if normal {
		bl.a[1] = bl.a[0] // the same light
	} else {
		bl.sharesOf(1, b)
	}
}

func (bl *block) sharesOf(p, b int) {
	n := len(bl.thick)
	for i := range n {
		bl.forward[i].fluxes(p, b)
		bl.reverse[i].fluxes(p, b)
	}
	bl.forward[n].fluxes(p, b)
	bl.balance(p, b)
}

// onePass finds the transmittance of incoherent film i. A film in which the
// wave decays faster than it oscillates carries no wave whose intensity could
// be added to another: it counts as opaque.
func (bl *block) onePass(i int, d float64, b int) {
	m, k := &bl.media[i], &bl.bulk[i]
	for l := range b {
		z := -2 * bl.wave.k0[l] * d * m.qi[l]
		if m.qi[l] >= m.qr[l] {
			z = math.Inf(-1)
		}
		k.e[l], k.m[l] = math.Exp(z), -math.Expm1(z)
	}
}

// balance adds the intensities of polarisation p: the geometric series of the
// passes in every incoherent film, from the back to the front, then the net
// fluxes from the front to the back. Every difference is kept as a sum of
// losses, so that nearly trapped light costs no digits.
func (bl *block) balance(p, b int) {
	n := len(bl.thick)
	last := &bl.forward[n]
	if n == 0 {
		bl.r[p], bl.t[p], bl.a[p] = last.r[p], last.t[p], last.a[p]
		return
	}
	var rho, loss, flux [lanes]float64 // reflectance of all that follows, and 1 minus it
	for l := range b {
		rho[l] = last.r[p][l]
		loss[l] = last.t[p][l] + last.asum[p][l] + last.d[p][l]
		flux[l] = 1
	}
	for i := n - 1; i >= 0; i-- {
		f, r, k := &bl.forward[i], &bl.reverse[i], &bl.bulk[i]
		for l := range b {
			e2 := k.e[l] * k.e[l]
			m2 := k.m[l] * (1 + k.e[l])
			rb, lost := r.r[p][l], r.asum[p][l]+r.d[p][l]
			den := (lost + r.t[p][l]) + rb*(m2+e2*loss[l])
			if den == 0 {
				den = 1 // totally reflected on both sides: nothing enters, nothing leaves
			}
			turn := e2 * rho[l] * r.t[p][l] / den
			k.turned[p][l] = k.e[l] * rho[l]
			if k.e[l] == 0 {
				den, turn, lost = 1, 0, 0
			}
			k.denominator[p][l] = den
			stay := f.t[p][l] * ((m2 + e2*loss[l]) + e2*rho[l]*lost) / den
			rho[l] = f.r[p][l] + f.t[p][l]*turn
			loss[l] = f.asum[p][l] + f.d[p][l] + stay
		}
	}
	bl.r[p] = rho
	for i := range n {
		f, r, k, next := &bl.forward[i], &bl.reverse[i], &bl.bulk[i], &bl.forward[i+1]
		for l := range b {
			in := flux[l]
			k.forward[p][l] = in * f.t[p][l] / k.denominator[p][l]
			k.turned[p][l] *= k.forward[p][l]
			k.returned[p][l] = k.turned[p][l] * k.e[l]
			flux[l] = k.forward[p][l] * k.e[l]
			bl.a[p][bl.thick[i]*lanes+l] = (k.forward[p][l]+k.turned[p][l])*k.m[l] +
				flux[l]*next.d[p][l] + k.returned[p][l]*r.d[p][l]
			for j := range f.count {
				a := in * f.a[p][j*lanes+l]
				if k.returned[p][l] > 0 {
					a += k.returned[p][l] * r.a[p][(f.count-1-j)*lanes+l]
				}
				bl.a[p][(f.first+j)*lanes+l] = a
			}
		}
	}
	for l := range b {
		bl.t[p][l] = flux[l] * last.t[p][l]
		for j := range last.count {
			bl.a[p][(last.first+j)*lanes+l] = flux[l] * last.a[p][j*lanes+l]
		}
	}
}
