package handbook

import (
	"fmt"
	"math"
	"strconv"
	"strings"

	"photonledger/internal/check"
	"photonledger/optics"
)

const degree = math.Pi / 180

// opticsQuantity computes a row about films and interfaces.
func opticsQuantity(row check.Row) (float64, error) {
	switch row.Quantity {
	case "reflectance", "transmittance":
		st, w, err := rowStack(row)
		if err != nil {
			return 0, err
		}
		r, err := optics.Solve(st, w)
		if row.Quantity == "transmittance" {
			return r.T, err
		}
		return r.R, err
	case "cavity_minimum":
		// A film whose faces reflect R, a quarter wave thick, in air.
		root := math.Sqrt(row.Num("R"))
		n := (1 + root) / (1 - root)
		r, err := optics.Solve(optics.Stack{Front: 1, Back: 1, Films: []optics.Film{{Index: complex(n, 0), Thickness: 600 / (4 * n)}}}, optics.Wave{Wavelength: 600})
		return r.T, err
	case "haze_reflection", "haze_transmission":
		st := optics.Stack{Front: complex(row.Num("n1"), 0), Back: complex(row.Num("n2"), 0)}
		r, err := optics.SolveRough(st, []float64{row.Num("sigma")}, optics.Wave{Wavelength: row.Num("wavelength")})
		if err != nil {
			return 0, err
		}
		smooth, err := optics.Solve(st, optics.Wave{Wavelength: row.Num("wavelength")})
		if row.Quantity == "haze_transmission" {
			return 1 - r.T/smooth.T, err
		}
		return 1 - r.R/smooth.R, err
	case "brewster_angle":
		return optics.BrewsterAngle(row.Num("n1"), row.Num("n2")) / degree, nil
	case "critical_angle":
		return optics.CriticalAngle(row.Num("n1"), row.Num("n2")) / degree, nil
	case "evanescent_depth":
		q := optics.RefractedCosine(complex(row.Num("n"), 0), 1, row.Num("angle")*degree)
		return 1 / (2 * math.Pi * imag(q)), nil
	}
	return 0, fmt.Errorf("quantity %q is not known here", row.Quantity)
}

// rowStack builds the stack that a row describes, at a wavelength of 600 nm.
func rowStack(row check.Row) (optics.Stack, optics.Wave, error) {
	w := optics.Wave{Wavelength: 600}
	if _, ok := row.Inputs["n"]; ok {
		return optics.Stack{Front: 1, Back: complex(row.Num("n"), row.Num("k"))}, w, nil
	}
	st := optics.Stack{Front: complex(row.Num("front"), 0), Back: complex(row.Num("back"), 0)}
	repeat := 1
	if r, ok := row.Inputs["repeat"]; ok {
		var err error
		if repeat, err = strconv.Atoi(r); err != nil {
			return st, w, err
		}
	}
	list := strings.Repeat(row.Inputs["films"]+" ", repeat) + row.Inputs["last"]
	for _, word := range strings.Fields(list) {
		at := strings.IndexAny(word, "*@!")
		if at < 0 {
			return st, w, fmt.Errorf("film %q", word)
		}
		n, err1 := strconv.ParseFloat(word[:at], 64)
		x, err2 := strconv.ParseFloat(word[at+1:], 64)
		if err1 != nil || err2 != nil {
			return st, w, fmt.Errorf("film %q", word)
		}
		f := optics.Film{Index: complex(n, 0), Thickness: x * w.Wavelength, Incoherent: word[at] == '!'}
		if word[at] == '*' {
			f.Thickness /= 4 * n
		}
		st.Films = append(st.Films, f)
	}
	if _, ok := row.Inputs["angle"]; ok {
		w.Angle = row.Num("angle") * degree
	}
	switch row.Inputs["pol"] {
	case "s":
		w.Polarization = optics.S
	case "p":
		w.Polarization = optics.P
	}
	return st, w, nil
}
