package optics

import (
	"bufio"
	"encoding/json"
	"math"
	"os"
	"slices"
	"testing"
)

// shareVector is a line of mixed.jsonl.
type shareVector struct {
	vector
	Incoherent []bool
}

// slopeVector is a line of derivatives.jsonl: for every share the derivatives by
// all thicknesses, all n, all k, and n and k of the back medium.
type slopeVector struct {
	Class      string
	Wavelength float64   `json:"wavelength_nm"`
	Angle      float64   `json:"angle_rad"`
	FrontN     float64   `json:"front_n"`
	BackN      float64   `json:"back_n"`
	BackK      float64   `json:"back_k"`
	Thickness  []float64 `json:"thickness_nm"`
	N, K       []float64
	Incoherent []bool
	S, P       struct {
		R, T []float64
		A    [][]float64
	}
}

func (v slopeVector) stack() Stack {
	st := Stack{Front: complex(v.FrontN, 0), Back: complex(v.BackN, v.BackK)}
	for j, d := range v.Thickness {
		st.Films = append(st.Films, Film{Index: complex(v.N[j], v.K[j]), Thickness: d, Incoherent: v.Incoherent[j]})
	}
	return st
}

func readLines[T any](t testing.TB, name string) []T {
	t.Helper()
	f, err := os.Open("../testdata/vectors/" + name)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	var vs []T
	sc := bufio.NewScanner(f)
	sc.Buffer(nil, 1<<20)
	for sc.Scan() {
		var v T
		if err := json.Unmarshal(sc.Bytes(), &v); err != nil {
			t.Fatal(err)
		}
		vs = append(vs, v)
	}
	if len(vs) < 80 {
		t.Fatalf("%s has %d vectors, want at least 80", name, len(vs))
	}
	return vs
}

// TestMixedVectors compares mixed stacks with the intensity balance solved as
// one linear system with 80 digits (testdata/vectors/make_derivatives.py).
func TestMixedVectors(t *testing.T) {
	var s Solver
	var r Response
	found := map[string]float64{}
	for i, v := range readLines[shareVector](t, "mixed.jsonl") {
		st := v.stack()
		for j := range st.Films {
			st.Films[j].Incoherent = v.Incoherent[j]
		}
		for _, pol := range []Polarization{S, P} {
			want := v.S
			if pol == P {
				want = v.P
			}
			if err := s.Solve(&r, st, Wave{v.Wavelength, v.Angle, pol}); err != nil {
				t.Errorf("vector %d (%s): %v", i, v.Class, err)
				continue
			}
			tol := math.Max(3e-12, 10*want.Cond)
			compare := func(name string, j int, got, want float64) {
				dev := math.Abs(got - want)
				found[v.Class] = math.Max(found[v.Class], dev)
				if !(dev <= tol) {
					t.Errorf("vector %d (%s) %v: %s[%d] = %.17g, want %.17g, deviation %.2g > %.2g", i, v.Class, pol, name, j, got, want, dev, tol)
				}
			}
			compare("R", 0, r.R, want.R)
			compare("T", 0, r.T, want.T)
			for j, a := range want.A {
				compare("A", j, r.A[j], a)
				if v.K[j] == 0 && r.A[j] != 0 {
					t.Errorf("vector %d (%s) %v: lossless film %d absorbs %g", i, v.Class, pol, j, r.A[j])
				}
			}
		}
	}
	for class, dev := range found {
		t.Logf("%-28s largest error %.1e absolute", class, dev)
	}
}

// flat lists the derivatives in the order of slopeVector.
func (g Gradient) flat() []float64 {
	var v []float64
	v = append(v, g.Thickness...)
	v = append(v, g.N...)
	v = append(v, g.K...)
	return append(v, g.BackN, g.BackK)
}

// TestGradientVectors compares with difference quotients of 80-digit solutions
// (testdata/vectors/make_derivatives.py), relative to the largest derivative of
// the same share; thicknesses are taken in wavelengths for that. The quotients
// are good to 1e-50. Where the stack reflects nothing at all dR = 2 Re(r* dr)
// vanishes with r: there R is compared with the largest derivative of T.
func TestGradientVectors(t *testing.T) {
	var s GradientSolver
	var r Response
	var jac Jacobian
	const tol, negligible = 1e-9, 1e-30
	found := map[string]float64{}
	for i, v := range readLines[slopeVector](t, "derivatives.jsonl") {
		for _, pol := range []Polarization{S, P} {
			want := v.S
			if pol == P {
				want = v.P
			}
			if err := s.Jacobian(&jac, &r, v.stack(), Wave{v.Wavelength, v.Angle, pol}); err != nil {
				t.Errorf("vector %d (%s): %v", i, v.Class, err)
				continue
			}
			compare := func(name string, j int, g Gradient, want []float64) {
				got, largest := g.flat(), 0.0
				for c := range want {
					if c < len(v.N) {
						got[c], want[c] = got[c]*v.Wavelength, want[c]*v.Wavelength
					}
					largest = math.Max(largest, math.Abs(want[c]))
				}
				if name == "R" && r.R < 1e-25 {
					largest = math.Max(slices.Max(v.S.T), -slices.Min(v.S.T))
				}
				for c := range want {
					dev := math.Abs(got[c] - want[c])
					if largest > negligible {
						found[v.Class] = math.Max(found[v.Class], dev/largest)
					}
					if !(dev <= tol*math.Max(largest, negligible)) {
						t.Errorf("vector %d (%s) %v: d%s[%d], derivative %d = %.17g, want %.17g, deviation %.2g of the largest > %.2g", i, v.Class, pol, name, j, c, got[c], want[c], dev/largest, tol)
					}
				}
			}
			compare("R", 0, jac.R, want.R)
			compare("T", 0, jac.T, want.T)
			for j := range want.A {
				compare("A", j, jac.A[j], want.A[j])
			}
		}
	}
	for class, dev := range found {
		t.Logf("%-28s largest error %.1e of the largest derivative", class, dev)
	}
}
