package spectrum

import "gonum.org/v1/gonum/unit/constant"

// Physical constants (CODATA 2018, exact since the SI of 2019) and conversions.
const (
	planck    = float64(constant.Planck)             // J s
	light     = float64(constant.LightSpeedInVacuum) // m/s
	charge    = float64(constant.ElementaryCharge)   // C
	boltzmann = float64(constant.Boltzmann)          // J/K

	metrePerNM  = 1e-9
	nmPerMetre  = 1e9
	cm2PerM2    = 1e4
	milliPerOne = 1e3

	// photonsPerIrradiance times E (W m^-2 nm^-1) times λ (nm) is the photon flux
	// in cm^-2 s^-1 nm^-1.
	photonsPerIrradiance = metrePerNM / (planck * light) / cm2PerM2

	// currentPerIrradiance times the integral of E λ over λ is mA/cm².
	currentPerIrradiance = charge * photonsPerIrradiance * milliPerOne
)

// WavelengthOfEnergy is hc in nm eV: the wavelength of a photon times its energy.
const WavelengthOfEnergy = planck * light / charge * nmPerMetre
