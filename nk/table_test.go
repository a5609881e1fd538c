package nk

import (
	"errors"
	"math"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"
)

// tab makes a table from rows of wavelength, n, k.
func tab(rows ...[3]float64) Table {
	var t Table
	for _, r := range rows {
		t.Wavelength, t.N, t.K = append(t.Wavelength, r[0]), append(t.N, r[1]), append(t.K, r[2])
	}
	return t
}

func interpolate(t *testing.T, tb Table) *Interpolant {
	t.Helper()
	ip, err := tb.Interpolate()
	if err != nil {
		t.Fatal(err)
	}
	return ip
}

func at(t *testing.T, ip *Interpolant, lambda float64) complex128 {
	t.Helper()
	v, err := ip.At(lambda)
	if err != nil {
		t.Fatal(err)
	}
	return v
}

func TestValidateNamesTheFault(t *testing.T) {
	nan, inf := math.NaN(), math.Inf(1)
	short := tab([3]float64{400, 1, 0}, [3]float64{500, 1, 0})
	short.K = short.K[:1]
	lacking := tab([3]float64{400, 1, 0}, [3]float64{500, 1, 0})
	lacking.Uncertainty = []float64{}
	negative := tab([3]float64{400, 1, 0}, [3]float64{500, 1, 0})
	negative.Uncertainty = []float64{0.1, -0.25}
	for want, tb := range map[string]Table{
		"0 rows":                                {},
		"1 rows":                                tab([3]float64{400, 1, 0}),
		"2 wavelengths, 2 values n, 1 values k": short,
		"2 wavelengths, 0 uncertainties":        lacking,
		"row 1: uncertainty is -0.25":           negative,
		"row 0: wavelength is -1":               tab([3]float64{-1, 1, 0}, [3]float64{500, 1, 0}),
		"row 1: wavelength is NaN":              tab([3]float64{400, 1, 0}, [3]float64{nan, 1, 0}),
		"row 1: wavelength is +Inf":             tab([3]float64{400, 1, 0}, [3]float64{inf, 1, 0}),
		"row 1: wavelength 400 nm follows":      tab([3]float64{400, 1, 0}, [3]float64{400, 1, 0}),
		"row 1: wavelength 300 nm follows":      tab([3]float64{400, 1, 0}, [3]float64{300, 1, 0}),
		"row 1: n is -0.5":                      tab([3]float64{400, 1, 0}, [3]float64{500, -0.5, 0}),
		"row 0: n is NaN":                       tab([3]float64{400, nan, 0}, [3]float64{500, 1, 0}),
		"row 1: k is -1e-09":                    tab([3]float64{400, 1, 0}, [3]float64{500, 1, -1e-9}),
		"row 0: k is +Inf":                      tab([3]float64{400, 1, inf}, [3]float64{500, 1, 0}),
	} {
		for _, err := range []error{tb.Validate(), func() error { _, err := tb.Interpolate(); return err }()} {
			if !errors.Is(err, ErrInput) || !strings.Contains(err.Error(), want) {
				t.Errorf("error %v, want ErrInput with %q", err, want)
			}
		}
	}
}

func TestRange(t *testing.T) {
	if low, high := (Table{}).Range(); !math.IsNaN(low) || !math.IsNaN(high) {
		t.Errorf("range of an empty table is %g, %g", low, high)
	}
	if low, high := tab([3]float64{400, 1, 0}, [3]float64{500, 1, 0}).Range(); low != 400 || high != 500 {
		t.Errorf("range is %g, %g", low, high)
	}
}

func TestOutsideTheTable(t *testing.T) {
	ip := interpolate(t, tab([3]float64{400, 1, 0}, [3]float64{500, 1, 0}))
	for _, l := range []float64{math.Nextafter(400, 0), math.Nextafter(500, 1e9), 0, -1, math.Inf(1), math.Inf(-1)} {
		if v, err := ip.At(l); !errors.Is(err, ErrRange) || v != 0 || !strings.Contains(err.Error(), "400 to 500 nm") {
			t.Errorf("At(%g) = %v, %v", l, v, err)
		}
	}
	if _, err := ip.At(math.NaN()); !errors.Is(err, ErrInput) {
		t.Errorf("At(NaN): %v", err)
	}
	if _, err := (&Interpolant{}).At(400); !errors.Is(err, ErrInput) {
		t.Errorf("zero value: %v", err)
	}
	if _, err := ip.Sample(nil, []float64{450, 500, 501}); !errors.Is(err, ErrRange) || !strings.Contains(err.Error(), "wavelength 2") {
		t.Errorf("Sample outside: %v", err)
	}
	if _, err := ip.Sample(make([]complex128, 2), []float64{450}); !errors.Is(err, ErrInput) {
		t.Errorf("Sample with a dst of another length: %v", err)
	}
	if got, err := ip.Sample(nil, nil); err != nil || len(got) != 0 {
		t.Errorf("Sample of nothing: %v, %v", got, err)
	}
}

