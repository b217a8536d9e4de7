package surface

import (
	"meniscus.example/optics/unit"
	"meniscus.example/optics/vergence"
)

// Curvature is the curvature matrix of a surface at its apex, in the components of a power vector: the
// mean of the principal curvatures and two crossed parts. An index difference times a curvature is a
// power with the same principal meridians. The zero value is a plane.
//
// Source: Long 1976; components as Thibos, Wheeler & Horner 1997.
type Curvature struct {
	Mean, J0, J45 unit.PerMetre
}

// Radii are the principal radii of a surface. FlatMeridian is the meridian along which the surface has its
// Flat (longer) radius, in (0, 180].
type Radii struct {
	Flat, Steep  unit.Millimetre
	FlatMeridian unit.Degree
}

// Spherical is the curvature of a sphere of radius r, in (0, +Inf).
//
// Source: definition.
func Spherical(r unit.Millimetre) Curvature { return Curvature{Mean: r.Curvature()} }

// Curvature is the curvature matrix of a toric apex: principal curvatures 1/Flat along the flat meridian
// and 1/Steep across it. Both radii in (0, +Inf).
//
// Source: Long 1976; power of (n'-n)C has S = (n'-n)/Flat, C = (n'-n)(1/Steep - 1/Flat), axis = FlatMeridian.
func (r Radii) Curvature() Curvature {
	flat, steep := r.Flat.Curvature(), r.Steep.Curvature()
	half := float64(steep-flat) / 2
	sin, cos := (2 * r.FlatMeridian).SinCos()
	return Curvature{
		Mean: (flat + steep) / 2,
		J0:   unit.PerMetre(-half*cos) + 0,
		J45:  unit.PerMetre(-half*sin) + 0,
	}
}

// Power is the power of the surface with the given difference of refractive indices, behind less before.
//
// Source: Long 1976, F = (n' - n) C.
func (c Curvature) Power(d unit.IndexDifference) vergence.PowerVector {
	return vergence.PowerVector{M: d.Power(c.Mean), J0: d.Power(c.J0), J45: d.Power(c.J45)}
}

// OfPower is the curvature of a surface that has the power f with the given difference of refractive
// indices, which must not be 0.
//
// Source: Long 1976, C = F/(n' - n).
func OfPower(f vergence.PowerVector, d unit.IndexDifference) Curvature {
	return Curvature{Mean: d.Curvature(f.M), J0: d.Curvature(f.J0), J45: d.Curvature(f.J45)}
}

// Sub is the difference of two curvatures.
//
// Source: definition.
func (c Curvature) Sub(d Curvature) Curvature {
	return Curvature{c.Mean - d.Mean, c.J0 - d.J0, c.J45 - d.J45}
}

// Rotate turns the surface counter-clockwise, as the examiner sees it: its flat meridian grows by the angle.
//
// Source: as vergence.PowerVector.Rotate.
func (c Curvature) Rotate(by unit.Degree) Curvature {
	v := vergence.PowerVector{J0: unit.Dioptre(c.J0), J45: unit.Dioptre(c.J45)}.Rotate(by)
	return Curvature{c.Mean, unit.PerMetre(v.J0), unit.PerMetre(v.J45)}
}

// Radii gives the principal radii and the flat meridian; where both radii are the same the meridian is 180. A
// meridian without curvature has an infinite radius, one that bends the other way a negative one.
//
// Source: Long 1976 (principal curvatures of the matrix).
func (c Curvature) Radii() Radii {
	v := vergence.PowerVector{J0: unit.Dioptre(c.J0), J45: unit.Dioptre(c.J45)}
	j := unit.PerMetre(v.J())
	return Radii{
		Flat:         (c.Mean - j).Radius(),
		Steep:        (c.Mean + j).Radius(),
		FlatMeridian: (v.Axis() + 90).Meridian(), // J0 < 0 is a flat meridian along 180
	}
}

// Mean is the mean of the two radii.
//
// Source: definition.
func (r Radii) Mean() unit.Millimetre { return (r.Flat + r.Steep) / 2 }
