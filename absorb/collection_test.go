package absorb

import (
	"errors"
	"math"
	"math/rand/v2"
	"testing"

	"github.com/google/go-cmp/cmp"
)

func randomBase(r *rand.Rand) Base {
	b := Base{Thickness: logUniform(r, 1, 5e5), Diffusivity: logUniform(r, 0.1, 40)}
	b.DiffusionLength = b.Thickness * logUniform(r, 0.05, 1e6)
	if r.IntN(4) > 0 {
		b.RearVelocity = logUniform(r, 1e-2, 1e8)
	}
	return b
}

// profileFor draws a profile for a film of the given thickness.
func profileFor(r *rand.Rand, thickness float64) Profile {
	p := randomProfile(r)
	f := p.Thickness / thickness
	p = p.Scale(f)
	p.Thickness, p.Decay, p.Wavenumber = thickness, p.Decay*f, p.Wavenumber*f
	return p
}

// TestBaseCollected compares the closed forms with quadrature of density times
// collection probability, over absorption, diffusion length and recombination of
// many decades.
func TestBaseCollected(t *testing.T) {
	r := newRand()
	for i := range 1000 {
		b := randomBase(r)
		p := profileFor(r, b.Thickness)
		if i%10 == 0 {
			p.Decay = 1 / b.DiffusionLength // the resonance of the textbooks' formula
			p = p.Scale(0.5 / (p.Forward + p.Backward + math.Abs(p.Cos) + math.Abs(p.Sin)) / p.Thickness)
		}
		got, err := b.Collected(p)
		if err != nil {
			t.Fatalf("case %d: %v", i, err)
		}
		want := quadrature(func(z float64) float64 { return p.At(z) * b.At(z) }, 0, b.Thickness, 30)
		beams := p
		beams.Cos, beams.Sin = 0, 0
		scale, err := b.Collected(beams)
		if err != nil {
			t.Fatalf("case %d: %v", i, err)
		}
		if !(math.Abs(got-want) <= 1e-13*scale) {
			t.Errorf("case %d: %+v %+v: %.17g, quadrature %.17g, relative to beams %.2g", i, b, p, got, want, (got-want)/scale)
		}
	}
}

// TestBaseResonance: IQE is smooth through aL = 1 and right there, where it has the
// closed form of the limit.
func TestBaseResonance(t *testing.T) {
	// derived: 1/L ∫ exp(-x/L) φ = [1 + s + (s-1)(1-exp(-2w))/... ] in exponentials:
	// [(1+s) w' + (1-s) w exp(-2w)]/[(1+s) + (1-s) exp(-2w)], w' = (1-exp(-2w))/2.
	for _, b := range []Base{{300e3, 200e3, 30, 1000}, {180e3, 500e3, 30, 100}, {1e3, 2e5, 1, 1e7}, {5e5, 1e4, 27, 0}} {
		w, s := b.shape()
		e := math.Exp(-2 * w)
		want := ((1+s)*0.5*-math.Expm1(-2*w) + (1-s)*w*e) / ((1 + s) + (1-s)*e)
		alpha := nmPerCM / b.DiffusionLength
		if got := b.IQE(alpha); relative(got, want) > 2e-14 {
			t.Errorf("%+v: IQE at aL = 1 is %.17g, limit %.17g", b, got, want)
		}
		for _, step := range []float64{1e-15, 1e-12, 1e-9, 1e-6} {
			lo, hi := b.IQE(alpha*(1-step)), b.IQE(alpha*(1+step))
			if relative(lo, want) > 2*step+2e-14 || relative(hi, want) > 2*step+2e-14 || lo > hi*(1+1e-15) {
				t.Errorf("%+v: IQE at aL = 1 -+ %g is %.17g, %.17g", b, step, lo, hi)
			}
		}
	}
}

