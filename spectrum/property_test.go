package spectrum

import (
	"math"
	"math/rand/v2"
	"slices"
	"testing"
)

// near fails unless got is within a relative tolerance of want.
func near(t *testing.T, what string, got, want, relative float64) {
	t.Helper()
	if dev := math.Abs(got - want); !(dev <= relative*math.Abs(want)) {
		t.Errorf("%s = %.17g, want %.17g, deviation %.2g", what, got, want, dev)
	}
}

func must[T any](v T, err error) T {
	if err != nil {
		panic(err)
	}
	return v
}

// randomGrid returns n ascending wavelengths from lo to hi, in uneven steps.
func randomGrid(rng *rand.Rand, n int, lo, hi float64) []float64 {
	g := make([]float64, n)
	for i := range g {
		g[i] = lo + (hi-lo)*rng.Float64()
	}
	slices.Sort(g)
	g[0], g[n-1] = lo, hi
	return slices.Compact(g)
}

func randomValues(rng *rand.Rand, n int) []float64 {
	v := make([]float64, n)
	for i := range v {
		v[i] = rng.Float64()
	}
	return v
}

// booleIntegral is the reference for piecewise linear factors: Boole's rule, exact
// to degree five, on each cell of the union of all grids, which is made by sorting.
func booleIntegral(from, to float64, photons bool, factors ...Curve) float64 {
	grid := []float64{from, to}
	for _, c := range factors {
		for _, l := range c.Wavelength {
			if l > from && l < to {
				grid = append(grid, l)
			}
		}
	}
	slices.Sort(grid)
	grid = slices.Compact(grid)
	sum := 0.0
	for i := 1; i < len(grid); i++ {
		a, h := grid[i-1], (grid[i]-grid[i-1])/4
		for k, w := range []float64{7, 32, 12, 32, 7} {
			l := a + float64(k)*h
			if k == 4 {
				l = grid[i]
			}
			v := w
			for _, c := range factors {
				v *= interpolate(c.Wavelength, c.Value, l)
			}
			if photons {
				v *= l * currentPerIrradiance
			}
			sum += v * 2 * h / 45
		}
	}
	return sum
}

// TestUnionGridIsExact compares with Boole's rule on the explicit union of the
// grids, for random grids.
func TestUnionGridIsExact(t *testing.T) {
	rng := rand.New(rand.NewPCG(3, 4))
	for range 300 {
		lo, hi := 300+100*rng.Float64(), 900+300*rng.Float64()
		sg := randomGrid(rng, 2+rng.IntN(60), 280, 1300)
		s := Spectrum{Wavelength: sg, Irradiance: randomValues(rng, len(sg))}
		a := Curve{Wavelength: randomGrid(rng, 2+rng.IntN(60), lo, hi)}
		a.Value = randomValues(rng, len(a.Wavelength))
		b := Curve{Wavelength: randomGrid(rng, 2+rng.IntN(60), 290, 1250)}
		b.Value = randomValues(rng, len(b.Wavelength))
		e := Curve{Wavelength: sg, Value: s.Irradiance}
		near(t, "photocurrent", must(Photocurrent(s, a.Wavelength, a.Value)), booleIntegral(lo, hi, true, e, a), 1e-13)
		near(t, "power", must(AbsorbedPower(s, a.Wavelength, a.Value)), booleIntegral(lo, hi, false, e, a), 1e-13)
		near(t, "product", must(Product(s, a, b, Photons)), booleIntegral(lo, hi, true, e, a, b), 1e-13)
		near(t, "product of power", must(Product(s, a, b, Power)), booleIntegral(lo, hi, false, e, a, b), 1e-13)
		near(t, "mean", must(Mean(s, a.Wavelength, a.Value, Photons)), booleIntegral(lo, hi, true, e, a)/booleIntegral(lo, hi, true, e), 1e-13)
		w := must(ProductWeights(nil, s, b, a.Wavelength, Photons))
		near(t, "dot of weights", dot(w, a.Value), booleIntegral(lo, hi, true, e, a, b), 1e-13)
	}
}

