package fitting

import (
	"fmt"

	"meniscus.example/optics/cornea"
	"meniscus.example/optics/unit"
	"meniscus.example/optics/vergence"
)

// Term is one power of a sum: as a vector, and as it was written where it was.
type Term struct {
	Written  unit.Optional[vergence.SphereCylinder]
	Vector   vergence.PowerVector
	Subtract bool
}

// Combine is the sum of thin powers in contact. It fails as TooStrong does.
//
// Source: Thibos, Wheeler & Horner 1997.
func Combine(terms []Term) (vergence.PowerVector, error) {
	var sum vergence.PowerVector
	for _, t := range terms {
		sum = t.after(sum)
	}
	return sum, TooStrong(sum, "terms")
}

// TooStrong is nil for a power of which every meridian is within 100 D and the cylinder within 50 D, else an
// *unit.ImpossibleError of the field.
//
// Source: definition (far beyond any lens).
func TooStrong(v vergence.PowerVector, field string) error {
	if !beyond(v) {
		return nil
	}
	return &unit.ImpossibleError{
		Fields: []string{field},
		Problem: fmt.Sprintf("make a power of mean %+.2f D and cylinder %.2f D, beyond 100 D in a meridian or 50 D of cylinder",
			float64(v.M), 2*float64(v.J())),
	}
}

func beyond(v vergence.PowerVector) bool {
	j := v.J()
	return v.M+j > strongest || v.M-j < -strongest || 2*j > strongestCylinder
}

func (t Term) after(sum vergence.PowerVector) vergence.PowerVector {
	if t.Subtract {
		return sum.Sub(t.Vector)
	}
	return sum.Add(t.Vector)
}

// DeriveCombine tells how Combine adds.
//
// Source: Thibos, Wheeler & Horner 1997.
func DeriveCombine(terms []Term) []Step {
	var d Derivation
	var sum vergence.PowerVector
	for i, t := range terms {
		name := fmt.Sprintf("term %d", i+1)
		if written, ok := t.Written.Get(); ok {
			d.Vector(name, fmt.Sprintf("P%d", i+1), written, t.Vector)
		}
		next := t.after(sum)
		d.Add("sum with "+name, "sum", "before", fmt.Sprintf("P%d", i+1), sum, t.Vector, next, t.Subtract)
		sum = next
	}
	d.SphereCylinder("sum", "sum", sum)
	return d.steps
}

// DeriveTransfer tells how a refraction comes to another distance from the eye.
//
// Source: as vergence.PowerVector.Downstream.
func DeriveTransfer(at vergence.SpectacleRefraction, to unit.Millimetre, moved vergence.PowerVector) []Step {
	var d Derivation
	d.Vector("refraction as given", "F", at.Written(), at.Power())
	gap, upstream := at.Gap(to)
	d.Travel("the same at the wanted distance", "K", at.Power(), moved, gap, unit.Air, upstream)
	d.SphereCylinder("power", "K", moved)
	return d.steps
}

// DeriveExpress tells how a power is written in its forms.
//
// Source: Thibos, Wheeler & Horner 1997.
func DeriveExpress(written unit.Optional[vergence.SphereCylinder], given vergence.PowerVector, turn unit.Degree, turned vergence.PowerVector) []Step {
	var d Derivation
	if sc, ok := written.Get(); ok {
		d.Vector("power as given", "P", sc, given)
	}
	if turn != 0 {
		x, y, r := dioptres("J0", given.J0), dioptres("J45", given.J45), degrees("r", turn)
		d.step("turned, J0", "J0*cosd(2*r) - J45*sind(2*r)", sourceVectors, dioptres("T_J0", turned.J0), x, y, r)
		d.step("turned, J45", "J0*sind(2*r) + J45*cosd(2*r)", sourceVectors, dioptres("T_J45", turned.J45), x, y, r)
	}
	d.SphereCylinder("power", "T", turned)
	d.step("blur strength", "sqrt(M*M + J0*J0 + J45*J45)", sourceVectors, dioptres("B", turned.Blur()),
		dioptres("M", turned.M), dioptres("J0", turned.J0), dioptres("J45", turned.J45))
	return d.steps
}

// DeriveCornea tells how a cornea is described.
//
// Source: AJO 02-320 (337.5/r); surface powers Long 1976.
func DeriveCornea(k cornea.Cornea) []Step {
	var d Derivation
	const source = "keratometric power 1000 (n - 1)/r, 337.5/r for index 1.3375: AJO 02-320"
	n := indices("n", cornea.KeratometricIndex)
	flat, steep := lengths("r", k.Radii().Flat), lengths("r", k.Radii().Steep)
	d.step("flat reading", "1000*(n - 1)/r", source, dioptres("K_flat", k.FlatK()), n, flat)
	d.step("steep reading", "1000*(n - 1)/r", source, dioptres("K_steep", k.SteepK()), n, steep)
	d.step("corneal astigmatism", "K_steep - K_flat", "definition", dioptres("DK", k.Astigmatism()),
		dioptres("K_steep", k.SteepK()), dioptres("K_flat", k.FlatK()))
	d.Surface("front surface in air", "F", k.Radii(), k.Curvature(), unit.Air, cornea.PhysicalIndex)
	return d.steps
}
