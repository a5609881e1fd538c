// Package lighttrap computes how textures, mirrors and scattering keep light in
// a wafer: limits and slabs in closed form, textured wafers by ray tracing, and
// the shade of the metal grid.
//
// # Models
//
// Closed forms: [Slab] with Lambertian faces, a Lambertian rear or planar faces,
// each with free-carrier absorption, at any absorption; the exact transmittance
// of isotropic light, [DiffuseTransmittance]; its Fresnel reflectance,
// [DiffuseReflectance]; the limits [PathLimit], [PathLimitAcceptance],
// [LimitAbsorptance] and [TwoPassAbsorptance]. Light that scatters with a power of
// the cosine: [ScatterDirection] and its moments.
//
// Rays: [Trace] follows light through a [Wafer] whose faces are planar, have
// pyramids, pits or grooves of any facet angle, or scatter; [TraceAll] does so at
// many wavelengths. Facets carry the response of their films as a plain
// [FacetTable] over the angle, which the optics of films fills. Polarisation is
// carried along the path, absorption is a weight, every figure has a standard
// error, and the shares add up to 1.
//
// Shade: [Grid] for fingers and busbars.
//
// Assumptions: textures are large against the wavelength and flat against the
// thickness of the wafer, intensities add, a facet is a plane with its films.
//
// # Conventions
//
//   - Cosines and angles are those to the normal of the face or facet that the
//     text names; the z axis points out of the front.
//   - A share is one of the incident light. Rear loss is what is not reflected at
//     the rear: absorbed there or let through.
//   - A path factor is a length in units of the thickness; with absorption it is
//     that of the straight path that absorbs as much.
//
// # Units
//
//	thickness, depth, widths of a grid   nm
//	absorption coefficient               1/cm
//	angle                                rad
//	shares, reflectances                 0..1
//
// # Sources
//
//   - E. Yablonovitch, J. Opt. Soc. Am. 72, 899 (1982): 4n².
//   - T. Tiedje, E. Yablonovitch, G. D. Cody, B. G. Brooks, IEEE Trans. Electron
//     Devices 31, 711 (1984): absorptance at the limit (formula from memory).
//   - A. Goetzberger, Proc. 15th IEEE PVSC, 867 (1981): Lambertian rear.
//   - M. Abramowitz, I. A. Stegun, Handbook of Mathematical Functions (1964),
//     sec. 5.1: exponential integrals.
//
// # Not implemented, because
//
//   - Wave optics of textures of the order of the wavelength: rays do not
//     describe them.
//   - Interference within the wafer: wafers are thick and rough.
//   - Light recovered from fingers beyond an optical width factor: it depends on
//     the cross section of the finger and on the module.
//
// # Concurrency and allocation
//
// Functions are safe for concurrent use. A [Tracer] or [Batch] belongs to one
// goroutine at a time. Results depend on the seed, not on the number of workers.
package lighttrap
