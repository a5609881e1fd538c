package spectrum

import (
	"encoding/csv"
	"fmt"
	"io"
	"math"
	"slices"
	"strconv"
	"strings"
	"text/tabwriter"
)

// Entry is one destination of the incident light: a share per wavelength, and
// how well it is known. The three uncertainties follow different rules and are
// kept apart; a nil slice stands for zeros.
type Entry struct {
	Name  string
	Share []float64 // 0..1 at each wavelength of the ledger

	Bound    []float64 // numerical error bound of each share; bounds add up
	StdError []float64 // statistical standard error of each share, independent between wavelengths
	Data     []float64 // standard uncertainty from the data, fully correlated between wavelengths
}

// Ledger holds the shares of all destinations. At every wavelength they must add
// up to 1.
type Ledger struct {
	Spectrum   Spectrum
	Wavelength []float64 // nm, strictly ascending, inside the spectrum
	Entries    []Entry
}

// Row is one line of an [Account]. Shares are those of the incident photons
// between the first and the last wavelength, currents are mA/cm².
type Row struct {
	Name    string
	Share   float64
	Current float64

	Bound    float64 // numerical error bound of Current
	StdError float64 // statistical standard error of Current
	Data     float64 // standard uncertainty of Current from the data
	Combined float64 // Bound + sqrt(StdError² + Data²)
}

// Account is a ledger integrated over the spectrum.
type Account struct {
	Rows     []Row
	Incident float64 // mA/cm² of one electron per incident photon, from the spectrum alone
	Total    Row     // sum of all rows; its uncertainties are those of the sum of independent rows
	Closure  float64 // largest |sum of shares - 1| over the wavelengths
}

// Tolerances of a ledger.
const (
	ClosureTolerance = 1e-9  // of the sum of shares at one wavelength
	shareRounding    = 1e-12 // by which a share may miss 0..1
)

// Integrate returns the account of the ledger. The integral is exact for shares
// that are linear between the wavelengths.
//
// Errors: [ErrInput] for lengths, order and values (a share below 0 or above 1,
// a negative uncertainty), [ErrRange] for wavelengths outside the spectrum,
// [ErrBalance] where the shares miss 1 by more than [ClosureTolerance].
func (l Ledger) Integrate() (Account, error) {
	w, err := Weights(nil, l.Spectrum, l.Wavelength, Photons)
	if err != nil {
		return Account{}, err
	}
	if len(l.Entries) == 0 {
		return Account{}, fmt.Errorf("spectrum: ledger: no entries: %w", ErrInput)
	}
	sum := make([]float64, len(w))
	var acc Account
	ends := []float64{l.Wavelength[0], l.Wavelength[len(w)-1]}
	if acc.Incident, err = Photocurrent(l.Spectrum, ends, []float64{1, 1}); err != nil {
		return Account{}, err
	}
	if acc.Incident == 0 {
		return Account{}, fmt.Errorf("spectrum: ledger: no light between %g nm and %g nm: %w", ends[0], ends[1], ErrInput)
	}
	for _, e := range l.Entries {
		if err := e.check(l.Wavelength); err != nil {
			return Account{}, fmt.Errorf("spectrum: ledger: %s: %w", e.Name, err)
		}
		row := Row{Name: e.Name, Current: dot(w, e.Share)}
		row.Share = row.Current / acc.Incident
		row.Bound, row.Data = weighed(w, e.Bound), weighed(w, e.Data)
		for i, v := range e.StdError {
			row.StdError = math.Hypot(row.StdError, w[i]*v)
		}
		row.combine()
		acc.Rows = append(acc.Rows, row)
		for i, v := range e.Share {
			sum[i] += v
		}
		t := &acc.Total
		t.Share += row.Share
		t.Current += row.Current
		t.Bound += row.Bound
		t.StdError, t.Data = math.Hypot(t.StdError, row.StdError), math.Hypot(t.Data, row.Data)
	}
	acc.Total.Name = "total"
	acc.Total.combine()
	for i, v := range sum {
		if dev := math.Abs(v - 1); dev > acc.Closure {
			acc.Closure = dev
			if dev > ClosureTolerance {
				return Account{}, fmt.Errorf("spectrum: ledger: at %g nm the shares add up to %.12g: %w", l.Wavelength[i], v, ErrBalance)
			}
		}
	}
	return acc, nil
}

func (r *Row) combine() { r.Combined = r.Bound + math.Hypot(r.StdError, r.Data) }

func weighed(w, v []float64) float64 {
	if v == nil {
		return 0
	}
	return dot(w, v)
}

