package spectrum

import (
	"bytes"
	"encoding/csv"
	"errors"
	"math"
	"strconv"
	"strings"
	"testing"
)

// threeShares is a ledger whose shares add up to 1 at every wavelength, on a grid
// that shares no rows with the spectrum.
func threeShares() Ledger {
	l := Ledger{Spectrum: AM15G()}
	var a, b, c []float64
	for x := 300.123; x < 1200; x += 7.77 {
		l.Wavelength = append(l.Wavelength, x)
		r := 0.3 + 0.2*math.Sin(x/40)
		p := 0.1 * math.Exp(-x/500)
		a, b, c = append(a, r), append(b, p), append(c, 1-r-p)
	}
	l.Entries = []Entry{{Name: "reflected", Share: a}, {Name: "coating", Share: b}, {Name: "cell", Share: c}}
	return l
}

// TestLedgerClosure: the rows add up to the incident current, which comes from the
// spectrum alone; each row is the photocurrent of its share.
func TestLedgerClosure(t *testing.T) {
	l := threeShares()
	acc := must(l.Integrate())
	near(t, "total", acc.Total.Current, acc.Incident, 1e-14)
	near(t, "total share", acc.Total.Share, 1, 1e-14)
	if acc.Closure > 3e-16 {
		t.Errorf("closure error %g", acc.Closure)
	}
	sum := 0.0
	for i, e := range l.Entries {
		near(t, e.Name, acc.Rows[i].Current, must(Photocurrent(l.Spectrum, l.Wavelength, e.Share)), 1e-15)
		near(t, e.Name+" share", acc.Rows[i].Share, acc.Rows[i].Current/acc.Incident, 1e-15)
		sum += acc.Rows[i].Current
	}
	near(t, "sum", sum, acc.Total.Current, 1e-15)
	n := len(l.Wavelength)
	near(t, "incident", acc.Incident, must(Photocurrent(l.Spectrum, []float64{l.Wavelength[0], l.Wavelength[n-1]}, []float64{1, 1})), 1e-15)
}

// TestLedgerUncertainty: the rules of JCGM 100:2008 with weights by hand: bounds and
// correlated uncertainties add up, independent ones add in squares.
func TestLedgerUncertainty(t *testing.T) {
	l := threeShares()
	w := must(Weights(nil, l.Spectrum, l.Wavelength, Photons))
	u := make([]float64, len(w))
	linear, squares := 0.0, 0.0
	for i := range u {
		u[i] = 1e-3 * (1 + float64(i%7))
		linear += w[i] * u[i]
		squares += w[i] * u[i] * w[i] * u[i]
	}
	l.Entries[0].Bound, l.Entries[0].IntegralBound = u, 0.25
	l.Entries[1].StdError = u
	l.Entries[2].Data = u
	acc := must(l.Integrate())
	near(t, "bound", acc.Rows[0].Bound, linear+0.25, 1e-14)
	near(t, "bound combined", acc.Rows[0].Combined, linear+0.25, 1e-14)
	near(t, "standard error", acc.Rows[1].StdError, math.Sqrt(squares), 1e-14)
	near(t, "correlated data", acc.Rows[2].Data, linear, 1e-14)
	l.Entries[2].DataIndependent = true
	l.Entries[2].StdError, l.Entries[2].IntegralBound = u, 1
	r := must(l.Integrate()).Rows[2]
	near(t, "independent data", r.Data, math.Sqrt(squares), 1e-14)
	near(t, "combined", r.Combined, 1+math.Sqrt(2*squares), 1e-14)
	if tot := acc.Total; tot.Bound != 0 || tot.StdError != 0 || tot.Data != 0 || tot.Combined != 0 {
		t.Errorf("the total %+v has uncertainties, though the shares add up to 1", tot)
	}
}

