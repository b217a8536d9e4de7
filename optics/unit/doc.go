// Package unit has one defined type for each unit that optics computes in.
package unit
