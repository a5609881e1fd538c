package lighttrap

import (
	"fmt"
	"math"
	"math/cmplx"
	"testing"
)

// fresnelTable is a table of a bare facet between indices n1 (outside) and n2,
// from the textbook form of Fresnel's equations with complex cosines.
func fresnelTable(t *testing.T, n1, n2 float64, intervals int) *FacetTable {
	t.Helper()
	side := func(from, to float64) FacetSide {
		s, err := TabulateFacet(FacetCosines(from, to, intervals), func(c float64) (FacetPoint, error) {
			a, b := complex(from, 0), complex(to, 0)
			c1 := complex(c, 0)
			c2 := cmplx.Sqrt(1 - (a/b)*(a/b)*(1-c1*c1))
			rs := (a*c1 - b*c2) / (a*c1 + b*c2)
			rp := (b*c1 - a*c2) / (b*c1 + a*c2)
			square := func(z complex128) float64 { return real(z)*real(z) + imag(z)*imag(z) }
			p := FacetPoint{RS: min(1, square(rs)), RP: min(1, square(rp)), Phase: cmplx.Phase(rs * cmplx.Conj(rp))}
			p.TS, p.TP = 1-p.RS, 1-p.RP
			if real(c2) < 1e-7 {
				p.RS, p.RP, p.TS, p.TP = 1, 1, 0, 0
			}
			return p, nil
		})
		if err != nil {
			t.Fatal(err)
		}
		return s
	}
	return &FacetTable{Outside: side(n1, n2), Inside: side(n2, n1)}
}

// TestTableOfBareFacets: a table filled with Fresnel's equations gives what the
// bare facet gives, to the error of interpolation between 400 angles.
func TestTableOfBareFacets(t *testing.T) {
	for _, texture := range []Texture{RandomPyramids, InvertedPyramids, Planar, CosinePower} {
		w := Wafer{Index: 3.5, Absorption: 20, Thickness: 100e3, Front: Face{Texture: texture}, Rear: opaque(CosinePower, 0.8)}
		w.Rear.Exponent = 2
		if texture.textured() {
			w.Front.Angle = PyramidAngle
		}
		if texture == CosinePower {
			w.Front.Exponent = 2
		}
		l, s := Light{Angle: 0.5, Polarization: P}, Settings{Rays: 1 << 14}
		bare := mustTrace(t, w, l, s)
		w.Front.Films = fresnelTable(t, 1, 3.5, 400)
		table := mustTrace(t, w, l, s)
		for _, c := range [][2]Estimate{{bare.Reflected, table.Reflected}, {bare.Absorbed, table.Absorbed}, {bare.Escaped, table.Escaped}} {
			within(t, texture.String(), c[1], c[0].Value, 3*c[0].Error+1e-5)
		}
		if dev := math.Abs(bare.Reflected.Value - table.Reflected.Value); dev > 1e-4 {
			t.Errorf("%v: reflected differs by %g", texture, dev)
		}
	}
}

// TestScatteringPath: mean paths of light that falls straight through a front of
// index 1 and is scattered once at the rear: 1 down and, from the density (m+1)
// c^m of the cosine, (m+1)/m up; specular light adds 1.
func TestScatteringPath(t *testing.T) {
	for _, c := range []struct {
		texture            Texture
		exponent, specular float64
		want               float64
	}{
		{Lambertian, 0, 0, 1 + 2},
		{Lambertian, 0, 0.3, 1 + 0.3*1 + 0.7*2},
		{CosinePower, 1, 0, 1 + 2},
		{CosinePower, 3, 0, 1 + 4.0/3},
		{CosinePower, 10, 0.5, 1 + 0.5*1 + 0.5*1.1},
	} {
		rear := opaque(c.texture, 1)
		rear.Exponent, rear.Specular = c.exponent, c.specular
		r := mustTrace(t, Wafer{Index: 1, Thickness: 1e3, Rear: rear}, Light{}, Settings{Rays: 1 << 14})
		within(t, fmt.Sprintf("%+v: path", c), r.Path, c.want, 1e-3)
	}
}

