package spectrum

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/integrate/quad"
)

// MaxPhotocurrent returns the current density in mA/cm² of one electron per
// photon with at least the energy of a band gap (eV), from the short end of the
// spectrum to the wavelength of the gap, with exact ends. A gap whose wavelength
// lies outside the spectrum is an error that wraps [ErrRange].
func MaxPhotocurrent(s Spectrum, gap float64) (float64, error) {
	if err := s.Validate(); err != nil {
		return 0, err
	}
	edge := WavelengthOfEnergy / gap
	lo, hi := s.Wavelength[0], s.Wavelength[len(s.Wavelength)-1]
	if !(gap > 0 && edge > lo && edge <= hi) {
		return 0, fmt.Errorf("spectrum: band gap %g eV: its wavelength %g nm is outside %q, %g nm to %g nm: %w", gap, edge, s.Name, lo, hi, ErrRange)
	}
	return Photocurrent(s, []float64{lo, edge}, []float64{1, 1})
}

// thermalWavelength is hc/(kT) in nm, kelvin by kelvin: λT at which hc/(λkT) = 1.
const thermalWavelength = planck * light / boltzmann * nmPerMetre

// RadiativeCurrent returns the radiative saturation current density J0 in mA/cm²
// of one face that emits into the whole half space of air: e times the integral
// of absorptance times the photon flux of a black body, 2πc/λ⁴/(exp(hc/λkT)-1). The
// absorptance (0..1, finite, that of the hemisphere if it depends on the angle)
// stands at ascending wavelengths (nm) and is linear between them; the temperature
// is in K. A cell that emits from both faces has twice this.
//
// Nothing is counted outside the range of the wavelengths. The black body rises
// so steeply to the infrared that a weak absorptance below the gap can matter:
// bring a table that goes far enough.
//
// Source: W. Shockley, H. J. Queisser, J. Appl. Phys. 32, 510 (1961); for a
// spectral absorptance U. Rau, Phys. Rev. B 76, 085303 (2007), from memory. Each cell
// is integrated by ten-point Gauss quadrature on pieces over which the integrand
// is smooth; the relative error is below 1e-13. Errors wrap [ErrInput].
func RadiativeCurrent(wavelength, absorptance []float64, temperature float64) (float64, error) {
	if err := checkTemperature(temperature); err != nil {
		return 0, err
	}
	if err := checkGrid(wavelength); err != nil {
		return 0, fmt.Errorf("spectrum: radiative current: %w", err)
	}
	if err := checkValues("absorptance", absorptance, wavelength); err != nil {
		return 0, fmt.Errorf("spectrum: radiative current: %w", err)
	}
	e := newEmission(temperature)
	sum := 0.0
	for i := 1; i < len(wavelength); i++ {
		if absorptance[i-1] == 0 && absorptance[i] == 0 {
			continue
		}
		e.lo, e.hi, e.atLo, e.atHi = wavelength[i-1], wavelength[i], absorptance[i-1], absorptance[i]
		sum += e.integrate(max(e.lo, e.first), e.hi)
	}
	if !finite(sum) {
		return 0, fmt.Errorf("spectrum: radiative current: overflow: %w", ErrInput)
	}
	return sum, nil
}

func checkTemperature(temperature float64) error {
	if !(temperature > 0) || math.IsInf(temperature, 1) {
		return fmt.Errorf("spectrum: temperature %g K is not positive and finite: %w", temperature, ErrInput)
	}
	return nil
}

const emissionNodes = 10

// emission integrates a black body times an absorptance that is linear over one
// cell.
type emission struct {
	temperature, x     float64 // K; hc/kT in nm
	first              float64 // nm, below which hc/(λkT) > 700: nothing is left there
	lo, hi, atLo, atHi float64 // the cell and the absorptance at its ends
	node, weight       [emissionNodes]float64
}

func newEmission(temperature float64) *emission {
	e := &emission{temperature: temperature, x: thermalWavelength / temperature}
	e.first = e.x / 700
	quad.Legendre{}.FixedLocations(e.node[:], e.weight[:], -1, 1)
	return e
}

// integrate returns the current density of from..to in mA/cm². It halves the
// range (in ln λ) until the integrand is smooth for ten nodes: hc/(λkT) changes by
// less than 1 and λ by less than half.
func (e *emission) integrate(from, to float64) float64 {
	if !(from < to) {
		return 0
	}
	if e.x/from-e.x/to > 1 || to > 1.5*from {
		middle := math.Sqrt(from) * math.Sqrt(to)
		if from < middle && middle < to {
			return e.integrate(from, middle) + e.integrate(middle, to)
		}
	}
	mid, half := 0.5*from+0.5*to, 0.5*(to-from)
	sum := 0.0
	for i, n := range e.node {
		l := mid + half*n
		// Photons: π L / (hc/λ) per area.
		photons := math.Pi * Radiance(l, e.temperature) * l
		sum += e.weight[i] * half * photons * between(e.lo, e.hi, e.atLo, e.atHi, l)
	}
	return sum * currentPerIrradiance
}

// RadiativeCurrentOfGap returns the radiative saturation current density J0 in
// mA/cm² of one face of a cell that absorbs all photons above a band gap (eV) and
// none below, at a temperature (K): e 2π/(h³c²) times the integral of
// E²/(exp(E/kT)-1) from the gap on, summed as the series
//
//	Σ exp(-nx) (x²/n + 2x/n² + 2/n³), x = gap/kT
//
// (derived: geometric series of 1/(exp(u)-1), integrated by parts). Source as in
// [RadiativeCurrent]. Errors wrap [ErrInput]; a current that underflows is 0.
func RadiativeCurrentOfGap(gap, temperature float64) (float64, error) {
	if err := checkTemperature(temperature); err != nil {
		return 0, err
	}
	if !(gap > 0) || math.IsInf(gap, 1) {
		return 0, fmt.Errorf("spectrum: radiative current: band gap %g eV is not positive and finite: %w", gap, ErrInput)
	}
	thermal := boltzmann * temperature // J
	x := gap * charge / thermal
	// e 2π/(h³c²) (kT)³ in A/m², factor by factor against under- and overflow.
	scale := 2 * math.Pi * charge / planck * (thermal / planck / light) * (thermal / planck / light) * thermal
	j := scale * bosonTail(x) * milliPerOne / cm2PerM2
	if !finite(j) {
		return 0, fmt.Errorf("spectrum: radiative current: overflow at %g eV, %g K: %w", gap, temperature, ErrInput)
	}
	return j, nil
}

// bosonTail is the integral of u²/(exp(u)-1) from x >= 0 on.
func bosonTail(x float64) float64 {
	if x < 0.5 { // where the first missing term is below 1e-19
		// From 2ζ(3) at x = 0 less the integral of the power series with the
		// Bernoulli numbers: u - u²/2 + u³/12 - u⁵/720 + u⁷/30240 - ...
		const twiceZeta3 = 2.404113806319188570799476323022899981530
		x2 := x * x
		series := x2/2 - x*x2/6 + x2*x2*(1.0/48-x2*(1.0/4320-x2*(1.0/241920-x2*(1.0/12096000-
			x2*(1.0/574801920-x2*(691.0/(1307674368000*14)-x2/(74724249600*16)))))))
		return twiceZeta3 - series
	}
	sum := 0.0
	for n := 1.0; ; n++ {
		term := math.Exp(-n*x) * (x*(x/n+2/(n*n)) + 2/(n*n*n))
		sum += term
		if !(term > 1e-17*sum) {
			return sum
		}
	}
}
