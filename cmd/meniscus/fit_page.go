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
		rows = append(rows, []string{"back optic zone radius", curve(back.GetOpticZoneRadiusMm())})
	}
	rows = append(rows,
		[]string{"back vertex power", order(lens.GetPower())},
		[]string{"  required exactly", power(res.GetRequiredPower(), 3)},
		[]string{"back optic zone diameter", mm(back.GetOpticZoneDiameterMm(), 1)},
		[]string{"total diameter", mm(lens.GetTotalDiameterMm(), 1)},
		[]string{"centre thickness", mm(lens.GetCentreThicknessMm(), 2)})
	p.table(append(rows, material(lens.GetMaterial())...)...)
}

// material is the rows of a material.
func material(m *pb.Material) [][]string {
	text := fmt.Sprintf("index %v", notation.Round(m.GetRefractiveIndex(), 4))
	if m.HasName() {
		text = m.GetName() + ", " + text
	}
	rows := [][]string{{"material", text}}
	if m.HasDk() {
		rows = append(rows, []string{"oxygen permeability Dk", notation.Decimal(m.GetDk(), 0) + " × " + symbol("10*-11.cm2/s/mm[Hg]")})
	}
	return rows
}

// reasons lays out why it is this lens.
func (p *page) reasons(eye *pb.Eye, res *pb.FitResponse) {
	p.title("Why")
	tears, over, left := res.GetTearLens(), res.GetOverRefraction(), res.GetResidual()
	rows := [][]string{
		given(eye.GetRefraction()),
		{"readings given", readings(eye.GetKeratometry())},
		{"refraction at the cornea", power(res.GetOcularRefraction(), 3)},
		{"tear lens", power(tears.GetPower(), 3)},
		{"  of tears", fmt.Sprintf("index %v, %s µm thick at the apex", notation.Round(tears.GetIndex(), 4), notation.Decimal(tears.GetApexClearanceUm(), 0))},
		{"back vertex power required", power(res.GetRequiredPower(), 3)},
		{"over-refraction predicted", power(over, 2), distance(over.GetVertexDistanceMm())},
		{"residual blur", notation.Decimal(left.GetBlurStrengthD(), 2) + " D"},
		{"acuity predicted", fmt.Sprintf("%s decimal of 1.00, %s logMAR lost",
			notation.Decimal(left.GetDecimalAcuity(), 2), notation.Decimal(left.GetAcuityLossLogmar(), 2))},
	}
	if res.HasOxygen() {
		rows = append(rows, []string{"oxygen, Dk/t at the centre",
			notation.Decimal(res.GetOxygen().GetDkTCentre(), 1) + " × " + symbol("10*-9.cm/s/mm[Hg]")})
	}
	p.table(rows...)
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
