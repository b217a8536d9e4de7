// Package notation reads and prints prescriptions and keratometer readings as they are written by hand:
//
//	-4.25 / -1.50 x 175          plano / -0.75 x 90       +2.00 DS, vertex 12
//	7.80 @ 180 / 7.60 @ 90       43.25 @ 180, 44.50 @ 90
//
// It is for people who type. The messages that it makes hold what was written and nothing more: what is absent stays
// absent, and whether the numbers make sense is for the service to say.
//
// # Decimal comma
//
// A comma is a decimal comma where digits stand on both sides of it without a space, and the number is a power, a radius or
// a distance: -4,25 is -4.25. In every other place it separates: after a space or before one, before a sign, after a number that has
// its decimals, and after an axis or a meridian, so that 43@180,44@90 is two readings. A text that has a point as well as
// such a comma is an error: it cannot be told which of the two is the decimal mark.
//
// # Signs
//
// The sign may be the hyphen of a keyboard, the minus of typography (U+2212) or the dash that word processors make of a hyphen
// (U+2013). A power without a sign is plus.
package notation
