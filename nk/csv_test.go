package nk

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"math"
	"strings"
	"testing"
	"testing/iotest"

	"github.com/google/go-cmp/cmp"
)

// TestReadCSVForms: each accepted form of the doc comment.
func TestReadCSVForms(t *testing.T) {
	plain := tab([3]float64{203.3, 1.5, 0.25}, [3]float64{500, 1.25, 0})
	for name, text := range map[string]string{
		"plain":                     "wavelength_nm,n,k\n203.3,1.5,0.25\n500,1.25,0\n",
		"no line end at the end":    "wavelength_nm,n,k\n203.3,1.5,0.25\n500,1.25,0",
		"BOM, CRLF":                 "\ufeffwavelength_nm,n,k\r\n203.3,1.5,0.25\r\n500,1.25,0\r\n",
		"blank lines, comments":     "\n# a remark\n  # another: one\nwavelength_nm,n,k\n\n203.3,1.5,0.25\n# in between\n   \n500,1.25,0\n",
		"semicolon, decimal comma":  "Wavelength (nm);n;k\n203,3;1,5;0,25\n500;1,25;0\n",
		"semicolon, decimal point":  "Wavelength (nm);n;k\n203.3;1.5;0.25\n500;1.25;0\n",
		"tab, decimal comma":        "Lambda [nm]\tN\tK\n203,3\t1,5\t0,25\n500\t1,25\t0\n",
		"spaces around cells":       " wavelength nm , n , k \n 203.3 ,\t1.5, 0.25\n500 , 1.25, 0 \n",
		"quoted cells":              "\"wavelength (nm)\",\"n\",\"k\"\n\"203.3\",\"1.5\",\"0.25\"\n500,1.25,0\n",
		"exponents and signs":       "wavelength_nm,n,k\n2.033e2,+1.5,25E-2\n5e+02,1.25,-0.0\n",
		"µm, micro sign":            "wavelength (\u00b5m),n,k\n0.2033,1.5,0.25\n.5,1.25,0\n",
		"µm, Greek mu":              "wavelength (\u03bcm),n,k\n0.2033,1.5,0.25\n0.5,1.25,0\n",
		"um, exponent":              "wavelength_um,n,k\n2.033e-1,1.5,0.25\n50E-2,1.25,0\n",
		"um, decimal comma":         "wavelength_um;n;k\n0,2033;1,5;0,25\n0,5;1,25;0\n",
		"descending":                "wavelength_nm,n,k\n500,1.25,0\n203.3,1.5,0.25\n",
		"other order of columns":    "k,wavelength_nm,n\n0.25,203.3,1.5\n0,500,1.25\n",
		"a comment that is no note": "# wavelength_nm,n,k in vacuo\nwavelength_nm,n,k\n203.3,1.5,0.25\n500,1.25,0\n",
	} {
		got, err := ReadCSV(strings.NewReader(text))
		if err != nil {
			t.Errorf("%s: %v", name, err)
		} else if d := cmp.Diff(plain, got); d != "" && name != "exponents and signs" {
			t.Errorf("%s: %s", name, d)
		} else if got.K[1] != 0 || got.Wavelength[0] != 203.3 {
			t.Errorf("%s: %v", name, got)
		}
	}
}

// TestReadCSVEnergyAndAlpha: a photon energy E is the wavelength hc/(eE), with
// hc/e = 1239.841984332003 eV nm from the exact constants of the SI; k is
// alpha lambda/(4 pi).
func TestReadCSVEnergyAndAlpha(t *testing.T) {
	const evNM = 1239.841984332003
	for _, head := range []string{"energy_eV,n,alpha_1/cm", "Photon Energy (eV),n,alpha [cm-1]", "energy ev,n,absorption coefficient (cm^-1)", "Energy [eV],n,Absorption coefficient cm\u207b\u00b9"} {
		for _, rows := range []string{"1,3.5,0\n2,3.75,5e4\n", "2,3.75,5e4\n1,3.5,0\n"} {
			got, err := ReadCSV(strings.NewReader(head + "\n" + rows))
			if err != nil {
				t.Errorf("%s: %v", head, err)
				continue
			}
			want := tab([3]float64{evNM / 2, 3.75, 5e4 * evNM / 2 * 1e-7 / (4 * math.Pi)}, [3]float64{evNM, 3.5, 0})
			for i := range want.N {
				if math.Abs(got.Wavelength[i]-want.Wavelength[i]) > 1e-12 || got.N[i] != want.N[i] || math.Abs(got.K[i]-want.K[i]) > 1e-15 {
					t.Errorf("%s: row %d is %v %v %v, want %v", head, i, got.Wavelength[i], got.N[i], got.K[i], want)
				}
			}
		}
	}
}

