package optics

import (
	"encoding/binary"
	"errors"
	"math"
	"testing"
)

// floats reads any float64 from bytes, so that the fuzzer can build every
// stack: NaN, infinities, denormal and negative numbers among them.
type floats []byte

func (f *floats) next() float64 {
	var b [8]byte
	n := copy(b[:], *f)
	*f = (*f)[n:]
	return math.Float64frombits(binary.LittleEndian.Uint64(b[:]))
}

func seed(values ...float64) []byte {
	var b []byte
	for _, v := range values {
		b = binary.LittleEndian.AppendUint64(b, math.Float64bits(v))
	}
	return b
}

// readStack builds a stack from the bytes. With the top flag set every value is
// folded into its valid range, so that half of the work goes into stacks that
// are solved rather than refused.
func readStack(data []byte, flags uint32) (Stack, Wave) {
	f := floats(data)
	fold := func(lo, hi float64) float64 {
		x := f.next()
		if flags>>31 == 0 || x >= lo && x <= hi {
			return x
		}
		bits := math.Float64bits(x)
		if bits&7 == 0 {
			return lo
		}
		return lo + (hi-lo)*float64(bits>>11)/(1<<53)
	}
	w := Wave{Wavelength: fold(1, 1e5), Angle: fold(0, math.Pi/2*(1-1e-16)), Polarization: Polarization(flags & 3)}
	st := Stack{Front: complex(fold(MinIndex, 10), 0), Back: complex(fold(MinIndex, 10), fold(0, 10))}
	for j := 0; len(f) >= 24 && j < 28; j++ {
		st.Films = append(st.Films, Film{
			Index: complex(fold(MinIndex, 10), fold(0, 10)), Thickness: fold(0, 1e6), Incoherent: flags>>(2+j)&1 != 0,
		})
	}
	return st, w
}

// FuzzSolve: any stack and wave give an error that wraps ErrInput, or finite
// shares between 0 and 1 that add up to 1.
func FuzzSolve(f *testing.F) {
	f.Add(seed(600, 0.5, 1, 1.5, 0, 1.9, 0.01, 80, 3.5, 1e-3, 200e3), uint32(8))
	f.Add(seed(600, 0, 1, 3.9, 0.02), uint32(1))
	f.Add(seed(1e-300, 1.5, 1e-6, 1e6, 1e6, 1e-6, 0, 1e-290, 1e6, 0, 1e-295), uint32(2))
	f.Add(seed(600, 0.5, 1, 1.5, 0, 1.9, 0.01, 80, 3.5, 1e-3, 200e3, 1, 0, 5000), uint32(8|1<<31))
	f.Add(seed(633, 1.5707963, 1, 1, 0, 1, 0, 300, 0.05, 8, 50), uint32(0))
	f.Fuzz(func(t *testing.T, data []byte, flags uint32) {
		st, w := readStack(data, flags)
		var s Solver
		var r Response
		if err := s.Solve(&r, st, w); err != nil {
			if !errors.Is(err, ErrInput) {
				t.Fatalf("error %v does not wrap ErrInput", err)
			}
			return
		}
		sum := r.R + r.T
		for j, a := range r.A {
			if !(a >= 0 && a <= 1+1e-9) {
				t.Fatalf("A[%d] = %g\n%+v %+v", j, a, st, w)
			}
			sum += a
		}
		if !(r.R >= 0 && r.R <= 1+1e-9 && r.T >= 0 && r.T <= 1+1e-9) || math.IsNaN(sum) {
			t.Fatalf("R = %g, T = %g, sum %g\n%+v %+v", r.R, r.T, sum, st, w)
		}
		profiles, err := s.Profiles(nil, st, w)
		if err != nil {
			t.Fatal(err)
		}
		for j, p := range profiles {
			if a := p.Absorptance(); math.IsNaN(a) || math.IsInf(a, 0) {
				t.Fatalf("profile %d: %+v integrates to %g", j, p, a)
			}
		}
	})
}

// FuzzWaves: the functions of one interface give an error or finite numbers.
func FuzzWaves(f *testing.F) {
	f.Add(1.0, 1.5, 0.0, 0.7)
	f.Add(3.5, 1.0, 0.0, 1.57)
	f.Add(1.0, 0.05, 8.0, 1e-9)
	f.Fuzz(func(t *testing.T, n1, n2, k2, angle float64) {
		fw, bw, err := Fresnel(complex(n1, 0), complex(n2, k2), angle)
		if err != nil {
			if !errors.Is(err, ErrInput) {
				t.Fatalf("error %v does not wrap ErrInput", err)
			}
			return
		}
		for _, c := range []Coefficients{fw, bw} {
			for _, v := range []float64{c.ReflectanceS, c.ReflectanceP, c.TransmittanceS, c.TransmittanceP} {
				if math.IsNaN(v) || math.IsInf(v, 0) || v < 0 {
					t.Fatalf("Fresnel(%g, %g+%gi, %g): %+v", n1, n2, k2, angle, c)
				}
			}
		}
		a, err := SolveAmplitudes(Stack{Front: complex(n1, 0), Back: complex(n2, k2)}, Wave{Wavelength: 500, Angle: angle})
		if err != nil {
			t.Fatal(err)
		}
		if psi, delta := a.Ellipsometric(); math.IsNaN(psi) || math.IsNaN(delta) {
			t.Fatalf("ellipsometric angles of %+v", a)
		}
	})
}
