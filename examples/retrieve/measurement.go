package main

import (
	"encoding/csv"
	"fmt"
	"io"
	"math"
	"math/rand/v2"
	"os"
	"slices"
	"strconv"

	"photonledger/nk"
	"photonledger/optics"
)

// measurement is a reflectance spectrum of a film on silicon.
type measurement struct {
	title       string
	wavelength  []float64 // nm
	reflectance []float64
	sigma       []float64 // standard deviations; nil if not known
	silicon     []complex128
	film        *nk.Interpolant // of an invented sample, else nil
}

// step of the invented measurement, nm.
const step = 4

// measure returns the measurement of a file, or invents one.
func measure(o options) (*measurement, error) {
	m := &measurement{}
	var err error
	if o.data != "" {
		err = m.read(o)
	} else {
		for i := 0; o.first+float64(i*step) <= o.last; i++ {
			m.wavelength = append(m.wavelength, o.first+float64(i*step))
		}
	}
	if err != nil {
		return nil, err
	}
	silicon, err := nk.Material("si_green2008")
	if err != nil {
		return nil, err
	}
	if m.silicon, err = silicon.Sample(nil, m.wavelength); err != nil {
		return nil, err
	}
	if o.data == "" {
		err = m.invent(o)
	}
	return m, err
}

// invent makes the reflectances of a published film, with noise.
func (m *measurement) invent(o options) (err error) {
	m.title = fmt.Sprintf("Invented measurement: %g nm of %s on silicon, noise %g, seed %d", o.thickness, o.sample, o.noise, o.seed)
	if m.film, err = nk.Material(o.sample); err != nil {
		return err
	}
	index, err := m.film.Sample(nil, m.wavelength)
	if err != nil {
		return err
	}
	sweep := optics.NewSweep(m.wavelength, 1)
	if err := sweep.SetBack(m.silicon); err != nil {
		return err
	}
	if err := sweep.SetFilm(0, index, o.thickness); err != nil {
		return err
	}
	r, err := sweep.Run()
	if err != nil {
		return err
	}
	noise := rand.New(rand.NewPCG(o.seed, 0))
	for _, share := range r.R {
		m.reflectance = append(m.reflectance, share+o.noise*noise.NormFloat64())
		m.sigma = append(m.sigma, o.noise)
	}
	return nil
}

// read reads a measurement and keeps the range of the fit.
func (m *measurement) read(o options) error {
	f, err := os.Open(o.data)
	if err != nil {
		return err
	}
	defer f.Close()
	r := csv.NewReader(f)
	r.Comment, r.TrimLeadingSpace = '#', true
	head, err := r.Read()
	if err != nil && err != io.EOF {
		return fmt.Errorf("%s: %w", o.data, err)
	}
	columns := []string{"wavelength_nm", "reflectance", "sigma"}
	if !slices.Equal(head, columns) && !slices.Equal(head, columns[:2]) {
		return fmt.Errorf("%s: header %q, want wavelength_nm,reflectance or wavelength_nm,reflectance,sigma", o.data, head)
	}
	last := 0.0
	for {
		fields, err := r.Read()
		if err == io.EOF {
			break
		} else if err != nil {
			return fmt.Errorf("%s: %w", o.data, err)
		}
		row := [3]float64{2: 1}
		line, _ := r.FieldPos(0)
		for j, text := range fields {
			if row[j], err = strconv.ParseFloat(text, 64); err != nil {
				return fmt.Errorf("%s: line %d, %s %q: not a number", o.data, line, columns[j], text)
			}
		}
		// Noise may leave 0..1; percent is far outside.
		if !(row[0] > last) || math.IsInf(row[0], 1) || !(row[1] > -0.5 && row[1] < 1.5) || !(row[2] > 0 && row[2] < 1) && len(fields) > 2 {
			return fmt.Errorf("%s: line %d, %q: want ascending wavelengths in nm and shares 0..1", o.data, line, fields)
		}
		last = row[0]
		if row[0] >= o.first && row[0] <= o.last {
			m.wavelength, m.reflectance = append(m.wavelength, row[0]), append(m.reflectance, row[1])
			if len(fields) > 2 {
				m.sigma = append(m.sigma, row[2])
			}
		}
	}
	if len(m.wavelength) < 10 {
		return fmt.Errorf("%s: %d rows between %g nm and %g nm, want 10 or more", o.data, len(m.wavelength), o.first, o.last)
	}
	m.title = fmt.Sprintf("Measurement %s, film on silicon", o.data)
	return nil
}
