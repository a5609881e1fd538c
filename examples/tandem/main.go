// Command tandem designs a two-terminal cell of perovskite on silicon: the
// absorptance of every layer, the photocurrents of both junctions, the thickness
// of the perovskite at which they match, and how the match depends on the
// thickness of every layer. It writes tandem.csv (shares at the match),
// tandem_layers.csv, tandem_thickness.csv (currents over the thickness of the
// perovskite; a cell with four terminals takes any of its lines) and a figure.
//
// The layers are those of an invented pilot line. Optical constants and spectrum
// are published data.
package main

import (
	"flag"
	"fmt"
	"io"
	"os"
	"path/filepath"

	"photonledger/examples/internal/picture"
)

type options struct {
	out, figure           string
	wafer                 float64 // µm
	fluoride, front, back float64 // nm, in front: fluoride on transparent oxide; oxide between the junctions
}

func main() {
	var o options
	flags := flag.NewFlagSet("tandem", flag.ContinueOnError)
	flags.SetOutput(io.Discard)
	flags.StringVar(&o.out, "out", "out", "folder for all files")
	flags.StringVar(&o.figure, "figure", "tandem.png", "file of the figure, .png, .svg or .pdf")
	flags.Float64Var(&o.wafer, "wafer", 160, "thickness of the silicon wafer, µm")
	flags.Float64Var(&o.fluoride, "fluoride", 100, "thickness of the magnesium fluoride in front, nm")
	flags.Float64Var(&o.front, "oxide", 50, "thickness of the front transparent oxide, nm")
	flags.Float64Var(&o.back, "junction", 20, "thickness of the oxide between the junctions, nm")
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
		fmt.Fprintln(os.Stderr, "tandem:", err)
		os.Exit(2)
	}
	if err := run(o, os.Stdout); err != nil {
		fmt.Fprintln(os.Stderr, "tandem:", err)
		os.Exit(1)
	}
}

func (o options) check() error {
	if !(o.wafer >= 10 && o.wafer <= 1000) {
		return fmt.Errorf("-wafer %g: want 10 to 1000 µm", o.wafer)
	}
	for _, film := range []struct {
		flag      string
		thickness float64
	}{{"fluoride", o.fluoride}, {"oxide", o.front}, {"junction", o.back}} {
		if !(film.thickness >= 0 && film.thickness <= 500) {
			return fmt.Errorf("-%s %g: want 0 to 500 nm", film.flag, film.thickness)
		}
	}
	if err := picture.CheckName(o.figure); err != nil {
		return fmt.Errorf("-figure %w", err)
	}
	return nil
}

// run finds the match and writes table, CSV files and figure.
func run(o options, stdout io.Writer) error {
	c, err := newCell(o, true)
	if err != nil {
		return err
	}
	curve, m, err := c.design()
	if err != nil {
		return err
	}
	without, err := newCell(o, false)
	if err != nil {
		return err
	}
	_, other, err := without.design()
	if err != nil {
		return err
	}
	c.table(stdout, m)
	fmt.Fprintf(stdout, "\n%.3f of the %.3f mA/cm² in the perovskite lie beyond its band edge at %g nm, where the k of\n", m.tail, m.takes[perovskite], bandEdge)
	fmt.Fprintf(stdout, "its table is the tail of a fit: booked as a loss. With k = 0 there the match is %.3f mA/cm² at %.1f nm.\n\n", other.top, other.thickness)
	for _, l := range append(c.layers, c.metal) {
		fmt.Fprintf(stdout, "%-21s %s\n", l.name, l.origin)
	}
	if err := os.MkdirAll(o.out, 0o755); err != nil {
		return err
	}
	if err := c.write(o.out, curve, m); err != nil {
		return err
	}
	if err := drawFigure(filepath.Join(o.out, o.figure), c, curve, m); err != nil {
		return err
	}
	_, err = fmt.Fprintf(stdout, "\nwrote tandem.csv, tandem_layers.csv, tandem_thickness.csv and %s into %s\n", o.figure, o.out)
	return err
}
