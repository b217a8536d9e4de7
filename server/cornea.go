package server

import (
	"context"
	"strconv"

	"meniscus.example/optics/cornea"
	"meniscus.example/optics/fitting"
	"meniscus.example/optics/unit"
	pb "meniscus.example/proto/meniscus/v1"
)

// corneaService answers CorneaService.
type corneaService struct {
	pb.UnimplementedCorneaServiceServer
	door *door
}

// DescribeCornea turns keratometer readings into radii, powers and astigmatism.
func (s corneaService) DescribeCornea(_ context.Context, req *pb.DescribeCorneaRequest) (*pb.DescribeCorneaResponse, error) {
	var v violations
	s.door.check(&v, req)
	if len(req.GetChordsMm()) > 32 && !v.has("chords_mm") {
		v.add("chords_mm", "has "+strconv.Itoa(len(req.GetChordsMm()))+" items, more than 32", "")
	}
	if !req.HasKeratometry() {
		v.add("keratometry", "is missing", "")
	}
	given := shape(&v, req.GetCorneaShape(), "cornea_shape")
	k, faults := cornea.New(readings(req.GetKeratometry()), given)
	v.merge(prefixed("keratometry", faults))
	if err := v.err(); err != nil {
		return nil, err
	}
	sags := make([]*pb.SagittalHeight, len(req.GetChordsMm()))
	for i, chord := range req.GetChordsMm() {
		flat, steep, err := k.Sags(unit.Millimetre(chord))
		if err != nil {
			return nil, statusFrom(unit.At("chords_mm["+strconv.Itoa(i)+"]", err))
		}
		sags[i] = &pb.SagittalHeight{}
		sags[i].SetChordMm(chord)
		sags[i].SetFlatUm(float64(flat.Micrometres()))
		sags[i].SetSteepUm(float64(steep.Micrometres()))
	}
	var c fitting.Cautions
	c.Cornea(k, "keratometry", false)
	c.StartingPoint()
	m := &pb.DescribeCorneaResponse{}
	radii, even := k.Radii(), k.Radii().Flat == k.Radii().Steep
	m.SetFlat(principal(radii.Flat, radii.FlatMeridian, even))
	m.SetSteep(principal(radii.Steep, (radii.FlatMeridian + 90).Meridian(), even))
	m.SetMeanRadiusMm(float64(radii.Mean()))
	m.SetAstigmatismD(float64(k.Astigmatism()) + 0)
	m.SetCorrectingCylinder(sphereCylinderOf(k.Correcting()))
	m.SetFrontSurfacePower(sphereCylinderOf(k.FrontPower().PlusCylinder()))
	m.SetAsphericityQ(float64(k.Shape().Asphericity()))
	m.SetSagittalHeights(sags)
	m.SetCautions(cautions(c.All()))
	if req.GetExplain() {
		m.SetDerivation(derivation(fitting.DeriveCornea(k)))
	}
	if !given.Given() {
		m.SetChoices([]*pb.Choice{fixedChoices[fitting.ChoiceOfShape()]})
	}
	m.SetProvenance(provenance)
	return m, nil
}

// principal is one principal meridian; a cornea of one radius has no meridians.
func principal(r unit.Millimetre, along unit.Degree, even bool) *pb.PrincipalMeridian {
	m := &pb.PrincipalMeridian{}
	m.SetRadiusMm(float64(r))
	m.SetPowerD(float64(unit.KeratometricPower(r, cornea.KeratometricIndex)))
	if !even {
		m.SetMeridianDeg(float64(along))
	}
	return m
}
