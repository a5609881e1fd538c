package main

import (
	"encoding/csv"
	"flag"
	"io"
	"math"
	"math/rand/v2"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"

	"photonledger/internal/check"
	"photonledger/nk"
	"photonledger/optics"
)

var update = flag.Bool("update", false, "write the kept CSV files")

func defaults(t *testing.T) options {
	return options{
		out: t.TempDir(), figure: "retrieve.png", model: "cauchy", sample: "sinx209_vogt2015",
		first: 480, last: 1000, thickness: 300, noise: 0.002, seed: 1,
	}
}

// TestGolden compares measurement and fit with kept ones. The fit ends within
// 1e-9 standard errors; 1e-7 leaves room for the rounding of other processors.
func TestGolden(t *testing.T) {
	o := defaults(t)
	var table strings.Builder
	if err := run(o, &table); err != nil {
		t.Fatal(err)
	}
	if err := check.CompareCSV("testdata/retrieve.csv", filepath.Join(o.out, "retrieve.csv"), 1e-7, 1e-7, *update); err != nil {
		t.Error(err)
	}
	if !strings.Contains(table.String(), "Invented measurement") || strings.Contains(table.String(), "CAUTION") {
		t.Errorf("table:\n%s", table.String())
	}
}

func fit(t *testing.T, o options, guess float64) (*fitter, []nk.FitResult) {
	t.Helper()
	if err := o.check(); err != nil {
		t.Fatal(err)
	}
	m, err := measure(o)
	if err != nil {
		t.Fatal(err)
	}
	f := &fitter{measurement: m, dispersion: dispersions[o.model]()}
	fits, err := f.retrieve(guess)
	if err != nil {
		t.Fatal(err)
	}
	return f, fits
}

// TestCoverage: over many noises thickness and index come back within their
// standard errors as often as they should: 68 % of a normal distribution, and
// four standard deviations of that count are 4 sqrt(60 0.68 0.32) = 15.
func TestCoverage(t *testing.T) {
	const trials, expected, spread = 60, 0.6827 * 60, 4 * 3.61
	thickness, index := 0, 0
	for seed := range uint64(trials) {
		o := defaults(t)
		o.seed = seed
		f, fits := fit(t, o, o.thickness)
		best := fits[0]
		if miss := math.Abs(best.Params[0]-o.thickness) / best.StdErr[0]; miss < 1 {
			thickness++
		} else if miss > 4.5 {
			t.Errorf("seed %d: the thickness misses by %.1f standard errors", seed, miss)
		}
		n, sigma, err := f.indexAt(best, 633)
		if err != nil {
			t.Fatal(err)
		}
		sample, err := f.film.At(633)
		if err != nil {
			t.Fatal(err)
		}
		if math.Abs(n-real(sample)) < sigma {
			index++
		}
	}
	for what, count := range map[string]int{"thickness": thickness, "index": index} {
		if math.Abs(float64(count)-expected) > spread {
			t.Errorf("of %d trials the %s is within its standard error in %d", trials, what, count)
		}
	}
}

// TestTwin: between lossless media without dispersion, films of index n and of
// ns/n with the same optical thickness have the same reflectance, because the
// amplitudes of the two faces change places (derived). That is why a thin film
// leaves two answers, which the program must not hide.
func TestTwin(t *testing.T) {
	const ns = 3.7
	random := rand.New(rand.NewPCG(7, 0))
	for range 100 {
		n, d, l := 1.3+random.Float64(), 500*random.Float64(), 400+600*random.Float64()
		r := func(n, d float64) float64 {
			response, err := optics.Solve(optics.Stack{Front: 1, Films: []optics.Film{{Index: complex(n, 0), Thickness: d}}, Back: ns}, optics.Wave{Wavelength: l})
			if err != nil {
				t.Fatal(err)
			}
			return response.R
		}
		if a, b := r(n, d), r(ns/n, d*n*n/ns); math.Abs(a-b) > 1e-14 {
			t.Fatalf("n %g, %g nm: %g and %g", n, d, a, b)
		}
	}
	o := defaults(t)
	o.thickness = 83
	var table strings.Builder
	if err := run(o, &table); err != nil {
		t.Fatal(err)
	}
	if !strings.Contains(table.String(), "fits as well") {
		t.Errorf("no word of the other film:\n%s", table.String())
	}
}