func TestReadCSVNotes(t *testing.T) {
	got, err := ReadCSV(strings.NewReader("# Name: film_7\n#material:  glass: clear \n# SOURCE : own\n# source of error: none\nwavelength_nm,n,k,alpha_uncertainty\n400,1,0,0.1\n# conditions: 20 °C\n500,1,0,0.2\n"))
	if err != nil {
		t.Fatal(err)
	}
	want := tab([3]float64{400, 1, 0}, [3]float64{500, 1, 0})
	want.Name, want.Material, want.Source, want.Conditions = "film_7", "glass: clear", "own", "20 °C"
	want.Uncertainty = []float64{0.1, 0.2}
	if d := cmp.Diff(want, got); d != "" {
		t.Error(d)
	}
}

func TestReadCSVFaults(t *testing.T) {
	const head = "wavelength_nm,n,k\n"
	for _, c := range []struct {
		text         string
		line, column int
		want         string
	}{
		{"", 0, 0, "without a header"},
		{"# only a comment\n\n", 2, 0, "without a header"},
		{head, 1, 0, "0 rows"},
		{head + "400,1,0\n", 2, 0, "1 rows"},
		{"lambda,n,k\n400,1,0\n500,1,0\n", 1, 1, "does not name its unit"},
		{"wavelength_m,n,k\n", 1, 1, `unit "m"`},
		{"\ufeffn , energy (meV),k\n", 1, 5, `unit "mev"`},
		{"wavelength_nm,n,alpha\n", 1, 17, "does not name its unit"},
		{"wavelength_nm,n,alpha (1/m)\n", 1, 17, `unit "1/m"`},
		{"wavelength_nm,n (1),k\n", 1, 15, "want no unit"},
		{"wavelength_nm,n\n", 1, 0, "no column for k or alpha"},
		{"wavelength_nm,k\n", 1, 0, "no column for n"},
		{"n,k\n", 1, 0, "no column for wavelength or energy"},
		{"wavelength_nm,n,k,alpha_1/cm\n", 1, 19, "same as an earlier"},
		{"wavelength_nm,energy_eV,n,k\n", 1, 15, "same as an earlier"},
		{"wavelength_nm,n,k,temperature\n", 1, 19, `"temperature"`},
		{"wavelength_nm,n,k,\n", 1, 19, `""`},
		{"400,1,0\n500,1,0\n", 1, 1, `"400" in the header`},
		{head + "400,1,0\n500,1\n", 3, 0, "2 cells for the 3 columns"},
		{head + "400,1,0,7\n", 2, 9, "more cells"},
		{head + "400,,0\n", 2, 5, "n is missing"},
		{head + "400,1, x\n", 2, 8, `k "x" is not a number`},
		{head + "400,1,0x10\n", 2, 7, "not a number"},
		{head + "400,1,NaN\n", 2, 7, "not a number"},
		{head + "400,1,Inf\n", 2, 7, "not a number"},
		{head + "400,1,1_0\n", 2, 7, "not a number"},
		{head + "400,1,1e999\n", 2, 7, "range of float64"},
		{head + "400,1,1.2.3\n", 2, 7, "2 decimal signs"},
		{head + "400,1,-1e-9\n", 2, 7, "k is -1e-9"},
		{head + "400,-1,0\n", 2, 5, "n is -1"},
		{head + "0,1,0\n", 2, 1, "wavelength is 0"},
		{head + "400,1,0\n400,1,0\n", 3, 1, "strictly ascend"},
		{head + "400,1,0\n500,1,0\n450,1,0\n", 4, 1, "strictly ascend"},
		{head + "500,1,0\n400,1,0\n400,1,0\n", 4, 1, "strictly ascend"},
		{"energy_eV,n,k\n1,1,0\n1.0000000000000000001,1,0\n", 3, 1, "strictly ascend"},
		{"energy_eV,n,k\n1e-320,1,0\n", 2, 1, "no finite wavelength"},
		{"wavelength_nm,n,alpha_1/cm\n1e300,1,1e300\n", 2, 9, "no finite k"},
		{"wavelength_um,n,k\ne5,1,0\n", 2, 1, "not a number"},
		{"wavelength_um,n,k\n1e1.5,1,0\n", 2, 1, "not a number"},
		{"wavelength_um,n,k\n1e9223372036854775807,1,0\n", 2, 1, "not a number"},
		{"wavelength_um,n,k\n1e307,1,0\n", 2, 1, "range of float64"},
		{"wavelength_nm;n;k\n400;1,5;0.2\n", 2, 9, "decimal point and decimal comma"},
		{"wavelength_nm;n;k\n400;1.234,5;0\n", 2, 5, "decimal point and decimal comma"},
		{"wavelength_nm;n;k\n400;1,234,5;0\n", 2, 5, "2 decimal signs"},
		{head + "400,\"1,5\",0\n", 2, 5, "not a number"},
		{"# source: a\n# Source: b\n", 2, 0, "comes twice"},
		{"wellenl\xe4nge (\xb5m),n,k\n", 1, 8, "UTF-8"},
		{head + "400,1,0\r500,1,0\n", 2, 8, "control character"},
		{head + strings.Repeat(" ", maxLine+1) + "\n", 2, 0, "longer than"},
		{head + strings.Repeat(" ", 3*maxLine), 2, 0, "longer than"},
		{"# source: " + strings.Repeat("x", maxNote+1), 1, 0, "longer than"},
	} {
		got, err := ReadCSV(strings.NewReader(c.text))
		var pe *ParseError
		if !errors.As(err, &pe) || !errors.Is(err, ErrInput) {
			t.Errorf("%.60q: %v is no ParseError with ErrInput", c.text, err)
			continue
		}
		if pe.Line != c.line || pe.Column != c.column || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%.60q: %v, want line %d, column %d, %q", c.text, err, c.line, c.column, c.want)
		}
		if d := cmp.Diff(Table{}, got); d != "" {
			t.Errorf("%.60q: a table comes with the error: %s", c.text, d)
		}
	}
}

