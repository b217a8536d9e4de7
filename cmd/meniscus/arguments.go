package main

import (
	"errors"
	"fmt"
	"strings"

	"github.com/spf13/cobra"

	"meniscus.example/client/notation"
)

// shielded puts a space before every argument that begins with a hyphen and then a digit or a point, such as
// "-4.25 / -1.50 x 175": else it would be taken for flags (-4, -., ...), of which this program has none. Whatever reads an
// argument or the value of a flag takes the space away.
func shielded(args []string) []string {
	out := make([]string, len(args))
	for i, arg := range args {
		rest, hyphen := strings.CutPrefix(arg, "-")
		if rest = strings.TrimLeft(rest, " "); hyphen && rest != "" && strings.IndexByte("0123456789.", rest[0]) >= 0 {
			arg = " " + arg
		}
		out[i] = arg
	}
	return out
}

// written is an argument or the value of a flag as it was written: without the space of shielded.
func written(arg string) string { return strings.TrimSpace(arg) }

// noArguments is for commands that take flags only.
func noArguments(c *cobra.Command, args []string) error {
	if len(args) > 0 {
		return fmt.Errorf("%s takes flags only, and %q is not one; a prescription stands between quotes", c.Name(), written(args[0]))
	}
	return nil
}

// oneArgument is for commands that take one text.
func oneArgument(what string) cobra.PositionalArgs {
	return func(c *cobra.Command, args []string) error {
		if len(args) != 1 {
			return fmt.Errorf("%s takes one %s, between quotes; %d arguments were given", c.Name(), what, len(args))
		}
		return nil
	}
}

// number is the value of a flag that takes one number, with its unit or without. A flag that is not given stays absent.
type number struct {
	units []string // what may stand behind the number, the customary symbol first
	value *float64
}

// Set reads the number.
func (n *number) Set(text string) error {
	x, err := notation.ParseNumber("number", written(text), n.units...)
	if err != nil {
		return errors.New(n.wanted())
	}
	n.value = &x
	return nil
}

func (n *number) wanted() string {
	if len(n.units) == 0 {
		return "a number is needed"
	}
	return "a number in " + n.units[0] + " is needed"
}

// String gives the value; it is empty for a flag that is not given.
func (n *number) String() string {
	if n.value == nil {
		return ""
	}
	return fmt.Sprint(*n.value)
}

// Type stands for the value in help texts: its unit.
func (n *number) Type() string { return placeholder(n.units) }

// numbers is the value of a flag that takes numbers with commas between them, and can be given many times.
type numbers struct {
	units  []string
	values []float64
}

// Set reads numbers and adds them to those of an earlier Set.
func (n *numbers) Set(text string) error {
	for part := range strings.SplitSeq(text, ",") {
		one := number{units: n.units}
		if err := one.Set(part); err != nil {
			return fmt.Errorf("%w, or more of them with commas between", err)
		}
		n.values = append(n.values, *one.value)
	}
	return nil
}

// String gives the values.
func (n *numbers) String() string {
	if n.values == nil {
		return ""
	}
	return fmt.Sprint(n.values)
}

// Type stands for the value in help texts: its unit.
func (n *numbers) Type() string { return placeholder(n.units) }

func placeholder(units []string) string {
	if len(units) == 0 || strings.HasPrefix(units[0], "10") {
		return "NUMBER"
	}
	return units[0]
}

// noteUnsigned tells on standard error which powers were read as plus for want of a sign.
func (a *app) noteUnsigned(where, text string) {
	if missing := notation.UnsignedPowers(text); len(missing) > 0 {
		verb := "has no sign and was"
		if len(missing) > 1 {
			verb = "have no sign and were"
		}
		fmt.Fprintf(a.errOut, "meniscus: note: the %s in %s %s read as plus\n", strings.Join(missing, " and "), where, verb)
	}
}