func (e Entry) check(wavelength []float64) error {
	if err := checkValues("share", e.Share, wavelength); err != nil {
		return err
	}
	for i, v := range e.Share {
		if v < -shareRounding || v > 1+shareRounding {
			return fmt.Errorf("share at %g nm: %g is not between 0 and 1: %w", wavelength[i], v, ErrInput)
		}
	}
	for _, u := range []struct {
		name   string
		values []float64
	}{{"bound", e.Bound}, {"standard error", e.StdError}, {"data uncertainty", e.Data}} {
		if u.values == nil {
			continue
		}
		if err := checkValues(u.name, u.values, wavelength); err != nil {
			return err
		}
		for i, v := range u.values {
			if v < 0 {
				return fmt.Errorf("%s at %g nm: %g is negative: %w", u.name, wavelength[i], v, ErrInput)
			}
		}
	}
	return nil
}

// Find returns the row with a name.
func (a Account) Find(name string) (Row, bool) {
	for _, r := range a.Rows {
		if r.Name == name {
			return r, true
		}
	}
	return Row{}, false
}

// WriteAccounts writes accounts of the same destinations side by side as plain
// text: for each title the share of the incident photons, the current density
// in mA/cm² and, where any is known, its combined uncertainty.
func WriteAccounts(w io.Writer, titles []string, accounts []Account) error {
	if len(titles) != len(accounts) || len(accounts) == 0 {
		return fmt.Errorf("spectrum: %d titles for %d accounts: %w", len(titles), len(accounts), ErrInput)
	}
	var names []string
	seen := map[string]bool{}
	uncertain := false
	for _, a := range accounts {
		uncertain = uncertain || a.Total.Combined > 0
		for _, r := range a.Rows {
			if !seen[r.Name] {
				seen[r.Name] = true
				names = append(names, r.Name)
			}
		}
	}
	t := tabwriter.NewWriter(w, 0, 0, 2, ' ', tabwriter.AlignRight)
	cells := func(first string, cell func(i int) []string) {
		fmt.Fprint(t, first, "\t")
		for i := range accounts {
			for _, c := range cell(i) {
				fmt.Fprint(t, c, "\t")
			}
		}
		fmt.Fprintln(t)
	}
	columns := func(r Row) []string {
		out := []string{fmt.Sprintf("%.4f", r.Share), fmt.Sprintf("%.3f", r.Current)}
		if uncertain {
			out = append(out, fmt.Sprintf("%.3f", r.Combined))
		}
		return out
	}
	cells("", func(i int) []string {
		out := []string{titles[i], ""}
		if uncertain {
			out = append(out, "")
		}
		return out
	})
	cells("destination", func(int) []string {
		out := []string{"share", "mA/cm²"}
		if uncertain {
			out = append(out, "+-")
		}
		return out
	})
	for _, name := range names {
		cells(name, func(i int) []string {
			r, ok := accounts[i].Find(name)
			if !ok {
				return columns(Row{})
			}
			return columns(r)
		})
	}
	cells("total", func(i int) []string { return columns(accounts[i].Total) })
	cells("incident", func(i int) []string { return columns(Row{Share: 1, Current: accounts[i].Incident}) })
	cells("closure error", func(i int) []string {
		out := []string{fmt.Sprintf("%.1e", accounts[i].Closure), fmt.Sprintf("%.1e", math.Abs(accounts[i].Total.Current-accounts[i].Incident))}
		if uncertain {
			out = append(out, "")
		}
		return out
	})
	return t.Flush()
}

// WriteShares writes the shares of ledgers over the same wavelengths as CSV, one
// line per wavelength: the wavelength in nm, the incident photon flux in
// cm^-2 s^-1 nm^-1, and for each title the share of each entry and, where it is
// known, its standard error.
func WriteShares(w io.Writer, titles []string, ledgers []Ledger) error {
	if len(titles) != len(ledgers) || len(ledgers) == 0 {
		return fmt.Errorf("spectrum: %d titles for %d ledgers: %w", len(titles), len(ledgers), ErrInput)
	}
	record := []string{"wavelength_nm", "photons_per_cm2_s_nm"}
	var columns [][]float64
	for i, l := range ledgers {
		if _, err := l.Integrate(); err != nil {
			return err
		}
		if !slices.Equal(l.Wavelength, ledgers[0].Wavelength) {
			return fmt.Errorf("spectrum: ledgers %q and %q have different wavelengths: %w", titles[0], titles[i], ErrInput)
		}
		for _, e := range l.Entries {
			name := strings.ReplaceAll(strings.TrimSpace(titles[i]+" "+e.Name), " ", "_")
			record, columns = append(record, name), append(columns, e.Share)
			if e.StdError != nil {
				record, columns = append(record, name+"_stderr"), append(columns, e.StdError)
			}
		}
	}
	out := csv.NewWriter(w)
	if err := out.Write(record); err != nil {
		return err
	}
	for i, wl := range ledgers[0].Wavelength {
		irradiance, err := ledgers[0].Spectrum.At(wl)
		if err != nil {
			return err
		}
		record = append(record[:0], number(wl), number(photonsPerIrradiance*irradiance*wl))
		for _, c := range columns {
			record = append(record, number(c[i]))
		}
		if err := out.Write(record); err != nil {
			return err
		}
	}
	out.Flush()
	return out.Error()
}

func number(v float64) string { return strconv.FormatFloat(v, 'g', 8, 64) }
