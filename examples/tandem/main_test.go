package main

import (
	"flag"
	"io"
	"math"
	"path/filepath"
	"strings"
	"testing"

	"gonum.org/v1/gonum/floats"

	"photonledger/internal/check"
)

var update = flag.Bool("update", false, "write the kept CSV files")

func defaults(t *testing.T) options {
	return options{out: t.TempDir(), figure: "tandem.png", wafer: 160, fluoride: 100, front: 50, back: 20}
}

// TestGolden compares all numbers with kept ones, to the eighth of their digits.
func TestGolden(t *testing.T) {
	o := defaults(t)
	var table strings.Builder
	if err := run(o, &table); err != nil {
		t.Fatal(err)
	}
	for _, name := range []string{"tandem.csv", "tandem_layers.csv", "tandem_thickness.csv"} {
		if err := check.CompareCSV(filepath.Join("testdata", name), filepath.Join(o.out, name), 1e-12, 1e-7, *update); err != nil {
			t.Error(name, err)
		}
	}
	for _, word := range []string{"perovskite", "46.4", "k does not vanish below the gap"} {
		if !strings.Contains(table.String(), word) {
			t.Errorf("the table lacks %q:\n%s", word, table.String())
		}
	}
}

// TestMatch: the currents match, the balance closes on the incident current, and
// the effects of every thickness are those of differences; those on the match are
// found by matching again.
func TestMatch(t *testing.T) {
	c, err := newCell(defaults(t), true)
	if err != nil {
		t.Fatal(err)
	}
	curve, m, err := c.design()
	if err != nil {
		t.Fatal(err)
	}
	if math.Abs(m.top-m.bottom) > 1e-9 {
		t.Errorf("currents %.12g and %.12g", m.top, m.bottom)
	}
	if incident := floats.Sum(c.weights); math.Abs(m.total-incident) > 1e-10 {
		t.Errorf("total %.12g, incident %.12g", m.total, incident)
	}
	for j, l := range c.layers {
		if j == perovskite {
			continue
		}
		d := c.sweep.Thickness[j]
		// The error of a central difference falls with h², that of rounding rises
		// with 1/h: both are below 1e-6 of a slope here.
		h := 1e-3 * d
		both := func(thickness float64) (at, match point) {
			c.sweep.Thickness[j] = thickness
			if at, err = c.at(m.thickness); err != nil {
				t.Fatal(err)
			}
			if match, err = c.match(curve); err != nil {
				t.Fatal(err)
			}
			return at, match
		}
		up, matchUp := both(d + h)
		down, matchDown := both(d - h)
		c.sweep.Thickness[j] = d
		e := m.effects[j]
		for _, v := range []struct {
			what              string
			slope, high, low  float64
			allowed, relative float64
		}{
			{"perovskite", e.top, up.top, down.top, 1e-9, 1e-4},
			{"silicon", e.bottom, up.bottom, down.bottom, 1e-9, 1e-4},
			{"match", e.match, matchUp.thickness, matchDown.thickness, 1e-8, 1e-4},
			{"matched", e.matched, matchUp.top, matchDown.top, 1e-9, 1e-4},
		} {
			if want := (v.high - v.low) / (2 * h); math.Abs(v.slope-want) > v.allowed+v.relative*math.Abs(want) {
				t.Errorf("%s, %s: slope %g, differences %g", l.name, v.what, v.slope, want)
			}
		}
	}
}

// TestTail: without the tail of the fit nothing is taken beyond the band edge, and
// silicon gets more.
func TestTail(t *testing.T) {
	with, err := newCell(defaults(t), true)
	if err != nil {
		t.Fatal(err)
	}
	without, err := newCell(defaults(t), false)
	if err != nil {
		t.Fatal(err)
	}
	a, err := with.at(300)
	if err != nil {
		t.Fatal(err)
	}
	b, err := without.at(300)
	if err != nil {
		t.Fatal(err)
	}
	if !(a.tail > 0.1 && b.bottom > a.bottom) {
		t.Errorf("tail %g, silicon %g with and %g without", a.tail, a.bottom, b.bottom)
	}
	// One cell of the grid at the edge falls linearly to 0 in the whole integral.
	if b.tail > 0.01 {
		t.Errorf("beyond the edge %g", b.tail)
	}
}

func TestOptions(t *testing.T) {
	for _, change := range []func(*options){
		func(o *options) { o.wafer = -1 }, func(o *options) { o.front = math.NaN() }, func(o *options) { o.back = 1e9 },
		func(o *options) { o.fluoride = -1 }, func(o *options) { o.figure = "tandem.gif" }, func(o *options) { o.figure = "a/b.png" },
	} {
		o := defaults(t)
		change(&o)
		if err := o.check(); err == nil || strings.Contains(err.Error(), "\n") {
			t.Errorf("%+v: error %v, want one line", o, err)
		}
	}
	o := defaults(t)
	o.figure = "tandem.svg"
	if err := o.check(); err != nil {
		t.Error(err)
	}
	if err := run(o, io.Discard); err != nil {
		t.Error(err)
	}
}
