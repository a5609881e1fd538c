package nk

import (
	"errors"
	"math"
	"slices"
	"testing"
)

// energyGrid returns wavelengths (nm) from the energy high down to low (eV), in
// steps of h eV, finer around fine eV, and of h e/6 at high energies.
func energyGrid(high, low, h, fine float64) []float64 {
	var lambda []float64
	for e := high; e > low; {
		lambda = append(lambda, nmEV/e)
		e -= h * max(min(0.1+math.Abs(e-fine), 1), e/6)
	}
	return lambda
}

// TestKramersKronigTaucLorentz: the model's n and k are transforms of each
// other, so a table of it with a fine grid around the gap, where the curvature
// of k jumps, and up to energies where k has died out must pass to 1e-6.
func TestKramersKronigTaucLorentz(t *testing.T) {
	for _, m := range []*TaucLorentz{{122, 3.45, 2.54, 1.2, 1.15}, {200, 3.6, 2.3, 1.7, 1}} {
		lambda := energyGrid(300, 0.3, 0.008, m.Eg)
		n, err := Evaluate(nil, m, lambda)
		if err != nil {
			t.Fatal(err)
		}
		r, err := KramersKronig(lambda, n, KramersKronigSettings{Low: 200, High: 2500})
		if err != nil {
			t.Fatal(err)
		}
		if !(r.Max < 1e-6) || !(r.RMS <= r.Max) || r.MissingBelow > 1e-8 || r.MissingAbove != 0 {
			t.Errorf("%d rows: rms %.2g, max %.2g at %.0f nm, missing %.2g and %.2g, want max < 1e-6", len(lambda), r.RMS, r.Max, r.MaxAt, r.MissingBelow, r.MissingAbove)
		}
	}
}

// TestKramersKronigOscillator: an index that is itself a Lorentz oscillator has
// n - 1 and k as transforms of each other in closed form, below and above the
// resonance; k does not vanish at either end of the table.
func TestKramersKronigOscillator(t *testing.T) {
	lambda := energyGrid(400, 0.05, 0.01, 3)
	n := make([]complex128, len(lambda))
	for i, l := range lambda {
		e := nmEV / l
		n[i] = 3 + 4/complex(9-e*e, -0.6*e)
	}
	r, err := KramersKronig(lambda, n, KramersKronigSettings{Low: 150, High: 5000, Anchor: 1000})
	if err != nil {
		t.Fatal(err)
	}
	if !(r.Max < 1e-6+r.MissingAbove) || r.MissingAbove > 1e-3 || math.Abs(r.Anchor-1000) > 10 {
		t.Errorf("max %.2g at %.0f nm, missing %.2g and %.2g, anchor %g", r.Max, r.MaxAt, r.MissingBelow, r.MissingAbove, r.Anchor)
	}
}

// TestKramersKronigFindsErrors: what is wrong in a table shows in the result at
// its size.
func TestKramersKronigFindsErrors(t *testing.T) {
	m := &TaucLorentz{122, 3.45, 2.54, 1.2, 1.15}
	lambda := energyGrid(300, 0.3, 0.02, m.Eg)
	good, err := Evaluate(nil, m, lambda)
	if err != nil {
		t.Fatal(err)
	}
	s := KramersKronigSettings{Low: 200, High: 2500, Anchor: 2000}
	for name, c := range map[string]struct {
		change   func(l float64, n complex128) complex128
		low, top float64 // of Max
	}{
		"n + 0.01 below 600 nm": {func(l float64, n complex128) complex128 {
			if l < 600 {
				n += 0.01
			}
			return n
		}, 0.0099, 0.0101},
		"a constant on n is not seen (anchored)": {func(_ float64, n complex128) complex128 { return n + 0.01 }, 0, 1e-5},
		"k 10 % too large":                       {func(_ float64, n complex128) complex128 { return complex(real(n), 1.1*imag(n)) }, 0.1, 1},
		"n and k of different tables":            {func(l float64, n complex128) complex128 { return complex(3+100/l, imag(n)) }, 0.5, 10},
	} {
		bad := slices.Clone(good)
		for i := range bad {
			bad[i] = c.change(lambda[i], bad[i])
		}
		r, err := KramersKronig(lambda, bad, s)
		if err != nil {
			t.Fatal(err)
		}
		if r.Max < c.low || r.Max > c.top {
			t.Errorf("%s: max deviation %g, want %g-%g", name, r.Max, c.low, c.top)
		}
	}
}

// TestKramersKronigMissingRange: a table cut off where k falls like E⁻³ misses
// just what MissingBelow says.
func TestKramersKronigMissingRange(t *testing.T) {
	m := &TaucLorentz{122, 3.45, 2.54, 1.2, 1.15}
	lambda := energyGrid(40, 0.3, 0.01, m.Eg)
	n, err := Evaluate(nil, m, lambda)
	if err != nil {
		t.Fatal(err)
	}
	r, err := KramersKronig(lambda, n, KramersKronigSettings{Low: 100, High: 2500, Anchor: 2500})
	if err != nil {
		t.Fatal(err)
	}
	// k E³ still changes by some 15 % beyond 40 eV: (E - Eg)² and n.
	if math.Abs(r.Max/r.MissingBelow-1) > 0.2 || r.Max < 1e-6 {
		t.Errorf("cut at 40 eV: max deviation %.3g, missing range %.3g", r.Max, r.MissingBelow)
	}
}

func TestKramersKronigErrors(t *testing.T) {
	lambda := []float64{400, 500, 600, 700, 800}
	n := []complex128{3, 3, 3, 3, 3}
	with := func(i int, v complex128) []complex128 { c := slices.Clone(n); c[i] = v; return c }
	for name, c := range map[string]struct {
		lambda []float64
		n      []complex128
		s      KramersKronigSettings
		want   error
	}{
		"short":      {lambda[:4], n[:4], KramersKronigSettings{}, ErrInput},
		"lengths":    {lambda, n[:4], KramersKronigSettings{}, ErrInput},
		"descending": {[]float64{400, 500, 500, 700, 800}, n, KramersKronigSettings{}, ErrInput},
		"NaN":        {[]float64{400, 500, math.NaN(), 700, 800}, n, KramersKronigSettings{}, ErrInput},
		"k < 0":      {lambda, with(2, -1i), KramersKronigSettings{}, ErrInput},
		"n Inf":      {lambda, with(2, complex(math.Inf(1), 0)), KramersKronigSettings{}, ErrInput},
		"window":     {lambda, n, KramersKronigSettings{Low: 600, High: 500}, ErrInput},
		"no row":     {lambda, n, KramersKronigSettings{Low: 510, High: 590}, ErrRange},
		"anchor":     {lambda, n, KramersKronigSettings{Anchor: -1}, ErrInput},
	} {
		if _, err := KramersKronig(c.lambda, c.n, c.s); !errors.Is(err, c.want) {
			t.Errorf("%s: error %v, want %v", name, err, c.want)
		}
	}
	r, err := KramersKronig(lambda, n, KramersKronigSettings{})
	if err != nil || r.Max != 0 || len(r.Lambda) != 3 {
		t.Errorf("constant n without k: %+v, %v", r, err)
	}
}