// TestInterpolantIsACopy: neither the caller's rows nor the copy for reading
// reach the interpolation.
func TestInterpolantIsACopy(t *testing.T) {
	tb := tab([3]float64{400, 1, 0.1}, [3]float64{500, 2, 0.2}, [3]float64{600, 3, 0.3})
	ip := interpolate(t, tb)
	before := at(t, ip, 450)
	tb.N[0], tb.K[1], tb.Wavelength[2] = 9, 9, 900
	ip.Table.N[1], ip.Table.Wavelength[0] = 9, 1
	if got := at(t, ip, 450); got != before {
		t.Errorf("At(450) changed from %v to %v", before, got)
	}
}

// TestRowsAreExact: at a row the result is the row, to the last bit, for every
// embedded table, and At equals Sample everywhere.
func TestRowsAreExact(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 2))
	for _, name := range Materials() {
		m, err := Material(name)
		if err != nil {
			t.Fatal(err)
		}
		tb := m.Table
		got, err := m.Sample(nil, tb.Wavelength)
		if err != nil {
			t.Fatal(err)
		}
		for i, v := range got {
			if real(v) != tb.N[i] || imag(v) != tb.K[i] {
				t.Errorf("%s: %v at %g nm, the row has %g, %g", name, v, tb.Wavelength[i], tb.N[i], tb.K[i])
			}
		}
		low, high := tb.Range()
		lambda := make([]float64, 300)
		for i := range lambda {
			lambda[i] = low + rng.Float64()*(high-low)
		}
		if rng.IntN(2) == 0 {
			slices.Sort(lambda)
		}
		if got, err = m.Sample(got[:0:0], nil); err != nil || len(got) != 0 {
			t.Fatal(got, err)
		}
		if got, err = m.Sample(nil, lambda); err != nil {
			t.Fatal(err)
		}
		for i, l := range lambda {
			if v := at(t, m, l); v != got[i] {
				t.Errorf("%s: At(%g) = %v, Sample has %v", name, l, v, got[i])
			}
		}
	}
}

// TestMonotoneBetweenRows: between two rows n and k go from one value to the
// other without turning back, for every embedded table.
func TestMonotoneBetweenRows(t *testing.T) {
	const steps = 20
	for _, name := range Materials() {
		m, err := Material(name)
		if err != nil {
			t.Fatal(err)
		}
		tb := m.Table
		for i := range len(tb.N) - 1 {
			before := at(t, m, tb.Wavelength[i])
			for j := 1; j <= steps; j++ {
				l := tb.Wavelength[i] + float64(j)/steps*(tb.Wavelength[i+1]-tb.Wavelength[i])
				v := at(t, m, min(l, tb.Wavelength[i+1]))
				// one part in 1e14 for the rounding of neighbouring points
				if backwards(real(before), real(v), tb.N[i+1]-tb.N[i], 1e-14) || backwards(imag(before), imag(v), tb.K[i+1]-tb.K[i], 1e-13) {
					t.Fatalf("%s: %v after %v at %g nm turns back", name, v, before, l)
				}
				before = v
			}
		}
	}
}

// backwards says whether the step from a to b goes against the direction.
func backwards(a, b, direction, slack float64) bool {
	d := b - a
	if direction == 0 {
		return d != 0
	}
	return d*direction < 0 && math.Abs(d) > slack*math.Max(math.Abs(a), math.Abs(b))
}

// TestZeroRows: the written rule for rows with k = 0.
func TestZeroRows(t *testing.T) {
	ip := interpolate(t, tab([3]float64{400, 2, 0.08}, [3]float64{500, 2, 0}, [3]float64{600, 2, 0}, [3]float64{700, 2, 0.02}, [3]float64{800, 2, 0.02}))
	for _, c := range []struct{ lambda, k, tol float64 }{
		{400, 0.08, 0}, {425, 0.08 * 9 / 16, 1e-17}, {450, 0.02, 1e-17}, {490, 0.0008, 1e-17}, {500, 0, 0},
		{500.1, 0, 0}, {550, 0, 0}, {599.9, 0, 0}, {600, 0, 0},
		{650, 0.005, 1e-18}, {700, 0.02, 0}, {750, 0.02, 0}, {800, 0.02, 0},
	} {
		if k := imag(at(t, ip, c.lambda)); math.Abs(k-c.k) > c.tol {
			t.Errorf("k = %g at %g nm, want %g", k, c.lambda, c.k)
		}
	}
}

