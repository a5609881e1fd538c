package spectrum

import (
	"bytes"
	"fmt"
	"strconv"
	"strings"
	"unicode"
	"unicode/utf8"
)

// parser is the state of one ReadCSV.
type parser struct {
	s          Spectrum
	line       int
	text       string          // the current line
	notes      map[string]bool // comments that filled a field
	separator  byte
	decimal    byte // decimal sign seen in numbers, 0 before the first
	columns    [2]column
	descending bool
}

// take reads one line.
func (p *parser) take(raw []byte) error {
	if p.line == 1 {
		raw = bytes.TrimPrefix(raw, []byte("\ufeff"))
	}
	p.text = string(raw)
	switch {
	case p.line > maxLines:
		return p.fault(-1, "more than %d lines", maxLines)
	case len(raw) > maxLine:
		return p.fault(-1, "longer than %d bytes", maxLine)
	}
	if at := badText(p.text); at >= 0 {
		return p.fault(at, "not UTF-8, or a control character; the file must be UTF-8 text")
	}
	switch trimmed := strings.TrimSpace(p.text); {
	case trimmed == "":
		return nil
	case trimmed[0] == '#':
		return p.comment(trimmed[1:])
	case p.columns[0].quantity == noColumn:
		return p.header()
	}
	return p.row()
}

// fault is an error at a byte of the current line; -1 means the whole line.
func (p *parser) fault(at int, format string, args ...any) error {
	column := 0
	if at >= 0 {
		column = utf8.RuneCountInString(p.text[:at]) + 1
	}
	return &ParseError{p.line, column, fmt.Errorf(format+": %w", append(args, ErrInput)...)}
}

// badText returns the position of the first byte that is no plain text, or -1.
func badText(s string) int {
	for i, r := range s {
		if r != '\t' && unicode.IsControl(r) {
			return i
		}
		if r == utf8.RuneError {
			if _, n := utf8.DecodeRuneInString(s[i:]); n == 1 {
				return i
			}
		}
	}
	return -1
}

// comment keeps what a comment says about the origin of the spectrum.
func (p *parser) comment(text string) error {
	key, value, ok := strings.Cut(text, ":")
	key, value = strings.ToLower(strings.TrimSpace(key)), strings.TrimSpace(value)
	var field *string
	switch key {
	case "name":
		field = &p.s.Name
	case "source":
		field = &p.s.Source
	}
	if !ok || field == nil {
		return nil
	}
	if p.notes[key] {
		return p.fault(-1, "the comment %q comes twice", key)
	}
	if len(value) > maxNote {
		return p.fault(-1, "the comment %q is longer than %d bytes", key, maxNote)
	}
	p.notes[key] = true
	*field = value
	return nil
}

// cells returns the cells of the current line, without quotes and outer spaces,
// and the position where each begins.
func (p *parser) cells() (cells []string, at []int) {
	for start := 0; ; {
		end := strings.IndexByte(p.text[start:], p.separator)
		if end < 0 {
			end = len(p.text)
		} else {
			end += start
		}
		cell := p.text[start:end]
		at = append(at, start+len(cell)-len(strings.TrimLeftFunc(cell, unicode.IsSpace)))
		cell = strings.TrimSpace(cell)
		if len(cell) >= 2 && cell[0] == '"' && cell[len(cell)-1] == '"' {
			cell = strings.TrimSpace(cell[1 : len(cell)-1])
		}
		cells = append(cells, cell)
		if end == len(p.text) || len(cells) > len(p.columns) { // one too many is enough to complain
			return cells, at
		}
		start = end + 1
	}
}

// header reads the names of the columns.
func (p *parser) header() error {
	p.separator = ','
	if strings.Contains(p.text, "\t") {
		p.separator = '\t'
	} else if strings.Contains(p.text, ";") {
		p.separator = ';'
	}
	cells, at := p.cells()
	if len(cells) != len(p.columns) {
		return p.fault(-1, "the header must name two columns, a wavelength and an irradiance or photon flux")
	}
	var columns [2]column
	for i, cell := range cells {
		c, err := columnOf(cell)
		if err != nil {
			return p.fault(at[i], "%v", err)
		}
		columns[i] = c
	}
	if (columns[0].quantity == wavelengthColumn) == (columns[1].quantity == wavelengthColumn) {
		return p.fault(-1, "the header must name one wavelength and one irradiance or photon flux")
	}
	p.columns = columns
	return nil
}

// row reads one line of figures.
func (p *parser) row() error {
	if len(p.s.Wavelength) == maxRows {
		return p.fault(-1, "more than %d rows", maxRows)
	}
	cells, at := p.cells()
	if len(cells) != len(p.columns) {
		return p.fault(-1, "want two cells in a row")
	}
	var w, v float64
	var atW, atV int
	var of column
	for i, cell := range cells {
		x, err := p.number(cell, at[i], p.columns[i])
		if err != nil {
			return err
		}
		if p.columns[i].quantity == wavelengthColumn {
			w, atW = x, at[i]
		} else {
			v, atV, of = x, at[i], p.columns[i]
		}
	}
	if !(w > 0) {
		return p.fault(atW, "wavelength %g nm is not positive", w)
	}
	if v *= of.factor; of.quantity == fluxColumn {
		v /= w
	}
	if !amount(v) {
		return p.fault(atV, "irradiance %g W m-2 nm-1 is negative or not finite", v)
	}
	if i := len(p.s.Wavelength); i > 0 {
		before := p.s.Wavelength[i-1]
		if i == 1 {
			p.descending = w < before
		}
		if w == before || w < before != p.descending {
			return p.fault(atW, "wavelength %g nm after %g nm: the rows must strictly ascend or strictly descend", w, before)
		}
	}
	p.s.Wavelength = append(p.s.Wavelength, w)
	p.s.Irradiance = append(p.s.Irradiance, v)
	return nil
}

// number reads one cell of a row.
func (p *parser) number(cell string, at int, c column) (float64, error) {
	if cell == "" {
		return 0, p.fault(at, "%s is missing", c.quantity)
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
				return 0, p.fault(at, "%s %q: decimal point and decimal comma in one file", c.quantity, cell)
			}
			p.decimal = b
			text[i] = '.'
		default:
			return 0, p.fault(at, "%s %q is not a number", c.quantity, cell)
		}
	}
	s := string(text)
	if c.shift != 0 {
		e := 0
		if exponent >= 0 {
			var err error
			if e, err = strconv.Atoi(s[exponent+1:]); err != nil || e > 1000 {
				return 0, p.fault(at, "%s %q is not a number", c.quantity, cell)
			}
			s = s[:exponent]
		}
		if s == "" { // "e5" must not become a number by the shift
			return 0, p.fault(at, "%s %q is not a number", c.quantity, cell)
		}
		s += "e" + strconv.Itoa(e+c.shift)
	}
	x, err := strconv.ParseFloat(s, 64)
	if err != nil || marks > 1 {
		return 0, p.fault(at, "%s %q is not a number within the range of float64", c.quantity, cell)
	}
	return x, nil
}