func TestLedgerErrors(t *testing.T) {
	for name, c := range map[string]struct {
		change func(l *Ledger)
		want   error
		text   string
	}{
		"no entries":     {func(l *Ledger) { l.Entries = nil }, ErrInput, "no entries"},
		"no name":        {func(l *Ledger) { l.Entries[1].Name = "" }, ErrInput, "entry 1"},
		"name twice":     {func(l *Ledger) { l.Entries[1].Name = "cell" }, ErrInput, "twice"},
		"short":          {func(l *Ledger) { l.Entries[0].Share = l.Entries[0].Share[1:] }, ErrInput, "reflected"},
		"NaN":            {func(l *Ledger) { l.Entries[0].Share[3] = math.NaN() }, ErrInput, "NaN"},
		"negative":       {func(l *Ledger) { l.Entries[0].Share[3] = -0.01 }, ErrInput, "-0.01"},
		"above 1":        {func(l *Ledger) { l.Entries[0].Share[3] = 1.01 }, ErrInput, "1.01"},
		"does not close": {func(l *Ledger) { l.Entries[0].Share[3] += 1e-6 }, ErrBalance, "323.43"},
		"tight":          {func(l *Ledger) { l.Entries[0].Share[3] += 1e-10; l.Tolerance = 1e-12 }, ErrBalance, "323.43"},
		"tolerance":      {func(l *Ledger) { l.Tolerance = -1 }, ErrInput, "tolerance"},
		"outside":        {func(l *Ledger) { l.Wavelength[0] = 200 }, ErrRange, "200 nm"},
		"unsorted":       {func(l *Ledger) { l.Wavelength[4] = 1000 }, ErrInput, "not ascending"},
		"bound":          {func(l *Ledger) { l.Entries[0].Bound = []float64{1} }, ErrInput, "bound"},
		"negative error": {func(l *Ledger) {
			l.Entries[0].StdError = make([]float64, len(l.Wavelength))
			l.Entries[0].StdError[2] = -1
		}, ErrInput, "standard error"},
		"integral bound": {func(l *Ledger) { l.Entries[0].IntegralBound = math.Inf(1) }, ErrInput, "+Inf"},
		"weights":        {func(l *Ledger) { l.Weights = make([]float64, len(l.Wavelength)) }, ErrInput, "weights add up"},
		"weights length": {func(l *Ledger) { l.Weights = []float64{1} }, ErrInput, "weights"},
		"dark":           {func(l *Ledger) { l.Spectrum = must(l.Spectrum.Scale(0)) }, ErrInput, "no light"},
	} {
		l := threeShares()
		c.change(&l)
		_, err := l.Integrate()
		if !errors.Is(err, c.want) || !strings.Contains(err.Error(), c.text) {
			t.Errorf("%s: %v, want %v with %q", name, err, c.want, c.text)
		}
		if err := l.WriteCSV(&bytes.Buffer{}); err == nil {
			t.Errorf("%s: WriteCSV accepts it", name)
		}
	}
	l := threeShares()
	l.Entries[0].Share[3] += 1e-10
	if acc, err := l.Integrate(); err != nil || acc.Closure < 0.9e-10 {
		t.Errorf("a miss of 1e-10: closure %g, error %v", acc.Closure, err)
	}
}