// TestExponentialEdge: an absorption edge whose logarithm is straight over the
// wavelength comes back exactly, over 12 decades.
func TestExponentialEdge(t *testing.T) {
	var tb Table
	for i := range 13 {
		tb.Wavelength = append(tb.Wavelength, 1000+25*float64(i))
		tb.N = append(tb.N, 3.5-0.01*float64(i))
		tb.K = append(tb.K, math.Pow10(-i))
	}
	ip := interpolate(t, tb)
	for l := 1000.0; l <= 1300; l += 0.37 {
		v := at(t, ip, l)
		n, k := 3.5-0.01*(l-1000)/25, math.Pow(10, -(l-1000)/25)
		if math.Abs(real(v)-n) > 1e-14 || math.Abs(imag(v)/k-1) > 1e-13 {
			t.Errorf("%v at %g nm, want %g + %gi", v, l, n, k)
		}
	}
}

// TestConvergesToASmoothCurve: with every halving of the step the largest error
// of n and of ln k against a smooth monotone curve falls by more than 3 in the
// middle of the range; the monotone cubic is of second order or better.
func TestConvergesToASmoothCurve(t *testing.T) {
	n := func(l float64) float64 { return 1.5 + 3000/(l*l)*10 }
	k := func(l float64) float64 { return math.Exp(-l/40 + 1e-5*l*l) }
	before := [2]float64{}
	for _, step := range []float64{40, 20, 10, 5} {
		var tb Table
		for l := 300.0; l <= 900; l += step {
			tb.Wavelength, tb.N, tb.K = append(tb.Wavelength, l), append(tb.N, n(l)), append(tb.K, k(l))
		}
		ip := interpolate(t, tb)
		var worst [2]float64
		for l := 400.0; l <= 800; l += 0.7 {
			v := at(t, ip, l)
			worst[0] = math.Max(worst[0], math.Abs(real(v)-n(l)))
			worst[1] = math.Max(worst[1], math.Abs(math.Log(imag(v)/k(l))))
		}
		for i, w := range worst {
			if before[i] > 0 && w > before[i]/3 {
				t.Errorf("step %g nm: error %g after %g", step, w, before[i])
			}
		}
		before = worst
	}
}

// TestNoSlope: values that no float64 slope can join are refused.
func TestNoSlope(t *testing.T) {
	tb := tab([3]float64{5e-324, 0, 0}, [3]float64{1e-323, 1e300, 0}, [3]float64{1, 1, 0})
	if _, err := tb.Interpolate(); !errors.Is(err, ErrInput) || !strings.Contains(err.Error(), "slope") {
		t.Errorf("error %v", err)
	}
}

func TestNegativeZero(t *testing.T) {
	minus := math.Copysign(0, -1)
	ip := interpolate(t, tab([3]float64{400, minus, minus}, [3]float64{500, 1, minus}, [3]float64{600, 1, 1}))
	for _, l := range []float64{400, 450, 500, 550} {
		if v := at(t, ip, l); math.Signbit(real(v)) || math.Signbit(imag(v)) {
			t.Errorf("At(%g) = %v has a negative zero", l, v)
		}
	}
}

func TestRelativeUncertainty(t *testing.T) {
	tb := tab([3]float64{400, 1, 1}, [3]float64{500, 1, 1}, [3]float64{600, 1, 1})
	tb.Uncertainty = []float64{0.01, 0.04, 0}
	ip := interpolate(t, tb)
	for _, c := range [][2]float64{{400, 0.01}, {450, 0.02}, {500, 0.04}, {550, 0.02}, {600, 0}} {
		if u, err := ip.RelativeUncertainty(c[0]); err != nil || math.Abs(u-c[1]) > 1e-16 {
			t.Errorf("uncertainty at %g nm = %g, %v, want %g", c[0], u, err, c[1])
		}
	}
	if _, err := ip.RelativeUncertainty(601); !errors.Is(err, ErrRange) {
		t.Errorf("outside: %v", err)
	}
	tb.Uncertainty = nil
	if _, err := interpolate(t, tb).RelativeUncertainty(450); !errors.Is(err, ErrUnknown) {
		t.Errorf("none: %v", err)
	}
}

func TestAlphaAndK(t *testing.T) {
	for _, k := range []float64{0, 1e-12, 0.01, 8} {
		for _, l := range []float64{200, 1000, 4000} {
			if back := ExtinctionCoefficient(AbsorptionCoefficient(k, l), l); math.Abs(back-k) > 1e-15*k {
				t.Errorf("k = %g at %g nm comes back as %g", k, l, back)
			}
		}
	}
	for _, c := range [][2]float64{{-1, 500}, {1, 0}, {1, -5}, {math.NaN(), 500}, {1, math.NaN()}, {math.Inf(1), 500}, {1, math.Inf(1)}} {
		if a, k := AbsorptionCoefficient(c[0], c[1]), ExtinctionCoefficient(c[0], c[1]); !math.IsNaN(a) || !math.IsNaN(k) {
			t.Errorf("%v gives %g, %g, want NaN", c, a, k)
		}
	}
}
