package spectrum

import (
	"fmt"
	"math"
	"sort"

	"gonum.org/v1/gonum/unit/constant"
)

// Physical constants and conversions.
const (
	planck    = float64(constant.Planck)             // J s
	light     = float64(constant.LightSpeedInVacuum) // m/s
	charge    = float64(constant.ElementaryCharge)   // C
	boltzmann = float64(constant.Boltzmann)          // J/K

	metrePerNM  = 1e-9
	nmPerMetre  = 1e9
	cm2PerM2    = 1e4
	milliPerOne = 1e3

	// photonsPerIrradiance times E (W m^-2 nm^-1) times λ (nm) is the photon flux
	// in cm^-2 s^-1 nm^-1.
	photonsPerIrradiance = metrePerNM / (planck * light) / cm2PerM2

	// currentPerIrradiance times the integral of E λ over λ is mA/cm².
	currentPerIrradiance = charge * photonsPerIrradiance * milliPerOne
)

// WavelengthOfEnergy is hc in nm eV: the wavelength of a photon times its energy.
const WavelengthOfEnergy = planck * light / charge * nmPerMetre

// Spectrum is a spectral irradiance, linear between its wavelengths and not
// known outside them.
type Spectrum struct {
	Name, Source string
	Wavelength   []float64 // nm, strictly ascending, two or more
	Irradiance   []float64 // W m^-2 nm^-1, >= 0, one per wavelength
}

// Validate reports the first value that a spectrum cannot have. Errors wrap
// [ErrInput].
func (s Spectrum) Validate() error {
	if err := checkGrid(s.Wavelength); err != nil {
		return fmt.Errorf("spectrum: %q: %w", s.Name, err)
	}
	if err := checkValues("irradiance", s.Irradiance, s.Wavelength); err != nil {
		return fmt.Errorf("spectrum: %q: %w", s.Name, err)
	}
	for i, e := range s.Irradiance {
		if e < 0 {
			return fmt.Errorf("spectrum: %q: irradiance at %g nm: %g is negative: %w", s.Name, s.Wavelength[i], e, ErrInput)
		}
	}
	return nil
}

// At returns the irradiance (W m^-2 nm^-1) at a wavelength (nm), linear between
// the two neighbours. A wavelength outside the spectrum is an error that wraps
// [ErrRange].
func (s Spectrum) At(wavelength float64) (float64, error) {
	n := len(s.Wavelength)
	if n == 0 || !(wavelength >= s.Wavelength[0] && wavelength <= s.Wavelength[n-1]) {
		return 0, fmt.Errorf("spectrum: %q: %g nm is outside its range: %w", s.Name, wavelength, ErrRange)
	}
	return interpolate(s.Wavelength, s.Irradiance, wavelength), nil
}

// interpolate evaluates the piecewise linear function through (x, y); the place
// must lie inside.
func interpolate(x, y []float64, at float64) float64 {
	i := sort.SearchFloat64s(x, at)
	if x[i] == at {
		return y[i]
	}
	t := (at - x[i-1]) / (x[i] - x[i-1])
	return y[i-1] + t*(y[i]-y[i-1])
}

// PhotonFlux stores the spectral photon flux (cm^-2 s^-1 nm^-1) at the
// wavelengths of the spectrum in dst, which is allocated when it is nil, and
// returns it: E λ/(hc). The length of dst must fit.
func (s Spectrum) PhotonFlux(dst []float64) ([]float64, error) {
	if err := s.Validate(); err != nil {
		return nil, err
	}
	if dst == nil {
		dst = make([]float64, len(s.Wavelength))
	}
	if len(dst) != len(s.Wavelength) {
		return nil, fmt.Errorf("spectrum: photon flux: dst has %d values for %d wavelengths: %w", len(dst), len(s.Wavelength), ErrInput)
	}
	for i, l := range s.Wavelength {
		dst[i] = photonsPerIrradiance * s.Irradiance[i] * l
	}
	return dst, nil
}

