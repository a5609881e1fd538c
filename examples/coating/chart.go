package main

import (
	"encoding/csv"
	"fmt"
	"math"
	"os"
	"strconv"

	"gonum.org/v1/gonum/floats"

	"photonledger/spectrum"
)

// chart holds the weighted reflectance of one film over thickness and index, and
// the colour of the wafer under the film of the best index.
type chart struct {
	thickness, index []float64
	reflected        [][]float64 // [index][thickness]
	colours          []spectrum.Tristimulus
}

func (w *wafer) chart() (*chart, error) {
	m := &chart{thickness: floats.Span(make([]float64, 81), 40, 200), index: floats.Span(make([]float64, 41), 1.4, 2.8)}
	for _, n := range m.index {
		var row []float64
		for _, d := range m.thickness {
			one := design{thickness: []float64{d}}
			s, err := w.sweep([]float64{n}, one.thickness)
			if err != nil {
				return nil, err
			}
			r, err := s.Run()
			if err != nil {
				return nil, err
			}
			row = append(row, floats.Dot(w.weights, r.R))
		}
		m.reflected = append(m.reflected, row)
	}
	for _, d := range m.thickness {
		one := design{thickness: []float64{d}}
		s, err := w.sweep([]float64{swatchIndex}, one.thickness)
		if err == nil {
			err = w.judge(&one, s, 0)
		}
		if err != nil {
			return nil, err
		}
		m.colours = append(m.colours, one.colour)
	}
	return m, nil
}

// swatchIndex is the index of the film whose colours are shown.
const swatchIndex = 2.0

// Dims, X, Y and Z make the chart a grid of gonum/plot.
func (m *chart) Dims() (c, r int)   { return len(m.thickness), len(m.index) }
func (m *chart) X(c int) float64    { return m.thickness[c] }
func (m *chart) Y(r int) float64    { return m.index[r] }
func (m *chart) Z(c, r int) float64 { return m.reflected[r][c] }

func number(v float64) string { return strconv.FormatFloat(v, 'g', 8, 64) }

func (m *chart) write(path string) error {
	lines := [][]string{{"index", "thickness_nm", "reflected"}}
	for r, n := range m.index {
		for c, d := range m.thickness {
			lines = append(lines, []string{number(n), number(d), number(m.reflected[r][c])})
		}
	}
	return writeLines(path, lines)
}

func writeDesigns(path string, designs []design) error {
	lines := [][]string{{"coating", "index_1", "thickness_1_nm", "index_2", "thickness_2_nm", "reflected", "absorbed", "reflected_thinner", "reflected_thicker", "chromaticity_x", "chromaticity_y", "luminance_percent"}}
	for _, d := range designs {
		line := []string{d.name, number(d.index[0]), number(d.thickness[0]), "", ""}
		if len(d.index) > 1 {
			line[3], line[4] = number(d.index[1]), number(d.thickness[1])
		}
		x, y := d.colour.Chromaticity()
		for _, v := range []float64{d.reflected, d.absorbed, d.thinner, d.thicker, x, y, d.colour.Y} {
			line = append(line, number(v))
		}
		lines = append(lines, line)
	}
	return writeLines(path, lines)
}

func writeLines(path string, lines [][]string) error {
	f, err := os.Create(path)
	if err != nil {
		return err
	}
	defer f.Close()
	if err := csv.NewWriter(f).WriteAll(lines); err != nil {
		return err
	}
	return f.Close()
}

// hex writes a colour as sRGB, an asterisk where the screen cannot show it.
func hex(t spectrum.Tristimulus) string {
	rgb, inside := t.SRGB()
	mark := ""
	if !inside {
		mark = " *"
	}
	byteOf := func(v float64) int { return int(math.Round(255 * min(1, max(0, v)))) }
	return fmt.Sprintf("#%02x%02x%02x%s", byteOf(rgb[0]), byteOf(rgb[1]), byteOf(rgb[2]), mark)
}
