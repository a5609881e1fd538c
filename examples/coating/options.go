package main

import (
	"fmt"
	"strings"

	"photonledger/examples/internal/picture"
	"photonledger/nk"
)

type options struct {
	out, figure  string
	films, outer string  // materials; films separated by commas
	first, last  float64 // nm, range of the weighted reflectance
	spread       float64 // %
}

// The visible, for the colour; nm.
const violet, red = 380.0, 780.0

// inner lists the materials on silicon.
func (o options) inner() []string { return strings.Split(o.films, ",") }

// check reports the first option that no coating can have.
func (o options) check() error {
	if !(o.first >= 300 && o.last-o.first >= 50 && o.last <= 1200) {
		return fmt.Errorf("-from %g -to %g: want 50 nm or more within 300 to 1200 nm", o.first, o.last)
	}
	if !(o.spread >= 0 && o.spread <= 50) {
		return fmt.Errorf("-spread %g: want 0 to 50 %%", o.spread)
	}
	for _, name := range append(o.inner(), o.outer) {
		table, err := nk.MaterialTable(name)
		if err != nil {
			return fmt.Errorf("-films and -outer: %w", err)
		}
		if low, high := table.Range(); low > min(o.first, violet) || high < max(o.last, red) {
			return fmt.Errorf("-films and -outer: %s has %g to %g nm only", name, low, high)
		}
	}
	if err := picture.CheckName(o.figure); err != nil {
		return fmt.Errorf("-figure %w", err)
	}
	return nil
}
