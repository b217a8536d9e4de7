// Package vergence has sphero-cylindrical powers as power vectors, the two moves from which every
// computation here is made (adding, and travelling through a gap), and refractions at the planes where
// they are measured and used.
//
// A sphero-cylinder (S, C, a) is the symmetric matrix
//
//	[ S + C sin²a      -C sin a cos a ]   [ M + J0   J45    ]
//	[ -C sin a cos a   S + C cos²a    ] = [ J45      M - J0 ]
//
// Source: Long, A matrix formalism for decentration problems, Am J Optom Physiol Opt 1976;53:27-33;
// Keating, An easier method to obtain the sphere, cylinder, and axis from an off-axis dioptric power
// matrix, 1980;57:734-737; Thibos, Wheeler & Horner, Optom Vis Sci 1997;74:367-375.
package vergence
