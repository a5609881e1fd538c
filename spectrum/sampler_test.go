package spectrum

import (
	"errors"
	"flag"
	"math"
	"math/cmplx"
	"math/rand/v2"
	"slices"
	"testing"

	"github.com/google/go-cmp/cmp"
)

// testFilm is a film of a stack that only these tests use: own formulas, so that
// the test hangs on no other package.
type testFilm struct {
	n, k, dispersion float64 // index n + dispersion/λ², extinction k decaying with λ
	thickness        float64 // nm
}

func (f testFilm) index(l float64) complex128 {
	return complex(f.n+f.dispersion/(l*l), f.k*math.Exp(-l/250))
}

// stackShares stores R, T and 1-R-T of films in air on glass, normal incidence,
// by the characteristic matrices of Abelès (M. Born, E. Wolf, Principles of Optics,
// section 1.6).
func stackShares(films []testFilm, l float64, dst []float64) {
	const glass = 1.52
	b, c := complex128(1), complex128(glass)
	for i := len(films) - 1; i >= 0; i-- {
		n := films[i].index(l)
		phase := n * complex(2*math.Pi*films[i].thickness/l, 0)
		cos, sin := cmplx.Cos(phase), cmplx.Sin(phase)
		b, c = cos*b-1i*sin/n*c, cos*c-1i*n*sin*b
	}
	sum := b + c
	r := cmplx.Abs((b - c) / sum)
	dst[0] = r * r
	dst[1] = 4 * glass / (real(sum)*real(sum) + imag(sum)*imag(sum))
	dst[2] = 1 - dst[0] - dst[1]
}

func randomStack(rng *rand.Rand) []testFilm {
	films := make([]testFilm, 1+rng.IntN(5))
	for i := range films {
		films[i] = testFilm{n: 1.3 + 2.7*rng.Float64(), dispersion: 4e4 * rng.Float64(), thickness: 20 * math.Exp(rng.Float64()*5)}
		if rng.IntN(2) == 0 {
			films[i].k = math.Exp(-6 + 7*rng.Float64())
		}
		if rng.IntN(4) == 0 { // a silver-like mirror
			films[i] = testFilm{n: 0.1, k: 40, thickness: 5 + 45*rng.Float64()}
		}
	}
	return films
}

// denseIntegral is the reference: five-point Gauss quadrature on each of some equal
// pieces between two rows of the spectrum.
func denseIntegral(s Spectrum, from, to float64, pieces int, f func(float64, []float64)) (integral [3]float64) {
	node := [5]float64{-0.906179845938663992797626878299, -0.538469310105683091036314420700, 0, 0.538469310105683091036314420700, 0.906179845938663992797626878299}
	weight := [5]float64{0.236926885056189087514264040720, 0.478628670499366468041291514836, 128.0 / 225, 0.478628670499366468041291514836, 0.236926885056189087514264040720}
	var v [3]float64
	for i := 1; i < len(s.Wavelength); i++ {
		a, b := max(from, s.Wavelength[i-1]), min(to, s.Wavelength[i])
		for k := range pieces {
			if a >= b {
				break
			}
			h := (b - a) / float64(pieces)
			lo := a + float64(k)*h
			for g := range node {
				l := lo + h/2*(1+node[g])
				f(l, v[:])
				w := currentPerIrradiance * l * interpolate(s.Wavelength, s.Irradiance, l) * h / 2 * weight[g]
				for j := range v {
					integral[j] += w * v[j]
				}
			}
		}
	}
	return integral
}

// settledIntegral doubles the density of the reference until it is a hundred
// times more certain than the bound that it shall judge.
func settledIntegral(s Spectrum, from, to float64, bound []float64, f func(float64, []float64)) ([3]float64, bool) {
	before := denseIntegral(s, from, to, 1, f)
	for pieces := 2; pieces <= 256; pieces *= 2 {
		now := denseIntegral(s, from, to, pieces, f)
		good := true
		for j := range now {
			good = good && math.Abs(now[j]-before[j]) <= 0.01*bound[j]
		}
		if good {
			return now, true
		}
		before = now
	}
	return before, false
}

var honestStacks = flag.Int("stacks", 40, "random stacks per tolerance in TestSamplerBoundIsHonest")

