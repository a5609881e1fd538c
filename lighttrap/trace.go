package lighttrap

import (
	"fmt"
	"math"
	"math/bits"
	"runtime"
	"sync"
)

// Settings say how a wafer is traced. The zero value is ready to use.
type Settings struct {
	Rays        int       // light rays in all repetitions together, rounded up to a power of two in each; 0 means 8192
	Repetitions int       // independent repetitions, from whose spread the standard errors come, 4 to 1024; 0 means 16
	Seed        uint64    // the same seed gives the same bits, whatever the number of workers
	Workers     int       // goroutines: 1 none beside the caller's, 0 one for each core
	Depths      []float64 // nm, edges of the cells of a depth profile, ascending from 0 at the front to the thickness; nil: none
}

// Estimate is a mean with its standard error, 0 where nothing is random.
type Estimate struct {
	Value, Error float64
}

// Result says where the light that falls on a textured wafer goes. The shares of
// the first block, the films and the covers add up to 1.
type Result struct {
	Reflected    Estimate   // leaves on the lit side without having been in the wafer
	Escaped      Estimate   // leaves on the lit side out of the wafer
	Transmitted  Estimate   // leaves on the other side, or ends in an opaque medium
	Absorbed     Estimate   // in the wafer, band to band
	FreeCarriers Estimate   // in the wafer, by free carriers
	Unfinished   Estimate   // still on its way after more than 10^6 steps, or along a valley without end
	FrontFilms   []Estimate // absorbed in the films of the front, from outside
	RearFilms    []Estimate // absorbed in the films of the rear, from outside
	Covers       []Estimate // absorbed in each cover with its films

	Profile []Estimate // band-to-band absorption in each cell of the mesh; adds up to Absorbed

	Entered  Estimate   // enters the wafer for the first time
	Path     Estimate   // mean path in the wafer of the light that enters, in thicknesses; without absorption the path-length enhancement
	Passes   []Estimate // [k] share of the light that ends after k crossings of the wafer; the last also after more
	Bounces  []Estimate // [k] share of the light whose way along the lit face meets k facets, if always reflected; the last also more
	SentBack Estimate   // leaves the front and is sent back to it by covers, each time counted

	Rays   int   // traced
	Facets int64 // met by all rays
}

// Trace follows light through a textured wafer at one wavelength.
//
// Every ray is a bundle of light with its own polarisation. At each facet the
// films take their share, and the rest is reflected or transmitted: both are
// followed where both carry much light, otherwise one of them takes all of it, with
// the chance of its share. Absorption takes its share of a ray; once a ray is weak,
// each pass absorbs either all of it or nothing, with the chance of the share. So
// every ray ends, no light is lost on the way (the shares add up to 1 to
// rounding) and every mean is that of the full balance. Wafers with plane faces
// are solved in closed form.
//
// Errors wrap [ErrInput] and name the value.
func Trace(w Wafer, l Light, s Settings) (Result, error) {
	var t Tracer
	var r Result
	err := t.Trace(&r, w, l, s)
	return r, err
}

// Tracer traces wafers with memory of its own: nothing is allocated in the steady
// state with one worker. The zero value is ready; it belongs to one goroutine at
// a time.
type Tracer struct {
	model   model
	workers []worker
	rows    []float64 // sums of each repetition
}

// worker traces rays.
type worker struct {
	m        *model
	sum      []float64
	sequence sequence
	stack    [stackSize]ray
	pending  int
	budget   int
	contact  contact
	plan     []planeStep
	hits     int64
}

