package server

import (
	"google.golang.org/protobuf/proto"

	"meniscus.example/optics/fitting"
	"meniscus.example/optics/unit"
	"meniscus.example/optics/vergence"
	pb "meniscus.example/proto/meniscus/v1"
)

// notice is what every answer says of itself.
const notice = "A calculated starting point, to be confirmed on the eye by a licensed practitioner under local rules. It diagnoses " +
	"nothing, and nothing about a patient is stored."

func makeProvenance() *pb.Provenance {
	return pb.Provenance_builder{
		EngineVersion: proto.String(Version),
		SchemaVersion: proto.String("meniscus.v1"),
		Notice:        proto.String(notice),
	}.Build()
}

// number is a value of a field that is there, without a negative zero.
func number[T ~float64](x T) *float64 { return proto.Float64(float64(x) + 0) }

// sphereCylinder writes a power in the form asked for.
func sphereCylinder(v vergence.PowerVector, form pb.CylinderForm) *pb.SphereCylinder {
	if form == pb.CylinderForm_CYLINDER_FORM_PLUS {
		return sphereCylinderOf(v.PlusCylinder())
	}
	return sphereCylinderOf(v.MinusCylinder())
}

func sphereCylinderOf(p vergence.SphereCylinder) *pb.SphereCylinder {
	m := &pb.SphereCylinder{}
	m.SetSphereD(float64(p.Sphere) + 0)
	m.SetCylinderD(float64(p.Cylinder) + 0)
	if p.Axis != 0 {
		m.SetAxisDeg(float64(p.Axis))
	}
	return m
}

func powerVector(v vergence.PowerVector) *pb.PowerVector {
	m := &pb.PowerVector{}
	m.SetMeanD(float64(v.M) + 0)
	m.SetJ0D(float64(v.J0) + 0)
	m.SetJ45D(float64(v.J45) + 0)
	return m
}

// refraction writes a power at a vertex distance.
func refraction(v vergence.PowerVector, form pb.CylinderForm, vertex unit.Millimetre) *pb.Refraction {
	p := v.MinusCylinder()
	if form == pb.CylinderForm_CYLINDER_FORM_PLUS {
		p = v.PlusCylinder()
	}
	m := &pb.Refraction{}
	m.SetSphereD(float64(p.Sphere) + 0)
	m.SetCylinderD(float64(p.Cylinder) + 0)
	if p.Axis != 0 {
		m.SetAxisDeg(float64(p.Axis))
	}
	m.SetVertexDistanceMm(float64(vertex) + 0)
	return m
}

// cautions writes the cautions of an answer.
func cautions(list []fitting.Caution) []*pb.Caution {
	out := make([]*pb.Caution, len(list))
	for i, c := range list {
		if c.Code == fitting.StartingPoint {
			out[i] = startingPoint
			continue
		}
		out[i] = caution(c)
	}
	return out
}

func caution(c fitting.Caution) *pb.Caution {
	rule := fitting.RuleOf(c.Code)
	m := &pb.Caution{}
	m.SetCode(pb.CautionCode(c.Code))
	m.SetSeverity(pb.Severity(c.Severity))
	m.SetMessage(c.Message())
	m.SetAction(rule.Action)
	m.SetSource(rule.Source)
	if c.Unit != "" {
		m.SetValue(c.Value)
		m.SetLimit(c.Limit)
		m.SetUnit(c.Unit)
	}
	if c.Field != "" {
		m.SetField(c.Field)
	}
	return m
}

// The parts of answers that are the same in every one, made once. They are shared between answers, which nobody changes: what a handler
// returns is only ever written to the wire, or copied.
var (
	provenance    = makeProvenance()
	startingPoint = caution(fitting.Caution{Code: fitting.StartingPoint, Severity: fitting.RuleOf(fitting.StartingPoint).Severity})
	fixedChoices  = func() map[*fitting.Choice]*pb.Choice {
		all := map[*fitting.Choice]*pb.Choice{}
		for _, c := range fitting.AllChoices() {
			all[c] = choice(c)
		}
		return all
	}()
)

func choice(c *fitting.Choice) *pb.Choice {
	m := &pb.Choice{}
	m.SetField(c.Field)
	m.SetRule(c.Rule)
	m.SetSource(c.Source)
	return m
}

func derivation(steps []fitting.Step) []*pb.DerivationStep {
	out := make([]*pb.DerivationStep, len(steps))
	for i, s := range steps {
		inputs := make([]*pb.NamedValue, len(s.Inputs))
		for j, in := range s.Inputs {
			inputs[j] = namedValue(in)
		}
		out[i] = pb.DerivationStep_builder{
			Name:    proto.String(s.Name),
			Formula: proto.String(s.Formula),
			Inputs:  inputs,
			Result:  namedValue(s.Result),
			Source:  proto.String(s.Source),
		}.Build()
	}
	return out
}

func namedValue(v fitting.Value) *pb.NamedValue {
	return pb.NamedValue_builder{
		Name:  proto.String(v.Name),
		Value: proto.Float64(v.Number + 0),
		Unit:  proto.String(v.Unit),
	}.Build()
}
