package server

import (
	"meniscus.example/optics/cornea"
	"meniscus.example/optics/fitting"
	"meniscus.example/optics/unit"
	"meniscus.example/optics/vergence"
	pb "meniscus.example/proto/meniscus/v1"
)

// optional is the number of a field, or absent.
func optional[T ~float64](has bool, x float64) unit.Optional[T] {
	if !has {
		return unit.Optional[T]{}
	}
	return unit.Some(T(x))
}

// written is what SphereCylinder and Refraction have in common.
type written interface {
	HasSphereD() bool
	GetSphereD() float64
	HasCylinderD() bool
	GetCylinderD() float64
	HasAxisDeg() bool
	GetAxisDeg() float64
}

func prescription(p written) vergence.Prescription {
	return vergence.Prescription{
		Sphere:   optional[unit.Dioptre](p.HasSphereD(), p.GetSphereD()),
		Cylinder: optional[unit.Dioptre](p.HasCylinderD(), p.GetCylinderD()),
		Axis:     optional[unit.Degree](p.HasAxisDeg(), p.GetAxisDeg()),
	}
}

func vertexDistance(r *pb.Refraction) unit.Optional[unit.Millimetre] {
	return optional[unit.Millimetre](r.HasVertexDistanceMm(), r.GetVertexDistanceMm())
}

func readings(k *pb.Keratometry) cornea.Readings {
	return cornea.Readings{
		Flat:  reading(k.GetFlat()),
		Steep: reading(k.GetSteep()),
		Index: optional[unit.Index](k.HasKeratometricIndex(), k.GetKeratometricIndex()),
	}
}

func reading(m *pb.MeridianReading) cornea.Reading {
	return cornea.Reading{
		Radius:    optional[unit.Millimetre](m.HasRadiusMm(), m.GetRadiusMm()),
		Power:     optional[unit.Dioptre](m.HasPowerD(), m.GetPowerD()),
		Meridian:  optional[unit.Degree](m.HasMeridianDeg(), m.GetMeridianDeg()),
		Auxiliary: optional[unit.Dioptre](m.HasAuxiliaryLensD(), m.GetAuxiliaryLensD()),
	}
}

// shape adds a fault to v where a shape is there and says nothing.
func shape(v *violations, s *pb.CorneaShape, field string) unit.Optional[unit.ShapeFactor] {
	if v.has(field) {
		return unit.Optional[unit.ShapeFactor]{}
	}
	switch s.WhichShape() {
	case pb.CorneaShape_Eccentricity_case:
		return unit.Some(unit.Eccentricity(s.GetEccentricity()).ShapeFactor())
	case pb.CorneaShape_ShapeFactorP_case:
		return unit.Some(unit.ShapeFactor(s.GetShapeFactorP()))
	case pb.CorneaShape_AsphericityQ_case:
		return unit.Some(unit.Asphericity(s.GetAsphericityQ()).ShapeFactor())
	}
	if s != nil {
		v.add(field, "is empty; give eccentricity, shape_factor_p or asphericity_q", "")
	}
	return unit.Optional[unit.ShapeFactor]{}
}

var toricities = map[pb.Toricity]fitting.Toricity{
	pb.Toricity_TORICITY_SPHERICAL: fitting.Spherical,
	pb.Toricity_TORICITY_FRONT:     fitting.FrontToric,
	pb.Toricity_TORICITY_BACK:      fitting.BackToric,
	pb.Toricity_TORICITY_BITORIC:   fitting.Bitoric,
}

