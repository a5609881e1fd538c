package nk

import (
	"fmt"
	"strconv"
	"strings"
)

// column is what a column of a file holds.
type column int

const (
	wavelengthNM column = iota
	indexN
	indexK
	uncertainty
	columnCount // number of roles; the columns below take the role of one above

	wavelengthUM
	energyEV
	alphaPerCM
)

// role is the column of the Table that a column of the file fills.
func (c column) role() column {
	switch c {
	case wavelengthUM, energyEV:
		return wavelengthNM
	case alphaPerCM:
		return indexK
	}
	return c
}

// String names the column in an error.
func (c column) String() string {
	switch c {
	case wavelengthNM, wavelengthUM:
		return "wavelength"
	case energyEV:
		return "energy"
	case indexN:
		return "n"
	case indexK:
		return "k"
	case alphaPerCM:
		return "alpha"
	}
	return "uncertainty"
}

// columnOf reads one cell of the header.
func columnOf(cell string) (column, error) {
	words := strings.FieldsFunc(strings.ToLower(cell), func(r rune) bool { return strings.ContainsRune(" \t_()[]", r) })
	quantity, unit := strings.Join(words, " "), ""
	if n := len(words) - 1; n > 0 {
		switch words[n] {
		case "wavelength", "energy", "coefficient", "uncertainty": // the last word of a name is no unit
		default:
			quantity, unit = strings.Join(words[:n], " "), words[n]
		}
	}
	var want string
	switch quantity {
	case "wavelength", "lambda":
		switch unit {
		case "nm":
			return wavelengthNM, nil
		case "\u00b5m", "\u03bcm", "um": // micro sign, Greek mu
			return wavelengthUM, nil
		}
		want = "nm or µm"
	case "energy", "photon energy":
		if unit == "ev" {
			return energyEV, nil
		}
		want = "eV"
	case "alpha", "absorption coefficient":
		switch unit {
		case "1/cm", "cm-1", "cm^-1", "cm\u207b\u00b9":
			return alphaPerCM, nil
		}
		want = "1/cm"
	case "n", "k", "alpha uncertainty":
		if unit == "" {
			return map[string]column{"n": indexN, "k": indexK, "alpha uncertainty": uncertainty}[quantity], nil
		}
		want = "no unit"
	default:
		return 0, fmt.Errorf("%q in the header is none of wavelength, energy, n, k, alpha, alpha uncertainty", cell)
	}
	if unit == "" {
		return 0, fmt.Errorf("%q in the header does not name its unit, %s", cell, want)
	}
	return 0, fmt.Errorf("%q in the header has the unit %q, want %s", cell, unit, want)
}

// shiftNM is the power of ten between µm and nm.
const shiftNM = 3

// number reads one cell of a row.
func (p *parser) number(cell string, at int, c column) (float64, error) {
	if cell == "" {
		return 0, p.fault(at, "%s is missing", c)
	}
	text := []byte(cell)
	marks, exponent := 0, -1
	for i, b := range text {
		switch {
		case '0' <= b && b <= '9', b == '+', b == '-':
		case b == 'e' || b == 'E':
			if exponent < 0 {
				exponent = i
			}
		case b == '.' || b == ',' && p.separator != ',':
			if marks++; p.decimal != 0 && p.decimal != b {
				return 0, p.fault(at, "%s %q: decimal point and decimal comma in one file", c, cell)
			}
			p.decimal = b
			text[i] = '.'
		default:
			return 0, p.fault(at, "%s %q is not a number", c, cell)
		}
	}
	if marks > 1 {
		return 0, p.fault(at, "%s %q is not a number: %d decimal signs", c, cell, marks)
	}
	s := string(text)
	if c == wavelengthUM {
		e := 0
		if exponent >= 0 {
			var err error
			if e, err = strconv.Atoi(s[exponent+1:]); err != nil || e > 1000 {
				return 0, p.fault(at, "%s %q is not a number", c, cell)
			}
			s = s[:exponent]
		}
		if s == "" { // "e5" must not become a number by the shift
			return 0, p.fault(at, "%s %q is not a number", c, cell)
		}
		s += "e" + strconv.Itoa(e+shiftNM)
	}
	x, err := strconv.ParseFloat(s, 64)
	if err != nil {
		return 0, p.fault(at, "%s %q is not a number within the range of float64", c, cell)
	}
	return x, nil
}
