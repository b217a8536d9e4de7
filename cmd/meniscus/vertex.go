package main

import (
	"context"
	"fmt"

	"github.com/spf13/cobra"
	"google.golang.org/grpc"
	"google.golang.org/protobuf/proto"

	"meniscus.example/client/notation"
	pb "meniscus.example/proto/meniscus/v1"
)

func (a *app) vertex() *cobra.Command {
	c := &cobra.Command{
		Use:   "vertex REFRACTION --from mm [--to mm]",
		Short: "A refraction at another distance from the eye",
		Long:  "vertex restates a refraction at another vertex distance; 0 is the cornea.\n\n" + safety,
		Example: `  meniscus vertex "-7.00 / -3.00 x 180" --from 12
  # -6.46 / -2.47 D x 180°  at the cornea

  meniscus vertex "+12.00 sph, vertex 14" --to 11
  # +12.45 D  at vertex 11 mm`,
		Args: oneArgument("refraction"),
	}
	c.Flags().SortFlags = false
	distances := newFields(c.Flags(), &pb.TransferVertexRequest{},
		field{"from", "refraction.vertex_distance_mm", "vertex distance of the refraction"},
		field{"to", "to_vertex_distance_mm", "vertex distance wanted (0, which is the cornea, unless given)"})
	form := addForm(c.Flags())
	explain := addExplain(c.Flags())
	c.RunE = func(c *cobra.Command, args []string) error {
		refraction, err := notation.ParseRefraction(written(args[0]))
		if err != nil {
			return fmt.Errorf("REFRACTION: %w", err)
		}
		req := pb.TransferVertexRequest_builder{Refraction: proto.CloneOf(refraction), CylinderForm: form(), Explain: explain()}.Build()
		distances.put(req)
		if err := sameTwice("REFRACTION", refraction, req.GetRefraction()); err != nil {
			return err
		}
		from := distances.origins()
		from["refraction"] = "REFRACTION"
		a.noteUnsigned("REFRACTION", written(args[0]))
		res, err := ask(c.Context(), a, from, func(ctx context.Context, conn grpc.ClientConnInterface) (*pb.TransferVertexResponse, error) {
			return pb.NewRefractionServiceClient(conn).TransferVertex(ctx, req)
		})
		if err != nil {
			return err
		}
		return a.print(res, from, func(p *page) { p.transfer(req, res) })
	}
	return c
}
