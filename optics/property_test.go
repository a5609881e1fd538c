package optics

import (
	"errors"
	"math"
	"math/cmplx"
	"math/rand/v2"
	"testing"
)

// Exact properties of plane waves in films; no outside figures are needed.

const degree = math.Pi / 180

func solve(t *testing.T, st Stack, w Wave) Response {
	t.Helper()
	r, err := Solve(st, w)
	if err != nil {
		t.Fatalf("%+v %+v: %v", st, w, err)
	}
	return r
}

func near(t *testing.T, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol) {
		t.Errorf("%s = %.17g, want %.17g, deviation %.2g > %.2g", what, got, want, math.Abs(got-want), tol)
	}
}

// TestReciprocity: T from both sides is the same between lossless media, with
// absorbing and incoherent films between them.
func TestReciprocity(t *testing.T) {
	rng := rand.New(rand.NewPCG(7, 8))
	for range 2000 {
		st, w := randomStack(rng, 20)
		st.Back = complex(real(st.Front)*(1+rng.Float64()), 0)
		for j := range st.Films {
			if f := &st.Films[j]; rng.IntN(4) == 0 && f.Thickness > 3*w.Wavelength && imag(f.Index) < 1e-3*real(f.Index) {
				f.Incoherent = checkPhase(f.Index, f.Thickness, w.Wavelength, true) == nil
			}
		}
		turned := Stack{Front: st.Back, Back: st.Front}
		for j := range st.Films {
			turned.Films = append(turned.Films, st.Films[len(st.Films)-1-j])
		}
		back := w
		back.Angle = math.Asin(real(st.Front) / real(st.Back) * math.Sin(w.Angle))
		a, b := solve(t, st, w), solve(t, turned, back)
		// The angle of the way back is rounded; near grazing that is what is seen.
		tol := 1e-11 + 4e-16/math.Pow(math.Cos(w.Angle), 2)
		near(t, "T from behind", b.T, a.T, tol)
	}
}

func TestPolarizationsAtNormalIncidence(t *testing.T) {
	rng := rand.New(rand.NewPCG(9, 10))
	for range 500 {
		st, w := randomStack(rng, 20)
		w.Angle = 0
		var r [3]Response
		for p := range r {
			w.Polarization = Polarization(p)
			r[p] = solve(t, st, w)
		}
		w.Angle, w.Polarization = 1e-9, P // goes through the oblique path
		o := solve(t, st, w)
		for p := range r {
			if r[p].R != r[0].R || r[p].T != r[0].T {
				t.Errorf("%v: R %g, T %g differ from s: %g, %g", Polarization(p), r[p].R, r[p].T, r[0].R, r[0].T)
			}
		}
		near(t, "R of p at 1e-9 rad", o.R, r[0].R, 1e-10)
		near(t, "T of p at 1e-9 rad", o.T, r[0].T, 1e-10)
	}
}

// TestAbsentFilms: a film of zero thickness and a lossless half-wave film are
// not seen; a film may be cut in two.
func TestAbsentFilms(t *testing.T) {
	rng := rand.New(rand.NewPCG(11, 12))
	for range 1000 {
		st, w := randomStack(rng, 10)
		want := solve(t, st, w)
		at := rng.IntN(len(st.Films) + 1)
		with := func(films ...Film) Stack {
			s := st
			s.Films = append(append(append([]Film{}, st.Films[:at]...), films...), st.Films[at:]...)
			return s
		}
		r := solve(t, with(Film{Index: 2.3 + 0.7i}), w)
		near(t, "R with a film of no thickness", r.R, want.R, 1e-13)
		near(t, "T with a film of no thickness", r.T, want.T, 1e-13)
		near(t, "A of a film of no thickness", r.A[at], 0, 0)

		n := real(st.Front) * 1.3
		cos := real(RefractedCosine(st.Front, complex(n, 0), w.Angle))
		r = solve(t, with(Film{Index: complex(n, 0), Thickness: w.Wavelength / (2 * n * cos)}), w)
		// The half wave is rounded; resonant stacks amplify that.
		near(t, "R with a half-wave film", r.R, want.R, 1e-9)

		if at < len(st.Films) {
			s := with(st.Films[at])
			s.Films[at].Thickness *= 0.5
			s.Films[at+1].Thickness *= 0.5
			r = solve(t, s, w)
			near(t, "R with a film cut in two", r.R, want.R, 1e-10)
			near(t, "A of both halves", r.A[at]+r.A[at+1], want.A[at], 1e-10)
		}
	}
}

