// Package notation reads and prints prescriptions and keratometer readings as they are written by hand:
//
//	-4.25 / -1.50 x 175          plano / -0.75 x 90       +2.00 DS, vertex 12
//	7.80 @ 180 / 7.60 @ 90       43.25 @ 180, 44.50 @ 90
//
// It is for people who type. The messages that it makes hold what was written and nothing more: what is absent stays
// absent, and whether the numbers make sense is for the service to say.
package notation
