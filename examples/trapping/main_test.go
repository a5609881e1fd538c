package main

import (
	"flag"
	"io"
	"path/filepath"
	"testing"

	"photonledger/internal/check"
)

var update = flag.Bool("update", false, "write the kept CSV files")

// TestGolden compares the photocurrents with kept ones: closed forms to the
// digits written, traced ones within a few standard errors.
func TestGolden(t *testing.T) {
	o := options{out: t.TempDir(), points: 3, nitride: 75, reflectance: 1, rays: 128}
	if err := run(o, io.Discard); err != nil {
		t.Fatal(err)
	}
	if err := check.CompareCSV("testdata/trapping.csv", filepath.Join(o.out, "trapping.csv"), 0.1, 0, *update); err != nil {
		t.Error(err)
	}
}

// TestOrder: more trapping, more current, and none beyond the limit of ideal
// Lambertian faces by more than the published difference of its two forms.
func TestOrder(t *testing.T) {
	w, err := newWafers(options{nitride: 75, reflectance: 1, rays: 128})
	if err != nil {
		t.Fatal(err)
	}
	for _, um := range []float64{2, 50, 160} {
		r, err := w.row(um)
		if err != nil {
			t.Fatal(err)
		}
		if !(r.single < r.mirror && r.mirror < r.pyramids && r.pyramids < r.limit && r.limit < r.lambertian) {
			t.Errorf("%g µm: %+v", um, r)
		}
	}
}
