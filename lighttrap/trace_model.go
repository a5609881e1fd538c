package lighttrap

import (
	"fmt"
	"math"
)

// Limits of the tracer.
const (
	maxSteps     = 1 << 20 // steps of one ray with its parts; what is left then is Unfinished
	splitAbove   = 0.1     // both ways from a facet are followed if both carry this share
	splitFirst   = 0.01    // the same on the way to the lit face and during the first visit
	weightsAbove = 0.05    // absorption takes its share of a ray of this weight; weaker rays are absorbed as a whole or not at all
	minCos       = 1e-12   // to the plane of the wafer
	stackSize    = 160     // parts waiting
)

// Destinations of light and other sums of a repetition, in one row.
const (
	sumReflected = iota
	sumEscaped
	sumTransmitted
	sumBulk // band-to-band and free carriers
	sumUnfinished
	sumEntered
	sumPath
	sumSentBack
	sumBounces
	sumPasses  = sumBounces + bounceBins
	fixedSums  = sumPasses + passBins
	bounceBins = 6
	passBins   = 40
)

// model is a wafer ready for tracing. Interfaces and layers are numbered from
// the outermost: layer i lies behind interface i.
type model struct {
	faces     []surface
	depth     []float64 // optical thickness of the layers
	thick     []float64 // nm
	index     []float64 // of the media, one more than interfaces
	films     []int     // first sum of the films of each interface
	front     int       // the interface that is the front of the wafer
	rear      int
	lit       int
	fromRear  bool
	lattice   bool    // a face has places
	beats     bool    // both do, with different periods
	period    float64 // nm, of a lattice
	planar    bool    // nothing random
	covers    int     // first sum of the covers
	frontFilm int
	rearFilm  int
	cells     int
	edges     []float64 // of the mesh, over the thickness
	sums      int
}

// compile prepares the wafer.
func (m *model) compile(w *Wafer, l *Light, depths []float64) error {
	if err := w.check(); err != nil {
		return err
	}
	if err := l.check(w); err != nil {
		return err
	}
	n := len(w.Covers)
	m.front, m.rear, m.fromRear = n, n+1, l.FromRear
	m.lit = m.front
	if l.FromRear {
		m.lit = m.rear
	}
	m.faces = m.faces[:cap(m.faces)] // keeps the memory of all interfaces
	for len(m.faces) < n+2 {
		m.faces = append(m.faces, surface{})
	}
	m.faces = m.faces[:n+2]
	m.index = append(m.index[:0], w.Front.medium())
	m.depth, m.thick, m.films = m.depth[:0], m.thick[:0], m.films[:0]
	m.covers = fixedSums
	next := m.covers + n
	for i := range w.Covers {
		c := &w.Covers[i]
		face := Face{Films: c.Films}
		if err := m.faces[i].compile(&face, coverName(i), m.index[i], c.Index, false); err != nil {
			return err
		}
		m.index = append(m.index, c.Index)
		m.addLayer(c.Absorption, c.Thickness)
		// Films of a cover: room for each, added to the cover when reported.
		m.films = append(m.films, next)
		next += m.faces[i].side[sideOut].films
	}
	if err := m.faces[m.front].compile(&w.Front, "front", m.index[n], w.Index, false); err != nil {
		return err
	}
	if err := m.faces[m.rear].compile(&w.Rear, "rear", w.Rear.medium(), w.Index, true); err != nil {
		return err
	}
	m.index = append(m.index, w.Index, w.Rear.medium())
	m.addLayer(w.Absorption+w.FreeCarriers, w.Thickness)
	m.frontFilm = next
	m.rearFilm = m.frontFilm + m.faces[m.front].side[sideOut].films
	m.films = append(m.films, m.frontFilm, m.rearFilm)
	m.cells = m.rearFilm + m.faces[m.rear].side[sideOut].films
	for i, x := range m.depth {
		if math.IsInf(x, 1) {
			return fmt.Errorf("lighttrap: layer %d: optical thickness %g is not finite: %w", i, x, ErrInput)
		}
	}
	if m.closed() {
		return fmt.Errorf("lighttrap: no absorption and no way out for the light that enters: %w", ErrInput)
	}
	m.planar = w.Front.Texture == Planar && w.Rear.Texture == Planar
	m.setLattice(w)
	return m.setMesh(w, depths)
}

// closed reports whether light in the wafer could never end.
func (m *model) closed() bool {
	return m.depth[m.front] == 0 && m.faces[m.front].side[sideIn].closed() && m.faces[m.rear].side[sideIn].closed()
}

// coverName is the name of a cover in errors.
func coverName(i int) string {
	if i == 0 {
		return "cover 0"
	}
	return fmt.Sprintf("cover %d", i)
}

func (m *model) addLayer(alpha, thickness float64) {
	m.depth = append(m.depth, alpha*thickness*cmPerNM)
	m.thick = append(m.thick, thickness)
}

func (m *model) setLattice(w *Wafer) {
	a, b := w.Front.Period, w.Rear.Period
	m.lattice = a > 0 || b > 0
	m.beats = a > 0 && b > 0 && a != b
	m.period = max(a, b)
}

// setMesh prepares the cells of the depth profile.
func (m *model) setMesh(w *Wafer, depths []float64) error {
	m.edges = m.edges[:0]
	m.sums = m.cells
	if len(depths) == 0 {
		return nil
	}
	n := len(depths)
	if n < 2 || depths[0] != 0 || depths[n-1] != w.Thickness || w.Thickness == 0 {
		return fmt.Errorf("lighttrap: %d depths from %g nm to %g nm, want 0 to the thickness %g nm: %w", n, depths[0], depths[n-1], w.Thickness, ErrInput)
	}
	for i, z := range depths {
		if i > 0 && !(z > depths[i-1]) {
			return fmt.Errorf("lighttrap: depth %d: %g nm does not follow %g nm in ascending order: %w", i, z, depths[i-1], ErrInput)
		}
		m.edges = append(m.edges, z/w.Thickness)
	}
	m.sums += n - 1
	return nil
}
