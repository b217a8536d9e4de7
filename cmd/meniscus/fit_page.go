package main

import (
	"fmt"

	"meniscus.example/client/notation"
	pb "meniscus.example/proto/meniscus/v1"
)

// fit lays out a fit: the lens to order, why, what was chosen, and what ends every answer.
func (p *page) fit(req *pb.FitRequest, res *pb.FitResponse) {
	p.sources = req.GetPlan().GetExplain()
	p.lens(res)
	p.reasons(req.GetEye(), res)
	p.choices(res.GetChoices())
	p.end(res)
}

// lens lays out the lens to order.
func (p *page) lens(res *pb.FitResponse) {
	head := "Lens to order"
	if side := sideName(res.GetSide()); side != "" {
		head += ", " + side
	}
	p.title(head)
	lens, back := res.GetLens(), res.GetLens().GetBackSurface()
	rows := [][]string{{"kind", kindName(lens)}}
	if back.HasSteepRadiusMm() {
		flat := back.GetFlatMeridianDeg()
		rows = append(rows,
			[]string{"back optic zone radius, flat", curve(back.GetOpticZoneRadiusMm()), along(flat)},
			[]string{"back optic zone radius, steep", curve(back.GetSteepRadiusMm()), along(perpendicular(flat))})
	} else {
		rows = append(rows, row(back.HasOpticZoneRadiusMm(), "back optic zone radius", curve(back.GetOpticZoneRadiusMm())))
	}
	rows = append(rows,
		row(lens.HasPower(), "back vertex power", order(lens.GetPower())),
		row(res.HasRequiredPower(), "  required exactly", power(res.GetRequiredPower(), 3)),
		row(back.HasOpticZoneDiameterMm(), "back optic zone diameter", mm(back.GetOpticZoneDiameterMm(), 1)),
		row(lens.HasTotalDiameterMm(), "total diameter", mm(lens.GetTotalDiameterMm(), 1)),
		row(lens.HasCentreThicknessMm(), "centre thickness", mm(lens.GetCentreThicknessMm(), 2)))
	p.table(append(rows, material(lens.GetMaterial())...)...)
}

// material is the rows of a material.
func material(m *pb.Material) [][]string {
	text := "index " + upTo(4, m.GetRefractiveIndex())
	if m.HasName() {
		text = m.GetName() + ", " + text
	}
	return [][]string{
		row(m.HasRefractiveIndex(), "material", text),
		row(m.HasDk(), "oxygen permeability Dk", upTo(1, m.GetDk())+" × "+symbol("10*-11.cm2/s/mm[Hg]")),
	}
}

// reasons lays out why it is this lens.
func (p *page) reasons(eye *pb.Eye, res *pb.FitResponse) {
	p.title("Why")
	tears, over, left := res.GetTearLens(), res.GetOverRefraction(), res.GetResidual()
	p.table(
		given(eye.GetRefraction()),
		[]string{"readings given", readings(eye.GetKeratometry())},
		row(res.HasOcularRefraction(), "refraction at the cornea", power(res.GetOcularRefraction(), 3)),
		row(tears.HasPower(), "tear lens", power(tears.GetPower(), 3)),
		row(tears.HasIndex(), "  of tears", fmt.Sprintf("index %s, %s µm thick at the apex",
			upTo(4, tears.GetIndex()), upTo(1, tears.GetApexClearanceUm()))),
		row(res.HasRequiredPower(), "back vertex power required", power(res.GetRequiredPower(), 3)),
		row(res.HasOverRefraction(), "over-refraction predicted", power(over, 2), distance(over.GetVertexDistanceMm())),
		row(left.HasBlurStrengthD(), "residual blur", notation.Decimal(left.GetBlurStrengthD(), 2)+" D"),
		row(left.HasDecimalAcuity(), "acuity predicted", fmt.Sprintf("%s decimal of 1.00, %s logMAR lost",
			notation.Decimal(left.GetDecimalAcuity(), 2), notation.Decimal(left.GetAcuityLossLogmar(), 2))),
		row(res.HasOxygen(), "oxygen, Dk/t at the centre",
			upTo(1, res.GetOxygen().GetDkTCentre())+" × "+symbol("10*-9.cm/s/mm[Hg]")))
	if model := left.GetAcuityModel(); p.sources && model != "" {
		p.item("acuity: " + model)
	}
}

// perpendicular is the meridian across another, in (0, 180].
func perpendicular(deg float64) float64 {
	if deg > 90 {
		return deg - 90
	}
	return deg + 90
}
