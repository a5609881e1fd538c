// Command trapping computes the photocurrent of silicon wafers from 1 µm to
// 500 µm: one straight pass, a rear mirror, coated random pyramids in front of
// that mirror, ideal Lambertian faces, and the weak-absorption limit 4n². It
// tells how far the pyramids are from the limit, and writes trapping.csv and
// trapping.png.
//
// The pyramids are those of an invented pilot line. Optical constants and
// spectrum are published data.
package main

import (
	"encoding/csv"
	"flag"
	"fmt"
	"io"
	"math"
	"os"
	"path/filepath"
	"strconv"
)

type options struct {
	out         string
	points      int
	nitride     float64 // nm
	reflectance float64 // of the rear mirror
	rays        int
}

func main() {
	var o options
	flags := flag.NewFlagSet("trapping", flag.ContinueOnError)
	flags.SetOutput(io.Discard)
	flags.StringVar(&o.out, "out", "out", "folder for trapping.csv and trapping.png")
	flags.IntVar(&o.points, "points", 10, "thicknesses between 1 µm and 500 µm")
	flags.Float64Var(&o.nitride, "film", 75, "thickness of the silicon nitride film on the pyramids, nm")
	flags.Float64Var(&o.reflectance, "mirror", 1, "reflectance of the rear mirror, 0 to 1")
	flags.IntVar(&o.rays, "rays", 512, "rays for each wavelength and thickness")
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
	case o.points < 2 || o.points > 100:
		err = fmt.Errorf("-points %d: want 2 to 100", o.points)
	case !(o.nitride >= 0 && o.nitride <= 500):
		err = fmt.Errorf("-film %g: want 0 to 500 nm", o.nitride)
	case !(o.reflectance >= 0 && o.reflectance <= 1):
		err = fmt.Errorf("-mirror %g: want 0 to 1", o.reflectance)
	case o.rays < 64 || o.rays > 1<<20:
		err = fmt.Errorf("-rays %d: want 64 to %d", o.rays, 1<<20)
	}
	if err != nil {
		fmt.Fprintln(os.Stderr, "trapping:", err)
		os.Exit(2)
	}
	if err := run(o, os.Stdout); err != nil {
		fmt.Fprintln(os.Stderr, "trapping:", err)
		os.Exit(1)
	}
}

func run(o options, stdout io.Writer) error {
	w, err := newWafers(o)
	if err != nil {
		return err
	}
	fmt.Fprintf(stdout, "Silicon, AM1.5 global 300 nm to 1200 nm, rear mirror of %g, mA/cm²; %g nm nitride on the pyramids of an invented line\n\n", o.reflectance, o.nitride)
	fmt.Fprintf(stdout, "%10s %12s %12s %12s %8s %12s %8s %16s\n", "µm", "single pass", "rear mirror", "pyramids", "+-", "lambertian", "4n²", "below lambertian")
	var rows []row
	for i := range o.points {
		um := math.Pow(500, float64(i)/float64(o.points-1))
		r, err := w.row(um)
		if err != nil {
			return err
		}
		rows = append(rows, r)
		fmt.Fprintf(stdout, "%10.4g %12.3f %12.3f %12.3f %8.3f %12.3f %8.3f %16.3f\n",
			r.um, r.single, r.mirror, r.pyramids, r.stdError, r.lambertian, r.limit, r.lambertian-r.pyramids)
	}
	if err := os.MkdirAll(o.out, 0o755); err != nil {
		return err
	}
	if err := writeCSV(filepath.Join(o.out, "trapping.csv"), rows); err != nil {
		return err
	}
	if err := drawFigure(filepath.Join(o.out, "trapping.png"), rows); err != nil {
		return err
	}
	_, err = fmt.Fprintf(stdout, "\nwrote trapping.csv and trapping.png into %s\n", o.out)
	return err
}

func writeCSV(path string, rows []row) error {
	f, err := os.Create(path)
	if err != nil {
		return err
	}
	defer f.Close()
	out := csv.NewWriter(f)
	lines := [][]string{{"thickness_um", "single_pass_mA_cm2", "rear_mirror_mA_cm2", "pyramids_mA_cm2", "pyramids_stderr_mA_cm2", "lambertian_mA_cm2", "limit_4n2_mA_cm2"}}
	for _, r := range rows {
		var line []string
		for _, v := range []float64{r.um, r.single, r.mirror, r.pyramids, r.stdError, r.lambertian, r.limit} {
			line = append(line, strconv.FormatFloat(v, 'g', 8, 64))
		}
		lines = append(lines, line)
	}
	if err := out.WriteAll(lines); err != nil {
		return err
	}
	return f.Close()
}
