package nk

import (
	"bufio"
	"errors"
	"fmt"
	"io"
	"strconv"
	"strings"
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
