// Package check holds what the tests of the five packages share: rows of
// published values and comparison to their printed digits. No production
// package imports it; examples/handbook prints its rows.
package check

import (
	"encoding/csv"
	"errors"
	"fmt"
	"io"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"strings"
)

// Ways in which a published value is known. Every row carries one.
const (
	Read     = "read"     // the figure was read in the publication or in a copy or abstract of it
	Computed = "computed" // from a closed formula or from the data files, the formula named in the source
	Memory   = "memory"   // from memory only
	Practice = "practice" // common practice, no source
)

// Row is one published value with everything needed to recompute and judge it.
type Row struct {
	File     string // base name of the file the row stands in
	Line     int    // line of the file
	Quantity string // what is computed, for example "reflectance"
	Inputs   map[string]string
	Text     string  // the value as printed
	Value    float64 // the value
	Unit     string
	Tol      float64 // largest deviation that the printed digits allow
	Known    string  // Read, Computed, Memory or Practice
	Source   string
}

// Load reads a file of rows with the header
//
//	quantity,inputs,value,unit,tol,known,source
//
// inputs is a list "name=value; name=value". value stays as printed: with an
// empty tol the allowed deviation is half a unit of its last printed digit.
// A tol that is not empty must be justified in the source column.
// Lines that begin with # are comments.
func Load(path string) ([]Row, error) {
	f, err := os.Open(path)
	if err != nil {
		return nil, err
	}
	defer f.Close()
	r := csv.NewReader(f)
	r.Comment = '#'
	r.FieldsPerRecord = 7
	head, err := r.Read()
	if err != nil {
		return nil, fmt.Errorf("check: %s: %w", path, err)
	}
	if got := strings.Join(head, ","); got != "quantity,inputs,value,unit,tol,known,source" {
		return nil, fmt.Errorf("check: %s: header is %q", path, got)
	}
	var rows []Row
	for {
		rec, err := r.Read()
		if errors.Is(err, io.EOF) {
			break
		}
		if err != nil {
			return nil, fmt.Errorf("check: %s: %w", path, err)
		}
		line, _ := r.FieldPos(0)
		row, err := parseRow(rec)
		if err != nil {
			return nil, fmt.Errorf("check: %s:%d: %w", path, line, err)
		}
		row.File, row.Line = filepath.Base(path), line
		rows = append(rows, row)
	}
	if len(rows) == 0 {
		return nil, fmt.Errorf("check: %s holds no rows", path)
	}
	return rows, nil
}

func parseRow(rec []string) (Row, error) {
	row := Row{Quantity: rec[0], Inputs: map[string]string{}, Text: rec[2], Unit: rec[3], Known: rec[5], Source: rec[6]}
	for _, kv := range strings.Split(rec[1], ";") {
		if kv = strings.TrimSpace(kv); kv == "" {
			continue
		}
		k, v, ok := strings.Cut(kv, "=")
		if !ok {
			return row, fmt.Errorf("input %q is not name=value", kv)
		}
		row.Inputs[strings.TrimSpace(k)] = strings.TrimSpace(v)
	}
	var err error
	if row.Value, err = strconv.ParseFloat(rec[2], 64); err != nil {
		return row, err
	}
	if rec[4] == "" {
		row.Tol = HalfDigit(rec[2])
	} else if row.Tol, err = strconv.ParseFloat(rec[4], 64); err != nil {
		return row, err
	}
	switch row.Known {
	case Read, Computed, Memory, Practice:
	default:
		return row, fmt.Errorf("known is %q, want read, computed, memory or practice", row.Known)
	}
	if row.Source == "" {
		return row, errors.New("no source")
	}
	return row, nil
}

// HalfDigit returns half a unit of the last digit of a printed decimal number,
// with room for the rounding of binary arithmetic: 0.0126 -> 0.00005.
func HalfDigit(text string) float64 {
	mant, exp, _ := strings.Cut(strings.ToLower(text), "e")
	e, _ := strconv.Atoi(exp)
	if _, frac, ok := strings.Cut(mant, "."); ok {
		e -= len(frac)
	}
	v, _ := strconv.ParseFloat(text, 64)
	return 0.5*math.Pow10(e) + 4e-16*math.Abs(v)
}

// Num returns the input name as a number; NaN if it is missing or not a number,
// so that a misspelt input fails the comparison.
func (r Row) Num(name string) float64 {
	v, err := strconv.ParseFloat(r.Inputs[name], 64)
	if err != nil {
		return math.NaN()
	}
	return v
}

// Judge compares a computed value with the row: nil, or an error with both
// values, the deviation, the tolerance and the source.
func (r Row) Judge(got float64) error {
	if dev := math.Abs(got - r.Value); !(dev <= r.Tol) {
		return fmt.Errorf("%s:%d: %s(%v) = %.15g %s, published %s, deviation %.3g > %.3g (%s; %s)",
			r.File, r.Line, r.Quantity, r.Inputs, got, r.Unit, r.Text, dev, r.Tol, r.Known, r.Source)
	}
	return nil
}
