// Package optics is the root of the computation of contact lens fits: pure functions of their
// arguments, without input or output, clock or randomness.
//
// A swapped argument is the error that hurts here. Given
//
//	func Required(k vergence.OcularRefraction, c surface.Curvature, ...)
//
// a refraction at the spectacle plane does not compile where one at the cornea is wanted, nor a
// radius where a power is, nor micrometres where millimetres are. The types do not stop everything:
// a bare literal passes into any unit (sin(90) compiles for degrees and would for radians), two
// radii of the same unit can change places (which is why they travel in structs with named fields),
// and a right number of the wrong eye looks like any other.
//
// The packages build on each other in one direction:
//
//	unit <- vergence <- surface <- cornea, lens <- tear <- fitting
//
// Conventions, the same everywhere: light travels into the eye; a radius is positive when its centre
// of curvature lies on the eye's side; dioptres, millimetres and degrees at every boundary; axes
// counter-clockwise as the examiner sees the patient, in (0, 180], the same for both eyes; a turn of
// a lens is positive counter-clockwise.
package optics
