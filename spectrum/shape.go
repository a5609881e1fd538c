package spectrum

import (
	"fmt"
	"slices"
)

// Scale returns a copy with every irradiance multiplied by a factor >= 0. Errors
// wrap [ErrInput].
func (s Spectrum) Scale(factor float64) (Spectrum, error) {
	if !amount(factor) {
		return Spectrum{}, fmt.Errorf("spectrum: scale factor %g is negative or not finite: %w", factor, ErrInput)
	}
	if err := s.Validate(); err != nil {
		return Spectrum{}, err
	}
	s.Wavelength, s.Irradiance = slices.Clone(s.Wavelength), slices.Clone(s.Irradiance)
	for i := range s.Irradiance {
		s.Irradiance[i] *= factor
	}
	return s, s.Validate()
}

// ScaleTo returns a copy scaled to a total irradiance in W/m², for example to
// the 1000 W/m² of IEC 60904-3. Errors wrap [ErrInput].
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
// between rows. Ends outside the spectrum are an error that wraps [ErrRange]; an
// empty range wraps [ErrInput].
func (s Spectrum) Slice(from, to float64) (Spectrum, error) {
	if err := s.Validate(); err != nil {
		return Spectrum{}, err
	}
	if !(from < to) {
		return Spectrum{}, fmt.Errorf("spectrum: slice from %g nm to %g nm is empty: %w", from, to, ErrInput)
	}
	if err := checkInside(s.Name, s.Wavelength, from, to); err != nil {
		return Spectrum{}, fmt.Errorf("spectrum: slice: %w", err)
	}
	out := Spectrum{Name: s.Name, Source: s.Source}
	add := func(l, e float64) {
		out.Wavelength, out.Irradiance = append(out.Wavelength, l), append(out.Irradiance, e)
	}
	add(from, interpolate(s.Wavelength, s.Irradiance, from))
	for i, l := range s.Wavelength {
		if l > from && l < to {
			add(l, s.Irradiance[i])
		}
	}
	add(to, interpolate(s.Wavelength, s.Irradiance, to))
	return out, nil
}

// Resample returns the spectrum at the given wavelengths (nm, ascending) and at
// the middle between each two neighbours, such that the irradiance of every cell
// between two given wavelengths is that of the original, exactly, and nothing is
// negative. A spectrum that is linear over two cells comes back unchanged there.
//
// The value in the middle is what conserves the cell: with values at the ends
// only, conservation cell by cell would leave a saw-tooth. An end whose original
// value is more than twice the mean of a neighbouring cell is lowered to it,
// because the middle would have to be negative otherwise.
//
// Wavelengths outside the spectrum are an error that wraps [ErrRange].
func (s Spectrum) Resample(wavelength []float64) (Spectrum, error) {
	whole, err := CellIntegrals(nil, s, wavelength, Power)
	if err != nil {
		return Spectrum{}, err
	}
	n := len(wavelength)
	end := make([]float64, n)
	for i, l := range wavelength {
		end[i] = interpolate(s.Wavelength, s.Irradiance, l)
	}
	for i, v := range whole {
		most := 2 * v / (wavelength[i+1] - wavelength[i])
		end[i], end[i+1] = min(end[i], most), min(end[i+1], most)
	}
	out := Spectrum{Name: s.Name, Source: s.Source, Wavelength: make([]float64, 0, 2*n-1), Irradiance: make([]float64, 0, 2*n-1)}
	for i, l := range wavelength {
		out.Wavelength, out.Irradiance = append(out.Wavelength, l), append(out.Irradiance, end[i])
		if i < n-1 {
			r := wavelength[i+1]
			middle := l + 0.5*(r-l)
			// From the two trapezoids, with the middle as it was rounded.
			v := (2*whole[i] - end[i]*(middle-l) - end[i+1]*(r-middle)) / (r - l)
			out.Wavelength, out.Irradiance = append(out.Wavelength, middle), append(out.Irradiance, max(0, v))
		}
	}
	return out, out.Validate() // neighbours so close that there is no middle are refused here
}
