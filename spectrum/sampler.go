package spectrum

import (
	"fmt"
	"math"
)

// Sampler chooses the wavelengths at which a function is evaluated, so that the
// integrals of spectrum times share are good to a tolerance. The zero value is
// ready. One Sampler belongs to one goroutine; used again, with a result that is
// used again, it allocates nothing.
//
// The range is cut into panels. On each, the shares are interpolated by the
// polynomial of degree 16 through Chebyshev points, and the product of that
// polynomial with the piecewise linear spectrum is integrated exactly: rows of
// the spectrum need no panel borders, and the number of evaluations follows the
// fringes and edges of the shares, not the range. A panel's bound is the photon
// flux (or power) in it times an estimate of the largest interpolation error;
// panels with a large bound are halved.
//
// The estimate compares the interpolants of degree 4, 8 and 16: let e4 be the
// largest error of the one of degree 4 at the points that degree 8 adds, e8 that of
// degree 8 at the points that degree 16 adds. Then e8 min(1, 4 e8/e4) exceeds the
// error of degree 16, be it a geometric sequence (smooth shares) or an algebraic one
// (kinks). It is an estimate: a line much narrower than the distance of the
// points on an otherwise smooth share can be missed, as by every finite set of
// points. Where such lines may be, set MaxStep to no more than ten times their
// width. The function must be free of noise: a traced share with a standard error
// does not settle.
type Sampler struct {
	Tolerance float64   // largest bound of each integral over that of the spectrum alone, > 0; 0 means 1e-6
	MaxStep   float64   // nm, widest panel to begin with, > 0; 0 means a quarter of the range
	MaxCalls  int       // of the function, > 0; 0 means 1,000,000
	Weighting Weighting // Photons or Power

	table  *chebyshev
	n      int       // shares
	store  []float64 // values of all panels: panel, node, share
	free   []int     // unused places in store, by their offset
	panels []panel
	spare  []panel
	ends   []float64 // values at the ends and in the middle of a panel that is halved
	flux   cumulative
}

// Samples is what a Sampler finds. Interpolate linearly between the wavelengths
// and you lose accuracy: integrate with the weights.
type Samples struct {
	Wavelength []float64   // nm, ascending, from the first to the last of the range
	Share      [][]float64 // Share[j][i] is share j at wavelength i, as the function gave it
	Weights    []float64   // one per wavelength: the sum of weight times share is the integral; some may be negative
	Integral   []float64   // of each share, mA/cm² or W/m²
	Bound      []float64   // of the error of each integral, same unit
	Calls      int         // of the function
}

const (
	defaultTolerance = 1e-6
	defaultCalls     = 1_000_000
	firstPanels      = 4
	maxFirstPanels   = 100_000
	narrowest        = 1e-9 // of a panel, relative to its wavelength
)

// Sample evaluates the shares of a function between two wavelengths (nm) until
// the integrals with the spectrum are good to the tolerance, relative to the
// integral of the spectrum alone; it is a [Sampler] for one use. The function
// stores n shares for a wavelength. Errors as in [Sampler.Sample].
func Sample(s Spectrum, from, to float64, n int, tolerance float64, f func(wavelength float64, shares []float64) error) (Samples, error) {
	p := Sampler{Tolerance: tolerance}
	var out Samples
	err := p.Sample(&out, s, from, to, n, f)
	return out, err
}

