package spectrum

import (
	"bufio"
	"encoding/csv"
	"fmt"
	"io"
	"math"
	"slices"
	"strconv"
	"strings"
	"text/tabwriter"
)

// WriteText writes an account as a plain text table: for each destination the
// share of the incident photons, the current density in mA/cm² and its
// uncertainties, each kind in a column of its own; kinds that are zero
// everywhere are left out. It returns the errors of w.
func (a Account) WriteText(w io.Writer) error {
	type kind struct {
		head string
		of   func(Row) float64
	}
	kinds := slices.DeleteFunc([]kind{
		{"numerical bound", func(r Row) float64 { return r.Bound }},
		{"standard error", func(r Row) float64 { return r.StdError }},
		{"data uncertainty", func(r Row) float64 { return r.Data }},
		{"combined", func(r Row) float64 { return r.Combined }},
	}, func(k kind) bool {
		return !slices.ContainsFunc(a.Rows, func(r Row) bool { return k.of(r) != 0 })
	})
	t := newText(w)
	head := []string{"destination", "share", "mA/cm²"}
	for _, k := range kinds {
		head = append(head, k.head)
	}
	t.line(head)
	for _, r := range a.Rows {
		cells := []string{r.Name, shareText(r), currentText(r)}
		for _, k := range kinds {
			cells = append(cells, fmt.Sprintf("%.2g", k.of(r)))
		}
		t.line(cells)
	}
	for _, cells := range [][]string{
		{"total", shareText(a.Total), currentText(a.Total)},
		{"incident", shareText(Row{Share: 1}), currentText(Row{Current: a.Incident})},
		{"closure error", sizeText(a.Closure), sizeText(a.Total.Current - a.Incident)},
	} {
		t.line(append(cells, make([]string, len(kinds))...))
	}
	return t.flush()
}

// WriteAccounts writes accounts side by side as a plain text table: for each
// title the share of the incident photons, the current density in mA/cm² and,
// where one is known in any account, its combined uncertainty. A destination
// that an account does not have is left blank. It returns [ErrInput] if there is
// not one title per account or no account, and the errors of w.
func WriteAccounts(w io.Writer, titles []string, accounts []Account) error {
	if len(titles) != len(accounts) || len(accounts) == 0 {
		return fmt.Errorf("spectrum: %d titles for %d accounts: %w", len(titles), len(accounts), ErrInput)
	}
	var names []string
	uncertain := false
	for _, a := range accounts {
		for _, r := range a.Rows {
			uncertain = uncertain || r.Combined > 0
			if !slices.Contains(names, r.Name) {
				names = append(names, r.Name)
			}
		}
	}
	t := newText(w)
	// Each account has two or three cells.
	line := func(first string, cells func(i int) [3]string) {
		all := []string{first}
		for i := range accounts {
			c := cells(i)
			if uncertain {
				all = append(all, c[:]...)
			} else {
				all = append(all, c[:2]...)
			}
		}
		t.line(all)
	}
	line("", func(i int) [3]string { return [3]string{titles[i]} })
	line("destination", func(int) [3]string { return [3]string{"share", "mA/cm²", "+-"} })
	for _, name := range names {
		line(name, func(i int) [3]string {
			r, ok := accounts[i].Find(name)
			if !ok {
				return [3]string{}
			}
			return [3]string{shareText(r), currentText(r), fmt.Sprintf("%.3f", r.Combined)}
		})
	}
	line("total", func(i int) [3]string { return [3]string{shareText(accounts[i].Total), currentText(accounts[i].Total)} })
	line("incident", func(i int) [3]string {
		return [3]string{shareText(Row{Share: 1}), currentText(Row{Current: accounts[i].Incident})}
	})
	line("closure error", func(i int) [3]string {
		return [3]string{sizeText(accounts[i].Closure), sizeText(accounts[i].Total.Current - accounts[i].Incident)}
	})
	return t.flush()
}

