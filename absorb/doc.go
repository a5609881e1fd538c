// Package absorb computes where an absorber takes photons, how many carriers that
// makes in each cell of a mesh, and which of them reach the contacts.
//
// # Model
//
// The light in a film is given by its absorption density over depth, a [Profile]:
// beams down and up that fall off exponentially, and their interference. That is
// all that a plane wave in a homogeneous film can do, so that one type serves
// Beer-Lambert's law ([Slab]), incoherent wafers and coherent thin films; package
// optics makes profiles of the same shape (absorb.Profile(p) converts them), and
// rays traced through a textured wafer come as a histogram
// ([Generator.Histogram]).
//
// From profiles follow, each by exact integration:
//
//   - the generation rate on the mesh of a device simulator, summed over the
//     wavelengths of a spectrum ([Generator]);
//   - external and internal quantum efficiency for a collection probability
//     ([QuantumEfficiency]; [Constant], [Base], [Junction], [Table]);
//   - the current ([GenerationCurrent], [CollectedCurrent]).
//
// [FitLength] reads an effective diffusion length from a measured internal quantum
// efficiency. Free carriers absorb without making pairs: [Split] and the field
// FreeCarriers of [Slab] keep them apart.
//
// # Conventions
//
// Depth counts from the lit face of the film. A mesh is a list of cell
// boundaries, ascending; it may cover a part of the film. One electron-hole pair
// per photon of band-to-band absorption.
//
// # Units
//
//	wavelength, thickness, depth, diffusion length   nm
//	absorption coefficient                           1/cm
//	densities and decay of a Profile                 1/nm
//	photons                                          cm^-2 s^-1
//	photon flux of a spectrum                        cm^-2 s^-1 nm^-1
//	generation rate                                  cm^-3 s^-1
//	current density                                  mA/cm²
//	diffusivity                                      cm²/s
//	recombination velocity                           cm/s
//	shares, probabilities, quantum efficiencies      1 (0..1)
//
// # Accuracy
//
// Integrals keep a relative accuracy of 1e-13 (of the beams, where interference
// cancels them) for any absorption, thickness and diffusion length: exponentials
// enter as expm1 and as divided differences, all of positive terms, so that weak
// absorption, optically thick films and the resonance of absorption length and
// diffusion length cost no digits. Each cell of a mesh is a mean over the cell,
// not a value in its middle, so that the sum of rate times width is the absorbed
// flux to 1e-13 on any mesh.
//
// # Not implemented, because
//
//   - Refraction, reflectances, interference from indices: package optics.
//   - Scattering textures: package lighttrap.
//   - Solving the transport of carriers beyond a collection probability: that is
//     a device simulator, for which the mesh is.
//   - More than one pair per photon, and photons radiated and absorbed again.
//
// # Concurrency and allocation
//
// Functions are safe for concurrent use. A [Generator] belongs to one goroutine
// at a time and allocates nothing once it has seen its largest mesh; nor does
// [QuantumEfficiency] with a dst. The package starts no goroutine and holds no
// state that changes.
package absorb
