package main

import (
	"context"
	"strings"

	"github.com/spf13/cobra"
	"google.golang.org/grpc"
	"google.golang.org/protobuf/proto"

	"meniscus.example/client/notation"
	pb "meniscus.example/proto/meniscus/v1"
)

func noArguments(c *cobra.Command, args []string) error {
	if len(args) > 0 {
		return usage("%s takes flags only, and %q is not one; a prescription stands in quotes", c.Name(), strings.TrimSpace(args[0]))
	}
	return nil
}

func oneArgument(what string) cobra.PositionalArgs {
	return func(c *cobra.Command, args []string) error {
		if len(args) != 1 {
			return usage("%s takes one %s, in quotes; %d arguments were given", c.Name(), what, len(args))
		}
		return nil
	}
}

func (a *app) vertex() *cobra.Command {
	var from, to float64
	var plus, explain bool
	c := &cobra.Command{
		Use:   "vertex REFRACTION --from MM [--to MM]",
		Short: "A refraction at another distance from the eye",
		Long:  "vertex restates a refraction at another vertex distance; 0 is the cornea.\n\n" + safety,
		Example: `  meniscus vertex "-7.00 / -3.00 x 180" --from 12
  meniscus vertex "+12.00 sph, vertex 14" --to 11`,
		Args: oneArgument("refraction"),
	}
	c.Flags().Float64Var(&from, "from", 0, "vertex distance of the refraction in `mm`")
	c.Flags().Float64Var(&to, "to", 0, "vertex distance wanted in `mm`; 0 is the cornea")
	c.Flags().BoolVar(&plus, "plus-cylinder", false, "write cylinders in plus form")
	c.Flags().BoolVar(&explain, "explain", false, "show the derivation, step by step")
	c.RunE = func(c *cobra.Command, args []string) error {
		refraction, err := notation.ParseRefraction(args[0])
		if err != nil {
			return usage("%w", err)
		}
		if c.Flags().Changed("from") {
			refraction.SetVertexDistanceMm(from)
		}
		req := pb.TransferVertexRequest_builder{Refraction: refraction, CylinderForm: form(plus), Explain: proto.Bool(explain)}.Build()
		if c.Flags().Changed("to") {
			req.SetToVertexDistanceMm(to)
		}
		var res *pb.TransferVertexResponse
		if err := a.call(c.Context(), func(ctx context.Context, conn grpc.ClientConnInterface) error {
			res, err = pb.NewRefractionServiceClient(conn).TransferVertex(ctx, req)
			return err
		}); err != nil {
			return err
		}
		return a.print(res, func(p *page) { p.transfer(refraction, res) })
	}
	return c
}

func form(plus bool) *pb.CylinderForm {
	if !plus {
		return nil
	}
	return pb.CylinderForm_CYLINDER_FORM_PLUS.Enum()
}

func (a *app) combine() *cobra.Command {
	var minus []string
	var plus, explain bool
	c := &cobra.Command{
		Use:   "combine POWER [POWER ...] [--minus POWER ...]",
		Short: "The sum of powers in contact, whatever their axes",
		Long:  "combine adds thin powers in contact, and subtracts those named by --minus.\n\n" + safety,
		Example: `  meniscus combine "+1.75 / +0.50 x 45" "-2.25 / -1.00 x 135"
  meniscus combine "-3.00 / -2.00 x 10" --minus "-3.00 / -2.00 x 180"`,
		Args: func(_ *cobra.Command, args []string) error {
			if len(args)+len(minus) == 0 {
				return usage("combine takes one or more powers, each in quotes")
			}
			return nil
		},
	}
	c.Flags().StringArrayVar(&minus, "minus", nil, "subtract this `POWER`; can be given many times")
	c.Flags().BoolVar(&plus, "plus-cylinder", false, "write cylinders in plus form")
	c.Flags().BoolVar(&explain, "explain", false, "show the derivation, step by step")
	c.RunE = func(c *cobra.Command, args []string) error {
		req := pb.CombineRequest_builder{CylinderForm: form(plus), Explain: proto.Bool(explain)}
		add := func(texts []string, subtract bool) error {
			for _, text := range texts {
				power, err := notation.ParseSphereCylinder(text)
				if err != nil {
					return usage("%w", err)
				}
				req.Terms = append(req.Terms, pb.Term_builder{SphereCylinder: power, Subtract: proto.Bool(subtract)}.Build())
			}
			return nil
		}
		if err := add(args, false); err != nil {
			return err
		}
		if err := add(minus, true); err != nil {
			return err
		}
		var res *pb.CombineResponse
		if err := a.call(c.Context(), func(ctx context.Context, conn grpc.ClientConnInterface) (err error) {
			res, err = pb.NewRefractionServiceClient(conn).Combine(ctx, req.Build())
			return err
		}); err != nil {
			return err
		}
		return a.print(res, func(p *page) { p.sum(req.Terms, res) })
	}
	return c
}