func shareText(r Row) string    { return fmt.Sprintf("%.4f", r.Share) }
func currentText(r Row) string  { return fmt.Sprintf("%.3f", r.Current) }
func sizeText(v float64) string { return fmt.Sprintf("%.1e", math.Abs(v)) }

// text is a table with right-aligned columns.
type text struct {
	out  *bufio.Writer
	tabs *tabwriter.Writer
}

func newText(w io.Writer) text {
	out := bufio.NewWriter(w)
	return text{out, tabwriter.NewWriter(out, 0, 0, 2, ' ', tabwriter.AlignRight)}
}

// line writes one row; what would break the table in a name becomes a space.
func (t text) line(cells []string) {
	for _, c := range cells {
		fmt.Fprint(t.tabs, strings.Map(func(r rune) rune {
			if r < ' ' || r == 0x7f {
				return ' '
			}
			return r
		}, c), "\t")
	}
	fmt.Fprintln(t.tabs)
}

func (t text) flush() error {
	if err := t.tabs.Flush(); err != nil {
		return err
	}
	return t.out.Flush()
}

// WriteCSV writes the shares of the ledger as CSV, one line per wavelength:
// wavelength_nm, photons_per_cm2_s_nm (the incident photon flux), and for each
// entry its share under its name (with _ for spaces) followed by those of
// _bound, _stderr and _data that the entry has. It returns the errors of
// [Ledger.Integrate] and of w.
func (l Ledger) WriteCSV(w io.Writer) error { return WriteShares(w, []string{""}, []Ledger{l}) }

// WriteShares writes ledgers over the same wavelengths into one CSV file as
// [Ledger.WriteCSV] does, with each title before the names of its entries. The
// photon flux is that of the first ledger. It returns [ErrInput] for titles that do
// not fit and different wavelengths, and the errors of [Ledger.Integrate] and of w.
func WriteShares(w io.Writer, titles []string, ledgers []Ledger) error {
	if len(titles) != len(ledgers) || len(ledgers) == 0 {
		return fmt.Errorf("spectrum: %d titles for %d ledgers: %w", len(titles), len(ledgers), ErrInput)
	}
	names, columns := []string{"wavelength_nm", "photons_per_cm2_s_nm"}, [][]float64{nil, nil}
	for i, l := range ledgers {
		if _, err := l.Integrate(); err != nil {
			return err
		}
		if !slices.Equal(l.Wavelength, ledgers[0].Wavelength) {
			return fmt.Errorf("spectrum: ledgers %q and %q have different wavelengths: %w", titles[0], titles[i], ErrInput)
		}
		for _, e := range l.Entries {
			name := strings.ReplaceAll(strings.TrimSpace(titles[i]+" "+e.Name), " ", "_")
			for _, c := range [4]struct {
				ending string
				values []float64
			}{{"", e.Share}, {"_bound", e.Bound}, {"_stderr", e.StdError}, {"_data", e.Data}} {
				if c.values != nil {
					names, columns = append(names, name+c.ending), append(columns, c.values)
				}
			}
		}
	}
	columns[0] = ledgers[0].Wavelength
	flux, err := ledgers[0].Spectrum.Values(nil, columns[0])
	if err != nil {
		return err
	}
	for i, l := range columns[0] {
		flux[i] *= photonsPerIrradiance * l
	}
	columns[1] = flux
	return writeColumns(w, names, columns)
}

// writeColumns writes numbers with 12 digits, wavelengths with all.
func writeColumns(w io.Writer, names []string, columns [][]float64) error {
	out := csv.NewWriter(w)
	if err := out.Write(names); err != nil {
		return err
	}
	record := make([]string, len(columns))
	for i := range columns[0] {
		for j, c := range columns {
			digits := 12
			if j == 0 {
				digits = -1
			}
			record[j] = strconv.FormatFloat(c[i], 'g', digits, 64)
		}
		if err := out.Write(record); err != nil {
			return err
		}
	}
	out.Flush()
	return out.Error()
}
