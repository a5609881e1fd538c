package absorb

import (
	"errors"
	"math"
	"testing"
)

// announced reports whether err is one that the package announces.
func announced(err error) bool {
	return errors.Is(err, ErrInput) || errors.Is(err, ErrRange) || errors.Is(err, ErrFit)
}

// FuzzSlab: an error, or shares that add up and a profile that integrates to them.
func FuzzSlab(f *testing.F) {
	f.Add(64.0, 0.0, 160e3, 0.1, 0.92, 0.95)
	f.Add(0.0, 0.0, 1.0, 0.0, 1.0, 1.0)
	f.Add(1e300, 1e300, 1e300, 0.5, 1.0, 1.0)
	f.Fuzz(fuzzSlab)
}

func fuzzSlab(t *testing.T, alpha, free, d, front, inside, rear float64) {
	s := Slab{alpha, free, d, front, inside, rear}
	shares, err := s.Shares()
	p, err2 := s.Profile()
	if (err == nil) != (err2 == nil) {
		t.Fatalf("%+v: %v, %v", s, err, err2)
	}
	if err != nil {
		if !announced(err) {
			t.Fatal(err)
		}
		return
	}
	if sum := shares.Reflected + shares.Absorbed + shares.FreeCarriers + shares.Escaped + shares.Transmitted; !(math.Abs(sum-1) <= 1e-12) {
		t.Errorf("%+v: %+v add up to %g", s, shares, sum)
	}
	if err := p.Validate(); err != nil {
		t.Errorf("%+v: profile %+v: %v", s, p, err)
	}
	if a := p.Absorptance(); !(math.Abs(a-shares.Absorbed) <= 1e-12) {
		t.Errorf("%+v: profile %g, share %g", s, a, shares.Absorbed)
	}
}

// FuzzProfile: an error, or finite rates that add up to the absorptance, and
// collected shares between 0 and it where there is no interference.
func FuzzProfile(f *testing.F) {
	f.Add(500.0, 1e-3, 0.05, 1e-3, 1e-4, 1e-5, 1e-5, 100.0, 300.0, 200.0, 30.0, 1000.0)
	f.Add(1e5, 5e-6, 0.0, 5e-6, 0.0, 0.0, 0.0, 5e4, 1e5, 2e5, 30.0, 0.0)
	f.Fuzz(fuzzProfile)
}

func fuzzProfile(t *testing.T, d, decay, k, forward, backward, cos, sin, z1, z2, length, diffusivity, velocity float64) {
	p := Profile{d, decay, k, forward, backward, cos, sin}
	if err := p.Validate(); err != nil {
		if !announced(err) {
			t.Fatal(err)
		}
		if _, err := GenerationFromProfiles([]float64{0, 1}, []float64{1}, []Profile{p}); err == nil {
			t.Errorf("%+v makes a generation rate", p)
		}
		return
	}
	beams := math.Abs(cos)*d + math.Abs(sin)*d + p.Forward*d + p.Backward*d
	mesh := []float64{0, z1, z2, d}
	rate, err := GenerationFromProfiles(mesh, []float64{1}, []Profile{p})
	if err == nil {
		sum := 0.0
		for c, v := range rate {
			sum += v * (mesh[c+1] - mesh[c]) * cmPerNM
		}
		// Rates of cells below 1e-300 nm may underflow on the way.
		if !(math.Abs(sum-p.Absorptance()) <= 1e-12*(1+beams)) {
			t.Errorf("%+v on %v: cells %g, absorptance %g", p, mesh, sum, p.Absorptance())
		}
	} else if !announced(err) {
		t.Fatal(err)
	}
	table := Table{Depth: []float64{0, d}, Probability: []float64{1, 0.5}}
	for _, c := range []Collection{Base{d, length, diffusivity, velocity}, table} {
		got, err := c.Collected(p)
		if err != nil {
			if !announced(err) {
				t.Fatal(err)
			}
			continue
		}
		if math.IsNaN(got) || math.IsInf(got, 0) {
			t.Errorf("%T %+v of %+v: %g", c, c, p, got)
		}
		if cos == 0 && sin == 0 && !(got >= 0 && got <= p.Absorptance()*(1+1e-12)) {
			t.Errorf("%T %+v of %+v: %g collected of %g", c, c, p, got, p.Absorptance())
		}
	}
}

// FuzzBase: an error and NaN, or probabilities in 0..1 and lengths that are not
// negative.
func FuzzBase(f *testing.F) {
	f.Add(300e3, 200e3, 30.0, 1000.0, 64.0, 1e5)
	f.Add(1e-3, 1e9, 1e-9, 1e20, 1e-9, 1e-3)
	f.Fuzz(fuzzBase)
}

