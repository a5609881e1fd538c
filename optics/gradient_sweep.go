package optics

import (
	"fmt"
	"math"
	"runtime"
	"sync"
)

// SweepWeights define the objective F = sum of weight x share over all
// wavelengths, angles and shares of a [SweepResponse], which has the same
// layout. A nil slice stands for zeros. With the photon flux times the width of
// each wavelength as the weights of one film's absorptance, F is the
// photocurrent of that film.
type SweepWeights struct {
	R, T []float64 // wavelength w at angle a: [a*W+w]
	A    []float64 // film j: [(a*S+j)*W+w]
}

// SweepGradient holds the derivatives of the objective of a sweep with W
// wavelengths and S films. Everything is summed over the angles, thicknesses
// also over the wavelengths.
type SweepGradient struct {
	Value        float64   // the objective itself
	Thickness    []float64 // by the thickness of each film, 1/nm
	N, K         []float64 // by n and k of film j at wavelength w: [j*W+w]
	BackN, BackK []float64 // by n and k of the back medium, W values
}

// Gradient computes the response of the sweep and the gradient of the
// objective; see [GradientSweeper.Run].
func (s *Sweep) Gradient(weights *SweepWeights) (SweepResponse, SweepGradient, error) {
	var sw GradientSweeper
	var r SweepResponse
	var g SweepGradient
	err := sw.Run(&g, &r, s, weights)
	return r, g, err
}

// GradientSweeper is the working memory for many gradients of sweeps. The zero
// value is ready; one goroutine at a time. With Workers = 1 it allocates
// nothing in the steady state.
type GradientSweeper struct {
	workers  []gradientWorker
	partial  []float64 // thickness derivatives of every block of wavelengths
	response SweepResponse
}

type gradientWorker struct {
	block   block
	reverse reversal
}

// Run stores in r what [Sweeper.Run] does and in dst the gradient of the
// objective, in one forward and one reverse pass. r may be nil. The slices of
// dst and r are grown when they are too short. Work is shared out by blocks of
// wavelengths and every sum has a fixed order, so that no bit of the result
// depends on s.Workers. An error wraps [ErrInput] or [ErrSingular] and names the
// first value.
func (sw *GradientSweeper) Run(dst *SweepGradient, r *SweepResponse, s *Sweep, weights *SweepWeights) error {
	if err := s.Validate(); err != nil {
		return err
	}
	if err := weights.validate(s); err != nil {
		return err
	}
	if r == nil {
		r = &sw.response
	}
	w, films, angles := len(s.Wavelength), len(s.Thickness), len(s.Angle)
	r.R, r.T, r.A = grow(r.R, angles*w), grow(r.T, angles*w), grow(r.A, angles*films*w)
	dst.N, dst.K, dst.Thickness = grow(dst.N, films*w), grow(dst.K, films*w), grow(dst.Thickness, films)
	dst.BackN, dst.BackK = grow(dst.BackN, w), grow(dst.BackK, w)
	for _, v := range [...][]float64{dst.N, dst.K, dst.Thickness, dst.BackN, dst.BackK} {
		clear(v)
	}
	jobs := (w + lanes - 1) / lanes
	sw.partial = grow(sw.partial, jobs*films)
	clear(sw.partial)
	workers := s.Workers
	if workers <= 0 {
		workers = runtime.GOMAXPROCS(0)
	}
	workers = max(1, min(workers, jobs))
	if len(sw.workers) < workers {
		sw.workers = make([]gradientWorker, workers)
	}
	if workers == 1 {
		sw.workers[0].run(dst, r, sw.partial, s, weights, 0, jobs)
	} else {
		sw.share(dst, r, s, weights, jobs, workers)
	}
	for job := range jobs {
		for j := range films {
			dst.Thickness[j] += sw.partial[job*films+j]
		}
	}
	dst.Value = weights.of(r)
	return dst.check(s)
}

// share gives every goroutine its part of the blocks.
func (sw *GradientSweeper) share(dst *SweepGradient, r *SweepResponse, s *Sweep, weights *SweepWeights, jobs, workers int) {
	var wg sync.WaitGroup
	for i := range workers {
		wg.Go(func() { sw.workers[i].run(dst, r, sw.partial, s, weights, i*jobs/workers, (i+1)*jobs/workers) })
	}
	wg.Wait()
}

