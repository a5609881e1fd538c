package optics

import (
	"fmt"
	"math"
	"runtime"
	"sync"
	"sync/atomic"
)

// Sweep describes one stack at many wavelengths and angles. W is the number of
// wavelengths, S that of films; everything that depends on the wavelength is
// contiguous in it.
type Sweep struct {
	Wavelength   []float64 // vacuum wavelength, nm, W values in any order
	Angle        []float64 // angles in the front medium, rad
	Polarization Polarization
	Front        []float64 // index of the front medium, W values
	Thickness    []float64 // nm, S values
	Incoherent   []bool    // nil for all coherent, or S values
	N, K         []float64 // index n + ik of film j at wavelength w: [j*W+w]
	BackN, BackK []float64 // index of the back medium, W values
	Workers      int       // goroutines: 1 none but the caller's, 0 one per processor; no bit of the result depends on it
}

// SweepResponse holds the shares of a [Sweep] with W wavelengths and S films.
type SweepResponse struct {
	R, T []float64 // wavelength w at angle a: [a*W+w]
	A    []float64 // film j: [(a*S+j)*W+w]
}

// NewSweep allocates a sweep in air or vacuum at normal incidence: front and
// back index 1, films of index 1 and thickness 0.
func NewSweep(wavelength []float64, films int) Sweep {
	w := len(wavelength)
	s := Sweep{
		Wavelength: wavelength,
		Angle:      []float64{0},
		Front:      make([]float64, w),
		Thickness:  make([]float64, films),
		Incoherent: make([]bool, films),
		N:          make([]float64, films*w),
		K:          make([]float64, films*w),
		BackN:      make([]float64, w),
		BackK:      make([]float64, w),
		Workers:    1,
	}
	for _, v := range [][]float64{s.Front, s.N, s.BackN} {
		for i := range v {
			v[i] = 1
		}
	}
	return s
}

// SetFilm stores the index (one value per wavelength) and thickness of film j.
func (s *Sweep) SetFilm(j int, index []complex128, thickness float64) error {
	w := len(s.Wavelength)
	if j < 0 || j >= len(s.Thickness) || (j+1)*w > len(s.N) || (j+1)*w > len(s.K) {
		return fmt.Errorf("optics: sweep: film %d: there are %d films: %w", j, len(s.Thickness), ErrInput)
	}
	s.Thickness[j] = thickness
	return setIndex(s.N[j*w:(j+1)*w], s.K[j*w:(j+1)*w], index)
}

// SetBack stores the index of the back medium, one value per wavelength.
func (s *Sweep) SetBack(index []complex128) error {
	return setIndex(s.BackN, s.BackK, index)
}

func setIndex(n, k []float64, index []complex128) error {
	if len(index) != len(n) || len(n) != len(k) {
		return fmt.Errorf("optics: sweep: %d indices for %d wavelengths: %w", len(index), len(n), ErrInput)
	}
	for i, v := range index {
		n[i], k[i] = real(v), imag(v)
	}
	return nil
}

// Run computes the sweep; see [Sweeper.Run].
func (s *Sweep) Run() (SweepResponse, error) {
	var sw Sweeper
	var r SweepResponse
	err := sw.Run(&r, s)
	return r, err
}

// Sweeper is the working memory for many sweeps. The zero value is ready; one
// goroutine at a time. With Workers = 1 it allocates nothing in the steady
// state.
type Sweeper struct {
	blocks []block
}

// Run computes reflectance, transmittance and absorptances of s for all its
// wavelengths and angles. The slices of dst are grown when they are too short.
// The values are the same bits as those of [Solver.Solve]. An error wraps
// [ErrInput] and names the first value that is out of range.
func (sw *Sweeper) Run(dst *SweepResponse, s *Sweep) error {
	if err := s.Validate(); err != nil {
		return err
	}
	w, films, angles := len(s.Wavelength), len(s.Thickness), len(s.Angle)
	dst.R, dst.T, dst.A = grow(dst.R, angles*w), grow(dst.T, angles*w), grow(dst.A, angles*films*w)
	jobs := angles * ((w + lanes - 1) / lanes)
	workers := s.Workers
	if workers <= 0 {
		workers = runtime.GOMAXPROCS(0)
	}
	workers = max(1, min(workers, jobs))
	if len(sw.blocks) < workers {
		sw.blocks = make([]block, workers)
	}
	if workers == 1 {
		var next atomic.Int64
		runJobs(dst, s, &sw.blocks[0], &next, jobs)
	} else {
		sw.share(dst, s, jobs, workers)
	}
	return nil
}

// share lets every goroutine take the next block when it is done with one.
func (sw *Sweeper) share(dst *SweepResponse, s *Sweep, jobs, workers int) {
	var wg sync.WaitGroup
	var next atomic.Int64
	for i := range workers {
		wg.Go(func() { runJobs(dst, s, &sw.blocks[i], &next, jobs) })
	}
	wg.Wait()
}

