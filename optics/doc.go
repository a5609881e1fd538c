// Package optics computes what a stack of plane-parallel films does with a
// plane wave: reflectance, transmittance and the absorptance of every film.
//
// # Model
//
// Isotropic, homogeneous, non-magnetic films between two half spaces, lit by
// one plane wave of s, p or unpolarised light at any angle. Films are coherent
// (fields add) unless they are marked Incoherent (intensities add: wafers,
// glass, encapsulants). Around that: Fresnel coefficients of one interface
// ([Fresnel]), amplitude coefficients and ellipsometric angles
// ([SolveAmplitudes]), averages over a spread of thickness or wavelength
// ([Solver.AverageThickness], [Solver.AverageWavelength]), films whose index
// varies with depth ([Grade], [Solver.SolveGraded]), rough interfaces in scalar
// theory ([SolveRough]), the absorption density in every film
// ([SolveProfiles]), and all derivatives in one reverse pass
// ([GradientSolver.Solve], [GradientSweeper.Run]).
//
// # Conventions
//
//   - Time dependence exp(-iωt), N = n + ik, k >= 0 absorbs. Im kz >= 0 in every
//     medium, also beyond the critical angle.
//   - Films are listed from the side where the light comes in. Angles are those
//     in the front medium, which must be lossless.
//   - Unpolarised light is the mean of the intensities of s and p.
//   - Amplitudes are ratios of electric fields; RP has the sign of ellipsometry,
//     RP = -RS at normal incidence.
//
// # Units
//
//	wavelength (in vacuum), thickness, depth   nm
//	angle                                      rad
//	reflectance, transmittance, absorptance    1 (0..1)
//	absorption density of a Profile            1/nm
//
// # Accuracy
//
// The fields are carried from the back to the front with the growing factor of
// every film taken out, so that nothing overflows or cancels; the absorptance
// of a film is a closed form instead of a difference of fluxes, so that it keeps
// its relative accuracy when it is tiny and is exactly 0 where k = 0. Against stacks solved with 60 digits (testdata/vectors) the error of
// R, T and every A is below 2e-12, typically 1e-15; R + T + ΣA misses 1 by less
// than 1e-12 over a million random stacks with k to 10, thickness to 10^4
// wavelengths, angles to 1e-7° from grazing and up to 200 films. Derived from
// Maxwell's boundary conditions; the formulas stand beside the code.
//
// # Absorbing incoherent media
//
// In an incoherent film the intensities of the waves of both directions add.
// At a face of an absorbing film the incident and the reflected wave still
// interfere: the net flux through the face differs from the difference of their
// fluxes by 2 Im η/Re η Im r of the incident one, with the admittance η. This
// share, of the order of k/n, is counted as absorbed in (or kept out of) the
// incoherent film, so that the balance closes exactly and all shares are those
// of the mean over the phase of one such film. For silicon (k/n < 1e-3 where a
// wafer is not opaque) it is below 1e-3 of the light that meets the face. Where
// several incoherent films follow each other, paths with the same number of
// passes in different order add as intensities too.
//
// An incoherent film in which the wave decays faster than it oscillates, for
// example beyond its critical angle, counts as opaque; tunnelling through it is
// not modelled. An absorbing incoherent film thinner than one wavelength in it
// is an error.
//
// # Not implemented, because
//
//   - Lateral structure, diffraction gratings, wave optics of textures: another
//     problem than plane films; large textures are ray optics (package
//     lighttrap).
//   - Anisotropic, magnetic, active (k < 0) or nonlinear media: solar cell films
//     are described by one complex index.
//   - Scattering back into the specular beam: scalar theory does not say where
//     scattered light goes.
//
// # Vector instructions
//
// On amd64 processors with AVX2 blocks of wavelengths are computed four at a
// time by assembly that is generated from the Go source (go generate; see gen).
// The build tag purego leaves it out. Both give the same bits, and a [Sweep]
// gives those of single evaluations.
//
// # Concurrency and allocation
//
// Functions are safe for concurrent use. A [Solver] or [Sweeper] belongs to one
// goroutine at a time and allocates nothing once it has seen its largest stack.
// Goroutines are started only where a Workers field asks for them, and no bit
// of a result depends on their number.
package optics
