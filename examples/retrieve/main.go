// Command retrieve finds the thickness and the dispersion of a coating on
// silicon from a reflectance spectrum, with standard errors, and writes
// retrieve.csv and retrieve.png.
//
// Without -data the measurement is made by the program itself: the reflectance of
// a published silicon nitride film of known thickness with noise from a seeded
// generator. It is invented and says so.
package main

import (
	"encoding/csv"
	"flag"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"strconv"
)

type options struct {
	out       string
	thickness float64 // nm, of the film that is measured
	noise     float64 // standard deviation of a reflectance
	seed      uint64
	guess     float64 // nm
}

func main() {
	var o options
	flags := flag.NewFlagSet("retrieve", flag.ContinueOnError)
	flags.SetOutput(io.Discard)
	flags.StringVar(&o.out, "out", "out", "folder for retrieve.csv and retrieve.png")
	flags.Float64Var(&o.thickness, "film", 83, "true thickness of the invented sample, nm")
	flags.Float64Var(&o.noise, "noise", 0.002, "standard deviation of its measured reflectances")
	flags.Uint64Var(&o.seed, "seed", 1, "of the noise")
	flags.Float64Var(&o.guess, "guess", 70, "thickness to start from, nm")
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
	case !(o.thickness >= 20 && o.thickness <= 1000):
		err = fmt.Errorf("-film %g: want 20 to 1000 nm", o.thickness)
	case !(o.noise > 0 && o.noise <= 0.1):
		err = fmt.Errorf("-noise %g: want a share above 0, at most 0.1", o.noise)
	case !(o.guess >= 20 && o.guess <= 1000):
		err = fmt.Errorf("-guess %g: want 20 to 1000 nm", o.guess)
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

func run(o options, stdout io.Writer) error {
	s, err := newSample(o)
	if err != nil {
		return err
	}
	fit, err := s.retrieve(o.guess)
	if err != nil {
		return err
	}
	fmt.Fprintf(stdout, "Invented measurement: %d reflectances of a published nitride, %g nm on silicon, noise %g, seed %d\n\n", len(s.measured), o.thickness, o.noise, o.seed)
	fmt.Fprintf(stdout, "%-22s %12s %12s", "parameter", "value", "+-")
	for _, name := range parameters {
		fmt.Fprintf(stdout, " %12s", name)
	}
	fmt.Fprintln(stdout, "   (correlation)")
	for j, name := range parameters {
		fmt.Fprintf(stdout, "%-22s %12.6g %12.2g", name, fit.Params[j], fit.StdErr[j])
		for k := range parameters {
			fmt.Fprintf(stdout, " %12.3f", fit.Correlation[j][k])
		}
		fmt.Fprintln(stdout)
	}
	n, sigma := s.indexAt(fit, 633)
	fmt.Fprintf(stdout, "\nindex at 633 nm %.4f +- %.4f, of the sample %.4f\n", n, sigma, s.trueIndex(633))
	fmt.Fprintf(stdout, "reduced chi-square %.3f with %d degrees of freedom, %d iterations\n", fit.ReducedChiSquare, fit.DOF, fit.Iterations)
	if err := os.MkdirAll(o.out, 0o755); err != nil {
		return err
	}
	if err := s.writeCSV(filepath.Join(o.out, "retrieve.csv"), fit.Residuals); err != nil {
		return err
	}
	if err := drawFigure(filepath.Join(o.out, "retrieve.png"), s, fit.Residuals); err != nil {
		return err
	}
	_, err = fmt.Fprintf(stdout, "\nwrote retrieve.csv and retrieve.png into %s\n", o.out)
	return err
}

func (s *sample) writeCSV(path string, residuals []float64) error {
	f, err := os.Create(path)
	if err != nil {
		return err
	}
	defer f.Close()
	out := csv.NewWriter(f)
	lines := [][]string{{"wavelength_nm", "measured", "fitted", "residual"}}
	number := func(v float64) string { return strconv.FormatFloat(v, 'g', 9, 64) }
	for i, l := range s.wavelength {
		lines = append(lines, []string{number(l), number(s.measured[i]), number(s.measured[i] - residuals[i]), number(residuals[i])})
	}
	if err := out.WriteAll(lines); err != nil {
		return err
	}
	return f.Close()
}