// TestAbsorbingPlate: reflectance and transmittance of an absorbing plate with
// all incoherent passes, R = ρ + ρ τ² e²/(1-ρ'²e²) and T = τ² e/(1-ρ'²e²) for a
// weakly absorbing one, whose interfaces count as lossless.
func TestAbsorbingPlate(t *testing.T) {
	const n, k, d, lambda = 3.5, 1e-9, 200e3, 1000.0
	e := math.Exp(-4 * math.Pi * k * d / lambda)
	rho := (n - 1) * (n - 1) / ((n + 1) * (n + 1))
	r := solve(t, Stack{Front: 1, Back: 1, Films: []Film{{Index: complex(n, k), Thickness: d, Incoherent: true}}}, Wave{Wavelength: lambda})
	den := 1 - rho*rho*e*e
	near(t, "R", r.R, rho+rho*(1-rho)*(1-rho)*e*e/den, 1e-12)
	near(t, "T", r.T, (1-rho)*(1-rho)*e/den, 1e-12)
	near(t, "A", r.A[0], (1-rho)*(1-e)/(1-rho*e), 1e-12)
}

// TestIncoherentIsPhaseAverage: R, T and every absorptance of a stack with one
// incoherent film are the means of those of the coherent stack over the phase
// of that film, for absorbing films too.
func TestIncoherentIsPhaseAverage(t *testing.T) {
	const lambda, points = 700.0, 4096
	for _, k := range []float64{0, 1e-6, 1e-5} {
		for _, pol := range []Polarization{S, P} {
			for _, angle := range []float64{0, 0.6, 1.2} {
				n := complex(2.4, k)
				films := []Film{
					{Index: 1.9 + 0.01i, Thickness: 80},
					{Index: n, Thickness: 300e3, Incoherent: true},
					{Index: 1.46, Thickness: 120},
					{Index: 0.2 + 4i, Thickness: 25},
				}
				st := Stack{Front: 1, Back: 1.5, Films: films}
				w := Wave{Wavelength: lambda, Angle: angle, Polarization: pol}
				want := solve(t, st, w)
				coherent := st
				coherent.Films = append([]Film{}, films...)
				coherent.Films[1].Incoherent = false
				q := n * RefractedCosine(1, n, angle)
				period := lambda / (2 * real(q))
				var mean Response
				mean.A = make([]float64, len(films))
				for i := range points {
					// Only the phase moves: k follows the thickness, so that the loss of a pass stays.
					d := 300e3 + period*((float64(i)+0.5)/points-0.5)
					coherent.Films[1].Thickness, coherent.Films[1].Index = d, complex(real(n), k*300e3/d)
					r := solve(t, coherent, w)
					mean.R += r.R / points
					mean.T += r.T / points
					for j, a := range r.A {
						mean.A[j] += a / points
					}
				}
				const tol = 1e-9
				near(t, "R of the phase average", mean.R, want.R, tol)
				near(t, "T of the phase average", mean.T, want.T, tol)
				for j := range films {
					near(t, "A of the phase average", mean.A[j], want.A[j], tol)
				}
			}
		}
	}
}