func (a *app) express() *cobra.Command {
	var turn float64
	var explain bool
	c := &cobra.Command{
		Use:   "express POWER [--turn DEGREES]",
		Short: "One power in all its forms",
		Long:  "express writes a power with a minus and a plus cylinder, along its meridians and as a\npower vector.\n\n" + safety,
		Example: `  meniscus express "+2.00 / +5.00 x 30"
  meniscus express "-3.00 / -2.00 x 180" --turn 10`,
		Args: oneArgument("power"),
	}
	c.Flags().Float64Var(&turn, "turn", 0, "turn it first by so many `degrees`, counter-clockwise as the examiner sees it")
	c.Flags().BoolVar(&explain, "explain", false, "show the derivation, step by step")
	c.RunE = func(c *cobra.Command, args []string) error {
		power, err := notation.ParseSphereCylinder(args[0])
		if err != nil {
			return usage("%w", err)
		}
		req := pb.ExpressRequest_builder{SphereCylinder: power, Explain: proto.Bool(explain)}.Build()
		if c.Flags().Changed("turn") {
			req.SetRotationDeg(turn)
		}
		var res *pb.ExpressResponse
		if err := a.call(c.Context(), func(ctx context.Context, conn grpc.ClientConnInterface) error {
			res, err = pb.NewRefractionServiceClient(conn).Express(ctx, req)
			return err
		}); err != nil {
			return err
		}
		return a.print(res, func(p *page) { p.forms(res) })
	}
	return c
}

func (a *app) cornea() *cobra.Command {
	var index, q float64
	var chords []float64
	var explain bool
	c := &cobra.Command{
		Use:   "cornea READINGS",
		Short: "What keratometer readings say of a cornea",
		Long:  "cornea turns keratometer readings into radii, powers, astigmatism and sagittal heights.\n\n" + safety,
		Example: `  meniscus cornea "7.80 @ 180 / 7.60 @ 90"
  meniscus cornea "43.25 @ 180 / 44.50 @ 90" --chord 9,10 --shape-q -0.3`,
		Args: oneArgument("pair of readings"),
	}
	c.Flags().Float64Var(&index, "keratometric-index", 0, "keratometric `index` of the instrument (1.3375 unless given)")
	c.Flags().Float64Var(&q, "shape-q", 0, "asphericity `Q` of the cornea (a mean unless given)")
	c.Flags().Float64SliceVar(&chords, "chord", nil, "sagittal height over these chords in `mm`, with commas between")
	c.Flags().BoolVar(&explain, "explain", false, "show the derivation, step by step")
	c.RunE = func(c *cobra.Command, args []string) error {
		readings, err := notation.ParseKeratometry(args[0])
		if err != nil {
			return usage("%w", err)
		}
		if c.Flags().Changed("keratometric-index") {
			readings.SetKeratometricIndex(index)
		}
		req := pb.DescribeCorneaRequest_builder{Keratometry: readings, ChordsMm: chords, Explain: proto.Bool(explain)}.Build()
		if c.Flags().Changed("shape-q") {
			req.SetCorneaShape(pb.CorneaShape_builder{AsphericityQ: &q}.Build())
		}
		var res *pb.DescribeCorneaResponse
		if err := a.call(c.Context(), func(ctx context.Context, conn grpc.ClientConnInterface) error {
			res, err = pb.NewCorneaServiceClient(conn).DescribeCornea(ctx, req)
			return err
		}); err != nil {
			return err
		}
		return a.print(res, func(p *page) { p.cornea(res) })
	}
	return c
}

func (a *app) cautions() *cobra.Command {
	c := &cobra.Command{
		Use:   "cautions",
		Short: "Every caution that an answer may carry",
		Long:  "cautions lists every caution with its threshold and source.\n\n" + safety,
		Args:  noArguments,
	}
	c.RunE = func(c *cobra.Command, _ []string) error {
		var res *pb.ListCautionsResponse
		if err := a.call(c.Context(), func(ctx context.Context, conn grpc.ClientConnInterface) (err error) {
			res, err = pb.NewReferenceServiceClient(conn).ListCautions(ctx, &pb.ListCautionsRequest{})
			return err
		}); err != nil {
			return err
		}
		return a.print(res, func(p *page) { p.rules(res) })
	}
	return c
}

func (a *app) methods() *cobra.Command {
	c := &cobra.Command{
		Use:   "methods",
		Short: "Every published method that is used, with its source",
		Long:  "methods lists the published methods behind the numbers.\n\n" + safety,
		Args:  noArguments,
	}
	c.RunE = func(c *cobra.Command, _ []string) error {
		var res *pb.ListMethodsResponse
		if err := a.call(c.Context(), func(ctx context.Context, conn grpc.ClientConnInterface) (err error) {
			res, err = pb.NewReferenceServiceClient(conn).ListMethods(ctx, &pb.ListMethodsRequest{})
			return err
		}); err != nil {
			return err
		}
		return a.print(res, func(p *page) { p.methods(res) })
	}
	return c
}
