package main

import (
	"context"
	"fmt"

	"github.com/spf13/cobra"
	"google.golang.org/grpc"

	"meniscus.example/client/notation"
	pb "meniscus.example/proto/meniscus/v1"
)

func (a *app) express() *cobra.Command {
	c := &cobra.Command{
		Use:   "express POWER [--turn °]",
		Short: "One power in all its forms",
		Long: "express writes a power with a minus and a plus cylinder, along its meridians,\n" +
			"and as a power vector.\n\n" + safety,
		Example: `  meniscus express "+2.00 / +5.00 x 30"
  # minus cylinder     +7.00 / -5.00 D x 120°

  meniscus express "-3.00 / -2.00 x 180" --turn 10
  # minus cylinder     -3.00 / -2.00 D x 10°`,
		Args: oneArgument("power"),
	}
	c.Flags().SortFlags = false
	turn := newFields(c.Flags(), &pb.ExpressRequest{},
		field{"turn", "rotation_deg", "turn it first, counter-clockwise as the examiner sees it"})
	explain := addExplain(c.Flags())
	c.RunE = func(c *cobra.Command, args []string) error {
		power, err := notation.ParseSphereCylinder(written(args[0]))
		if err != nil {
			return fmt.Errorf("POWER: %w", err)
		}
		req := pb.ExpressRequest_builder{SphereCylinder: power, Explain: explain()}.Build()
		turn.put(req)
		from := turn.origins()
		from["sphere_cylinder"] = "POWER"
		a.noteUnsigned("POWER", written(args[0]))
		res, err := ask(c.Context(), a, from, func(ctx context.Context, conn grpc.ClientConnInterface) (*pb.ExpressResponse, error) {
			return pb.NewRefractionServiceClient(conn).Express(ctx, req)
		})
		if err != nil {
			return err
		}
		return a.print(res, from, func(p *page) { p.forms(req, res) })
	}
	return c
}