// Sample fills dst, whose slices are used again if they are large enough. The
// function stores n shares for a wavelength (nm) between from and to; it is called
// once for each wavelength, in no certain order.
//
// Errors: [ErrInput] for settings, a range that is empty, dark or has no shares, a
// share that is not finite; [ErrRange] for a range that leaves the spectrum;
// [ErrSettle] if MaxCalls does not suffice or a panel cannot be halved any more:
// then dst holds the result so far with its (too large) bounds. An error of the
// function is returned with the wavelength, wrapped.
func (p *Sampler) Sample(dst *Samples, s Spectrum, from, to float64, n int, f func(wavelength float64, shares []float64) error) error {
	calls, tolerance, err := p.prepare(s, from, to, n)
	if err != nil {
		return err
	}
	run := &sampling{f: f, left: calls}
	if err := p.begin(run, from, to); err != nil {
		return err
	}
	total := p.flux.upTo(to) - p.flux.upTo(from)
	if !(total > 0) || !finite(total) {
		return fmt.Errorf("spectrum: sample: no light between %g nm and %g nm, or an overflow: %w", from, to, ErrInput)
	}
	settled := true
	for settled && p.worst() > tolerance*total {
		settled, err = p.halve(run, 0.5*tolerance*total/float64(len(p.panels)))
		if err != nil {
			return err
		}
	}
	p.finish(dst, s)
	dst.Calls = calls - run.left
	for i, v := range dst.Integral {
		if !finite(v) || !finite(dst.Bound[i]) {
			return fmt.Errorf("spectrum: sample: share %d: the integral is %g with a bound of %g, an overflow: %w", i, v, dst.Bound[i], ErrInput)
		}
	}
	if !settled {
		return fmt.Errorf("spectrum: sample: bound %.3g of the incident light after %d calls, want %.3g: %w", p.worst()/total, dst.Calls, tolerance, ErrSettle)
	}
	return nil
}

// prepare checks the settings and fits the memory.
func (p *Sampler) prepare(s Spectrum, from, to float64, n int) (calls int, tolerance float64, err error) {
	calls, tolerance = p.MaxCalls, p.Tolerance
	if calls == 0 {
		calls = defaultCalls
	}
	if tolerance == 0 {
		tolerance = defaultTolerance
	}
	switch {
	case calls < 0:
		err = fmt.Errorf("MaxCalls %d is negative: %w", calls, ErrInput)
	case !(tolerance > 0) || !finite(tolerance):
		err = fmt.Errorf("tolerance %g is not positive and finite: %w", tolerance, ErrInput)
	case !amount(p.MaxStep):
		err = fmt.Errorf("MaxStep %g nm is negative or not finite: %w", p.MaxStep, ErrInput)
	case p.Weighting != Photons && p.Weighting != Power:
		err = fmt.Errorf("unknown weighting %d: %w", int(p.Weighting), ErrInput)
	case n < 1:
		err = fmt.Errorf("%d shares: %w", n, ErrInput)
	case !(from < to):
		err = fmt.Errorf("from %g nm to %g nm is empty: %w", from, to, ErrInput)
	case to-from < narrowest*to:
		err = fmt.Errorf("from %g nm to %g nm is too narrow: %w", from, to, ErrInput)
	}
	if err == nil {
		err = s.Validate()
	}
	if err == nil {
		err = checkInside(s.Name, s.Wavelength, from, to)
	}
	if err != nil {
		return 0, 0, fmt.Errorf("spectrum: sample: %w", err)
	}
	if p.table == nil {
		p.table = newChebyshev()
	}
	p.n = n
	p.store, p.free, p.panels, p.spare = p.store[:0], p.free[:0], p.panels[:0], p.spare[:0]
	p.ends = fit(p.ends, 3*n)
	p.flux.fill(s, p.Weighting)
	return calls, tolerance, nil
}

// fit returns a slice of n values, the old one if it is large enough.
func fit(v []float64, n int) []float64 {
	if n <= cap(v) {
		return v[:n]
	}
	return make([]float64, n)
}

// worst returns the largest sum of the bounds of a share.
func (p *Sampler) worst() float64 {
	w := 0.0
	for j := range p.n {
		sum := 0.0
		for i := range p.panels {
			sum += p.bound(&p.panels[i], j)
		}
		w = max(w, sum)
	}
	return w
}

