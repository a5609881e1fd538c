package lighttrap

import (
	"errors"
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
)

// randomFace returns a valid face of any kind. medium is the index of what it
// borders, n that of the wafer.
func randomFace(rng *rand.Rand, texture Texture, medium, n float64) Face {
	f := Face{Texture: texture, Medium: medium}
	if texture.textured() {
		f.Angle = 0.01 + 1.5*rng.Float64()
		f.Azimuth = float64(rng.IntN(2)) * rng.Float64()
		if texture != RandomPyramids && rng.IntN(2) == 0 {
			f.Period = 1e3 + 1e4*rng.Float64()
		}
	}
	if texture == CosinePower {
		f.Exponent = 0.2 + 20*rng.Float64()
	}
	if texture.scatters() {
		f.Specular = float64(rng.IntN(2)) * rng.Float64()
	}
	if rng.IntN(2) == 0 {
		f.Films = randomFilms(rng, medium, n)
		f.Opaque = rng.IntN(2) == 0
	}
	return f
}

func randomWafer(rng *rand.Rand, front, rear Texture) (Wafer, Light) {
	n := 1 + 4*rng.Float64()
	w := Wafer{
		Index: n, Thickness: math.Pow(10, 3+4*rng.Float64()),
		Absorption: math.Pow(10, -3+8*rng.Float64()), FreeCarriers: math.Pow(10, -3+3*rng.Float64()),
	}
	medium, touching := 0.9+rng.Float64(), 0.0
	touching = medium
	for range rng.IntN(3) {
		c := Cover{Index: 1 + rng.Float64(), Absorption: rng.Float64(), Thickness: 1e6 * rng.Float64()}
		if rng.IntN(2) == 0 {
			c.Films = randomFilms(rng, touching, c.Index)
		}
		touching = c.Index
		w.Covers = append(w.Covers, c)
	}
	w.Front = randomFace(rng, front, touching, n)
	w.Front.Medium, w.Front.Opaque = medium, false
	w.Rear = randomFace(rng, rear, 0.9+rng.Float64(), n)
	l := Light{Angle: 1.57 * rng.Float64(), Azimuth: 6 * rng.Float64(), Polarization: Polarization(rng.IntN(3))}
	if rng.IntN(4) == 0 {
		l = Light{Cone: math.Pi / 2 * rng.Float64()}
	}
	l.FromRear = rng.IntN(2) == 0 && !w.Rear.Opaque
	return w, l
}

// TestClosure: for wafers of all pairs of textures with random films, covers,
// absorption and light the shares add up to 1 within 1e-12, none is negative
// and the cells add up to the absorbed share.
func TestClosure(t *testing.T) {
	rng := rand.New(rand.NewPCG(4, 4))
	for front := range Texture(textureKinds) {
		for rear := range Texture(textureKinds) {
			for range 4 {
				w, l := randomWafer(rng, front, rear)
				d := w.Thickness
				r := mustTrace(t, w, l, Settings{Rays: 256, Repetitions: 4, Seed: rng.Uint64(), Depths: []float64{0, 0.001 * d, 0.3 * d, d}})
				if r.Unfinished.Value != 0 {
					t.Errorf("%v on %v, angle %g: %v unfinished", front, rear, l.Angle, r.Unfinished)
				}
				sum, passes, bounces := 0.0, 0.0, 0.0
				for _, e := range r.Profile {
					sum += e.Value
				}
				for _, e := range r.Passes {
					passes += e.Value
				}
				for _, e := range r.Bounces {
					bounces += e.Value
				}
				if dev := math.Abs(sum - r.Absorbed.Value); !(dev <= 1e-13) {
					t.Errorf("%v on %v: cells miss the absorbed share by %g", front, rear, dev)
				}
				if !(math.Abs(passes-1) <= 1e-12) {
					t.Errorf("%v on %v: passes add up to %g", front, rear, passes)
				}
				if bounces > 1+1e-12 || len(w.Covers) == 0 && bounces < 1-1e-12 {
					t.Errorf("%v on %v: bounces add up to %g", front, rear, bounces)
				}
				for _, e := range []Estimate{r.Reflected, r.Escaped, r.Transmitted, r.Absorbed, r.FreeCarriers} {
					if !(e.Value >= 0 && e.Error >= 0) {
						t.Errorf("%v on %v: share %v", front, rear, e)
					}
				}
			}
		}
	}
}

