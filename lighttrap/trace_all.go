package lighttrap

import (
	"fmt"
	"runtime"
	"sync"
	"sync/atomic"
)

// TraceAll traces many wafers under the same light, usually one wafer at many
// wavelengths, and stores the results in dst; nil allocates, otherwise it must
// be as long as wafers. Wafer i is traced as by [Trace] with the seed
// [BatchSeed](s.Seed, i), so that the errors of different wavelengths are
// independent. s.Workers goroutines share the wafers, and no bit depends on their
// number.
//
// Errors wrap [ErrInput]; the text names the number of the wafer.
func TraceAll(dst []Result, wafers []Wafer, l Light, s Settings) ([]Result, error) {
	var b Batch
	return b.TraceAll(dst, wafers, l, s)
}

// BatchSeed returns the seed of wafer i of a batch. Neighbouring seeds of batches
// share none.
func BatchSeed(seed uint64, i int) uint64 { return mix64(mix64(seed) + uint64(i)*golden) }

// Batch is [TraceAll] with memory of its own. The zero value is ready; it belongs
// to one goroutine at a time.
type Batch struct {
	tracers []Tracer
	errs    []error
}

// TraceAll is the function [TraceAll] with the memory of b. The slices of dst are
// used again.
func (b *Batch) TraceAll(dst []Result, wafers []Wafer, l Light, s Settings) ([]Result, error) {
	if dst == nil {
		dst = make([]Result, len(wafers))
	}
	if len(dst) != len(wafers) {
		return nil, fmt.Errorf("lighttrap: %d results for %d wafers: %w", len(dst), len(wafers), ErrInput)
	}
	if _, _, _, err := s.plan(); err != nil {
		return nil, err
	}
	workers := s.Workers
	if workers == 0 {
		workers = runtime.GOMAXPROCS(0)
	}
	workers = max(1, min(workers, len(wafers)))
	for len(b.tracers) < workers {
		b.tracers = append(b.tracers, Tracer{})
	}
	for len(b.errs) < len(wafers) {
		b.errs = append(b.errs, nil)
	}
	if workers == 1 {
		for i := range wafers {
			b.one(&b.tracers[0], dst, wafers, l, s, i)
		}
	} else {
		b.share(dst, wafers, l, s, workers)
	}
	for i, err := range b.errs[:len(wafers)] {
		if err != nil {
			return nil, fmt.Errorf("wafer %d: %w", i, err)
		}
	}
	return dst, nil
}

// share lets several goroutines take one wafer after the other.
func (b *Batch) share(dst []Result, wafers []Wafer, l Light, s Settings, workers int) {
	var wait sync.WaitGroup
	var taken atomic.Int64
	for k := range workers {
		wait.Go(func() {
			for i := int(taken.Add(1)) - 1; i < len(wafers); i = int(taken.Add(1)) - 1 {
				b.one(&b.tracers[k], dst, wafers, l, s, i)
			}
		})
	}
	wait.Wait()
}

// one traces wafer i.
func (b *Batch) one(t *Tracer, dst []Result, wafers []Wafer, l Light, s Settings, i int) {
	s.Workers = 1
	s.Seed = BatchSeed(s.Seed, i)
	b.errs[i] = t.Trace(&dst[i], wafers[i], l, s)
}
