package nk

import (
	"bytes"
	"math"
	"os"
	"path/filepath"
	"testing"
)

// FuzzReadCSV: any bytes give an error or a valid table that can be written and
// read back with the same bits.
func FuzzReadCSV(f *testing.F) {
	for _, s := range []string{
		"wavelength_nm,n,k\n400,1.5,0\n500,1.4,1e-3\n",
		"\ufeffEnergy (eV);n;alpha [1/cm]\r\n1,5;3,5;0\r\n2,5;3,7;1e4\r\n",
		"# name: x\n# source: y\nwavelength (µm)\tn\tk\talpha uncertainty\n0,4\t1\t0\t0,1\n0,5\t1\t0\t0,2\n",
		"wavelength_um,n,k\n5e-1,1,0\n4e-1,1,0\n",
		"k,n,lambda nm\n1,\"2\",3\n1,2,4\n",
	} {
		f.Add([]byte(s))
	}
	if files, _ := filepath.Glob("data/*johnson*.csv"); len(files) > 0 {
		if b, err := os.ReadFile(files[0]); err == nil {
			f.Add(b)
		}
	}
	f.Fuzz(func(t *testing.T, b []byte) {
		tb, err := ReadCSV(bytes.NewReader(b))
		if err != nil {
			return
		}
		if err := tb.Validate(); err != nil {
			t.Fatal(err)
		}
		var out bytes.Buffer
		if err := WriteCSV(&out, tb); err != nil {
			t.Fatal(err)
		}
		back, err := ReadCSV(&out)
		if err != nil {
			t.Fatal(err)
		}
		if back.Name != tb.Name || back.Material != tb.Material || back.Source != tb.Source || back.Conditions != tb.Conditions {
			t.Fatalf("texts %+v came back as %+v", tb, back)
		}
		for _, pair := range [][2][]float64{{tb.Wavelength, back.Wavelength}, {tb.N, back.N}, {tb.K, back.K}, {tb.Uncertainty, back.Uncertainty}} {
			if len(pair[0]) != len(pair[1]) {
				t.Fatal("another length")
			}
			for i := range pair[0] {
				if math.Float64bits(pair[0][i]) != math.Float64bits(pair[1][i]) {
					t.Fatalf("row %d: %g came back as %g", i, pair[0][i], pair[1][i])
				}
			}
		}
	})
}

// FuzzInterpolate: any four rows give an error or an interpolation that is the
// row at each row and stays between the rows elsewhere.
func FuzzInterpolate(f *testing.F) {
	f.Add(300.0, 100.0, 100.0, 100.0, 1.5, 2.0, 1.0, 1.2, 0.1, 1e-9, 0.0, 0.5, 0.3)
	f.Add(300.0, 1e-3, 1e5, 1.0, 0.0, 8.0, 8.0, 0.1, 0.0, 0.0, 3.0, 5e-324, 0.999)
	f.Add(1e-300, 1e-300, 1e-310, 1.0, 0.0, 1e300, 8.0, 0.1, 1e300, 0.0, 3.0, 5e-324, 0.5)
	f.Fuzz(func(t *testing.T, w, d1, d2, d3, n0, n1, n2, n3, k0, k1, k2, k3, where float64) {
		tb := tab([3]float64{w, n0, k0}, [3]float64{w + d1, n1, k1}, [3]float64{w + d1 + d2, n2, k2}, [3]float64{w + d1 + d2 + d3, n3, k3})
		ip, err := tb.Interpolate()
		if err != nil {
			return
		}
		for i := range 4 {
			v, err := ip.At(tb.Wavelength[i])
			if err != nil || real(v) != tb.N[i] || imag(v) != tb.K[i] {
				t.Fatalf("row %d: %v, %v", i, v, err)
			}
		}
		if !(where >= 0 && where <= 1) {
			return
		}
		for i := range 3 {
			l := tb.Wavelength[i] + where*(tb.Wavelength[i+1]-tb.Wavelength[i])
			if l < tb.Wavelength[i] || l > tb.Wavelength[i+1] {
				continue
			}
			v, err := ip.At(l)
			if err != nil {
				t.Fatal(err)
			}
			if !inside(real(v), tb.N[i], tb.N[i+1]) || !inside(imag(v), tb.K[i], tb.K[i+1]) {
				t.Fatalf("%v at %g nm between rows %d and next of %+v", v, l, i, tb)
			}
		}
	})
}

func inside(x, a, b float64) bool { return x >= min(a, b) && x <= max(a, b) }

// FuzzScalars: NaN never comes from usable figures.
func FuzzScalars(f *testing.F) {
	f.Add(0.1, 600.0, 1e19, 1e18, 1e-4, 300.0, 350.0)
	f.Add(0.0, 1e300, 0.0, 1e300, 1e300, 1e300, 1e-300)
	f.Fuzz(func(t *testing.T, k, lambda, electrons, holes, c, t0, temperature float64) {
		usable := amount(k) && amount(electrons) && amount(holes) && amount(lambda) && lambda > 0 && amount(t0) && t0 > 0 &&
			amount(temperature) && temperature > 0 && !math.IsNaN(c) && !math.IsInf(c, 0)
		for i, x := range []float64{
			AbsorptionCoefficient(k, lambda), ExtinctionCoefficient(k, lambda), ScaleTemperature(k, c, t0, temperature),
			FreeCarriersSchroder1978().Alpha(lambda, electrons, holes), FreeCarriersGreen1995().Alpha(lambda, electrons, holes),
			FreeCarriersRuediger2013().Alpha(lambda, electrons, holes), FreeCarriersBakerFinch2014().Alpha(lambda, electrons, holes),
			PowerLaw{k, c, t0}.CrossSection(lambda),
		} {
			if usable && math.IsNaN(x) || x < 0 {
				t.Errorf("function %d gives %g for k %g, lambda %g, %g, %g, c %g, t0 %g, T %g", i, x, k, lambda, electrons, holes, c, t0, temperature)
			}
		}
	})
}