// TestSameBits: neither the number of workers nor what a tracer did before
// changes a bit, and a batch gives the bits of single traces.
func TestSameBits(t *testing.T) {
	rng := rand.New(rand.NewPCG(9, 9))
	var wafers []Wafer
	for _, texture := range []Texture{RandomPyramids, InvertedPyramids, Lambertian, Planar, Grooves} {
		w, _ := randomWafer(rng, texture, Lambertian)
		wafers = append(wafers, w)
	}
	l, s := Light{Angle: 0.3}, Settings{Rays: 512, Seed: 5}
	var tracer Tracer
	var single []Result
	for i, w := range wafers {
		one, many := s, s
		one.Workers, one.Seed = 1, BatchSeed(s.Seed, i)
		many.Workers, many.Seed = 3, BatchSeed(s.Seed, i)
		a := mustTrace(t, w, l, one)
		b := mustTrace(t, w, l, many)
		var c Result
		if err := tracer.Trace(&c, w, l, one); err != nil {
			t.Fatal(err)
		}
		for _, other := range []Result{b, c} {
			if diff := cmp.Diff(a, other); diff != "" {
				t.Errorf("wafer %d: %s", i, diff)
			}
		}
		single = append(single, a)
	}
	for workers := range 4 {
		s.Workers = workers
		all, err := TraceAll(nil, wafers, l, s)
		if err != nil {
			t.Fatal(err)
		}
		if diff := cmp.Diff(single, all); diff != "" {
			t.Errorf("%d workers: %s", workers, diff)
		}
	}
}

// TestSeeds: batches of neighbouring seeds have no seed in common.
func TestSeeds(t *testing.T) {
	seen := map[uint64]bool{}
	for seed := range uint64(200) {
		for i := range 200 {
			seen[BatchSeed(seed, i)] = true
		}
	}
	if len(seen) != 200*200 {
		t.Errorf("%d different seeds, want %d", len(seen), 200*200)
	}
}

// TestStandardErrors: the reflectance of bare pyramids, known to 10 digits, lies
// within one and two standard errors of 400 runs as often as Student's
// distribution with 15 degrees of freedom says: 66.7 % and 93.6 %. Bounds are
// four standard deviations of these counts.
func TestStandardErrors(t *testing.T) {
	const runs, exact = 400, 0.09740755041
	w := Wafer{Index: 3.5, Thickness: 160e3, Front: pyramids(RegularPyramids), Rear: opaque(Planar, 0)}
	one, two := 0, 0
	for seed := range uint64(runs) {
		r := mustTrace(t, w, Light{}, Settings{Rays: 1024, Seed: seed, Workers: 1})
		dev := math.Abs(r.Reflected.Value-exact) / r.Reflected.Error
		if dev < 1 {
			one++
		}
		if dev < 2 {
			two++
		}
	}
	for _, c := range []struct {
		got  int
		want float64
	}{{one, 0.667}, {two, 0.936}} {
		if dev := math.Abs(float64(c.got) - runs*c.want); dev > 4*math.Sqrt(runs*c.want*(1-c.want)) {
			t.Errorf("%d of %d runs, want %.1f", c.got, runs, runs*c.want)
		}
	}
}

// TestErrorExponent: the error of the reflectance falls faster than 1/√rays.
func TestErrorExponent(t *testing.T) {
	w := Wafer{Index: 3.5, Absorption: 30, Thickness: 160e3, Front: pyramids(RandomPyramids), Rear: opaque(Planar, 0.9)}
	spread := func(rays int) float64 {
		r := mustTrace(t, w, Light{}, Settings{Rays: 64 * rays, Repetitions: 64, Seed: 1})
		return r.Absorbed.Error
	}
	few, many := spread(32), spread(2048)
	exponent := math.Log(many/few) / math.Log(2048/32)
	t.Logf("standard error goes with rays^%.2f", exponent)
	// 64 repetitions know a standard error to 9 %: 0.03 in the exponent.
	if exponent > -0.55 {
		t.Errorf("standard error goes with rays^%.2f", exponent)
	}
}

