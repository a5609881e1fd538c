package absorb

import (
	"math"
	"math/rand/v2"

	"gonum.org/v1/gonum/integrate/quad"
)

// newRand returns the generator of all random tests; the seed is fixed, so that a
// failure names its case by number.
func newRand() *rand.Rand { return rand.New(rand.NewPCG(20, 26)) }

// logUniform draws from lo..hi with equal weight for each decade.
func logUniform(r *rand.Rand, lo, hi float64) float64 {
	return lo * math.Exp(r.Float64()*math.Log(hi/lo))
}

// randomProfile draws a profile with an absorptance below 1 whose density is not
// negative: a beam down, a beam up and at most their full interference.
func randomProfile(r *rand.Rand) Profile {
	p := Profile{Thickness: logUniform(r, 1, 3e5)}
	p.Decay = logUniform(r, 1e-6, 30) / p.Thickness
	f, b := r.Float64(), r.Float64()
	in := p.Decay / -math.Expm1(-p.Decay*p.Thickness) * r.Float64() / 4
	p.Forward, p.Backward = f*in, b*in
	if r.IntN(2) == 0 {
		p.Wavenumber = logUniform(r, 1e-3, 60) / p.Thickness
		both := 2 * math.Sqrt(p.Forward*p.Backward) * math.Exp(-0.5*p.Decay*p.Thickness)
		phase := r.Float64() * 2 * math.Pi
		p.Cos, p.Sin = both*math.Cos(phase), both*math.Sin(phase)
	}
	return p
}

// randomMesh draws the boundaries of n cells between from and to, from even to
// widths over six decades.
func randomMesh(r *rand.Rand, n int, from, to float64) []float64 {
	spread := logUniform(r, 1, 1e6)
	mesh := make([]float64, n+1)
	sum := 0.0
	for i := 1; i <= n; i++ {
		sum += logUniform(r, 1, spread)
		mesh[i] = sum
	}
	for i := range mesh {
		mesh[i] = from + (to-from)*(mesh[i]/sum)
	}
	return mesh
}

// quadrature integrates f over a..b by Gauss-Legendre rules on pieces.
func quadrature(f func(float64) float64, a, b float64, pieces int) float64 {
	sum := 0.0
	for i := range pieces {
		lo, hi := a+(b-a)*float64(i)/float64(pieces), a+(b-a)*float64(i+1)/float64(pieces)
		sum += quad.Fixed(f, lo, hi, 40, quad.Legendre{}, 1)
	}
	return sum
}

// relative returns |got-want|/|want|.
func relative(got, want float64) float64 {
	if got == want {
		return 0
	}
	return math.Abs(got-want) / math.Abs(want)
}
