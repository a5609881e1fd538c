package lighttrap

import (
	"fmt"
	"math"
	"testing"
)

const siliconIndex = 3.5

// total adds up all shares of a result.
func total(r *Result) float64 {
	sum := 0.0
	for _, e := range []Estimate{r.Reflected, r.Escaped, r.Transmitted, r.Absorbed, r.FreeCarriers, r.Unfinished} {
		sum += e.Value
	}
	for _, list := range [][]Estimate{r.FrontFilms, r.RearFilms, r.Covers} {
		for _, e := range list {
			sum += e.Value
		}
	}
	return sum
}

// within reports a deviation of more than 3 standard errors and a margin.
func within(t *testing.T, what string, got Estimate, want, margin float64) {
	t.Helper()
	if dev := math.Abs(got.Value - want); !(dev <= 3*got.Error+margin) {
		t.Errorf("%s = %.9g with standard error %.2g, want %.9g: off by %.2g", what, got.Value, got.Error, want, dev)
	}
}

func mustTrace(t testing.TB, w Wafer, l Light, s Settings) Result {
	t.Helper()
	r, err := Trace(w, l, s)
	if err != nil {
		t.Fatal(err)
	}
	if dev := total(&r) - 1; !(math.Abs(dev) <= 1e-12) {
		t.Errorf("%+v %+v: shares miss 1 by %g", w, l, dev)
	}
	return r
}

// opaque is a rear with a reflectance that does not depend on the angle.
func opaque(texture Texture, reflectance float64) Face {
	films := UniformFacet(0, reflectance)
	return Face{Texture: texture, Opaque: true, Films: &films}
}

func pyramids(texture Texture) Face { return Face{Texture: texture, Angle: PyramidAngle} }

// TestLambertianFaces: the balance of fluxes between Lambertian faces, A =
// (1-t)(1+Rb t)/(1-Rf Rb t²) with t = 2 E3(αW), over αW and the rear reflectance.
// Source: form of Goetzberger 1981 and Green 2002 from memory, content derived;
// its figures are checked with 12 digits in testdata/handbook.
func TestLambertianFaces(t *testing.T) {
	const thickness = 160e3
	for _, x := range []float64{0, 1e-4, 1e-3, 1e-2, 0.1, 1, 10} {
		for _, rb := range []float64{0, 0.5, 0.95, 1} {
			for _, rext := range []float64{0, 0.1} {
				rf := 1 - 1/(siliconIndex*siliconIndex)
				slab := Slab{
					Absorption: 0.8 * x / (thickness * cmPerNM), FreeCarriers: 0.2 * x / (thickness * cmPerNM), Thickness: thickness,
					FrontReflectance: rext, FrontInternal: rf, RearReflectance: rb,
				}
				want, err := slab.Lambertian()
				if err != nil {
					t.Fatal(err)
				}
				films := UniformFacet(rext, rf)
				w := Wafer{
					Index: siliconIndex, Absorption: slab.Absorption, FreeCarriers: slab.FreeCarriers, Thickness: thickness,
					Front: Face{Texture: Lambertian, Films: &films}, Rear: opaque(Lambertian, rb),
				}
				got := mustTrace(t, w, Light{}, Settings{Rays: 4096, Seed: 11})
				name := fmt.Sprintf("αW = %g, Rb = %g: ", x, rb)
				rare := 1e-14
				if x == 10 {
					// Of 10^12 rays about 4 would escape: 4096 cannot meet one.
					rare = 5e-12
				}
				within(t, name+"absorbed", got.Absorbed, want.Absorbed, rare)
				within(t, name+"free carriers", got.FreeCarriers, want.FreeCarriers, rare)
				within(t, name+"escaped", got.Escaped, want.Escaped, rare)
				within(t, name+"rear", got.Transmitted, want.RearLoss, rare)
				within(t, name+"reflected", got.Reflected, want.Reflected, rare)
				if x == 0 {
					within(t, name+"path", got.Path, want.PathFactor, 1e-12)
				}
			}
		}
	}
}

// TestPlanarFaces: one ray of a planar wafer is exact: the closed form of the
// slab for each polarisation, with Fresnel's reflectances written out here.
func TestPlanarFaces(t *testing.T) {
	const thickness, n = 160e3, siliconIndex
	for _, angle := range []float64{0, 0.6, 1.2, 1.5} {
		c := math.Cos(angle)
		c2 := math.Sqrt(1 - math.Pow(math.Sin(angle)/n, 2))
		rs := math.Pow((c-n*c2)/(c+n*c2), 2)
		rp := math.Pow((n*c-c2)/(n*c+c2), 2)
		for _, x := range []float64{0, 1e-3, 0.3, 20} {
			for p, r := range map[Polarization][]float64{S: {rs}, P: {rp}, Unpolarized: {rs, rp}} {
				want := Balance{}
				for _, r := range r {
					slab := Slab{Absorption: x / (thickness * cmPerNM), Thickness: thickness, FrontReflectance: r, FrontInternal: r, RearReflectance: 0.9}
					b, err := slab.Planar(c2)
					if err != nil {
						t.Fatal(err)
					}
					want.Reflected += b.Reflected
					want.Absorbed += b.Absorbed
					want.Escaped += b.Escaped
					want.RearLoss += b.RearLoss
					want.PathFactor += b.PathFactor * (1 - r)
				}
				f := 1 / float64(len(r))
				w := Wafer{Index: n, Absorption: x / (thickness * cmPerNM), Thickness: thickness, Rear: opaque(Planar, 0.9)}
				got := mustTrace(t, w, Light{Angle: angle, Polarization: p}, Settings{})
				if got.Rays != 1 {
					t.Errorf("%d rays, want 1", got.Rays)
				}
				const exact = 1e-14
				within(t, "reflected", got.Reflected, f*want.Reflected, exact)
				within(t, "absorbed", got.Absorbed, f*want.Absorbed, exact)
				within(t, "escaped", got.Escaped, f*want.Escaped, exact)
				within(t, "rear", got.Transmitted, f*want.RearLoss, exact)
				if x == 0 {
					within(t, "path", Estimate{Value: got.Path.Value * got.Entered.Value}, f*want.PathFactor, 1e-13)
				}
			}
		}
	}
}

