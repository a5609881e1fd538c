package spectrum

import (
	"fmt"
	"math"
)

// Entry is one destination of the incident light: a share per wavelength, and
// how well it is known. The uncertainties follow different rules and are kept
// apart; a nil slice stands for zeros.
type Entry struct {
	Name  string    // not empty, once per ledger
	Share []float64 // 0..1 at each wavelength of the ledger

	Bound           []float64 // numerical error bound of each share; bounds add up
	StdError        []float64 // statistical standard error of each share, independent between wavelengths
	Data            []float64 // standard uncertainty of each share from the data, fully correlated between wavelengths
	DataIndependent bool      // Data is independent between wavelengths instead
	IntegralBound   float64   // mA/cm², numerical error bound of the current itself, for example Samples.Bound; >= 0
}

// Ledger holds the shares of all destinations. At every wavelength they must add
// up to 1.
type Ledger struct {
	Spectrum   Spectrum
	Wavelength []float64 // nm, strictly ascending, inside the spectrum
	Entries    []Entry
	Tolerance  float64   // of the sum of shares at each wavelength, >= 0; 0 means ClosureTolerance
	Weights    []float64 // mA/cm² per share at each wavelength; nil for shares that are linear in between, else for example Samples.Weights
}

// Row is one line of an [Account]. Shares are those of the incident photons
// between the first and the last wavelength, currents are mA/cm².
type Row struct {
	Name    string
	Share   float64
	Current float64

	Bound    float64 // numerical error bound of Current: the sum over wavelengths, and IntegralBound
	StdError float64 // statistical standard error of Current: root of the sum of squares over wavelengths
	Data     float64 // standard uncertainty of Current from the data: the sum, or root of the sum of squares if independent
	Combined float64 // Bound + sqrt(StdError² + Data²)
}

// Account is a ledger integrated over the spectrum.
type Account struct {
	Rows     []Row
	Incident float64 // mA/cm² of one electron per incident photon, from the spectrum alone
	Total    Row     // sum of all rows, without uncertainties: those of the rows cancel since shares add up to 1
	Closure  float64 // largest |sum of shares - 1| over the wavelengths
}

// Tolerances of a ledger.
const (
	ClosureTolerance = 1e-9  // of the sum of shares at one wavelength
	shareRounding    = 1e-12 // by which a share may miss 0..1
	weightsTolerance = 1e-9  // by which weights from elsewhere may miss the incident current, relative
)

// Integrate returns the account of the ledger. The integral is exact for shares
// that are linear between the wavelengths, or what the ledger's own weights make
// of it. The combination of uncertainties is that of the Guide to the Expression of
// Uncertainty in Measurement (JCGM 100:2008, section 5) for standard
// uncertainties; a numerical bound is no standard uncertainty and is added.
//
// Errors: [ErrInput] for lengths, order and values (a share below 0 or above 1 by
// more than 1e-12, a negative uncertainty, a name that is missing or comes twice,
// weights that do not add up to the incident current), [ErrRange] for wavelengths
// outside the spectrum, [ErrBalance] where the shares miss 1 by more than the
// tolerance.
func (l Ledger) Integrate() (Account, error) {
	weights, incident, err := l.weights()
	if err != nil {
		return Account{}, err
	}
	acc := Account{Incident: incident, Total: Row{Name: "total"}}
	seen := map[string]bool{}
	for i, e := range l.Entries {
		if e.Name == "" || seen[e.Name] {
			return Account{}, fmt.Errorf("spectrum: ledger: entry %d: name %q is empty or comes twice: %w", i, e.Name, ErrInput)
		}
		seen[e.Name] = true
		if err := e.check(l.Wavelength); err != nil {
			return Account{}, fmt.Errorf("spectrum: ledger: %s: %w", e.Name, err)
		}
		row := e.row(weights)
		row.Share = row.Current / incident
		acc.Rows = append(acc.Rows, row)
		acc.Total.Current += row.Current
	}
	acc.Total.Share = acc.Total.Current / incident
	acc.Closure, err = l.closure()
	if err != nil {
		return Account{}, err
	}
	return acc, nil
}

// weights returns the weight of each wavelength and the current of all photons.
func (l Ledger) weights() (w []float64, incident float64, err error) {
	if len(l.Entries) == 0 {
		return nil, 0, fmt.Errorf("spectrum: ledger: no entries: %w", ErrInput)
	}
	w, err = Weights(nil, l.Spectrum, l.Wavelength, Photons)
	if err != nil {
		return nil, 0, err
	}
	first, last := l.Wavelength[0], l.Wavelength[len(w)-1]
	// On two wavelengths only, so that it does not hang on the grid of the shares.
	incident, err = Photocurrent(l.Spectrum, []float64{first, last}, []float64{1, 1})
	if err != nil {
		return nil, 0, err
	}
	if incident == 0 {
		return nil, 0, fmt.Errorf("spectrum: ledger: no light between %g nm and %g nm: %w", first, last, ErrInput)
	}
	if l.Weights == nil {
		return w, incident, nil
	}
	if err := checkValues("weights", l.Weights, l.Wavelength); err != nil {
		return nil, 0, fmt.Errorf("spectrum: ledger: %w", err)
	}
	sum := 0.0
	for _, v := range l.Weights {
		sum += v
	}
	if !(math.Abs(sum-incident) <= weightsTolerance*incident) {
		return nil, 0, fmt.Errorf("spectrum: ledger: the weights add up to %.12g mA/cm², the incident current is %.12g: %w", sum, incident, ErrInput)
	}
	return l.Weights, incident, nil
}

// closure returns the largest |sum of shares - 1|, an error if it is too large.
func (l Ledger) closure() (float64, error) {
	tolerance := l.Tolerance
	if tolerance == 0 {
		tolerance = ClosureTolerance
	}
	if !amount(tolerance) {
		return 0, fmt.Errorf("spectrum: ledger: tolerance %g is negative or not finite: %w", tolerance, ErrInput)
	}
	worst := 0.0
	for i, wl := range l.Wavelength {
		sum := 0.0
		for _, e := range l.Entries {
			sum += e.Share[i]
		}
		if dev := math.Abs(sum - 1); dev > tolerance {
			return 0, fmt.Errorf("spectrum: ledger: at %g nm the shares add up to %.12g: %w", wl, sum, ErrBalance)
		}
		worst = max(worst, math.Abs(sum-1))
	}
	return worst, nil
}

// row integrates an entry that was checked. Weights of a rule that oscillates
// may be negative: bounds take their size.
func (e Entry) row(weights []float64) Row {
	r := Row{Name: e.Name, Current: dot(weights, e.Share), Bound: e.IntegralBound}
	for i, v := range e.Bound {
		r.Bound += math.Abs(weights[i]) * v
	}
	for i, v := range e.StdError {
		r.StdError = math.Hypot(r.StdError, weights[i]*v)
	}
	for i, v := range e.Data {
		if e.DataIndependent {
			r.Data = math.Hypot(r.Data, weights[i]*v)
		} else {
			r.Data += math.Abs(weights[i]) * v
		}
	}
	r.Combined = r.Bound + math.Hypot(r.StdError, r.Data)
	return r
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
	if !amount(e.IntegralBound) {
		return fmt.Errorf("bound of the integral: %g is negative or not finite: %w", e.IntegralBound, ErrInput)
	}
	for _, u := range [3]struct {
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

// Find returns the row with a name, and whether there is one.
func (a Account) Find(name string) (Row, bool) {
	for _, r := range a.Rows {
		if r.Name == name {
			return r, true
		}
	}
	return Row{}, false
}
