package check

import (
	"bytes"
	"encoding/csv"
	"errors"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"strconv"
)

// CompareCSV compares the numbers of a CSV file that a program wrote with a kept
// one: the same header, the same number of lines, texts alike, numbers within
// abs + rel times the kept value. With update it writes the kept file instead.
func CompareCSV(golden, written string, abs, rel float64, update bool) error {
	got, err := os.ReadFile(written)
	if err != nil {
		return err
	}
	if update {
		if err := os.MkdirAll(filepath.Dir(golden), 0o755); err != nil {
			return err
		}
		return os.WriteFile(golden, got, 0o644)
	}
	want, err := os.ReadFile(golden)
	if err != nil {
		return err
	}
	g, err := csv.NewReader(bytes.NewReader(got)).ReadAll()
	if err != nil {
		return fmt.Errorf("%s: %w", written, err)
	}
	w, err := csv.NewReader(bytes.NewReader(want)).ReadAll()
	if err != nil {
		return fmt.Errorf("%s: %w", golden, err)
	}
	if len(g) != len(w) {
		return fmt.Errorf("%s has %d lines, %s has %d", written, len(g), golden, len(w))
	}
	var all []error
	for i := range w {
		if len(g[i]) != len(w[i]) {
			return fmt.Errorf("line %d has %d fields, want %d", i+1, len(g[i]), len(w[i]))
		}
		for j := range w[i] {
			if err := compareField(g[i][j], w[i][j], abs, rel); err != nil {
				all = append(all, fmt.Errorf("line %d, %s: %w", i+1, w[0][j], err))
			}
		}
	}
	if len(all) > 5 {
		all = append(all[:5], fmt.Errorf("and %d more", len(all)-5))
	}
	return errors.Join(all...)
}

func compareField(got, want string, abs, rel float64) error {
	x, err1 := strconv.ParseFloat(got, 64)
	y, err2 := strconv.ParseFloat(want, 64)
	if err1 != nil || err2 != nil {
		if got != want {
			return fmt.Errorf("%q, want %q", got, want)
		}
		return nil
	}
	if dev := math.Abs(x - y); !(dev <= abs+rel*math.Abs(y)) {
		return fmt.Errorf("%s, want %s, deviation %.3g", got, want, dev)
	}
	return nil
}
