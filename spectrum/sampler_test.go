package spectrum

import (
	"flag"
	"math"
	"math/cmplx"
	"math/rand/v2"
	"testing"
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

// denseIntegral integrates with two-hundred times more points than needed: Gauss
// quadrature on each row of the spectrum and each twentieth of it that a fringe
// may need.
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
