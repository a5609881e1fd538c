package main

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

	"photonledger/spectrum"
)

// table prints the coatings.
func table(stdout io.Writer, o options, w *wafer, coatings []coating) {
	fmt.Fprintf(stdout, "Planar silicon of an invented pilot line, AM1.5 global %g nm to %g nm, %.3f mA/cm² of photons\n\n", o.first, o.last, w.incident)
	const row = "%-42s %7s %7s %7s %7s %10s %9s %8s %9s   %s\n"
	fmt.Fprintf(stdout, row, "coating, from outside", "index", "nm", "index", "nm", "reflected", "absorbed", "enters", fmt.Sprintf("±%g %%", o.spread), "colour")
	fmt.Fprintf(stdout, row, "", "", "", "", "", "", "", "mA/cm²", "mA/cm²", "")
	hidden := false
	for _, c := range coatings {
		cells := make([]string, 4)
		for j, f := range c.films {
			cells[2*j], cells[2*j+1] = fmt.Sprintf("%.4f", f.index), fmt.Sprintf("%.2f", f.thickness)
		}
		text, inside := hex(c.colour)
		if !inside {
			text, hidden = text+" *", true
		}
		fmt.Fprintf(stdout, row, c.name, cells[0], cells[1], cells[2], cells[3], fmt.Sprintf("%.5f", c.reflected), fmt.Sprintf("%.5f", c.absorbed),
			fmt.Sprintf("%.3f", w.incident*c.entered), fmt.Sprintf("%.3f", w.incident*(c.worst-c.entered)), text)
	}
	fmt.Fprintf(stdout, "\nindex of a published film at 633 nm; ±%g %%: worst change with every film thinner or thicker\n", o.spread)
	fmt.Fprintln(stdout, "colour: sRGB of the mirrored daylight D65, seen by the CIE 1931 observer")
	if hidden {
		fmt.Fprintln(stdout, "* more saturated than a screen can show")
	}
}

// hex writes a colour as sRGB and says whether a screen can show it.
func hex(t spectrum.Tristimulus) (string, bool) {
	rgb, inside := t.SRGB()
	b := func(v float64) int { return int(math.Round(255 * v)) }
	return fmt.Sprintf("#%02x%02x%02x", b(rgb[0]), b(rgb[1]), b(rgb[2])), inside
}

func number(v float64) string { return strconv.FormatFloat(v, 'g', 8, 64) }

// write writes the CSV files into a folder.
func write(folder string, w *wafer, m *chart, coatings []coating) error {
	designs := [][]string{{
		"coating", "index_1", "thickness_1_nm", "index_2", "thickness_2_nm", "reflected", "absorbed", "entered",
		"entered_thinner", "entered_thicker", "entered_worst", "chromaticity_x", "chromaticity_y", "luminance",
	}}
	spectra := [][]string{{"wavelength_nm"}}
	for _, c := range coatings {
		line := make([]string, 5)
		line[0] = c.name
		for j, f := range c.films {
			line[1+2*j], line[2+2*j] = number(f.index), number(f.thickness)
		}
		x, y := c.colour.Chromaticity()
		for _, v := range []float64{c.reflected, c.absorbed, c.entered, c.thinner, c.thicker, c.worst, x, y, c.colour.Y} {
			line = append(line, number(v))
		}
		designs = append(designs, line)
		spectra[0] = append(spectra[0], "reflectance_"+strings.NewReplacer(" ", "_", ",", "").Replace(c.name))
	}
	for i, l := range w.wavelength {
		line := []string{number(l)}
		for _, c := range coatings {
			line = append(line, number(c.spectrum[i]))
		}
		spectra = append(spectra, line)
	}
	reflected := [][]string{{"index", "thickness_nm", "reflected"}}
	for r, n := range m.index {
		for c, d := range m.thickness {
			reflected = append(reflected, []string{number(n), number(d), number(m.reflected[r][c])})
		}
	}
	colours := [][]string{{"film", "thickness_nm", "chromaticity_x", "chromaticity_y", "luminance", "srgb"}}
	for k, f := range m.films {
		for c, d := range m.thickness {
			t := m.colours[k][c]
			x, y := t.Chromaticity()
			text, _ := hex(t)
			colours = append(colours, []string{f.material, number(d), number(x), number(y), number(t.Y), text})
		}
	}
	return errors.Join(
		writeLines(filepath.Join(folder, "coating.csv"), designs),
		writeLines(filepath.Join(folder, "coating_spectra.csv"), spectra),
		writeLines(filepath.Join(folder, "coating_map.csv"), reflected),
		writeLines(filepath.Join(folder, "coating_colours.csv"), colours),
	)
}

func writeLines(path string, lines [][]string) error {
	f, err := os.Create(path)
	if err != nil {
		return err
	}
	return errors.Join(csv.NewWriter(f).WriteAll(lines), f.Close())
}
