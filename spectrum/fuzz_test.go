package spectrum

import (
	"bytes"
	"encoding/binary"
	"errors"
	"io"
	"math"
	"slices"
	"strings"
	"testing"
)

// FuzzReadCSV: any bytes are an error with a place or a valid spectrum, which
// written comes back bit by bit.
func FuzzReadCSV(f *testing.F) {
	for _, text := range []string{
		"wavelength_nm,irradiance_W_m-2_nm-1\n300,0.25\n400.5,1.5\n",
		"\ufeff# name: a\r\nlambda [µm];photon flux (cm⁻² s⁻¹ nm⁻¹)\r\n1,2;3e14\r\n0,9;0\r\n",
		"\"irradiance [mW/(cm2 nm)]\"\t\"wavelength um\"\n1\t.2\n2\t.3e0\n",
		"wavelength_um,irradiance W/m2/nm\ne5,1\n-e5,1\n",
		"wavelength_nm,photon flux m-2 s-1 nm-1\n1e-300,1e300\n1e300,1e-300\n",
	} {
		f.Add([]byte(text))
	}
	f.Fuzz(func(t *testing.T, data []byte) {
		s, err := ReadCSV(bytes.NewReader(data))
		if err != nil {
			var p *ParseError
			if !errors.As(err, &p) || !errors.Is(err, ErrInput) || p.Line < 0 || p.Column < 0 {
				t.Fatalf("%v is no ParseError", err)
			}
			return
		}
		if err := s.Validate(); err != nil {
			t.Fatal(err)
		}
		var b bytes.Buffer
		if err := WriteCSV(&b, s); err != nil {
			t.Fatal(err)
		}
		back, err := ReadCSV(&b)
		if err != nil {
			t.Fatal(err)
		}
		if back.Name != s.Name || back.Source != s.Source || !slices.Equal(back.Wavelength, s.Wavelength) || !slices.Equal(back.Irradiance, s.Irradiance) {
			t.Fatalf("%+v comes back as %+v", s, back)
		}
	})
}

// floats reads numbers from bytes: whole numbers first, so that good spectra
// occur, any float64 otherwise.
func floats(data []byte) []float64 {
	var v []float64
	for len(data) >= 9 && len(v) < 64 {
		bits := binary.LittleEndian.Uint64(data[1:])
		switch data[0] % 4 {
		case 0:
			v = append(v, math.Float64frombits(bits))
		case 1:
			v = append(v, float64(bits%1000)/1000)
		default:
			v = append(v, 280+float64(bits%3721))
		}
		data = data[9:]
	}
	return v
}

func pack(values ...float64) []byte {
	var b []byte
	for _, v := range values {
		b = binary.LittleEndian.AppendUint64(append(b, 0), math.Float64bits(v))
	}
	return b
}

// checkResult fails for a result that no error announced.
func checkResult(t *testing.T, what string, err error, values ...float64) {
	t.Helper()
	if err != nil {
		if !errors.Is(err, ErrInput) && !errors.Is(err, ErrRange) && !errors.Is(err, ErrBalance) && !errors.Is(err, ErrSettle) {
			t.Fatalf("%s: error %v wraps no sentinel", what, err)
		}
		return
	}
	for _, v := range values {
		if !finite(v) {
			t.Fatalf("%s: %g without an error", what, v)
		}
	}
}

