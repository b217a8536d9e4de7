package tear

import (
	"meniscus.example/optics/lens"
	"meniscus.example/optics/surface"
	"meniscus.example/optics/unit"
	"meniscus.example/optics/vergence"
)

// DefaultIndex is the refractive index of the tears that makes the tear lens exactly the difference of the keratometer
// readings, 337.5/r.
//
// Source: common practice (the rule of 337.5/r); the physical index is PhysicalIndex.
const DefaultIndex unit.Index = 1.3375

// PhysicalIndex is the measured refractive index of tears.
//
// Source: Gullstrand's schematic eye no. 1 (aqueous media 1.336).
const PhysicalIndex unit.Index = 1.336

// LensPower is the power of a tear lens: of the tears alone, as a thin lens in air. It is neither the power
// of a contact lens nor a refraction.
type LensPower struct{ vergence.PowerVector }

// Layer is the layer of tears under a lens: Index above 1, Apex (the thickness at the apex of the cornea) in
// [0, +Inf).
type Layer struct {
	Index unit.Index
	Apex  unit.Millimetre
}

// Lens is the tear lens between a back optic zone and a cornea, thin in air: F_T = (n_t - 1)(C2 - C_c).
//
// Source: common practice in dioptres (337.5/r_lens - 337.5/r_cornea); in matrix form Keating 1980.
func (l Layer) Lens(back, cornea surface.Curvature) LensPower {
	return LensPower{back.Sub(cornea).Power(l.Index.Less(unit.Air))}
}

// Wanted are the vergences wanted along the light's way backwards from the cornea, for the eye to see
// clearly.
type Wanted struct {
	// Cornea is L_t = K + (n_t - 1) C_c, in the tears at the cornea.
	Cornea vergence.PowerVector
	// Back is L_b', in the tears at the back of the lens: L_t upstream through the apex gap.
	Back vergence.PowerVector
	// Power is the back vertex power that gives it: BVP = L_b' - (n_t - 1) C2.
	Power lens.BackVertexPower
}

// Required is the back vertex power that corrects an eye of ocular refraction k and the given cornea, through
// tears of this layer, under a lens with the given back surface. With no gap at the apex it is K less the
// tear lens. It fails with vergence.ErrFocusInGap where light would have to come to a focus in the tears.
//
// Source: thick tear lens as in Schornack et al. 2014 (Contact Lens Spectrum, August 2014), in matrix form.
func (l Layer) Required(k vergence.OcularRefraction, cornea, back surface.Curvature) (Wanted, error) {
	step := l.Index.Less(unit.Air)
	w := Wanted{Cornea: k.Add(cornea.Power(step))}
	var err error
	if w.Back, err = w.Cornea.Upstream(l.Apex, l.Index); err != nil {
		return Wanted{}, err
	}
	w.Power = l.Order(w.Back, back)
	return w, nil
}

// OverRefraction are the vergences from the back of a lens that is worn to the correction that remains before it.
type OverRefraction struct {
	// Inside is L_b* = L_b' + (n - n_t) C2, needed inside the lens at its back surface.
	Inside vergence.PowerVector
	// Front is L_f*, the same at the front surface: upstream through the lens.
	Front vergence.PowerVector
	// Made is F1, the front surface power of the lens that is worn.
	Made vergence.PowerVector
	// Power is the over-refraction at the front of the lens, L_f* - F1. It is zero for a lens of exactly the
	// required power, through any thickness.
	Power vergence.PowerVector
}

// Over is the over-refraction of an eye that wears the lens of this body and back vertex power over this layer,
// where back is Wanted.Back. It fails with vergence.ErrFocusInGap where light would have to come to a focus in
// the lens.
//
// Source: Keating 2002 (step-along vergence, from memory), in matrix form.
func (l Layer) Over(back vergence.PowerVector, body lens.Body, power lens.BackVertexPower) (OverRefraction, error) {
	need, err := l.Need(back, body)
	if err != nil {
		return OverRefraction{}, err
	}
	return need.Worn(body, power)
}

// Need is the part of Over that does not depend on the power of the lens: Inside and Front.
//
// Source: as Over.
func (l Layer) Need(back vergence.PowerVector, body lens.Body) (OverRefraction, error) {
	o := OverRefraction{Inside: back.Add(body.Back.Power(body.Index.Less(l.Index)))}
	var err error
	o.Front, err = o.Inside.Upstream(body.CentreThickness, body.Index)
	return o, err
}

// Worn completes what Need began, for a lens of the given power.
//
// Source: as Over.
func (o OverRefraction) Worn(body lens.Body, power lens.BackVertexPower) (OverRefraction, error) {
	var err error
	if o.Made, err = body.FrontPower(power); err != nil {
		return OverRefraction{}, err
	}
	o.Power = o.Front.Sub(o.Made)
	return o, nil
}