// TestFresnelAgreesWithStack: the interface functions and a stack without films
// are the same physics.
func TestFresnelAgreesWithStack(t *testing.T) {
	rng := rand.New(rand.NewPCG(13, 14))
	for range 1000 {
		st, w := randomStack(rng, 0)
		st.Films = nil
		f, b, err := Fresnel(st.Front, st.Back, w.Angle)
		if err != nil {
			t.Fatal(err)
		}
		a, err := SolveAmplitudes(st, w)
		if err != nil {
			t.Fatal(err)
		}
		for _, c := range []struct {
			name      string
			got, want complex128
			tol       float64
		}{{"RS", a.RS, f.RS, 1e-13}, {"RP", a.RP, f.RP, 1e-13}, {"TS", a.TS, f.TS, 1e-13}, {"TP", a.TP, f.TP, 1e-12 * (1 + cmplx.Abs(f.TP))}} {
			if !(cmplx.Abs(c.got-c.want) <= c.tol) {
				t.Errorf("%+v %+v: %s = %v, want %v", st, w, c.name, c.got, c.want)
			}
		}
		// Stokes relations: r' = -r and t t' = 1 - r².
		if b.RS != -f.RS || cmplx.Abs(f.TS*b.TS-(1-f.RS*f.RS)) > 1e-13 || cmplx.Abs(f.TP*b.TP-(1-f.RP*f.RP)) > 1e-12 {
			t.Errorf("%+v %+v: Stokes relations fail: %+v %+v", st, w, f, b)
		}
		w.Polarization = S
		near(t, "R of s", solve(t, st, w).R, f.ReflectanceS, 1e-13)
		near(t, "T of s", solve(t, st, w).T, f.TransmittanceS, 1e-13)
		w.Polarization = P
		near(t, "R of p", solve(t, st, w).R, f.ReflectanceP, 1e-13)
		near(t, "T of p", solve(t, st, w).T, f.TransmittanceP, 1e-13)
	}
}

// TestTotalReflectionPhase: the closed formula agrees with the phase of the
// amplitude coefficients; at 45° in glass of 1.5 the difference of p and s is
// that of a Fresnel rhomb.
func TestTotalReflectionPhase(t *testing.T) {
	for _, angle := range []float64{0.75, 0.9, 1.2, 1.5} {
		s, p := TotalReflectionPhase(1.5, 1, angle)
		f, _, err := Fresnel(1.5, 1, angle)
		if err != nil {
			t.Fatal(err)
		}
		near(t, "phase of s", math.Remainder(cmplx.Phase(f.RS)-s, 2*math.Pi), 0, 1e-14)
		near(t, "phase of p", math.Remainder(cmplx.Phase(f.RP)-p, 2*math.Pi), 0, 1e-14)
		near(t, "|RS|", cmplx.Abs(f.RS), 1, 1e-15)
	}
	// Fresnel's rhomb: glass of n = 1.51 gives a difference of 45° at 48°37' and
	// at 54°37' (M. Born, E. Wolf, Principles of Optics, sec. 1.5.4; from memory).
	for _, minutes := range []float64{48*60 + 37, 54*60 + 37} {
		s, p := TotalReflectionPhase(1.51, 1, minutes/60*degree)
		near(t, "difference of phases in a rhomb, deg", math.Abs(p-s)/degree, 45, 0.05)
	}
	if s, p := TotalReflectionPhase(1.5, 1, 0.3); !math.IsNaN(s) || !math.IsNaN(p) {
		t.Errorf("below the critical angle: %g, %g, want NaN", s, p)
	}
}

// TestEllipsometricAngles: a dielectric substrate turns from Δ = π to 0 at the
// Brewster angle, where ψ = 0; gold has Δ between (common practice, no source).
func TestEllipsometricAngles(t *testing.T) {
	angles := func(n complex128, angle float64) (float64, float64) {
		a, err := SolveAmplitudes(Stack{Front: 1, Back: n}, Wave{Wavelength: 633, Angle: angle})
		if err != nil {
			t.Fatal(err)
		}
		return a.Ellipsometric()
	}
	b := BrewsterAngle(1, 1.5)
	psi, delta := angles(1.5, b-0.01)
	near(t, "Δ below Brewster", delta, math.Pi, 1e-12)
	if psi > 0.02 {
		t.Errorf("ψ near Brewster = %g", psi)
	}
	_, delta = angles(1.5, b+0.01)
	near(t, "Δ above Brewster", delta, 0, 1e-12)
	psi, delta = angles(0.18+3.4i, 70*degree)
	if !(delta > 80*degree && delta < 130*degree && psi > 40*degree && psi < 45*degree) {
		t.Errorf("gold at 70°: ψ = %g°, Δ = %g°", psi/degree, delta/degree)
	}
}