// FuzzIntegrals: spectra, grids and shares of any numbers give an error or finite
// figures, never a panic.
func FuzzIntegrals(f *testing.F) {
	f.Add(pack(300, 400, 1200, 0.5, 1, 0.2), pack(310, 1000, 0.5, 0.7), 1.1, 300.0)
	f.Add(pack(1e-300, 1e300, 1e300, 1), pack(1e-200, 1e200, 1, 1), 1e-300, 1e300)
	f.Add(pack(300, 400, math.NaN(), 1), pack(300, math.Inf(1), 1, 1), math.NaN(), -1.0)
	f.Add(pack(5e-324, 1e-323, 1.5e-323, 1, 1, 1), pack(5e-324, 1.5e-323, 1, 1), 5e-324, 5e-324)
	global := must(AM15G().Resample([]float64{280, 300, 500, 1000, 2000, 4000}))
	f.Fuzz(func(t *testing.T, first, second []byte, x, y float64) {
		a, b := floats(first), floats(second)
		s := Spectrum{Wavelength: a[:len(a)/2], Irradiance: a[len(a)/2:]}
		grid, share := b[:len(b)/2], b[len(b)/2:]
		curve := Curve{Wavelength: grid, Value: share}
		one := func(what string, v float64, err error) { t.Helper(); checkResult(t, what, err, v) }
		many := func(what string, v []float64, err error) { t.Helper(); checkResult(t, what, err, v...) }
		whole := func(what string, v Spectrum, err error) {
			t.Helper()
			if err == nil {
				err = v.Validate()
				if err != nil {
					t.Fatalf("%s makes a bad spectrum: %v", what, err)
				}
			}
			checkResult(t, what, err)
		}
		v, err := s.Total()
		one("Total", v, err)
		v, err = s.At(x)
		one("At", v, err)
		for _, w := range []Weighting{Photons, Power} {
			m, err := Weights(nil, s, grid, w)
			many("Weights", m, err)
			m, err = CellIntegrals(nil, s, grid, w)
			many("CellIntegrals", m, err)
			m, err = Cumulative(nil, s, grid, share, w)
			many("Cumulative", m, err)
			v, err := Mean(s, grid, share, w)
			one("Mean", v, err)
			v, err = Product(s, curve, curve, w)
			one("Product", v, err)
			v, err = Mismatch(s, global, curve, Curve{Wavelength: s.Wavelength, Value: s.Irradiance}, w)
			one("Mismatch", v, err)
		}
		m, err := s.PhotonFlux(nil)
		many("PhotonFlux", m, err)
		r, err := s.Scale(x)
		whole("Scale", r, err)
		r, err = s.ScaleTo(x)
		whole("ScaleTo", r, err)
		r, err = s.Slice(x, y)
		whole("Slice", r, err)
		r, err = s.Resample(grid)
		whole("Resample", r, err)
		r, err = Planck(grid, x, y)
		whole("Planck", r, err)
		v, err = MaxPhotocurrent(s, x)
		one("MaxPhotocurrent", v, err)
		v, err = RadiativeCurrent(grid, share, x)
		one("RadiativeCurrent", v, err)
		v, err = RadiativeCurrentOfGap(x, y)
		one("RadiativeCurrentOfGap", v, err)
		for _, temperature := range []float64{300, x} {
			d, err := IdealDiode(x, y, temperature)
			checkResult(t, "IdealDiode", err, d.Voc, d.Voltage, d.Current, d.Power, d.FillFactor)
		}
		c, err := Colour(grid, share)
		checkResult(t, "Colour", err, c.X, c.Y, c.Z)
		rgb, _ := c.SRGB()
		many("SRGB", rgb[:], nil)
		rest := slices.Clone(share)
		for i := range rest {
			rest[i] = 1 - rest[i]
		}
		l := Ledger{Spectrum: s, Wavelength: grid, Entries: []Entry{{Name: "a", Share: share, Bound: share}, {Name: "b", Share: rest, Data: share, IntegralBound: y}}, Tolerance: x}
		acc, err := l.Integrate()
		checkResult(t, "Ledger", err, acc.Total.Current, acc.Total.Share, acc.Incident, acc.Closure)
		for _, row := range acc.Rows {
			checkResult(t, "row", err, row.Share, row.Current, row.Bound, row.StdError, row.Data, row.Combined)
		}
		checkResult(t, "WriteCSV", l.WriteCSV(io.Discard))
	})
}

// FuzzSample: any settings and shares end in an error or a finite result.
func FuzzSample(f *testing.F) {
	f.Add(300.0, 1200.0, 1e-6, 0.0, 500.0, pack(300, 4000, 1, 1))
	f.Add(299.0, 299.0000001, 1e-300, 1e-9, 1e-5, pack(280, 300, 1e-300, 1e300))
	f.Add(1e-300, 1e300, 1.0, 1e299, 1e300, pack(1e-300, 1e300, 1, 0))
	f.Fuzz(func(t *testing.T, from, to, tolerance, step, period float64, data []byte) {
		a := floats(data)
		s := Spectrum{Wavelength: a[:len(a)/2], Irradiance: a[len(a)/2:]}
		p := Sampler{Tolerance: tolerance, MaxStep: step, MaxCalls: 2000}
		var out Samples
		err := p.Sample(&out, s, from, to, 2, func(l float64, v []float64) error {
			v[0], v[1] = math.Sin(l/period), math.Exp(-l/period)
			return nil
		})
		checkResult(t, "Sample", err, slices.Concat(out.Integral, out.Bound, out.Weights)...)
		if err == nil && (!slices.IsSorted(out.Wavelength) || out.Wavelength[0] != from || out.Wavelength[len(out.Wavelength)-1] != to) {
			t.Fatalf("wavelengths from %g to %g nm, want %g to %g", out.Wavelength[0], out.Wavelength[len(out.Wavelength)-1], from, to)
		}
	})
}

// TestReadCSVReader: an error of the reader arrives as it is.
func TestReadCSVReader(t *testing.T) {
	r := io.MultiReader(strings.NewReader("wavelength_nm,irradiance W/m2/nm\n1,1\n"), failingReader{})
	if _, err := ReadCSV(r); !errors.Is(err, errFull) {
		t.Errorf("%v, want the error of the reader", err)
	}
}

type failingReader struct{}

func (failingReader) Read([]byte) (int, error) { return 0, errFull }
