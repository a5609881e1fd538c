package nk

import (
	"math"
	"strings"
	"testing"

	"photonledger/internal/check"
)

// modelOfRow makes the model of a row of handbook values and returns the
// wavelength in nm.
func modelOfRow(t *testing.T, r check.Row) (Model, float64) {
	t.Helper()
	_, kind, _ := strings.Cut(r.Quantity, " ")
	n := r.Num
	lambda := nmEV / n("E")
	switch kind {
	case "tauc-lorentz":
		return &TaucLorentz{n("A"), n("E0"), n("C"), n("Eg"), n("EpsInf")}, lambda
	case "cody-lorentz":
		return &CodyLorentz{n("A"), n("E0"), n("Gamma"), n("Eg"), n("Ep"), n("Et"), n("Eu"), n("EpsInf")}, lambda
	case "forouhi-bloomer":
		return &ForouhiBloomer{n("A"), n("B"), n("C"), n("Eg"), n("NInf")}, lambda
	case "urbach":
		return &Urbach{n("Strength"), n("Edge"), n("Width")}, lambda
	case "drude":
		d, err := DrudeFromCarriers(n("EpsInf"), n("N"), n("m"), n("mu"))
		if err != nil {
			t.Fatal(err)
		}
		return &d, n("nm")
	}
	t.Fatalf("%s:%d: unknown quantity %q", r.File, r.Line, r.Quantity)
	return nil, 0
}

// rowValue computes the quantity of a row.
func rowValue(t *testing.T, r check.Row) float64 {
	t.Helper()
	const ps, fs = 1e-12, 1e-15
	switch r.Quantity {
	case "plasma frequency":
		d, err := DrudeFromCarriers(1, r.Num("N"), r.Num("m"), 1)
		if err != nil {
			t.Fatal(err)
		}
		return d.Plasma / reducedPlanckEV * ps
	case "scattering time":
		d, err := DrudeFromCarriers(1, 0, r.Num("m"), r.Num("mu"))
		if err != nil {
			t.Fatal(err)
		}
		return reducedPlanckEV / d.Damping / fs
	}
	m, lambda := modelOfRow(t, r)
	eps, err := m.Permittivity(nil, lambda)
	if err != nil {
		t.Fatal(err)
	}
	switch q, _, _ := strings.Cut(r.Quantity, " "); q {
	case "eps1":
		return real(eps)
	case "eps2":
		return imag(eps)
	}
	n, err := m.Index(lambda)
	if err != nil {
		t.Fatal(err)
	}
	if strings.HasPrefix(r.Quantity, "k") {
		return imag(n)
	}
	return real(n)
}

// TestHandbookModels: values of closed formulas and of numerical transforms of
// their imaginary part, each with its source in the file.
func TestHandbookModels(t *testing.T) {
	for _, file := range []string{"nk_models.csv", "nk_transforms.csv"} {
		rows, err := check.Load("../testdata/handbook/" + file)
		if err != nil {
			t.Fatal(err)
		}
		for _, r := range rows {
			if err := r.Judge(rowValue(t, r)); err != nil {
				t.Error(err)
			}
		}
	}
}

// TestHandbookFormulas: indices of the published formulas.
func TestHandbookFormulas(t *testing.T) {
	rows, err := check.Load("../testdata/handbook/nk_formulas.csv")
	if err != nil {
		t.Fatal(err)
	}
	for _, r := range rows {
		f, err := Formula(r.Inputs["name"])
		if err != nil {
			t.Error(err)
			continue
		}
		at := func(um float64) float64 {
			n, err := f.Index(um * nmPerUM)
			if err != nil {
				t.Error(err)
				return math.NaN()
			}
			return real(n)
		}
		var got float64
		switch r.Quantity {
		case "n formula":
			got = at(r.Num("um"))
		case "n_d":
			got = at(0.5875618)
		case "abbe": // lines d, F, C
			got = (at(0.58756) - 1) / (at(0.48613) - at(0.65627))
		default:
			t.Errorf("%s:%d: unknown quantity %q", r.File, r.Line, r.Quantity)
		}
		if err := r.Judge(got); err != nil {
			t.Error(err)
		}
	}
}

// TestAmorphousSiliconSet: the Tauc-Lorentz parameters of amorphous silicon are
// from memory. They must describe measured amorphous silicon (table
// asi_pierce1972) about as well as the best parameters do (rms less than twice
// that of the best fit; a wrong leading digit of A, E0, C or Eg fails that), and
// the best parameters be those to 2 %, the scatter between samples and weights.
func TestAmorphousSiliconSet(t *testing.T) {
	tab, err := MaterialTable("asi_pierce1972")
	if err != nil {
		t.Fatal(err)
	}
	var n []complex128
	for i := range tab.Wavelength {
		n = append(n, complex(tab.N[i], tab.K[i]))
	}
	f, err := Formula("asi_jellison1996")
	if err != nil {
		t.Fatal(err)
	}
	published := values(f.Model)
	p, err := IndexProblem(f.Model, tab.Wavelength, n)
	if err != nil {
		t.Fatal(err)
	}
	chi := func(v []float64) float64 {
		dst := make([]float64, len(p.Data))
		if err := p.Model(dst, v); err != nil {
			t.Fatal(err)
		}
		sum := 0.0
		for i, d := range p.Data {
			sum += (d - dst[i]) * (d - dst[i])
		}
		return sum
	}
	p.Start = []float64{100, 3, 2, 1, 1} // far from the set
	res, err := Fit(p)
	if err != nil {
		t.Fatal(err)
	}
	if r := math.Sqrt(chi(published) / res.ChiSquare); r > 2 {
		t.Errorf("rms of the published set is %.2f times that of the best fit", r)
	}
	for j, v := range published {
		if math.Abs(res.Params[j]/v-1) > 0.02 {
			t.Errorf("parameter %d: fit %.4g ± %.2g, published %.4g (from memory)", j, res.Params[j], res.StdErr[j], v)
		}
		wrong := append([]float64(nil), published...)
		wrong[j] *= 1.1
		if j < 4 && math.Sqrt(chi(wrong)/res.ChiSquare) < 2 {
			t.Errorf("parameter %d off by 10 %% goes unnoticed", j)
		}
	}
}
