package nk

import (
	"bytes"
	"fmt"
	"slices"
	"strings"
	"unicode"
	"unicode/utf8"
)

// parser is the state of one ReadCSV.
type parser struct {
	t          Table
	line       int
	text       string          // the current line
	notes      map[string]bool // comments that filled a field
	separator  byte
	decimal    byte // decimal sign seen in numbers, 0 before the first
	columns    []column
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
	if !plainText(p.text) {
		return p.fault(badText(p.text), "not UTF-8, or a control character; the file must be UTF-8 text")
	}
	switch trimmed := strings.TrimSpace(p.text); {
	case trimmed == "":
		return nil
	case trimmed[0] == '#':
		return p.comment(trimmed[1:])
	case p.columns == nil:
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

// badText returns the position of the first byte that plainText refuses, or -1.
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

func plainText(s string) bool { return badText(s) < 0 }

// comment keeps what a comment says about the origin of the table.
func (p *parser) comment(text string) error {
	key, value, ok := strings.Cut(text, ":")
	key = strings.ToLower(strings.TrimSpace(key))
	fields := map[string]*string{"name": &p.t.Name, "material": &p.t.Material, "source": &p.t.Source, "conditions": &p.t.Conditions}
	field := fields[key]
	if !ok || field == nil {
		return nil
	}
	if p.notes[key] {
		return p.fault(-1, "the comment %q comes twice", key)
	}
	if value = strings.TrimSpace(value); len(value) > maxNote {
		return p.fault(-1, "the comment %q is longer than %d bytes", key, maxNote)
	}
	p.notes[key] = true
	*field = value
	return nil
}

// cells calls f with each cell of the current line, without quotes and outer
// spaces, and the position where it begins.
func (p *parser) cells(f func(i int, cell string, at int) error) error {
	for i, start := 0, 0; ; i++ {
		end := strings.IndexByte(p.text[start:], p.separator)
		if end < 0 {
			end = len(p.text)
		} else {
			end += start
		}
		cell := p.text[start:end]
		at := start + len(cell) - len(strings.TrimLeftFunc(cell, unicode.IsSpace))
		cell = strings.TrimSpace(cell)
		if len(cell) >= 2 && cell[0] == '"' && cell[len(cell)-1] == '"' {
			cell = strings.TrimSpace(cell[1 : len(cell)-1])
		}
		if err := f(i, cell, min(at, end)); err != nil {
			return err
		}
		if end == len(p.text) {
			return nil
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
	err := p.cells(func(_ int, cell string, at int) error {
		c, err := columnOf(cell)
		if err != nil {
			return p.fault(at, "%v", err)
		}
		for _, other := range p.columns {
			if c.role() == other.role() {
				return p.fault(at, "column %q says the same as an earlier one", cell)
			}
		}
		p.columns = append(p.columns, c)
		return nil
	})
	if err != nil {
		return err
	}
	for role, name := range []string{wavelengthNM: "wavelength or energy", indexN: "n", indexK: "k or alpha"} {
		if !slices.ContainsFunc(p.columns, func(c column) bool { return c.role() == column(role) }) {
			return p.fault(-1, "no column for %s", name)
		}
	}
	if slices.Contains(p.columns, uncertainty) {
		p.t.Uncertainty = []float64{}
	}
	return nil
}

// row reads one line of figures.
func (p *parser) row() error {
	if len(p.t.Wavelength) == maxRows {
		return p.fault(-1, "more than %d rows", maxRows)
	}
	var v [columnCount]float64
	var where [columnCount]int
	n := 0
	err := p.cells(func(i int, cell string, at int) error {
		n++
		if i >= len(p.columns) {
			return p.fault(at, "more cells than the %d columns of the header", len(p.columns))
		}
		c := p.columns[i]
		x, err := p.number(cell, at, c)
		if err != nil {
			return err
		}
		if positive := c.role() == wavelengthNM; !amount(x) || positive && x == 0 {
			return p.fault(at, "%s is %s", c, cell)
		}
		v[c.role()], where[c.role()] = x, at
		return nil
	})
	if err != nil {
		return err
	}
	if n < len(p.columns) {
		return p.fault(-1, "%d cells for the %d columns of the header", n, len(p.columns))
	}
	return p.store(v, where)
}

// store converts the units of one row, checks its place and appends it.
func (p *parser) store(v [columnCount]float64, where [columnCount]int) error {
	if slices.Contains(p.columns, energyEV) {
		e := v[wavelengthNM]
		if v[wavelengthNM] = nmEV / e; !(v[wavelengthNM] > 0) || !amount(v[wavelengthNM]) {
			return p.fault(where[wavelengthNM], "energy %g eV has no finite wavelength", e)
		}
	}
	w := v[wavelengthNM]
	if slices.Contains(p.columns, alphaPerCM) {
		alpha := v[indexK]
		if v[indexK] = ExtinctionCoefficient(alpha, w); !amount(v[indexK]) {
			return p.fault(where[indexK], "alpha %g 1/cm has no finite k", alpha)
		}
	}
	if i := len(p.t.Wavelength); i > 0 {
		before := p.t.Wavelength[i-1]
		if i == 1 {
			p.descending = w < before
		}
		if w == before || w < before != p.descending {
			return p.fault(where[wavelengthNM], "wavelength %g nm after %g nm: the rows must strictly ascend or strictly descend", w, before)
		}
	}
	p.t.Wavelength = append(p.t.Wavelength, w)
	p.t.N = append(p.t.N, v[indexN])
	p.t.K = append(p.t.K, v[indexK])
	if p.t.Uncertainty != nil {
		p.t.Uncertainty = append(p.t.Uncertainty, v[uncertainty])
	}
	return nil
}

// finish checks the whole table.
func (p *parser) finish() (Table, error) {
	p.text = ""
	if p.columns == nil {
		return Table{}, p.fault(-1, "the file ends without a header")
	}
	if p.descending {
		slices.Reverse(p.t.Wavelength)
		slices.Reverse(p.t.N)
		slices.Reverse(p.t.K)
		slices.Reverse(p.t.Uncertainty)
	}
	if err := p.t.Validate(); err != nil {
		return Table{}, &ParseError{p.line, 0, err}
	}
	return p.t, nil
}
