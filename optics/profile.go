package optics

import "math"

// Profile is the absorption density of one film for one wave, per unit of the
// incident flux. At the depth z (nm) from the lit face of the film
//
//	a(z) = Forward exp(-Decay z) + Backward exp(-Decay (d-z))
//	     + Cos cos(Wavenumber (z-d/2)) + Sin sin(Wavenumber (z-d/2)),
//
// in 1/nm, with d = Thickness. Its integral over the film is the absorptance.
// The fields are plain numbers, so that another program can integrate them; a
// struct of another package with the same fields converts directly.
type Profile struct {
	Thickness  float64 // nm
	Decay      float64 // 1/nm, 2 Im kz: absorption coefficient along the normal
	Wavenumber float64 // 1/nm, 2 Re kz: of the interference pattern
	Forward    float64 // 1/nm, at the lit face
	Backward   float64 // 1/nm, at the back face
	Cos, Sin   float64 // 1/nm, about the middle of the film
}

// At returns the absorption density (1/nm) at the depth z (nm) from the lit
// face of the film.
//
// Special case: NaN outside the film.
func (p Profile) At(z float64) float64 {
	if !(z >= 0 && z <= p.Thickness) {
		return math.NaN()
	}
	sin, cos := math.Sincos(p.Wavenumber * (z - 0.5*p.Thickness))
	return p.Forward*math.Exp(-p.Decay*z) + p.Backward*math.Exp(-p.Decay*(p.Thickness-z)) + p.Cos*cos + p.Sin*sin
}

// Between returns the share of the incident flux that is absorbed between the
// depths z1 <= z2 (nm), the exact integral of the density.
//
// Special case: NaN unless 0 <= z1 <= z2 <= Thickness.
func (p Profile) Between(z1, z2 float64) float64 {
	if !(z1 >= 0 && z1 <= z2 && z2 <= p.Thickness) {
		return math.NaN()
	}
	h := z2 - z1
	beam := h
	if t := p.Decay * h; t > 0 {
		beam *= -math.Expm1(-t) / t
	}
	sum := beam * (p.Forward*math.Exp(-p.Decay*z1) + p.Backward*math.Exp(-p.Decay*(p.Thickness-z2)))
	if p.Cos == 0 && p.Sin == 0 {
		return sum
	}
	wave := h
	if t := 0.5 * p.Wavenumber * h; t > 0 {
		wave *= math.Sin(t) / t
	}
	sin, cos := math.Sincos(p.Wavenumber * (0.5*(z1+z2) - 0.5*p.Thickness))
	return sum + wave*(p.Cos*cos+p.Sin*sin)
}

// Absorptance returns the share of the incident flux absorbed in the film.
func (p Profile) Absorptance() float64 { return p.Between(0, p.Thickness) }

// SolveProfiles returns the absorption density of every film; see
// [Solver.Profiles].
func SolveProfiles(st Stack, w Wave) ([]Profile, error) {
	var s Solver
	return s.Profiles(nil, st, w)
}

// Profiles stores the absorption density of every film of st in dst, which is
// grown when it is too short, and returns it.
//
// In incoherent films both beams decay exponentially; the share that the
// interference close to a face adds or takes there (see the package comment on
// absorbing incoherent media) is spread over the beam that causes it.
func (s *Solver) Profiles(dst []Profile, st Stack, w Wave) ([]Profile, error) {
	normal, err := s.load(st, w, true)
	if err != nil {
		return nil, err
	}
	bl := &s.block
	bl.solve(&s.table, 1, normal)
	if cap(dst) < len(st.Films) {
		dst = make([]Profile, len(st.Films))
	}
	dst = dst[:len(st.Films)]
	clear(dst)
	ws, wp := w.Polarization.weights()
	if normal {
		ws, wp = 1, 0
	}
	for p, weight := range [2]float64{ws, wp} {
		if weight > 0 {
			bl.addProfiles(dst, &s.table, p, weight)
		}
	}
	return dst, nil
}

// addProfiles adds the profiles of polarisation p to dst.
func (bl *block) addProfiles(dst []Profile, films *filmTable, p int, weight float64) {
	in := weight
	for i := range bl.forward[:len(bl.thick)+1] {
		bl.forward[i].addProfiles(dst, &bl.wave, films, p, in, false)
		if i == len(bl.thick) {
			break
		}
		k, j := &bl.bulk[i], bl.thick[i]
		if back := weight * k.returned[p][0]; back > 0 {
			bl.reverse[i].addProfiles(dst, &bl.wave, films, p, back, true)
		}
		e, m := k.e[0], k.m[0]
		f := &dst[j]
		f.Thickness, f.Decay = films.d[j], 2*bl.wave.k0[0]*bl.media[i].qi[0]
		if m > 0 {
			f.Forward += weight * f.Decay * k.forward[p][0] * (1 + e*bl.forward[i+1].d[p][0]/m)
			f.Backward += weight * f.Decay * k.turned[p][0] * (1 + e*bl.reverse[i].d[p][0]/m)
		}
		in = weight * k.forward[p][0] * e
	}
}

// addProfiles adds the profiles of the films of the group for light of the
// given flux. reversed says that the light comes from behind the films.
//
// derived: with U = a exp(iqz) + b exp(iq(d-z)) the loss per depth is
// k0 Im ε |E|²; for p the normal component adds kx²/|q|² to the beams and takes
// it from their interference.
func (g *group) addProfiles(dst []Profile, w *waveRow, films *filmTable, p int, flux float64, reversed bool) {
	gain := flux * g.g[p][0]
	kx2 := w.n0[0] * w.n0[0] * w.angle.sinSquared().hi
	for j := range g.count {
		film := g.first + j*g.step
		n, k := films.n[film], films.k[film]
		e := g.e[j*lanes]
		behind := gain * e
		if g.scaled[j] {
			behind *= g.scale[(2*j+p)*lanes]
		}
		qr, qi, _ := normalWave(n, k, w.n0[0], w.q0sq[0])
		f := &dst[film]
		f.Thickness, f.Decay, f.Wavenumber = films.d[film], 2*w.k0[0]*qi, 2*w.k0[0]*qr
		if k == 0 {
			gain = behind
			continue
		}
		q := complex(qr, qi)
		inverse, beam, cross := 1/q, 1.0, 1.0
		if p == 1 {
			inverse = q / (complex(n, k) * complex(n, k))
			r := kx2 / (qr*qr + qi*qi)
			beam, cross = 1+r, 1-r
		}
		uf, vf := g.fieldAt(j, p)
		ub, vb := g.fieldAt(j+1, p)
		a := complex(0.5*math.Sqrt(gain), 0) * (uf + vf*inverse)
		b := complex(0.5*math.Sqrt(behind), 0) * (ub - vb*inverse)
		density := w.k0[0] * 2 * n * k
		forward, backward := density*beam*square(a), density*beam*square(b)
		ab := a * complex(real(b), -imag(b))
		c := 2 * density * cross * math.Sqrt(e)
		cos, sin := c*real(ab), -c*imag(ab)
		if reversed {
			forward, backward, sin = backward, forward, -sin
		}
		f.Forward += forward
		f.Backward += backward
		f.Cos += cos
		f.Sin += sin
		gain = behind
	}
}

// fieldAt returns the fields of lane 0 in front of film j of the group.
func (g *group) fieldAt(j, p int) (u, v complex128) {
	f := &g.fields[j][p]
	return complex(f.ur[0], f.ui[0]), complex(f.vr[0], f.vi[0])
}
