package lighttrap

import "testing"

// TestTracerAllocates: nothing in the steady state with one worker.
func TestTracerAllocates(t *testing.T) {
	films := UniformFacet(0.1, 0.9)
	wafers := []Wafer{
		{Index: 3.5, Absorption: 5, Thickness: 160e3, Front: pyramids(RandomPyramids), Rear: opaque(Planar, 0.9)},
		{
			Index: 3.5, Absorption: 5, Thickness: 160e3, Front: Face{Texture: Lambertian, Films: &films}, Rear: opaque(CosinePower, 0.9),
			Covers: []Cover{{Index: 1.5, Thickness: 3e6}},
		},
		{Index: 3.5, Absorption: 5, Thickness: 160e3, Rear: opaque(Planar, 0.9)},
	}
	wafers[1].Rear.Exponent = 3
	s := Settings{Rays: 64, Workers: 1, Depths: []float64{0, 1e3, 160e3}}
	for i, w := range wafers {
		var tracer Tracer
		var r Result
		var err error
		if n := testing.AllocsPerRun(20, func() { err = tracer.Trace(&r, w, Light{}, s) }); n != 0 || err != nil {
			t.Errorf("wafer %d: %g allocations, error %v", i, n, err)
		}
	}
	var batch Batch
	dst := make([]Result, len(wafers))
	var err error
	if n := testing.AllocsPerRun(20, func() { _, err = batch.TraceAll(dst, wafers, Light{}, s) }); n != 0 || err != nil {
		t.Errorf("batch: %g allocations, error %v", n, err)
	}
}
