package main

import (
	"fmt"

	"meniscus.example/client/notation"
	pb "meniscus.example/proto/meniscus/v1"
)

// The words for what the schema names.
var (
	sides = map[pb.Side]string{
		pb.Side_SIDE_RIGHT: "right eye (OD)",
		pb.Side_SIDE_LEFT:  "left eye (OS)",
	}
	toricities = map[pb.Toricity]string{
		pb.Toricity_TORICITY_SPHERICAL: "rigid, spherical",
		pb.Toricity_TORICITY_FRONT:     "rigid, front toric",
		pb.Toricity_TORICITY_BACK:      "rigid, back toric",
		pb.Toricity_TORICITY_BITORIC:   "rigid, bitoric",
	}
)

// mm writes a length with its unit.
func mm(x float64, decimals int) string { return fmt.Sprintf("%.*f mm", decimals, x) }

// radius writes a radius in mm, and what a keratometer of index 1.3375 would call it.
func radius(x float64) string { return fmt.Sprintf("%.2f mm (%.2f D)", x, 337.5/x) }

// power writes a power with its unit after the numbers.
func power(p notation.Power, decimals int) string {
	text := notation.FormatPower(p, decimals)
	if p.HasAxisDeg() {
		return text + "°"
	}
	if text == "plano" {
		return text
	}
	return text + " D"
}

// fit lays out a fit: the lens to order, why, what was chosen, cautions, derivation.
func (p *page) fit(res *pb.FitResponse) {
	lens, back := res.GetLens(), res.GetLens().GetBackSurface()
	head := "Lens to order"
	if side, ok := sides[res.GetSide()]; ok {
		head += ", " + side
	}
	p.title(head)
	rows := [][]string{{"kind", toricities[lens.GetToricity()]}}
	if back.HasSteepRadiusMm() {
		rows = append(rows,
			[]string{"back optic zone radius, flat", radius(back.GetOpticZoneRadiusMm()), "along " + notation.Axis(back.GetFlatMeridianDeg()) + "°"},
			[]string{"back optic zone radius, steep", radius(back.GetSteepRadiusMm()), "along " + notation.Axis(back.GetFlatMeridianDeg()+90-steepWrap(back)) + "°"})
	} else {
		rows = append(rows, []string{"back optic zone radius", radius(back.GetOpticZoneRadiusMm())})
	}
	rows = append(rows,
		[]string{"back vertex power", power(lens.GetPower(), 2)},
		[]string{"back optic zone diameter", mm(back.GetOpticZoneDiameterMm(), 1)},
		[]string{"total diameter", mm(lens.GetTotalDiameterMm(), 1)},
		[]string{"centre thickness", mm(lens.GetCentreThicknessMm(), 2)},
		material(lens.GetMaterial()))
	p.table(rows...)

	p.title("Why")
	over, left := res.GetOverRefraction(), res.GetResidual()
	rows = [][]string{
		{"refraction at the cornea", power(res.GetOcularRefraction(), 3)},
		{"tear lens", power(res.GetTearLens().GetPower(), 3), fmt.Sprintf("index %g, %.0f µm at the apex", res.GetTearLens().GetIndex(), res.GetTearLens().GetApexClearanceUm())},
		{"back vertex power required", power(res.GetRequiredPower(), 3), "exact"},
		{"over-refraction predicted", power(over, 2), "at vertex " + mm(over.GetVertexDistanceMm(), 1)},
		{"blur strength", fmt.Sprintf("%.2f D", left.GetBlurStrengthD())},
		{"acuity predicted", fmt.Sprintf("%.2f (decimal)", left.GetDecimalAcuity()), fmt.Sprintf("%.2f logMAR lost, from 1.0, no accommodation", left.GetAcuityLossLogmar())},
	}
	if res.HasOxygen() {
		rows = append(rows, []string{"oxygen, Dk/t at the centre", fmt.Sprintf("%.0f", res.GetOxygen().GetDkTCentre()), "10⁻⁹ (cm/s)(mL O2/(mL·mmHg))"})
	}
	p.table(rows...)
	p.choices(res.GetChoices())
	p.derivation(res.GetDerivation())
	p.cautionsAndNotice(res.GetCautions(), res.GetProvenance())
}

// steepWrap keeps the steep meridian, 90° on, within (0, 180].
func steepWrap(back *pb.BackSurface) float64 {
	if back.GetFlatMeridianDeg() > 90 {
		return 180
	}
	return 0
}

func material(m *pb.Material) []string {
	text := fmt.Sprintf("index %g", m.GetRefractiveIndex())
	if m.HasDk() {
		text += fmt.Sprintf(", Dk %g", m.GetDk())
	}
	if m.HasName() {
		text = m.GetName() + ", " + text
	}
	return []string{"material", text}
}

// choices lists what was left open.
func (p *page) choices(list []*pb.Choice) {
	if len(list) == 0 {
		return
	}
	p.title("Chosen, since it was not given")
	for _, c := range list {
		p.wrap("  ", c.GetField()+": "+c.GetRule()+" ["+c.GetSource()+"]")
	}
}

