package nk

import (
	"math"
	"testing"
)

func allFreeCarriers() []FreeCarriers {
	return []FreeCarriers{FreeCarriersSchroder1978(), FreeCarriersGreen1995(), FreeCarriersRuediger2013(), FreeCarriersBakerFinch2014()}
}

// alphaOf returns the absorption coefficient of a material in 1/cm.
func alphaOf(t *testing.T, m *Interpolant, lambda float64) float64 {
	t.Helper()
	v, err := m.At(lambda)
	if err != nil {
		t.Fatal(err)
	}
	return AbsorptionCoefficient(imag(v), lambda)
}

// TestFactsOfTheTradeSilicon: common practice, no source.
func TestFactsOfTheTradeSilicon(t *testing.T) {
	const cmPerUM = 1e-4
	absorbed := func(alpha, um float64) float64 { return -math.Expm1(-alpha * um * cmPerUM) }
	for _, name := range []string{"si_green2008", "si_schinke2015"} {
		m, err := Material(name)
		if err != nil {
			t.Fatal(err)
		}
		if a := absorbed(alphaOf(t, m, 800), 60); !(a > 0.99) {
			t.Errorf("%s: 60 µm absorb %.4f at 800 nm, want more than 0.99", name, a)
		}
		if a := absorbed(alphaOf(t, m, 800), 40); !(a < 0.99) {
			t.Errorf("%s: 40 µm absorb %.4f at 800 nm, want less than 0.99: about 60 µm are needed", name, a)
		}
		if a := absorbed(alphaOf(t, m, 400), 1); !(a > 0.999) {
			t.Errorf("%s: 1 µm absorbs %.5f at 400 nm, want more than 0.999", name, a)
		}
		if a, b := absorbed(alphaOf(t, m, 1055), 100), absorbed(alphaOf(t, m, 1070), 100); !(a > 0.1 && b < 0.1) {
			t.Errorf("%s: 100 µm absorb %.4f at 1055 nm and %.4f at 1070 nm, want 0.1 in between", name, a, b)
		}
	}
}

// TestOrderOfAbsorptionEdges: the edges lie in the order Ge, Si, InP, GaAs from
// long to short wavelength (common practice, no source). The edge is taken as
// the longest wavelength with alpha = 10/cm for the indirect semiconductors, and
// alpha = 1000/cm for the direct ones, which absorb that much right at the gap;
// it also keeps clear of the damping of the InP model below the gap.
func TestOrderOfAbsorptionEdges(t *testing.T) {
	order := []struct {
		name  string
		alpha float64 // 1/cm
		gap   float64 // eV at room temperature, from memory
	}{{"ge_nunley2016", 10, 0.66}, {"si_green2008", 10, 1.12}, {"inp_adachi1989", 1000, 1.34}, {"gaas_papatryfonos2021", 1000, 1.42}}
	before := math.Inf(1)
	for _, o := range order {
		m, err := Material(o.name)
		if err != nil {
			t.Fatal(err)
		}
		edge := 0.0
		for l, high := m.Table.Range(); l <= high; l += 0.5 {
			if alphaOf(t, m, l) >= o.alpha {
				edge = l
			}
		}
		if !(edge < before && edge > 0) {
			t.Errorf("%s: edge at %g nm, the one before at %g nm", o.name, edge, before)
		}
		// An indirect edge lies up to one phonon (0.05 eV) above its gap.
		if e := nmEV / edge; !(e > o.gap-0.02 && e < o.gap+0.06) {
			t.Errorf("%s: edge at %.1f nm, %.3f eV, the gap is %g eV", o.name, edge, e, o.gap)
		}
		before = edge
	}
}