// parse reads a FitRequest into the input and the case. What is missing, or is in the schema and not offered by this version, is a fault; nothing that
// was sent is passed over in silence.
func (w *work) parse(d *door, req *pb.FitRequest) error {
	var v violations
	d.check(&v, req)
	eye, lens, plan := req.GetEye(), req.GetLens(), req.GetPlan()
	switch {
	case eye == nil:
		v.add("eye", "is missing", "")
	default:
		if !eye.HasRefraction() {
			v.add("eye.refraction", "is missing", "")
		}
		if !eye.HasKeratometry() {
			v.add("eye.keratometry", "is missing; a rigid lens needs it", "")
		}
	}
	notOffered(&v, req)
	back, material := lens.GetBackSurface(), lens.GetMaterial()
	in := &w.input
	*in = fitting.Input{
		Refraction:  prescription(eye.GetRefraction()),
		Vertex:      vertexDistance(eye.GetRefraction()),
		Keratometry: readings(eye.GetKeratometry()),
		Shape:       shape(&v, eye.GetCorneaShape(), "eye.cornea_shape"),
		Iris:        optional[unit.Millimetre](eye.HasIrisDiameterMm(), eye.GetIrisDiameterMm()),
		Pupil:       optional[unit.Millimetre](eye.HasPupilDiameterMm(), eye.GetPupilDiameterMm()),
		Lens: fitting.LensInput{
			Toricity:        toricities[lens.GetToricity()],
			BackRadius:      optional[unit.Millimetre](back.HasOpticZoneRadiusMm(), back.GetOpticZoneRadiusMm()),
			SteepRadius:     optional[unit.Millimetre](back.HasSteepRadiusMm(), back.GetSteepRadiusMm()),
			FlatMeridian:    optional[unit.Degree](back.HasFlatMeridianDeg(), back.GetFlatMeridianDeg()),
			ZoneDiameter:    optional[unit.Millimetre](back.HasOpticZoneDiameterMm(), back.GetOpticZoneDiameterMm()),
			Diameter:        optional[unit.Millimetre](lens.HasTotalDiameterMm(), lens.GetTotalDiameterMm()),
			CentreThickness: optional[unit.Millimetre](lens.HasCentreThicknessMm(), lens.GetCentreThicknessMm()),
			Index:           optional[unit.Index](material.HasRefractiveIndex(), material.GetRefractiveIndex()),
		},
		Plan: fitting.Plan{
			Toricity:      toricities[plan.GetToricity()],
			Offset:        optional[unit.Dioptre](plan.HasBackCurveOffsetD(), plan.GetBackCurveOffsetD()),
			PowerStep:     optional[unit.Dioptre](plan.HasPowerStepD(), plan.GetPowerStepD()),
			CylinderStep:  optional[unit.Dioptre](plan.HasCylinderStepD(), plan.GetCylinderStepD()),
			AxisStep:      optional[unit.Degree](plan.HasAxisStepDeg(), plan.GetAxisStepDeg()),
			RadiusStep:    optional[unit.Millimetre](plan.HasRadiusStepMm(), plan.GetRadiusStepMm()),
			TearIndex:     optional[unit.Index](plan.HasTearIndex(), plan.GetTearIndex()),
			ApexClearance: optional[unit.Micrometre](plan.HasApexClearanceUm(), plan.GetApexClearanceUm()),
		},
	}
	if lens.HasPower() {
		in.Lens.Power = unit.Some(prescription(lens.GetPower()))
	}
	v.merge(w.fit.Parse(in))
	return v.err()
}

// notOffered reports what a FitRequest asks for that this version does not compute.
func notOffered(v *violations, req *pb.FitRequest) {
	no := func(is bool, field, problem string) {
		if is && !v.has(field) {
			v.add(field, problem, "")
		}
	}
	lens, plan := req.GetLens(), req.GetPlan()
	back := lens.GetBackSurface()
	switch kind := lens.GetKind(); kind {
	case pb.LensKind_LENS_KIND_UNSPECIFIED, pb.LensKind_LENS_KIND_RIGID:
	default:
		no(true, "lens.kind", "is "+kind.String()+"; this version fits LENS_KIND_RIGID only")
	}
	switch rule := plan.GetBackCurveRule(); rule {
	case pb.BackCurveRule_BACK_CURVE_RULE_UNSPECIFIED, pb.BackCurveRule_BACK_CURVE_RULE_OFFSET:
	default:
		no(true, "plan.back_curve_rule", "is "+rule.String()+"; this version has BACK_CURVE_RULE_OFFSET only")
	}
	no(plan.HasWantedApexClearanceUm(), "plan.wanted_apex_clearance_um",
		"goes with BACK_CURVE_RULE_CLEARANCE, which this version does not have; apex_clearance_um is the thickness of the tears that is known")
	no(plan.HasUncertainties(), "plan.uncertainties", "is not used by this version; leave it out")
	no(plan.GetWear() == pb.Wear_WEAR_OVERNIGHT, "plan.wear", "is WEAR_OVERNIGHT; this version does not judge overnight wear")
	no(lens.HasFrontSurface(), "lens.front_surface", "is not used by this version, which computes the power; leave it out")
	no(back.HasOpticZoneShape(), "lens.back_surface.optic_zone_shape", "is not used by this version, which takes a spherical or toric zone; leave it out")
	no(len(back.GetPeripheralZones()) > 0, "lens.back_surface.peripheral_zones", "is not used by this version; leave it out")
	no(lens.HasPrismPd(), "lens.prism_pd", "is not used by this version; leave it out")
	no(lens.HasAddD(), "lens.add_d", "is not used by this version; leave it out")
	no(req.GetEye().GetRefraction().GetAddD() != 0, "eye.refraction.add_d", "is not used by this version; leave it out")
	no(plan.HasBackCurveOffsetD() && back.HasOpticZoneRadiusMm(), "plan.back_curve_offset_d",
		"is given together with lens.back_surface.optic_zone_radius_mm, which it would choose; leave one out")
}