// Trace is [Trace] with the memory of t. The slices of dst are used again.
func (t *Tracer) Trace(dst *Result, w Wafer, l Light, s Settings) error {
	rays, repetitions, workers, err := s.plan()
	if err != nil {
		return err
	}
	m := &t.model
	if err := m.compile(&w, &l, s.Depths); err != nil {
		return err
	}
	if m.planar && l.Cone == 0 {
		rays, repetitions = 1, 1
	}
	workers = min(workers, repetitions)
	for len(t.workers) < workers {
		t.workers = append(t.workers, worker{})
	}
	t.rows = resize(t.rows, m.sums*repetitions)
	clear(t.rows)
	for i := range workers {
		t.workers[i].m, t.workers[i].hits = m, 0
	}
	if workers == 1 {
		for i := range repetitions {
			t.workers[0].repeat(t.row(i), &l, rays, s.Seed, i)
		}
	} else {
		t.share(l, rays, repetitions, workers, s.Seed)
	}
	t.report(dst, &w, repetitions)
	dst.Rays = rays * repetitions
	dst.Facets = 0
	for i := range workers {
		dst.Facets += t.workers[i].hits
	}
	return nil
}

// row is the row of sums of a repetition.
func (t *Tracer) row(i int) []float64 { return t.rows[i*t.model.sums : (i+1)*t.model.sums] }

// share lets several goroutines trace the repetitions.
func (t *Tracer) share(l Light, rays, repetitions, workers int, seed uint64) {
	var wait sync.WaitGroup
	for k := range workers {
		wait.Go(func() {
			for i := k; i < repetitions; i += workers {
				t.workers[k].repeat(t.row(i), &l, rays, seed, i)
			}
		})
	}
	wait.Wait()
}

// plan fills in the defaults.
func (s *Settings) plan() (rays, repetitions, workers int, err error) {
	if s.Rays < 0 || s.Workers < 0 {
		return 0, 0, 0, fmt.Errorf("lighttrap: settings: %d rays, %d workers: %w", s.Rays, s.Workers, ErrInput)
	}
	repetitions = s.Repetitions
	if repetitions == 0 {
		repetitions = 16
	}
	if repetitions < 4 || repetitions > 1024 {
		return 0, 0, 0, fmt.Errorf("lighttrap: settings: %d repetitions, want 4 to 1024: %w", s.Repetitions, ErrInput)
	}
	rays = s.Rays
	if rays == 0 {
		rays = 8192
	}
	each := (rays + repetitions - 1) / repetitions
	if each > 1<<sobolBits {
		return 0, 0, 0, fmt.Errorf("lighttrap: settings: %d rays are more than %d in each repetition: %w", rays, 1<<sobolBits, ErrInput)
	}
	rays = 1 << bits.Len(uint(each-1))
	workers = s.Workers
	if workers == 0 {
		workers = runtime.GOMAXPROCS(0)
	}
	return rays, repetitions, workers, nil
}

// repeat traces the rays of one repetition and leaves the mean of its sums in
// row.
func (w *worker) repeat(row []float64, l *Light, rays int, seed uint64, repetition int) {
	w.sum = row
	w.sequence.start(seed, uint64(repetition))
	for i := range rays {
		if i > 0 {
			w.sequence.next()
		}
		w.launch(l)
	}
	f := 1 / float64(rays)
	for i := range row {
		row[i] *= f
	}
}

// launch sends one ray.
func (w *worker) launch(l *Light) {
	r := w.source(l)
	if w.m.planar {
		w.planeWafer(math.Abs(r.d.z), 1, l.Polarization)
		return
	}
	w.follow(r)
}

// source returns a ray at the outermost interface.
func (w *worker) source(l *Light) ray {
	m := w.m
	r := ray{w: 1, fresh: true, on: -1}
	sin, cos := math.Sincos(l.Angle)
	azimuth := l.Azimuth
	if l.Cone > 0 {
		s2 := math.Sin(l.Cone)
		s2 *= s2 * w.random(&r)
		sin, cos = math.Sqrt(s2), math.Sqrt(1-s2)
		azimuth = 2 * math.Pi * w.random(&r)
	}
	sa, ca := math.Sincos(azimuth)
	r.d = vec{sin * ca, sin * sa, -cos}
	r.e = vec{sa, -ca, 0}
	if m.fromRear {
		r.d.z = cos
		r.face = m.rear
	}
	switch l.Polarization {
	case S:
		r.q = 1
	case P:
		r.q = -1
	}
	if m.lattice && m.faces[m.lit].period == 0 {
		r.x, r.y = m.period*w.random(&r), m.period*w.random(&r)
	}
	return r
}

