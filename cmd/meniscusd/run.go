package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"log/slog"
	"net"
	"net/netip"
	"runtime/debug"
	"strings"
	"time"

	"github.com/spf13/pflag"

	"meniscus.example/server"
)

// The exit codes.
const (
	exitFine   = 0 // stopped by a signal, or --help or --version
	exitFailed = 1 // it could not serve
	exitUsage  = 2 // the command line or the environment is wrong
)

const about = `meniscusd serves contact lens calculations over gRPC (meniscus.v1).

Every answer is a calculated starting point, to be confirmed on the eye by a
licensed practitioner under local rules. It diagnoses nothing and stores nothing
about a patient.

Usage:
  meniscusd [flags]

Flags (each also from the environment: --listen from MENISCUS_LISTEN, and so on;
a flag beats the environment):
`

// settings are what the command line and the environment say.
type settings struct {
	listen          string
	anyInterface    bool
	logLevel        slog.Level
	grace           time.Duration
	maxMessageBytes int
	reflection      bool
}

// run is the whole program: it serves until ctx ends, and gives the exit code.
func run(ctx context.Context, args []string, env func(string) (string, bool), stdout, stderr io.Writer) int {
	s, done, err := parse(args, env, stdout)
	switch {
	case err != nil:
		fmt.Fprintf(stderr, "meniscusd: %v\nmeniscusd --help shows the flags.\n", err)
		return exitUsage
	case done:
		return exitFine
	}
	if _, set := env("GOGC"); !set {
		defer debug.SetGCPercent(debug.SetGCPercent(server.GCPercent))
	}
	log := slog.New(slog.NewJSONHandler(stderr, &slog.HandlerOptions{Level: s.logLevel}))
	if err := serve(ctx, s, log); err != nil {
		fmt.Fprintf(stderr, "meniscusd: %v\n", err)
		return exitFailed
	}
	return exitFine
}

// parse reads the command line and the environment. It is done where all that was asked for was a text.
func parse(args []string, env func(string) (string, bool), stdout io.Writer) (s settings, done bool, err error) {
	f := pflag.NewFlagSet("meniscusd", pflag.ContinueOnError)
	f.SetOutput(io.Discard)
	f.SortFlags = false
	f.StringVar(&s.listen, "listen", "127.0.0.1:7417", "address of the gRPC server, `HOST:PORT`; port 0 takes a free one")
	f.BoolVar(&s.anyInterface, "plaintext-beyond-loopback", false, "serve without encryption on an address that other machines reach")
	f.TextVar(&s.logLevel, "log-level", slog.LevelInfo, "least `LEVEL` logged: DEBUG (every call), INFO, WARN, ERROR")
	f.DurationVar(&s.grace, "shutdown-grace", 10*time.Second, "how long calls may go on after SIGTERM")
	f.IntVar(&s.maxMessageBytes, "max-message-bytes", 1<<20, "greatest size of a request in bytes")
	f.BoolVar(&s.reflection, "reflection", true, "answer server reflection, from which grpcurl learns the schema")
	version := f.Bool("version", false, "print the version and stop")
	switch err := f.Parse(args); {
	case errors.Is(err, pflag.ErrHelp):
		fmt.Fprint(stdout, about, f.FlagUsages())
		return s, true, nil
	case err != nil:
		return s, false, err
	case f.NArg() > 0:
		return s, false, fmt.Errorf("%q is not a flag; meniscusd takes flags only", f.Arg(0))
	}
	if *version {
		fmt.Fprintln(stdout, "meniscusd", server.VersionText())
		return s, true, nil
	}
	f.VisitAll(func(flag *pflag.Flag) {
		name := "MENISCUS_" + strings.ToUpper(strings.ReplaceAll(flag.Name, "-", "_"))
		value, set := env(name)
		if err != nil || !set || flag.Changed || flag.Name == "version" {
			return
		}
		if bad := flag.Value.Set(value); bad != nil {
			err = fmt.Errorf("%s is %q: %w", name, value, bad)
		}
	})
	if err != nil {
		return s, false, err
	}
	switch {
	case s.maxMessageBytes < 1024:
		return s, false, fmt.Errorf("--max-message-bytes is %d; a request can need 1024 at least", s.maxMessageBytes)
	case s.grace < 0:
		return s, false, fmt.Errorf("--shutdown-grace is %v; it cannot be negative", s.grace)
	case s.listen == "":
		// The network takes it for any port of every interface.
		return s, false, errors.New("--listen is empty; give HOST:PORT")
	case !s.anyInterface && !loopback(s.listen):
		return s, false, fmt.Errorf("--listen is %s, which other machines may reach, and this version serves without encryption: "+
			"listen on 127.0.0.1 behind something that encrypts, or say --plaintext-beyond-loopback", s.listen)
	}
	return s, false, nil
}

// loopback reports whether only this machine reaches the address.
func loopback(address string) bool {
	host, _, err := net.SplitHostPort(address)
	if err != nil {
		return true // not an address: listening says so
	}
	ip, err := netip.ParseAddr(host)
	return host == "localhost" || err == nil && ip.IsLoopback()
}

// serve listens and serves until ctx ends, then stops gracefully.
func serve(ctx context.Context, s settings, log *slog.Logger) error {
	listener, err := net.Listen("tcp", s.listen)
	if err != nil {
		return err
	}
	services := server.New(server.Options{Log: log, MaxMessageBytes: s.maxMessageBytes, NoReflection: !s.reflection})
	g := services.GRPC()
	failed := make(chan error, 1)
	go func() { failed <- g.Serve(listener) }()
	log.Info("meniscusd listening", slog.String("address", listener.Addr().String()), slog.String("version", server.Version))
	select {
	case err := <-failed:
		return err
	case <-ctx.Done():
	}
	log.Info("meniscusd stopping")
	services.Stop(g, s.grace)
	<-failed
	log.Info("meniscusd stopped")
	return nil
}