// TestBaseLimits: strong and weak absorption tell the two effective lengths; a
// base without recombination collects what it absorbs; one without end has
// IQE = aL/(1+aL).
func TestBaseLimits(t *testing.T) {
	r := newRand()
	for i := range 500 {
		b := randomBase(r)
		weak := 1e-9 * nmPerCM / b.Thickness
		if got, want := b.IQE(weak), weak*cmPerNM*b.CollectionLength(); relative(got, want) > 2e-9 {
			t.Errorf("case %d: %+v: weak absorption %g, want %g", i, b, got, want)
		}
		// 1-IQE = 1/(a L_Q) - 1/(aL)² + ...
		strong := 1e6 * nmPerCM * max(1/b.EffectiveLength(), 1/b.DiffusionLength, 1/b.Thickness)
		if got, want := 1-b.IQE(strong), nmPerCM/(strong*b.EffectiveLength()); math.Abs(got-want) > 3e-12 {
			t.Errorf("case %d: %+v: strong absorption loses %g, want %g", i, b, got, want)
		}
		if b.IQE(0) != 0 {
			t.Errorf("case %d: IQE without absorption is %g", i, b.IQE(0))
		}
		if c, q := b.CollectionLength(), b.EffectiveLength(); !(c > 0 && c <= b.Thickness*(1+1e-14) && q > 0) {
			t.Errorf("case %d: %+v: L_C %g, L_Q %g", i, b, c, q)
		}
		// Light from the rear that is absorbed at once.
		p := Profile{Thickness: b.Thickness, Decay: 1e9 * max(1/b.Thickness, b.RearVelocity/b.Diffusivity*cmPerNM, 1/b.DiffusionLength)}
		p.Forward = p.Decay
		if got, err := b.Collected(p.Reversed()); err != nil || relative(got, b.RearCollection()) > 3e-9 {
			t.Errorf("case %d: %+v: light from the rear %g, want %g (%v)", i, b, got, b.RearCollection(), err)
		}
	}
	lossless := Base{Thickness: 1e5, DiffusionLength: 1e16, Diffusivity: 30}
	for _, alpha := range []float64{1e-3, 1, 1e3, 1e6} {
		if got, want := lossless.IQE(alpha), Absorptance(alpha, 1e5); relative(got, want) > 1e-14 {
			t.Errorf("no recombination: %.17g, absorptance %.17g", got, want)
		}
	}
	endless := Base{Thickness: 1e9, DiffusionLength: 1e5, Diffusivity: 30, RearVelocity: 1e4}
	for _, alpha := range []float64{1, 50, 100, 1e4} {
		aL := alpha * 1e5 * cmPerNM
		if got, want := endless.IQE(alpha), aL/(1+aL); relative(got, want) > 1e-14 {
			t.Errorf("base without end: %.17g, want %.17g", got, want)
		}
	}
}

// TestBaseMonotony: collection falls with depth and with rear recombination, and
// rises with the diffusion length.
func TestBaseMonotony(t *testing.T) {
	r := newRand()
	for i := range 500 {
		b := randomBase(r)
		last := 1 + 1e-15
		for k := range 51 {
			v := b.At(b.Thickness * float64(k) / 50)
			if !(v >= 0 && v <= last*(1+1e-15)) {
				t.Errorf("case %d: %+v: probability %g after %g", i, b, v, last)
			}
			last = v
		}
		alpha := logUniform(r, 1e-2, 10) * nmPerCM / b.Thickness
		worse, shorter := b, b
		worse.RearVelocity = 2*b.RearVelocity + 1
		shorter.DiffusionLength /= 2
		iqe := b.IQE(alpha)
		if worse.IQE(alpha) > iqe*(1+1e-14) || shorter.IQE(alpha) > iqe*(1+1e-14) || iqe > Absorptance(alpha, b.Thickness)*(1+1e-14) {
			t.Errorf("case %d: %+v: IQE %g, absorptance %g, more recombination %g, half the length %g", i, b, iqe, Absorptance(alpha, b.Thickness), worse.IQE(alpha), shorter.IQE(alpha))
		}
	}
}

