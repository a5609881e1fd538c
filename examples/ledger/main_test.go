package main

import (
	"flag"
	"io"
	"path/filepath"
	"strings"
	"testing"

	"photonledger/internal/check"
)

var update = flag.Bool("update", false, "write the kept CSV files")

// TestGolden compares the shares with kept ones. Planar and Lambertian shares
// are exact up to rounding; a share of the traced wafer may move by its standard
// error where other hardware rounds a ray onto another facet.
func TestGolden(t *testing.T) {
	for variant, tol := range map[string]float64{"planar": 1e-7, "lambertian": 1e-7, "textured": 5e-3} {
		dir := t.TempDir()
		var table strings.Builder
		if err := run(options{out: dir, variant: variant, wafer: 160, film: 75, rays: 2048}, &table); err != nil {
			t.Fatal(err)
		}
		if err := check.CompareCSV(filepath.Join("testdata", variant+".csv"), filepath.Join(dir, "ledger.csv"), tol, 1e-7, *update); err != nil {
			t.Errorf("%s: %v", variant, err)
		}
		for _, word := range []string{"carriers in silicon", "total", "46.456"} {
			if !strings.Contains(table.String(), word) {
				t.Errorf("%s: the table lacks %q:\n%s", variant, word, table.String())
			}
		}
	}
}

// TestVariants: light trapping gains current over the planar cell, and random
// pyramids reflect less than a flat coated face (common practice, no source).
func TestVariants(t *testing.T) {
	c, err := newCell(160e3, 75, 1024)
	if err != nil {
		t.Fatal(err)
	}
	current := map[string]float64{}
	lost := map[string]float64{}
	for name, variant := range variants {
		l, err := variant(c)
		if err != nil {
			t.Fatal(err)
		}
		a, err := l.Integrate()
		if err != nil {
			t.Fatal(err)
		}
		if a.Closure > 1e-12 {
			t.Errorf("%s: closure error %g", name, a.Closure)
		}
		r, _ := a.Find(names[carriers])
		current[name] = r.Current
		r, _ = a.Find(names[reflected])
		lost[name] = r.Current
	}
	if !(current["textured"] > current["planar"]+2 && current["lambertian"] > current["planar"]+1) {
		t.Errorf("photocurrents %v", current)
	}
	if !(lost["textured"] < lost["planar"]/3) {
		t.Errorf("reflected %v", lost)
	}
}

func TestBadOptions(t *testing.T) {
	good := options{out: t.TempDir(), variant: "planar", wafer: 160, film: 75, rays: 64}
	for _, change := range []func(*options){
		func(o *options) { o.variant = "x" }, func(o *options) { o.wafer = -1 }, func(o *options) { o.film = 1e9 }, func(o *options) { o.rays = 0 },
	} {
		o := good
		change(&o)
		if err := o.check(); err == nil || strings.Contains(err.Error(), "\n") {
			t.Errorf("%+v: error %v, want one line", o, err)
		}
	}
	if err := run(good, io.Discard); err != nil {
		t.Error(err)
	}
}