// TestThickStacks: thousands of films neither overflow nor lose energy.
func TestThickStacks(t *testing.T) {
	const tol = 5000 * 8 * 0x1p-53 // eight roundings of a share near 1 in every film
	for _, ratio := range []float64{1.6, 10, 1e3} {
		st := Stack{Front: 1, Back: 1.5}
		for j := range 5000 {
			n := 1.5
			if j%2 == 0 {
				n *= ratio
			}
			st.Films = append(st.Films, Film{Index: complex(n, 0), Thickness: 600 / (4 * n)})
		}
		r := solve(t, st, Wave{Wavelength: 600})
		near(t, "R of 5000 quarter waves", r.R, 1, tol)
		r = solve(t, st, Wave{Wavelength: 600, Angle: 1, Polarization: P})
		near(t, "R+T of 5000 films at 1 rad", r.R+r.T, 1, tol)
	}
}

func TestErrors(t *testing.T) {
	good := Stack{Front: 1, Back: 3.5, Films: []Film{{Index: 1.9, Thickness: 80}}}
	wave := Wave{Wavelength: 600}
	nan := math.NaN()
	film := func(f Film) Stack { s := good; s.Films = []Film{{Index: 2, Thickness: 1}, f}; return s }
	for _, c := range []struct {
		name string
		st   Stack
		w    Wave
		want string
	}{
		{"zero stack", Stack{}, wave, "optics: front medium: index (0+0i): modulus is not between 1e-06 and 1e+06: invalid input"},
		{"absorbing front", Stack{Front: 1 + 0.1i, Back: 1}, wave, "optics: front medium: index (1+0.1i) absorbs, the front medium must be lossless: invalid input"},
		{"gain", film(Film{Index: 2 - 0.1i, Thickness: 1}), wave, "optics: film 1: index (2-0.1i): n and k must not be negative or NaN: invalid input"},
		{"NaN index", film(Film{Index: complex(nan, 0), Thickness: 1}), wave, "optics: film 1: index (NaN+0i): n and k must not be negative or NaN: invalid input"},
		{"negative thickness", film(Film{Index: 2, Thickness: -2}), wave, "optics: film 1: thickness -2 nm is negative: invalid input"},
		{"NaN thickness", film(Film{Index: 2, Thickness: nan}), wave, "optics: film 1: thickness NaN nm is not a number: invalid input"},
		{"thin incoherent", film(Film{Index: 2 + 1i, Thickness: 10, Incoherent: true}), wave, "optics: film 1: an absorbing film of 10 nm is thinner than one wavelength in it and cannot be incoherent: invalid input"},
		{"infinite phase", film(Film{Index: 2, Thickness: 1e300}), wave, "optics: film 1: thickness 1e+300 nm at index (2+0i) and wavelength 600 nm exceeds a phase of 1e+09 rad: invalid input"},
		{"no wavelength", good, Wave{}, "optics: wavelength 0 nm is not a positive number: invalid input"},
		{"beyond grazing", good, Wave{Wavelength: 600, Angle: 2}, "optics: angle 2 rad is not in [0, π/2): invalid input"},
		{"polarisation", good, Wave{Wavelength: 600, Polarization: 7}, "optics: unknown polarisation 7: invalid input"},
	} {
		_, err := Solve(c.st, c.w)
		if err == nil || err.Error() != c.want || !errors.Is(err, ErrInput) {
			t.Errorf("%s: error %v, want %s", c.name, err, c.want)
		}
	}
	if _, err := SolveAmplitudes(Stack{Front: 1, Back: 1, Films: []Film{{Index: 1.5, Thickness: 1e6, Incoherent: true}}}, wave); !errors.Is(err, ErrInput) {
		t.Errorf("amplitudes of an incoherent stack: %v", err)
	}
}
