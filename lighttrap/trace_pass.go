package lighttrap

import "math"

// cross takes a ray from one interface to the next, through a cover or the
// wafer, or out.
func (w *worker) cross(r *ray) bool {
	m := w.m
	up := r.d.z > 0
	if up && r.face == 0 || !up && r.face == m.rear {
		switch {
		case up == m.fromRear:
			w.end(r, sumTransmitted, r.w)
		case r.entered:
			w.end(r, sumEscaped, r.w)
		default:
			w.end(r, sumReflected, r.w)
		}
		return false
	}
	layer := r.face
	if up {
		layer--
		r.sent = r.sent || r.face == m.front
		r.face--
	} else {
		r.face++
	}
	r.stage = arriving
	slope := 1 / max(math.Abs(r.d.z), minCos)
	x := m.depth[layer] * slope
	loss := -math.Expm1(-x)
	wafer := layer == m.front
	if wafer {
		r.passes++
		if m.depth[layer] > 0 {
			w.sum[sumPath] += r.w * loss / m.depth[layer]
		} else {
			w.sum[sumPath] += r.w * slope
		}
	}
	if m.lattice {
		r.x += m.thick[layer] * slope * r.d.x
		r.y += m.thick[layer] * slope * r.d.y
	}
	lost := r.w * loss
	if r.w < weightsAbove {
		// Weak light is absorbed as a whole or not at all.
		if lost = 0; w.random(r) < loss {
			lost = r.w
		}
	}
	if lost > 0 {
		if !wafer {
			w.end(r, m.covers+layer, lost)
		} else {
			w.end(r, sumBulk, lost)
			if len(m.edges) > 0 {
				w.deposit(up, x, lost/loss)
			}
		}
	}
	r.w -= lost
	return r.w > 0
}

// deposit spreads the absorption of one pass over the cells of the mesh; factor
// is the light before the pass, x its optical path from face to face.
func (w *worker) deposit(up bool, x, factor float64) {
	edges := w.m.edges // over the thickness
	cells := w.sum[w.m.cells:]
	n := len(edges) - 1
	before := 0.0
	for i := range n {
		j := i
		depth := edges[i+1]
		if up {
			j = n - 1 - i
			depth = 1 - edges[j]
		}
		after := -math.Expm1(-x * depth)
		cells[j] += factor * (after - before)
		before = after
		if after == 1 {
			break
		}
	}
}

// random returns the next random choice of a ray.
func (w *worker) random(r *ray) float64 {
	u := w.sequence.at(r.dim)
	r.dim++
	return u
}
