package spectrum

import (
	"fmt"
	"strings"
)

// quantity is what a column of a file holds.
type quantity int

const (
	noColumn quantity = iota
	wavelengthColumn
	irradianceColumn
	fluxColumn
)

func (q quantity) String() string {
	return [...]string{"nothing", "wavelength", "irradiance", "photon flux"}[q]
}

// column is a quantity in a unit.
type column struct {
	quantity quantity
	factor   float64 // to W m^-2 nm^-1; for a photon flux still to be divided by the wavelength in nm
	shift    int     // power of ten to nm
}

const (
	shiftNM   = 3    // from µm to nm
	perMicron = 1e-3 // 1/µm in 1/nm
)

// columnOf reads one cell of the header: the name of a quantity, then its unit.
func columnOf(cell string) (column, error) {
	text := strings.ReplaceAll(strings.ToLower(cell), "_", " ")
	for _, c := range []struct {
		name  string
		units string
		of    func(unit string) (column, bool)
	}{
		{"wavelength", "nm or µm", wavelengthUnit},
		{"lambda", "nm or µm", wavelengthUnit},
		{"spectral irradiance", "W m-2 nm-1, W m-2 µm-1 or mW cm-2 nm-1", irradianceUnit},
		{"irradiance", "W m-2 nm-1, W m-2 µm-1 or mW cm-2 nm-1", irradianceUnit},
		{"spectral photon flux", "cm-2 s-1 nm-1 or m-2 s-1 nm-1", fluxUnit},
		{"photon flux", "cm-2 s-1 nm-1 or m-2 s-1 nm-1", fluxUnit},
	} {
		rest, ok := strings.CutPrefix(strings.Join(strings.Fields(text), " "), c.name)
		if !ok || rest != "" && !strings.ContainsRune(" ([", rune(rest[0])) {
			continue
		}
		unit := bareUnit(rest)
		if unit == "" {
			return column{}, fmt.Errorf("%q in the header does not name its unit, %s", cell, c.units)
		}
		// Small letters must not turn megawatts into milliwatts.
		if col, ok := c.of(unit); ok && !strings.Contains(cell, "MW") {
			return col, nil
		}
		return column{}, fmt.Errorf("%q in the header has an unknown unit, want %s", cell, c.units)
	}
	return column{}, fmt.Errorf("%q in the header is none of wavelength, irradiance, photon flux", cell)
}

// bareUnit takes the brackets and everything between the factors off a unit in
// small letters, so that the spellings of one unit become few.
func bareUnit(s string) string { return unitSpelling.Replace(s) }

var unitSpelling = strings.NewReplacer(" ", "", "^", "", "*", "", "·", "", "⋅", "", ".", "", "(", "", ")", "", "[", "", "]", "",
	"⁻", "-", "¹", "1", "²", "2", "µ", "u", "μ", "u")

func wavelengthUnit(unit string) (column, bool) {
	switch unit {
	case "nm":
		return column{quantity: wavelengthColumn}, true
	case "um":
		return column{quantity: wavelengthColumn, shift: shiftNM}, true
	}
	return column{}, false
}

func irradianceUnit(unit string) (column, bool) {
	c := column{quantity: irradianceColumn}
	switch unit {
	case "wm-2nm-1", "w/m2/nm", "w/m2nm":
		c.factor = 1
	case "wm-2um-1", "w/m2/um", "w/m2um":
		c.factor = perMicron
	case "mwcm-2nm-1", "mw/cm2/nm", "mw/cm2nm":
		c.factor = cm2PerM2 / milliPerOne
	default:
		return column{}, false
	}
	return c, true
}

func fluxUnit(unit string) (column, bool) {
	c := column{quantity: fluxColumn}
	switch unit {
	case "cm-2s-1nm-1", "1/cm2snm", "1/cm2/s/nm", "/cm2/s/nm":
		c.factor = 1 / photonsPerIrradiance
	case "m-2s-1nm-1", "1/m2snm", "1/m2/s/nm", "/m2/s/nm":
		c.factor = 1 / (photonsPerIrradiance * cm2PerM2)
	default:
		return column{}, false
	}
	return c, true
}