// TestTraceErrors: bad input is an error that names the value.
func TestTraceErrors(t *testing.T) {
	good := func() (Wafer, Light, Settings) {
		return Wafer{Index: 3.5, Absorption: 1, Thickness: 160e3, Front: pyramids(RegularPyramids), Rear: opaque(Planar, 0.9)}, Light{}, Settings{Rays: 64}
	}
	for name, c := range map[string]struct {
		change func(w *Wafer, l *Light, s *Settings)
		text   string
	}{
		"facet angle 0":     {func(w *Wafer, _ *Light, _ *Settings) { w.Front.Angle = 0 }, "facet angle 0 rad"},
		"facet angle 90":    {func(w *Wafer, _ *Light, _ *Settings) { w.Front.Angle = math.Pi / 2 }, "facet angle 1.57"},
		"facet angle NaN":   {func(w *Wafer, _ *Light, _ *Settings) { w.Front.Angle = math.NaN() }, "facet angle NaN"},
		"angle on planar":   {func(w *Wafer, _ *Light, _ *Settings) { w.Front.Texture = Planar }, "planar"},
		"texture":           {func(w *Wafer, _ *Light, _ *Settings) { w.Front.Texture = 17 }, "unknown texture 17"},
		"period":            {func(w *Wafer, _ *Light, _ *Settings) { w.Front.Period = -1 }, "period -1 nm"},
		"random period":     {func(w *Wafer, _ *Light, _ *Settings) { w.Front = pyramids(RandomPyramids); w.Front.Period = 5 }, "period 5 nm"},
		"exponent":          {func(w *Wafer, _ *Light, _ *Settings) { w.Front = Face{Texture: CosinePower} }, "exponent 0"},
		"specular":          {func(w *Wafer, _ *Light, _ *Settings) { w.Rear.Specular = 0.5 }, "specular share 0.5"},
		"medium":            {func(w *Wafer, _ *Light, _ *Settings) { w.Rear.Medium = -1 }, "medium outside -1"},
		"opaque bare":       {func(w *Wafer, _ *Light, _ *Settings) { w.Rear = Face{Opaque: true} }, "opaque medium needs a table"},
		"alpha":             {func(w *Wafer, _ *Light, _ *Settings) { w.Absorption = -2 }, "absorption coefficient -2 /cm"},
		"free carriers":     {func(w *Wafer, _ *Light, _ *Settings) { w.FreeCarriers = math.Inf(1) }, "+Inf"},
		"thickness":         {func(w *Wafer, _ *Light, _ *Settings) { w.Thickness = math.NaN() }, "thickness NaN"},
		"index":             {func(w *Wafer, _ *Light, _ *Settings) { w.Index = 0 }, "index of the wafer 0"},
		"cover":             {func(w *Wafer, _ *Light, _ *Settings) { w.Covers = []Cover{{Index: 1.5, Absorption: -1}} }, "cover 0: absorption coefficient -1"},
		"empty table":       {func(w *Wafer, _ *Light, _ *Settings) { w.Front.Films = &FacetTable{} }, "table of 0 angles"},
		"light angle":       {func(_ *Wafer, l *Light, _ *Settings) { l.Angle = 2 }, "angle 2 rad"},
		"cone":              {func(_ *Wafer, l *Light, _ *Settings) { l.Cone = 2 }, "half angle 2 rad"},
		"cone and angle":    {func(_ *Wafer, l *Light, _ *Settings) { l.Cone, l.Angle = 1, 1 }, "cone"},
		"polarisation":      {func(_ *Wafer, l *Light, _ *Settings) { l.Polarization = 9 }, "polarisation 9"},
		"light from metal":  {func(_ *Wafer, l *Light, _ *Settings) { l.FromRear = true }, "opaque"},
		"rays":              {func(_ *Wafer, _ *Light, s *Settings) { s.Rays = -1 }, "-1 rays"},
		"repetitions":       {func(_ *Wafer, _ *Light, s *Settings) { s.Repetitions = 2 }, "2 repetitions"},
		"depths":            {func(_ *Wafer, _ *Light, s *Settings) { s.Depths = []float64{0, 100e3} }, "100000 nm"},
		"depths in order":   {func(_ *Wafer, _ *Light, s *Settings) { s.Depths = []float64{0, 5, 5, 160e3} }, "depth 2: 5 nm"},
		"one depth":         {func(_ *Wafer, _ *Light, s *Settings) { s.Depths = []float64{0} }, "1 depths"},
		"no way out":        {func(w *Wafer, _ *Light, _ *Settings) { *w = trapped() }, "no way out"},
		"opaque over cover": {func(w *Wafer, l *Light, _ *Settings) { *w, *l = coveredMetal() }, "covers over an opaque medium"},
	} {
		w, l, s := good()
		c.change(&w, &l, &s)
		_, err := Trace(w, l, s)
		if !errors.Is(err, ErrInput) || !strings.Contains(err.Error(), c.text) {
			t.Errorf("%s: error %v, want one with %q", name, err, c.text)
		}
		if _, err := TraceAll(nil, []Wafer{w}, l, s); !errors.Is(err, ErrInput) {
			t.Errorf("%s: error of the batch %v", name, err)
		}
	}
}

