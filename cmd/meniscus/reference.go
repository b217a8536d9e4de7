package main

import (
	"context"

	"github.com/spf13/cobra"
	"google.golang.org/grpc"

	pb "meniscus.example/proto/meniscus/v1"
)

func (a *app) cautions() *cobra.Command {
	return &cobra.Command{
		Use:     "cautions",
		Short:   "Every caution that an answer may carry",
		Long:    "cautions lists every caution with its threshold, what the trade does next, and\nits source.\n\n" + safety,
		Example: "  meniscus cautions\n  # vertex assumed, advice:",
		Args:    noArguments,
		RunE: func(c *cobra.Command, _ []string) error {
			res, err := ask(c.Context(), a, nil, func(ctx context.Context, conn grpc.ClientConnInterface) (*pb.ListCautionsResponse, error) {
				return pb.NewReferenceServiceClient(conn).ListCautions(ctx, &pb.ListCautionsRequest{})
			})
			if err != nil {
				return err
			}
			return a.print(res, nil, func(p *page) { p.rules(res) })
		},
	}
}

func (a *app) methods() *cobra.Command {
	return &cobra.Command{
		Use:     "methods",
		Short:   "Every published method that is used, with its source",
		Long:    "methods lists the published methods behind the numbers.\n\n" + safety,
		Example: "  meniscus methods\n  # Power vectors:",
		Args:    noArguments,
		RunE: func(c *cobra.Command, _ []string) error {
			res, err := ask(c.Context(), a, nil, func(ctx context.Context, conn grpc.ClientConnInterface) (*pb.ListMethodsResponse, error) {
				return pb.NewReferenceServiceClient(conn).ListMethods(ctx, &pb.ListMethodsRequest{})
			})
			if err != nil {
				return err
			}
			return a.print(res, nil, func(p *page) { p.methods(res) })
		},
	}
}
