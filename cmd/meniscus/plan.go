package main

import (
	"github.com/spf13/pflag"
	"google.golang.org/protobuf/proto"

	pb "meniscus.example/proto/meniscus/v1"
)

// addForm adds --plus-cylinder to flags. What it gives is nil unless the flag is given.
func addForm(flags *pflag.FlagSet) func() *pb.CylinderForm {
	plus := flags.Bool("plus-cylinder", false, "write cylinders in plus form")
	return func() *pb.CylinderForm {
		if !*plus {
			return nil
		}
		return pb.CylinderForm_CYLINDER_FORM_PLUS.Enum()
	}
}

// addExplain adds --explain to flags. What it gives is nil unless the flag is given.
func addExplain(flags *pflag.FlagSet) func() *bool {
	explain := flags.Bool("explain", false, "show the derivation step by step, and every source")
	return func() *bool {
		if !*explain {
			return nil
		}
		return proto.Bool(true)
	}
}