// TestSamplerBoundIsHonest: over random stacks (one to five films of up to 3 µm,
// absorbing or not, one in four a metal, so that cavities with narrow lines
// occur) the true error must not exceed the bound in 99 % of the integrals, and the
// bound must not exceed the tolerance.
func TestSamplerBoundIsHonest(t *testing.T) {
	s := AM15G()
	rng := rand.New(rand.NewPCG(1, 2))
	const from, to = 300, 1200
	incident, err := Photocurrent(s, []float64{from, to}, []float64{1, 1})
	if err != nil {
		t.Fatal(err)
	}
	bad, all := 0, 0
	var p Sampler
	var got Samples
	for _, p.Tolerance = range []float64{1e-2, 1e-3, 1e-4, 1e-5, 1e-6, 1e-7, 1e-8} {
		ratio, calls := 0.0, 0
		for range *honestStacks {
			films := randomStack(rng)
			err := p.Sample(&got, s, from, to, 3, func(l float64, v []float64) error { stackShares(films, l, v); return nil })
			if err != nil {
				t.Fatalf("%v: %v", films, err)
			}
			want, sure := settledIntegral(s, from, to, got.Bound, func(l float64, v []float64) { stackShares(films, l, v) })
			if !sure {
				t.Fatalf("%v: the reference does not settle", films)
			}
			for j := range want {
				if got.Bound[j] > p.Tolerance*incident*(1+1e-6) {
					t.Errorf("%v: bound %g of share %d above the tolerance", films, got.Bound[j], j)
				}
				e := math.Abs(got.Integral[j] - want[j])
				all++
				if e > got.Bound[j] {
					bad++
					t.Logf("tolerance %g, %v: share %d: error %.3g, bound %.3g, %d calls", p.Tolerance, films, j, e, got.Bound[j], got.Calls)
				}
				ratio += e / got.Bound[j]
			}
			calls += got.Calls
		}
		t.Logf("tolerance %g: mean error/bound %.2g, mean calls %d", p.Tolerance, ratio/float64(3**honestStacks), calls / *honestStacks)
	}
	t.Logf("%d of %d integrals outside their bound", bad, all)
	if float64(bad) > 0.01*float64(all) {
		t.Errorf("%d of %d integrals outside their bound, more than 1 %%", bad, all)
	}
}

// airy stores R, T, A of one film in air by the closed formula of Airy (M. Born,
// E. Wolf, Principles of Optics, section 7.6): no recursion, no matrix.
func airy(n complex128, thickness, l float64, v []float64) {
	r := (1 - n) / (1 + n)
	p := cmplx.Exp(1i * n * complex(2*math.Pi*thickness/l, 0))
	down := 1 - r*r*p*p
	reflected, through := r*(1-p*p)/down, (1-r*r)*p/down
	v[0] = real(reflected)*real(reflected) + imag(reflected)*imag(reflected)
	v[1] = real(through)*real(through) + imag(through)*imag(through)
	v[2] = 1 - v[0] - v[1]
}

// TestSamplerFollowsFringes: twice the fringes take about twice the evaluations,
// and a wide range without fringes takes no more than a narrow one.
func TestSamplerFollowsFringes(t *testing.T) {
	s := AM15G()
	before := 0
	for _, thickness := range []float64{2e3, 4e3, 8e3, 16e3, 32e3} {
		out, err := Sample(s, 300, 1200, 3, 1e-6, func(l float64, v []float64) error {
			airy(2+0.0005i, thickness, l, v)
			return nil
		})
		if err != nil {
			t.Fatal(err)
		}
		want := denseIntegral(s, 300, 1200, 8, func(l float64, v []float64) { airy(2+0.0005i, thickness, l, v) })
		for j := range want {
			if e := math.Abs(out.Integral[j] - want[j]); e > out.Bound[j] {
				t.Errorf("%g nm, share %d: error %g, bound %g", thickness, j, e, out.Bound[j])
			}
		}
		t.Logf("%g µm: %d calls", thickness/1e3, out.Calls)
		if ratio := float64(out.Calls) / float64(before); before > 0 && (ratio > 2.5 || ratio < 1.5) {
			t.Errorf("%g nm: %d calls after %d for half the fringes", thickness, out.Calls, before)
		}
		before = out.Calls
	}
	smooth := func(l float64, v []float64) error { v[0] = 1 / (1 + l/1000); return nil }
	wide, narrow := must(Sample(s, 300, 4000, 1, 1e-6, smooth)), must(Sample(s, 600, 700, 1, 1e-6, smooth))
	if wide.Calls != narrow.Calls || wide.Calls > 65 {
		t.Errorf("a smooth share takes %d calls over a wide range, %d over a narrow one", wide.Calls, narrow.Calls)
	}
}

