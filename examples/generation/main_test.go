package main

import (
	"flag"
	"io"
	"math"
	"path/filepath"
	"testing"

	"photonledger/absorb"
	"photonledger/internal/check"
)

var update = flag.Bool("update", false, "write the kept CSV files")

// TestGolden compares the rates with kept ones. Those of the wafer are traced and
// may move by their standard errors, a few per cent in thin cells, where other
// hardware rounds a ray onto another facet.
func TestGolden(t *testing.T) {
	o := options{out: t.TempDir(), cells: 20, absorber: 2000, wafer: 160}
	shares, err := meshShares(o)
	if err != nil {
		t.Fatal(err)
	}
	if err := run(o, shares, io.Discard); err != nil {
		t.Fatal(err)
	}
	if err := check.CompareCSV("testdata/generation.csv", filepath.Join(o.out, "generation.csv"), 0, 0.03, *update); err != nil {
		t.Error(err)
	}
}

// TestSum: the cells add up to the absorbed photons, on any mesh.
func TestSum(t *testing.T) {
	for _, shares := range [][]float64{{0, 1}, {0, 1e-4, 0.3, 0.7, 1}} {
		film, err := thinFilm(2000, shares)
		if err != nil {
			t.Fatal(err)
		}
		wafer, err := texturedWafer(160e3, shares)
		if err != nil {
			t.Fatal(err)
		}
		for _, p := range []profile{film, wafer} {
			j, err := absorb.GenerationCurrent(p.mesh, p.rate)
			if err != nil {
				t.Fatal(err)
			}
			if math.Abs(j-p.absorbed) > 1e-11*p.absorbed {
				t.Errorf("%s, mesh %v: cells give %.14g mA/cm², absorbed are %.14g", p.name, shares, j, p.absorbed)
			}
		}
	}
}

func TestMeshFile(t *testing.T) {
	if _, err := meshShares(options{mesh: "testdata/absent"}); err == nil {
		t.Error("a missing mesh file is not an error")
	}
	if _, err := meshShares(options{mesh: "testdata/generation.csv"}); err == nil {
		t.Error("a file of other content is not an error")
	}
}
