package optics

import (
	"bufio"
	"encoding/json"
	"math"
	"os"
	"testing"
)

type vector struct {
	Class      string
	Wavelength float64   `json:"wavelength_nm"`
	Angle      float64   `json:"angle_rad"`
	FrontN     float64   `json:"front_n"`
	BackN      float64   `json:"back_n"`
	BackK      float64   `json:"back_k"`
	Thickness  []float64 `json:"thickness_nm"`
	N, K       []float64
	S, P       struct {
		R, T float64
		A    []float64
		Cond float64
	}
}

func (v vector) stack() Stack {
	st := Stack{Front: complex(v.FrontN, 0), Back: complex(v.BackN, v.BackK)}
	for j, d := range v.Thickness {
		st.Films = append(st.Films, Film{Index: complex(v.N[j], v.K[j]), Thickness: d})
	}
	return st
}

func loadVectors(t testing.TB) []vector {
	t.Helper()
	f, err := os.Open("../testdata/vectors/stacks.jsonl")
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	var vs []vector
	sc := bufio.NewScanner(f)
	sc.Buffer(nil, 1<<20)
	for sc.Scan() {
		var v vector
		if err := json.Unmarshal(sc.Bytes(), &v); err != nil {
			t.Fatal(err)
		}
		vs = append(vs, v)
	}
	if len(vs) != 552 {
		t.Fatalf("%d vectors, want 552", len(vs))
	}
	return vs
}

// TestVectors compares with stacks solved with 60 digits as one linear system
// of boundary conditions (testdata/vectors/make_stacks.py), an independent
// method. cond is the change of the answer when the angle, the wavelength and
// the front index move by one rounding.
func TestVectors(t *testing.T) {
	var s Solver
	var r Response
	type worst struct{ abs, rel float64 }
	found := map[string]worst{}
	for i, v := range loadVectors(t) {
		for _, pol := range []Polarization{S, P} {
			want := v.S
			if pol == P {
				want = v.P
			}
			if err := s.Solve(&r, v.stack(), Wave{v.Wavelength, v.Angle, pol}); err != nil {
				t.Errorf("vector %d (%s): %v", i, v.Class, err)
				continue
			}
			tol := math.Max(3e-12, 10*want.Cond)
			w := found[v.Class]
			compare := func(name string, j int, got, want float64) {
				dev := math.Abs(got - want)
				w.abs = math.Max(w.abs, dev)
				if !(dev <= tol) || got < 0 {
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
				if a > 1e-12 && want.Cond < 1e-13 {
					rel := math.Abs(r.A[j]-a) / a
					w.rel = math.Max(w.rel, rel)
					if !(rel <= 1e-11) {
						t.Errorf("vector %d (%s) %v: A[%d] = %.17g, want %.17g, relative %.2g", i, v.Class, pol, j, r.A[j], a, rel)
					}
				}
			}
			found[v.Class] = w
		}
	}
	for class, w := range found {
		t.Logf("%-28s largest error %.1e absolute, %.1e relative of A", class, w.abs, w.rel)
	}
}
