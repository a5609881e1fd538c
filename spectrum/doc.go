// Package spectrum turns shares of light into currents: reference spectra, exact
// integrals of spectrum times share, the ledger in mA/cm² that says where every
// photon went, adaptive choice of wavelengths, detailed-balance limits, and the
// colour of a surface.
//
// # Model
//
// A [Spectrum] is a spectral irradiance, linear between its wavelengths. A share
// (reflectance, absorptance, external quantum efficiency) is a number 0..1 at each
// wavelength of a grid of its own, linear in between. Their product is a
// polynomial on each cell of the union of the grids and is integrated exactly; no
// grid is resampled to another. Neither is known outside its grid: an integral
// runs over the grid of the share, which must lie inside the spectrum, and all
// else is an error. Nothing is extrapolated or cut off in silence.
//
// The three spectra of ASTM G173-03 come with the package: [AM15G], [AM15D],
// [AM0], as published (1000.37 W/m², 900.14 W/m² and 1347.93 W/m² from 280 nm to
// 4000 nm). [Spectrum.ScaleTo] brings the first to the 1000 W/m² of IEC 60904-3.
// [ReadCSV] reads others, [Planck] computes them.
//
// # Which function for which question
//
//	current of one share, mean, product        Photocurrent, Mean, Product
//	many shares on one grid, without garbage   Integrator
//	gradient of a current                      Weights: d(current)/d(share)
//	where did the light go                     Ledger, Account
//	at which wavelengths to compute            Sampler: grid, integrals, bound
//	current up to each wavelength              Cumulative
//	calibration with a reference cell          Mismatch, Responsivity
//	what could be reached                      MaxPhotocurrent, RadiativeCurrent, IdealDiode
//	what it looks like                         Colour, Colorimeter
//
// # Units
//
//	vacuum wavelength                nm
//	spectral irradiance              W m^-2 nm^-1
//	spectral photon flux             cm^-2 s^-1 nm^-1
//	current density                  mA/cm², one electron per photon
//	band gap                         eV
//	temperature                      K
//	shares                           0..1, never percent
//	tristimulus values               Y = 100 for a perfect white
//
// # Uncertainties
//
// An entry of a ledger may carry three kinds, which follow different rules and
// are shown apart: a numerical bound (bounds add up), a statistical standard
// error (independent between wavelengths: squares add up) and a standard
// uncertainty from data (fully correlated between wavelengths unless the entry
// says otherwise: adds up). The combined figure is the bound plus the root of the
// sum of squares of the others.
//
// # Errors
//
// Bad input is an error that wraps [ErrInput], a wavelength that is not covered
// one that wraps [ErrRange]. A ledger that does not close wraps [ErrBalance], a
// sampler that does not reach its tolerance [ErrSettle]. Faults of a file are a
// [*ParseError] with line and column.
//
// # Sources
//
// ASTM G173-03(2012), Standard Tables for Reference Solar Spectral Irradiances;
// IEC 60904-3, -7 and -8 (formulas from memory); W. Shockley, H. J. Queisser, J.
// Appl. Phys. 32, 510 (1961); CIE 15:2004 (tables from memory, confirmed by their
// sums and by the chromaticity of D65); JCGM 100:2008. Constants are those of
// gonum/unit/constant (CODATA 2018, exact).
//
// # Not implemented
//
// Spectra at other air masses or sites: they need an atmospheric model; bring them
// as files. Correlations of uncertainty between entries: the shares add up to 1,
// so a ledger cannot be independent, but how its entries depend on each other only
// their maker knows. Observers and illuminants other than CIE 1931 and D65.
//
// # Concurrency
//
// All functions may be called at once; they keep no state. An [Integrator],
// [Sampler] or [Colorimeter] belongs to one goroutine while it is prepared or
// samples; prepared, an Integrator or Colorimeter only reads. No function starts a
// goroutine.
package spectrum