// TestModels: films of every thickness are found, down to the ultraviolet edge of a
// nitride by the model with absorption; where the twin fits as well, the film is
// the best fit or the one that the program warns of. The published film is no exact
// Cauchy or Tauc-Lorentz film: 1 % of the thickness is room for that.
func TestModels(t *testing.T) {
	for _, v := range []struct {
		model, sample string
		first         float64
		thickness     []float64
	}{
		{"cauchy", "sinx209_vogt2015", 480, []float64{83, 220, 250, 300, 500, 800, 1200}},
		{"cauchy", "al2o3_zhukovsky2015", 400, []float64{83, 250}},
		{"tauclorentz", "sinx209_vogt2015", 300, []float64{83, 300, 500}},
		{"tauclorentz", "sinx213_vogt2015", 300, []float64{83}},
	} {
		for _, d := range v.thickness {
			o := defaults(t)
			o.model, o.sample, o.first, o.thickness, o.noise = v.model, v.sample, v.first, d, 0.001
			_, fits := fit(t, o, 0)
			found := fits[0].Params[0]
			if other, open, _ := rival(fits); open && math.Abs(other.Params[0]-d) < math.Abs(found-d) {
				found = other.Params[0]
			}
			if math.Abs(found-d) > 0.01*d {
				t.Errorf("%s, %s of %g nm: found %.2f nm, best %.2f nm", v.model, v.sample, d, found, fits[0].Params[0])
			}
		}
	}
}

// TestData: a file of the invented measurement gives the same fit; without its
// standard deviations the errors follow from the scatter, which is near the noise.
func TestData(t *testing.T) {
	o := defaults(t)
	m, err := measure(o)
	if err != nil {
		t.Fatal(err)
	}
	_, want := fit(t, o, 300)
	for _, columns := range []int{2, 3} {
		o.data = filepath.Join(o.out, "data.csv")
		f, err := os.Create(o.data)
		if err != nil {
			t.Fatal(err)
		}
		lines := [][]string{[]string{"wavelength_nm", "reflectance", "sigma"}[:columns], []string{"100", "0.5", "0.1"}[:columns]}
		for i, l := range m.wavelength {
			text := func(v float64) string { return strconv.FormatFloat(v, 'g', -1, 64) }
			lines = append(lines, []string{text(l), text(m.reflectance[i]), text(m.sigma[i])}[:columns])
		}
		if err := csv.NewWriter(f).WriteAll(lines); err != nil {
			t.Fatal(err)
		}
		f.Close()
		_, got := fit(t, o, 300)
		for j := range 4 {
			if math.Abs(got[0].Params[j]-want[0].Params[j]) > 1e-6*want[0].StdErr[j] {
				t.Errorf("%d columns: parameter %d %g, want %g", columns, j, got[0].Params[j], want[0].Params[j])
			}
		}
		if r := got[0].StdErr[0] / want[0].StdErr[0]; columns == 3 && math.Abs(r-1) > 1e-9 || math.Abs(r-1) > 0.25 {
			t.Errorf("%d columns: standard error of the thickness %g, want %g", columns, got[0].StdErr[0], want[0].StdErr[0])
		}
	}
}

func TestBadData(t *testing.T) {
	o := defaults(t)
	o.data = filepath.Join(o.out, "data.csv")
	good := "500,0.2\n510,0.2\n520,0.2\n530,0.2\n540,0.2\n550,0.2\n560,0.2\n570,0.2\n580,0.2\n590,0.2\n"
	const head = "wavelength_nm,reflectance\n"
	for text, word := range map[string]string{
		"":                                   "header",
		"lambda,R\n" + good:                  "header",
		head:                                 "0 rows",
		head + good + "600,x\n":              `line 12, reflectance "x"`,
		head + good + "600,NaN\n":            "line 12",
		head + good + "590,0.2\n":            "line 12",
		head + good + "600,20\n":             "line 12",
		head + good + "600\n":                "line 12",
		head + "500,0.2\n":                   "1 rows",
		head + "# remark\n" + good + "1,1\n": "line 13",
	} {
		if err := os.WriteFile(o.data, []byte(text), 0o644); err != nil {
			t.Fatal(err)
		}
		if err := run(o, io.Discard); err == nil || !strings.Contains(err.Error(), word) || strings.Contains(err.Error(), "\n") {
			t.Errorf("%q: error %v, want one line with %q", text, err, word)
		}
	}
}

func TestOptions(t *testing.T) {
	for _, change := range []func(*options){
		func(o *options) { o.first = 2000 }, func(o *options) { o.last = 490 }, func(o *options) { o.last = math.NaN() }, func(o *options) { o.thickness = -1 },
		func(o *options) { o.noise = 0 }, func(o *options) { o.guess = -1 }, func(o *options) { o.model = "x" },
		func(o *options) { o.sample = "x" }, func(o *options) { o.sample = "mapbi3_leguy2015" }, func(o *options) { o.data = "none.csv" },
		func(o *options) { o.figure = "x" },
	} {
		o := defaults(t)
		change(&o)
		if err := o.check(); err == nil || strings.Contains(err.Error(), "\n") {
			t.Errorf("%+v: error %v, want one line", o, err)
		}
	}
}
