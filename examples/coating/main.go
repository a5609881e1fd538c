// Command coating designs antireflection coatings on planar silicon: a map of
// the photon-weighted reflectance over thickness and index of one film, the best
// single and double layer by analytic gradients, published nitrides with their
// absorption, the band that 5 % of thickness costs, and the colours of the wafer.
// It writes coating.csv, coating_map.csv and coating.png.
//
// Optical constants and spectrum are published data; the pilot line is invented.
package main

import (
	"flag"
	"fmt"
	"io"
	"os"
	"path/filepath"
)

type options struct {
	out         string
	first, last float64 // nm, range of the weighted reflectance
	spread      float64 // relative change of the thickness
}

func main() {
	var o options
	flags := flag.NewFlagSet("coating", flag.ContinueOnError)
	flags.SetOutput(io.Discard)
	flags.StringVar(&o.out, "out", "out", "folder for coating.csv, coating_map.csv and coating.png")
	flags.Float64Var(&o.first, "from", 300, "first wavelength, nm")
	flags.Float64Var(&o.last, "to", 1200, "last wavelength, nm")
	flags.Float64Var(&o.spread, "spread", 0.05, "relative change of all thicknesses for the tolerance band")
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
	case !(o.first >= 300 && o.first < o.last-50 && o.last <= 1200):
		err = fmt.Errorf("-from %g -to %g: want a range within 300 to 1200 nm", o.first, o.last)
	case !(o.spread >= 0 && o.spread < 0.5):
		err = fmt.Errorf("-spread %g: want 0 to 0.5", o.spread)
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

func run(o options, stdout io.Writer) error {
	w, err := newWafer(o)
	if err != nil {
		return err
	}
	designs, err := w.designs(o.spread)
	if err != nil {
		return err
	}
	fmt.Fprintf(stdout, "Planar silicon, AM1.5 global %g nm to %g nm, shares of the photons\n\n", o.first, o.last)
	fmt.Fprintf(stdout, "%-30s %8s %8s %8s %8s %10s %9s %9s %8s   %s\n", "coating", "index", "nm", "index", "nm", "reflected", "absorbed",
		fmt.Sprintf("-%g %%", 100*o.spread), fmt.Sprintf("+%g %%", 100*o.spread), "colour (sRGB)")
	for _, d := range designs {
		second := fmt.Sprintf("%8s %8s", "", "")
		if len(d.thickness) > 1 {
			second = fmt.Sprintf("%8.4f %8.2f", d.index[1], d.thickness[1])
		}
		fmt.Fprintf(stdout, "%-30s %8.4f %8.2f %s %10.5f %9.5f %9.5f %8.5f   %s\n", d.name, d.index[0], d.thickness[0], second,
			d.reflected, d.absorbed, d.thinner, d.thicker, hex(d.colour))
	}
	fmt.Fprintln(stdout, "\nindices of the published nitrides at 633 nm; reflected at a thinner and a thicker coating")
	m, err := w.chart()
	if err != nil {
		return err
	}
	if err := os.MkdirAll(o.out, 0o755); err != nil {
		return err
	}
	if err := writeDesigns(filepath.Join(o.out, "coating.csv"), designs); err != nil {
		return err
	}
	if err := m.write(filepath.Join(o.out, "coating_map.csv")); err != nil {
		return err
	}
	if err := drawFigure(filepath.Join(o.out, "coating.png"), m, designs); err != nil {
		return err
	}
	_, err = fmt.Fprintf(stdout, "\nwrote coating.csv, coating_map.csv and coating.png into %s\n", o.out)
	return err
}
