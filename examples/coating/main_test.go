package main

import (
	"flag"
	"io"
	"math"
	"path/filepath"
	"strings"
	"testing"

	"photonledger/internal/check"
)

var update = flag.Bool("update", false, "write the kept CSV files")

var defaults = options{first: 300, last: 1200, spread: 0.05}

// TestGolden compares the designs with kept ones; the minimisers stop at a slope
// of 1e-9, which leaves the place of a flat minimum uncertain by 1e-4.
func TestGolden(t *testing.T) {
	o := defaults
	o.out = t.TempDir()
	if err := run(o, io.Discard); err != nil {
		t.Fatal(err)
	}
	if err := check.CompareCSV("testdata/coating.csv", filepath.Join(o.out, "coating.csv"), 1e-5, 1e-5, *update); err != nil {
		t.Error(err)
	}
}

// TestOptima compares the best coatings with published figures: single layer
// n 1.9519, 81.91 nm, 0.093656; double layer 1.5050/104.87 nm on 2.5969/55.29 nm,
// 0.029901 (computed for the same silicon data on a grid of 1 nm; this program's
// 5 nm and its interpolation move the reflectance by 2e-5 and the thicknesses by
// 0.02 nm). The best measured double layer of nitride and oxide on a real wafer
// had 0.044 (Wright, Marstein, Holt, Proc. 31st IEEE PVSC (2005), read in the
// abstract), above the ideal one.
func TestOptima(t *testing.T) {
	w, err := newWafer(defaults)
	if err != nil {
		t.Fatal(err)
	}
	designs, err := w.designs(0.05)
	if err != nil {
		t.Fatal(err)
	}
	near := func(what string, got, want, tol float64) {
		t.Helper()
		if !(math.Abs(got-want) <= tol) {
			t.Errorf("%s %.6g, want %.6g", what, got, want)
		}
	}
	single, double := designs[0], designs[1]
	near("index of the single layer", single.index[0], 1.9519, 5e-4)
	near("thickness of the single layer", single.thickness[0], 81.91, 0.02)
	near("reflectance of the single layer", single.reflected, 0.093656, 2e-5)
	near("outer index", double.index[0], 1.5050, 5e-4)
	near("outer thickness", double.thickness[0], 104.87, 0.02)
	near("inner index", double.index[1], 2.5969, 5e-4)
	near("inner thickness", double.thickness[1], 55.29, 0.02)
	near("reflectance of the double layer", double.reflected, 0.029901, 2e-5)
	for _, d := range designs {
		if d.thinner < d.reflected && d.thicker < d.reflected && d.absorbed == 0 {
			t.Errorf("%s: both neighbours reflect less: %+v", d.name, d)
		}
	}
	// A nitride of 75 to 85 nm on silicon looks dark blue (common practice, no source).
	rgb, _ := single.colour.SRGB()
	if !(rgb[2] > 2*rgb[0] && rgb[2] > rgb[1] && single.colour.Y < 10) {
		t.Errorf("colour %s, luminance %.1f %%", hex(single.colour), single.colour.Y)
	}
	if !strings.HasPrefix(hex(double.colour), "#") {
		t.Errorf("colour %s", hex(double.colour))
	}
}
