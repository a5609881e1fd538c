// Command coating designs antireflection coatings on planar silicon. It finds
// the single and the double layer of any index that let most photons into the
// wafer, and the best thicknesses of published films with what they absorb, by
// analytic gradients; it says what an error of the thickness costs and which
// colour the wafer has, and maps the reflectance of one film over thickness and
// index. It writes coating.csv, coating_map.csv, coating_colours.csv,
// coating_spectra.csv and a figure.
//
// Optical constants and spectrum are published data; the pilot line, which runs
// the nitride sinx209_vogt2015, is invented.
package main

import (
	"flag"
	"fmt"
	"io"
	"os"
	"path/filepath"
)

func main() {
	var o options
	flags := flag.NewFlagSet("coating", flag.ContinueOnError)
	flags.SetOutput(io.Discard)
	flags.StringVar(&o.out, "out", "out", "folder for all files")
	flags.StringVar(&o.figure, "figure", "coating.png", "file of the figure, .png, .svg or .pdf")
	flags.StringVar(&o.films, "films", "sinx191_vogt2015,sinx209_vogt2015,sinx213_vogt2015", "materials for the film on silicon, of package nk")
	flags.StringVar(&o.outer, "outer", "mgf2_rodriguez2017", "material for a second film on top, of package nk")
	flags.Float64Var(&o.first, "from", 300, "first wavelength, nm")
	flags.Float64Var(&o.last, "to", 1200, "last wavelength, nm")
	flags.Float64Var(&o.spread, "spread", 5, "change of each thickness for the tolerance, %")
	err := flags.Parse(os.Args[1:])
	if err == flag.ErrHelp {
		flags.SetOutput(os.Stdout)
		flags.Usage()
		return
	}
	if err == nil && flags.NArg() > 0 {
		err = fmt.Errorf("unexpected argument %q", flags.Arg(0))
	}
	if err == nil {
		err = o.check()
	}
	if err != nil {
		fmt.Fprintln(os.Stderr, "coating:", err)
		os.Exit(2)
	}
	if err := run(o, os.Stdout); err != nil {
		fmt.Fprintln(os.Stderr, "coating:", err)
		os.Exit(1)
	}
}

// run finds the coatings and writes table, CSV files and figure.
func run(o options, stdout io.Writer) error {
	w, err := newWafer(o)
	if err != nil {
		return err
	}
	coatings, err := w.coatings(o)
	if err != nil {
		return err
	}
	m, err := w.chart(o)
	if err != nil {
		return err
	}
	table(stdout, o, w, coatings)
	if err := os.MkdirAll(o.out, 0o755); err != nil {
		return err
	}
	if err := write(o.out, w, m, coatings); err != nil {
		return err
	}
	if err := drawFigure(filepath.Join(o.out, o.figure), o, w, m, coatings); err != nil {
		return err
	}
	_, err = fmt.Fprintf(stdout, "\nwrote coating.csv, coating_map.csv, coating_colours.csv, coating_spectra.csv and %s into %s\n", o.figure, o.out)
	return err
}
