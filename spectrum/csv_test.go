package spectrum

import (
	"bytes"
	"errors"
	"fmt"
	"slices"
	"strings"
	"testing"
)

// TestReadCSVForms: each accepted form gives the same spectrum.
func TestReadCSVForms(t *testing.T) {
	want := Spectrum{Wavelength: []float64{300, 400.5, 1203.3}, Irradiance: []float64{0.25, 1.5, 0.75}}
	flux := func(l, e float64) float64 { return e * l * photonsPerIrradiance }
	for name, text := range map[string]string{
		"plain":         "wavelength_nm,irradiance_W_m-2_nm-1\n300,0.25\n400.5,1.5\n1203.3,0.75\n",
		"no last LF":    "wavelength_nm,irradiance_W_m-2_nm-1\n300,0.25\n400.5,1.5\n1203.3,0.75",
		"CRLF and BOM":  "\ufeffwavelength_nm,irradiance_W_m-2_nm-1\r\n300,0.25\r\n400.5,1.5\r\n1203.3,0.75\r\n",
		"comments":      "# measured\n\n  # indoors\nwavelength_nm,irradiance_W_m-2_nm-1\n300,0.25\n#\n400.5,1.5\n1203.3,0.75\n",
		"brackets":      "Wavelength (nm),Spectral Irradiance [W m^-2 nm^-1]\n300,0.25\n400.5,1.5\n1203.3,0.75\n",
		"superscripts":  "lambda [nm],irradiance (W·m⁻²·nm⁻¹)\n300,0.25\n400.5,1.5\n1203.3,0.75\n",
		"slashes":       "lambda nm,irradiance W/m²/nm\n300,0.25\n400.5,1.5\n1203.3,0.75\n",
		"denominator":   "lambda nm,irradiance [W/(m² nm)]\n300,0.25\n400.5,1.5\n1203.3,0.75\n",
		"swapped":       "irradiance W/m2/nm,lambda nm\n0.25,300\n1.5,400.5\n0.75,1203.3\n",
		"descending":    "lambda nm,irradiance W/m2/nm\n1203.3,0.75\n400.5,1.5\n300,0.25\n",
		"quotes":        "\"lambda nm\",\"irradiance W/m2/nm\"\n\"300\",\"0.25\"\n400.5,1.5\n1203.3,0.75\n",
		"semicolon":     "lambda nm;irradiance W/m2/nm\n300;0,25\n400,5;1,5\n1203,3;0,75\n",
		"tab and point": "lambda nm\tirradiance W/m2/nm\n300\t.25\n400.5\t15e-1\n1.2033E3\t+0.75\n",
		"micrometres":   "wavelength_um,irradiance W/m2/nm\n0.3,0.25\n0.4005,1.5\n1.2033,0.75\n",
		"µm, per µm":    "wavelength (µm),irradiance (W m-2 µm-1)\n0.3,250\n0.4005,1500\n1.2033e0,750\n",
		"mW cm-2":       "wavelength (nm),irradiance (mW cm-2 nm-1)\n300,0.025\n400.5,0.15\n1203.3,0.075\n",
		"photons":       "wavelength (nm),photon flux (cm-2 s-1 nm-1)\n" + csvRow(300, flux(300, 0.25)) + csvRow(400.5, flux(400.5, 1.5)) + csvRow(1203.3, flux(1203.3, 0.75)),
		"photons, m-2":  "wavelength (nm),spectral photon flux [1/(m² s nm)]\n" + csvRow(300, 1e4*flux(300, 0.25)) + csvRow(400.5, 1e4*flux(400.5, 1.5)) + csvRow(1203.3, 1e4*flux(1203.3, 0.75)),
	} {
		got, err := ReadCSV(strings.NewReader(text))
		if err != nil {
			t.Errorf("%s: %v", name, err)
			continue
		}
		if !slices.Equal(got.Wavelength, want.Wavelength) {
			t.Errorf("%s: wavelengths %v, want %v", name, got.Wavelength, want.Wavelength)
		}
		for i, e := range got.Irradiance {
			near(t, name, e, want.Irradiance[i], 1e-15)
		}
	}
	got := must(ReadCSV(strings.NewReader("# Name: roof, noon\n# source: own meter: 3\nlambda nm,irradiance W/m2/nm\n1,2\n3,4\n")))
	if got.Name != "roof, noon" || got.Source != "own meter: 3" {
		t.Errorf("name %q, source %q", got.Name, got.Source)
	}
}