// begin makes the first panels.
func (p *Sampler) begin(run *sampling, from, to float64) error {
	count := firstPanels
	if p.MaxStep > 0 {
		c := math.Ceil((to - from) / p.MaxStep)
		if !(c <= maxFirstPanels) {
			return fmt.Errorf("spectrum: sample: MaxStep %g nm would make more than %d panels: %w", p.MaxStep, maxFirstPanels, ErrInput)
		}
		count = max(count, int(c))
	}
	step := (to - from) / float64(count)
	lo := from
	for i := range count {
		hi := to
		if i < count-1 {
			hi = from + step*float64(i+1)
		}
		q := panel{lo: lo, hi: hi, at: p.place()}
		first := p.node(&q, 0)
		if i == 0 {
			if err := run.call(lo, first); err != nil {
				return err
			}
		} else {
			copy(first, p.node(&p.panels[i-1], degree))
		}
		if err := run.call(hi, p.node(&q, degree)); err != nil {
			return err
		}
		if err := run.call(0.5*lo+0.5*hi, p.node(&q, degree/2)); err != nil {
			return err
		}
		if err := p.fill(run, &q); err != nil {
			return err
		}
		p.panels = append(p.panels, q)
		lo = hi
	}
	return nil
}

// halve replaces each panel whose bound exceeds the limit by its halves. It
// returns false if none can be.
func (p *Sampler) halve(run *sampling, limit float64) (bool, error) {
	p.spare = p.spare[:0]
	any := false
	for i := range p.panels {
		q := p.panels[i]
		large := false
		for j := range p.n {
			large = large || p.bound(&q, j) > limit
		}
		// The halves take two evaluations for each inner node but the shared ends
		// and middle, which are known.
		if !large || run.left < 2*(degree-1) || q.hi-q.lo < narrowest*q.hi {
			p.spare = append(p.spare, q)
			continue
		}
		any = true
		n := p.n
		copy(p.ends[:n], p.node(&q, 0))
		copy(p.ends[n:2*n], p.node(&q, degree/2))
		copy(p.ends[2*n:], p.node(&q, degree))
		p.free = append(p.free, q.at)
		middle := 0.5*q.lo + 0.5*q.hi
		for half := range 2 {
			h := panel{lo: q.lo, hi: middle, at: p.place()}
			if half == 1 {
				h.lo, h.hi = middle, q.hi
			}
			copy(p.node(&h, 0), p.ends[half*n:])
			copy(p.node(&h, degree), p.ends[(half+1)*n:])
			if err := run.call(0.5*h.lo+0.5*h.hi, p.node(&h, degree/2)); err != nil {
				return false, err
			}
			if err := p.fill(run, &h); err != nil {
				return false, err
			}
			p.spare = append(p.spare, h)
		}
	}
	p.panels, p.spare = p.spare, p.panels
	return any, nil
}

// sampling is one run: the function and the calls that are left.
type sampling struct {
	f    func(float64, []float64) error
	left int
}

func (r *sampling) call(l float64, shares []float64) error {
	if r.left--; r.left < 0 {
		return fmt.Errorf("spectrum: sample: MaxCalls is too small for the first panels: %w", ErrSettle)
	}
	if err := r.f(l, shares); err != nil {
		return fmt.Errorf("spectrum: sample: at %g nm: %w", l, err)
	}
	for j, v := range shares {
		if !finite(v) {
			return fmt.Errorf("spectrum: sample: share %d at %g nm: %g is not finite: %w", j, l, v, ErrInput)
		}
	}
	return nil
}

// Ledger returns the samples as a ledger, one name for each share, with the
// weights and the bounds of the integrals. The samples must weigh with Photons; s
// is the spectrum they were made with. Errors wrap [ErrInput].
func (r Samples) Ledger(s Spectrum, names []string) (Ledger, error) {
	if len(names) != len(r.Share) || len(names) != len(r.Bound) {
		return Ledger{}, fmt.Errorf("spectrum: samples: %d names for %d shares: %w", len(names), len(r.Share), ErrInput)
	}
	l := Ledger{Spectrum: s, Wavelength: r.Wavelength, Weights: r.Weights}
	for j, name := range names {
		l.Entries = append(l.Entries, Entry{Name: name, Share: r.Share[j], IntegralBound: r.Bound[j]})
	}
	return l, nil
}