// TestClosedForms: straight lines through 0 make the integrals powers of the
// wavelength, whatever the grids.
func TestClosedForms(t *testing.T) {
	s := Spectrum{Wavelength: []float64{100, 130, 777, 1000}, Irradiance: []float64{100, 130, 777, 1000}}
	a := Curve{Wavelength: []float64{200, 431, 900}, Value: []float64{200, 431, 900}}
	b := Curve{Wavelength: []float64{150, 432, 950}, Value: []float64{150, 432, 950}}
	power := func(n float64) float64 { return (math.Pow(900, n) - math.Pow(200, n)) / n }
	near(t, "∫E A", must(AbsorbedPower(s, a.Wavelength, a.Value)), power(3), 1e-14)
	near(t, "∫E λ A", must(Photocurrent(s, a.Wavelength, a.Value)), power(4)*currentPerIrradiance, 1e-14)
	near(t, "∫E A B", must(Product(s, a, b, Power)), power(4), 1e-14)
	near(t, "∫E λ A B", must(Product(s, a, b, Photons)), power(5)*currentPerIrradiance, 1e-14)
	near(t, "∫E", must(s.Total()), (1000*1000-100*100)/2, 1e-14)
	near(t, "∫E λ photons", must(s.PhotonTotal()), (1e9-1e6)/3*photonsPerIrradiance, 1e-14)
	c := must(Cumulative(nil, s, a.Wavelength, a.Value, Power))
	near(t, "cumulative", c[1], (math.Pow(431, 3)-math.Pow(200, 3))/3, 1e-14)
	near(t, "cumulative at the end", c[2], power(3), 1e-14)
	if c[0] != 0 {
		t.Errorf("cumulative begins with %g", c[0])
	}
}

// TestWeightsAreDerivatives: the integral is linear in the share, so a unit share
// at one wavelength gives the weight, and all weights add up to the whole.
func TestWeightsAreDerivatives(t *testing.T) {
	s := AM15G()
	grid := []float64{300, 333.3, 400, 850, 1107.002, 1200}
	w := must(Weights(nil, s, grid, Photons))
	sum := 0.0
	for i := range grid {
		unit := make([]float64, len(grid))
		unit[i] = 1
		near(t, "unit share", must(Photocurrent(s, grid, unit)), w[i], 1e-15)
		if !(w[i] > 0) {
			t.Errorf("weight %d is %g", i, w[i])
		}
		sum += w[i]
	}
	near(t, "sum of weights", sum, must(Photocurrent(s, []float64{300, 1200}, []float64{1, 1})), 1e-14)
}

// TestResampleConserves: the irradiance of every cell stays, nothing is negative, a
// straight line comes back.
func TestResampleConserves(t *testing.T) {
	rng := rand.New(rand.NewPCG(5, 6))
	spectra := []Spectrum{AM15G(), AM15D(), AM0()}
	for range 20 {
		g := randomGrid(rng, 40, 280, 4000)
		v := randomValues(rng, len(g))
		for i := range v { // deep lines between high values
			if rng.IntN(2) == 0 {
				v[i] = 0
			}
		}
		spectra = append(spectra, Spectrum{Wavelength: g, Irradiance: v})
	}
	for i, s := range spectra {
		grid := randomGrid(rng, 3+rng.IntN(200), 300, 3900)
		out := must(s.Resample(grid))
		before, after := must(CellIntegrals(nil, s, grid, Power)), must(CellIntegrals(nil, out, grid, Power))
		for k := range before {
			// Rounding: sums over up to hundreds of rows in a cell.
			if math.Abs(before[k]-after[k]) > 1e-14*before[k]+1e-15*(grid[k+1]-grid[k]) {
				t.Fatalf("spectrum %d, cell %d: %.17g before, %.17g after", i, k, before[k], after[k])
			}
		}
		near(t, "total", must(out.Total()), must(must(s.Slice(300, 3900)).Total()), 1e-13)
	}
	line := Spectrum{Wavelength: []float64{300, 500, 900}, Irradiance: []float64{0, 1, 3}}
	out := must(line.Resample([]float64{300, 410, 650, 900}))
	for i, l := range out.Wavelength {
		if want := (l - 300) / 200; math.Abs(out.Irradiance[i]-want) > 1e-14 {
			t.Errorf("straight line at %g nm: %g, want %g", l, out.Irradiance[i], want)
		}
	}
}