// TestMean compares the means of all collections with quadrature.
func TestMean(t *testing.T) {
	r := newRand()
	for i := range 200 {
		b := randomBase(r)
		j := Junction{FrontLayer: b.Thickness * r.Float64(), FrontCollection: r.Float64(), Depletion: b.Thickness * r.Float64(), Base: b}
		d := j.Thickness()
		table := randomTable(r, d)
		for _, c := range []Collection{Constant(r.Float64()), j, table} {
			z1, z2 := r.Float64()*d, r.Float64()*d
			if z1 > z2 {
				z1, z2 = z2, z1
			}
			// Quadrature between the kinks.
			kinks := append([]float64{z1, z2, j.FrontLayer, j.FrontLayer + j.Depletion}, table.Depth...)
			want := piecewise(c.At, kinks, z1, z2) / (z2 - z1)
			if got := c.Mean(z1, z2); relative(got, want) > 1e-12 {
				t.Errorf("case %d: %T %+v from %g to %g: mean %.17g, quadrature %.17g", i, c, c, z1, z2, got, want)
			}
		}
	}
}

// TestCollected compares junction and table with quadrature between their kinks.
func TestCollected(t *testing.T) {
	r := newRand()
	for i := range 300 {
		b := randomBase(r)
		j := Junction{FrontLayer: b.Thickness * r.Float64() * 0.1, FrontCollection: r.Float64(), Depletion: b.Thickness * r.Float64() * 0.1, Base: b}
		d := j.Thickness()
		p := profileFor(r, d)
		beams := p
		beams.Cos, beams.Sin = 0, 0
		table := randomTable(r, d)
		kinks := append([]float64{0, d, j.FrontLayer, j.FrontLayer + j.Depletion}, table.Depth...)
		for _, c := range []Collection{Constant(r.Float64()), j, table} {
			got, err := c.Collected(p)
			if err != nil {
				t.Fatalf("case %d: %v", i, err)
			}
			scale, err := c.Collected(beams)
			if err != nil {
				t.Fatalf("case %d: %v", i, err)
			}
			want := piecewise(func(z float64) float64 { return p.At(z) * c.At(z) }, kinks, 0, d)
			if !(math.Abs(got-want) <= 1e-13*scale) {
				t.Errorf("case %d: %T %+v %+v: %.17g, quadrature %.17g, relative %.2g", i, c, c, p, got, want, (got-want)/scale)
			}
		}
	}
}

// piecewise integrates f over z1..z2 with quadrature between the kinks, away
// from their faces, where f may jump.
func piecewise(f func(float64) float64, kinks []float64, z1, z2 float64) float64 {
	sum := 0.0
	lo := z1
	for lo < z2 {
		hi := z2
		for _, k := range kinks {
			if k > lo && k < hi {
				hi = k
			}
		}
		sum += quadrature(f, lo, hi, 8)
		lo = hi
	}
	return sum
}

func randomTable(r *rand.Rand, d float64) Table {
	t := Table{Depth: randomMesh(r, 1+r.IntN(8), 0, d)}
	t.Depth[len(t.Depth)-1] = d
	for range t.Depth {
		t.Probability = append(t.Probability, r.Float64())
	}
	return t
}

// TestTableFollowsBase: a table of a base's probability on ever finer depths
// converges to the closed form with the square of the step.
func TestTableFollowsBase(t *testing.T) {
	b := Base{Thickness: 180e3, DiffusionLength: 250e3, Diffusivity: 30, RearVelocity: 2000}
	p, err := Slab{Absorption: 64, Thickness: b.Thickness, FrontInternal: 0.6, RearReflectance: 0.9}.Profile()
	if err != nil {
		t.Fatal(err)
	}
	want, err := b.Collected(p)
	if err != nil {
		t.Fatal(err)
	}
	var last float64
	for n := 10; n <= 160; n *= 2 {
		table := Table{make([]float64, n+1), make([]float64, n+1)}
		for i := range table.Depth {
			table.Depth[i] = b.Thickness * float64(i) / float64(n)
			table.Probability[i] = b.At(table.Depth[i])
		}
		got, err := table.Collected(p)
		if err != nil {
			t.Fatal(err)
		}
		if ratio := last / (got - want); last != 0 && math.Abs(ratio-4) > 0.1 {
			t.Errorf("%d pieces: error %g, %g before", n, got-want, last)
		}
		last = got - want
	}
}

