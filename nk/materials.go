package nk

import (
	"embed"
	"fmt"
	"io/fs"
	"math"
	"path"
	"slices"
	"strings"
)

//go:embed data/*.csv
var data embed.FS

// Materials returns the names of the embedded tables in alphabetical order:
// material, first author or name of the data, year. doc.go says what each is;
// the Table of a Material names the paper and the conditions. Published formulas
// are listed by Formulas.
func Materials() []string {
	files, err := fs.Glob(data, "data/*.csv")
	if err != nil {
		panic("nk: bad pattern of embedded files") // a fault of this package
	}
	names := make([]string, len(files))
	for i, f := range files {
		names[i] = strings.TrimSuffix(path.Base(f), ".csv")
	}
	slices.Sort(names)
	return names
}

// Material returns the interpolation of an embedded table by its name. Each call
// reads the table anew, so call it once and keep the result. An unknown name is
// an ErrUnknown that lists names like it.
func Material(name string) (*Interpolant, error) {
	t, err := MaterialTable(name)
	if err != nil {
		return nil, err
	}
	return t.Interpolate()
}

// MaterialTable returns the rows of an embedded table by its name, the caller's
// own copy. An unknown name is an ErrUnknown that lists names like it.
func MaterialTable(name string) (Table, error) {
	if !slices.Contains(Materials(), name) {
		return Table{}, unknownMaterial(name)
	}
	f, err := data.Open("data/" + name + ".csv")
	if err != nil {
		return Table{}, fmt.Errorf("nk: material %s: %w", name, err)
	}
	defer f.Close()
	t, err := ReadCSV(f)
	if err != nil {
		return Table{}, fmt.Errorf("nk: material %s: %w", name, err)
	}
	t.Name = name
	if name == "si_schinke2015" {
		t.Uncertainty = schinkeUncertainty(t.Wavelength)
	}
	return t, nil
}

// unknownMaterial is the error for a name that no table has.
func unknownMaterial(name string) error {
	names := Materials()
	want, _, _ := strings.Cut(strings.ToLower(strings.TrimSpace(name)), "_")
	if _, err := Formula(name); err == nil {
		return fmt.Errorf("nk: material %q is a formula, not a table, call Formula: %w", name, ErrUnknown)
	}
	like := slices.DeleteFunc(slices.Clone(names), func(s string) bool {
		material, _, _ := strings.Cut(s, "_")
		return want == "" || !strings.HasPrefix(material, want) && !strings.HasPrefix(want, material)
	})
	if len(like) == 0 {
		like = names
	}
	return fmt.Errorf("nk: material %q: %w; there are %s", name, ErrUnknown, strings.Join(like, ", "))
}

// schinkeUncertainty returns the relative standard uncertainty of silicon's
// absorption coefficient at each wavelength (nm). Published by C. Schinke et
// al., AIP Advances 5, 067168 (2015), are the five values of the list (read in
// two copies of the paper's figures); between them the logarithm is taken as
// linear over the wavelength, which is this package's choice and not the paper's.
// The five span the table; outside them there is no value (NaN).
func schinkeUncertainty(lambda []float64) []float64 {
	anchors := [...]struct{ nm, relative float64 }{{250, 0.004}, {600, 0.11}, {1000, 0.014}, {1200, 0.12}, {1450, 1.8}}
	u := make([]float64, len(lambda))
	for i, l := range lambda {
		u[i] = math.NaN()
		for j := range len(anchors) - 1 {
			a, b := anchors[j], anchors[j+1]
			switch {
			case l == a.nm:
				u[i] = a.relative
			case l == b.nm:
				u[i] = b.relative
			case l > a.nm && l < b.nm:
				u[i] = logLinear(a.relative, b.relative, (l-a.nm)/(b.nm-a.nm))
			}
		}
	}
	return u
}
