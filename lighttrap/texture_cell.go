package lighttrap

import "math"

// maxCells is the number of cells a ray may cross between two facets. Only
// light that grazes a regular texture along its valleys comes near it.
const maxCells = 1 << 12

// manyCells is the number of cells of one lattice over which its phase against
// another one is taken as spread evenly.
const manyCells = 4096

// manyPeriods is how far light may run along the wafer until rounding hides its
// place in a cell.
const manyPeriods = 1e9

// Ways out of a cell other than a facet.
const (
	pastFacets = -1 // on the side it is on
	nowhere    = -2 // along a valley or a ridge without end
)

// toCell turns a vector into the frame of the texture, fromCell back. Both are
// rotations, so that the sense of circular polarisation stays.
func (f *surface) toCell(v vec) vec {
	if f.turned {
		v.x, v.y = f.cosA*v.x+f.sinA*v.y, f.cosA*v.y-f.sinA*v.x
	}
	if f.flip {
		v.y, v.z = -v.y, -v.z
	}
	return v
}

func (f *surface) fromCell(v vec) vec {
	if f.flip {
		v.y, v.z = -v.y, -v.z
	}
	if f.turned {
		v.x, v.y = f.cosA*v.x-f.sinA*v.y, f.cosA*v.y+f.sinA*v.x
	}
	return v
}

// enterCell places a ray that arrives at a textured face: at the base plane on
// the side of the pyramids, at the plane of their tips on the other.
func (w *worker) enterCell(f *surface, r *ray) {
	r.d, r.e = f.toCell(r.d), f.toCell(r.e)
	r.pyr = r.d.z > 0
	r.on = -1
	r.stage = inCell
	at := vec{math.Inf(1), 0, 0}
	if f.period > 0 && r.entered {
		at = f.toCell(vec{r.x / f.period, r.y / f.period, 0})
	}
	if math.Abs(at.x)+math.Abs(at.y) < manyPeriods {
		r.cx, r.cy = math.Floor(at.x), math.Floor(at.y)
		r.p = vec{at.x - r.cx - 0.5, at.y - r.cy - 0.5, 0}
	} else {
		r.p = vec{w.random(r) - 0.5, w.random(r) - 0.5, 0}
		r.cx, r.cy = 0, 0
		if w.m.beats {
			// The other lattice has another period: its cells lie anywhere.
			r.cx, r.cy = math.Floor(manyCells*w.random(r)), math.Floor(manyCells*w.random(r))
		}
	}
	if !r.pyr {
		r.p.z = f.height
	}
}

// leaveCell turns a ray back into the frame of the wafer.
func (w *worker) leaveCell(f *surface, r *ray) {
	r.d, r.e = f.fromCell(r.d), f.fromCell(r.e)
	r.stage = leaving
	if w.m.lattice {
		period := f.period
		if period == 0 {
			// This face knows no places: the next one is met anywhere.
			period = w.m.period
			r.cx, r.cy, r.p.x, r.p.y = 0, 0, w.random(r), w.random(r)
		}
		at := f.fromCell(vec{(r.cx + 0.5 + r.p.x) * period, (r.cy + 0.5 + r.p.y) * period, 0})
		r.x, r.y = at.x, at.y
	}
}

