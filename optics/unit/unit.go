package unit

import (
	"fmt"
	"math"
	"strconv"
)

// Dioptre is a power or a vergence, in 1/m. The zero value is no power. Exact: what is typed is what
// is stored. Compare with a tolerance: sums of powers are rounded.
type Dioptre float64

// Millimetre is a length, in mm. Positive radii have their centre on the eye's side. The zero value
// is no length. Exact: what is typed is what is stored; 0.1 mm is not exactly 100 µm.
type Millimetre float64

// Micrometre is a length, in µm. The zero value is no length. Millimetres x 1000 is rounded: 0.0007 mm
// is 0.7000000000000001 µm.
type Micrometre float64

// ReducedMetre is a distance over a refractive index, d/n, in m: what a vergence changes by. It appears inside formulas only. The zero
// value is no distance.
type ReducedMetre float64

// Degree is an angle, in degrees, counter-clockwise as the examiner sees the patient. The zero value is
// a horizontal meridian, which is written 180. Multiples of 30 and 45 degrees have exact sines and
// cosines where these are rational.
type Degree float64

// Index is a refractive index, dimensionless. The zero value is not an index of anything.
type Index float64

// IndexDifference is the difference of the refractive indices on the two sides of a surface: behind less
// before, dimensionless. The zero value is no surface.
type IndexDifference float64

// PerMetre is a curvature, in 1/m: 1000 / (radius in mm). The zero value is flat.
type PerMetre float64

// ShapeFactor is the shape factor p of a conic, dimensionless: p = 1 + Q = 1 - e². 1 is a sphere, between
// 0 and 1 an ellipse that flattens outwards, 0 a parabola. The zero value is a parabola.
type ShapeFactor float64

// Asphericity is the asphericity Q of a conic, dimensionless: p = 1 + Q. The zero value is a sphere.
type Asphericity float64

// Eccentricity is the eccentricity e of a prolate conic, dimensionless: p = 1 - e². The zero value is a sphere.
type Eccentricity float64

// Permeability is an oxygen permeability Dk, in 10⁻¹¹ (cm²/s)(mL O2/(mL·mmHg)).
type Permeability float64

// Transmissibility is an oxygen transmissibility Dk/t, in 10⁻⁹ (cm/s)(mL O2/(mL·mmHg)).
type Transmissibility float64

// Air is the refractive index of air.
//
// Source: definition (indices are relative to air throughout).
const Air Index = 1

// String gives the number and the unit.
//
// Source: definition.
func (d Dioptre) String() string { return number(float64(d)) + " D" }

// String gives the number and the unit.
//
// Source: definition.
func (m Millimetre) String() string { return number(float64(m)) + " mm" }

// String gives the number and the unit.
//
// Source: definition.
func (m Micrometre) String() string { return number(float64(m)) + " µm" }

// String gives the number and the unit.
//
// Source: definition.
func (q ReducedMetre) String() string { return number(float64(q)) + " m" }

// String gives the number and the unit.
//
// Source: definition.
func (d Degree) String() string { return number(float64(d)) + "°" }

// String gives the number; an index has no unit.
//
// Source: definition.
func (n Index) String() string { return number(float64(n)) }

// String gives the number; a difference of indices has no unit.
//
// Source: definition.
func (n IndexDifference) String() string { return number(float64(n)) }

// String gives the number and the unit.
//
// Source: definition.
func (c PerMetre) String() string { return number(float64(c)) + " 1/m" }

// String gives the number; a shape factor has no unit.
//
// Source: definition.
func (p ShapeFactor) String() string { return number(float64(p)) }

// String gives the number and the unit.
//
// Source: definition.
func (p Permeability) String() string {
	return number(float64(p)) + "·10⁻¹¹ (cm²/s)(mL O2/(mL·mmHg))"
}

// String gives the number and the unit.
//
// Source: definition.
func (t Transmissibility) String() string {
	return number(float64(t)) + "·10⁻⁹ (cm/s)(mL O2/(mL·mmHg))"
}

func number(x float64) string { return strconv.FormatFloat(x+0, 'g', -1, 64) }

// Micrometres converts exactly to the rounding of one product.
//
// Source: definition (1 mm = 1000 µm).
func (m Millimetre) Micrometres() Micrometre { return Micrometre(m * 1000) }

