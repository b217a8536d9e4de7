package server

import (
	"google.golang.org/protobuf/proto"

	"meniscus.example/optics/fitting"
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

// inForm writes a power in minus form, or in plus form.
func inForm(v vergence.PowerVector, plus bool) vergence.SphereCylinder {
	if plus {
		return v.PlusCylinder()
	}
	return v.MinusCylinder()
}

// setWritten sets a power as it is written, without a negative zero. Without a cylinder there is no axis.
func setWritten(m interface {
	SetSphereD(float64)
	SetCylinderD(float64)
	SetAxisDeg(float64)
}, p vergence.SphereCylinder) {
	m.SetSphereD(float64(p.Sphere) + 0)
	m.SetCylinderD(float64(p.Cylinder) + 0)
	if p.Axis != 0 {
		m.SetAxisDeg(float64(p.Axis))
	}
}

// sphereCylinder writes a power in the form asked for.
func sphereCylinder(v vergence.PowerVector, form pb.CylinderForm) *pb.SphereCylinder {
	return sphereCylinderOf(inForm(v, form == pb.CylinderForm_CYLINDER_FORM_PLUS))
}

func sphereCylinderOf(p vergence.SphereCylinder) *pb.SphereCylinder {
	m := &pb.SphereCylinder{}
	setWritten(m, p)
	return m
}

func powerVector(v vergence.PowerVector) *pb.PowerVector {
	m := &pb.PowerVector{}
	setVector(m, v)
	return m
}

func setVector(m *pb.PowerVector, v vergence.PowerVector) {
	m.SetMeanD(float64(v.M) + 0)
	m.SetJ0D(float64(v.J0) + 0)
	m.SetJ45D(float64(v.J45) + 0)
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