func (p *page) transfer(from *pb.Refraction, res *pb.TransferVertexResponse) {
	at := "without a vertex distance"
	if from.HasVertexDistanceMm() {
		at = "at " + mm(from.GetVertexDistanceMm(), 1)
	}
	to := "at " + mm(res.GetVertexDistanceMm(), 1)
	if res.GetVertexDistanceMm() == 0 {
		to = "at the cornea"
	}
	p.title("Refraction")
	p.table(
		[]string{"given", power(from, 2), at},
		[]string{"the same", power(res.GetPower(), 2), to},
		[]string{"exact", power(res.GetPower(), 4)},
		vector(res.GetPowerVector()))
	p.derivation(res.GetDerivation())
	p.cautionsAndNotice(res.GetCautions(), res.GetProvenance())
}

func vector(v *pb.PowerVector) []string {
	return []string{"power vector", fmt.Sprintf("M %s D, J0 %s D, J45 %s D",
		notation.Signed(v.GetMeanD(), 3), notation.Signed(v.GetJ0D(), 3), notation.Signed(v.GetJ45D(), 3))}
}

func (p *page) sum(terms []*pb.Term, res *pb.CombineResponse) {
	p.title("Sum of powers in contact")
	var rows [][]string
	for _, t := range terms {
		sign := "plus"
		if t.GetSubtract() {
			sign = "minus"
		}
		rows = append(rows, []string{sign, power(t.GetSphereCylinder(), 2)})
	}
	rows = append(rows, []string{"is", power(res.GetPower(), 2)}, []string{"exact", power(res.GetPower(), 4)}, vector(res.GetPowerVector()))
	p.table(rows...)
	p.derivation(res.GetDerivation())
	p.cautionsAndNotice(res.GetCautions(), res.GetProvenance())
}

func (p *page) forms(res *pb.ExpressResponse) {
	p.title("Power")
	rows := [][]string{
		{"minus cylinder", power(res.GetMinusCylinder(), 2)},
		{"plus cylinder", power(res.GetPlusCylinder(), 2)},
	}
	for _, m := range res.GetMeridians() {
		along := "along every meridian"
		if m.HasMeridianDeg() {
			along = "along " + notation.Axis(m.GetMeridianDeg()) + "°"
		}
		rows = append(rows, []string{along, notation.Signed(m.GetPowerD(), 2) + " D"})
	}
	rows = append(rows, vector(res.GetPowerVector()), []string{"blur strength", fmt.Sprintf("%.2f D", res.GetBlurStrengthD())})
	p.table(rows...)
	p.derivation(res.GetDerivation())
	p.cautionsAndNotice(res.GetCautions(), res.GetProvenance())
}

func (p *page) cornea(res *pb.DescribeCorneaResponse) {
	p.title("Cornea")
	row := func(name string, m *pb.PrincipalMeridian) []string {
		cells := []string{name, mm(m.GetRadiusMm(), 2), fmt.Sprintf("%.2f D", m.GetPowerD())}
		if m.HasMeridianDeg() {
			cells = append(cells, "along "+notation.Axis(m.GetMeridianDeg())+"°")
		}
		return cells
	}
	p.table(row("flat", res.GetFlat()), row("steep", res.GetSteep()), []string{"mean", mm(res.GetMeanRadiusMm(), 2)})
	p.table(
		[]string{"corneal astigmatism", fmt.Sprintf("%.2f D", res.GetAstigmatismD()), "at index 1.3375"},
		[]string{"corrected at the cornea by", power(res.GetCorrectingCylinder(), 2)},
		[]string{"front surface in air", power(res.GetFrontSurfacePower(), 2), "at index 1.376"},
		[]string{"asphericity", fmt.Sprintf("Q %s", notation.Signed(res.GetAsphericityQ(), 2))})
	if len(res.GetSagittalHeights()) > 0 {
		p.title("Sagittal height")
		rows := [][]string{{"chord", "flat meridian", "steep meridian"}}
		for _, s := range res.GetSagittalHeights() {
			rows = append(rows, []string{mm(s.GetChordMm(), 2), fmt.Sprintf("%.0f µm", s.GetFlatUm()), fmt.Sprintf("%.0f µm", s.GetSteepUm())})
		}
		p.table(rows...)
	}
	p.choices(res.GetChoices())
	p.derivation(res.GetDerivation())
	p.cautionsAndNotice(res.GetCautions(), res.GetProvenance())
}

func (p *page) rules(res *pb.ListCautionsResponse) {
	p.title("Cautions that an answer may carry")
	for _, c := range res.GetCautions() {
		p.wrap("  ", fmt.Sprintf("%v: %s. Next: %s. [%s]", c.GetCode(), c.GetMeaning(), c.GetAction(), c.GetSource()))
	}
}

func (p *page) methods(res *pb.ListMethodsResponse) {
	p.title("Methods")
	for _, m := range res.GetMethods() {
		p.wrap("  ", fmt.Sprintf("%s: %s. %s [%s]", m.GetName(), m.GetPurpose(), m.GetFormula(), m.GetSource()))
	}
}
