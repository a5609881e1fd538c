package absorb

import (
	"errors"
	"math"
	"testing"
)

// TestProfileIntegral compares integrals between two depths with quadrature of
// the density, and their sums with the whole.
func TestProfileIntegral(t *testing.T) {
	r := newRand()
	for i := range 2000 {
		p := randomProfile(r)
		z1, z2 := r.Float64()*p.Thickness, r.Float64()*p.Thickness
		if z1 > z2 {
			z1, z2 = z2, z1
		}
		got := p.Between(z1, z2)
		// The beams alone set the scale: at a node they cancel the interference.
		beams := p
		beams.Cos, beams.Sin = 0, 0
		want := quadrature(p.At, z1, z2, 16)
		if d := math.Abs(got - want); !(d <= 1e-13*beams.Between(z1, z2)) {
			t.Errorf("case %d: %+v from %g to %g: %.17g, quadrature %.17g", i, p, z1, z2, got, want)
		}
		if d := p.Between(0, z1) + got + p.Between(z2, p.Thickness) - p.Absorptance(); !(math.Abs(d) <= 1e-13*beams.Absorptance()) {
			t.Errorf("case %d: %+v: parts miss the absorptance by %g", i, p, d)
		}
	}
}

// TestProfileLimits: vanishing decay and wavenumber leave constants, and a thin
// slice its width times the density.
func TestProfileLimits(t *testing.T) {
	flat := Profile{Thickness: 100, Forward: 1e-3, Backward: 2e-3, Cos: 5e-4, Sin: 7e-4}
	if got := flat.Absorptance(); relative(got, 0.35) > 1e-15 {
		t.Errorf("constant density: %g, want 0.35", got)
	}
	p := Profile{Thickness: 300, Decay: 0.02, Wavenumber: 0.1, Forward: 5e-3, Backward: 1e-3, Cos: 1e-4, Sin: -2e-4}
	z := 120.0
	end := math.Nextafter(z, 121)
	if got, want := p.Between(z, end)/(end-z), p.At(z); relative(got, want) > 1e-13 {
		t.Errorf("thin slice: %g, density %g", got, want)
	}
	opaque := Profile{Thickness: 1e9, Decay: 1, Forward: 1}
	if got := opaque.Absorptance(); got != 1 {
		t.Errorf("opaque film: %g, want 1", got)
	}
	weak := Profile{Thickness: 1e-3, Decay: 1e-15, Forward: 1e-15}
	if got := weak.Absorptance(); relative(got, 1e-18) > 1e-15 {
		t.Errorf("weak absorption: %g, want 1e-18", got)
	}
}

func TestProfileReversed(t *testing.T) {
	r := newRand()
	for i := range 200 {
		p := randomProfile(r)
		z := r.Float64() * p.Thickness
		got, want := p.Reversed().At(p.Thickness-z), p.At(z)
		if !(math.Abs(got-want) <= 1e-12*(p.Forward+p.Backward)) {
			t.Errorf("case %d: %+v at %g: %g, want %g", i, p, z, got, want)
		}
	}
}

// TestGenerationCells compares every cell with the exact integral, and the sum
// over the cells with the absorbed flux, on even and very uneven meshes, inside
// and over the whole of films.
func TestGenerationCells(t *testing.T) {
	r := newRand()
	var g Generator
	var dst []float64
	for i := range 300 {
		p := randomProfile(r)
		from, to := 0.0, p.Thickness
		if i%3 == 1 {
			from, to = 0.1*p.Thickness, 0.7*p.Thickness
		}
		mesh := randomMesh(r, 1+r.IntN(400), from, to)
		photons := []float64{logUniform(r, 1, 1e18)}
		if len(dst) != len(mesh)-1 {
			dst = nil
		}
		dst, err := g.Profiles(dst, mesh, photons, []Profile{p})
		if err != nil {
			t.Fatal(err)
		}
		beams := p
		beams.Cos, beams.Sin = 0, 0
		sum := 0.0
		for c, rate := range dst {
			h := mesh[c+1] - mesh[c]
			sum += rate * h * cmPerNM
			want := photons[0] * p.integral(mesh[c], mesh[c+1]) / (h * cmPerNM)
			scale := photons[0] * beams.integral(mesh[c], mesh[c+1]) / (h * cmPerNM)
			if !(math.Abs(rate-want) <= 1e-13*scale) {
				t.Errorf("case %d, cell %d of %d: %.17g, want %.17g (%+v)", i, c, len(dst), rate, want, p)
				break
			}
		}
		if want := photons[0] * p.Between(from, to); !(relative(sum, want) <= 1e-13) {
			t.Errorf("case %d: sum over %d cells %.17g, absorbed %.17g (%+v)", i, len(dst), sum, want, p)
		}
	}
}

