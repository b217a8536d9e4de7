package main

import (
	"context"

	"github.com/spf13/cobra"
	"github.com/spf13/pflag"
	"google.golang.org/grpc"

	pb "meniscus.example/proto/meniscus/v1"
)

// fitFlags are the flags of fit. A flag that is not on the command line stays absent in the request.
type fitFlags struct {
	refraction, readings, side      string
	toricity, power, material, file string
	measured, ordered, planned      *fields
	form                            func() *pb.CylinderForm
	explain                         func() *bool
}

func (a *app) fit() *cobra.Command {
	c := &cobra.Command{
		Use:   "fit --rx REFRACTION --k READINGS",
		Short: "The lens to order for one eye",
		Long: "fit computes the rigid lens to order for one eye. What you decide of the lens is\n" +
			"kept; the rest is chosen, and the answer says by which rule.\n\n" + notationHelp + "\n\n" + safety,
		Example: `  meniscus fit --rx "-4.25 / -1.50 x 175, vertex 12" \
    --k "7.80 @ 180 / 7.60 @ 90" --eye right
  # back optic zone radius    7.80 mm (43.27 D at 1.3375)
  # back vertex power         -4.25 D

  meniscus fit --rx "+2.00 / -3.00 x 90" --vertex 13 \
    --k "42.75 @ 180 / 45.50 @ 90" --toricity bitoric --explain
  # kind                           rigid, bitoric

  meniscus fit --rx "-4.25 sph" --vertex 12 --k "7.80 / 7.70 @ 90" \
    --radius 7.75 --power -4.00
  # over-refraction predicted   +0.24 / -0.56 D x 90°  at vertex 12 mm

  meniscus fit --file eye.json --json
  # "lens": {`,
		Args: noArguments,
	}
	f := newFitFlags(c.Flags())
	c.RunE = func(c *cobra.Command, _ []string) error {
		req, err := f.request(a.in)
		if err != nil {
			return err
		}
		if f.file == "" {
			a.noteUnsigned("--rx", f.refraction)
			a.noteUnsigned("--power", f.power)
		}
		from := f.origins()
		res, err := ask(c.Context(), a, from, func(ctx context.Context, conn grpc.ClientConnInterface) (*pb.FitResponse, error) {
			return pb.NewFittingServiceClient(conn).Fit(ctx, req)
		})
		if err != nil {
			return err
		}
		return a.print(res, from, func(p *page) { p.fit(req, res) })
	}
	return c
}

func newFitFlags(flags *pflag.FlagSet) *fitFlags {
	f := &fitFlags{}
	flags.SortFlags = false
	flags.StringVar(&f.refraction, "rx", "", "spectacle `REFRACTION`, such as \"-4.25 / -1.50 x 175, vertex 12\"")
	flags.StringVar(&f.readings, "k", "", "keratometer `READINGS` in mm or D with their meridians, such as \"7.80 @ 180 / 7.60 @ 90\"")
	flags.StringVar(&f.side, "eye", "", "`SIDE`: right (OD, R) or left (OS, L)")
	f.measured = newFields(flags, &pb.FitRequest{},
		field{"vertex", "eye.refraction.vertex_distance_mm", "vertex distance of the refraction, 0 for one at the cornea"},
		field{"add", "eye.refraction.add_d", "addition for near"},
		field{"keratometric-index", "eye.keratometry.keratometric_index", "keratometric index of the instrument (1.3375 unless given)"},
		field{"shape-q", "eye.cornea_shape.asphericity_q", "asphericity Q of the cornea"},
		field{"iris", "eye.iris_diameter_mm", "horizontal visible iris diameter"},
		field{"pupil", "eye.pupil_diameter_mm", "pupil diameter in dim light"})
	flags.StringVar(&f.toricity, "toricity", "", "`KIND` wanted: spherical, front, back or bitoric")
	flags.StringVar(&f.power, "power", "", "keep this back vertex `POWER`, and say what it leaves")
	flags.StringVar(&f.material, "material", "", "`NAME` of the material; nothing is looked up by it")
	f.ordered = newFields(flags, &pb.FitRequest{},
		field{"radius", "lens.back_surface.optic_zone_radius_mm", "keep this back optic zone radius (of the flat meridian)"},
		field{"steep-radius", "lens.back_surface.steep_radius_mm", "keep this back optic zone radius of the steep meridian"},
		field{"flat-meridian", "lens.back_surface.flat_meridian_deg", "keep this flat meridian of the back optic zone"},
		field{"zone-diameter", "lens.back_surface.optic_zone_diameter_mm", "keep this back optic zone diameter"},
		field{"diameter", "lens.total_diameter_mm", "keep this total diameter"},
		field{"thickness", "lens.centre_thickness_mm", "keep this centre thickness"},
		field{"index", "lens.material.refractive_index", "refractive index of the material"},
		field{"dk", "lens.material.dk", "oxygen permeability Dk of the material"})
	f.planned = newFields(flags, &pb.FitRequest{},
		field{"offset", "plan.back_curve_offset_d", "how much steeper than flat K the back optic zone is to be; negative is flatter"},
		field{"clearance", "plan.apex_clearance_um", "thickness of the tears at the apex, where it is known"},
		field{"tear-index", "plan.tear_index", "refractive index of the tears (1.3375 unless given; physically 1.336)"},
		field{"power-step", "plan.power_step_d", "step of the spheres that can be ordered (0.25 unless given)"},
		field{"cylinder-step", "plan.cylinder_step_d", "step of the cylinders that can be ordered (0.25 unless given)"},
		field{"axis-step", "plan.axis_step_deg", "step of the axes that can be ordered (5 unless given)"},
		field{"radius-step", "plan.radius_step_mm", "step of the radii that can be ordered (0.05 unless given)"})
	f.form = addForm(flags)
	f.explain = addExplain(flags)
	flags.StringVar(&f.file, "file", "", "read the whole request from `FILE` as JSON; - is standard input")
	return f
}
