package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"net"
	"net/netip"
	"time"

	"github.com/spf13/cobra"
	"google.golang.org/grpc"
	"google.golang.org/grpc/credentials"
	"google.golang.org/grpc/credentials/insecure"
	"google.golang.org/grpc/status"

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

// app is what every command needs.
type app struct {
	in       io.Reader
	out      io.Writer
	server   string
	openText bool
	timeout  time.Duration
	json     bool
}

// usageError is a mistake on the command line.
type usageError struct{ error }

func usage(format string, args ...any) error { return usageError{fmt.Errorf(format, args...)} }

// run is the whole program; it gives the exit code.
func run(ctx context.Context, args []string, stdin io.Reader, stdout, stderr io.Writer) int {
	a := &app{in: stdin, out: stdout}
	root := a.root()
	root.SetArgs(asPositional(args))
	root.SetIn(stdin)
	root.SetOut(stdout)
	root.SetErr(stderr)
	err := root.ExecuteContext(ctx)
	var wrong usageError
	switch _, fromService := status.FromError(err); {
	case err == nil:
		return exitFine
	case errors.As(err, &wrong) || !fromService:
		fmt.Fprintf(stderr, "meniscus: %v\n", err)
		fmt.Fprintln(stderr, "meniscus COMMAND --help shows worked examples.")
		return exitUsage
	}
	a.printError(stderr, err)
	return exitFailed
}

// asPositional gives an argument that begins like a negative number a leading space, so that it is not taken for a flag: a
// prescription may stand where it likes. What reads it passes the space.
func asPositional(args []string) []string {
	out := make([]string, len(args))
	for i, arg := range args {
		if len(arg) > 1 && arg[0] == '-' && (arg[1] >= '0' && arg[1] <= '9' || arg[1] == '.') {
			arg = " " + arg
		}
		out[i] = arg
	}
	return out
}

func (a *app) root() *cobra.Command {
	root := &cobra.Command{
		Use:   "meniscus",
		Short: "Calculate contact lens fits",
		Long: "meniscus calculates contact lens fits: from a spectacle refraction and keratometer\n" +
			"readings to the lens to order, with the derivation and what to be careful of.\n" +
			"Without --server it computes by itself; nothing leaves this machine.\n\n" + safety,
		Version:       server.VersionText(),
		SilenceErrors: true,
		SilenceUsage:  true,
	}
	root.SetVersionTemplate("meniscus {{.Version}}\n")
	root.CompletionOptions.HiddenDefaultCmd = true
	root.SetFlagErrorFunc(func(_ *cobra.Command, err error) error { return usageError{err} })
	flags := root.PersistentFlags()
	flags.StringVar(&a.server, "server", "", "ask the server at `HOST:PORT` instead of computing here")
	flags.BoolVar(&a.openText, "plaintext", false, "call a server on another machine without encryption")
	flags.DurationVar(&a.timeout, "timeout", 10*time.Second, "give up after this long")
	flags.BoolVar(&a.json, "json", false, "print the exact answer as JSON")
	root.AddCommand(a.fit(), a.vertex(), a.combine(), a.express(), a.cornea(), a.cautions(), a.methods())
	return root
}

// call calls one rpc through a connection to the server that was named, or to the engine in this process.
func (a *app) call(ctx context.Context, do func(context.Context, grpc.ClientConnInterface) error) error {
	ctx, cancel := context.WithTimeout(ctx, a.timeout)
	defer cancel()
	if a.server == "" {
		return do(ctx, embedded.New(server.Options{}))
	}
	secure := credentials.NewTLS(nil)
	if a.openText || loopback(a.server) {
		secure = insecure.NewCredentials()
	}
	conn, err := grpc.NewClient(a.server, grpc.WithTransportCredentials(secure))
	if err != nil {
		return usage("--server %s: %w", a.server, err)
	}
	defer conn.Close()
	return do(ctx, conn)
}

// loopback reports whether an address is on this machine.
func loopback(address string) bool {
	host, _, err := net.SplitHostPort(address)
	if err != nil {
		return false
	}
	ip, err := netip.ParseAddr(host)
	return host == "localhost" || err == nil && ip.IsLoopback()
}
