package nk

import "math"

// FreeCarriers is a published parametrization of the free-carrier absorption of
// silicon: alpha = sum over electrons and holes of density times Coefficient
// times (lambda in the publication's unit) to the power Exponent.
//
// Free carriers take photons without making pairs, so their absorption belongs
// beside the band-to-band absorption of a table, as a channel of its own.
// The four parametrizations are known from memory, not read, and differ among
// each other by up to a factor of five; none states a range that could be
// checked here, so the caller judges whether a wavelength is sensible. They are
// meant for the near infrared, about 1000 nm to 2000 nm.
type FreeCarriers struct {
	Name      string
	Source    string
	Electrons PowerLaw
	Holes     PowerLaw
}

// PowerLaw is the absorption per density of carriers, in cm² (1/cm per 1/cm³),
// over the wavelength: Coefficient (lambda/Unit)^Exponent.
type PowerLaw struct {
	Coefficient float64 // cm², as printed for wavelengths in Unit
	Exponent    float64 // dimensionless
	Unit        float64 // nm: 1 if the publication takes the wavelength in nm, 1e3 for µm, 1e7 for cm
}

// CrossSection returns the absorption per density in cm² at a vacuum wavelength
// in nm.
//
// Special cases: NaN if the wavelength or Unit is not finite and positive, the
// Coefficient is negative or not finite, or the Exponent is not finite; +Inf if
// the power overflows.
func (p PowerLaw) CrossSection(lambda float64) float64 {
	if !(lambda > 0) || math.IsInf(lambda, 1) || !(p.Unit > 0) || math.IsInf(p.Unit, 1) || !amount(p.Coefficient) || math.IsInf(p.Exponent, 0) {
		return math.NaN()
	}
	if p.Coefficient == 0 {
		return 0
	}
	return p.Coefficient * math.Pow(lambda/p.Unit, p.Exponent)
}

// Alpha returns the free-carrier absorption coefficient in 1/cm at a vacuum
// wavelength in nm for densities of electrons and holes in 1/cm³.
//
// Special cases: NaN if CrossSection is NaN for either kind, or a density is
// negative, infinite or NaN; +Inf if the product overflows.
func (f FreeCarriers) Alpha(lambda, electrons, holes float64) float64 {
	return absorptionOf(electrons, f.Electrons.CrossSection(lambda)) + absorptionOf(holes, f.Holes.CrossSection(lambda))
}

// absorptionOf is density times section, and zero without carriers even where
// the section overflows.
func absorptionOf(density, section float64) float64 {
	switch {
	case !amount(density) || math.IsNaN(section):
		return math.NaN()
	case density == 0:
		return 0
	}
	return density * section
}

// FreeCarriersSchroder1978 returns the parametrization of D. K. Schroder, R. N.
// Thomas and J. C. Swartz, IEEE J. Solid-State Circuits 13, 180 (1978); from
// memory.
func FreeCarriersSchroder1978() FreeCarriers {
	return FreeCarriers{
		Name:      "schroder1978",
		Source:    "D. K. Schroder, R. N. Thomas, J. C. Swartz, IEEE J. Solid-State Circuits 13, 180 (1978); from memory",
		Electrons: PowerLaw{1e-18, 2, nmPerUM},
		Holes:     PowerLaw{2.7e-18, 2, nmPerUM},
	}
}

// FreeCarriersGreen1995 returns the parametrization of M. A. Green, Silicon
// Solar Cells: Advanced Principles and Practice (1995); from memory.
func FreeCarriersGreen1995() FreeCarriers {
	return FreeCarriers{
		Name:      "green1995",
		Source:    "M. A. Green, Silicon Solar Cells: Advanced Principles and Practice (1995); from memory",
		Electrons: PowerLaw{2.6e-27, 3, 1},
		Holes:     PowerLaw{2.7e-24, 2, 1},
	}
}

// FreeCarriersRuediger2013 returns the parametrization of M. Rüdiger et al.,
// IEEE J. Photovolt. (2013); from memory.
func FreeCarriersRuediger2013() FreeCarriers {
	return FreeCarriers{
		Name:      "ruediger2013",
		Source:    "M. Rüdiger et al., IEEE J. Photovolt. (2013); from memory",
		Electrons: PowerLaw{1.8e-18, 2.6, nmPerUM},
		Holes:     PowerLaw{2.6e-18, 2.4, nmPerUM},
	}
}

// FreeCarriersBakerFinch2014 returns the parametrization of S. C. Baker-Finch,
// K. R. McIntosh, D. Yan, K. C. Fong and T. C. Kho, J. Appl. Phys. 116, 063106
// (2014), for heavily doped silicon; from memory, with low confidence.
func FreeCarriersBakerFinch2014() FreeCarriers {
	return FreeCarriers{
		Name:      "bakerfinch2014",
		Source:    "S. C. Baker-Finch et al., J. Appl. Phys. 116, 063106 (2014); from memory, low confidence",
		Electrons: PowerLaw{1.68e-6, 2.88, nmPerCM},
		Holes:     PowerLaw{1.82e-9, 2.18, nmPerCM},
	}
}
