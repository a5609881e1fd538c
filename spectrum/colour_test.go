package spectrum

import (
	"errors"
	"math"
	"strconv"
	"strings"
	"testing"
)

// TestColourTables: the sums of the colour matching functions over steps of 5 nm
// as CIE 15:2004, table T.4, gives them below its columns (from memory), and the
// multi-lobe fit of C. Wyman, P.-P. Sloan, P. Shirley, J. Comput. Graph. Tech. 2(2),
// 1-11 (2013) (read), whose chromaticity of D65 over steps of 1 nm is known
// independently (0.312730, 0.329091: computed elsewhere from the same fit and D65).
func TestColourTables(t *testing.T) {
	var table [][5]float64
	var sum [5]float64
	for line := range strings.Lines(cie1931) {
		if line[0] == '#' || line[0] == 'w' {
			continue
		}
		var row [5]float64
		for i, f := range strings.Split(strings.TrimSpace(line), ",") {
			row[i], _ = strconv.ParseFloat(f, 64)
			sum[i] += row[i]
		}
		table = append(table, row)
	}
	if len(table) != 81 || table[0][0] != 380 || table[80][0] != 780 {
		t.Fatalf("%d rows from %g nm to %g nm", len(table), table[0][0], table[len(table)-1][0])
	}
	for j, want := range []float64{21.371524, 21.371327, 21.371540} {
		if math.Abs(sum[1+j]-want) > 5e-7 {
			t.Errorf("function %d adds up to %.6f, want %.6f", j, sum[1+j], want)
		}
	}
	lobe := func(l, middle, left, right float64) float64 {
		if l < middle {
			right = left
		}
		return math.Exp(-(l - middle) * (l - middle) / (2 * right * right))
	}
	fit := func(l float64) [3]float64 {
		return [3]float64{
			1.056*lobe(l, 599.8, 37.9, 31.0) + 0.362*lobe(l, 442.0, 16.0, 26.7) - 0.065*lobe(l, 501.1, 20.4, 26.2),
			0.821*lobe(l, 568.8, 46.9, 40.5) + 0.286*lobe(l, 530.9, 16.3, 31.1),
			1.217*lobe(l, 437.0, 11.8, 36.0) + 0.681*lobe(l, 459.0, 26.0, 13.8),
		}
	}
	d65 := Spectrum{}
	for _, row := range table {
		d65.Wavelength, d65.Irradiance = append(d65.Wavelength, row[0]), append(d65.Irradiance, row[4])
		// Largest deviation of the fit from the tables at steps of 10 nm, computed
		// elsewhere: 0.0146, 0.0073, 0.0131.
		if int(row[0])%10 == 0 {
			for j, largest := range []float64{0.0146, 0.0073, 0.0131} {
				if d := math.Abs(row[1+j] - fit(row[0])[j]); d > largest+5e-5 {
					t.Errorf("function %d at %g nm: %g is %g away from the fit", j, row[0], row[1+j], d)
				}
			}
		}
	}
	var xyz [3]float64
	for l := 380.0; l <= 780; l++ {
		e, err := d65.At(l)
		if err != nil {
			t.Fatal(err)
		}
		for j, v := range fit(l) {
			xyz[j] += e * v
		}
	}
	x, y := Tristimulus{xyz[0], xyz[1], xyz[2]}.Chromaticity()
	if math.Abs(x-0.312730) > 5e-7 || math.Abs(y-0.329091) > 5e-7 {
		t.Errorf("D65 with the fitted functions: %.6f, %.6f, want 0.312730, 0.329091", x, y)
	}
}

// TestColourWhite: a constant reflectance is the colour of the illuminant on any
// grid, and Y is 100 times it.
func TestColourWhite(t *testing.T) {
	for _, grid := range [][]float64{{380, 780}, {300, 411, 555.5, 1200}, {379, 380, 381, 500, 779, 781}} {
		r := make([]float64, len(grid))
		for i := range r {
			r[i] = 0.3
		}
		c, err := Colour(grid, r)
		if err != nil {
			t.Fatal(err)
		}
		if math.Abs(c.Y-30) > 1e-12*100 {
			t.Errorf("grid %v: Y = %.15g, want 30", grid, c.Y)
		}
		x, y := c.Chromaticity()
		if math.Abs(x-0.31272) > 5e-6 || math.Abs(y-0.32903) > 5e-6 {
			t.Errorf("grid %v: chromaticity %.6f, %.6f, want 0.31272, 0.32903 (CIE 15, from memory)", grid, x, y)
		}
	}
	black := Tristimulus{}
	if x, _ := black.Chromaticity(); !math.IsNaN(x) {
		t.Errorf("chromaticity of black is %g, want NaN", x)
	}
}

// TestColourIsLinear: on the grid of a colour, twice as fine or not, a reflectance
// that is linear between the points has the same colour.
func TestColourIsLinear(t *testing.T) {
	coarse := []float64{350, 450, 520, 600, 700, 800}
	r := []float64{0.1, 0.6, 0.2, 0.9, 0.4, 0.5}
	var fine, rFine []float64
	for l := 350.0; l <= 800; l += 2.5 {
		fine = append(fine, l)
		rFine = append(rFine, interpolate(coarse, r, l))
	}
	a, err := Colour(coarse, r)
	if err != nil {
		t.Fatal(err)
	}
	b, err := Colour(fine, rFine)
	if err != nil {
		t.Fatal(err)
	}
	for _, v := range [][2]float64{{a.X, b.X}, {a.Y, b.Y}, {a.Z, b.Z}} {
		if math.Abs(v[0]-v[1]) > 1e-12*v[0] {
			t.Errorf("coarse %v, fine %v", a, b)
		}
	}
}

func TestSRGB(t *testing.T) {
	// White and mid grey: an 18 % grey has the display value 118 of 255 (common
	// practice, no source).
	white, inside := Tristimulus{95.0429, 100, 108.8801}.SRGB()
	for _, v := range white {
		if math.Abs(v-1) > 5e-4 || !inside {
			t.Errorf("white is %v, inside %t", white, inside)
		}
	}
	grey, _ := Tristimulus{0.18 * 95.0429, 18, 0.18 * 108.8801}.SRGB()
	for _, v := range grey {
		if math.Round(255*v) != 118 {
			t.Errorf("18 %% grey is %v, want 118/255", grey)
		}
	}
	if _, inside := (Tristimulus{10, 90, 10}).SRGB(); inside {
		t.Error("a green beyond the screen is said to be inside")
	}
}

func TestColourErrors(t *testing.T) {
	for name, c := range map[string]struct {
		grid, r []float64
		want    error
	}{
		"starts late":    {[]float64{400, 800}, []float64{0, 0}, ErrRange},
		"ends early":     {[]float64{300, 700}, []float64{0, 0}, ErrRange},
		"percent":        {[]float64{300, 800}, []float64{50, 50}, ErrInput},
		"negative":       {[]float64{300, 800}, []float64{-0.1, 0}, ErrInput},
		"NaN":            {[]float64{300, 800}, []float64{math.NaN(), 0}, ErrInput},
		"lengths differ": {[]float64{300, 800}, []float64{0}, ErrInput},
		"unsorted":       {[]float64{800, 300}, []float64{0, 0}, ErrInput},
		"empty":          {nil, nil, ErrInput},
	} {
		if _, err := Colour(c.grid, c.r); !errors.Is(err, c.want) {
			t.Errorf("%s: %v, want %v", name, err, c.want)
		}
	}
}
