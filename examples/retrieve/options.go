package main

import (
	"fmt"
	"os"

	"photonledger/examples/internal/picture"
	"photonledger/nk"
)

type options struct {
	out, figure string
	data        string  // file of a measurement; empty: invented
	model       string  // of the dispersion
	sample      string  // material of the invented film
	first, last float64 // nm, range of the fit
	thickness   float64 // nm, of the invented film
	noise       float64 // standard deviation of an invented reflectance
	seed        uint64
	guess       float64 // nm; 0: every start
}

// check reports the first option that no measurement can have.
func (o options) check() error {
	if !(o.first >= 250 && o.last-o.first >= 50 && o.last <= 1450) {
		return fmt.Errorf("-from %g -to %g: want 50 nm or more within 250 to 1450 nm", o.first, o.last)
	}
	if !(o.thickness >= 20 && o.thickness <= 1500) {
		return fmt.Errorf("-film %g: want 20 to 1500 nm", o.thickness)
	}
	if !(o.noise > 0 && o.noise <= 0.1) {
		return fmt.Errorf("-noise %g: want a share above 0, at most 0.1", o.noise)
	}
	if !(o.guess == 0 || o.guess >= 1 && o.guess <= maxThickness) {
		return fmt.Errorf("-guess %g: want 0, or 1 to %g nm", o.guess, maxThickness)
	}
	if dispersions[o.model] == nil {
		return fmt.Errorf("-model %q: want cauchy or tauclorentz", o.model)
	}
	if table, err := nk.MaterialTable(o.sample); err != nil {
		return fmt.Errorf("-sample %w", err)
	} else if low, high := table.Range(); o.data == "" && (low > o.first || high < o.last) {
		return fmt.Errorf("-sample %s: its table has %g to %g nm only", o.sample, low, high)
	}
	if o.data != "" {
		if _, err := os.Stat(o.data); err != nil {
			return fmt.Errorf("-data: %w", err)
		}
	}
	if err := picture.CheckName(o.figure); err != nil {
		return fmt.Errorf("-figure %w", err)
	}
	return nil
}
