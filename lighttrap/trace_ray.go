package lighttrap

import "math"

// stage says what a ray does next.
type stage uint8

const (
	arriving stage = iota // at interface face, from the side its direction tells
	inCell                // between the facets of interface face, in the frame of the texture
	leaving               // interface face behind it
)

// ray is one bundle of light. Its polarisation is that of the fields along e
// and d×e: q, u and v are the Stokes parameters over the intensity.
type ray struct {
	d, e    vec
	q, u, v float64
	w       float64 // share of the incident light

	stage  stage
	face   int // interface, 0 the outermost
	dim    int // random choices made
	passes int // crossings of the wafer

	fresh   bool    // has not been at the lit face of the wafer
	first   bool    // first visit to the lit face of the wafer, reflected all along
	entered bool    // has been in the wafer
	sent    bool    // has left the front upwards and may be sent back by a cover
	arrived float64 // weight at the start of the first visit
	facets  int     // facets met during the first visit

	p      vec     // place in the cell
	pyr    bool    // on the side of the pyramids
	on     int     // facet the ray is on, -1 for none
	x, y   float64 // nm, place on the wafer for textures with a period
	cx, cy float64 // lower corner of the cell, in periods
}

// contact holds a ray at a facet: what may happen there.
type contact struct {
	v      response
	n      vec     // normal towards the incident side
	c, c2  float64 // cosines on both sides
	ratio  float64 // n1/n2
	r, t   float64 // shares of the light that go on
	opaque bool
}

// touch finds what happens to a ray that meets a facet, books what its films
// absorb, and turns the axis of the polarisation into the s direction.
func (w *worker) touch(k *contact, o *opticSide, films int, r *ray, n vec) {
	c := -r.d.dot(n)
	if c < 0 {
		c = 0
	} else if c > 1 {
		c = 1
	}
	s := r.d.cross(n)
	if l2 := s.dot(s); l2 > 1e-24 {
		f := 1 / math.Sqrt(l2)
		s = s.scale(f)
		// The sine is s·(d×e) = (d×n)·(d×e) f = n·e f, because d·e = 0.
		cos, sin := s.dot(r.e), n.dot(r.e)*f
		c2, s2 := (cos-sin)*(cos+sin), 2*cos*sin
		r.q, r.u = r.q*c2+r.u*s2, r.u*c2-r.q*s2
		r.e = s
	}
	k.n, k.c, k.ratio, k.opaque = n, c, o.n1/o.n2, o.opaque
	c2, row, weight := o.at(&k.v, c)
	k.c2 = c2
	ps, pp := 0.5*(1+r.q), 0.5*(1-r.q)
	if ps < 0 { // by rounding
		ps, pp = 0, 1
	} else if pp < 0 {
		ps, pp = 1, 0
	}
	k.r = k.v[colRS]*ps + k.v[colRP]*pp
	k.t = k.v[colTS]*ps + k.v[colTP]*pp
	if o.films == 0 {
		// Exactly all light goes on.
		if k.t == 0 {
			k.r = 1
		} else if k.t = 1 - k.r; k.t < 0 {
			k.r, k.t = 1, 0
		}
		return
	}
	stride := columns + 2*o.films
	for j := range o.films {
		i := columns + 2*j
		as := row[i] + weight*(row[i+stride]-row[i])
		ap := row[i+1] + weight*(row[i+1+stride]-row[i+1])
		w.end(r, films+j, r.w*(as*ps+ap*pp))
	}
}

// reflect turns a ray around.
func (k *contact) reflect(r *ray) {
	r.d = r.d.along(2*k.c, k.n)
	if k.r > 0 {
		ps, pp := 0.5*(1+r.q)*k.v[colRS], 0.5*(1-r.q)*k.v[colRP]
		r.polarise(ps, pp, k.v[colXRe], k.v[colXIm])
	}
}

// transmit refracts a ray.
func (k *contact) transmit(r *ray) {
	d := r.d.scale(k.ratio).along(k.ratio*k.c-k.c2, k.n)
	r.d = d.scale(1 / math.Sqrt(d.dot(d)))
	ps, pp := 0.5*(1+r.q)*k.v[colTS], 0.5*(1-r.q)*k.v[colTP]
	r.polarise(ps, pp, k.v[colYRe], k.v[colYIm])
}

// polarise sets the Stokes parameters from the new intensities of s and p and
// the factor of their correlation.
func (r *ray) polarise(ps, pp, re, im float64) {
	i := ps + pp
	if !(i > 0) {
		r.q, r.u, r.v = 0, 0, 0
		return
	}
	f := 1 / i
	r.q = (ps - pp) * f
	r.u, r.v = (re*r.u-im*r.v)*f, (re*r.v+im*r.u)*f
}

// follow traces a ray and all parts that split off it to their ends.
func (w *worker) follow(start ray) {
	w.stack[0], w.pending = start, 1
	w.budget = maxSteps
	for w.pending > 0 {
		w.pending--
		r := w.stack[w.pending]
		for w.step(&r) {
			if w.budget--; w.budget < 0 {
				w.end(&r, sumUnfinished, r.w)
				break
			}
		}
	}
}

