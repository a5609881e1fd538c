// Package nk holds optical constants: tables with their provenance, published
// formulas, dispersion models, mixtures, and what silicon needs on top.
//
// # What is here
//
// A Table is a list of wavelength, n and k with the paper and the conditions; it
// comes from Material (embedded), ReadCSV (a user's file) or a literal.
// Table.Interpolate turns it into an Interpolant that gives N at any wavelength
// of the table's range. A Published formula (Formula, Formulas) does the same for
// a closed formula with published coefficients and its range of validity. A Model
// is a dispersion formula with parameters and their derivatives. Bruggeman,
// MaxwellGarnett and LorentzLorenz mix indices, KramersKronig says how far the n
// of a table is from the transform of its k, Fit finds parameters from
// measurements. FreeCarriers and Table.AtTemperature serve silicon.
//
// All of them end in a complex128, or a slice of them over the wavelength, which
// is what a program that computes films needs. Materials are isotropic, linear
// and not magnetic; the two rays of a crystal are two materials.
//
// # Conventions
//
// N = n + ik with the time dependence exp(-iωt): k >= 0 absorbs. Wavelengths are
// vacuum wavelengths. The relative permittivity is N². Nothing is extrapolated:
// a wavelength outside a table or a formula is an error.
//
//	wavelength                nm (µm within published formulas, as printed there)
//	photon energy             eV
//	absorption coefficient    1/cm
//	density of carriers       1/cm³
//	temperature               K
//	uncertainty               relative standard uncertainty, 0.01 is 1 %
//	n, k, fractions           1
//
// Every error wraps ErrInput, ErrRange, ErrUnknown, ErrConvergence or
// ErrSingular and names the value at fault. Scalar functions without an error
// result return NaN for bad input.
//
// # Embedded tables
//
// Figures of published measurements, as listed in a public-domain (CC0)
// compilation of optical constants. The name holds material, first author and
// year; the Table of the Material holds the full reference and the conditions.
//
//	metals
//	  ag_jiang2016            300-2000 nm      silver, protected film
//	  ag_johnson1972          203.3-1937 nm    silver
//	  al_rakic1995            206.64-3874.5 nm aluminium
//	  au_johnson1972          203.3-1937 nm    gold
//	  cu_johnson1972          203.3-1937 nm    copper
//	  mo_kirillova1971        265-4000 nm      molybdenum
//	semiconductors
//	  asi_pierce1972          206.6-2066 nm    amorphous silicon, evaporated
//	  cds_treharne2011        301.4-1498 nm    cadmium sulfide film
//	  cdte_treharne2011       301.4-1498 nm    cadmium telluride film (1)
//	  gaas_aspnes1986         206.6-826.6 nm   gallium arsenide (2)
//	  gaas_papatryfonos2021   260.5-1879 nm    gallium arsenide
//	  ge_aspnes1983           206.6-826.6 nm   germanium (2)
//	  ge_nunley2016           199.7-2480 nm    germanium
//	  inp_adachi1989          206.6-3677 nm    indium phosphide, model (1)
//	  inp_aspnes1983          206.6-826.6 nm   indium phosphide (2)
//	  mapbi3_leguy2015        249-789 nm       methylammonium lead triiodide (2)
//	  mapbi3_phillips2015     300-1501 nm      methylammonium lead triiodide (1)
//	  si_aspnes1983           206.6-826.6 nm   silicon (2)
//	  si_green2008            250-1450 nm      silicon, 300 K, band to band
//	  si_schinke2015          250-1450 nm      silicon, 295 K, with uncertainty
//	transparent conductors and dielectric films
//	  al2o3_zhukovsky2015     211-1690 nm      aluminium oxide, ALD
//	  ito_konig2014           251.6-1000 nm    indium tin oxide
//	  ito_minenkov2024        201-1689 nm      indium tin oxide on glass
//	  mgf2_rodriguez2017      199.9-2001 nm    magnesium fluoride
//	  sinx191_vogt2015        250-1700 nm      silicon nitride, n = 1.91 at 633 nm
//	  sinx209_vogt2015        250-1700 nm      silicon nitride, n = 2.09 at 633 nm
//	  sinx213_vogt2015        250-1700 nm      silicon nitride, n = 2.13 at 633 nm
//	  sio2_rodriguez2016      200.5-1511 nm    silicon dioxide
//	  ta2o5_rodriguez2016     201.7-1514 nm    tantalum pentoxide
//	  tio2_siefke2016         200.6-3980 nm    titanium dioxide, ALD
//	  zno_aguilar2019         300-3200 nm      zinc oxide
//	module materials
//	  eva_vogt2016            250-2500 nm      encapsulant, absorbing in the UV
//	  glass_lowiron_vogt2016  300-1690 nm      low-iron float glass
//
// (1) below the gap, k is a tail or the damping of a fitted model, not measured
// absorption: do not count it as current. (2) ends above the band edge.
//
// One file differs from the published list: in cds_treharne2011, k beyond 638 nm
// is rounding noise of either sign below 1e-15, and is stored as 0.
//
// # Rows and what lies between them
//
// Interpolation is monotone in n and in ln k over the wavelength, exact at the
// rows. k = 0 in a table means absorption too small for its source to state:
// between two such rows there is none; next to a row with k > 0, k runs to zero
// as the square of the distance. Table.Interpolate has the details.
//
// # Not implemented
//
//   - Silicon's published temperature coefficients and a shift of its absorption
//     with the temperature of the gap: no copy of the figures could be checked.
//     ScaleTemperature and Table.AtTemperature apply the published rule to
//     coefficients of the caller.
//   - Extrapolation of any kind, and joining of tables: whether two samples are
//     the same material is the user's judgement.
//   - Birefringence, magnetic and nonlinear response.
//
// # Concurrency and allocation
//
// An Interpolant never changes and serves many goroutines at once; so does a
// Model whose parameters nobody sets. Interpolant.At, Interpolant.Sample with a
// dst, and the models' Index and Gradient with a dst do not allocate. Material
// and Formula read and build anew at each call: call once and keep the result.
// The package holds no state that changes and starts no goroutine.
package nk
