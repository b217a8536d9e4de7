package lens

import (
	"meniscus.example/optics/surface"
	"meniscus.example/optics/unit"
	"meniscus.example/optics/vergence"
)

// BackVertexPower is the power of a lens in air as measured from its back vertex: the vergence that leaves the
// lens when parallel light enters its front. It is not a refraction.
type BackVertexPower struct{ vergence.PowerVector }

// FrontVertexPower is the power of a lens in air as measured from its front vertex: the back vertex power of the
// lens turned round.
type FrontVertexPower struct{ vergence.PowerVector }

// Body is a lens without its power: what light passes between the front surface and the tears. Index must be
// above 1 and CentreThickness in [0, +Inf).
type Body struct {
	Back            surface.Curvature
	Index           unit.Index
	CentreThickness unit.Millimetre
}

// BackPower is the power of the back surface against air, (1 - n) C2.
//
// Source: Long 1976 (surface power in matrix form).
func (b Body) BackPower() vergence.PowerVector { return b.Back.Power(unit.Air.Less(b.Index)) }

// FrontPower is the power that the front surface needs for the back vertex power bvp:
//
//	L_b = BVP + (n - 1) C2          inside the lens at its back
//	F1  = (I + (t/n) L_b)⁻¹ L_b     upstream through the lens
//
// It fails with vergence.ErrFocusInGap where no front surface can give that power through that thickness.
//
// Source: Keating 2002 (thick lenses by step-along vergence, from memory), in matrix form.
func (b Body) FrontPower(bvp BackVertexPower) (vergence.PowerVector, error) {
	return bvp.Sub(b.BackPower()).Upstream(b.CentreThickness, b.Index)
}

// OfFront is the back vertex power of the lens with the front surface power f1; FrontPower undone.
//
// Source: as FrontPower, downstream.
func (b Body) OfFront(f1 vergence.PowerVector) (BackVertexPower, error) {
	behind, err := f1.Downstream(b.CentreThickness, b.Index)
	if err != nil {
		return BackVertexPower{}, err
	}
	return BackVertexPower{behind.Add(b.BackPower())}, nil
}

// FrontVertexPower is the power of the lens reversed, with the axes as seen from the examiner still:
// F1 + (I + (t/n)(n-1) C2)⁻¹ (1-n) C2.
//
// Source: Keating 2002 (front vertex power, from memory), in matrix form.
func (b Body) FrontVertexPower(bvp BackVertexPower) (FrontVertexPower, error) {
	f1, err := b.FrontPower(bvp)
	if err != nil {
		return FrontVertexPower{}, err
	}
	through, err := b.BackPower().Downstream(b.CentreThickness, b.Index)
	if err != nil {
		return FrontVertexPower{}, err
	}
	return FrontVertexPower{f1.Add(through)}, nil
}

// FrontCurvature is the curvature of the front surface with the power f1: C1 = F1/(n - 1).
//
// Source: Long 1976.
func (b Body) FrontCurvature(f1 vergence.PowerVector) surface.Curvature {
	return surface.OfPower(f1, b.Index.Less(unit.Air))
}

// Rotate turns the lens counter-clockwise, as the examiner sees it.
//
// Source: definition.
func (b Body) Rotate(by unit.Degree) Body {
	b.Back = b.Back.Rotate(by)
	return b
}