// step takes a ray to its next stage and reports whether it goes on.
func (w *worker) step(r *ray) bool {
	switch r.stage {
	case leaving:
		return w.cross(r)
	case arriving:
		f := &w.m.faces[r.face]
		w.arrive(r)
		if !f.texture.textured() {
			return w.plane(f, r)
		}
		w.enterCell(f, r)
		return true
	}
	return w.cell(&w.m.faces[r.face], r)
}

// end books light of a ray at a destination.
func (w *worker) end(r *ray, destination int, share float64) {
	w.sum[destination] += share
	w.sum[sumPasses+min(r.passes, passBins-1)] += share
}

// arrive notes the first visit to the lit face of the wafer, and light that a
// cover sends back to it.
func (w *worker) arrive(r *ray) {
	m := w.m
	if r.sent && r.face == m.front && r.d.z < 0 {
		w.sum[sumSentBack] += r.w
		r.sent = false
	}
	if r.fresh && r.face == m.lit {
		r.fresh, r.first = false, true
		r.arrived, r.facets = r.w, 0
	}
}

// divide decides how the light of a ray goes on from a facet. Both ways are
// followed while both carry much light, or while one costs nothing because it
// ends behind the facet; otherwise one is chosen with the chance of its share
// and takes the light of both, so that no light is lost and none is favoured.
func (w *worker) divide(k *contact, r *ray) (reflected, transmitted float64) {
	wr, wt := r.w*k.r, r.w*k.t
	small := min(wr, wt)
	if k.opaque || small == 0 || small >= splitAbove || (r.first || r.fresh) && small >= splitFirst {
		return wr, wt
	}
	total := wr + wt
	if w.random(r)*total < wr {
		return total, 0
	}
	return 0, total
}

// split returns the ray that goes on behind a facet: the ray itself, or a copy
// for later where the reflected light goes on too. The stack cannot overflow:
// each part on it has at least splitFirst of the light.
func (w *worker) split(r *ray, wr float64) *ray {
	if wr == 0 && !r.first {
		return r
	}
	part := &w.stack[w.pending]
	*part = *r
	return part
}

// plane lets a ray meet an interface without facets.
func (w *worker) plane(f *surface, r *ray) bool {
	below := r.d.z > 0 // comes from below
	side := sideOut
	if below != (r.face == w.m.rear) {
		side = sideIn
	}
	o := &f.side[side]
	n := vec{0, 0, 1}
	if below {
		n.z = -1
	}
	w.meet(r)
	k := &w.contact
	scattered := f.texture.scatters() && !(f.specular > 0 && w.random(r) < f.specular)
	if scattered && f.texture == Lambertian {
		k.n, k.v, k.opaque = n, o.mean, o.opaque
		k.r, k.t = o.mean[colRS], o.mean[colTS]
		for j, a := range o.meanFilms {
			w.end(r, w.m.films[r.face]+j, r.w*a)
		}
	} else {
		w.touch(k, o, w.m.films[r.face], r, n)
	}
	wr, wt := w.divide(k, r)
	part := w.split(r, wr)
	if wt > 0 {
		part.w = wt
		if w.through(k, part, side) {
			w.turn(f, k, part, true, scattered)
			if part == r {
				return true
			}
			w.pending++
		}
	}
	if part == r {
		return false
	}
	r.w = wr
	w.turn(f, k, r, false, scattered)
	if r.first {
		w.endFirst(r)
	}
	return wr > 0
}

// turn sends a ray on from an interface without facets.
func (w *worker) turn(f *surface, k *contact, r *ray, transmitted, scattered bool) {
	r.stage = leaving
	switch {
	case scattered:
		var c float64
		if f.power == 0.5 {
			c = math.Sqrt(w.random(r))
		} else {
			c = math.Pow(w.random(r), f.power)
		}
		sin, cos := math.Sincos(2 * math.Pi * w.random(r))
		s := math.Sqrt((1 - c) * (1 + c))
		if transmitted {
			c = -c
		}
		r.d = vec{s * cos, s * sin, c * k.n.z}
		r.e = vec{sin, -cos, 0}
		r.q, r.u, r.v = 0, 0, 0
	case transmitted:
		k.transmit(r)
	default:
		k.reflect(r)
	}
}

// meet counts a facet.
func (w *worker) meet(r *ray) {
	w.hits++
	if r.first {
		r.facets++
	}
}

// endFirst books the number of facets that the light meets at the lit face
// when it leaves without entering.
func (w *worker) endFirst(r *ray) {
	w.sum[sumBounces+min(r.facets, bounceBins-1)] += r.arrived
	r.first = false
}

// through takes light behind a facet: it reports false where the light ends
// there, and books light that enters the wafer for the first time.
func (w *worker) through(k *contact, r *ray, side int) bool {
	r.first = false
	if k.opaque {
		w.end(r, sumTransmitted, r.w)
		return false
	}
	if side == sideOut && !r.entered && r.face >= w.m.front {
		r.entered = true
		w.sum[sumEntered] += r.w
	}
	return true
}
