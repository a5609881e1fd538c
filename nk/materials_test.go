package nk

import (
	"errors"
	"math"
	"os"
	"slices"
	"strings"
	"testing"
)

// TestEveryMaterial reads all embedded files: order, range, finiteness (by
// Validate) and provenance.
func TestEveryMaterial(t *testing.T) {
	names := Materials()
	if len(names) < 33 || !slices.IsSorted(names) {
		t.Fatalf("%d materials: %v", len(names), names)
	}
	for _, name := range names {
		m, err := Material(name)
		if err != nil {
			t.Error(err)
			continue
		}
		tb := m.Table
		if err := tb.Validate(); err != nil {
			t.Error(err)
		}
		if tb.Name != name || tb.Material == "" || tb.Conditions == "" {
			t.Errorf("%s: name %q, material %q, conditions %q", name, tb.Name, tb.Material, tb.Conditions)
		}
		// The source names the year of the material's name.
		if year := name[len(name)-4:]; !strings.Contains(tb.Source, "("+year+")") {
			t.Errorf("%s: source %q does not name the year %s", name, tb.Source, year)
		}
		low, high := tb.Range()
		if low < 190 || low > 310 || high < 780 || high > 4001 {
			t.Errorf("%s: range %g to %g nm: a unit is wrong", name, low, high)
		}
		for i := range tb.N {
			if tb.N[i] < 0.01 || tb.N[i] > 8 || tb.K[i] > 40 {
				t.Errorf("%s: n %g, k %g at %g nm", name, tb.N[i], tb.K[i], tb.Wavelength[i])
			}
		}
	}
}

// TestMaterialsAreDescribed: doc.go names every table.
func TestMaterialsAreDescribed(t *testing.T) {
	b, err := os.ReadFile("doc.go")
	if err != nil {
		t.Fatal(err)
	}
	text := string(b)
	for _, name := range Materials() {
		if !strings.Contains(text, name) {
			t.Errorf("doc.go does not describe %s", name)
		}
	}
}

func TestTextbookSemiconductors(t *testing.T) {
	for _, element := range []string{"ge_", "si_", "gaas_", "inp_"} {
		if !slices.ContainsFunc(Materials(), func(s string) bool { return strings.HasPrefix(s, element) }) {
			t.Errorf("no material %s", element)
		}
	}
}

func TestUnknownMaterial(t *testing.T) {
	for name, want := range map[string]string{
		"si":                "si_aspnes1983, si_green2008, si_schinke2015",
		"Si_Green2008":      "si_aspnes1983, si_green2008",
		"silicon":           "si_green2008",
		"unobtainium":       "ag_jiang2016, ag_johnson1972",
		"":                  "ag_jiang2016, ag_johnson1972",
		"../materials":      "ag_jiang2016",
		"sio2_malitson1965": "call Formula",
	} {
		m, err := Material(name)
		if m != nil || !errors.Is(err, ErrUnknown) || !strings.Contains(err.Error(), want) || !strings.Contains(err.Error(), `"`+name+`"`) {
			t.Errorf("Material(%q): %v, want ErrUnknown with %q", name, err, want)
		}
	}
}

// TestMaterialIsTheCallersOwn: changing one result does not reach the next.
func TestMaterialIsTheCallersOwn(t *testing.T) {
	a, err := MaterialTable("si_green2008")
	if err != nil {
		t.Fatal(err)
	}
	a.N[0] = 99
	b, err := MaterialTable("si_green2008")
	if err != nil || b.N[0] != 1.665 {
		t.Errorf("n = %g, %v", b.N[0], err)
	}
}

// TestSchinkeUncertainty: only the silicon of 2015 carries one; it never leaves
// the two published values around it, and there is none outside.
func TestSchinkeUncertainty(t *testing.T) {
	for _, name := range Materials() {
		tb, err := MaterialTable(name)
		if err != nil {
			t.Fatal(err)
		}
		if (tb.Uncertainty != nil) != (name == "si_schinke2015") {
			t.Errorf("%s: %d uncertainties", name, len(tb.Uncertainty))
		}
	}
	m, err := Material("si_schinke2015")
	if err != nil {
		t.Fatal(err)
	}
	published := [][2]float64{{250, 0.004}, {600, 0.11}, {1000, 0.014}, {1200, 0.12}, {1450, 1.8}}
	for i := range len(published) - 1 {
		a, b := published[i], published[i+1]
		for l := a[0]; l <= b[0]; l++ {
			u, err := m.RelativeUncertainty(l)
			if err != nil || u < min(a[1], b[1])*(1-1e-15) || u > max(a[1], b[1])*(1+1e-15) {
				t.Errorf("uncertainty at %g nm = %g, %v", l, u, err)
			}
		}
	}
	if u := schinkeUncertainty([]float64{249.9, 1450.1}); !math.IsNaN(u[0]) || !math.IsNaN(u[1]) {
		t.Errorf("outside the published values: %v", u)
	}
}
