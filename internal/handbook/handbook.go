// Package handbook computes the rows of published values in testdata/handbook
// with the five packages. Their tests judge the results, examples/handbook
// prints them.
package handbook

import (
	"fmt"
	"path/filepath"
	"sort"
	"strings"

	"photonledger/internal/check"
)

// quantities maps the beginning of a file name to the function that computes its
// rows.
var quantities = map[string]func(check.Row) (float64, error){
	"absorb":    absorbQuantity,
	"nk":        nkQuantity,
	"optics":    opticsQuantity,
	"spectrum":  spectrumQuantity,
	"lighttrap": lighttrapQuantity,
	// Values that need several packages.
	"integration": integrationQuantity,
}

// Load returns all rows of the files in dir whose names begin with prefix.
func Load(dir, prefix string) ([]check.Row, error) {
	files, err := filepath.Glob(filepath.Join(dir, prefix+"*.csv"))
	if err != nil {
		return nil, err
	}
	if len(files) == 0 {
		return nil, fmt.Errorf("handbook: no files %s*.csv in %s", prefix, dir)
	}
	sort.Strings(files)
	var all []check.Row
	for _, f := range files {
		rows, err := check.Load(f)
		if err != nil {
			return nil, err
		}
		all = append(all, rows...)
	}
	return all, nil
}

// Evaluate computes the quantity of a row.
func Evaluate(row check.Row) (float64, error) {
	name, _, _ := strings.Cut(row.File, "_")
	f, ok := quantities[name]
	if !ok {
		return 0, fmt.Errorf("%s:%d: no package computes this file", row.File, row.Line)
	}
	v, err := f(row)
	if err != nil {
		return 0, fmt.Errorf("%s:%d: %w", row.File, row.Line, err)
	}
	return v, nil
}

// Failer is what Check needs of a *testing.T.
type Failer interface {
	Helper()
	Error(args ...any)
	Fatal(args ...any)
}

// Check loads the rows of a package, computes each and reports those that miss
// the published value.
func Check(t Failer, dir, prefix string) {
	t.Helper()
	rows, err := Load(dir, prefix)
	if err != nil {
		t.Fatal(err)
	}
	for _, row := range rows {
		got, err := Evaluate(row)
		if err == nil {
			err = row.Judge(got)
		}
		if err != nil {
			t.Error(err)
		}
	}
}
