package absorb

import (
	"errors"
	"math"
	"testing"

	"gonum.org/v1/gonum/integrate"
)

// TestHistogram: every photon of the histogram is found in the new mesh, cell by
// cell where the boundaries agree, and to the overlap where they do not.
func TestHistogram(t *testing.T) {
	r := newRand()
	var g Generator
	for i := range 300 {
		d := logUniform(r, 10, 1e6)
		edges := randomMesh(r, 1+r.IntN(60), 0, d)
		n, cells := 1+r.IntN(5), len(edges)-1
		photons, shares := make([]float64, n), make([]float64, n*cells)
		total := 0.0
		for w := range photons {
			photons[w] = logUniform(r, 1e10, 1e18)
			for c := range cells {
				shares[w*cells+c] = r.Float64() / float64(cells)
				total += photons[w] * shares[w*cells+c]
			}
		}
		mesh := randomMesh(r, 1+r.IntN(200), 0, d)
		mesh[len(mesh)-1] = edges[cells]
		rate, err := g.Histogram(nil, mesh, photons, edges, shares)
		if err != nil {
			t.Fatalf("case %d: %v", i, err)
		}
		sum := 0.0
		for c, v := range rate {
			sum += v * (mesh[c+1] - mesh[c]) * cmPerNM
		}
		if relative(sum, total) > 1e-13 {
			t.Errorf("case %d: %d cells to %d: %.17g photons of %.17g", i, cells, len(rate), sum, total)
		}
		same, err := g.Histogram(nil, edges, photons, edges, shares)
		if err != nil {
			t.Fatalf("case %d: %v", i, err)
		}
		for c, v := range same {
			want := 0.0
			for w := range photons {
				want += photons[w] * shares[w*cells+c]
			}
			if got := v * (edges[c+1] - edges[c]) * cmPerNM; relative(got, want) > 1e-14 {
				t.Errorf("case %d: cell %d holds %.17g photons, want %.17g", i, c, got, want)
			}
		}
	}
	// A part of the histogram, and cells across its boundaries.
	rate, err := g.Histogram(nil, []float64{5, 15, 18, 30}, []float64{1e17}, []float64{0, 10, 20, 40}, []float64{0.4, 0.2, 0.1})
	if err != nil {
		t.Fatal(err)
	}
	for c, want := range []float64{(0.2 + 0.1) / 10 * 1e24, 0.02 * 1e24, (0.04 + 0.05) / 12 * 1e24} {
		if relative(rate[c], want) > 1e-15 {
			t.Errorf("cell %d: %g, want %g", c, rate[c], want)
		}
	}
}

// TestHistogramFollowsProfile: a fine histogram of a profile gives the generation of
// the profile, exactly where the meshes agree.
func TestHistogramFollowsProfile(t *testing.T) {
	p, err := Slab{Absorption: 300, Thickness: 160e3, FrontInternal: 0.9, RearReflectance: 0.95}.Profile()
	if err != nil {
		t.Fatal(err)
	}
	edges := randomMesh(newRand(), 80, 0, p.Thickness)
	shares := make([]float64, 80)
	for c := range shares {
		shares[c] = p.Between(edges[c], min(edges[c+1], p.Thickness))
	}
	var g Generator
	got, err := g.Histogram(nil, edges, []float64{1e17}, edges, shares)
	if err != nil {
		t.Fatal(err)
	}
	want, err := g.Profiles(nil, edges, []float64{1e17}, []Profile{p})
	if err != nil {
		t.Fatal(err)
	}
	for c := range got {
		if relative(got[c], want[c]) > 1e-13 {
			t.Errorf("cell %d: %.17g, from the profile %.17g", c, got[c], want[c])
		}
	}
}

func TestHistogramErrors(t *testing.T) {
	mesh, photons := []float64{0, 5, 10}, []float64{1e17}
	edges, shares := []float64{0, 4, 10}, []float64{0.3, 0.2}
	for name, c := range map[string]struct {
		mesh, photons, edges, shares []float64
		want                         error
	}{
		"mesh too deep":    {[]float64{0, 11}, photons, edges, shares, ErrRange},
		"mesh too high":    {[]float64{0, 5}, photons, []float64{1, 4, 10}, shares, ErrRange},
		"edges descending": {mesh, photons, []float64{0, 10, 4}, shares, ErrInput},
		"shares missing":   {mesh, photons, edges, shares[1:], ErrInput},
		"negative share":   {mesh, photons, edges, []float64{-0.1, 0.2}, ErrInput},
		"shares above 1":   {mesh, photons, edges, []float64{0.9, 0.2}, ErrInput},
		"NaN photons":      {mesh, []float64{math.NaN()}, edges, shares, ErrInput},
		"mesh descending":  {[]float64{5, 0}, photons, edges, shares, ErrInput},
		"rate overflows":   {[]float64{0, 1e-300}, []float64{1e308}, []float64{0, 1e-200}, []float64{1}, ErrInput},
	} {
		var g Generator
		if _, err := g.Histogram(nil, c.mesh, c.photons, c.edges, c.shares); !errors.Is(err, c.want) {
			t.Errorf("%s: %v, want %v", name, err, c.want)
		}
	}
}

// TestTrapezoidPhotons compares with the trapezoid rule of gonum.
func TestTrapezoidPhotons(t *testing.T) {
	r := newRand()
	for i := range 100 {
		wavelength := randomMesh(r, 1+r.IntN(100), 300, 1200)
		flux, share := make([]float64, len(wavelength)), make([]float64, len(wavelength))
		product := make([]float64, len(wavelength))
		for w := range flux {
			flux[w], share[w] = logUniform(r, 1e12, 1e15), r.Float64()
			product[w] = flux[w] * share[w]
		}
		photons, err := TrapezoidPhotons(nil, wavelength, flux)
		if err != nil {
			t.Fatal(err)
		}
		sum := 0.0
		for w := range photons {
			sum += photons[w] * share[w]
		}
		if want := integrate.Trapezoidal(wavelength, product); relative(sum, want) > 1e-13 {
			t.Errorf("case %d: %.17g photons, want %.17g", i, sum, want)
		}
	}
	for name, v := range map[string][2][]float64{
		"one wavelength": {{500}, {1}},
		"descending":     {{500, 400}, {1, 1}},
		"lengths":        {{400, 500}, {1}},
		"negative flux":  {{400, 500}, {1, -1}},
		"overflow":       {{400, 500}, {1, 1e308}},
	} {
		if _, err := TrapezoidPhotons(nil, v[0], v[1]); !errors.Is(err, ErrInput) {
			t.Errorf("%s: %v", name, err)
		}
	}
	if _, err := TrapezoidPhotons(make([]float64, 3), []float64{400, 500}, []float64{1, 1}); !errors.Is(err, ErrInput) {
		t.Errorf("dst too long: %v", err)
	}
}