// TestCollectedCurrent: with one wavelength and fine cells the sum over the cells
// approaches the integral; with constant collection it is exact.
func TestCollectedCurrent(t *testing.T) {
	const d, photons = 160e3, 2e17
	p, err := Slab{Absorption: 300, Thickness: d, RearReflectance: 0.8}.Profile()
	if err != nil {
		t.Fatal(err)
	}
	j := Junction{FrontLayer: 300, FrontCollection: 0.7, Depletion: 400, Base: Base{Thickness: d - 700, DiffusionLength: 400e3, Diffusivity: 30, RearVelocity: 200}}
	eqe, err := QuantumEfficiency(nil, []Profile{p}, j)
	if err != nil {
		t.Fatal(err)
	}
	mesh := make([]float64, 20001)
	for i := range mesh {
		mesh[i] = d * float64(i) / 20000
	}
	rate, err := GenerationFromProfiles(mesh, []float64{photons}, []Profile{p})
	if err != nil {
		t.Fatal(err)
	}
	got, err := CollectedCurrent(mesh, rate, j)
	if err != nil {
		t.Fatal(err)
	}
	// The cells are 8 nm, the error their square over the lengths: 1e-8 or less.
	if want := eqe[0] * photons / PhotonsPerCurrent; relative(got, want) > 1e-8 {
		t.Errorf("current %.12g mA/cm², from quantum efficiency %.12g", got, want)
	}
	all, err := GenerationCurrent(mesh, rate)
	if want := p.Absorptance() * photons / PhotonsPerCurrent; err != nil || relative(all, want) > 1e-13 {
		t.Errorf("current %.17g mA/cm², absorbed %.17g (%v)", all, want, err)
	}
}

func TestCollectionErrors(t *testing.T) {
	good := Base{300e3, 200e3, 30, 1000}
	p := Profile{Thickness: 300e3, Decay: 1e-5, Forward: 1e-5}
	nan := math.NaN()
	bad := map[string]Collection{
		"probability above 1":     Constant(1.1),
		"probability NaN":         Constant(nan),
		"no base":                 Base{},
		"negative velocity":       Base{300e3, 200e3, 30, -1},
		"infinite length":         Base{300e3, math.Inf(1), 30, 0},
		"negative front layer":    Junction{FrontLayer: -1, Base: good},
		"front collection":        Junction{FrontCollection: 2, Base: good},
		"negative depletion":      Junction{Depletion: nan, Base: good},
		"no table":                Table{},
		"table not from 0":        Table{[]float64{1, 300e3}, []float64{1, 1}},
		"table lengths":           Table{[]float64{0, 300e3}, []float64{1}},
		"table probability":       Table{[]float64{0, 300e3}, []float64{1, -0.1}},
		"table depths descending": Table{[]float64{0, 3e5, 2e5}, []float64{1, 1, 1}},
	}
	for name, c := range bad {
		if err := c.Validate(); !errors.Is(err, ErrInput) {
			t.Errorf("%s: Validate %v", name, err)
		}
		if _, err := c.Collected(p); !errors.Is(err, ErrInput) {
			t.Errorf("%s: Collected %v", name, err)
		}
		if _, err := CollectedCurrent([]float64{0, 1}, []float64{1}, c); !errors.Is(err, ErrInput) {
			t.Errorf("%s: CollectedCurrent %v", name, err)
		}
		if _, ok := c.(Constant); !ok && !(math.IsNaN(c.At(1)) && math.IsNaN(c.Mean(0, 1))) {
			t.Errorf("%s: At %g, Mean %g, want NaN", name, c.At(1), c.Mean(0, 1))
		}
	}
	for name, c := range map[string]Collection{
		"base too thin":       Base{299e3, 200e3, 30, 1000},
		"junction too thick":  Junction{FrontLayer: 1, Base: good},
		"table ends too soon": Table{[]float64{0, 1e5}, []float64{1, 1}},
	} {
		if _, err := c.Collected(p); !errors.Is(err, ErrRange) {
			t.Errorf("%s: Collected %v", name, err)
		}
		if _, err := CollectedCurrent([]float64{0, 4e5}, []float64{1}, c); !errors.Is(err, ErrRange) {
			t.Errorf("%s: CollectedCurrent %v", name, err)
		}
	}
	if _, err := QuantumEfficiency(nil, []Profile{p}, nil); !errors.Is(err, ErrInput) {
		t.Errorf("no collection: %v", err)
	}
	if _, err := QuantumEfficiency(make([]float64, 2), []Profile{p}, good); !errors.Is(err, ErrInput) {
		t.Errorf("dst too long: %v", err)
	}
	if _, err := good.Collected(Profile{Thickness: 300e3, Forward: -1}); !errors.Is(err, ErrInput) {
		t.Errorf("negative profile: %v", err)
	}
}

