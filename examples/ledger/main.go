// Command ledger tells where every photon of AM1.5 global ends up in a wafer
// cell of a pilot line: shaded, reflected, lost in the coating, behind the wafer
// or to free carriers, escaped, or turned into carriers. It prints the table,
// and writes ledger.csv and ledger.png.
//
// The pilot line is invented. Optical constants and spectrum are published data.
package main

import (
	"flag"
	"fmt"
	"io"
	"os"
	"path/filepath"

	"photonledger/examples/internal/pilot"
	"photonledger/spectrum"
)

// options are what a user would change first.
type options struct {
	out     string
	variant string  // textured, planar, lambertian or all
	wafer   float64 // µm
	film    float64 // nm
	rays    int
}

func main() {
	var o options
	flags := flag.NewFlagSet("ledger", flag.ContinueOnError)
	flags.SetOutput(io.Discard)
	flags.StringVar(&o.out, "out", "out", "folder for ledger.csv and ledger.png")
	flags.StringVar(&o.variant, "variant", "all", "textured, planar, lambertian or all")
	flags.Float64Var(&o.wafer, "wafer", 160, "wafer thickness, µm")
	flags.Float64Var(&o.film, "film", 75, "thickness of the silicon nitride film, nm")
	flags.IntVar(&o.rays, "rays", 2048, "rays for each wavelength of the textured variant")
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
		fmt.Fprintln(os.Stderr, "ledger:", err)
		os.Exit(2)
	}
	if err := run(o, os.Stdout); err != nil {
		fmt.Fprintln(os.Stderr, "ledger:", err)
		os.Exit(1)
	}
}

func (o options) check() error {
	if !(o.wafer >= 10 && o.wafer <= 1000) {
		return fmt.Errorf("-wafer %g: want 10 to 1000 µm", o.wafer)
	}
	if !(o.film >= 0 && o.film <= 500) {
		return fmt.Errorf("-film %g: want 0 to 500 nm", o.film)
	}
	if _, ok := variants[o.variant]; !ok && o.variant != "all" {
		return fmt.Errorf("-variant %q: want textured, planar, lambertian or all", o.variant)
	}
	if o.rays < 64 || o.rays > 1<<22 {
		return fmt.Errorf("-rays %d: want 64 to %d", o.rays, 1<<22)
	}
	return nil
}

// run computes the ledgers and writes table, CSV and figure.
func run(o options, stdout io.Writer) error {
	cell, err := newCell(o.wafer*pilot.NMPerMicron, o.film, o.rays)
	if err != nil {
		return err
	}
	titles := []string{o.variant}
	if o.variant == "all" {
		titles = []string{"textured", "planar", "lambertian"}
	}
	var ledgers []spectrum.Ledger
	var accounts []spectrum.Account
	for _, name := range titles {
		ledger, err := variants[name](cell)
		if err != nil {
			return err
		}
		account, err := ledger.Integrate()
		if err != nil {
			return err
		}
		ledgers, accounts = append(ledgers, ledger), append(accounts, account)
	}
	fmt.Fprintf(stdout, "Invented pilot line, wafer cell of %g µm with %g nm silicon nitride, AM1.5 global, %g nm to %g nm\n\n",
		o.wafer, o.film, cell.Wavelength[0], cell.Wavelength[len(cell.Wavelength)-1])
	if err := spectrum.WriteAccounts(stdout, titles, accounts); err != nil {
		return err
	}
	if err := os.MkdirAll(o.out, 0o755); err != nil {
		return err
	}
	if err := writeCSV(filepath.Join(o.out, "ledger.csv"), titles, ledgers); err != nil {
		return err
	}
	if err := drawFigure(filepath.Join(o.out, "ledger.png"), titles, ledgers); err != nil {
		return err
	}
	fmt.Fprintf(stdout, "\nwrote %s and %s\n", filepath.Join(o.out, "ledger.csv"), filepath.Join(o.out, "ledger.png"))
	return nil
}

// writeCSV writes the shares of all variants into one file.
func writeCSV(path string, names []string, ledgers []spectrum.Ledger) error {
	f, err := os.Create(path)
	if err != nil {
		return err
	}
	defer f.Close()
	if err := spectrum.WriteShares(f, names, ledgers); err != nil {
		return err
	}
	return f.Close()
}
