// Package surface has the shapes of optical surfaces at and around their apex: curvature as a matrix
// (spherical and toric, at any axis), and the sag of conics.
//
// Radii are positive when the centre of curvature lies on the eye's side.
package surface