func TestInternalQuantumEfficiency(t *testing.T) {
	if got := InternalQuantumEfficiency(0.45, 0.9); relative(got, 0.5) > 1e-15 {
		t.Errorf("IQE %g, want 0.5", got)
	}
	for _, v := range [][2]float64{{0.5, 0}, {0.5, 1.1}, {-1, 0.5}, {math.NaN(), 0.5}, {0.5, math.NaN()}} {
		if got := InternalQuantumEfficiency(v[0], v[1]); !math.IsNaN(got) {
			t.Errorf("IQE(%g, %g) = %g, want NaN", v[0], v[1], got)
		}
	}
}

// TestSplit: generating and parasitic part add up, with the shares of the two
// absorption coefficients, and the slab agrees.
func TestSplit(t *testing.T) {
	s := Slab{Absorption: 3.5, FreeCarriers: 1.4, Thickness: 160e3, FrontReflectance: 0.05, FrontInternal: 0.9, RearReflectance: 0.95}
	shares, err := s.Shares()
	if err != nil {
		t.Fatal(err)
	}
	total := s
	total.Absorption, total.FreeCarriers = s.Absorption+s.FreeCarriers, 0
	both, err := total.Profile()
	if err != nil {
		t.Fatal(err)
	}
	generating, parasitic, err := Split(both, s.Absorption, s.FreeCarriers)
	if err != nil {
		t.Fatal(err)
	}
	own, err := s.Profile()
	if err != nil {
		t.Fatal(err)
	}
	free, err := s.FreeCarrierProfile()
	if err != nil {
		t.Fatal(err)
	}
	for name, v := range map[string][2]float64{
		"generating": {generating.Absorptance(), shares.Absorbed},
		"parasitic":  {parasitic.Absorptance(), shares.FreeCarriers},
		"own":        {own.Absorptance(), shares.Absorbed},
		"free":       {free.Absorptance(), shares.FreeCarriers},
		"both":       {both.Absorptance(), shares.Absorbed + shares.FreeCarriers},
	} {
		if relative(v[0], v[1]) > 2e-15 {
			t.Errorf("%s: profile %.17g, share %.17g", name, v[0], v[1])
		}
	}
	if _, _, err := Split(both, -1, 1); !errors.Is(err, ErrInput) {
		t.Errorf("negative alpha: %v", err)
	}
	zero, _, err := Split(Profile{Thickness: 1}, 0, 0)
	if diff := cmp.Diff(Profile{Thickness: 1}, zero); err != nil || diff != "" {
		t.Errorf("no absorption: %v %s", err, diff)
	}
}
