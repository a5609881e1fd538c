package lighttrap_test

import (
	"fmt"
	"math"
	"testing"
	"time"

	"photonledger/lighttrap"
)

// BenchmarkTraceAll traces a full wafer: random pyramids under silicon nitride,
// 160 µm, rear mirror, 300-1200 nm in 10 nm steps, and reports the standard
// error of the absorber current and the facets met per second and core.
func BenchmarkTraceAll(b *testing.B) {
	wavelength, wafers := siliconWafers(b, lighttrap.Face{Texture: lighttrap.RandomPyramids, Angle: lighttrap.PyramidAngle})
	for _, workers := range []int{1, 2} {
		for _, rays := range []int{256, 512, 1024, 2048} {
			b.Run(fmt.Sprintf("workers=%d/rays=%d", workers, rays), func(b *testing.B) {
				var batch lighttrap.Batch
				results := make([]lighttrap.Result, len(wafers))
				facets, seed := int64(0), uint64(0)
				var standard, j float64
				start := time.Now()
				for b.Loop() {
					seed += 1000
					if _, err := batch.TraceAll(results, wafers, lighttrap.Light{}, lighttrap.Settings{Rays: rays, Workers: workers, Seed: seed}); err != nil {
						b.Fatal(err)
					}
					for i := range results {
						facets += results[i].Facets
					}
				}
				seconds := time.Since(start).Seconds()
				j, standard = absorberCurrent(b, wavelength, results)
				b.ReportMetric(standard, "mA/cm²-error")
				b.ReportMetric(j, "mA/cm²")
				b.ReportMetric(float64(facets)/seconds/float64(workers)/1e6, "Mfacets/s/core")
				b.ReportAllocs()
			})
		}
	}
}

// BenchmarkErrorExponent reports how the standard error of the absorber current
// of the same wafers falls with the rays: 64 repetitions know it to 9 %.
func BenchmarkErrorExponent(b *testing.B) {
	wavelength, wafers := siliconWafers(b, lighttrap.Face{Texture: lighttrap.RandomPyramids, Angle: lighttrap.PyramidAngle})
	var batch lighttrap.Batch
	results := make([]lighttrap.Result, len(wafers))
	for b.Loop() {
		var standard [2]float64
		for i, rays := range []int{8, 512} {
			if _, err := batch.TraceAll(results, wafers, lighttrap.Light{}, lighttrap.Settings{Rays: 64 * rays, Repetitions: 64}); err != nil {
				b.Fatal(err)
			}
			_, standard[i] = absorberCurrent(b, wavelength, results)
		}
		b.ReportMetric(math.Log(standard[1]/standard[0])/math.Log(512.0/8), "exponent")
	}
}

// BenchmarkPlanar is one wafer with plane faces, in closed form.
func BenchmarkPlanar(b *testing.B) {
	metal := lighttrap.UniformFacet(0, 0.9)
	w := lighttrap.Wafer{Index: 3.5, Absorption: 10, Thickness: 160e3, Rear: lighttrap.Face{Opaque: true, Films: &metal}}
	var t lighttrap.Tracer
	var r lighttrap.Result
	for b.Loop() {
		if err := t.Trace(&r, w, lighttrap.Light{Angle: 0.5}, lighttrap.Settings{Workers: 1}); err != nil {
			b.Fatal(err)
		}
	}
	b.ReportAllocs()
}