// Millimetres converts exactly to the rounding of one division.
//
// Source: definition (1 mm = 1000 µm).
func (m Micrometre) Millimetres() Millimetre { return Millimetre(m / 1000) }

// Curvature is 1000/r for a radius in millimetres. A radius of 0 gives an infinity: constructors refuse it.
//
// Source: definition of curvature.
func (m Millimetre) Curvature() PerMetre { return PerMetre(1000 / m) }

// Radius is 1000/c in millimetres. A curvature of 0 gives an infinity.
//
// Source: definition of curvature.
func (c PerMetre) Radius() Millimetre { return Millimetre(1000 / c) }

// Less is the index difference n - before, of a surface with n behind it.
//
// Source: definition.
func (n Index) Less(before Index) IndexDifference { return IndexDifference(n - before) }

// Power is the power of a surface of curvature c: F = (n' - n) c.
//
// Source: Keating, Geometric, Physical, and Visual Optics, 2nd ed. 2002, single spherical refracting
// surfaces (from memory).
func (d IndexDifference) Power(c PerMetre) Dioptre { return Dioptre(float64(d) * float64(c)) }

// Curvature is the curvature that gives the power f: c = F/(n' - n). A difference of 0 gives an infinity or
// a NaN: constructors refuse it.
//
// Source: Keating 2002 as Power.
func (d IndexDifference) Curvature(f Dioptre) PerMetre { return PerMetre(float64(f) / float64(d)) }

// KeratometricPower is the power that an instrument of keratometric index n shows for the radius r:
// P = 1000 (n - 1)/r.
//
// Source: AJO 02-320 (author's comments on keratometric indices); 337.5/r for 1.3375.
func KeratometricPower(r Millimetre, n Index) Dioptre {
	return Dioptre(1000 * float64(n-1) / float64(r))
}

// KeratometricRadius is the radius for which an instrument of keratometric index n shows the power p:
// r = 1000 (n - 1)/P.
//
// Source: AJO 02-320, as KeratometricPower.
func KeratometricRadius(p Dioptre, n Index) Millimetre {
	return Millimetre(1000 * float64(n-1) / float64(p))
}

// Reduced is the length over the index, d/n.
//
// Source: definition of reduced distance.
func (m Millimetre) Reduced(n Index) ReducedMetre {
	return ReducedMetre(float64(m) / (1000 * float64(n)))
}

// ShapeFactor is p = 1 + Q.
//
// Source: ISO 18369-1.
func (q Asphericity) ShapeFactor() ShapeFactor { return ShapeFactor(1 + q) }

// ShapeFactor is p = 1 - e².
//
// Source: ISO 18369-1.
func (e Eccentricity) ShapeFactor() ShapeFactor { return ShapeFactor(1 - float64(e*e)) }

// Asphericity is Q = p - 1.
//
// Source: ISO 18369-1.
func (p ShapeFactor) Asphericity() Asphericity { return Asphericity(p - 1) }

// Transmissibility is Dk/t for the thickness t > 0: Dk/(10 t), t in millimetres.
//
// Source: definition of Dk/t in ISO 18369-1; 10⁻¹¹ cm²/s over mm is 10⁻¹⁰ cm/s.
func (p Permeability) Transmissibility(t Millimetre) Transmissibility {
	return Transmissibility(float64(p) / (10 * float64(t)))
}

// Finite reports whether x is a number: neither NaN nor infinite.
//
// Source: definition.
func Finite[T ~float64](x T) bool { return !math.IsNaN(float64(x)) && !math.IsInf(float64(x), 0) }

// Optional is a value that may be absent. The zero value is absent: absent and zero differ.
type Optional[T any] struct {
	value T
	given bool
}

// Some is a value that is there.
//
// Source: definition.
func Some[T any](v T) Optional[T] { return Optional[T]{v, true} }

// Get gives the value and whether it is there.
//
// Source: definition.
func (o Optional[T]) Get() (T, bool) { return o.value, o.given }

// Given reports whether the value is there.
//
// Source: definition.
func (o Optional[T]) Given() bool { return o.given }

// Or gives the value, or what is given where it is absent.
//
// Source: definition.
func (o Optional[T]) Or(absent T) T {
	if o.given {
		return o.value
	}
	return absent
}

// String gives the value, or the word absent.
//
// Source: definition.
func (o Optional[T]) String() string {
	if !o.given {
		return "absent"
	}
	return fmt.Sprint(o.value)
}
