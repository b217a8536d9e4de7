package unit

import "math"

// SinCos gives the sine and the cosine of the angle. They are exact (0, ±0.5, ±1, and equal halves of
// the root of 2) at multiples of 30 and 45 degrees where they are rational, because the reduction to one octant is
// made in degrees, where it is exact.
//
// Source: definition; reduction by quarter turns.
func (d Degree) SinCos() (sin, cos float64) {
	r := math.Remainder(float64(d), 360) // exact, in [-180, 180]
	q := math.RoundToEven(r / 90)        // which quarter turn is nearest
	r -= float64(90 * q)                 // exact, in [-45, 45]
	var s, c float64
	switch {
	case r == 30:
		s, c = 0.5, math.Sqrt(0.75)
	case r == -30:
		s, c = -0.5, math.Sqrt(0.75)
	case r == 45:
		s, c = math.Sqrt(0.5), math.Sqrt(0.5)
	case r == -45:
		s, c = -math.Sqrt(0.5), math.Sqrt(0.5)
	default:
		s, c = math.Sincos(r * (math.Pi / 180))
	}
	switch int(q) & 3 {
	case 1:
		return c, -s + 0
	case 2:
		return -s + 0, -c
	case 3:
		return -c, s
	}
	return s, c
}

// HalfAngle gives half the angle whose tangent is y/x, in (0, 180]: the axis of a power vector (J0, J45)
// with x = J0 and y = J45. Both zero give 180. The arguments are dimensionless or of one unit.
//
// Source: Thibos, Wheeler & Horner 1997 (axis of a power vector); axes in (0, 180] by ISO 8429.
func HalfAngle(y, x float64) Degree {
	return Degree(math.Atan2(y, x) * (90 / math.Pi)).Meridian()
}

// Meridian brings an angle into (0, 180]: a meridian and its opposite are one, and 0 is written 180.
//
// Source: ISO 8429.
func (d Degree) Meridian() Degree {
	r := Degree(math.Mod(float64(d), 180))
	if r <= 0 {
		r += 180
	}
	return r
}

// Between gives the turn from the meridian d to the meridian to, in (-90, 90]: positive counter-clockwise.
//
// Source: definition.
func (d Degree) Between(to Degree) Degree {
	t := (to - d).Meridian()
	if t > 90 {
		t -= 180
	}
	return t
}