func csvRow(l, v float64) string { return fmt.Sprintf("%.17g,%.17g\n", l, v) }

// TestReadCSVErrors: the place and the reason of each fault.
func TestReadCSVErrors(t *testing.T) {
	const head = "wavelength_nm,irradiance_W_m-2_nm-1\n"
	for _, c := range []struct {
		text         string
		line, column int
		says         string
	}{
		{"", 0, 0, "without a header"},
		{"# only\n", 1, 0, "without a header"},
		{head, 1, 0, "0 wavelengths"},
		{head + "300,1\n", 2, 0, "1 wavelengths"},
		{"wavelength,irradiance_W_m-2_nm-1\n", 1, 1, "does not name its unit"},
		{"wavelength_nm,irradiance\n", 1, 15, "does not name its unit"},
		{"wavelength_eV,irradiance W/m2/nm\n", 1, 1, "unknown unit"},
		{"wavelength_nm,irradiance_W_m-2\n", 1, 15, "unknown unit"},
		{"wavelength_nm,irradiance MW cm-2 nm-1\n", 1, 15, "unknown unit"},
		{"wavelength_nm, power\n", 1, 16, "none of"},
		{"wavelength_nm,wavelength_um\n", 1, 0, "one wavelength and one"},
		{"wavelength_nm\n", 1, 0, "two columns"},
		{"wavelength_nm,irradiance W/m2/nm,irradiance W/m2/nm\n", 1, 0, "two columns"},
		{head + "300,1,2\n", 2, 0, "two cells"},
		{head + "300\n", 2, 0, "two cells"},
		{head + "300, \n", 2, 6, "missing"},
		{head + "300,1\n\n400, abc\n", 4, 6, "not a number"},
		{head + "300,nan\n", 2, 5, "not a number"},
		{head + "300,inf\n", 2, 5, "not a number"},
		{head + "300,0x10\n", 2, 5, "not a number"},
		{head + "300,1e999\n", 2, 5, "range of float64"},
		{head + "300,1.2.3\n", 2, 5, "not a number"},
		{head + "300,-1\n400,1\n", 2, 5, "negative"},
		{head + "0,1\n", 2, 1, "not positive"},
		{head + "300,1\n300,2\n", 3, 1, "strictly ascend"},
		{head + "300,1\n400,1\n350,1\n", 4, 1, "strictly ascend"},
		{"lambda nm;irradiance W/m2/nm\n300,5;1.5\n", 2, 7, "decimal point and decimal comma"},
		{"# name: a\n# name: b\n", 2, 0, "twice"},
		{head + "300,1\x00\n", 2, 6, "control character"},
		{head + "300,\xff\n", 2, 5, "UTF-8"},
		{"wavelength_um,irradiance W/m2/nm\ne5,1\n", 2, 1, "not a number"},
		{head + strings.Repeat(" ", 1<<16) + "1,1\n", 2, 0, "longer"},
	} {
		_, err := ReadCSV(strings.NewReader(c.text))
		var p *ParseError
		if !errors.As(err, &p) || !errors.Is(err, ErrInput) {
			t.Errorf("%.60q: %v, want a ParseError that wraps ErrInput", c.text, err)
			continue
		}
		if p.Line != c.line || p.Column != c.column || !strings.Contains(err.Error(), c.says) {
			t.Errorf("%.60q: %v, want line %d, column %d and %q", c.text, err, c.line, c.column, c.says)
		}
	}
}

// TestCSVRoundTrip: what is written reads back bit by bit.
func TestCSVRoundTrip(t *testing.T) {
	for _, s := range []Spectrum{AM15G(), AM15D(), AM0(), must(Planck([]float64{1e-5, 0.1, 500, 1e9}, 5778, 0.00465))} {
		var b bytes.Buffer
		if err := WriteCSV(&b, s); err != nil {
			t.Fatal(err)
		}
		got, err := ReadCSV(&b)
		if err != nil {
			t.Fatal(err)
		}
		if got.Name != s.Name || got.Source != s.Source || !slices.Equal(got.Wavelength, s.Wavelength) || !slices.Equal(got.Irradiance, s.Irradiance) {
			t.Errorf("%q does not come back", s.Name)
		}
	}
	for _, name := range []string{"two\nlines", " space", "\xff", strings.Repeat("a", 70_000)} {
		s := AM15G()
		s.Name = name
		if err := WriteCSV(&bytes.Buffer{}, s); !errors.Is(err, ErrInput) {
			t.Errorf("name %.20q: %v", name, err)
		}
	}
}
