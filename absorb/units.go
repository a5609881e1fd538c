package absorb

import "gonum.org/v1/gonum/unit/constant"

const (
	cmPerNM     = 1e-7 // turns an absorption coefficient in 1/cm into 1/nm, a length in nm into cm
	nmPerCM     = 1e7  // turns a density in 1/nm into 1/cm
	milliPerOne = 1e3
)

// PhotonsPerCurrent is the photon flux in cm^-2 s^-1 that makes 1 mA/cm² at one
// electron per photon. It turns integration weights in mA/cm² into the photons
// that a [Generator] takes.
const PhotonsPerCurrent = 1 / (float64(constant.ElementaryCharge) * milliPerOne)
