package check

import (
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

func TestHalfDigit(t *testing.T) {
	for text, want := range map[string]float64{"0.0126": 5e-5, "49": 0.5, "1.5e-3": 5e-5, "-4.722725": 5e-7, "2e4": 5e3} {
		if got := HalfDigit(text); math.Abs(got-want) > 1e-8*want {
			t.Errorf("HalfDigit(%q) = %g, want %g", text, got, want)
		}
	}
}

func TestLoad(t *testing.T) {
	const head = "quantity,inputs,value,unit,tol,known,source\n"
	write := func(body string) string {
		p := filepath.Join(t.TempDir(), "rows.csv")
		if err := os.WriteFile(p, []byte(body), 0o644); err != nil {
			t.Fatal(err)
		}
		return p
	}
	rows, err := Load(write("# comment\n" + head + "reflectance,n=1.5; k=0,0.0400,1,,computed,Fresnel\n"))
	if err != nil {
		t.Fatal(err)
	}
	r := rows[0]
	if r.Num("n") != 1.5 || !math.IsNaN(r.Num("absent")) || r.Judge(0.04004) != nil || r.Judge(0.0401) == nil || r.Judge(math.NaN()) == nil {
		t.Errorf("row %+v does not judge as it should", r)
	}
	for body, want := range map[string]string{
		"":                              "EOF",
		"a,b\n":                         "fields",
		head:                            "no rows",
		head + "q,n,1,1,,read,s\n":      "name=value",
		head + "q,n=1,x,1,,read,s\n":    "parsing",
		head + "q,n=1,1,1,,guessed,s\n": "known",
		head + "q,n=1,1,1,,read,\n":     "no source",
	} {
		if _, err := Load(write(body)); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("Load(%q) = %v, want an error with %q", body, err, want)
		}
	}
}

func TestCompareCSV(t *testing.T) {
	dir := t.TempDir()
	write := func(name, body string) string {
		p := filepath.Join(dir, name)
		if err := os.WriteFile(p, []byte(body), 0o644); err != nil {
			t.Fatal(err)
		}
		return p
	}
	kept := write("kept.csv", "name,a\nx,1.000\n")
	for body, want := range map[string]string{
		"name,a\nx,1.0005\n": "",
		"name,a\nx,1.01\n":   "deviation",
		"name,a\nx,NaN\n":    "deviation",
		"name,a\ny,1\n":      "want \"x\"",
		"name,b\nx,1\n":      "want \"a\"",
		"name,a\nx,1\nx,1\n": "lines",
		"name,a,b\nx,1,2\n":  "fields",
	} {
		err := CompareCSV(kept, write("got.csv", body), 1e-3, 0, false)
		if want == "" && err != nil || want != "" && (err == nil || !strings.Contains(err.Error(), want)) {
			t.Errorf("%q: error %v, want %q", body, err, want)
		}
	}
}
