package server

import (
	"context"
	"strconv"

	"meniscus.example/optics/fitting"
	"meniscus.example/optics/unit"
	"meniscus.example/optics/vergence"
	pb "meniscus.example/proto/meniscus/v1"
)

// refractionService answers RefractionService.
type refractionService struct {
	pb.UnimplementedRefractionServiceServer
	door *door
}

// TransferVertex restates a refraction at another distance from the eye.
func (s refractionService) TransferVertex(_ context.Context, req *pb.TransferVertexRequest) (*pb.TransferVertexResponse, error) {
	var v violations
	s.door.check(&v, req)
	given := req.GetRefraction()
	if given == nil {
		v.add("refraction", "is missing", "")
	}
	if given.GetAddD() != 0 {
		v.add("refraction.add_d", "is not transferred by this version; leave it out", "")
	}
	at, faults := vergence.NewSpectacleRefraction(prescription(given), vertexDistance(given))
	v.merge(prefixed("refraction", faults))
	if err := v.err(); err != nil {
		return nil, err
	}
	to := unit.Millimetre(req.GetToVertexDistanceMm())
	moved, err := at.Transfer(to)
	if err != nil {
		return nil, statusFrom(&unit.ImpossibleError{
			Fields:  []string{"to_vertex_distance_mm"},
			Problem: "light of this vergence comes to a focus before it reaches that distance",
			Remedy:  "a shorter distance would work",
		})
	}
	if err := fitting.TooStrong(moved, "to_vertex_distance_mm"); err != nil {
		return nil, statusFrom(err)
	}
	var c fitting.Cautions
	c.Refraction(at, "refraction.vertex_distance_mm")
	c.StartingPoint()
	m := &pb.TransferVertexResponse{}
	m.SetPower(sphereCylinder(moved, req.GetCylinderForm()))
	m.SetPowerVector(powerVector(moved))
	m.SetVertexDistanceMm(float64(to) + 0)
	m.SetCautions(cautions(c.All()))
	if req.GetExplain() {
		m.SetDerivation(derivation(fitting.DeriveTransfer(at, to, moved)))
	}
	m.SetProvenance(provenance)
	return m, nil
}

// Combine adds and subtracts thin powers in contact.
func (s refractionService) Combine(_ context.Context, req *pb.CombineRequest) (*pb.CombineResponse, error) {
	var v violations
	s.door.check(&v, req)
	if len(req.GetTerms()) == 0 {
		v.add("terms", "is empty; give 1 to 100 terms", "")
	}
	terms := make([]fitting.Term, len(req.GetTerms()))
	for i, t := range req.GetTerms() {
		terms[i] = fitting.Term{Subtract: t.GetSubtract()}
		terms[i].Written, terms[i].Vector = power(&v, "terms["+strconv.Itoa(i)+"]", t)
	}
	if err := v.err(); err != nil {
		return nil, err
	}
	sum, err := fitting.Combine(terms)
	if err != nil {
		return nil, statusFrom(err)
	}
	var c fitting.Cautions
	c.StartingPoint()
	m := &pb.CombineResponse{}
	m.SetPower(sphereCylinder(sum, req.GetCylinderForm()))
	m.SetPowerVector(powerVector(sum))
	m.SetCautions(cautions(c.All()))
	if req.GetExplain() {
		m.SetDerivation(derivation(fitting.DeriveCombine(terms)))
	}
	m.SetProvenance(provenance)
	return m, nil
}

// Express writes one power in all its forms.
func (s refractionService) Express(_ context.Context, req *pb.ExpressRequest) (*pb.ExpressResponse, error) {
	var v violations
	s.door.check(&v, req)
	written, given := power(&v, "", req)
	if err := v.err(); err != nil {
		return nil, err
	}
	if err := fitting.TooStrong(given, "power_vector"); err != nil {
		return nil, statusFrom(err)
	}
	turn := unit.Degree(req.GetRotationDeg())
	turned := given
	if turn != 0 {
		turned = given.Rotate(turn)
	}
	var c fitting.Cautions
	c.StartingPoint()
	m := &pb.ExpressResponse{}
	m.SetMinusCylinder(sphereCylinderOf(turned.MinusCylinder()))
	m.SetPlusCylinder(sphereCylinderOf(turned.PlusCylinder()))
	m.SetPowerVector(powerVector(turned))
	m.SetMeridians(meridians(turned))
	m.SetBlurStrengthD(float64(turned.Blur()))
	m.SetCautions(cautions(c.All()))
	if req.GetExplain() {
		m.SetDerivation(derivation(fitting.DeriveExpress(written, given, turn, turned)))
	}
	m.SetProvenance(provenance)
	return m, nil
}

// meridians are the powers along the principal meridians, the more plus first: it lies along the axis of the minus
// cylinder.
func meridians(v vergence.PowerVector) []*pb.MeridianPower {
	minus, plus := v.MinusCylinder(), v.PlusCylinder()
	first, second := &pb.MeridianPower{}, &pb.MeridianPower{}
	first.SetPowerD(float64(minus.Sphere))
	second.SetPowerD(float64(plus.Sphere))
	if minus.Axis != 0 {
		first.SetMeridianDeg(float64(minus.Axis))
		second.SetMeridianDeg(float64(plus.Axis))
	}
	return []*pb.MeridianPower{first, second}
}

// powerOf is a power given in one of two ways.
type powerOf interface {
	HasSphereCylinder() bool
	GetSphereCylinder() *pb.SphereCylinder
	HasPowerVector() bool
	GetPowerVector() *pb.PowerVector
}

// power reads a power whose message has the path at. The written form is absent where a vector was given.
func power(v *violations, at string, p powerOf) (unit.Optional[vergence.SphereCylinder], vergence.PowerVector) {
	dot := at
	if at != "" {
		dot += "."
	}
	switch {
	case p.HasSphereCylinder():
		sc, faults := vergence.NewSphereCylinder(prescription(p.GetSphereCylinder()))
		v.merge(prefixed(dot+"sphere_cylinder", faults))
		return unit.Some(sc), sc.Vector()
	case p.HasPowerVector():
		x := p.GetPowerVector()
		if !x.HasMeanD() {
			v.add(dot+"power_vector.mean_d", "is missing; a mean of zero is written 0", "")
		}
		return unit.Optional[vergence.SphereCylinder]{}, vergence.PowerVector{
			M: unit.Dioptre(x.GetMeanD()), J0: unit.Dioptre(x.GetJ0D()), J45: unit.Dioptre(x.GetJ45D()),
		}
	}
	field := at
	if field == "" {
		field = "sphere_cylinder"
	}
	v.add(field, "is missing: a power is needed, sphere_cylinder or power_vector", "")
	return unit.Optional[vergence.SphereCylinder]{}, vergence.PowerVector{}
}

// prefixed puts a path before those of faults.
func prefixed(at string, faults []error) []error {
	for i, err := range faults {
		faults[i] = unit.Within(at, err)
	}
	return faults
}