// TestSamplerIsExact for polynomials to degree 16, whatever the spectrum's rows:
// against the union-grid integral of a straight line, the integral of the spectrum
// for 1, and Gauss quadrature on each row for degree 16.
func TestSamplerIsExact(t *testing.T) {
	s := AM15G()
	for _, w := range []Weighting{Photons, Power} {
		p := Sampler{Weighting: w}
		var out Samples
		err := p.Sample(&out, s, 333.3, 1777.7, 3, func(l float64, v []float64) error {
			x := (l - 1000) / 1000
			v[0], v[1], v[2] = 1, (l-333.3)/2000, math.Pow(x, 16)
			return nil
		})
		if err != nil {
			t.Fatal(err)
		}
		in := must(Weights(nil, s, []float64{333.3, 1777.7}, w))
		near(t, "constant", out.Integral[0], in[0]+in[1], 1e-14)
		near(t, "line", out.Integral[1], in[1]*(1777.7-333.3)/2000, 1e-14)
		sum := 0.0
		for _, v := range out.Weights {
			sum += v
		}
		near(t, "sum of weights", sum, in[0]+in[1], 1e-14)
		if w == Photons {
			want := denseIntegral(s, 333.3, 1777.7, 4, func(l float64, v []float64) { v[0] = math.Pow((l-1000)/1000, 16) })
			near(t, "degree 16", out.Integral[2], want[0], 1e-12)
		}
		if out.Calls != 65 || len(out.Wavelength) != 65 || !slices.IsSorted(out.Wavelength) || out.Wavelength[0] != 333.3 || out.Wavelength[64] != 1777.7 {
			t.Errorf("%d calls, %d wavelengths from %g to %g nm", out.Calls, len(out.Wavelength), out.Wavelength[0], out.Wavelength[len(out.Wavelength)-1])
		}
	}
}

// TestSamplerEdges: a step and a kink, which no polynomial follows, are closed in
// by halving; the true integrals are exact ones on the union grid.
func TestSamplerEdges(t *testing.T) {
	s := AM15G()
	const edge = 777.777
	out := must(Sample(s, 300, 1200, 2, 1e-7, func(l float64, v []float64) error {
		v[0], v[1] = 0, math.Abs(l-edge)/1000
		if l <= edge {
			v[0] = 1
		}
		return nil
	}))
	step := must(Photocurrent(s, []float64{300, edge}, []float64{1, 1}))
	kink := must(Photocurrent(s, []float64{300, edge, 1200}, []float64{(edge - 300) / 1000, 0, (1200 - edge) / 1000}))
	for j, want := range []float64{step, kink} {
		if e := math.Abs(out.Integral[j] - want); e > out.Bound[j] || out.Bound[j] > 1e-7*47 {
			t.Errorf("share %d: error %g, bound %g", j, e, out.Bound[j])
		}
	}
	if out.Calls > 2500 {
		t.Errorf("%d calls for one edge", out.Calls)
	}
	// A line of 0.05 nm on nothing: MaxStep finds it, with the width that the doc
	// comment asks for.
	line := func(l float64, v []float64) error { v[0] = 1 / (1 + (l-712.34)*(l-712.34)/(0.05*0.05)); return nil }
	p := Sampler{MaxStep: 0.5}
	var found Samples
	if err := p.Sample(&found, s, 700, 720, 1, line); err != nil {
		t.Fatal(err)
	}
	want := denseIntegral(s, 700, 720, 200, func(l float64, v []float64) { _ = line(l, v) })
	if e := math.Abs(found.Integral[0] - want[0]); e > found.Bound[0] {
		t.Errorf("narrow line: error %g, bound %g", e, found.Bound[0])
	}
}