// trapped is a wafer whose faces reflect everything from inside.
func trapped() Wafer {
	films := UniformFacet(0, 1)
	return Wafer{Index: 3.5, Thickness: 1, Front: Face{Texture: Lambertian, Films: &films}, Rear: opaque(Planar, 1)}
}

func coveredMetal() (Wafer, Light) {
	return Wafer{Index: 3.5, Thickness: 1, Front: opaque(Planar, 0.5), Covers: []Cover{{Index: 1.5}}}, Light{FromRear: true}
}

// TestTableErrors: every defect of a table is named.
func TestTableErrors(t *testing.T) {
	for name, c := range map[string]struct {
		change func(s *FacetSide)
		text   string
	}{
		"unsorted":        {func(s *FacetSide) { s.Cos[1] = 1.5 }, "cosine 2: 1 does not follow 1.5"},
		"equal":           {func(s *FacetSide) { s.Cos[1] = 0 }, "cosine 1: 0 does not follow 0"},
		"NaN":             {func(s *FacetSide) { s.Cos[1] = math.NaN() }, "NaN"},
		"not from 0":      {func(s *FacetSide) { s.Cos[0] = 0.1 }, "cosines from 0.1 to 1"},
		"lengths":         {func(s *FacetSide) { s.RP = s.RP[:2] }, "RP has 2 values for 3 angles"},
		"negative":        {func(s *FacetSide) { s.TS[1] = -0.1 }, "cosine 1: TS -0.1"},
		"sum":             {func(s *FacetSide) { s.TS[1] = 0.3 }, "cosine 1: R + T + ΣA is 0.8"},
		"films of p":      {func(s *FacetSide) { s.AS = [][]float64{{0, 0, 0}} }, "1 films for s, 0 for p"},
		"phases":          {func(s *FacetSide) { s.Phase = []float64{1} }, "1 phases for 3 angles"},
		"phase NaN":       {func(s *FacetSide) { s.Phase = []float64{1, math.NaN(), 1} }, "cosine 1: phase NaN"},
		"beyond critical": {func(s *FacetSide) {}, "beyond the critical angle"},
	} {
		for k := range 2 {
			films := UniformFacet(0.5, 0.5)
			for _, s := range []*FacetSide{&films.Outside, &films.Inside} {
				s.Cos = []float64{0, 0.5, 1}
				for _, v := range []*[]float64{&s.RS, &s.RP, &s.TS, &s.TP} {
					*v = []float64{0.5, 0.5, 0.5}
				}
			}
			c.change([]*FacetSide{&films.Outside, &films.Inside}[k])
			_, err := Trace(Wafer{Index: 3.5, Absorption: 1, Thickness: 1, Front: Face{Films: &films}}, Light{}, Settings{})
			if !errors.Is(err, ErrInput) || !strings.Contains(err.Error(), c.text) {
				t.Errorf("%s, side %d: error %v, want one with %q", name, k, err, c.text)
			}
		}
	}
	films := UniformFacet(0, 1)
	films.Inside.AS, films.Inside.AP = [][]float64{{0, 0}}, [][]float64{{0, 0}}
	_, err := Trace(Wafer{Index: 3.5, Absorption: 1, Thickness: 1, Rear: Face{Opaque: true, Films: &films}}, Light{}, Settings{})
	if !errors.Is(err, ErrInput) || !strings.Contains(err.Error(), "0 films from outside, 1 from inside") {
		t.Errorf("films of one side only: %v", err)
	}
	if _, err := TabulateFacet([]float64{0, 1}, func(float64) (FacetPoint, error) { return FacetPoint{}, ErrInput }); !errors.Is(err, ErrInput) {
		t.Errorf("error of the callback: %v", err)
	}
}