// Scale returns a copy with every irradiance multiplied by a factor >= 0.
func (s Spectrum) Scale(factor float64) (Spectrum, error) {
	if !(factor >= 0) || math.IsInf(factor, 1) {
		return Spectrum{}, fmt.Errorf("spectrum: scale factor %g is negative or not finite: %w", factor, ErrInput)
	}
	if err := s.Validate(); err != nil {
		return Spectrum{}, err
	}
	out := s.copy()
	for i := range out.Irradiance {
		out.Irradiance[i] *= factor
	}
	return out, nil
}

// ScaleTo returns a copy scaled to a total irradiance in W/m², for example to
// the 1000 W/m² of IEC 60904-3.
func (s Spectrum) ScaleTo(total float64) (Spectrum, error) {
	have, err := s.Total()
	if err != nil {
		return Spectrum{}, err
	}
	if have == 0 {
		return Spectrum{}, fmt.Errorf("spectrum: %q has no irradiance to scale: %w", s.Name, ErrInput)
	}
	return s.Scale(total / have)
}

// Slice returns the part between two wavelengths (nm) with exact ends, linear
// between rows. Ends outside the spectrum are an error that wraps [ErrRange].
func (s Spectrum) Slice(from, to float64) (Spectrum, error) {
	if err := s.Validate(); err != nil {
		return Spectrum{}, err
	}
	if !(from < to) {
		return Spectrum{}, fmt.Errorf("spectrum: slice from %g nm to %g nm is empty: %w", from, to, ErrInput)
	}
	first, err := s.At(from)
	if err != nil {
		return Spectrum{}, err
	}
	last, err := s.At(to)
	if err != nil {
		return Spectrum{}, err
	}
	out := Spectrum{Name: s.Name, Source: s.Source, Wavelength: []float64{from}, Irradiance: []float64{first}}
	for i, l := range s.Wavelength {
		if l > from && l < to {
			out.Wavelength = append(out.Wavelength, l)
			out.Irradiance = append(out.Irradiance, s.Irradiance[i])
		}
	}
	out.Wavelength, out.Irradiance = append(out.Wavelength, to), append(out.Irradiance, last)
	return out, nil
}

func (s Spectrum) copy() Spectrum {
	s.Wavelength = append([]float64(nil), s.Wavelength...)
	s.Irradiance = append([]float64(nil), s.Irradiance...)
	return s
}

// Planck returns the irradiance of a black body that fills the solid angle of a
// cone about the normal, at the given wavelengths: π sin²θ times the radiance
// 2hc²/λ⁵/(exp(hc/λkT) - 1). halfAngle (rad) is θ; π/2 gives the exitance of the
// surface itself. Source: M. Planck, Ann. Phys. 309, 553 (1901).
func Planck(wavelength []float64, temperature, halfAngle float64) (Spectrum, error) {
	if !(temperature > 0) || math.IsInf(temperature, 1) {
		return Spectrum{}, fmt.Errorf("spectrum: Planck: temperature %g K is not positive: %w", temperature, ErrInput)
	}
	if !(halfAngle > 0 && halfAngle <= math.Pi/2) {
		return Spectrum{}, fmt.Errorf("spectrum: Planck: half angle %g rad is not in (0, π/2]: %w", halfAngle, ErrInput)
	}
	if err := checkGrid(wavelength); err != nil {
		return Spectrum{}, fmt.Errorf("spectrum: Planck: %w", err)
	}
	s := Spectrum{
		Name:       fmt.Sprintf("black body, %g K", temperature),
		Source:     "Planck's law",
		Wavelength: append([]float64(nil), wavelength...),
		Irradiance: make([]float64, len(wavelength)),
	}
	sin := math.Sin(halfAngle)
	for i, l := range wavelength {
		s.Irradiance[i] = math.Pi * sin * sin * Radiance(l, temperature)
	}
	return s, nil
}

// Radiance returns the spectral radiance of a black body (W m^-2 sr^-1 nm^-1) at
// a wavelength (nm) and temperature (K), Planck's law.
//
// Special case: NaN unless both are positive and finite.
func Radiance(wavelength, temperature float64) float64 {
	if !(wavelength > 0 && temperature > 0) || math.IsInf(wavelength, 1) || math.IsInf(temperature, 1) {
		return math.NaN()
	}
	l := wavelength * metrePerNM
	x := planck * light / (l * boltzmann * temperature)
	return 2 * planck * light * light / (l * l * l * l * l) / math.Expm1(x) * metrePerNM
}
