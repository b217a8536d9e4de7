// Package unit has one defined type for each unit that the computation uses, the arithmetic between
// different units (written once, as named methods), and angles in degrees.
//
// The stored number is in the customary unit (dioptres, millimetres, degrees), because degrees through
// radians and millimetres through metres are inexact for many of the numbers that people type. Values
// of one unit add, subtract and compare as Go numbers do. Products of two quantities are not written
// with *: an index difference and a curvature give a power by IndexDifference.Power, and so on; a test
// holds the other packages to that.
//
// Every product that enters a sum is written float64(x*y) + z: the conversion keeps the compiler from
// fusing the two into one rounding, so that every machine computes the same bits.
package unit
