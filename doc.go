// Package photonledger accounts for every photon that falls on a solar cell:
// how much is shaded, reflected, lost in coatings, lost behind, let through, and
// how much the absorber turns into carriers, at which depth, under a standard
// spectrum, in mA/cm².
//
// The root holds no code. Five packages do the work; none imports another, and
// each can be used alone:
//
//	nk         optical constants: tables with provenance, dispersion models, mixtures, fits
//	optics     plane waves in stacks of films: R, T, absorptances, profiles, derivatives
//	lighttrap  Lambertian slabs, textured wafers by ray tracing, metal grids
//	absorb     Beer-Lambert absorption, generation on a mesh, collection
//	spectrum   reference spectra, exact integrals, the ledger in mA/cm², colour
//
// They meet in plain slices and structs. A wafer cell from data to current:
//
//	am15 := spectrum.AM15G()
//	silicon, err := nk.Material("si_green2008")      // a published table
//	n, err := silicon.Sample(nil, wavelengths)       // []complex128
//	sweep := optics.NewSweep(wavelengths, 2)         // two films
//	err = sweep.SetFilm(1, n, 160e3)                 // nm
//	r, err := sweep.Run()                            // r.R, r.T, r.A: []float64
//	j, err := spectrum.Photocurrent(am15, wavelengths, r.A[len(wavelengths):]) // mA/cm²
//
// The whole of it is examples/ledger; a shorter one is the first code block of
// README.md, which a test compiles and runs.
//
// # Conventions
//
//	quantity                              unit
//	vacuum wavelength, thickness, depth   nm (160 µm is 160e3)
//	absorption coefficient                1/cm
//	angle                                 rad, in the front medium
//	complex index                         N = n + ik, exp(-iωt), k >= 0 absorbs
//	spectral irradiance                   W m⁻² nm⁻¹
//	photon flux                           cm⁻² s⁻¹ nm⁻¹
//	current density                       mA/cm²
//	generation rate                       cm⁻³ s⁻¹
//	share, reflectance, ...               0..1
//
// Films are listed from the side where the light comes in. Bad input is an error
// that names the place and the value; nothing is extrapolated.
//
// # Not covered
//
// Wave optics of textures smaller than a few wavelengths, coherence of thick
// wafers, recombination and resistive losses beyond a collection probability,
// anisotropic media.
package photonledger
