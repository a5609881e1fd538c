package lighttrap

import "fmt"

// FacetPath is the way of a ray along the facets of a texture, from outside, if it
// is reflected at each of them.
type FacetPath struct {
	Cos         []float64  // cosine of the angle of incidence at each facet, in order
	Reflectance float64    // share of the light that follows the way to its end
	Direction   [3]float64 // of the light that leaves: unit vector, z out of the wafer
}

// TraceFacets follows a ray that comes down on the place (x, y) of a cell, -1/2 to
// 1/2 of the period from its centre, in the plane of the tips of the pyramids (or
// of the rims of the pits). Films and polarisation count as in [Trace]; index is
// the real index of the wafer.
//
// Errors wrap [ErrInput]: faces without facets, random pyramids, whose way is not
// one, places outside the cell, light from the rear or in a cone, light that
// follows a valley without end.
func TraceFacets(f Face, index float64, l Light, x, y float64) (FacetPath, error) {
	if !f.Texture.textured() || f.Texture == RandomPyramids {
		return FacetPath{}, fmt.Errorf("lighttrap: no single way along a face that is %s: %w", f.Texture, ErrInput)
	}
	if !(x >= -0.5 && x <= 0.5 && y >= -0.5 && y <= 0.5) {
		return FacetPath{}, fmt.Errorf("lighttrap: place (%g, %g) is not in the cell from -1/2 to 1/2: %w", x, y, ErrInput)
	}
	if l.Cone != 0 || l.FromRear {
		return FacetPath{}, fmt.Errorf("lighttrap: want collimated light from the front: %w", ErrInput)
	}
	black := UniformFacet(0, 0)
	wafer := Wafer{Index: index, Front: f, Rear: Face{Opaque: true, Films: &black}}
	var m model
	if err := m.compile(&wafer, &l, nil); err != nil {
		return FacetPath{}, err
	}
	w := worker{m: &m, sum: make([]float64, m.sums)}
	r := w.source(&l)
	face := &m.faces[m.front]
	w.enterCell(face, &r)
	r.p.x, r.p.y = x, y
	path := FacetPath{Reflectance: 1}
	for {
		var j int
		if r.pyr {
			j = face.within(&r)
		} else {
			j = w.between(face, &r)
		}
		if j == pastFacets {
			w.leaveCell(face, &r)
			path.Direction = [3]float64{r.d.x, r.d.y, r.d.z}
			return path, nil
		}
		if j == nowhere || len(path.Cos) > maxCells {
			return FacetPath{}, fmt.Errorf("lighttrap: light at (%g, %g) follows a valley without end: %w", x, y, ErrInput)
		}
		r.on = j
		n := face.normals[j]
		if r.pyr {
			n = n.scale(-1)
		}
		w.touch(&w.contact, &face.side[sideOut], m.films[m.front], &r, n)
		path.Cos = append(path.Cos, w.contact.c)
		path.Reflectance *= w.contact.r
		w.contact.reflect(&r)
	}
}
