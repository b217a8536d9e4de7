package main

import (
	"context"
	"io"
	"os"
	"strings"

	"github.com/spf13/cobra"
	"github.com/spf13/pflag"
	"google.golang.org/grpc"
	"google.golang.org/protobuf/encoding/protojson"
	"google.golang.org/protobuf/proto"

	"meniscus.example/client/notation"
	pb "meniscus.example/proto/meniscus/v1"
)

// fitFlags are the flags of fit. A flag that is not on the command line stays absent in the request.
type fitFlags struct {
	file, refraction, readings, side, power, toricity, material string
	explain, plus                                               bool
	numbers                                                     map[string]*float64
}

// fitNumbers are the flags that take one number; what stands between backquotes is the unit that the help shows.
var fitNumbers = []struct{ name, help string }{
	{"vertex", "vertex distance of the refraction in `mm`; 0 for one at the cornea"},
	{"keratometric-index", "keratometric `index` of the instrument (1.3375 unless given)"},
	{"shape-q", "asphericity `Q` of the cornea"},
	{"iris", "horizontal visible iris diameter in `mm`"},
	{"pupil", "pupil diameter in dim light in `mm`"},
	{"radius", "keep this back optic zone radius in `mm` (of the flat meridian)"},
	{"steep-radius", "keep this back optic zone radius of the steep meridian in `mm`"},
	{"flat-meridian", "keep this flat meridian of the back optic zone in `degrees`"},
	{"diameter", "keep this total diameter in `mm`"},
	{"zone-diameter", "keep this back optic zone diameter in `mm`"},
	{"thickness", "keep this centre thickness in `mm`"},
	{"index", "refractive `index` of the material"},
	{"dk", "oxygen permeability `Dk` of the material, in 10^-11 (cm2/s)(mL O2/(mL mmHg))"},
	{"offset", "back optic zone steeper than flat K by this, in `D`; negative is flatter"},
	{"clearance", "thickness of the tears at the apex in `micrometres`, where it is known"},
	{"tear-index", "refractive `index` of the tears (1.3375 unless given; physically 1.336)"},
	{"power-step", "step in `D` of the spheres that can be ordered (0.25 unless given)"},
	{"cylinder-step", "step in `D` of the cylinders that can be ordered (0.25 unless given)"},
	{"axis-step", "step in `degrees` of the axes that can be ordered (5 unless given)"},
	{"radius-step", "step in `mm` of the radii that can be ordered (0.05 unless given)"},
}

func (a *app) fit() *cobra.Command {
	var f fitFlags
	c := &cobra.Command{
		Use:   "fit --rx REFRACTION --k READINGS",
		Short: "The lens to order for one eye",
		Long: "fit computes the rigid lens to order for one eye. What you decide of the lens is kept;\n" +
			"the rest is chosen, and the answer says by which rule.\n\n" + safety,
		Example: `  meniscus fit --rx "-4.25 / -1.50 x 175, vertex 12" --k "7.80 @ 180 / 7.60 @ 90"
  meniscus fit --rx "-4.25 / -1.50 x 175" --vertex 12 --k "43.25 @ 180 / 44.50 @ 90" --explain
  meniscus fit --rx "+2.00 / -3.00 x 90" --vertex 13 --k "7.90 / 7.40 @ 90" --toricity bitoric
  meniscus fit --rx "-4.25 sph" --vertex 12 --k "7.80 / 7.70 @ 90" --radius 7.75 --power -4.00
  meniscus fit --file eye.json --json`,
		Args: noArguments,
	}
	flags := c.Flags()
	flags.SortFlags = false
	flags.StringVar(&f.refraction, "rx", "", "spectacle `REFRACTION`, such as \"-4.25 / -1.50 x 175, vertex 12\"")
	flags.StringVar(&f.readings, "k", "", "keratometer `READINGS` in mm or D with their meridians, such as \"7.80 @ 180 / 7.60 @ 90\"")
	flags.StringVar(&f.side, "eye", "", "`SIDE`: right (OD, R) or left (OS, L)")
	flags.StringVar(&f.toricity, "toricity", "", "`KIND` wanted: spherical, front, back or bitoric")
	flags.StringVar(&f.power, "power", "", "keep this back vertex `POWER`, and say what it leaves")
	flags.StringVar(&f.material, "material", "", "what the material is called")
	f.numbers = map[string]*float64{}
	for _, n := range fitNumbers {
		f.numbers[n.name] = flags.Float64(n.name, 0, n.help)
	}
	flags.BoolVar(&f.plus, "plus-cylinder", false, "write cylinders in plus form")
	flags.BoolVar(&f.explain, "explain", false, "show the derivation, step by step")
	flags.StringVar(&f.file, "file", "", "read the whole request from `FILE` as JSON; - is standard input")
	c.RunE = func(c *cobra.Command, _ []string) error {
		req, err := f.request(c.Flags(), a.in)
		if err != nil {
			return err
		}
		var res *pb.FitResponse
		if err := a.call(c.Context(), func(ctx context.Context, conn grpc.ClientConnInterface) error {
			res, err = pb.NewFittingServiceClient(conn).Fit(ctx, req)
			return err
		}); err != nil {
			return err
		}
		return a.print(res, func(p *page) { p.fit(res) })
	}
	return c
}