// TestBarePyramids: shares of light with two and three bounces, and the
// reflectance of a bare array with a real index, polarisation carried along.
// Source: exact vectors and fitted fractions (8/9, 1/9; 16/27, 11/27),
// reflectances from an independent tracer with 2.4 million rays: computed.
func TestBarePyramids(t *testing.T) {
	for _, c := range []struct {
		texture     Texture
		n, want     float64
		digit       float64
		two, digit2 float64
	}{
		{RegularPyramids, 3.5, 0.09740755041, 5e-12, 8.0 / 9, 0},
		{RegularPyramids, 4, 0.1287065269, 5e-11, 8.0 / 9, 0},
		{RegularPyramids, 1.5, 0.002981264046, 5e-13, 8.0 / 9, 0},
		{InvertedPyramids, 3.5, 0.0740498850, 5e-11, 16.0 / 27, 0},
	} {
		w := Wafer{Index: c.n, Thickness: 160e3, Front: pyramids(c.texture), Rear: opaque(Planar, 0)}
		r := mustTrace(t, w, Light{}, Settings{Rays: 1 << 16, Repetitions: 32, Seed: 3})
		name := fmt.Sprintf("%v, n = %g: ", c.texture, c.n)
		within(t, name+"reflectance", r.Reflected, c.want, c.digit)
		within(t, name+"two bounces", r.Bounces[2], c.two, 0)
		within(t, name+"three bounces", r.Bounces[3], 1-c.two, 0)
		if r.Reflected.Error > 1e-4 || r.Bounces[1].Value != 0 || r.Bounces[4].Value != 0 {
			t.Errorf("%sreflected %v, bounces %v", name, r.Reflected, r.Bounces)
		}
	}
}

// TestIsotropicPath: isotropic light that reaches all directions in a lossless
// wafer has there n² times its radiance outside, so that its mean path is 4n²
// thicknesses with an ideal mirror behind it, whatever the textures and their
// reflectances (E. Yablonovitch, J. Opt. Soc. Am. 72, 899 (1982)). In a planar
// wafer it only reaches the escape cone: 4n²(1-cosθc). This proves that facets,
// cells and Fresnel's equations treat all ways through the texture alike.
func TestIsotropicPath(t *testing.T) {
	const n = siliconIndex
	mirror := opaque(Planar, 1)
	grooves := opaque(Grooves, 1)
	grooves.Angle, grooves.Azimuth = 0.7, math.Pi/2
	limit := PathLimit(n)
	cone := limit * (1 - math.Sqrt(1-1/(n*n)))
	steep := pyramids(RegularPyramids)
	steep.Angle, steep.Azimuth = 1.1, 0.3
	lattice := pyramids(RegularPyramids)
	lattice.Period = 9e3
	rearLattice := opaque(RegularPyramids, 1)
	rearLattice.Angle, rearLattice.Period = 0.8, 14e3
	for _, c := range []struct {
		front, rear Face
		want        float64
	}{
		{Face{}, mirror, cone},
		{lattice, mirror, limit},
		{lattice, rearLattice, limit},
		{Face{}, rearLattice, limit},
		{pyramids(RegularPyramids), mirror, limit},
		{steep, mirror, limit},
		{pyramids(RandomPyramids), mirror, limit},
		{pyramids(InvertedPyramids), mirror, limit},
		{pyramids(Grooves), grooves, limit},
		{Face{Texture: Lambertian}, mirror, limit},
		{Face{}, opaque(Lambertian, 1), limit},
	} {
		w := Wafer{Index: n, Thickness: 160e3, Front: c.front, Rear: c.rear}
		r := mustTrace(t, w, Light{Cone: math.Pi / 2}, Settings{Rays: 4096, Seed: 5})
		path := Estimate{Value: r.Path.Value * r.Entered.Value, Error: r.Path.Error*r.Entered.Value + r.Path.Value*r.Entered.Error}
		within(t, fmt.Sprintf("%v on %v: path", c.front.Texture, c.rear.Texture), path, c.want, 1e-3)
	}
	w := Wafer{Index: n, Thickness: 160e3, Front: pyramids(RandomPyramids), Rear: mirror, Covers: []Cover{{Index: 1.52, Thickness: 3e6}, {Index: 1.48, Thickness: 4e5}}}
	r := mustTrace(t, w, Light{Cone: math.Pi / 2}, Settings{Rays: 4096, Seed: 5})
	within(t, "under covers: path", Estimate{Value: r.Path.Value * r.Entered.Value, Error: r.Path.Error*r.Entered.Value + r.Path.Value*r.Entered.Error}, limit, 1e-3)
}
