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

// TestGolden compares measurement and fit with kept ones.
func TestGolden(t *testing.T) {
	o := options{out: t.TempDir(), thickness: 83, noise: 0.002, seed: 1, guess: 70}
	if err := run(o, io.Discard); err != nil {
		t.Fatal(err)
	}
	if err := check.CompareCSV("testdata/retrieve.csv", filepath.Join(o.out, "retrieve.csv"), 1e-7, 0, *update); err != nil {
		t.Error(err)
	}
}

// TestRetrieve: over many noises the thickness and the index come back within
// their standard errors as often as they should (68 % of a normal distribution;
// 30 trials, four standard deviations of that count allow 10 or more).
func TestRetrieve(t *testing.T) {
	thickness, index, worst := 0, 0, 0.0
	for seed := range uint64(30) {
		s, err := newSample(options{thickness: 83, noise: 0.002, seed: seed})
		if err != nil {
			t.Fatal(err)
		}
		fit, err := s.retrieve(70)
		if err != nil {
			t.Fatal(err)
		}
		worst = max(worst, math.Abs(fit.Params[0]-83)/fit.StdErr[0])
		if math.Abs(fit.Params[0]-83) < fit.StdErr[0] {
			thickness++
		}
		if n, sigma := s.indexAt(fit, 633); math.Abs(n-s.trueIndex(633)) < sigma {
			index++
		}
	}
	if worst > 4.5 {
		t.Errorf("a thickness misses by %.1f standard errors", worst)
	}
	if thickness < 10 || index < 10 {
		t.Errorf("of 30 trials the thickness is within its standard error in %d, the index in %d", thickness, index)
	}
}
