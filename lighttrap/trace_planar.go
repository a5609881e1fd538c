package lighttrap

import "math"

// planeStep is one interface of a wafer with plane faces and the layer behind
// it, counted from the lit side.
type planeStep struct {
	number     int // of the interface
	layer      int // behind it; -1 behind the last
	down, up   planeSide
	slope      float64 // 1/cosine in the layer
	tau, loss  float64 // transmittance of one pass, and 1 minus it
	rho, lack  float64 // reflectance of this interface and all behind it, and 1 minus it
	gain       float64 // flux that starts in the layer for one that meets the interface
	trapped    float64 // share of it that enters the layer and can go nowhere
	towards    float64 // flux that meets the interface from the lit side
	behind     float64 // reflectance of all up to this interface, seen from its layer
	r, t, a    float64 // of one polarisation, from the lit side
	ru, tu, au float64 // from behind
}

// planeSide is the response of an interface from one side.
type planeSide struct {
	o      *opticSide
	v      response
	row    []float64
	weight float64
}

// film returns the absorptance of film j for polarisation p.
func (s *planeSide) film(j, p int) float64 {
	i := columns + 2*j + p
	return s.row[i] + s.weight*(s.row[i+columns+2*s.o.films]-s.row[i])
}

// films returns the sum of them.
func (s *planeSide) films(p int) float64 {
	sum := 0.0
	for j := range s.o.films {
		sum += s.film(j, p)
	}
	return sum
}

// planeWafer solves a wafer with plane faces, under light with direction cosine
// cos and the given share of all light, in closed form: for each polarisation
// the geometric series of all passes is summed. It adds to the sums of w.
func (w *worker) planeWafer(cos, weight float64, polarization Polarization) {
	w.layOut(cos)
	for p := range 2 {
		share := 0.5 * weight
		if polarization == S && p == 0 || polarization == P && p == 1 {
			share = weight
		} else if polarization != Unpolarized {
			continue
		}
		w.hits += int64(len(w.plan))
		w.planePolarized(p, share)
	}
}

// layOut finds the angles in all layers and the responses of all interfaces.
func (w *worker) layOut(cos float64) {
	m := w.m
	n := len(m.faces)
	for len(w.plan) < n {
		w.plan = append(w.plan, planeStep{})
	}
	w.plan = w.plan[:n]
	c, first := cos, m.index[0]
	if m.fromRear {
		first = m.index[n]
	}
	for i := range w.plan {
		s := &w.plan[i]
		s.number, s.layer = i, i
		if m.fromRear {
			s.number, s.layer = n-1-i, n-2-i
		}
		side := sideOut
		if (s.number == m.rear) != m.fromRear {
			side = sideIn
		}
		face := &m.faces[s.number]
		s.down.o, s.up.o = &face.side[side], &face.side[1-side]
		_, s.down.row, s.down.weight = s.down.o.at(&s.down.v, c)
		behind := math.Sqrt(max(0, refracted(first/s.down.o.n2, cos)))
		bare := len(s.down.o.cos) == 0 && c > 0 && behind > 0
		if bare {
			// Near the critical angle rounding must not decide differently on both sides.
			fresnelPassing(&s.down.v, s.down.o.n1, s.down.o.n2, c, behind)
		}
		if i == n-1 {
			s.layer = -1
			break
		}
		c = behind
		if _, s.up.row, s.up.weight = s.up.o.at(&s.up.v, c); bare {
			s.up.v = s.down.v
		}
		s.slope = 1 / max(c, minCos)
		x := m.depth[s.layer] * s.slope
		s.tau, s.loss = math.Exp(-x), -math.Expm1(-x)
	}
}

// lights runs through the interfaces: from the back to the front for the
// reflectance of all that follows, then forward for the flux on each of them.
// The step black, if any, has the reflectance rho and sends nothing on.
func (w *worker) lights(share float64, black int, rho float64) {
	plan := w.plan
	for i := len(plan) - 1; i >= 0; i-- {
		s := &plan[i]
		switch {
		case i == black:
			s.rho, s.lack, s.gain = rho, 1-rho, 0
		case i == len(plan)-1:
			s.rho, s.lack, s.gain = s.r, s.t+s.a, 0
		default:
			next := &plan[i+1]
			tau2 := s.tau * s.tau
			leak := s.loss*(1+s.tau) + tau2*next.lack // 1 - τ²ρ
			den := (s.tu + s.au) + s.ru*leak
			if s.trapped = 0; den == 0 {
				// Light that enters never leaves.
				s.rho, s.lack, s.gain, s.trapped = s.r, s.t+s.a, 0, s.t
				continue
			}
			s.gain = s.t / den
			s.rho = s.r + s.gain*tau2*next.rho*s.tu
			s.lack = s.a + s.gain*(leak+tau2*next.rho*s.au)
		}
	}
	flux := share
	for i := range plan {
		s := &plan[i]
		s.towards = flux
		flux *= s.gain * s.tau
	}
}

