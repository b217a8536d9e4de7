package vergence

import (
	"errors"
	"math"

	"meniscus.example/optics/unit"
)

// PowerVector is a sphero-cylindrical power or vergence: the spherical equivalent M and the two
// cross-cylinders J0 (axes 180 and 90) and J45 (axes 45 and 135). The zero value is no power.
//
// Source: Thibos, Wheeler & Horner 1997.
type PowerVector struct {
	M, J0, J45 unit.Dioptre
}

// SphereCylinder is a power as it is written: Axis is in (0, 180], or 0 where there is no cylinder and so
// no axis.
type SphereCylinder struct {
	Sphere, Cylinder unit.Dioptre
	Axis             unit.Degree
}

// NoCylinder is the size below which a cylinder rounds to 0.00 and has no axis.
//
// Source: definition (half of the last digit that the trade writes).
const NoCylinder unit.Dioptre = 0.005

// ErrFocusInGap says that light comes to a focus inside a gap, so that its vergence behind the gap is
// not defined or has changed sign through infinity.
var ErrFocusInGap = errors.New("a focus falls inside the gap")

// Sphere is the power vector of a sphere.
//
// Source: definition.
func Sphere(s unit.Dioptre) PowerVector { return PowerVector{M: s} }

// Vector gives the power vector: M = S + C/2, J0 = -(C/2) cos 2a, J45 = -(C/2) sin 2a.
//
// Source: Thibos, Wheeler & Horner 1997.
func (p SphereCylinder) Vector() PowerVector {
	sin, cos := (2 * p.Axis).SinCos()
	half := float64(float64(p.Cylinder) / 2)
	return PowerVector{
		M:   p.Sphere + unit.Dioptre(half),
		J0:  unit.Dioptre(-half*cos) + 0,
		J45: unit.Dioptre(-half*sin) + 0,
	}
}

// J is the length of the cross-cylinder part, sqrt(J0² + J45²): half the cylinder without its sign.
//
// Source: Thibos, Wheeler & Horner 1997.
func (v PowerVector) J() unit.Dioptre {
	x, y := float64(v.J0), float64(v.J45)
	return unit.Dioptre(math.Sqrt(float64(x*x) + float64(y*y)))
}

// Blur is the blur strength B = sqrt(M² + J0² + J45²).
//
// Source: Thibos, Wheeler & Horner 1997.
func (v PowerVector) Blur() unit.Dioptre {
	m, x, y := float64(v.M), float64(v.J0), float64(v.J45)
	return unit.Dioptre(math.Sqrt(float64(m*m) + float64(x*x) + float64(y*y)))
}

// Axis is the axis of the minus cylinder, in (0, 180]; 180 where there is no cylinder.
//
// Source: Thibos, Wheeler & Horner 1997.
func (v PowerVector) Axis() unit.Degree { return unit.HalfAngle(float64(v.J45), float64(v.J0)) }

// MinusCylinder gives S = M + J, C = -2J and the axis. A cylinder below NoCylinder is left out: S is then M.
//
// Source: Thibos, Wheeler & Horner 1997.
func (v PowerVector) MinusCylinder() SphereCylinder {
	j := v.J()
	if 2*j < NoCylinder {
		return SphereCylinder{Sphere: v.M + 0}
	}
	return SphereCylinder{Sphere: v.M + j, Cylinder: -2 * j, Axis: v.Axis()}
}

// PlusCylinder gives S = M - J, C = 2J and the axis. A cylinder below NoCylinder is left out: S is then M.
//
// Source: Thibos, Wheeler & Horner 1997.
func (v PowerVector) PlusCylinder() SphereCylinder {
	j := v.J()
	if 2*j < NoCylinder {
		return SphereCylinder{Sphere: v.M + 0}
	}
	return SphereCylinder{Sphere: v.M - j, Cylinder: 2 * j, Axis: (v.Axis() + 90).Meridian()}
}

