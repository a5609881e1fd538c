package spectrum

import (
	"errors"
	"math"
	"strings"
	"testing"
)

// TestErrors: each bad input is an error with its sentinel that names the place or
// the value, through every function that takes it.
func TestErrors(t *testing.T) {
	nan, inf := math.NaN(), math.Inf(1)
	g := []float64{300, 400}
	one := []float64{1, 1}
	s := AM15G()
	of := func(l, e []float64) Spectrum { return Spectrum{Name: "mine", Wavelength: l, Irradiance: e} }
	first := func(_ any, err error) error { return err }
	for name, c := range map[string]struct {
		err  error
		want error
		says string
	}{
		"zero spectrum":        {Spectrum{}.Validate(), ErrInput, "0 wavelengths"},
		"one row":              {of([]float64{300}, []float64{1}).Validate(), ErrInput, "1 wavelengths"},
		"lengths":              {of(g, []float64{1}).Validate(), ErrInput, `"mine"`},
		"NaN wavelength":       {of([]float64{300, nan}, one).Validate(), ErrInput, "wavelength 1: NaN"},
		"zero wavelength":      {of([]float64{0, 300}, one).Validate(), ErrInput, "wavelength 0: 0 nm"},
		"duplicate":            {of([]float64{300, 300}, one).Validate(), ErrInput, "300 nm after 300 nm"},
		"Inf irradiance":       {of(g, []float64{1, inf}).Validate(), ErrInput, "at 400 nm"},
		"negative irradiance":  {of(g, []float64{1, -2}).Validate(), ErrInput, "-2"},
		"curve":                {Curve{Name: "eqe", Wavelength: g, Value: []float64{nan, 1}}.Validate(), ErrInput, `"eqe"`},
		"At outside":           {first(s.At(279)), ErrRange, "279 nm"},
		"At NaN":               {first(s.At(nan)), ErrRange, "NaN"},
		"At of nothing":        {first(Spectrum{}.At(300)), ErrInput, "wavelengths"},
		"Values outside":       {first(s.Values(nil, []float64{300, 5000})), ErrRange, "5000 nm"},
		"Values dst":           {first(s.Values(make([]float64, 1), g)), ErrInput, "dst has 1"},
		"flux dst":             {first(s.PhotonFlux(make([]float64, 3))), ErrInput, "dst has 3"},
		"total":                {first(Spectrum{}.Total()), ErrInput, ""},
		"photons":              {first(Spectrum{}.PhotonTotal()), ErrInput, ""},
		"scale":                {first(s.Scale(-1)), ErrInput, "-1"},
		"scale overflow":       {first(of(g, []float64{1e300, 0}).Scale(1e300)), ErrInput, "not finite"},
		"scale dark":           {first(of(g, []float64{0, 0}).ScaleTo(1000)), ErrInput, "no irradiance"},
		"slice outside":        {first(s.Slice(100, 400)), ErrRange, "100 nm"},
		"slice empty":          {first(s.Slice(400, 400)), ErrInput, "empty"},
		"resample outside":     {first(s.Resample([]float64{300, 4001})), ErrRange, "4001 nm"},
		"resample unsorted":    {first(s.Resample([]float64{400, 300})), ErrInput, "300 nm after 400 nm"},
		"resample neighbours":  {first(s.Resample([]float64{400, math.Nextafter(400, 500)})), ErrInput, ""},
		"weights outside":      {first(Weights(nil, s, []float64{270, 300}, Photons)), ErrRange, "270 nm"},
		"weights dst":          {first(Weights(one[:1], s, g, Photons)), ErrInput, "dst has 1"},
		"weights kind":         {first(Weights(nil, s, g, 7)), ErrInput, "weighting 7"},
		"weights overflow":     {first(Weights(nil, of([]float64{1, 1e300}, []float64{1e300, 1e300}), []float64{1, 1e300}, Photons)), ErrInput, "overflows"},
		"factor outside":       {first(ProductWeights(nil, s, Curve{Name: "glass", Wavelength: g, Value: one}, []float64{300, 500}, Power)), ErrRange, `"glass"`},
		"factor missing":       {first(ProductWeights(nil, s, Curve{}, g, Power)), ErrInput, ""},
		"cells dst":            {first(CellIntegrals(one, s, g, Power)), ErrInput, "dst has 2"},
		"cumulative":           {first(Cumulative(nil, s, g, []float64{1}, Power)), ErrInput, "1 values for 2"},
		"share length":         {first(Photocurrent(s, g, []float64{1})), ErrInput, "1 shares for 2"},
		"share NaN":            {first(Photocurrent(s, g, []float64{1, nan})), ErrInput, "share 1: NaN"},
		"share outside":        {first(Photocurrent(s, []float64{300, 4500}, one)), ErrRange, "4500 nm"},
		"power outside":        {first(AbsorbedPower(s, []float64{300, 4500}, one)), ErrRange, "4500 nm"},
		"not prepared":         {first(new(Integrator).Integral(nil)), ErrInput, "0 prepared"},
		"mean in the dark":     {first(Mean(of(g, []float64{0, 0}), g, one, Photons)), ErrInput, "no light"},
		"product":              {first(Product(s, Curve{Wavelength: g, Value: one}, Curve{Name: "b", Wavelength: []float64{350, 400}, Value: one}, Photons)), ErrRange, `"b"`},
		"mismatch":             {first(Mismatch(s, s, Curve{Name: "dead", Wavelength: g, Value: []float64{0, 0}}, Curve{Wavelength: g, Value: one}, Power)), ErrInput, `"dead"`},
		"mismatch range":       {first(Mismatch(s, of(g, one), Curve{Wavelength: []float64{300, 500}, Value: one}, Curve{Wavelength: g, Value: one}, Power)), ErrRange, "500 nm"},
		"gap too small":        {first(MaxPhotocurrent(s, 0.3)), ErrRange, "0.3 eV"},
		"gap too large":        {first(MaxPhotocurrent(s, 5)), ErrRange, "5 eV"},
		"gap NaN":              {first(MaxPhotocurrent(s, nan)), ErrRange, "NaN"},
		"Planck temperature":   {first(Planck(g, 0, 1)), ErrInput, "0 K"},
		"Planck angle":         {first(Planck(g, 300, 2)), ErrInput, "2 rad"},
		"Planck grid":          {first(Planck(nil, 300, 1)), ErrInput, "wavelengths"},
		"Planck overflow":      {first(Planck([]float64{1e-100, 1}, 1e300, 1)), ErrInput, "overflows"},
		"J0 temperature":       {first(RadiativeCurrent(g, one, nan)), ErrInput, "NaN K"},
		"J0 length":            {first(RadiativeCurrent(g, one[:1], 300)), ErrInput, "1 values"},
		"J0 NaN":               {first(RadiativeCurrent(g, []float64{nan, 1}, 300)), ErrInput, "300 nm"},
		"J0 gap":               {first(RadiativeCurrentOfGap(-1, 300)), ErrInput, "-1 eV"},
		"J0 of gap overflow":   {first(RadiativeCurrentOfGap(1, 1e200)), ErrInput, "overflow"},
		"diode photocurrent":   {first(IdealDiode(0, 1, 300)), ErrInput, "photocurrent 0"},
		"diode temperature":    {first(IdealDiode(1, 1, -300)), ErrInput, "-300 K"},
		"colorimeter unready":  {first(new(Colorimeter).Colour([]float64{1})), ErrInput, "0 prepared"},
		"ledger without light": {first(Ledger{}.Integrate()), ErrInput, "no entries"},
	} {
		if !errors.Is(c.err, c.want) {
			t.Errorf("%s: %v, want %v", name, c.err, c.want)
		} else if !strings.HasPrefix(c.err.Error(), "spectrum: ") || !strings.Contains(c.err.Error(), c.says) {
			t.Errorf("%s: %q does not begin with the package or does not say %q", name, c.err, c.says)
		}
	}
	for _, v := range []float64{Responsivity(0, 1), Responsivity(nan, 1), Responsivity(inf, 1), QuantumEfficiency(-1, 1), QuantumEfficiency(inf, 1)} {
		if !math.IsNaN(v) {
			t.Errorf("a responsivity without a wavelength is %g, want NaN", v)
		}
	}
	// A failed preparation leaves nothing to integrate with by accident.
	var in Integrator
	if err := in.Prepare(s, g, Photons); err != nil {
		t.Fatal(err)
	}
	if err := in.Prepare(s, []float64{300, 5000}, Photons); err == nil {
		t.Error("a grid outside the spectrum is prepared")
	}
	if v, err := in.Integral(one); err == nil {
		t.Errorf("an integrator whose preparation failed gives %g", v)
	}
}
