package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"strings"
	"time"

	"github.com/spf13/cobra"
	"google.golang.org/grpc"

	"meniscus.example/client/embedded"
	"meniscus.example/server"
)

// The exit codes.
const (
	exitFine   = 0
	exitFailed = 1 // the service answered with an error, or could not be reached
	exitUsage  = 2 // the command line is wrong
)

const safety = `A calculated starting point, to be confirmed on the eye by a licensed
practitioner under local rules. It diagnoses nothing and stores nothing about a
patient.`

// notationHelp says how prescriptions and readings are written.
const notationHelp = `A prescription is written "-4.25 / -1.50 x 175", "plano / -0.75 x 90" or
"+2.00 DS", with ", vertex 12" after it if you like; a power without a sign is
plus. Readings are radii in mm or powers in D with their meridians, in either
order: "7.80 @ 180 / 7.60 @ 90" or "43.25 @ 180 / 44.50 @ 90". Put each between
quotes.`

// app is what every command needs.
type app struct {
	in       io.Reader
	out      io.Writer
	errOut   io.Writer
	server   string
	openText bool
	timeout  time.Duration
	json     bool
	// engine makes the connection that is used without a server.
	engine func() grpc.ClientConnInterface
}

// run is the whole program; it gives the exit code.
func run(ctx context.Context, args []string, stdin io.Reader, stdout, stderr io.Writer) int {
	a := &app{
		in: stdin, out: stdout, errOut: stderr,
		engine: func() grpc.ClientConnInterface { return embedded.New(server.Options{}) },
	}
	return a.run(ctx, args)
}

func (a *app) run(ctx context.Context, args []string) int {
	root := a.root()
	root.SetArgs(shielded(args))
	root.SetIn(a.in)
	root.SetOut(a.out)
	root.SetErr(a.errOut)
	err := root.ExecuteContext(ctx)
	var refused *refusal
	var unwritten outputError
	switch {
	case err == nil:
		return exitFine
	case errors.As(err, &refused):
		a.printRefusal(refused)
		return exitFailed
	case errors.As(err, &unwritten):
		fmt.Fprintf(a.errOut, "meniscus: %v\n", err)
		return exitFailed
	}
	for line := range strings.Lines(err.Error()) {
		fmt.Fprintf(a.errOut, "meniscus: %s\n", strings.TrimSuffix(line, "\n"))
	}
	fmt.Fprintln(a.errOut, "meniscus COMMAND --help shows worked examples.")
	return exitUsage
}

func (a *app) root() *cobra.Command {
	root := &cobra.Command{
		Use:   "meniscus",
		Short: "Calculate contact lens fits",
		Long: "meniscus calculates contact lens fits: from a spectacle refraction and\n" +
			"keratometer readings to the lens to order, with the derivation and what to be\n" +
			"careful of. Without --server it computes by itself: nothing leaves this machine.\n\n" + safety,
		Example: `  meniscus fit --rx "-4.25 / -1.50 x 175, vertex 12" \
    --k "7.80 @ 180 / 7.60 @ 90" --eye right
  # Lens to order, right eye (OD)`,
		Version:           server.VersionText(),
		SilenceErrors:     true,
		SilenceUsage:      true,
		PersistentPreRunE: func(*cobra.Command, []string) error { return a.checkConnection() },
	}
	root.SetVersionTemplate("meniscus {{.Version}}\n")
	root.SetUsageFunc(printUsage)
	root.CompletionOptions.HiddenDefaultCmd = true
	flags := root.PersistentFlags()
	flags.SortFlags = false
	flags.BoolVar(&a.json, "json", false, "print the exact answer, or the error, as JSON")
	flags.StringVar(&a.server, "server", "", "ask the server at `HOST:PORT` instead of computing here; encrypted, unless it is on this machine")
	flags.BoolVar(&a.openText, "plaintext", false, "call a server on another machine without encryption")
	flags.DurationVar(&a.timeout, "timeout", 10*time.Second, "give up after this `TIME` (10s unless given)")
	root.AddCommand(a.fit(), a.vertex(), a.combine(), a.express(), a.cornea(), a.cautions(), a.methods())
	return root
}