// TestDepthProfile: isotropic light that passes once leaves 2 E3(αz1) - 2 E3(αz2)
// between two depths; a planar wafer exp(-αz1) - exp(-αz2). Both hold for
// light from the rear, counted from there.
func TestDepthProfile(t *testing.T) {
	const thickness, x = 100e3, 1.5
	clear := UniformFacet(0, 0)
	depths := []float64{0, 100, 5e3, 40e3, 99e3, thickness}
	for _, texture := range []Texture{Lambertian, Planar} {
		for _, fromRear := range []bool{false, true} {
			w := Wafer{
				Index: 1, Absorption: x / (thickness * cmPerNM), Thickness: thickness,
				Front: Face{Texture: texture, Films: &clear}, Rear: Face{Texture: texture, Films: &clear},
			}
			r := mustTrace(t, w, Light{FromRear: fromRear}, Settings{Rays: 1 << 14, Depths: depths})
			for i, got := range r.Profile {
				a, b := depths[i]/thickness*x, depths[i+1]/thickness*x
				if fromRear {
					a, b = x-b, x-a
				}
				want := math.Exp(-a) - math.Exp(-b)
				if texture == Lambertian {
					// 2E3 itself and its complement, whichever keeps the digits.
					ta, la := DiffuseTransmittance(a)
					tb, lb := DiffuseTransmittance(b)
					if want = ta - tb; a < 0.1 {
						want = lb - la
					}
				}
				within(t, fmt.Sprintf("%v, from rear %v, cell %d", texture, fromRear, i), got, want, 1e-14)
			}
		}
	}
}

// TestSymmetries: what must not change the answer does not: lighting a wafer
// with equal faces from the other side, turning its only texture under
// unpolarised light of normal incidence, the mean of s and p, a lattice of the
// period of a fraction of the thickness that light no longer remembers.
func TestSymmetries(t *testing.T) {
	same := func(what string, a, b Result) {
		t.Helper()
		for i, p := range [][2]Estimate{{a.Reflected, b.Reflected}, {a.Escaped, b.Escaped}, {a.Absorbed, b.Absorbed}, {a.Transmitted, b.Transmitted}} {
			// 4 combined standard errors: some 30 figures are compared.
			if dev := math.Abs(p[0].Value - p[1].Value); !(dev <= 4*math.Hypot(p[0].Error, p[1].Error)+1e-12) {
				t.Errorf("%s: share %d: %v and %v", what, i, p[0], p[1])
			}
		}
	}
	s, other := Settings{Rays: 1 << 14, Seed: 1}, Settings{Rays: 1 << 14, Seed: 2}
	for _, texture := range []Texture{RegularPyramids, RandomPyramids, InvertedPyramids, Grooves} {
		f := pyramids(texture)
		w := Wafer{Index: 3.5, Absorption: 20, Thickness: 100e3, Front: f, Rear: f}
		l := Light{Angle: 0.4, Azimuth: 0.3}
		front := mustTrace(t, w, l, s)
		l.FromRear = true
		same(texture.String()+" from the rear", front, mustTrace(t, w, l, other))

		l = Light{Angle: 0.9, Azimuth: 1}
		mean := mustTrace(t, w, l, s)
		l.Polarization = S
		rs := mustTrace(t, w, l, other)
		l.Polarization = P
		rp := mustTrace(t, w, l, other)
		half := func(a, b Estimate) Estimate {
			return Estimate{Value: 0.5 * (a.Value + b.Value), Error: 0.5 * (a.Error + b.Error)}
		}
		same(texture.String()+" s and p", mean, Result{
			Reflected: half(rs.Reflected, rp.Reflected), Escaped: half(rs.Escaped, rp.Escaped),
			Absorbed: half(rs.Absorbed, rp.Absorbed), Transmitted: half(rs.Transmitted, rp.Transmitted),
		})
		if dev := math.Abs(rs.Reflected.Value - rp.Reflected.Value); dev < 0.01 {
			t.Errorf("%v: s and p reflect alike at 0.9 rad", texture)
		}

		w.Rear = opaque(Planar, 0.9)
		straight := mustTrace(t, w, Light{}, s)
		w.Front.Azimuth = 0.7
		same(texture.String()+" turned", straight, mustTrace(t, w, Light{}, other))
	}
}

