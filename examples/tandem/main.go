// Command tandem designs a two-terminal cell of perovskite on silicon: the
// absorptance of every layer, the photocurrents of both junctions, the thickness
// of the perovskite at which they match, and how the match depends on every
// layer. It writes tandem.csv and tandem.png.
//
// The layers are those of an invented pilot line. Optical constants and spectrum
// are published data.
package main

import (
	"encoding/csv"
	"flag"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"strconv"
	"strings"
)

type options struct {
	out         string
	wafer       float64 // µm
	front, back float64 // nm, transparent oxide in front and between the junctions
}

func main() {
	var o options
	flags := flag.NewFlagSet("tandem", flag.ContinueOnError)
	flags.SetOutput(io.Discard)
	flags.StringVar(&o.out, "out", "out", "folder for tandem.csv and tandem.png")
	flags.Float64Var(&o.wafer, "wafer", 160, "thickness of the silicon wafer, µm")
	flags.Float64Var(&o.front, "oxide", 50, "thickness of the front transparent oxide, nm")
	flags.Float64Var(&o.back, "junction", 20, "thickness of the oxide between the junctions, nm")
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
	case !(o.wafer >= 10 && o.wafer <= 1000):
		err = fmt.Errorf("-wafer %g: want 10 to 1000 µm", o.wafer)
	case !(o.front >= 0 && o.front <= 500):
		err = fmt.Errorf("-oxide %g: want 0 to 500 nm", o.front)
	case !(o.back >= 0 && o.back <= 500):
		err = fmt.Errorf("-junction %g: want 0 to 500 nm", o.back)
	}
	if err != nil {
		fmt.Fprintln(os.Stderr, "tandem:", err)
		os.Exit(2)
	}
	if err := run(o, os.Stdout); err != nil {
		fmt.Fprintln(os.Stderr, "tandem:", err)
		os.Exit(1)
	}
}

func run(o options, stdout io.Writer) error {
	c, err := newCell(o)
	if err != nil {
		return err
	}
	curve, err := c.curve(100, 1500, 57)
	if err != nil {
		return err
	}
	match, err := c.match(curve)
	if err != nil {
		return err
	}
	fmt.Fprintf(stdout, "Invented pilot line, AM1.5 global %g nm to %g nm; both junctions give %.3f mA/cm² at %.1f nm of perovskite\n\n",
		c.sweep.Wavelength[0], c.sweep.Wavelength[len(c.sweep.Wavelength)-1], match.top, match.thickness)
	fmt.Fprintf(stdout, "%-26s %12s %10s %16s %16s\n%-26s %12s %10s %16s %16s\n", "layer", "thickness", "takes", "perovskite", "silicon",
		"", "nm", "mA/cm²", "mA/cm² per nm", "mA/cm² per nm")
	for j, l := range c.layers {
		fmt.Fprintf(stdout, "%-26s %12.1f %10.3f %16.2e %16.2e\n", l.name, c.sweep.Thickness[j], match.takes[j], match.topSlopes[j], match.bottomSlopes[j])
	}
	fmt.Fprintf(stdout, "%-26s %12s %10.3f\n%-26s %12s %10.3f\n%-26s %12s %10.3f\n", "rear metal", "", match.transmitted, "reflected or escaped", "", match.reflected,
		"total", "", match.total)
	fmt.Fprintf(stdout, "\nOf the perovskite, %.3f mA/cm² lie beyond its band edge at %g nm: there k of the table is the tail of a fit, booked as a loss.\n", match.tail, bandEdge)
	if err := os.MkdirAll(o.out, 0o755); err != nil {
		return err
	}
	if err := c.writeCSV(filepath.Join(o.out, "tandem.csv"), match); err != nil {
		return err
	}
	if err := drawFigure(filepath.Join(o.out, "tandem.png"), c, curve, match); err != nil {
		return err
	}
	_, err = fmt.Fprintf(stdout, "\nwrote tandem.csv and tandem.png into %s\n", o.out)
	return err
}

// writeCSV writes the shares at the match, one line per wavelength.
func (c *cell) writeCSV(path string, m point) error {
	f, err := os.Create(path)
	if err != nil {
		return err
	}
	defer f.Close()
	out := csv.NewWriter(f)
	head := []string{"wavelength_nm", "reflected_or_escaped"}
	for _, l := range c.layers {
		head = append(head, strings.ReplaceAll(l.name, " ", "_"))
	}
	if err := out.Write(append(head, "rear_metal")); err != nil {
		return err
	}
	w := len(c.sweep.Wavelength)
	for i, l := range c.sweep.Wavelength {
		line := []float64{l, m.response.R[i]}
		for j := range c.layers {
			line = append(line, m.response.A[j*w+i])
		}
		var text []string
		for _, v := range append(line, m.response.T[i]) {
			text = append(text, strconv.FormatFloat(v, 'g', 8, 64))
		}
		if err := out.Write(text); err != nil {
			return err
		}
	}
	out.Flush()
	if err := out.Error(); err != nil {
		return err
	}
	return f.Close()
}
