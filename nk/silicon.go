package nk

import (
	"fmt"
	"math"
)

// ScaleTemperature returns an optical constant x, n or k, at another temperature:
// x(T) = x(t0) (T/t0)^(C t0), where C = (dx/dT)/x at t0 is its normalized
// temperature coefficient in 1/K at one wavelength; temperatures in K. This is
// the rule published for silicon by M. A. Green, Sol. Energy Mater. Sol. Cells
// 92, 1305 (2008), with t0 = 300 K. The caller brings the coefficients: no copy
// of the published ones could be checked, so this package holds none.
//
// Special cases: NaN if a temperature is not finite and positive, x is negative
// or infinite, the coefficient is infinite, or anything is NaN; 0 if x is 0; +Inf
// if the result overflows.
func ScaleTemperature(x, coefficient, t0, temperature float64) float64 {
	if !amount(x) || !(t0 > 0) || !(temperature > 0) || math.IsInf(t0, 1) || math.IsInf(temperature, 1) || math.IsInf(coefficient, 0) || math.IsNaN(coefficient) {
		return math.NaN() // math.Pow(1, NaN) would be 1
	}
	if x == 0 {
		return 0
	}
	return x * math.Pow(temperature/t0, coefficient*t0)
}

// AtTemperature returns the table scaled from t0 to temperature (both K) with
// the normalized temperature coefficients of n and k in 1/K, one per row; see
// ScaleTemperature. A row with k = 0 keeps k = 0. The published uncertainty
// holds only at the temperature of the table and is left out. It returns the
// errors of Validate, and ErrInput for slices of another length, coefficients
// that are not finite, temperatures that are not finite and positive, and
// results that are not finite.
func (t Table) AtTemperature(t0, temperature float64, cn, ck []float64) (Table, error) {
	if err := t.Validate(); err != nil {
		return Table{}, err
	}
	if len(cn) != len(t.N) || len(ck) != len(t.K) {
		return Table{}, fmt.Errorf("nk: %s: %d rows, %d temperature coefficients of n, %d of k: %w", t.label(), len(t.N), len(cn), len(ck), ErrInput)
	}
	for _, v := range []float64{t0, temperature} {
		if !(v > 0) || math.IsInf(v, 1) {
			return Table{}, fmt.Errorf("nk: %s: temperature %g K: %w", t.label(), v, ErrInput)
		}
	}
	t = t.clone()
	t.Uncertainty = nil
	for i := range t.N {
		n, k := ScaleTemperature(t.N[i], cn[i], t0, temperature), ScaleTemperature(t.K[i], ck[i], t0, temperature)
		if !amount(n) || !amount(k) {
			return Table{}, fmt.Errorf("nk: %s: row %d: temperature coefficients %g and %g 1/K give n %g, k %g at %g K: %w",
				t.label(), i, cn[i], ck[i], n, k, temperature, ErrInput)
		}
		t.N[i], t.K[i] = n, k
	}
	if t.Conditions != "" {
		t.Conditions += "; "
	}
	t.Conditions += fmt.Sprintf("scaled from %g K to %g K by temperature coefficients of the caller", t0, temperature)
	return t, nil
}