func fuzzBase(t *testing.T, w, l, diffusivity, s, alpha, z float64) {
	b := Base{w, l, diffusivity, s}
	values := map[string]float64{"L_Q": b.EffectiveLength(), "L_C": b.CollectionLength(), "rear": b.RearCollection()}
	shares := map[string]float64{"rear": b.RearCollection()}
	if inside(z, w) {
		shares["at"] = b.At(z)
	}
	if z > 0 && inside(z, w) {
		shares["mean"] = b.Mean(0, z)
	}
	if OpticalDepth(alpha, w) < reach {
		shares["IQE"] = b.IQE(alpha)
	}
	if err := b.Validate(); err != nil {
		if !announced(err) {
			t.Fatal(err)
		}
		for name, v := range shares {
			if !math.IsNaN(v) {
				t.Errorf("%+v (%v): %s = %g", b, err, name, v)
			}
		}
		return
	}
	for name, v := range values {
		if !amount(v) {
			t.Errorf("%+v: %s = %g", b, name, v)
		}
	}
	for name, v := range shares {
		if !(v >= 0 && v <= 1+1e-12) {
			t.Errorf("%+v at %g, alpha %g: %s = %g", b, z, alpha, name, v)
		}
	}
}

// FuzzMesh: any two meshes: an error, or a histogram whose photons are all found.
func FuzzMesh(f *testing.F) {
	f.Add(0.0, 10.0, 20.0, 0.0, 5.0, 20.0, 0.4, 0.2, 1e17)
	f.Add(0.0, 1e-300, 1.0, 0.0, 1e-200, 1.0, 0.0, 1.0, 1e17)
	f.Fuzz(fuzzMesh)
}

func fuzzMesh(t *testing.T, e0, e1, e2, m0, m1, m2, s0, s1, photons float64) {
	var g Generator
	edges, mesh, shares := []float64{e0, e1, e2}, []float64{m0, m1, m2}, []float64{s0, s1}
	rate, err := g.Histogram(nil, mesh, []float64{photons}, edges, shares)
	if err != nil {
		if !announced(err) {
			t.Fatal(err)
		}
		return
	}
	sum := 0.0
	for c, v := range rate {
		if !amount(v) {
			t.Fatalf("%v on %v: rate %g", edges, mesh, v)
		}
		sum += v * (mesh[c+1] - mesh[c]) * cmPerNM
	}
	total := photons * (s0 + s1)
	// Rates of huge cells underflow in steps of the smallest number.
	underflow := 1e-318 + 8*math.SmallestNonzeroFloat64*m2*cmPerNM
	if !(sum <= total*(1+1e-11)+underflow) {
		t.Errorf("%v on %v: %g photons of %g", edges, mesh, sum, total)
	}
	if e0 == m0 && e2 == m2 && !(sum >= total*(1-1e-11)-underflow) {
		t.Errorf("%v on %v: %g photons of %g", edges, mesh, sum, total)
	}
	if _, err := TrapezoidPhotons(nil, mesh, edges); err != nil && !announced(err) {
		t.Fatal(err)
	}
	if _, err := GenerationCurrent(mesh, rate); err != nil && !announced(err) {
		t.Fatal(err)
	}
}

// FuzzFitLength: an error, or a finite length with a finite standard error.
func FuzzFitLength(f *testing.F) {
	f.Add(1e4, 0.99, 1e3, 0.95, 500.0, 0.9, 0.0, 0.0, 0.0, false)
	f.Add(1e4, 0.9, 1e4, 0.9, 1e-310, 0.9, 1.0, 2.0, 0.5, true)
	f.Fuzz(func(t *testing.T, a0, q0, a1, q1, a2, q2, shortest, longest, cos float64, through bool) {
		s := LengthSettings{Shortest: shortest, Longest: longest, Cos: cos, ThroughOne: through}
		r, err := FitLength([]float64{a0, a1, a2}, []float64{q0, q1, q2}, s)
		if err != nil {
			if !announced(err) {
				t.Fatal(err)
			}
			return
		}
		if !(r.Length > 0) || !amount(r.LengthError) || !finite(r.Intercept) || !amount(r.InterceptError) || r.Points < 2 || !(r.Shortest <= r.Longest) {
			t.Errorf("%+v", r)
		}
	})
}

// TestExtremes draws arguments of the fuzz targets from hundreds of decades, among
// them many that are valid.
func TestExtremes(t *testing.T) {
	r := newRand()
	decades := 6.0
	draw := func() float64 { return math.Pow(10, decades*(2*r.Float64()-1)) }
	share := func() float64 {
		switch r.IntN(5) {
		case 0:
			return 0
		case 1:
			return 1
		case 2:
			return math.Pow(10, -decades*r.Float64())
		}
		return r.Float64()
	}
	for i := range 40000 {
		decades = []float64{3, 12, 40, 120, 300}[i%5]
		fuzzSlab(t, draw(), draw(), draw(), share(), share(), share())
		fuzzBase(t, draw(), draw(), draw(), draw(), draw(), draw())
		d, decay := draw(), draw()
		in := share() / (1 + decay*d) / 4
		fuzzProfile(t, d, decay, draw(), in*decay, in*decay*share(), (share()-0.5)*in/d, (share()-0.5)*in/d, d*share(), d*share(), draw(), draw(), draw())
		e1, e2 := draw(), draw()
		fuzzMesh(t, 0, min(e1, e2), max(e1, e2), 0, max(e1, e2)*share(), max(e1, e2), share()/2, share()/2, draw())
		if t.Failed() {
			t.Fatalf("case %d", i)
		}
	}
}
