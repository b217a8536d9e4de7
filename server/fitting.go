package server

import (
	"context"
	"strconv"
	"sync"

	"meniscus.example/optics/fitting"
	"meniscus.example/optics/unit"
	pb "meniscus.example/proto/meniscus/v1"
)

// fittingService answers FittingService.
type fittingService struct {
	pb.UnimplementedFittingServiceServer
	door *door
}

// work is what a fit needs while it runs: kept off the stack, which would have to grow for it in every new goroutine. It is wiped
// when the fit is done.
type work struct {
	input  fitting.Input
	fit    fitting.Case
	result fitting.Result
}

var scratch = sync.Pool{New: func() any { return new(work) }}

func (w *work) done() {
	*w = work{}
	scratch.Put(w)
}

// Fit computes the lens for one eye.
func (s fittingService) Fit(_ context.Context, req *pb.FitRequest) (*pb.FitResponse, error) {
	w := scratch.Get().(*work)
	defer w.done()
	if err := w.parse(s.door, req); err != nil {
		return nil, err
	}
	if err := w.fit.Fit(&w.result); err != nil {
		return nil, statusFrom(err)
	}
	return fitResponse(req, &w.result), nil
}

// fitAnswer is a response and the messages in it that every fit has: made in one piece, since making them one by one costs more than
// the fit.
type fitAnswer struct {
	response                           pb.FitResponse
	lens                               pb.Lens
	back                               pb.BackSurface
	material                           pb.Material
	power, required, ocular, tearPower pb.SphereCylinder
	tears                              pb.TearLens
	tearVector, residualVector         pb.PowerVector
	over                               pb.Refraction
	residual                           pb.Residual
}

func fitResponse(req *pb.FitRequest, r *fitting.Result) *pb.FitResponse {
	plus := req.GetPlan().GetCylinderForm() == pb.CylinderForm_CYLINDER_FORM_PLUS
	a := &fitAnswer{}
	a.lensToOrder(req.GetLens(), r, plus)
	setWritten(&a.required, inForm(r.Wanted.Power.PowerVector, plus))
	setWritten(&a.ocular, inForm(r.Ocular.PowerVector, plus))
	a.tearLens(r, plus)
	setWritten(&a.over, inForm(r.OverWorn, plus))
	a.over.SetVertexDistanceMm(float64(r.Spectacle.Vertex()))
	a.setResidual(r)

	m := &a.response
	m.SetLens(&a.lens)
	m.SetRequiredPower(&a.required)
	m.SetOcularRefraction(&a.ocular)
	m.SetTearLens(&a.tears)
	m.SetOverRefraction(&a.over)
	m.SetResidual(&a.residual)
	m.SetOxygen(oxygen(req.GetLens().GetMaterial(), r))
	m.SetCautions(cautions(r.Cautions()))
	if req.GetPlan().GetExplain() {
		m.SetDerivation(derivation(r.Derivation()))
	}
	m.SetProvenance(provenance)
	m.SetChoices(fitChoices(r))
	if req.GetEye().HasSide() {
		m.SetSide(req.GetEye().GetSide())
	}
	return m
}

// lensToOrder is the lens, complete. What was given of the material is given back.
func (a *fitAnswer) lensToOrder(given *pb.Lens, r *fitting.Result, plus bool) {
	back := &a.back
	back.SetOpticZoneRadiusMm(float64(r.Radii.Flat))
	if r.Radii.Steep != r.Radii.Flat {
		back.SetSteepRadiusMm(float64(r.Radii.Steep))
		back.SetFlatMeridianDeg(float64(r.Radii.FlatMeridian))
	}
	back.SetOpticZoneDiameterMm(float64(r.ZoneDiameter))
	material := &a.material
	material.SetRefractiveIndex(float64(r.Body.Index))
	if was := given.GetMaterial(); was != nil {
		if was.HasDk() {
			material.SetDk(was.GetDk() + 0)
		}
		if was.HasDensityGCm3() {
			material.SetDensityGCm3(was.GetDensityGCm3())
		}
		if was.HasName() {
			material.SetName(was.GetName())
		}
	}
	m := &a.lens
	m.SetKind(pb.LensKind_LENS_KIND_RIGID)
	m.SetToricity(wireToricity[r.Toricity])
	m.SetBackSurface(back)
	m.SetTotalDiameterMm(float64(r.Diameter))
	m.SetCentreThicknessMm(float64(r.Body.CentreThickness))
	m.SetMaterial(material)
	power := r.Power
	if plus == (power.Cylinder < 0) {
		power = power.Transposed()
	}
	setWritten(&a.power, power)
	m.SetPower(&a.power)
}

var wireToricity = [...]pb.Toricity{
	fitting.Spherical:  pb.Toricity_TORICITY_SPHERICAL,
	fitting.FrontToric: pb.Toricity_TORICITY_FRONT,
	fitting.BackToric:  pb.Toricity_TORICITY_BACK,
	fitting.Bitoric:    pb.Toricity_TORICITY_BITORIC,
}

func (a *fitAnswer) tearLens(r *fitting.Result, plus bool) {
	setWritten(&a.tearPower, inForm(r.TearLens.PowerVector, plus))
	setVector(&a.tearVector, r.TearLens.PowerVector)
	m := &a.tears
	m.SetPower(&a.tearPower)
	m.SetPowerVector(&a.tearVector)
	m.SetApexClearanceUm(float64(r.Layer.Apex.Micrometres()))
	m.SetIndex(float64(r.Layer.Index))
}

func (a *fitAnswer) setResidual(r *fitting.Result) {
	setVector(&a.residualVector, r.Over.Power)
	m := &a.residual
	m.SetVector(&a.residualVector)
	m.SetBlurStrengthD(float64(r.Blur))
	m.SetAcuityLossLogmar(r.AcuityLog)
	m.SetDecimalAcuity(r.Acuity)
	m.SetAcuityModel(fitting.AcuityModel)
}

func oxygen(given *pb.Material, r *fitting.Result) *pb.Oxygen {
	if !given.HasDk() {
		return nil
	}
	m := &pb.Oxygen{}
	m.SetDkTCentre(float64(unit.Permeability(given.GetDk()).Transmissibility(r.Body.CentreThickness)) + 0)
	return m
}

// fitChoices are the choices, with what was compared where the toricity was one.
func fitChoices(r *fitting.Result) []*pb.Choice {
	list := r.Choices()
	out := make([]*pb.Choice, len(list))
	for i, c := range list {
		out[i] = fixedChoices[c]
		if c == fitting.ChoiceOfToricity() {
			out[i] = choice(&fitting.Choice{Field: c.Field, Rule: compared(c.Rule, r.Compared()), Source: c.Source})
		}
	}
	return out
}

// compared is the rule, and what was compared.
func compared(rule string, list []fitting.Candidate) string {
	text := append(make([]byte, 0, 512), rule...)
	text = append(text, "; astigmatism compared:"...)
	for i, c := range list {
		if i > 0 {
			text = append(text, ',')
		}
		text = append(append(text, ' '), c.Toricity.String()...)
		if c.Effect != fitting.NoEffect {
			text = append(append(append(text, " ("...), c.Effect.String()...), ')')
		}
		text = append(text, " leaves "...)
		text = append(strconv.AppendFloat(text, float64(c.Residual), 'f', 2, 64), " D"...)
	}
	return string(text)
}
