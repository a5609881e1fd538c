package lighttrap_test

import (
	"fmt"
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
