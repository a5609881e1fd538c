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
)

// table prints what every layer takes and what 1 % of its thickness changes.
func (c *cell) table(stdout io.Writer, m point) {
	const row = "%-21s %9s %8s | %11s %11s %11s %11s\n"
	fmt.Fprintf(stdout, "Invented pilot line, two terminals, AM1.5 global %g nm to %g nm\n", c.sweep.Wavelength[0], c.sweep.Wavelength[len(c.weights)-1])
	fmt.Fprintf(stdout, "Both junctions give %.3f mA/cm² at %.1f nm of perovskite.\n\n", m.top, m.thickness)
	fmt.Fprintf(stdout, "%-21s %9s %8s | changes by 1 %% more of the layer\n", "", "", "")
	fmt.Fprintf(stdout, row, "layer", "thickness", "takes", "perovskite", "silicon", "match at", "matched")
	fmt.Fprintf(stdout, row, "", "nm", "mA/cm²", "µA/cm²", "µA/cm²", "nm", "µA/cm²")
	for j, l := range c.layers {
		// micro is the change of a current, in µA/cm² rounded to 0.1.
		percent := 0.01 * c.sweep.Thickness[j]
		micro := func(slope float64) string { return fmt.Sprintf("%+.1f", math.Round(1e4*percent*slope)/10+0) }
		e := m.effects[j]
		match, matched := fmt.Sprintf("%+.3f", percent*e.match), micro(e.matched)
		if j == perovskite {
			match, matched = "", "" // it is what is matched
		}
		fmt.Fprintf(stdout, row, l.name, fmt.Sprintf("%.1f", c.sweep.Thickness[j]), fmt.Sprintf("%.3f", m.takes[j]), micro(e.top), micro(e.bottom), match, matched)
	}
	for _, v := range []struct {
		name  string
		takes float64
	}{{c.metal.name, m.transmitted}, {"reflected or escaped", m.reflected}, {"total", m.total}} {
		fmt.Fprintf(stdout, row, v.name, "", fmt.Sprintf("%.3f", v.takes), "", "", "", "")
	}
}

func number(v float64) string { return strconv.FormatFloat(v, 'g', 8, 64) }

// write writes the three CSV files into a folder: shares at the match, layers,
// and currents over the thickness of the perovskite.
func (c *cell) write(folder string, curve []point, m point) error {
	shares := [][]string{{"wavelength_nm", "reflected_or_escaped"}}
	layers := [][]string{{"layer", "thickness_nm", "takes_mA_cm2", "perovskite_mA_cm2_per_nm", "silicon_mA_cm2_per_nm", "match_nm_per_nm", "matched_mA_cm2_per_nm"}}
	for j, l := range c.layers {
		shares[0] = append(shares[0], strings.ReplaceAll(l.name, " ", "_"))
		e := m.effects[j]
		line := []string{l.name, number(c.sweep.Thickness[j]), number(m.takes[j]), number(e.top), number(e.bottom), number(e.match), number(e.matched)}
		if j == perovskite {
			line[5], line[6] = "", ""
		}
		layers = append(layers, line)
	}
	shares[0] = append(shares[0], "rear_metal")
	w := len(c.weights)
	for i, l := range c.sweep.Wavelength {
		line := []string{number(l), number(m.response.R[i])}
		for j := range c.layers {
			line = append(line, number(m.response.A[j*w+i]))
		}
		shares = append(shares, append(line, number(m.response.T[i])))
	}
	currents := [][]string{{"perovskite_nm", "perovskite_mA_cm2", "silicon_mA_cm2", "beyond_edge_mA_cm2"}}
	for _, p := range curve {
		currents = append(currents, []string{number(p.thickness), number(p.top), number(p.bottom), number(p.tail)})
	}
	return errors.Join(
		writeLines(filepath.Join(folder, "tandem.csv"), shares),
		writeLines(filepath.Join(folder, "tandem_layers.csv"), layers),
		writeLines(filepath.Join(folder, "tandem_thickness.csv"), currents),
	)
}

func writeLines(path string, lines [][]string) error {
	f, err := os.Create(path)
	if err != nil {
		return err
	}
	return errors.Join(csv.NewWriter(f).WriteAll(lines), f.Close())
}
