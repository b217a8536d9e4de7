package server

import (
	"context"

	"meniscus.example/optics/fitting"
	pb "meniscus.example/proto/meniscus/v1"
)

// referenceService answers ReferenceService.
type referenceService struct {
	pb.UnimplementedReferenceServiceServer
	door *door
}

// ListCautions lists every caution that an answer may carry.
func (s referenceService) ListCautions(context.Context, *pb.ListCautionsRequest) (*pb.ListCautionsResponse, error) {
	res := &pb.ListCautionsResponse{}
	var out []*pb.CautionDescription
	for _, r := range fitting.Rules() {
		m := &pb.CautionDescription{}
		m.SetCode(pb.CautionCode(r.Code))
		m.SetSeverity(pb.Severity(r.Severity))
		m.SetMeaning(r.Meaning)
		m.SetAction(r.Action)
		m.SetSource(r.Source)
		if limit, has := r.Limit.Get(); has {
			m.SetThreshold(limit)
			m.SetUnit(r.Unit)
		}
		out = append(out, m)
	}
	res.SetCautions(out)
	return res, nil
}

// ListMethods lists every published method that is used.
func (s referenceService) ListMethods(context.Context, *pb.ListMethodsRequest) (*pb.ListMethodsResponse, error) {
	res := &pb.ListMethodsResponse{}
	var out []*pb.Method
	for _, x := range fitting.Methods() {
		m := &pb.Method{}
		m.SetName(x.Name)
		m.SetPurpose(x.Purpose)
		m.SetFormula(x.Formula)
		m.SetSource(x.Source)
		out = append(out, m)
	}
	res.SetMethods(out)
	return res, nil
}
