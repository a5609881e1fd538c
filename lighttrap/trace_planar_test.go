package lighttrap

import (
	"fmt"
	"math"
	"math/rand/v2"
	"testing"
)

// films returns a table with random responses of two films on both sides that
// keep R + T + ΣA = 1 and are 0 in transmission beyond the critical angle.
func randomFilms(rng *rand.Rand, n1, n2 float64) *FacetTable {
	side := func(from, to float64) FacetSide {
		var s FacetSide
		s.Cos = FacetCosines(from, to, 6)
		s.AS, s.AP = make([][]float64, 2), make([][]float64, 2)
		for _, c := range s.Cos {
			beyond := math.IsNaN(RefractedCosine(from, to, c)) || c == 0 || c*c <= 1-to*to/from/from+1e-12
			for p, cols := range [2][4]*[]float64{{&s.RS, &s.TS, &s.AS[0], &s.AS[1]}, {&s.RP, &s.TP, &s.AP[0], &s.AP[1]}} {
				r, t, a, b := rng.Float64(), rng.Float64(), 0.1*rng.Float64(), 0.1*rng.Float64()
				if beyond {
					t = 0
				}
				if c == 1 && p == 1 {
					r, t, a, b = s.RS[len(s.RS)-1], s.TS[len(s.TS)-1], s.AS[0][len(s.AS[0])-1], s.AS[1][len(s.AS[1])-1]
				}
				f := 1 / (r + t + a + b)
				for i, v := range [4]float64{r, t, a, b} {
					*cols[i] = append(*cols[i], v*f)
				}
			}
		}
		return s
	}
	return &FacetTable{Outside: side(n1, n2), Inside: side(n2, n1)}
}

// TestPlanarClosedForm: rays traced through a planar wafer under covers, as if
// its faces were textured, agree with the sum of the geometric series: every
// share, path, passes, returned light and depth profile.
func TestPlanarClosedForm(t *testing.T) {
	rng := rand.New(rand.NewPCG(8, 1))
	all, wide := 0, 0
	for trial := range 24 {
		const nCover, n = 1.5, 3.5
		w := Wafer{
			Index: n, Thickness: 100e3, Absorption: 60 * rng.Float64(), FreeCarriers: 20 * rng.Float64(),
			Rear: Face{Films: randomFilms(rng, 1, n)},
		}
		front := 1.0
		if trial%2 == 1 {
			front = nCover
			w.Covers = []Cover{
				{Index: 1.4, Absorption: 0.3, Thickness: 3e6, Films: randomFilms(rng, 1, 1.4)},
				{Index: nCover, Absorption: 2, Thickness: 4e5},
			}
		}
		w.Front.Films = randomFilms(rng, front, n)
		l := Light{Angle: 1.2 * rng.Float64(), Polarization: Polarization(trial % 3), FromRear: trial%4 >= 2}
		if trial%5 == 4 {
			l = Light{Cone: 1, FromRear: l.FromRear}
		}
		s := Settings{Rays: 1 << 14, Seed: 99, Depths: []float64{0, 10e3, 30e3, 31e3, 100e3}, Workers: 1}
		want := mustTrace(t, w, l, s)
		var tr Tracer
		if err := tr.Trace(&Result{}, w, l, s); err != nil {
			t.Fatal(err)
		}
		// The same wafer, ray by ray.
		const repetitions = 64
		m := &tr.model
		m.planar = false
		tr.rows = make([]float64, m.sums*repetitions)
		for i := range repetitions {
			tr.workers[0].repeat(tr.rows[i*m.sums:(i+1)*m.sums], &l, 512, 7, i)
		}
		var got Result
		tr.report(&got, &w, repetitions)
		if dev := total(&got) - 1; !(math.Abs(dev) <= 1e-12) {
			t.Errorf("shares miss 1 by %g", dev)
		}
		name := fmt.Sprintf("wafer %d: ", trial)
		compare := func(what string, got, want Estimate) {
			t.Helper()
			// Of some 600 figures a few lie beyond 3 standard errors; weightsAbove
			// over the rays is the share of one weak ray.
			dev, standard := math.Abs(got.Value-want.Value), got.Error+want.Error+weightsAbove/(512*repetitions)
			all++
			if !(dev <= 3*standard) {
				wide++
			}
			if !(dev <= 5*standard) {
				t.Errorf("%s%s = %v, want %v", name, what, got, want.Value)
			}
		}
		compare("reflected", got.Reflected, want.Reflected)
		compare("escaped", got.Escaped, want.Escaped)
		compare("transmitted", got.Transmitted, want.Transmitted)
		compare("absorbed", got.Absorbed, want.Absorbed)
		compare("free carriers", got.FreeCarriers, want.FreeCarriers)
		compare("entered", got.Entered, want.Entered)
		compare("path", got.Path, want.Path)
		compare("sent back", got.SentBack, want.SentBack)
		compare("bounces", got.Bounces[1], want.Bounces[1])
		for i := range got.FrontFilms {
			compare(fmt.Sprint("front film ", i), got.FrontFilms[i], want.FrontFilms[i])
			compare(fmt.Sprint("rear film ", i), got.RearFilms[i], want.RearFilms[i])
		}
		for i := range got.Covers {
			compare(fmt.Sprint("cover ", i), got.Covers[i], want.Covers[i])
		}
		for i := range 5 {
			compare(fmt.Sprint("passes ", i), got.Passes[i], want.Passes[i])
		}
		sum, passes := 0.0, 0.0
		for i := range got.Profile {
			compare(fmt.Sprint("cell ", i), got.Profile[i], want.Profile[i])
			sum += want.Profile[i].Value
		}
		for _, p := range want.Passes {
			passes += p.Value
		}
		if dev := math.Abs(sum - want.Absorbed.Value); !(dev <= 1e-14) {
			t.Errorf("%scells miss the absorbed share by %g", name, dev)
		}
		if !(math.Abs(passes-1) <= 1e-12) {
			t.Errorf("%spasses add up to %g", name, passes)
		}
	}
	if wide > all/100 {
		t.Errorf("%d of %d figures are beyond 3 standard errors", wide, all)
	}
	t.Logf("%d of %d figures beyond 3 standard errors", wide, all)
}
