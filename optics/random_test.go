package optics

import (
	"flag"
	"math"
	"math/rand/v2"
	"testing"
)

var stacks = flag.Int("stacks", 10_000, "number of random stacks in the closure test; 1000000 for the long run")

// randomStack draws stacks from the whole range that the library accepts in
// practice: k to 10, thickness to 10^4 wavelengths, grazing angles, both sides
// of critical angles, up to 200 films.
func randomStack(rng *rand.Rand, maxFilms int) (Stack, Wave) {
	log := func(lo, hi float64) float64 { return lo * math.Pow(hi/lo, rng.Float64()) }
	w := Wave{Wavelength: 200 + 1800*rng.Float64(), Polarization: Polarization(rng.IntN(3))}
	st := Stack{Front: complex(1+2*rng.Float64(), 0)}
	films := rng.IntN(9)
	if rng.IntN(50) == 0 {
		films = rng.IntN(maxFilms + 1)
	}
	index := func() complex128 {
		n := log(0.05, 10)
		if rng.IntN(2) == 0 {
			n = 1 + 3*rng.Float64()
		}
		switch rng.IntN(4) {
		case 0, 1:
			return complex(n, 0)
		case 2:
			return complex(n, log(1e-12, 10))
		}
		return complex(n, 10*rng.Float64())
	}
	for range films {
		d := w.Wavelength * rng.Float64()
		switch rng.IntN(8) {
		case 0:
			d = w.Wavelength * log(1e-4, 1e4)
		case 1:
			d = 0
		}
		st.Films = append(st.Films, Film{Index: index(), Thickness: d})
	}
	st.Back = index()
	switch rng.IntN(6) {
	case 0: // normal incidence
	case 1:
		w.Angle = math.Pi/2 - log(1e-7, 1)*math.Pi/180
	case 2: // near the critical angle of the back or of a film
		n := real(st.Back)
		if films > 0 && rng.IntN(2) == 0 {
			n = real(st.Films[rng.IntN(films)].Index)
		}
		if n < real(st.Front) {
			w.Angle = math.Asin(n/real(st.Front)) * (1 + (1-2*float64(rng.IntN(2)))*log(1e-16, 1e-3))
		}
	default:
		w.Angle = math.Pi / 2 * rng.Float64() * (1 - 1e-9)
	}
	if !(w.Angle < math.Pi/2) {
		w.Angle = 0
	}
	return st, w
}

// TestClosure: energy is conserved, no share is negative and none is NaN.
func TestClosure(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 2))
	var s Solver
	var r Response
	worst := 0.0
	for i := range *stacks {
		st, w := randomStack(rng, 200)
		if err := s.Solve(&r, st, w); err != nil {
			t.Fatalf("stack %d: %v\n%+v %+v", i, err, st, w)
		}
		sum := r.R + r.T
		low := min(r.R, r.T)
		for j, a := range r.A {
			sum += a
			low = min(low, a)
			if imag(st.Films[j].Index) == 0 && a != 0 {
				t.Errorf("stack %d: lossless film %d absorbs %g", i, j, a)
			}
		}
		dev := math.Abs(sum - 1)
		worst = max(worst, dev)
		if !(dev <= 1e-12) || !(low >= 0) {
			t.Errorf("stack %d: R+T+A-1 = %g, lowest share %g\n%+v %+v", i, sum-1, low, st, w)
		}
	}
	t.Logf("%d stacks, largest |R+T+A-1| = %.2g", *stacks, worst)
}

// TestClosureMixed is the same with incoherent films.
func TestClosureMixed(t *testing.T) {
	rng := rand.New(rand.NewPCG(3, 4))
	var s Solver
	var r Response
	worst := 0.0
	for i := range *stacks {
		st, w := randomStack(rng, 30)
		for j := range st.Films {
			if rng.IntN(3) == 0 {
				st.Films[j].Incoherent = true
				st.Films[j].Thickness = w.Wavelength * math.Pow(10, 1.5+3*rng.Float64()) / real(st.Films[j].Index)
			}
		}
		if err := s.Solve(&r, st, w); err != nil {
			t.Fatalf("stack %d: %v\n%+v %+v", i, err, st, w)
		}
		sum := r.R + r.T
		low := min(r.R, r.T)
		for j, a := range r.A {
			sum += a
			low = min(low, a)
			if imag(st.Films[j].Index) == 0 && a != 0 {
				t.Errorf("stack %d: lossless film %d absorbs %g", i, j, a)
			}
		}
		dev := math.Abs(sum - 1)
		worst = max(worst, dev)
		if !(dev <= 1e-12) || !(low >= 0) {
			t.Errorf("stack %d: R+T+A-1 = %g, lowest share %g\n%+v %+v", i, sum-1, low, st, w)
		}
	}
	t.Logf("%d stacks, largest |R+T+A-1| = %.2g", *stacks, worst)
}

// TestProfilesAddUp: the integral of each profile is the absorptance, the
// density is not negative, and the integral between two depths is that of the
// density.
func TestProfilesAddUp(t *testing.T) {
	rng := rand.New(rand.NewPCG(5, 6))
	var s Solver
	var r Response
	var ps []Profile
	for i := range 3000 {
		st, w := randomStack(rng, 30)
		if i%2 == 1 {
			for j := range st.Films {
				if rng.IntN(3) == 0 {
					st.Films[j].Incoherent = true
					st.Films[j].Thickness = w.Wavelength * math.Pow(10, 1.5+3*rng.Float64()) / real(st.Films[j].Index)
				}
			}
		}
		if err := s.Solve(&r, st, w); err != nil {
			t.Fatal(err)
		}
		var err error
		if ps, err = s.Profiles(ps, st, w); err != nil {
			t.Fatal(err)
		}
		for j, p := range ps {
			if dev := math.Abs(p.Absorptance() - r.A[j]); !(dev <= 1e-13) {
				t.Errorf("stack %d film %d: profile integrates to %.17g, A = %.17g, deviation %.2g\n%+v\n%+v %+v", i, j, p.Absorptance(), r.A[j], dev, p, st.Films[j], w)
			}
			d := p.Thickness
			sum, top := 0.0, p.Forward+p.Backward
			for c := range 7 {
				sum += p.Between(d*float64(c)/7, min(d, d*float64(c+1)/7))
				if a := p.At(d * float64(c) / 7); a < -1e-12*top {
					t.Errorf("stack %d film %d: density %g", i, j, a)
				}
			}
			if !(math.Abs(sum-p.Absorptance()) <= 1e-13) {
				t.Errorf("stack %d film %d: cells add up to %.17g, want %.17g", i, j, sum, p.Absorptance())
			}
		}
	}
}
