package main

import (
	"context"
	"fmt"

	"github.com/spf13/cobra"
	"google.golang.org/grpc"

	"meniscus.example/client/notation"
	pb "meniscus.example/proto/meniscus/v1"
)

func (a *app) cornea() *cobra.Command {
	c := &cobra.Command{
		Use:   "cornea READINGS",
		Short: "What keratometer readings say of a cornea",
		Long: "cornea turns keratometer readings into radii, powers, astigmatism and sagittal\n" +
			"heights.\n\n" + safety,
		Example: `  meniscus cornea "7.80 @ 180 / 7.60 @ 90"
  # corneal astigmatism         1.14 D at 1.3375

  meniscus cornea "43.25 @ 180 / 44.50 @ 90" --chord 9,10 --shape-q -0.3
  # 9.00 mm   1383 µm        1429 µm`,
		Args: oneArgument("pair of readings"),
	}
	c.Flags().SortFlags = false
	given := newFields(c.Flags(), &pb.DescribeCorneaRequest{},
		field{"keratometric-index", "keratometry.keratometric_index", "keratometric index of the instrument (1.3375 unless given)"},
		field{"shape-q", "cornea_shape.asphericity_q", "asphericity Q of the cornea (a mean unless given)"})
	chordsIn := quantityOf(&pb.DescribeCorneaRequest{}, "chords_mm")
	chords := &numbers{units: unitsOf(chordsIn)}
	c.Flags().Var(chords, "chord", "sagittal height over this chord, or over several with commas between"+limits(chordsIn))
	explain := addExplain(c.Flags())
	c.RunE = func(c *cobra.Command, args []string) error {
		readings, err := notation.ParseKeratometry(written(args[0]))
		if err != nil {
			return fmt.Errorf("READINGS: %w", err)
		}
		req := pb.DescribeCorneaRequest_builder{Keratometry: readings, ChordsMm: chords.values, Explain: explain()}.Build()
		given.put(req)
		from := given.origins()
		from["keratometry"], from["chords_mm"] = "READINGS", "--chord"
		res, err := ask(c.Context(), a, from, func(ctx context.Context, conn grpc.ClientConnInterface) (*pb.DescribeCorneaResponse, error) {
			return pb.NewCorneaServiceClient(conn).DescribeCornea(ctx, req)
		})
		if err != nil {
			return err
		}
		return a.print(res, from, func(p *page) { p.cornea(req, res) })
	}
	return c
}
