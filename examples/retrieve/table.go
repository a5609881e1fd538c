package main

import (
	"encoding/csv"
	"errors"
	"fmt"
	"io"
	"math"
	"os"
	"strconv"
	"strings"

	"photonledger/nk"
)

// table prints parameters, correlations, indices and what else would fit.
func (f *fitter) table(stdout io.Writer, fits []nk.FitResult) error {
	fit, last := fits[0], len(f.wavelength)-1
	fmt.Fprintf(stdout, "%s\n%d reflectances from %g nm to %g nm\n\n", f.title, len(f.wavelength), f.wavelength[0], f.wavelength[last])
	fmt.Fprintf(stdout, "%-14s %11s %10s   correlations\n", "parameter", "value", "std error")
	parameters := append([]nk.Parameter{{Name: "thickness", Unit: "nm"}}, f.model.Parameters()...)
	free := func(j int) bool { return j == 0 || f.lower[j-1] < f.upper[j-1] }
	for j, p := range parameters {
		if !free(j) {
			continue
		}
		fmt.Fprintf(stdout, "%-14s %11.6g %10.2g  ", strings.TrimSuffix(p.Name+" "+p.Unit, " 1"), fit.Params[j], fit.StdErr[j])
		for k := range j + 1 {
			if free(k) {
				fmt.Fprintf(stdout, " %7.3f", fit.Correlation[j][k])
			}
		}
		fmt.Fprintln(stdout)
	}
	fmt.Fprintf(stdout, "\n%-14s %11s %10s", "index", "value", "std error")
	if f.film != nil {
		fmt.Fprintf(stdout, " %12s", "true")
	}
	fmt.Fprintln(stdout)
	for _, l := range []float64{f.wavelength[0], 633, f.wavelength[last]} {
		n, sigma, err := f.indexAt(fit, l)
		if err != nil {
			return err
		}
		fmt.Fprintf(stdout, "%-14s %11.4f %10.2g", fmt.Sprintf("at %g nm", l), n, sigma)
		if f.film != nil {
			sample, err := f.film.At(l)
			if err != nil {
				return err
			}
			fmt.Fprintf(stdout, " %12.4f", real(sample))
		}
		fmt.Fprintln(stdout)
	}
	if f.sigma == nil {
		fmt.Fprintf(stdout, "\nresiduals scatter by %.2g; standard errors follow from that\n", math.Sqrt(fit.ReducedChiSquare))
	} else {
		fmt.Fprintf(stdout, "\nreduced chi-square %.3f with %d degrees of freedom\n", fit.ReducedChiSquare, fit.DOF)
	}
	// Four standard deviations of the chi-square distribution.
	if f.sigma != nil && fit.ReducedChiSquare > 1+4*math.Sqrt(2/float64(fit.DOF)) {
		fmt.Fprintln(stdout, "CAUTION: residuals exceed the noise. The film is not as the model says; the errors are larger.")
	}
	other, open, found := rival(fits)
	if !found {
		return nil
	}
	n, _, err := f.indexAt(other, 633)
	if err != nil {
		return err
	}
	if open {
		fmt.Fprintf(stdout, "CAUTION: %.1f nm with index %.3f at 633 nm fits as well. Measure more wavelengths, or decide by other means.\n", other.Params[0], n)
	} else {
		fmt.Fprintf(stdout, "next best: %.1f nm with index %.3f at 633 nm, chi-square larger by a factor of %.3g\n", other.Params[0], n, other.ChiSquare/fit.ChiSquare)
	}
	return nil
}

// writeCSV writes measurement and fit, one line per wavelength.
func (f *fitter) writeCSV(path string, fit nk.FitResult) error {
	number := func(v float64) string { return strconv.FormatFloat(v, 'g', 9, 64) }
	lines := [][]string{{"wavelength_nm", "measured", "fitted", "residual", "index", "index_stderr"}}
	for i, l := range f.wavelength {
		n, sigma, err := f.indexAt(fit, l)
		if err != nil {
			return err
		}
		lines = append(lines, []string{
			number(l), number(f.reflectance[i]), number(f.reflectance[i] - fit.Residuals[i]), number(fit.Residuals[i]), number(n), number(sigma),
		})
	}
	file, err := os.Create(path)
	if err != nil {
		return err
	}
	return errors.Join(csv.NewWriter(file).WriteAll(lines), file.Close())
}
