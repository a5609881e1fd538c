package handbook

import (
	"fmt"
	"math"
	"strings"

	"gonum.org/v1/gonum/unit/constant"

	"photonledger/internal/check"
	"photonledger/nk"
)

const (
	wavelengthOfEV  = 1e9 * float64(constant.Planck) * float64(constant.LightSpeedInVacuum) / float64(constant.ElementaryCharge) // nm eV
	reducedPlanckEV = float64(constant.Planck) / (2 * math.Pi) / float64(constant.ElementaryCharge)                              // eV s
	picosecond      = 1e-12                                                                                                      // s
	femtosecond     = 1e-15                                                                                                      // s
	nmPerMicron     = 1e3
)

// nkQuantity computes a row about optical constants.
func nkQuantity(r check.Row) (float64, error) {
	switch q, kind, _ := strings.Cut(r.Quantity, " "); {
	case kind == "table" || strings.HasPrefix(r.Quantity, "alpha free"):
		return tableQuantity(r)
	case kind == "formula" || q == "n_d" || q == "abbe":
		return formulaQuantity(r)
	}
	return modelQuantity(r)
}

func tableQuantity(r check.Row) (float64, error) {
	nm := r.Num("nm")
	if strings.HasPrefix(r.Quantity, "alpha free") {
		for _, f := range []nk.FreeCarriers{nk.FreeCarriersSchroder1978(), nk.FreeCarriersGreen1995(), nk.FreeCarriersRuediger2013(), nk.FreeCarriersBakerFinch2014()} {
			switch {
			case f.Name != r.Inputs["law"]:
			case r.Quantity == "alpha free electrons":
				return f.Alpha(nm, r.Num("density"), 0), nil
			case r.Quantity == "alpha free holes":
				return f.Alpha(nm, 0, r.Num("density")), nil
			}
		}
		return 0, fmt.Errorf("quantity %q, law %q", r.Quantity, r.Inputs["law"])
	}
	m, err := nk.Material(r.Inputs["material"])
	if err != nil {
		return 0, err
	}
	if r.Quantity == "uncertainty table" {
		return m.RelativeUncertainty(nm)
	}
	v, err := m.At(nm)
	if err != nil {
		return 0, err
	}
	n, k := real(v), imag(v)
	switch r.Quantity {
	case "n table":
		return n, nil
	case "k table":
		return k, nil
	case "alpha table":
		return nk.AbsorptionCoefficient(k, nm), nil
	case "reflectance table":
		return ((n-1)*(n-1) + k*k) / ((n+1)*(n+1) + k*k), nil
	}
	return 0, fmt.Errorf("quantity %q", r.Quantity)
}

func formulaQuantity(r check.Row) (float64, error) {
	f, err := nk.Formula(r.Inputs["name"])
	if err != nil {
		return 0, err
	}
	at := func(um float64) float64 {
		n, e := f.Index(um * nmPerMicron)
		if e != nil {
			err = e
		}
		return real(n)
	}
	var v float64
	switch r.Quantity {
	case "n formula":
		v = at(r.Num("um"))
	case "n_d":
		v = at(0.5875618)
	case "abbe": // lines d, F, C
		v = (at(0.58756) - 1) / (at(0.48613) - at(0.65627))
	default:
		return 0, fmt.Errorf("quantity %q", r.Quantity)
	}
	return v, err
}

// modelOf makes the model of a row; the wavelength is in nm.
func modelOf(r check.Row) (m nk.Model, lambda float64, err error) {
	_, kind, _ := strings.Cut(r.Quantity, " ")
	n := r.Num
	lambda = wavelengthOfEV / n("E")
	switch kind {
	case "tauc-lorentz":
		m = &nk.TaucLorentz{A: n("A"), E0: n("E0"), C: n("C"), Eg: n("Eg"), EpsInf: n("EpsInf")}
	case "cody-lorentz":
		m = &nk.CodyLorentz{A: n("A"), E0: n("E0"), Gamma: n("Gamma"), Eg: n("Eg"), Ep: n("Ep"), Et: n("Et"), Eu: n("Eu"), EpsInf: n("EpsInf")}
	case "forouhi-bloomer":
		m = &nk.ForouhiBloomer{A: n("A"), B: n("B"), C: n("C"), Eg: n("Eg"), NInf: n("NInf")}
	case "urbach":
		m = &nk.Urbach{Strength: n("Strength"), Edge: n("Edge"), Width: n("Width")}
	case "drude":
		d, err := nk.DrudeFromCarriers(n("EpsInf"), n("N"), n("m"), n("mu"))
		return &d, n("nm"), err
	default:
		err = fmt.Errorf("quantity %q", r.Quantity)
	}
	return m, lambda, err
}

func modelQuantity(r check.Row) (float64, error) {
	switch r.Quantity {
	case "plasma frequency":
		d, err := nk.DrudeFromCarriers(1, r.Num("N"), r.Num("m"), 1)
		return d.Plasma / reducedPlanckEV * picosecond, err
	case "scattering time":
		d, err := nk.DrudeFromCarriers(1, 0, r.Num("m"), r.Num("mu"))
		return reducedPlanckEV / d.Damping / femtosecond, err
	}
	m, lambda, err := modelOf(r)
	if err != nil {
		return 0, err
	}
	q, _, _ := strings.Cut(r.Quantity, " ")
	if strings.HasPrefix(q, "eps") {
		eps, err := m.Permittivity(nil, lambda)
		if q == "eps1" {
			return real(eps), err
		}
		return imag(eps), err
	}
	n, err := m.Index(lambda)
	if q == "k" {
		return imag(n), err
	}
	return real(n), err
}