// runJobs computes blocks from the next one on, numbered along the wavelengths
// of each angle in turn.
func runJobs(dst *SweepResponse, s *Sweep, bl *block, next *atomic.Int64, jobs int) {
	w, films := len(s.Wavelength), len(s.Thickness)
	table := filmTable{n: s.N, k: s.K, d: s.Thickness, stride: w}
	bl.history = false
	bl.prepare(s.Incoherent, films)
	perAngle := (w + lanes - 1) / lanes
	for {
		job := int(next.Add(1)) - 1
		if job >= jobs {
			return
		}
		a, w0 := job/perAngle, job%perAngle*lanes
		b := min(lanes, w-w0)
		at := a*w + w0
		// The last block starts a few lanes early, if it can, to be whole vectors.
		skip := 0
		if over := b % vectorLanes; over > 0 && w0 > 0 {
			skip = vectorLanes - over
		}
		bl.load(s.Angle[a], s.Wavelength[w0-skip:][:b+skip], s.Front[w0-skip:], s.BackN[w0-skip:], s.BackK[w0-skip:])
		table.offset = w0 - skip
		normal := s.Angle[a] == 0
		ws, wp := s.Polarization.weights()
		if normal {
			ws, wp = 1, 0
		}
		bl.run(&table, b+skip, normal)
		r, t, shares := dst.R[at:][:b], dst.T[at:][:b], dst.A
		if films > 0 {
			shares = shares[a*films*w+w0:]
		}
		if len(bl.thick) == 0 {
			bl.forward[0].deliver(r, t, shares, w, skip, ws, wp)
			continue
		}
		bl.shares(b+skip, normal)
		weigh(r, bl.r[0][skip:], bl.r[1][skip:], ws, wp)
		weigh(t, bl.t[0][skip:], bl.t[1][skip:], ws, wp)
		for j := range films {
			weigh(shares[j*w:][:b], bl.a[0][j*lanes+skip:], bl.a[1][j*lanes+skip:], ws, wp)
		}
	}
}

// Validate reports the first length or value of the sweep that is wrong.
func (s *Sweep) Validate() error {
	w, films := len(s.Wavelength), len(s.Thickness)
	for _, l := range [...]struct {
		name      string
		got, want int
	}{
		{"Front", len(s.Front), w}, {"N", len(s.N), films * w}, {"K", len(s.K), films * w},
		{"BackN", len(s.BackN), w}, {"BackK", len(s.BackK), w}, {"Incoherent", len(s.Incoherent), films},
	} {
		if l.got != l.want && !(l.name == "Incoherent" && s.Incoherent == nil) {
			return fmt.Errorf("optics: sweep: %s has %d values, want %d: %w", l.name, l.got, l.want, ErrInput)
		}
	}
	if s.Polarization < Unpolarized || s.Polarization > P {
		return fmt.Errorf("optics: sweep: unknown polarisation %d: %w", int(s.Polarization), ErrInput)
	}
	shortest, err := s.shortest()
	if err != nil {
		return err
	}
	for i, a := range s.Angle {
		if err := checkAngle(a); err != nil {
			return fmt.Errorf("optics: sweep: angle %d: %w", i, err)
		}
	}
	if fastUnusualRow(s.Front, s.Front, MaxIndex) {
		for i, n := range s.Front {
			if err := checkIndex(complex(n, 0)); err != nil {
				return fmt.Errorf("optics: sweep: front medium, wavelength %g nm: %w", s.Wavelength[i], err)
			}
		}
	}
	if fastUnusualRow(s.BackN, s.BackK, MaxIndex) {
		for i, n := range s.BackN {
			if err := checkIndex(complex(n, s.BackK[i])); err != nil {
				return fmt.Errorf("optics: sweep: back medium, wavelength %g nm: %w", s.Wavelength[i], err)
			}
		}
	}
	for j := range films {
		if err := s.checkFilm(j, shortest); err != nil {
			return fmt.Errorf("optics: sweep: film %d: %w", j, err)
		}
	}
	return nil
}

// shortest returns the shortest wavelength, which is mostly the first or the
// last one.
func (s *Sweep) shortest() (float64, error) {
	w := len(s.Wavelength)
	if w == 0 {
		return 1, nil
	}
	least := min(s.Wavelength[0], s.Wavelength[w-1])
	if least >= MinWavelength && !fastOutsideRow(s.Wavelength, least, MaxWavelength) {
		return least, nil
	}
	for i, l := range s.Wavelength {
		if err := checkWavelength(l); err != nil {
			return 0, fmt.Errorf("optics: sweep: wavelength %d: %w", i, err)
		}
		least = min(least, l)
	}
	return least, nil
}

// outsideRow reports whether a value is not between lo and hi.
func outsideRow(v []float64, lo, hi float64) (outside bool) {
	for i := range v {
		if !(v[i] >= lo && v[i] <= hi) {
			outside = true
		}
	}
	return outside
}

// checkFilm looks for anything unusual first, and only then asks value by value.
func (s *Sweep) checkFilm(j int, shortest float64) error {
	w, d := len(s.Wavelength), s.Thickness[j]
	if err := checkThickness(d); err != nil {
		return err
	}
	n, k := s.N[j*w:(j+1)*w], s.K[j*w:(j+1)*w]
	incoherent := s.Incoherent != nil && s.Incoherent[j]
	// n + k at the shortest wavelength bounds every phase of the film.
	if !incoherent && !fastUnusualRow(n, k, min(MaxIndex, MaxPhase*shortest/(2*math.Pi*d))) {
		return nil
	}
	for i := range n {
		if err := checkIndex(complex(n[i], k[i])); err != nil {
			return fmt.Errorf("wavelength %g nm: %w", s.Wavelength[i], err)
		}
		if err := checkPhase(complex(n[i], k[i]), d, s.Wavelength[i], incoherent); err != nil {
			return err
		}
	}
	return nil
}

// unusualRow reports whether an index is not well inside its limits or n + k
// exceeds the one given.
func unusualRow(n, k []float64, limit float64) (unusual bool) {
	k = k[:len(n)]
	for i := range n {
		sum := n[i] + k[i]
		if !(n[i] >= 0 && k[i] >= 0 && sum >= 2*MinIndex && sum <= limit) {
			unusual = true
		}
	}
	return unusual
}
