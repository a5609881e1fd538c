package nk

import (
	"bufio"
	"bytes"
	"errors"
	"fmt"
	"io"
	"slices"
	"strconv"
	"strings"
	"unicode"
	"unicode/utf8"
)

// Limits of ReadCSV, against files that are none.
const (
	maxRows  = 1_000_000 // rows of figures
	maxLines = 2_000_000 // lines, comments and blank ones included
	maxLine  = 1 << 16   // bytes per line, without its end
	maxNote  = 60_000    // bytes of a comment that fills a field
)

// ParseError says where ReadCSV found a fault.
type ParseError struct {
	Line   int   // 1 for the first line
	Column int   // 1 for the first character of the line, as an editor counts; 0 if the whole line is meant
	Err    error // what is wrong; wraps ErrInput
}

// Error names the line, the column if there is one, and the fault.
func (e *ParseError) Error() string {
	if e.Column == 0 {
		return fmt.Sprintf("nk: csv: line %d: %v", e.Line, e.Err)
	}
	return fmt.Sprintf("nk: csv: line %d, column %d: %v", e.Line, e.Column, e.Err)
}

// Unwrap returns Err.
func (e *ParseError) Unwrap() error { return e.Err }

// ReadCSV reads a table of optical constants. What is accepted, and nothing
// else:
//
//   - Text: UTF-8, with or without a byte order mark; lines end with LF or CRLF;
//     blank lines are skipped. At most 1,000,000 rows, 2,000,000 lines, 65,536
//     bytes per line.
//   - Comments: lines whose first visible character is #. A comment "name: ...",
//     "material: ...", "source: ..." or "conditions: ..." fills that field of the
//     Table, each at most once and of at most 60,000 bytes; all others are skipped.
//   - Header: the first line that is no comment. It names each column by its
//     quantity and then its unit, with a space or an underscore between, or the
//     unit in round or square brackets: "wavelength_nm", "Energy (eV)",
//     "alpha [1/cm]". Letter case does not matter. Quantities and units:
//     "wavelength" or "lambda" in nm, µm or um; "energy" or "photon energy" in
//     eV; "n" and "k" without unit; "alpha" or "absorption coefficient" in 1/cm,
//     cm-1, cm^-1 or cm⁻¹; "alpha uncertainty", the relative standard uncertainty
//     of alpha, without unit. A unit is never guessed: a missing one is an error,
//     and so is a column that is none of these.
//   - Columns: a wavelength or a photon energy, n, and either k or alpha, in any
//     order; the uncertainty if wanted. A file without k or alpha is refused,
//     because a missing k is not k = 0: add a column of zeros if that is meant.
//   - Separator: a tab if the header holds one, else a semicolon if it holds one,
//     else the comma. Every row has as many cells as the header. Double quotes
//     around a cell are taken off; a separator inside them is not understood.
//   - Numbers: digits with an optional sign, decimal sign and exponent. The
//     decimal sign is the point; in files separated by tabs or semicolons it may
//     be the comma instead, the same in the whole file. There is no sign between
//     thousands. Numbers too small for a float64 read as zero.
//   - Order: wavelengths or energies strictly ascending or strictly descending.
//     Rows are reversed where needed, so that the Table ascends in wavelength. A
//     repeated value is an error.
//
// Micrometres are turned into nm by shifting the decimal sign of the text, so
// that 0.2033 µm is the float64 nearest to 203.3 nm. Faults are reported as
// *ParseError, which wraps ErrInput; an error of r is returned as it is, wrapped.
func ReadCSV(r io.Reader) (Table, error) {
	sc := bufio.NewScanner(r)
	sc.Buffer(make([]byte, 0, 4096), maxLine+2)
	p := parser{notes: map[string]bool{}}
	for sc.Scan() {
		p.line++
		if err := p.take(sc.Bytes()); err != nil {
			return Table{}, err
		}
	}
	switch err := sc.Err(); {
	case errors.Is(err, bufio.ErrTooLong):
		p.line++
		return Table{}, p.fault(-1, "longer than %d bytes", maxLine)
	case err != nil:
		return Table{}, fmt.Errorf("nk: csv: after line %d: %w", p.line, err)
	}
	return p.finish()
}

// WriteCSV writes a table in the form that ReadCSV reads: comments with the
// name, material, source and conditions, the header "wavelength_nm,n,k" with
// ",alpha_uncertainty" if there are uncertainties, rows separated by commas,
// lines ended by LF. Every number has as many digits as needed to read back the
// same float64. It returns the errors of Validate, ErrInput for a text that a
// comment line cannot hold (line breaks and other control characters, spaces at
// an end, not UTF-8, over 60,000 bytes) or more than 1,000,000 rows, and the
// errors of w.
func WriteCSV(w io.Writer, t Table) error {
	if err := t.Validate(); err != nil {
		return err
	}
	if len(t.Wavelength) > maxRows {
		return fmt.Errorf("nk: csv: %d rows, at most %d: %w", len(t.Wavelength), maxRows, ErrInput)
	}
	b := bufio.NewWriter(w)
	for _, note := range []struct{ key, text string }{{"name", t.Name}, {"material", t.Material}, {"source", t.Source}, {"conditions", t.Conditions}} {
		if note.text == "" {
			continue
		}
		if len(note.text) > maxNote || !plainText(note.text) || strings.TrimSpace(note.text) != note.text {
			return fmt.Errorf("nk: csv: %s %.40q does not fit in a comment line: %w", note.key, note.text, ErrInput)
		}
		b.WriteString("# " + note.key + ": " + note.text + "\n")
	}
	b.WriteString("wavelength_nm,n,k")
	if t.Uncertainty != nil {
		b.WriteString(",alpha_uncertainty")
	}
	var num []byte
	for i := range t.Wavelength {
		num = append(num[:0], '\n')
		num = strconv.AppendFloat(num, t.Wavelength[i], 'g', -1, 64)
		num = strconv.AppendFloat(append(num, ','), t.N[i], 'g', -1, 64)
		num = strconv.AppendFloat(append(num, ','), t.K[i], 'g', -1, 64)
		if t.Uncertainty != nil {
			num = strconv.AppendFloat(append(num, ','), t.Uncertainty[i], 'g', -1, 64)
		}
		b.Write(num)
	}
	b.WriteByte('\n')
	if err := b.Flush(); err != nil { // a bufio.Writer keeps the first error
		return fmt.Errorf("nk: csv: %w", err)
	}
	return nil
}

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