// report turns the rows of the repetitions into means and standard errors.
func (t *Tracer) report(dst *Result, w *Wafer, repetitions int) {
	m := &t.model
	at := func(i int, factor float64) Estimate { return t.estimate(i, factor, repetitions) }
	dst.Reflected, dst.Escaped, dst.Transmitted = at(sumReflected, 1), at(sumEscaped, 1), at(sumTransmitted, 1)
	generating, free := 1.0, 0.0
	if total := w.Absorption + w.FreeCarriers; total > 0 {
		generating, free = w.Absorption/total, w.FreeCarriers/total
	}
	dst.Absorbed, dst.FreeCarriers = at(sumBulk, generating), at(sumBulk, free)
	dst.Unfinished, dst.Entered, dst.SentBack = at(sumUnfinished, 1), at(sumEntered, 1), at(sumSentBack, 1)
	dst.Path = t.ratio(sumPath, sumEntered, repetitions)
	list := func(dst []Estimate, first, n int, factor float64) []Estimate {
		dst = dst[:0]
		for i := range n {
			dst = append(dst, at(first+i, factor))
		}
		return dst
	}
	dst.Bounces = list(dst.Bounces, sumBounces, bounceBins, 1)
	dst.Passes = list(dst.Passes, sumPasses, passBins, 1)
	dst.FrontFilms = list(dst.FrontFilms, m.frontFilm, m.rearFilm-m.frontFilm, 1)
	dst.RearFilms = list(dst.RearFilms, m.rearFilm, m.cells-m.rearFilm, 1)
	dst.Profile = list(dst.Profile, m.cells, m.sums-m.cells, generating)
	// The films of a cover count as the cover.
	for i := range m.front {
		films := m.faces[i].side[sideOut].films
		for k := range repetitions {
			row := t.rows[k*m.sums:]
			for j := range films {
				row[m.covers+i] += row[m.films[i]+j]
			}
		}
	}
	dst.Covers = list(dst.Covers, m.covers, m.front, 1)
}

// estimate returns mean and standard error of sum number i.
func (t *Tracer) estimate(i int, factor float64, repetitions int) Estimate {
	sums := t.model.sums
	mean := 0.0
	for k := range repetitions {
		mean += t.rows[k*sums+i]
	}
	mean /= float64(repetitions)
	if repetitions == 1 {
		return Estimate{Value: factor * mean}
	}
	square := 0.0
	for k := range repetitions {
		d := t.rows[k*sums+i] - mean
		square += d * d
	}
	n := float64(repetitions)
	return Estimate{Value: factor * mean, Error: factor * math.Sqrt(square/(n*(n-1)))}
}

// ratio returns the ratio of two sums with its standard error to first order.
func (t *Tracer) ratio(i, j, repetitions int) Estimate {
	sums := t.model.sums
	above, below := 0.0, 0.0
	for k := range repetitions {
		above += t.rows[k*sums+i]
		below += t.rows[k*sums+j]
	}
	if below == 0 {
		return Estimate{}
	}
	q := above / below
	if repetitions == 1 {
		return Estimate{Value: q}
	}
	square := 0.0
	for k := range repetitions {
		d := t.rows[k*sums+i] - q*t.rows[k*sums+j]
		square += d * d
	}
	n := float64(repetitions)
	return Estimate{Value: q, Error: math.Sqrt(square/(n*(n-1))) / (below / n)}
}

// resize returns a slice of length n, of the same memory if it is large enough.
func resize(v []float64, n int) []float64 {
	if cap(v) < n {
		return make([]float64, n)
	}
	return v[:n]
}
