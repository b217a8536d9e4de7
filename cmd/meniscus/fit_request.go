package main

import (
	"errors"
	"fmt"
	"io"
	"maps"
	"os"
	"slices"
	"strings"

	"google.golang.org/protobuf/encoding/protojson"
	"google.golang.org/protobuf/proto"

	"meniscus.example/client/notation"
	pb "meniscus.example/proto/meniscus/v1"
)

// request makes the request of the flags, or reads it from a file. Its error has a line for every flag that is wrong.
func (f *fitFlags) request(stdin io.Reader) (*pb.FitRequest, error) {
	req := &pb.FitRequest{}
	read := f.fromFlags
	if f.file != "" {
		read = func(req *pb.FitRequest) error { return f.fromFile(stdin, req) }
	}
	if err := read(req); err != nil {
		return nil, err
	}
	if explain := f.explain(); explain != nil {
		planOf(req).SetExplain(*explain)
	}
	if form := f.form(); form != nil {
		planOf(req).SetCylinderForm(*form)
	}
	return req, nil
}

func (f *fitFlags) fromFlags(req *pb.FitRequest) error {
	if f.refraction == "" || f.readings == "" {
		return errors.New("fit needs --rx and --k, or --file")
	}
	var bad []error
	fault := func(flag string, err error) {
		if err != nil {
			bad = append(bad, fmt.Errorf("%s: %w", flag, err))
		}
	}
	refraction, err := notation.ParseRefraction(written(f.refraction))
	fault("--rx", err)
	readings, err := notation.ParseKeratometry(written(f.readings))
	fault("--k", err)
	side, err := sideOf(f.side)
	fault("--eye", err)
	toricity, err := toricityOf(f.toricity)
	fault("--toricity", err)
	var power *pb.SphereCylinder
	if f.power != "" {
		power, err = notation.ParseSphereCylinder(written(f.power))
		fault("--power", err)
	}
	if bad != nil {
		return errors.Join(bad...)
	}
	req.SetEye(pb.Eye_builder{Side: side, Refraction: refraction, Keratometry: readings}.Build())
	if power != nil || toricity != nil {
		req.SetLens(pb.Lens_builder{Toricity: toricity, Power: power}.Build())
	}
	asWritten := proto.CloneOf(refraction)
	for _, numbers := range []*fields{f.measured, f.ordered, f.planned} {
		numbers.put(req)
	}
	if f.material != "" {
		lens := pb.Lens_builder{Material: pb.Material_builder{Name: proto.String(written(f.material))}.Build()}.Build()
		proto.Merge(req, pb.FitRequest_builder{Lens: lens}.Build())
	}
	if req.GetPlan().HasBackCurveOffsetD() {
		req.GetPlan().SetBackCurveRule(pb.BackCurveRule_BACK_CURVE_RULE_OFFSET)
	}
	return sameTwice("--rx", asWritten, req.GetEye().GetRefraction())
}

// sameTwice is an error where a number was written in a refraction, and a flag then gave another.
func sameTwice(where string, given, sent *pb.Refraction) error {
	if given.HasVertexDistanceMm() && given.GetVertexDistanceMm() != sent.GetVertexDistanceMm() {
		return fmt.Errorf("the vertex distance is %v mm in %s and %v mm by its flag", given.GetVertexDistanceMm(), where, sent.GetVertexDistanceMm())
	}
	if given.HasAddD() && given.GetAddD() != sent.GetAddD() {
		return fmt.Errorf("the addition is %v D in %s and %v D by its flag", given.GetAddD(), where, sent.GetAddD())
	}
	return nil
}

// sideOf reads the side of an eye; nil for none.
func sideOf(text string) (*pb.Side, error) {
	switch strings.ToLower(written(text)) {
	case "":
		return nil, nil
	case "right", "r", "od":
		return pb.Side_SIDE_RIGHT.Enum(), nil
	case "left", "l", "os":
		return pb.Side_SIDE_LEFT.Enum(), nil
	}
	return nil, fmt.Errorf("%q is not a side: right (OD, R) or left (OS, L)", text)
}

// toricityOf reads a toricity; nil for none.
func toricityOf(text string) (*pb.Toricity, error) {
	switch strings.ToLower(written(text)) {
	case "":
		return nil, nil
	case "spherical":
		return pb.Toricity_TORICITY_SPHERICAL.Enum(), nil
	case "front":
		return pb.Toricity_TORICITY_FRONT.Enum(), nil
	case "back":
		return pb.Toricity_TORICITY_BACK.Enum(), nil
	case "bitoric":
		return pb.Toricity_TORICITY_BITORIC.Enum(), nil
	}
	return nil, fmt.Errorf("%q is not a kind: spherical, front, back or bitoric", text)
}

// planOf is the plan of a request, made where it is absent.
func planOf(req *pb.FitRequest) *pb.FitPlan {
	if !req.HasPlan() {
		req.SetPlan(&pb.FitPlan{})
	}
	return req.GetPlan()
}

// origins says what on the command line the fields of the request come from: nothing, for one that came from a file.
func (f *fitFlags) origins() origins {
	if f.file != "" {
		return nil
	}
	from := origins{
		"eye.refraction": "--rx", "eye.keratometry": "--k", "eye.side": "--eye",
		"lens.toricity": "--toricity", "lens.power": "--power", "lens.material.name": "--material",
	}
	for _, numbers := range []*fields{f.measured, f.ordered, f.planned} {
		maps.Copy(from, numbers.origins())
	}
	return from
}

// fromFile reads the request from a file. The flags that would say the same in another way do not go with it.
func (f *fitFlags) fromFile(stdin io.Reader, req *pb.FitRequest) error {
	var extra []string
	for flag, text := range map[string]string{
		"--rx": f.refraction, "--k": f.readings, "--eye": f.side, "--toricity": f.toricity, "--power": f.power, "--material": f.material,
	} {
		if text != "" {
			extra = append(extra, flag)
		}
	}
	slices.Sort(extra)
	extra = slices.Concat(extra, f.measured.given(), f.ordered.given(), f.planned.given())
	if len(extra) > 0 {
		return fmt.Errorf("--file has the whole request; leave out %s", strings.Join(extra, ", "))
	}
	data, err := readAll(written(f.file), stdin)
	if err != nil {
		return fmt.Errorf("--file: %w", err)
	}
	if err := protojson.Unmarshal(data, req); err != nil {
		// The library varies the white space of its errors, so that nobody compares them.
		return fmt.Errorf("--file: %s is not a FitRequest as JSON: %s", written(f.file), strings.ReplaceAll(err.Error(), "\u00a0", " "))
	}
	return nil
}

// mostBytes is the greatest size of a request in a file: more than any request can hold.
const mostBytes = 1 << 20

// readAll reads a file, or standard input for -.
func readAll(name string, stdin io.Reader) ([]byte, error) {
	from := stdin
	if name != "-" {
		file, err := os.Open(name)
		if err != nil {
			return nil, err
		}
		defer file.Close()
		from = file
	}
	data, err := io.ReadAll(io.LimitReader(from, mostBytes+1))
	if len(data) > mostBytes {
		return nil, fmt.Errorf("%s has more than %d bytes", name, mostBytes)
	}
	return data, err
}