// run computes the blocks of wavelengths from..to-1 at all angles.
func (gw *gradientWorker) run(dst *SweepGradient, r *SweepResponse, partial []float64, s *Sweep, weights *SweepWeights, from, to int) {
	w, films := len(s.Wavelength), len(s.Thickness)
	table := filmTable{n: s.N, k: s.K, d: s.Thickness, stride: w}
	bl, rv := &gw.block, &gw.reverse
	bl.history = true
	bl.prepare(s.Incoherent, films)
	for job := from; job < to; job++ {
		w0 := job * lanes
		b := min(lanes, w-w0)
		table.offset = w0
		for a, angle := range s.Angle {
			ws, wp := s.Polarization.weights()
			normal := angle == 0
			if normal {
				ws, wp = 1, 0
			}
			bl.load(angle, s.Wavelength[w0:][:b], s.Front[w0:], s.BackN[w0:], s.BackK[w0:])
			bl.solve(&table, b, normal)
			weigh(r.R[a*w+w0:][:b], bl.r[0][:], bl.r[1][:], ws, wp)
			weigh(r.T[a*w+w0:][:b], bl.t[0][:], bl.t[1][:], ws, wp)
			for j := range films {
				weigh(r.A[(a*films+j)*w+w0:][:b], bl.a[0][j*lanes:], bl.a[1][j*lanes:], ws, wp)
			}
			rv.prepare(bl, films, ws, wp, normal)
			rv.loadWeights(weights, [2]float64{ws, wp}, a, films, w, w0, b)
			rv.run(bl, &table, b)
			rv.store(dst, partial[job*films:][:films], s, w0, b)
		}
	}
}

// loadWeights copies the weights of one block at angle number a.
func (rv *reversal) loadWeights(weights *SweepWeights, share [2]float64, a, films, w, w0, b int) {
	for p := range 2 {
		if !rv.use[p] {
			continue
		}
		scale(rv.r[p][:b], weights.R, a*w+w0, share[p])
		scale(rv.t[p][:b], weights.T, a*w+w0, share[p])
		for j := range films {
			scale(rv.a[p][j*lanes:][:b], weights.A, (a*films+j)*w+w0, share[p])
		}
	}
}

// scale stores share times the values of v from position at, or zeros for a nil
// slice.
func scale(dst, v []float64, at int, share float64) {
	if v == nil {
		clear(dst)
		return
	}
	v = v[at : at+len(dst)]
	for i := range dst {
		dst[i] = share * v[i]
	}
}

// store adds the derivatives of one block to those of its other angles.
func (rv *reversal) store(dst *SweepGradient, thickness []float64, s *Sweep, w0, b int) {
	w := len(s.Wavelength)
	for j := range thickness {
		at := j*w + w0
		dn, dk, n, k := dst.N[at:][:b], dst.K[at:][:b], s.N[at:][:b], s.K[at:][:b]
		xr, xi, dd := rv.xr[j*lanes:][:b], rv.xi[j*lanes:][:b], rv.dd[j*lanes:][:b]
		sum := 0.0
		for i := range dn {
			byN, byK := byIndex(n[i], k[i], xr[i], xi[i])
			dn[i] += byN
			dk[i] += byK
			sum += dd[i]
		}
		thickness[j] += sum
	}
	for i := range b {
		byN, byK := byIndex(s.BackN[w0+i], s.BackK[w0+i], rv.back.xr[i], rv.back.xi[i])
		dst.BackN[w0+i] += byN
		dst.BackK[w0+i] += byK
	}
}

// of returns the objective.
func (wt *SweepWeights) of(r *SweepResponse) float64 {
	sum := 0.0
	for _, v := range [...][2][]float64{{wt.R, r.R}, {wt.T, r.T}, {wt.A, r.A}} {
		for i, c := range v[0] {
			sum += c * v[1][i]
		}
	}
	return sum
}

func (wt *SweepWeights) validate(s *Sweep) error {
	w, films, angles := len(s.Wavelength), len(s.Thickness), len(s.Angle)
	for _, v := range [...]struct {
		name   string
		values []float64
		want   int
	}{{"R", wt.R, angles * w}, {"T", wt.T, angles * w}, {"A", wt.A, angles * films * w}} {
		if v.values != nil && len(v.values) != v.want {
			return fmt.Errorf("optics: sweep: %d weights of %s, want %d: %w", len(v.values), v.name, v.want, ErrInput)
		}
		for i, c := range v.values {
			if !finite(c) {
				return fmt.Errorf("optics: sweep: weight %d of %s: %g is not finite: %w", i, v.name, c, ErrInput)
			}
		}
	}
	return nil
}

// check names the first wavelength whose derivative does not exist.
func (g *SweepGradient) check(s *Sweep) error {
	w := len(s.Wavelength)
	for _, v := range [...][]float64{g.BackN, g.BackK, g.N, g.K} {
		for i, x := range v {
			if !(math.Abs(x) < largestSlope) {
				return fmt.Errorf("optics: sweep: wavelength %g nm: %w", s.Wavelength[i%w], ErrSingular)
			}
		}
	}
	for j, x := range g.Thickness {
		if !(math.Abs(x) < largestSlope) {
			return fmt.Errorf("optics: sweep: thickness of film %d: %w", j, ErrSingular)
		}
	}
	return nil
}