// TestSamplerUsedAgain: the same result as a fresh one, and no allocation.
func TestSamplerUsedAgain(t *testing.T) {
	s := AM15G()
	f := func(thickness float64) func(float64, []float64) error {
		return func(l float64, v []float64) error { airy(3+0.02i, thickness, l, v); return nil }
	}
	var p Sampler
	var out Samples
	for _, thickness := range []float64{5000, 100, 1000} {
		if err := p.Sample(&out, s, 300, 1200, 3, f(thickness)); err != nil {
			t.Fatal(err)
		}
		fresh := must(Sample(s, 300, 1200, 3, 0, f(thickness)))
		if d := cmp.Diff(fresh, out); d != "" {
			t.Errorf("%g nm: used again differs: %s", thickness, d)
		}
	}
	g := f(1000)
	if n := testing.AllocsPerRun(5, func() { _ = p.Sample(&out, s, 300, 1200, 3, g) }); n != 0 {
		t.Errorf("%g allocations", n)
	}
}

// TestSamplerLedger: samples with fringes become a ledger that closes, with the
// integrals and bounds of the samples.
func TestSamplerLedger(t *testing.T) {
	s := AM15G()
	out := must(Sample(s, 300, 1200, 3, 1e-6, func(l float64, v []float64) error { airy(2+0.01i, 3000, l, v); return nil }))
	l := must(out.Ledger(s, []string{"reflected", "through", "film"}))
	acc := must(l.Integrate())
	near(t, "total", acc.Total.Current, acc.Incident, 1e-13)
	for j, r := range acc.Rows {
		if r.Current != out.Integral[j] || r.Bound != out.Bound[j] {
			t.Errorf("row %+v, integral %g, bound %g", r, out.Integral[j], out.Bound[j])
		}
	}
	if _, err := out.Ledger(s, []string{"one"}); !errors.Is(err, ErrInput) {
		t.Errorf("one name for three shares: %v", err)
	}
}

func TestSamplerErrors(t *testing.T) {
	s := AM15G()
	one := func(l float64, v []float64) error { v[0] = 1; return nil }
	own := errors.New("own")
	rng := rand.New(rand.NewPCG(9, 9))
	for name, c := range map[string]struct {
		p        Sampler
		from, to float64
		n        int
		f        func(float64, []float64) error
		want     error
	}{
		"outside":    {Sampler{}, 200, 1200, 1, one, ErrRange},
		"beyond":     {Sampler{}, 300, 5000, 1, one, ErrRange},
		"empty":      {Sampler{}, 300, 300, 1, one, ErrInput},
		"narrow":     {Sampler{}, 300, math.Nextafter(300, 301), 1, one, ErrInput},
		"NaN":        {Sampler{}, math.NaN(), 400, 1, one, ErrInput},
		"no shares":  {Sampler{}, 300, 400, 0, one, ErrInput},
		"tolerance":  {Sampler{Tolerance: -1}, 300, 400, 1, one, ErrInput},
		"step":       {Sampler{MaxStep: math.NaN()}, 300, 400, 1, one, ErrInput},
		"tiny step":  {Sampler{MaxStep: 1e-300}, 300, 400, 1, one, ErrInput},
		"calls":      {Sampler{MaxCalls: -1}, 300, 400, 1, one, ErrInput},
		"few calls":  {Sampler{MaxCalls: 10}, 300, 400, 1, one, ErrSettle},
		"weighting":  {Sampler{Weighting: 5}, 300, 400, 1, one, ErrInput},
		"own error":  {Sampler{}, 300, 400, 1, func(l float64, v []float64) error { return own }, own},
		"NaN shares": {Sampler{}, 300, 400, 1, func(l float64, v []float64) error { v[0] = math.NaN(); return nil }, ErrInput},
		"noise":      {Sampler{MaxCalls: 3000}, 300, 400, 1, func(l float64, v []float64) error { v[0] = rng.Float64(); return nil }, ErrSettle},
		"too fine":   {Sampler{Tolerance: 1e-300}, 300, 400, 1, func(l float64, v []float64) error { v[0] = math.Sin(l); return nil }, ErrSettle},
	} {
		var out Samples
		err := c.p.Sample(&out, s, c.from, c.to, c.n, c.f)
		if !errors.Is(err, c.want) {
			t.Errorf("%s: %v, want %v", name, err, c.want)
		}
		if name == "noise" && (len(out.Bound) != 1 || !(out.Bound[0] > 1e-6) || out.Calls > 3000) {
			t.Errorf("noise: the result so far is %v after %d calls", out.Bound, out.Calls)
		}
	}
	dark := must(s.Scale(0))
	if _, err := Sample(dark, 300, 400, 1, 0, one); !errors.Is(err, ErrInput) {
		t.Errorf("dark: %v", err)
	}
}