func TestReadCSVReaderError(t *testing.T) {
	fault := errors.New("device gone")
	_, err := ReadCSV(io.MultiReader(strings.NewReader("wavelength_nm,n,k\n400,1,0\n"), iotest.ErrReader(fault)))
	if !errors.Is(err, fault) || errors.Is(err, ErrInput) {
		t.Errorf("error %v", err)
	}
}

func TestReadCSVTooManyLines(t *testing.T) {
	if _, err := ReadCSV(strings.NewReader(strings.Repeat("\n", maxLines+1))); err == nil || !strings.Contains(err.Error(), "more than 2000000 lines") {
		t.Errorf("error %v", err)
	}
}

// TestWriteCSVRoundTrip: every embedded table, and hard figures, come back with
// the same bits.
func TestWriteCSVRoundTrip(t *testing.T) {
	hard := tab([3]float64{5e-324, math.Copysign(0, -1), 1.0 / 3}, [3]float64{math.Nextafter(1, 2), 2.2250738585072014e-308, 0.1 + 0.2}, [3]float64{math.MaxFloat64, math.Pi, 6.77e-319})
	hard.Material, hard.Uncertainty = "µ: #, \"x\"\ty", []float64{0, 1e-300, 1.8}
	tables := []Table{hard}
	for _, name := range Materials() {
		tb, err := MaterialTable(name)
		if err != nil {
			t.Fatal(err)
		}
		tables = append(tables, tb)
	}
	for _, tb := range tables {
		var b bytes.Buffer
		if err := WriteCSV(&b, tb); err != nil {
			t.Fatal(err)
		}
		back, err := ReadCSV(&b)
		if err != nil {
			t.Fatal(err)
		}
		sameBits := cmp.Comparer(func(a, b float64) bool { return math.Float64bits(a) == math.Float64bits(b) })
		if d := cmp.Diff(tb, back, sameBits); d != "" {
			t.Errorf("%s: %s", tb.Name, d)
		}
	}
}

func TestWriteCSVRefuses(t *testing.T) {
	ok := tab([3]float64{400, 1, 0}, [3]float64{500, 1, 0})
	if err := WriteCSV(io.Discard, Table{}); !errors.Is(err, ErrInput) {
		t.Errorf("empty table: %v", err)
	}
	for _, text := range []string{"a\nb", "a\rb", " a", "a ", "\xff", "\x00", strings.Repeat("x", maxNote+1)} {
		tb := ok
		tb.Source = text
		if err := WriteCSV(io.Discard, tb); !errors.Is(err, ErrInput) || !strings.Contains(err.Error(), "source") {
			t.Errorf("source %.9q: %v", text, err)
		}
	}
	fault := errors.New("disk full")
	if err := WriteCSV(failing{fault}, ok); !errors.Is(err, fault) {
		t.Errorf("writer's error: %v", err)
	}
}

type failing struct{ err error }

func (f failing) Write([]byte) (int, error) { return 0, f.err }

func TestParseErrorText(t *testing.T) {
	e := &ParseError{3, 0, fmt.Errorf("odd: %w", ErrInput)}
	if e.Error() != "nk: csv: line 3: odd: bad input" {
		t.Error(e)
	}
	e.Column = 7
	if e.Error() != "nk: csv: line 3, column 7: odd: bad input" {
		t.Error(e)
	}
}
