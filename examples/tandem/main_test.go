package main

import (
	"flag"
	"io"
	"math"
	"path/filepath"
	"testing"

	"photonledger/internal/check"
)

var update = flag.Bool("update", false, "write the kept CSV files")

// TestGolden compares the shares at the match with kept ones.
func TestGolden(t *testing.T) {
	o := options{out: t.TempDir(), wafer: 160, front: 50, back: 20}
	if err := run(o, io.Discard); err != nil {
		t.Fatal(err)
	}
	if err := check.CompareCSV("testdata/tandem.csv", filepath.Join(o.out, "tandem.csv"), 1e-7, 0, *update); err != nil {
		t.Error(err)
	}
}

// TestMatch: the currents match, the balance closes, and the derivatives are
// those of central differences.
func TestMatch(t *testing.T) {
	c, err := newCell(options{wafer: 160, front: 50, back: 20})
	if err != nil {
		t.Fatal(err)
	}
	curve, err := c.curve(100, 1500, 15)
	if err != nil {
		t.Fatal(err)
	}
	m, err := c.match(curve)
	if err != nil {
		t.Fatal(err)
	}
	if math.Abs(m.top-m.bottom) > 1e-9 {
		t.Errorf("currents %.12g and %.12g", m.top, m.bottom)
	}
	incident := 0.0
	for _, w := range c.weights {
		incident += w
	}
	if math.Abs(m.total-incident) > 1e-10 {
		t.Errorf("total %.12g, incident %.12g", m.total, incident)
	}
	const h = 0.01 // nm
	for j := range c.layers {
		if j == silicon {
			continue // 160 µm: a difference over 0.01 nm has no digits
		}
		d := c.sweep.Thickness[j]
		c.sweep.Thickness[j] = d + h
		up, err := c.atPresent()
		if err != nil {
			t.Fatal(err)
		}
		c.sweep.Thickness[j] = d - h
		down, err := c.atPresent()
		if err != nil {
			t.Fatal(err)
		}
		c.sweep.Thickness[j] = d
		if want := (up.top - down.top) / (2 * h); math.Abs(m.topSlopes[j]-want) > 1e-6 {
			t.Errorf("layer %d: slope %g, differences %g", j, m.topSlopes[j], want)
		}
	}
}