// TestLedgerCSV reads the file back: the shares of each line add up to 1, the
// columns are what they are called.
func TestLedgerCSV(t *testing.T) {
	l := threeShares()
	l.Entries[1].StdError = make([]float64, len(l.Wavelength))
	var b bytes.Buffer
	if err := WriteShares(&b, []string{"flat", "second variant"}, []Ledger{l, l}); err != nil {
		t.Fatal(err)
	}
	rows, err := csv.NewReader(&b).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	want := "wavelength_nm,photons_per_cm2_s_nm,flat_reflected,flat_coating,flat_coating_stderr,flat_cell," +
		"second_variant_reflected,second_variant_coating,second_variant_coating_stderr,second_variant_cell"
	if got := strings.Join(rows[0], ","); got != want {
		t.Errorf("header %s, want %s", got, want)
	}
	for i, row := range rows[1:] {
		var v [10]float64
		for j, cell := range row {
			if v[j], err = strconv.ParseFloat(cell, 64); err != nil {
				t.Fatal(err)
			}
		}
		if v[0] != l.Wavelength[i] || math.Abs(v[2]+v[3]+v[5]-1) > 1e-11 {
			t.Errorf("line %d: %v", i, row)
		}
		near(t, "flux", v[1], must(l.Spectrum.At(v[0]))*v[0]*photonsPerIrradiance, 1e-11)
	}
	other := threeShares()
	other.Wavelength[0] += 1e-9
	for _, err := range []error{
		WriteShares(&b, []string{"one"}, []Ledger{l, l}),
		WriteShares(&b, nil, nil),
		WriteShares(&b, []string{"a", "b"}, []Ledger{l, other}),
		WriteAccounts(&b, []string{"a"}, nil),
	} {
		if !errors.Is(err, ErrInput) {
			t.Errorf("%v, want an error that wraps ErrInput", err)
		}
	}
}

// failing is a writer that is full after some bytes.
type failing int

var errFull = errors.New("full")

func (f *failing) Write(p []byte) (int, error) {
	if *f -= failing(len(p)); *f < 0 {
		return 0, errFull
	}
	return len(p), nil
}

// TestWriters: an error of the writer arrives.
func TestWriters(t *testing.T) {
	l := threeShares()
	acc := must(l.Integrate())
	for _, room := range []failing{0, 100} {
		for name, write := range map[string]func(w *failing) error{
			"Ledger.WriteCSV":   func(w *failing) error { return l.WriteCSV(w) },
			"Account.WriteText": func(w *failing) error { return acc.WriteText(w) },
			"WriteAccounts":     func(w *failing) error { return WriteAccounts(w, []string{"a"}, []Account{acc}) },
			"WriteCSV":          func(w *failing) error { return WriteCSV(w, l.Spectrum) },
		} {
			w := room
			if err := write(&w); !errors.Is(err, errFull) {
				t.Errorf("%s with room for %d bytes: %v", name, room, err)
			}
		}
	}
}

// TestTexts: a table shows the kinds of uncertainty that occur and no others, and
// leaves blank what an account does not have.
func TestTexts(t *testing.T) {
	l := threeShares()
	l.Entries[0].StdError = make([]float64, len(l.Wavelength))
	l.Entries[0].StdError[10] = 0.5
	l.Entries[0].Name = "re\tflec\nted"
	acc := must(l.Integrate())
	var b bytes.Buffer
	if err := acc.WriteText(&b); err != nil {
		t.Fatal(err)
	}
	lines := strings.Split(b.String(), "\n")
	if head := strings.Join(strings.Fields(lines[0]), " "); head != "destination share mA/cm² standard error combined" {
		t.Errorf("header %q", head)
	}
	// Three entries, total, incident, closure error, and the end of the last line.
	if len(lines) != 8 || strings.Join(strings.Fields(lines[1])[:3], " ") != "re flec ted" {
		t.Errorf("%d lines: %q", len(lines), lines)
	}
	for i, name := range []string{"total", "incident"} {
		f := strings.Fields(lines[4+i])
		if f[0] != name || f[1] != "1.0000" || f[2] != strconv.FormatFloat(acc.Incident, 'f', 3, 64) {
			t.Errorf("line %q, want %s of %.3f", lines[4+i], name, acc.Incident)
		}
	}
	other := Account{Rows: []Row{{Name: "own", Share: 1, Current: 2}}, Incident: 2, Total: Row{Share: 1, Current: 2}}
	b.Reset()
	if err := WriteAccounts(&b, []string{"one", "two"}, []Account{acc, other}); err != nil {
		t.Fatal(err)
	}
	for _, line := range strings.Split(b.String(), "\n") {
		if f := strings.Fields(line); len(f) > 0 && f[0] == "own" && strings.Join(f, " ") != "own 1.0000 2.000 0.000" {
			t.Errorf("a destination of one account only: %q", line)
		}
	}
}
