package spectrum

import (
	"fmt"
	"math"
)

// Diode is the current-voltage curve of an ideal cell in its figures.
type Diode struct {
	Voc        float64 // V, open-circuit voltage
	Voltage    float64 // V, at maximum power
	Current    float64 // mA/cm², at maximum power
	Power      float64 // mW/cm², maximum
	FillFactor float64 // Power / (Voc × photocurrent)
}

// IdealDiode returns the figures of J(V) = photocurrent - j0 (exp(V/kT) - 1), both
// currents in mA/cm² and > 0, the temperature in K. With the radiative current of
// both faces or of one it is the detailed-balance limit of W. Shockley and H. J.
// Queisser, J. Appl. Phys. 32, 510 (1961). Errors wrap [ErrInput].
//
// The maximum lies where v + ln(1+v) = ln(photocurrent/j0 + 1) for v = V/kT
// (derived: dJV/dV = 0), found by Newton's method from below, which converges from
// there because the left side is concave.
func IdealDiode(photocurrent, j0, temperature float64) (Diode, error) {
	if err := checkTemperature(temperature); err != nil {
		return Diode{}, err
	}
	for _, j := range [2]float64{photocurrent, j0} {
		if !(j > 0) || math.IsInf(j, 1) {
			return Diode{}, fmt.Errorf("spectrum: ideal diode: photocurrent %g and j0 %g mA/cm²: both must be positive and finite: %w", photocurrent, j0, ErrInput)
		}
	}
	open := math.Log1p(photocurrent / j0)
	if math.IsInf(open, 1) {
		open = math.Log(photocurrent) - math.Log(j0)
	}
	v := open / 2 // below the root, since ln(1+v) <= v
	for range 50 {
		step := (open - v - math.Log1p(v)) / (1 + 1/(1+v))
		v += step
		if !(math.Abs(step) > 1e-16*v) {
			break
		}
	}
	volt := boltzmann * temperature / charge
	d := Diode{Voc: open * volt, Voltage: v * volt, Current: (photocurrent + j0) * (v / (1 + v))}
	d.Power = d.Voltage * d.Current
	d.FillFactor = v / open * (d.Current / photocurrent)
	if !finite(d.Power) || !finite(d.FillFactor) {
		return Diode{}, fmt.Errorf("spectrum: ideal diode: overflow for photocurrent %g, j0 %g mA/cm², %g K: %w", photocurrent, j0, temperature, ErrInput)
	}
	return d, nil
}
