package nk

import (
	"fmt"
	"testing"
)

// BenchmarkIndex evaluates each model at one wavelength, with and without the
// derivatives with respect to all parameters.
func BenchmarkIndex(b *testing.B) {
	for _, c := range []struct {
		name  string
		model Model
	}{
		{"cauchy", &Cauchy{A: 1.45, B: 0.0035, C: 1e-4}},
		{"sellmeier", &Sellmeier{1, []float64{0.6961663, 0.4079426, 0.8974794}, []float64{0.0684043, 0.1162414, 9.896161}}},
		{"drude", &Drude{3.9, 1.27, 0.1}},
		{"lorentz", &Lorentz{1.2, 2, 3.5, 0.8}},
		{"tauc-lorentz", &TaucLorentz{122, 3.45, 2.54, 1.2, 1.15}},
		{"cody-lorentz", &CodyLorentz{70, 3.8, 2.2, 1.6, 1, 1.8, 0.05, 1}},
		{"forouhi-bloomer", &ForouhiBloomer{0.3, 7, 13, 1.3, 1.5}},
		{"sum", &Sum{&TaucLorentz{122, 3.45, 2.54, 1.2, 1.15}, &Drude{0, 1.2, 0.1}}},
	} {
		b.Run(fmt.Sprintf("model=%s/derivatives=no", c.name), func(b *testing.B) {
			b.ReportAllocs()
			for b.Loop() {
				if _, err := c.model.Index(633); err != nil {
					b.Fatal(err)
				}
			}
		})
		grad := make([]complex128, c.model.NumParameters())
		b.Run(fmt.Sprintf("model=%s/derivatives=all", c.name), func(b *testing.B) {
			b.ReportAllocs()
			for b.Loop() {
				if _, _, err := c.model.Gradient(grad, 633); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}

func BenchmarkBruggeman(b *testing.B) {
	n := []complex128{complex(0.05, 4), 1.5, 2, 1}
	for _, f := range [][]float64{{0.3, 0.7}, {0.2, 0.5, 0.3}, {0.2, 0.4, 0.3, 0.1}} {
		b.Run(fmt.Sprintf("components=%d", len(f)), func(b *testing.B) {
			b.ReportAllocs()
			for b.Loop() {
				if _, err := Bruggeman(n[:len(f)], f); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}

func BenchmarkKramersKronig(b *testing.B) {
	lambda := energyGrid(30, 0.3, 0.02, 1.2)
	n, err := Evaluate(nil, &TaucLorentz{122, 3.45, 2.54, 1.2, 1.15}, lambda)
	if err != nil {
		b.Fatal(err)
	}
	b.Run(fmt.Sprintf("rows=%d", len(lambda)), func(b *testing.B) {
		b.ReportAllocs()
		for b.Loop() {
			if _, err := KramersKronig(lambda, n, KramersKronigSettings{}); err != nil {
				b.Fatal(err)
			}
		}
	})
}

// BenchmarkFit fits thickness and dispersion of a film to a reflectance of 61
// wavelengths, derivatives by differences.
func BenchmarkFit(b *testing.B) {
	clean := make([]float64, 61)
	if err := filmProblem(clean, nil).Model(clean, []float64{1.62, 0.008, 500}); err != nil {
		b.Fatal(err)
	}
	b.ReportAllocs()
	for b.Loop() {
		if _, err := Fit(filmProblem(clean, nil)); err != nil {
			b.Fatal(err)
		}
	}
}
