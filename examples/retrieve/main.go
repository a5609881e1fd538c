// Command retrieve finds the thickness and the dispersion of a coating on
// silicon from a reflectance spectrum at normal incidence, with standard errors
// and correlations, and writes retrieve.csv and a figure.
//
// Without -data the measurement is made by the program itself: the reflectance of
// a published silicon nitride film, a witness of the pilot line, with noise from a
// seeded generator. It is invented and the program says so.
//
// Of a thin film without loss the reflectance alone leaves two indices, n and
// that of silicon over n; only dispersion and several fringes decide. The program
// says where a measurement does not.
//
// A file for -data has the header wavelength_nm,reflectance or
// wavelength_nm,reflectance,sigma; reflectances and their standard deviations
// are shares 0..1, wavelengths ascend, and lines that begin with # are comments.
// Without sigma the standard errors follow from the scatter of the residuals.
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
	flags := flag.NewFlagSet("retrieve", flag.ContinueOnError)
	flags.SetOutput(io.Discard)
	flags.StringVar(&o.out, "out", "out", "folder for retrieve.csv and the figure")
	flags.StringVar(&o.figure, "figure", "retrieve.png", "file of the figure, .png, .svg or .pdf")
	flags.StringVar(&o.data, "data", "", "CSV file of a measurement: wavelength_nm,reflectance or with a third column sigma")
	flags.StringVar(&o.model, "model", "cauchy", "dispersion of the film, cauchy or tauclorentz")
	flags.Float64Var(&o.first, "from", 480, "first wavelength of the fit, nm")
	flags.Float64Var(&o.last, "to", 1000, "last wavelength of the fit, nm")
	flags.StringVar(&o.sample, "sample", "sinx209_vogt2015", "material of the invented film, of package nk")
	flags.Float64Var(&o.thickness, "film", 300, "thickness of the invented film, nm")
	flags.Float64Var(&o.noise, "noise", 0.002, "standard deviation of an invented reflectance")
	flags.Uint64Var(&o.seed, "seed", 1, "seed of the noise")
	flags.Float64Var(&o.guess, "guess", 0, "thickness to start from, nm; 0 tries all from 20 nm to 1500 nm")
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
		fmt.Fprintln(os.Stderr, "retrieve:", err)
		os.Exit(2)
	}
	if err := run(o, os.Stdout); err != nil {
		fmt.Fprintln(os.Stderr, "retrieve:", err)
		os.Exit(1)
	}
}

// run fits the measurement and writes table, CSV and figure.
func run(o options, stdout io.Writer) error {
	m, err := measure(o)
	if err != nil {
		return err
	}
	f := &fitter{measurement: m, dispersion: dispersions[o.model]()}
	fits, err := f.retrieve(o.guess)
	if err != nil {
		return err
	}
	if err := f.table(stdout, fits); err != nil {
		return err
	}
	if err := os.MkdirAll(o.out, 0o755); err != nil {
		return err
	}
	if err := f.writeCSV(filepath.Join(o.out, "retrieve.csv"), fits[0]); err != nil {
		return err
	}
	if err := drawFigure(filepath.Join(o.out, o.figure), m, fits[0]); err != nil {
		return err
	}
	_, err = fmt.Fprintf(stdout, "\nwrote retrieve.csv and %s into %s\n", o.figure, o.out)
	return err
}
