// Command generation computes the generation rate G(x) on a user's mesh, ready
// for a device simulator: in the absorber of a thin-film cell, from the coherent
// absorption profiles of its films, and in a textured silicon wafer, from traced
// rays. It checks that the cells add up to the absorbed photons, and writes
// generation.csv and generation.png.
//
// The cells of the pilot line are invented. Optical constants and spectrum are
// published data.
package main

import (
	"bufio"
	"encoding/csv"
	"flag"
	"fmt"
	"io"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"strings"

	"photonledger/absorb"
)

type options struct {
	out, mesh string
	cells     int
	absorber  float64 // nm, of the thin film
	wafer     float64 // µm
}

// profile is the generation in one device.
type profile struct {
	name     string
	mesh     []float64 // nm, boundaries from the lit face
	rate     []float64 // cm^-3 s^-1, one per cell
	absorbed float64   // mA/cm², from the absorptance alone
	stdError float64   // of absorbed, mA/cm²; 0 where nothing is sampled
}

func main() {
	var o options
	flags := flag.NewFlagSet("generation", flag.ContinueOnError)
	flags.SetOutput(io.Discard)
	flags.StringVar(&o.out, "out", "out", "folder for generation.csv and generation.png")
	flags.StringVar(&o.mesh, "mesh", "", "file with the boundaries of the cells as shares 0..1 of the thickness, one per line, ascending")
	flags.IntVar(&o.cells, "cells", 60, "cells of the built-in mesh, finer towards the lit face")
	flags.Float64Var(&o.absorber, "absorber", 2000, "thickness of the thin-film absorber, nm")
	flags.Float64Var(&o.wafer, "wafer", 160, "thickness of the wafer, µm")
	err := flags.Parse(os.Args[1:])
	if err == flag.ErrHelp {
		flags.SetOutput(os.Stdout)
		flags.Usage()
		return
	}
	switch {
	case err != nil:
	case flags.NArg() > 0:
		err = fmt.Errorf("unexpected argument %q", flags.Arg(0))
	case o.cells < 2 || o.cells > 10000:
		err = fmt.Errorf("-cells %d: want 2 to 10000", o.cells)
	case !(o.absorber >= 50 && o.absorber <= 10000):
		err = fmt.Errorf("-absorber %g: want 50 to 10000 nm", o.absorber)
	case !(o.wafer >= 10 && o.wafer <= 1000):
		err = fmt.Errorf("-wafer %g: want 10 to 1000 µm", o.wafer)
	}
	var shares []float64
	if err == nil {
		shares, err = meshShares(o)
	}
	if err != nil {
		fmt.Fprintln(os.Stderr, "generation:", err)
		os.Exit(2)
	}
	if err := run(o, shares, os.Stdout); err != nil {
		fmt.Fprintln(os.Stderr, "generation:", err)
		os.Exit(1)
	}
}

// meshShares returns the boundaries of the cells in units of the thickness.
func meshShares(o options) ([]float64, error) {
	if o.mesh == "" {
		shares := make([]float64, o.cells+1)
		for i := range shares {
			shares[i] = math.Pow(float64(i)/float64(o.cells), 3)
		}
		return shares, nil
	}
	f, err := os.Open(o.mesh)
	if err != nil {
		return nil, err
	}
	defer f.Close()
	var shares []float64
	lines := bufio.NewScanner(f)
	for n := 1; lines.Scan(); n++ {
		text := strings.TrimSpace(lines.Text())
		if text == "" || text[0] == '#' {
			continue
		}
		v, err := strconv.ParseFloat(text, 64)
		if err != nil || !(v >= 0 && v <= 1) || len(shares) > 0 && !(v > shares[len(shares)-1]) {
			return nil, fmt.Errorf("-mesh %s:%d: %q is not a share of 0 to 1 above the one before", o.mesh, n, text)
		}
		shares = append(shares, v)
	}
	if len(shares) < 2 {
		return nil, fmt.Errorf("-mesh %s: want two boundaries or more", o.mesh)
	}
	return shares, lines.Err()
}

func run(o options, shares []float64, stdout io.Writer) error {
	film, err := thinFilm(o.absorber, shares)
	if err != nil {
		return err
	}
	wafer, err := texturedWafer(o.wafer*nmPerMicron, shares)
	if err != nil {
		return err
	}
	profiles := []profile{film, wafer}
	fmt.Fprintf(stdout, "Invented pilot line, AM1.5 global\n\n%-32s %8s %12s %12s %12s %14s\n", "device", "cells", "from cells", "absorbed", "+-", "at lit face")
	fmt.Fprintf(stdout, "%-32s %8s %12s %12s %12s %14s\n", "", "", "mA/cm²", "mA/cm²", "mA/cm²", "cm^-3 s^-1")
	for _, p := range profiles {
		current, err := absorb.GenerationCurrent(p.mesh, p.rate)
		if err != nil {
			return err
		}
		fmt.Fprintf(stdout, "%-32s %8d %12.5f %12.5f %12.5f %14.3e\n", p.name, len(p.rate), current, p.absorbed, p.stdError, p.rate[0])
	}
	if err := os.MkdirAll(o.out, 0o755); err != nil {
		return err
	}
	if err := writeCSV(filepath.Join(o.out, "generation.csv"), profiles); err != nil {
		return err
	}
	if err := drawFigure(filepath.Join(o.out, "generation.png"), profiles); err != nil {
		return err
	}
	_, err = fmt.Fprintf(stdout, "\nwrote generation.csv and generation.png into %s\n", o.out)
	return err
}

func writeCSV(path string, profiles []profile) error {
	f, err := os.Create(path)
	if err != nil {
		return err
	}
	defer f.Close()
	out := csv.NewWriter(f)
	lines := [][]string{{"device", "from_nm", "to_nm", "generation_per_cm3_s"}}
	number := func(v float64) string { return strconv.FormatFloat(v, 'g', 9, 64) }
	for _, p := range profiles {
		for c, rate := range p.rate {
			lines = append(lines, []string{p.name, number(p.mesh[c]), number(p.mesh[c+1]), number(rate)})
		}
	}
	if err := out.WriteAll(lines); err != nil {
		return err
	}
	return f.Close()
}