// TestPublishedOrder: "a regular array of inverted pyramids just outperforms a
// random array of upright ones" (S. C. Baker-Finch, K. R. McIntosh, Prog.
// Photovolt. 19, 406 (2011), read as quoted in a later paper): bare silicon of
// 600 nm.
func TestPublishedOrder(t *testing.T) {
	reflectance := func(texture Texture) Estimate {
		w := Wafer{Index: 3.94, Thickness: 160e3, Front: pyramids(texture), Rear: opaque(Planar, 0)}
		return mustTrace(t, w, Light{}, Settings{Rays: 1 << 14}).Reflected
	}
	inverted, random := reflectance(InvertedPyramids), reflectance(RandomPyramids)
	if gain := random.Value - inverted.Value; !(gain > 0 && gain < 0.02) {
		t.Errorf("inverted %v, random upright %v", inverted, random)
	}
}

// TestFlatPyramids: facets of 1e-6 rad are a planar face.
func TestFlatPyramids(t *testing.T) {
	want := mustTrace(t, Wafer{Index: 3.5, Absorption: 20, Thickness: 100e3, Rear: opaque(Planar, 0.9)}, Light{Angle: 0.5}, Settings{})
	for _, texture := range []Texture{RegularPyramids, RandomPyramids, InvertedPyramids, Grooves} {
		w := Wafer{Index: 3.5, Absorption: 20, Thickness: 100e3, Front: Face{Texture: texture, Angle: 1e-6}, Rear: opaque(Planar, 0.9)}
		got := mustTrace(t, w, Light{Angle: 0.5}, Settings{})
		within(t, texture.String()+": reflected", got.Reflected, want.Reflected.Value, 1e-5)
		within(t, texture.String()+": absorbed", got.Absorbed, want.Absorbed.Value, 1e-5)
		within(t, texture.String()+": escaped", got.Escaped, want.Escaped.Value, 1e-5)
	}
}

// TestFacetTableHelpers: cosines and special cases as documented.
func TestFacetTableHelpers(t *testing.T) {
	for _, n := range [][2]float64{{1, 3.5}, {3.5, 1}, {1.5, 1.5}, {1, 1e-3}} {
		cos := FacetCosines(n[0], n[1], 7)
		if cos[0] != 0 || cos[len(cos)-1] != 1 {
			t.Errorf("%v: from %g to %g", n, cos[0], cos[len(cos)-1])
		}
		critical := false
		for i := 1; i < len(cos); i++ {
			if !(cos[i] > cos[i-1]) {
				t.Errorf("%v: cosine %d: %g after %g", n, i, cos[i], cos[i-1])
			}
			m := n[1] / n[0]
			critical = critical || m < 1 && math.Abs(cos[i]*cos[i]-(1-m*m)) < 1e-12
		}
		if n[1] < n[0] && !critical {
			t.Errorf("%v: no critical angle in %v", n, cos)
		}
	}
	if FacetCosines(0, 1, 5) != nil || FacetCosines(1, math.NaN(), 5) != nil || FacetCosines(1, 2, 0) != nil {
		t.Error("bad input gives cosines")
	}
	for _, c := range [][4]float64{{1, 1.5, 1, 1}, {1, 1.5, 0.5, math.Sqrt(1 - 0.75/2.25)}, {1.5, 1, 0.5, math.NaN()}, {1, 1, 2, math.NaN()}, {0, 1, 1, math.NaN()}} {
		if got := RefractedCosine(c[0], c[1], c[2]); !(math.Abs(got-c[3]) < 1e-15 || math.IsNaN(got) && math.IsNaN(c[3])) {
			t.Errorf("RefractedCosine(%g, %g, %g) = %g, want %g", c[0], c[1], c[2], got, c[3])
		}
	}
	for name, call := range map[string]func() (FacetPath, error){
		"planar":  func() (FacetPath, error) { return TraceFacets(Face{}, 3.5, Light{}, 0, 0) },
		"random":  func() (FacetPath, error) { return TraceFacets(pyramids(RandomPyramids), 3.5, Light{}, 0, 0) },
		"outside": func() (FacetPath, error) { return TraceFacets(pyramids(RegularPyramids), 3.5, Light{}, 0.6, 0) },
		"cone":    func() (FacetPath, error) { return TraceFacets(pyramids(RegularPyramids), 3.5, Light{Cone: 1}, 0, 0) },
		"index":   func() (FacetPath, error) { return TraceFacets(pyramids(RegularPyramids), math.NaN(), Light{}, 0, 0) },
	} {
		if _, err := call(); err == nil {
			t.Errorf("%s: no error", name)
		}
	}
}