// TestSliceAddsUp: two slices hold the whole, and the ends are exact.
func TestSliceAddsUp(t *testing.T) {
	s := AM15G()
	a, b := must(s.Slice(280, 766.66)), must(s.Slice(766.66, 4000))
	near(t, "irradiance", must(a.Total())+must(b.Total()), must(s.Total()), 1e-14)
	near(t, "photons", must(a.PhotonTotal())+must(b.PhotonTotal()), must(s.PhotonTotal()), 1e-14)
	if at := must(s.At(766.66)); a.Irradiance[len(a.Irradiance)-1] != at || b.Irradiance[0] != at {
		t.Errorf("the slices meet at %g and %g, the spectrum is %g there", a.Irradiance[len(a.Irradiance)-1], b.Irradiance[0], at)
	}
	near(t, "scaled", must(must(s.ScaleTo(1000)).Total()), 1000, 1e-14)
}

// TestCopies: what a function returns is the caller's; a change of it changes
// neither the source nor the next copy.
func TestCopies(t *testing.T) {
	a := AM15G()
	a.Irradiance[5] = 77
	if AM15G().Irradiance[5] == 77 {
		t.Error("AM15G hands out shared memory")
	}
	b := must(a.Scale(1))
	b.Irradiance[5] = 0
	if a.Irradiance[5] != 77 {
		t.Error("Scale changes its source")
	}
}

// TestFlux: flux and irradiance differ by the photon energy.
func TestFlux(t *testing.T) {
	s := AM15G()
	f := must(s.PhotonFlux(nil))
	for i, l := range s.Wavelength {
		joule := WavelengthOfEnergy / l * charge
		near(t, "irradiance from flux", f[i]*cm2PerM2*joule, s.Irradiance[i], 1e-14)
	}
	v := must(s.Values(nil, []float64{1000, 300.25, 4000}))
	if v[0] != must(s.At(1000)) || v[1] != must(s.At(300.25)) || v[2] != must(s.At(4000)) {
		t.Errorf("Values and At differ: %v", v)
	}
}

// TestMismatch: 1 for proportional spectra and for proportional responses
// (IEC 60904-7); a responsivity in A/W and its quantum efficiency agree where
// both are the same function.
func TestMismatch(t *testing.T) {
	global, direct := AM15G(), AM15D()
	a := Curve{Name: "a", Wavelength: []float64{350, 700, 1100}, Value: []float64{0.2, 0.9, 0.1}}
	twice := Curve{Name: "b", Wavelength: a.Wavelength, Value: []float64{0.4, 1.8, 0.2}}
	c := Curve{Name: "c", Wavelength: []float64{400, 800}, Value: []float64{0.9, 0.9}}
	near(t, "proportional responses", must(Mismatch(global, direct, a, twice, Photons)), 1, 1e-14)
	near(t, "proportional spectra", must(Mismatch(global, must(global.Scale(0.7)), a, c, Photons)), 1, 1e-14)
	inverse := must(Mismatch(direct, global, a, c, Photons)) * must(Mismatch(global, direct, a, c, Photons))
	near(t, "spectra exchanged", inverse, 1, 1e-14)
	responsivity := Curve{Wavelength: c.Wavelength, Value: []float64{Responsivity(400, 0.9), Responsivity(800, 0.9)}}
	near(t, "responsivity", must(AbsorbedPower(global, responsivity.Wavelength, responsivity.Value))*milliPerOne/cm2PerM2,
		must(Photocurrent(global, c.Wavelength, c.Value)), 1e-14)
	near(t, "there and back", QuantumEfficiency(555, Responsivity(555, 0.7)), 0.7, 1e-15)
}
