package tear

import (
	"meniscus.example/optics/lens"
	"meniscus.example/optics/surface"
	"meniscus.example/optics/unit"
	"meniscus.example/optics/vergence"
)

// Behind is the vergence wanted in the tears at the back of a lens, L_b', as an over-refraction over the lens on the eye tells it, without any
// keratometry: the over-refraction at the front of the lens, downstream through the front surface and the thickness,
// and out into the tears. It is Over undone. A lens that turned on the eye is given as it lies: body and power turned by the rotation seen.
// It fails with vergence.ErrFocusInGap where light would have to come to a focus in the lens.
//
// Source: Keating 2002 (step-along vergence, from memory), in matrix form; on-eye power from an over-refraction as matrices:
// Lindsay, Bruce, Brennan & Pianta 1997.
func (l Layer) Behind(over vergence.PowerVector, body lens.Body, power lens.BackVertexPower) (vergence.PowerVector, error) {
	made, err := body.FrontPower(power)
	if err != nil {
		return vergence.PowerVector{}, err
	}
	inside, err := over.Add(made).Downstream(body.CentreThickness, body.Index)
	if err != nil {
		return vergence.PowerVector{}, err
	}
	return inside.Sub(body.Back.Power(body.Index.Less(l.Index))), nil
}

// BehindThin is Behind for a trial lens of which neither thickness nor index is known, taken as thin: L_b' = O + BVP + (n_t - 1) C2. The answer that
// uses it has to say so.
//
// Source: as Behind, with no thickness.
func (l Layer) BehindThin(over vergence.PowerVector, back surface.Curvature, power lens.BackVertexPower) vergence.PowerVector {
	return over.Add(power.PowerVector).Add(back.Power(l.Index.Less(unit.Air)))
}

// Order is the back vertex power of a lens with the back surface back, for the vergence wanted behind it: BVP = L_b' - (n_t - 1) C2. For a lens
// that will turn on the eye by an angle r, counter-clockwise positive, the power is turned by -r before it is ordered: left of the
// examiner add, right subtract.
//
// Source: thick tear lens as Required; it holds the rule of thumb that steeper adds minus exactly.
func (l Layer) Order(behind vergence.PowerVector, back surface.Curvature) lens.BackVertexPower {
	return lens.BackVertexPower{PowerVector: behind.Sub(back.Power(l.Index.Less(unit.Air)))}
}