// TestGenerationAlpha: the rate from alpha alone is that of a film with nothing
// behind, and is highest at the lit face.
func TestGenerationAlpha(t *testing.T) {
	r := newRand()
	for i := range 100 {
		mesh := randomMesh(r, 200, 0, logUniform(r, 10, 1e6))
		d := mesh[len(mesh)-1]
		n := 1 + r.IntN(20)
		photons, alpha, profiles := make([]float64, n), make([]float64, n), make([]Profile, n)
		absorbed := 0.0
		for w := range photons {
			photons[w], alpha[w] = logUniform(r, 1, 1e18), logUniform(r, 1e-3, 1e7)
			profiles[w], _ = Slab{Absorption: alpha[w], Thickness: d}.Profile()
			absorbed += photons[w] * Absorptance(alpha[w], d)
		}
		rate, err := GenerationFromAlpha(mesh, photons, alpha)
		if err != nil {
			t.Fatal(err)
		}
		same, err := GenerationFromProfiles(mesh, photons, profiles)
		if err != nil {
			t.Fatal(err)
		}
		sum := 0.0
		for c := range rate {
			if relative(rate[c], same[c]) > 1e-14 {
				t.Errorf("case %d, cell %d: %g from alpha, %g from profiles", i, c, rate[c], same[c])
			}
			if c > 0 && rate[c] > rate[c-1]*(1+1e-13) {
				t.Errorf("case %d: rate rises from cell %d to %d: %g to %g", i, c-1, c, rate[c-1], rate[c])
			}
			sum += rate[c] * (mesh[c+1] - mesh[c]) * cmPerNM
		}
		if !(relative(sum, absorbed) <= 1e-13) {
			t.Errorf("case %d: sum over cells %.17g, absorbed %.17g", i, sum, absorbed)
		}
	}
}

// TestThickCoherentFilm: behind thousands of periods the cells still add up.
func TestThickCoherentFilm(t *testing.T) {
	p := Profile{Thickness: 5e6, Decay: 1e-7, Wavenumber: 0.0837, Forward: 1e-7, Backward: 6e-8, Cos: 1.1e-7, Sin: -3e-8}
	r := newRand()
	for range 20 {
		mesh := randomMesh(r, 1000, 0, p.Thickness)
		rate, err := GenerationFromProfiles(mesh, []float64{1}, []Profile{p})
		if err != nil {
			t.Fatal(err)
		}
		sum := 0.0
		for c := range rate {
			sum += rate[c] * (mesh[c+1] - mesh[c]) * cmPerNM
		}
		if want := p.Absorptance(); !(relative(sum, want) <= 1e-13) {
			t.Errorf("sum over cells %.17g, absorptance %.17g", sum, want)
		}
	}
}

func TestGenerationErrors(t *testing.T) {
	good := Profile{Thickness: 100, Decay: 1e-3, Forward: 1e-3}
	nan, inf := math.NaN(), math.Inf(1)
	with := func(change func(*Profile)) []Profile {
		p := good
		change(&p)
		return []Profile{p}
	}
	for name, c := range map[string]struct {
		mesh, photons []float64
		profiles      []Profile
		dst           []float64
		want          error
	}{
		"one boundary":      {[]float64{0}, []float64{1}, []Profile{good}, nil, ErrInput},
		"descending mesh":   {[]float64{0, 2, 1}, []float64{1}, []Profile{good}, nil, ErrInput},
		"NaN in mesh":       {[]float64{0, nan}, []float64{1}, []Profile{good}, nil, ErrInput},
		"negative depth":    {[]float64{-1, 2}, []float64{1}, []Profile{good}, nil, ErrInput},
		"mesh leaves film":  {[]float64{0, 101}, []float64{1}, []Profile{good}, nil, ErrRange},
		"photons missing":   {[]float64{0, 1}, nil, []Profile{good}, nil, ErrInput},
		"negative photons":  {[]float64{0, 1}, []float64{-1}, []Profile{good}, nil, ErrInput},
		"dst too long":      {[]float64{0, 1}, []float64{1}, []Profile{good}, make([]float64, 2), ErrInput},
		"negative decay":    {[]float64{0, 1}, []float64{1}, with(func(p *Profile) { p.Decay = -1 }), nil, ErrInput},
		"infinite forward":  {[]float64{0, 1}, []float64{1}, with(func(p *Profile) { p.Forward = inf }), nil, ErrInput},
		"NaN interference":  {[]float64{0, 1}, []float64{1}, with(func(p *Profile) { p.Sin = nan }), nil, ErrInput},
		"1/cm for 1/nm":     {[]float64{0, 1}, []float64{1}, with(func(p *Profile) { p.Forward *= nmPerCM }), nil, ErrInput},
		"negative backward": {[]float64{0, 1}, []float64{1}, with(func(p *Profile) { p.Backward = -1e-9 }), nil, ErrInput},
		"rate overflows":    {[]float64{0, 1}, []float64{1e306}, []Profile{good}, nil, ErrInput},
	} {
		var g Generator
		if _, err := g.Profiles(c.dst, c.mesh, c.photons, c.profiles); !errors.Is(err, c.want) {
			t.Errorf("%s: error %v, want %v", name, err, c.want)
		}
	}
	if _, err := GenerationFromAlpha([]float64{0, 1}, []float64{1}, []float64{-1}); !errors.Is(err, ErrInput) {
		t.Errorf("negative alpha: error %v", err)
	}
	// A mesh by repeated addition may miss the end of the film by rounding.
	mesh := []float64{0, 0.1 + 0.2}
	p := Profile{Thickness: 0.3, Decay: 1, Forward: 1}
	if _, err := GenerationFromProfiles(mesh, []float64{1}, []Profile{p}); err != nil {
		t.Errorf("mesh within rounding: %v", err)
	}
}
