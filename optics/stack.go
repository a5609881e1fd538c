package optics

import (
	"fmt"
	"math"
)

// Polarization selects the polarisation of a [Wave]. The zero value is
// unpolarised light: the mean of the intensities of s and p.
type Polarization int

// The polarisations. S has its electric field, P its magnetic field parallel
// to the films.
const (
	Unpolarized Polarization = iota
	S
	P
)

// String returns "unpolarised", "s" or "p".
func (p Polarization) String() string {
	switch p {
	case Unpolarized:
		return "unpolarised"
	case S:
		return "s"
	case P:
		return "p"
	}
	return fmt.Sprintf("Polarization(%d)", int(p))
}

// weights returns the shares of the s and p intensities.
func (p Polarization) weights() (s, pp float64) {
	switch p {
	case S:
		return 1, 0
	case P:
		return 0, 1
	}
	return 0.5, 0.5
}

// Film is one homogeneous film of a [Stack].
type Film struct {
	Index      complex128 // n + ik; n >= 0, k >= 0, modulus from MinIndex to MaxIndex
	Thickness  float64    // nm, >= 0; at most MaxPhase/2π wavelengths in the film
	Incoherent bool       // intensities add in this film (wafers, glass, encapsulants)
}

// Stack is a sequence of films between two half spaces. The zero value is
// invalid, because its media have no index.
type Stack struct {
	Front complex128 // index of the medium the light comes from; lossless, imaginary part 0
	Films []Film     // from the side where the light comes in
	Back  complex128 // index of the medium behind the last film, n + ik
}

// Wave is one plane wave that meets a stack.
type Wave struct {
	Wavelength   float64 // vacuum wavelength, nm, > 0
	Angle        float64 // angle of incidence in the front medium, rad, 0 <= Angle < π/2
	Polarization Polarization
}

// Limits of the inputs. Outside them a call returns an error: beyond them the
// numbers of a double no longer carry the answer.
const (
	MinIndex = 1e-6 // smallest modulus of an index
	MaxIndex = 1e6  // largest modulus of an index
	MaxPhase = 1e9  // rad, largest |k0 N d| of a film

	MinWavelength = 1e-6 // nm
	MaxWavelength = 1e15 // nm
)

// Validate reports the first value of the stack that is out of its range.
// Phases are checked when the wave is known.
func (s Stack) Validate() error {
	if err := checkFront(s.Front); err != nil {
		return err
	}
	for j, f := range s.Films {
		if err := checkIndex(f.Index); err != nil {
			return fmt.Errorf("optics: film %d: %w", j, err)
		}
		if err := checkThickness(f.Thickness); err != nil {
			return fmt.Errorf("optics: film %d: %w", j, err)
		}
	}
	if err := checkIndex(s.Back); err != nil {
		return fmt.Errorf("optics: back medium: %w", err)
	}
	return nil
}

// Validate reports the first value of the wave that is out of its range.
func (w Wave) Validate() error {
	if w.Wavelength >= MinWavelength && w.Wavelength <= MaxWavelength && w.Angle >= 0 && w.Angle < math.Pi/2 &&
		w.Polarization >= Unpolarized && w.Polarization <= P {
		return nil
	}
	if err := checkWavelength(w.Wavelength); err != nil {
		return fmt.Errorf("optics: %w", err)
	}
	if err := checkAngle(w.Angle); err != nil {
		return fmt.Errorf("optics: %w", err)
	}
	if w.Polarization < Unpolarized || w.Polarization > P {
		return fmt.Errorf("optics: unknown polarisation %d: %w", int(w.Polarization), ErrInput)
	}
	return nil
}

func checkWavelength(l float64) error {
	if !(l > 0) || math.IsInf(l, 1) {
		return fmt.Errorf("wavelength %g nm is not a positive number: %w", l, ErrInput)
	}
	if l < MinWavelength || l > MaxWavelength {
		return fmt.Errorf("wavelength %g nm is not between %g and %g nm: %w", l, MinWavelength, MaxWavelength, ErrInput)
	}
	return nil
}

func checkAngle(angle float64) error {
	if !(angle >= 0 && angle < math.Pi/2) {
		return fmt.Errorf("angle %g rad is not in [0, π/2): %w", angle, ErrInput)
	}
	return nil
}

func checkFront(n complex128) error {
	if imag(n) != 0 {
		return fmt.Errorf("optics: front medium: index %v absorbs, the front medium must be lossless: %w", n, ErrInput)
	}
	if err := checkIndex(n); err != nil {
		return fmt.Errorf("optics: front medium: %w", err)
	}
	return nil
}

// checkIndex accepts n >= 0, k >= 0 with a modulus between the limits.
func checkIndex(n complex128) error {
	re, im := real(n), imag(n)
	if !(re >= 0 && im >= 0) {
		return fmt.Errorf("index %v: n and k must not be negative or NaN: %w", n, ErrInput)
	}
	if m := max(re, im); !(m >= MinIndex && m <= MaxIndex) {
		return fmt.Errorf("index %v: modulus is not between %g and %g: %w", n, MinIndex, MaxIndex, ErrInput)
	}
	return nil
}

func checkThickness(d float64) error {
	if d < 0 {
		return fmt.Errorf("thickness %g nm is negative: %w", d, ErrInput)
	}
	if math.IsNaN(d) || math.IsInf(d, 0) {
		return fmt.Errorf("thickness %g nm is not a number: %w", d, ErrInput)
	}
	return nil
}

// checkPhase makes sure that the phase of a film can be reduced without loss,
// and that an absorbing incoherent film is thick enough for its assumption.
func checkPhase(n complex128, d, wavelength float64, incoherent bool) error {
	phase := 2 * math.Pi * math.Hypot(real(n), imag(n)) * d / wavelength
	if !(phase <= MaxPhase) {
		return fmt.Errorf("thickness %g nm at index %v and wavelength %g nm exceeds a phase of %g rad: %w", d, n, wavelength, MaxPhase, ErrInput)
	}
	if incoherent && imag(n) > 0 && phase < 2*math.Pi {
		return fmt.Errorf("an absorbing film of %g nm is thinner than one wavelength in it and cannot be incoherent: %w", d, ErrInput)
	}
	return nil
}
