package unit

import "math"

// Step is a grid of values that can be ordered: the multiples of a size > 0. A grid is counted in whole
// numbers, never by adding steps, and where a whole number of steps makes up 1 (0.05, 0.25) its
// values are the doubles nearest to the decimals that people type: At(156) of 0.05 is 7.8.
type Step[T ~float64] struct {
	size    float64
	inverse float64 // the number of steps in 1, where it is whole, else 0
}

// NewStep makes the grid of the multiples of size, in (0, +Inf).
//
// Source: definition.
func NewStep[T ~float64](size T) Step[T] {
	s := Step[T]{size: float64(size)}
	if n := math.Round(1 / float64(size)); n >= 1 && math.Abs(float64(n*float64(size))-1) < 1e-12 {
		s.inverse = n
	}
	return s
}

// At is the value k steps from 0.
//
// Source: definition.
func (s Step[T]) At(k int) T {
	if s.inverse != 0 {
		return T(float64(k) / s.inverse)
	}
	return T(float64(k) * s.size)
}

// RoundIndex is the number of steps nearest to x; a tie goes away from 0.
//
// Source: definition.
func (s Step[T]) RoundIndex(x T) int {
	if s.inverse != 0 {
		return int(math.Round(float64(x) * s.inverse))
	}
	return int(math.Round(float64(x) / s.size))
}

// FloorIndex is the greatest number of steps that is not above x.
//
// Source: definition.
func (s Step[T]) FloorIndex(x T) int {
	k := s.RoundIndex(x)
	if s.At(k) > x {
		k--
	}
	return k
}

// Round is the grid value nearest to x; a tie goes away from 0, and there is no negative zero.
//
// Source: definition.
func (s Step[T]) Round(x T) T { return s.At(s.RoundIndex(x)) + 0 }
