package main

import (
	"context"
	"errors"
	"fmt"
	"slices"

	"github.com/spf13/cobra"
	"google.golang.org/grpc"

	"meniscus.example/client/notation"
	pb "meniscus.example/proto/meniscus/v1"
)

func (a *app) combine() *cobra.Command {
	c := &cobra.Command{
		Use:   "combine POWER [POWER ...] [--minus POWER ...]",
		Short: "The sum of powers in contact, whatever their axes",
		Long:  "combine adds thin powers in contact, and subtracts those named by --minus.\n\n" + safety,
		Example: `  meniscus combine "+1.75 / +0.50 x 45" "-2.25 / -1.00 x 135"
  # plano / -1.50 D x 135°

  meniscus combine "-3.00 / -2.00 x 10" --minus "-3.00 / -2.00 x 180"
  # +0.35 / -0.69 D x 50°`,
		Args: cobra.ArbitraryArgs,
	}
	c.Flags().SortFlags = false
	minus := c.Flags().StringArray("minus", nil, "subtract this `POWER`; can be given many times")
	form := addForm(c.Flags())
	explain := addExplain(c.Flags())
	c.RunE = func(c *cobra.Command, args []string) error {
		if len(args)+len(*minus) == 0 {
			return errors.New("combine takes one or more powers, each between quotes")
		}
		s := sum{from: origins{}}
		err := errors.Join(s.add("POWER", false, args), s.add("--minus", true, *minus))
		if err != nil {
			return err
		}
		for i, text := range slices.Concat(args, *minus) {
			a.noteUnsigned(s.from[termPath(i)], text)
		}
		req := pb.CombineRequest_builder{Terms: s.terms, CylinderForm: form(), Explain: explain()}.Build()
		res, err := ask(c.Context(), a, s.from, func(ctx context.Context, conn grpc.ClientConnInterface) (*pb.CombineResponse, error) {
			return pb.NewRefractionServiceClient(conn).Combine(ctx, req)
		})
		if err != nil {
			return err
		}
		return a.print(res, s.from, func(p *page) { p.sum(req, res) })
	}
	return c
}

// sum is a sum of powers being read, and where each comes from.
type sum struct {
	terms []*pb.Term
	from  origins
}

// add reads powers. Its error has a line for each that cannot be read.
func (s *sum) add(name string, subtract bool, texts []string) error {
	var bad []error
	for i, text := range texts {
		where := fmt.Sprintf("%s %d", name, i+1)
		power, err := notation.ParseSphereCylinder(written(text))
		if err != nil {
			bad = append(bad, fmt.Errorf("%s: %w", where, err))
			continue
		}
		term := pb.Term_builder{SphereCylinder: power}.Build()
		if subtract {
			term.SetSubtract(true)
		}
		s.from[termPath(len(s.terms))] = where
		s.terms = append(s.terms, term)
	}
	return errors.Join(bad...)
}

func termPath(i int) string { return fmt.Sprintf("terms[%d]", i) }
