package spectrum

import (
	"bufio"
	"errors"
	"fmt"
	"io"
	"slices"
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
		return fmt.Sprintf("spectrum: csv: line %d: %v", e.Line, e.Err)
	}
	return fmt.Sprintf("spectrum: csv: line %d, column %d: %v", e.Line, e.Column, e.Err)
}

// Unwrap returns Err.
func (e *ParseError) Unwrap() error { return e.Err }

// ReadCSV reads a spectrum. What is accepted, and nothing else:
//
//   - Text: UTF-8, with or without a byte order mark; lines end with LF or CRLF;
//     blank lines are skipped. At most 1,000,000 rows, 2,000,000 lines, 65,536
//     bytes per line.
//   - Comments: lines whose first visible character is #. A comment "name: ..." or
//     "source: ..." fills that field of the Spectrum, each at most once and of at
//     most 60,000 bytes; all others are skipped.
//   - Header: the first line that is no comment. It names both columns by
//     quantity and then unit, with a space or an underscore between, or the unit in
//     round or square brackets: "wavelength_nm", "irradiance [W m^-2 nm^-1]". Letter
//     case does not matter. A unit is never guessed: a missing one is an error.
//   - Wavelength: "wavelength" or "lambda" in nm, µm or um.
//   - Values: "irradiance" or "spectral irradiance" in W m-2 nm-1, W m-2 µm-1 or
//     mW cm-2 nm-1; or "photon flux" or "spectral photon flux" in cm-2 s-1 nm-1 or
//     m-2 s-1 nm-1, which becomes an irradiance by hc/λ. A unit may be written with
//     m^-2, m⁻² or /m2, /m², factors apart by a space, an underscore, a dot, * or ·, or
//     nothing; brackets around a denominator, as in W/(m2 nm).
//   - Separator: a tab if the header holds one, else a semicolon if it holds one,
//     else the comma. Every row has two cells. Double quotes around a cell are taken
//     off; a separator inside them is not understood.
//   - Numbers: digits with an optional sign, decimal sign and exponent. The
//     decimal sign is the point; in files separated by tabs or semicolons it may
//     be the comma instead, the same in the whole file. There is no sign between
//     thousands. Numbers too small for a float64 read as zero.
//   - Order: wavelengths strictly ascending or strictly descending; rows are
//     reversed where needed. A repeated value is an error.
//
// Micrometres are turned into nm by shifting the decimal sign of the text, so
// that 0.2033 µm is the float64 nearest to 203.3 nm. Faults are reported as
// *ParseError, which wraps ErrInput; an error of r is returned as it is, wrapped.
func ReadCSV(r io.Reader) (Spectrum, error) {
	sc := bufio.NewScanner(r)
	sc.Buffer(make([]byte, 0, 4096), maxLine+2)
	p := parser{notes: map[string]bool{}}
	for sc.Scan() {
		p.line++
		if err := p.take(sc.Bytes()); err != nil {
			return Spectrum{}, err
		}
	}
	switch err := sc.Err(); {
	case errors.Is(err, bufio.ErrTooLong):
		p.line++
		return Spectrum{}, p.fault(-1, "longer than %d bytes", maxLine)
	case err != nil:
		return Spectrum{}, fmt.Errorf("spectrum: csv: after line %d: %w", p.line, err)
	}
	return p.finish()
}

// WriteCSV writes a spectrum in the form that ReadCSV reads: comments with the
// name and the source, the header "wavelength_nm,irradiance_W_m-2_nm-1", rows
// separated by commas, lines ended by LF. Every number has as many digits as
// needed to read back the same float64. It returns the errors of Validate,
// ErrInput for a text that a comment line cannot hold (line breaks and other
// control characters, spaces at an end, not UTF-8, over 60,000 bytes) or more than
// 1,000,000 rows, and the errors of w.
func WriteCSV(w io.Writer, s Spectrum) error {
	if err := s.Validate(); err != nil {
		return err
	}
	if len(s.Wavelength) > maxRows {
		return fmt.Errorf("spectrum: csv: %d rows, at most %d: %w", len(s.Wavelength), maxRows, ErrInput)
	}
	b := bufio.NewWriter(w)
	for _, note := range [2][2]string{{"name", s.Name}, {"source", s.Source}} {
		text := note[1]
		if text == "" {
			continue
		}
		if len(text) > maxNote || badText(text) >= 0 || strings.TrimSpace(text) != text {
			return fmt.Errorf("spectrum: csv: %s %.40q does not fit in a comment line: %w", note[0], text, ErrInput)
		}
		b.WriteString("# " + note[0] + ": " + text + "\n")
	}
	b.WriteString("wavelength_nm,irradiance_W_m-2_nm-1\n")
	var row []byte
	for i, l := range s.Wavelength {
		row = strconv.AppendFloat(row[:0], l, 'g', -1, 64)
		row = strconv.AppendFloat(append(row, ','), s.Irradiance[i], 'g', -1, 64)
		b.Write(append(row, '\n'))
	}
	if err := b.Flush(); err != nil { // a bufio.Writer keeps the first error
		return fmt.Errorf("spectrum: csv: %w", err)
	}
	return nil
}

// finish checks the whole spectrum.
func (p *parser) finish() (Spectrum, error) {
	p.text = ""
	if p.columns[0].quantity == noColumn {
		return Spectrum{}, p.fault(-1, "the file ends without a header")
	}
	if p.descending {
		slices.Reverse(p.s.Wavelength)
		slices.Reverse(p.s.Irradiance)
	}
	if err := p.s.Validate(); err != nil {
		return Spectrum{}, &ParseError{p.line, 0, err}
	}
	return p.s, nil
}