// cell takes a ray to the next facet and lets it meet it, or takes it out of the
// texture.
func (w *worker) cell(f *surface, r *ray) bool {
	var j int
	if r.pyr {
		j = f.within(r)
	} else {
		j = w.between(f, r)
	}
	switch j {
	case pastFacets:
		w.leaveCell(f, r)
		if r.first {
			w.endFirst(r)
		}
		return r.w > 0
	case nowhere:
		w.end(r, sumUnfinished, r.w)
		return false
	}
	w.meet(r)
	r.on = j
	n := f.normals[j]
	if r.pyr {
		n = n.scale(-1)
	}
	side := sideOut
	if r.pyr == f.solid {
		side = sideIn
	}
	k := &w.contact
	w.touch(k, &f.side[side], w.m.films[r.face], r, n)
	wr, wt := w.divide(k, r)
	part := w.split(r, wr)
	if wt > 0 {
		part.w = wt
		if w.through(k, part, side) {
			k.transmit(part)
			part.pyr = !part.pyr
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
	k.reflect(r)
	return true
}

// within moves a ray on the side of the pyramids to the next facet and returns
// its number. The pyramid is convex: its facets and its base bound the way.
func (f *surface) within(r *ray) int {
	const far = math.MaxFloat64
	d, p := r.d, r.p
	rise := f.height - p.z
	best, hit := far, nowhere
	if d.z < 0 {
		best, hit = max(0, -p.z/d.z), pastFacets
	}
	// Facet 0 is the plane z + tan x = height, facet 1 its mirror image.
	across, at := f.tan*d.x, f.tan*p.x
	if g := d.z + across; g > 0 && r.on != 0 {
		if l := rise - at; l < best*g {
			best, hit = l/g, 0
		}
	}
	if g := d.z - across; g > 0 && r.on != 1 {
		if l := rise + at; l < best*g {
			best, hit = l/g, 1
		}
	}
	if !f.grooves {
		across, at = f.tan*d.y, f.tan*p.y
		if g := d.z + across; g > 0 && r.on != 2 {
			if l := rise - at; l < best*g {
				best, hit = l/g, 2
			}
		}
		if g := d.z - across; g > 0 && r.on != 3 {
			if l := rise + at; l < best*g {
				best, hit = l/g, 3
			}
		}
	}
	if hit != nowhere && best > 0 { // rounding may have put the ray behind a plane
		r.p = p.along(best, d)
	}
	return hit
}

// between moves a ray on the side opposite to the pyramids from cell to cell to
// the next facet, whose number it returns, or out.
func (w *worker) between(f *surface, r *ray) int {
	d := r.d
	for range maxCells {
		limit, axis := f.border(r)
		if r.on < 0 {
			if j, l := f.strike(r); j >= 0 && l <= limit {
				r.p = r.p.along(l, d)
				return j
			}
		}
		r.on = -1
		if d.z > 0 {
			if l := max(0, (f.height-r.p.z)/d.z); l <= limit {
				r.p = r.p.along(l, d)
				return pastFacets
			}
		}
		if axis < 0 {
			return nowhere
		}
		r.p = r.p.along(limit, d)
		w.neighbour(f, r, axis)
	}
	return nowhere
}

// border returns the way to the border of the cell and the axis that it crosses.
func (f *surface) border(r *ray) (limit float64, axis int) {
	limit, axis = math.Inf(1), -1
	if r.d.x != 0 {
		limit, axis = max(0, (math.Copysign(0.5, r.d.x)-r.p.x)/r.d.x), 0
	}
	if r.d.y != 0 && !f.grooves {
		if l := max(0, (math.Copysign(0.5, r.d.y)-r.p.y)/r.d.y); l < limit {
			limit, axis = l, 1
		}
	}
	return limit, axis
}

// neighbour takes a ray at the border of its cell into the next one.
func (w *worker) neighbour(f *surface, r *ray, axis int) {
	if axis == 0 {
		side := math.Copysign(0.5, r.d.x)
		r.p.x = -side
		r.cx += 2 * side
		if f.random {
			r.p.y = w.random(r) - 0.5
		}
		return
	}
	side := math.Copysign(0.5, r.d.y)
	r.p.y = -side
	r.cy += 2 * side
	if f.random {
		r.p.x = w.random(r) - 0.5
	}
}

// strike returns the facet of the cell's pyramid that a ray from outside meets,
// and the way there; -1 if it passes. It enters the pyramid where it has passed
// the last of the planes that it approaches, unless it has left one before.
func (f *surface) strike(r *ray) (hit int, way float64) {
	enter, leave := math.Inf(-1), math.Inf(1)
	hit = -1
	d, p := r.d, r.p
	facets := 4
	if f.grooves {
		facets = 2
	}
	across, at := f.tan*d.x, f.tan*p.x
	for j := 0; j < facets; j++ {
		if j == 2 {
			across, at = f.tan*d.y, f.tan*p.y
		}
		g, over := d.z+across, p.z+at-f.height
		switch {
		case g < 0:
			if l := -over / g; l > enter {
				enter, hit = l, j
			}
		case over > 0:
			return -1, 0 // outside of this plane for good
		case g > 0:
			leave = min(leave, -over/g)
		}
		across, at = -across, -at
	}
	if hit < 0 || enter > leave {
		return -1, 0
	}
	return hit, max(0, enter)
}