// planePolarized adds the light of polarisation p (0 s, 1 p).
func (w *worker) planePolarized(p int, share float64) {
	m, plan := w.m, w.plan
	lit, wafer := 0, 0 // steps
	for i := range plan {
		s := &plan[i]
		s.r, s.t, s.a = s.down.v[colRS+p], s.down.v[colTS+p], s.down.films(p)
		if s.layer >= 0 {
			s.ru, s.tu, s.au = s.up.v[colRS+p], s.up.v[colTS+p], s.up.films(p)
		}
		if s.number == m.lit {
			lit = i
		}
		if s.layer == m.front {
			wafer = i
		}
	}
	w.lights(share, lit, 0)
	firstVisit := plan[lit].towards
	w.sum[sumBounces+1] += firstVisit
	w.lights(share, lit, plan[lit].r)
	notEntered := share * plan[0].rho
	in := plan[lit].towards * plan[lit].t
	w.lights(share, -1, 0)
	w.sum[sumReflected] += notEntered
	w.sum[sumEntered] += in
	back := 0.0 // comes back from behind the first interface
	for i := range plan {
		s := &plan[i]
		films := m.films[s.number]
		for j := range s.down.o.films {
			w.sum[films+j] += s.towards * s.down.film(j, p)
		}
		if s.layer < 0 {
			w.sum[sumTransmitted] += s.towards * s.t
			break
		}
		w.sum[sumUnfinished] += s.towards * s.trapped
		start := s.towards * s.gain
		turned := start * s.tau * plan[i+1].rho
		up := turned * s.tau
		for j := range s.up.o.films {
			w.sum[films+j] += up * s.up.film(j, p)
		}
		if i == 0 {
			back = up * s.tu
		}
		if m.fromRear && s.number == m.front {
			w.sum[sumSentBack] += up
		}
		w.planeLayer(s, start, turned)
	}
	if lit > 0 {
		// The light that leaves is what the wafer adds to the reflectance.
		back = max(0, share*plan[0].rho-notEntered)
		w.sum[sumSentBack] += max(0, plan[lit].towards-firstVisit)
	}
	w.sum[sumEscaped] += back
	w.planePasses(wafer, in, share)
}

// planeLayer books the absorption in the layer of a step, from the flux that
// starts in it away from the lit side and the one that starts back.
func (w *worker) planeLayer(s *planeStep, start, turned float64) {
	m := w.m
	if s.layer != m.front {
		w.sum[m.covers+s.layer] += (start + turned) * s.loss
		return
	}
	w.sum[sumBulk] += (start + turned) * s.loss
	if x := m.depth[s.layer]; x > 0 {
		w.sum[sumPath] += (start + turned) * s.loss / x
	} else {
		w.sum[sumPath] += (start + turned) * s.slope
	}
	if len(m.edges) > 0 {
		x := m.depth[s.layer] * s.slope
		w.deposit(m.fromRear, x, start)
		w.deposit(!m.fromRear, x, turned)
	}
}

// planePasses books the number of crossings of the wafer after which light ends.
func (w *worker) planePasses(wafer int, in, share float64) {
	plan := w.plan
	for i := range wafer + 1 {
		s := &plan[i]
		s.behind = s.ru
		if i > 0 {
			b := &plan[i-1]
			tau2 := b.tau * b.tau
			// 1 - r τ² ρ, with 1 - ρ from the rounded ρ: the counts need no more.
			if den := 1 - s.r*tau2*b.behind; den > 0 {
				s.behind += s.tu * tau2 * b.behind * s.t / den
			}
		}
	}
	s := &plan[wafer]
	w.sum[sumPasses] += share - in
	flux := in
	for k := 1; k < passBins-1; k++ {
		turn := plan[wafer+1].rho
		if k%2 == 0 {
			turn = s.behind
		}
		next := flux * s.tau * turn
		w.sum[sumPasses+k] += flux - next
		flux = next
	}
	w.sum[sumPasses+passBins-1] += flux
}
