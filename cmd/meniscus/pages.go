package main

import (
	"fmt"

	"meniscus.example/client/notation"
	pb "meniscus.example/proto/meniscus/v1"
)

// transfer lays out a refraction at another distance.
func (p *page) transfer(req *pb.TransferVertexRequest, res *pb.TransferVertexResponse) {
	p.sources = req.GetExplain()
	p.title("Refraction")
	p.table(
		given(req.GetRefraction()),
		[]string{"the same", power(res.GetPower(), 2), distance(res.GetVertexDistanceMm())},
		[]string{"exact", power(res.GetPower(), 4)},
		vector(res.GetPowerVector()))
	p.end(res)
}

// sum lays out a sum of powers.
func (p *page) sum(req *pb.CombineRequest, res *pb.CombineResponse) {
	p.sources = req.GetExplain()
	p.title("Sum of powers in contact")
	var rows [][]string
	for _, t := range req.GetTerms() {
		sign := "plus"
		if t.GetSubtract() {
			sign = "minus"
		}
		rows = append(rows, []string{sign, power(t.GetSphereCylinder(), notation.Exact)})
	}
	p.table(append(rows,
		[]string{"is", power(res.GetPower(), 2)},
		[]string{"exact", power(res.GetPower(), 4)},
		vector(res.GetPowerVector()))...)
	p.end(res)
}

// forms lays out a power in all its forms.
func (p *page) forms(req *pb.ExpressRequest, res *pb.ExpressResponse) {
	p.sources = req.GetExplain()
	p.title("Power")
	rows := [][]string{{"given", power(req.GetSphereCylinder(), notation.Exact)}}
	if req.HasRotationDeg() {
		rows = append(rows, []string{"turned by", notation.Signed(req.GetRotationDeg(), notation.Exact) + "°"})
	}
	rows = append(rows,
		[]string{"minus cylinder", power(res.GetMinusCylinder(), 2)},
		[]string{"plus cylinder", power(res.GetPlusCylinder(), 2)})
	for _, m := range res.GetMeridians() {
		where := "power along every meridian"
		if m.HasMeridianDeg() {
			where = "power " + along(m.GetMeridianDeg())
		}
		rows = append(rows, []string{where, dioptres(m.GetPowerD(), 2)})
		if !m.HasMeridianDeg() {
			break
		}
	}
	p.table(append(rows, vector(res.GetPowerVector()), []string{"blur strength", notation.Decimal(res.GetBlurStrengthD(), 2) + " D"})...)
	p.end(res)
}

// cornea lays out a cornea.
func (p *page) cornea(req *pb.DescribeCorneaRequest, res *pb.DescribeCorneaResponse) {
	p.sources = req.GetExplain()
	p.title("Cornea")
	principal := func(name string, m *pb.PrincipalMeridian) []string {
		row := []string{name, curve(m.GetRadiusMm())}
		if m.HasMeridianDeg() {
			row = append(row, along(m.GetMeridianDeg()))
		}
		return row
	}
	p.table(
		[]string{"readings given", readings(req.GetKeratometry())},
		principal("flat meridian", res.GetFlat()),
		principal("steep meridian", res.GetSteep()),
		[]string{"mean radius", mm(notation.Round(res.GetMeanRadiusMm(), 2), 2)},
		[]string{"corneal astigmatism", notation.Decimal(res.GetAstigmatismD(), 2) + " D at 1.3375"},
		[]string{"corrected at the cornea by", power(res.GetCorrectingCylinder(), 2)},
		[]string{"front surface in air", power(res.GetFrontSurfacePower(), 2), "index 1.376"},
		[]string{"asphericity", "Q " + notation.Signed(res.GetAsphericityQ(), 2)})
	p.sagittalHeights(res.GetSagittalHeights())
	p.choices(res.GetChoices())
	p.end(res)
}

// sagittalHeights lays out how deep the cornea is over chords.
func (p *page) sagittalHeights(list []*pb.SagittalHeight) {
	if len(list) == 0 {
		return
	}
	p.title("Sagittal height")
	rows := [][]string{{"chord", "flat meridian", "steep meridian"}}
	for _, s := range list {
		rows = append(rows, []string{
			mm(s.GetChordMm(), 2), notation.Decimal(s.GetFlatUm(), 0) + " µm", notation.Decimal(s.GetSteepUm(), 0) + " µm",
		})
	}
	p.table(rows...)
}

// rules lays out the cautions in general.
func (p *page) rules(res *pb.ListCautionsResponse) {
	p.title("Cautions that an answer may carry")
	for _, c := range res.GetCautions() {
		p.item(fmt.Sprintf("%s, %s: %s.", cautionName(c.GetCode()), severityName(c.GetSeverity()), c.GetMeaning()))
		if c.HasThreshold() {
			p.wrap("    ", "    ", "Threshold "+twoDecimals(c.GetThreshold(), c.GetUnit())+".")
		}
		p.wrap("    ", "    ", "Next: "+c.GetAction()+".")
		p.wrap("    ", "    ", "Source: "+c.GetSource()+".")
	}
}

// methods lays out the published methods.
func (p *page) methods(res *pb.ListMethodsResponse) {
	p.title("Methods")
	for _, m := range res.GetMethods() {
		p.item(m.GetName() + ": " + m.GetPurpose() + ".")
		p.wrap("    ", "    ", m.GetFormula())
		p.wrap("    ", "    ", "Source: "+m.GetSource()+".")
	}
}