// request makes the request of the flags, or reads it from a file.
func (f *fitFlags) request(flags *pflag.FlagSet, stdin io.Reader) (*pb.FitRequest, error) {
	if f.file != "" {
		return f.fromFile(flags, stdin)
	}
	number := func(name string) *float64 {
		if !flags.Changed(name) {
			return nil
		}
		return f.numbers[name]
	}
	if f.refraction == "" || f.readings == "" {
		return nil, usage("fit needs --rx and --k, or --file")
	}
	refraction, err := notation.ParseRefraction(f.refraction)
	if err != nil {
		return nil, usage("--rx: %w", err)
	}
	if v := number("vertex"); v != nil {
		if refraction.HasVertexDistanceMm() && refraction.GetVertexDistanceMm() != *v {
			return nil, usage("--vertex says %v mm, and --rx says %v mm", *v, refraction.GetVertexDistanceMm())
		}
		refraction.SetVertexDistanceMm(*v)
	}
	readings, err := notation.ParseKeratometry(f.readings)
	if err != nil {
		return nil, usage("--k: %w", err)
	}
	if n := number("keratometric-index"); n != nil {
		readings.SetKeratometricIndex(*n)
	}
	eye := pb.Eye_builder{
		Refraction: refraction, Keratometry: readings,
		IrisDiameterMm: number("iris"), PupilDiameterMm: number("pupil"),
	}
	if q := number("shape-q"); q != nil {
		eye.CorneaShape = pb.CorneaShape_builder{AsphericityQ: q}.Build()
	}
	switch strings.ToLower(f.side) {
	case "":
	case "right", "r", "od":
		eye.Side = pb.Side_SIDE_RIGHT.Enum()
	case "left", "l", "os":
		eye.Side = pb.Side_SIDE_LEFT.Enum()
	default:
		return nil, usage("--eye is %q: right (OD, R) or left (OS, L)", f.side)
	}
	lens, err := f.lens(number)
	if err != nil {
		return nil, err
	}
	plan := pb.FitPlan_builder{
		BackCurveOffsetD: number("offset"), ApexClearanceUm: number("clearance"), TearIndex: number("tear-index"),
		PowerStepD: number("power-step"), CylinderStepD: number("cylinder-step"), AxisStepDeg: number("axis-step"),
		RadiusStepMm: number("radius-step"),
	}
	if flags.Changed("offset") {
		plan.BackCurveRule = pb.BackCurveRule_BACK_CURVE_RULE_OFFSET.Enum()
	}
	if f.explain {
		plan.Explain = proto.Bool(true)
	}
	if f.plus {
		plan.CylinderForm = pb.CylinderForm_CYLINDER_FORM_PLUS.Enum()
	}
	return pb.FitRequest_builder{Eye: eye.Build(), Lens: lens, Plan: plan.Build()}.Build(), nil
}

// lens is what the flags decide of the lens.
func (f *fitFlags) lens(number func(string) *float64) (*pb.Lens, error) {
	lens := pb.Lens_builder{TotalDiameterMm: number("diameter"), CentreThicknessMm: number("thickness")}
	lens.BackSurface = pb.BackSurface_builder{
		OpticZoneRadiusMm: number("radius"), SteepRadiusMm: number("steep-radius"),
		FlatMeridianDeg: number("flat-meridian"), OpticZoneDiameterMm: number("zone-diameter"),
	}.Build()
	material := pb.Material_builder{RefractiveIndex: number("index"), Dk: number("dk")}
	if f.material != "" {
		material.Name = proto.String(f.material)
	}
	lens.Material = material.Build()
	if f.toricity != "" {
		value, ok := pb.Toricity_value["TORICITY_"+strings.ToUpper(f.toricity)]
		if !ok || value == 0 {
			return nil, usage("--toricity is %q: spherical, front, back or bitoric", f.toricity)
		}
		lens.Toricity = pb.Toricity(value).Enum()
	}
	if f.power != "" {
		power, err := notation.ParseSphereCylinder(f.power)
		if err != nil {
			return nil, usage("--power: %w", err)
		}
		lens.Power = power
	}
	return lens.Build(), nil
}

// fromFile reads the request from a file; but for --explain and --plus-cylinder the other flags of fit do not go with it.
func (f *fitFlags) fromFile(flags *pflag.FlagSet, stdin io.Reader) (*pb.FitRequest, error) {
	var extra []string
	for _, n := range fitNumbers {
		if flags.Changed(n.name) {
			extra = append(extra, "--"+n.name)
		}
	}
	for _, name := range []string{"rx", "k", "eye", "toricity", "power", "material"} {
		if flags.Changed(name) {
			extra = append(extra, "--"+name)
		}
	}
	if extra != nil {
		return nil, usage("--file has the whole request; %s would be lost", strings.Join(extra, ", "))
	}
	read := func() ([]byte, error) { return os.ReadFile(f.file) }
	if f.file == "-" {
		read = func() ([]byte, error) { return io.ReadAll(stdin) }
	}
	data, err := read()
	if err != nil {
		return nil, usage("--file: %w", err)
	}
	req := &pb.FitRequest{}
	if err := protojson.Unmarshal(data, req); err != nil {
		return nil, usage("--file %s is not a FitRequest as JSON: %w", f.file, err)
	}
	if f.explain || f.plus {
		plan := req.GetPlan()
		if plan == nil {
			plan = &pb.FitPlan{}
			req.SetPlan(plan)
		}
		if f.explain {
			plan.SetExplain(true)
		}
		if f.plus {
			plan.SetCylinderForm(pb.CylinderForm_CYLINDER_FORM_PLUS)
		}
	}
	return req, nil
}
