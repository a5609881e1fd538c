package spectrum

import (
	_ "embed"
	"strconv"
	"strings"
)

// The three columns of ASTM G173-03, 280 nm to 4000 nm in 2002 rows, as
// published.
//
//go:embed data/astm_g173.csv
var astmG173 string

const astmSource = "ASTM G173-03, Standard Tables for Reference Solar Spectral Irradiances"

// AM15G returns the hemispherical irradiance on a surface tilted by 37 degrees
// towards the sun, AM1.5 global of ASTM G173-03: 1000.37 W/m² from 280 nm to
// 4000 nm.
func AM15G() Spectrum { return astmColumn("AM1.5 global", 2) }

// AM15D returns the direct normal irradiance with circumsolar light, AM1.5
// direct of ASTM G173-03: 900.14 W/m² from 280 nm to 4000 nm.
func AM15D() Spectrum { return astmColumn("AM1.5 direct", 3) }

// AM0 returns the extraterrestrial irradiance of ASTM G173-03: 1347.93 W/m² from
// 280 nm to 4000 nm.
func AM0() Spectrum { return astmColumn("extraterrestrial", 1) }

// astmColumn reads a column of the embedded table. The table is part of the
// program: a row that cannot be read is a bug.
func astmColumn(name string, column int) Spectrum {
	s := Spectrum{Name: name, Source: astmSource}
	for line := range strings.Lines(astmG173) {
		if line[0] == '#' || line[0] == 'w' {
			continue
		}
		fields := strings.Split(strings.TrimSpace(line), ",")
		l, err1 := strconv.ParseFloat(fields[0], 64)
		e, err2 := strconv.ParseFloat(fields[column], 64)
		if err1 != nil || err2 != nil {
			panic("spectrum: embedded ASTM G173 table: bad row " + line)
		}
		s.Wavelength = append(s.Wavelength, l)
		s.Irradiance = append(s.Irradiance, e)
	}
	return s
}