// Along is the power along a meridian: M + J0 cos 2t + J45 sin 2t.
//
// Source: Thibos, Wheeler & Horner 1997.
func (v PowerVector) Along(meridian unit.Degree) unit.Dioptre {
	sin, cos := (2 * meridian).SinCos()
	return v.M + unit.Dioptre(float64(float64(v.J0)*cos)+float64(float64(v.J45)*sin))
}

// Add is the sum of two thin powers in contact.
//
// Source: Thibos, Wheeler & Horner 1997.
func (v PowerVector) Add(w PowerVector) PowerVector {
	return PowerVector{v.M + w.M, v.J0 + w.J0, v.J45 + w.J45}
}

// Sub is the difference of two thin powers.
//
// Source: Thibos, Wheeler & Horner 1997.
func (v PowerVector) Sub(w PowerVector) PowerVector {
	return PowerVector{v.M - w.M, v.J0 - w.J0, v.J45 - w.J45}
}

// Rotate turns the power counter-clockwise, as the examiner sees it: its axis grows by the angle.
//
// Source: Thibos, Wheeler & Horner 1997 (the cross-cylinders turn by twice the angle).
func (v PowerVector) Rotate(by unit.Degree) PowerVector {
	sin, cos := (2 * by).SinCos()
	x, y := float64(v.J0), float64(v.J45)
	return PowerVector{
		M:   v.M,
		J0:  unit.Dioptre(float64(x*cos) - float64(y*sin)),
		J45: unit.Dioptre(float64(x*sin) + float64(y*cos)),
	}
}

// Downstream is the vergence after travelling a gap of index n along the light:
// L' = (I - (d/n)L)⁻¹ L. It fails with ErrFocusInGap where an eigenvalue of (d/n)L reaches 1.
//
// Written out for a symmetric matrix, with q = d/n in metres and J² = J0² + J45²:
//
//	D   = (1 - qM)² - (qJ)²
//	M'  = (M - q(M² - J²)) / D
//	J0' = J0/D    J45' = J45/D
//
// Source: Keating 1981, Optom Vis Sci 58:810-819 (matrix effectivity, from memory); Harris 1996 (from memory).
// The closed form is the Cayley-Hamilton inverse of a symmetric 2×2 matrix.
func (v PowerVector) Downstream(d unit.Millimetre, n unit.Index) (PowerVector, error) {
	return v.travel(d.Reduced(n))
}

// Upstream is the vergence before travelling a gap: Downstream by the same gap undoes it.
//
// Source: as Downstream, with the gap counted negative.
func (v PowerVector) Upstream(d unit.Millimetre, n unit.Index) (PowerVector, error) {
	return v.travel(-d.Reduced(n))
}

func (v PowerVector) travel(over unit.ReducedMetre) (PowerVector, error) {
	m, det := Gap(v, over)
	q := float64(over)
	if !(m > 0 && det > 0) {
		return PowerVector{}, ErrFocusInGap
	}
	x, y, z := float64(v.J0), float64(v.J45), float64(v.M)
	j2 := float64(x*x) + float64(y*y)
	p := float64(z*z) - j2
	return PowerVector{
		M:   unit.Dioptre((z - float64(q*p)) / det),
		J0:  unit.Dioptre(x / det),
		J45: unit.Dioptre(y / det),
	}, nil
}

// Gap gives 1 - qM and the determinant D = (1 - qM)² - (qJ)² of I - qL, both dimensionless, for q the
// reduced distance. No focus falls inside the gap while both are above 0.
//
// Source: as Downstream.
func Gap(v PowerVector, over unit.ReducedMetre) (mean, det float64) {
	q := float64(over)
	x, y := float64(q*float64(v.J0)), float64(q*float64(v.J45))
	j2 := float64(x*x) + float64(y*y)
	mean = 1 - float64(q*float64(v.M))
	return mean, float64(mean*mean) - j2
}

// Transposed is the same power written with the cylinder of the other sign; without a cylinder it is the same.
//
// Source: definition (transposition).
func (p SphereCylinder) Transposed() SphereCylinder {
	if p.Cylinder == 0 {
		return p
	}
	return SphereCylinder{Sphere: p.Sphere + p.Cylinder, Cylinder: -p.Cylinder, Axis: (p.Axis + 90).Meridian()}
}
