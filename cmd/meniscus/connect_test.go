package main

import (
	"net"
	"strings"
	"testing"

	"meniscus.example/server"
)

// serve serves the engine without encryption on a port of this machine.
func serve(t *testing.T) (port string) {
	t.Helper()
	l, err := net.Listen("tcp", "127.0.0.1:0")
	if err != nil {
		t.Fatal(err)
	}
	g := server.New(server.Options{}).GRPC()
	done := make(chan error, 1)
	go func() { done <- g.Serve(l) }()
	t.Cleanup(func() {
		g.Stop()
		if err := <-done; err != nil {
			t.Errorf("Serve: %v", err)
		}
	})
	_, port, err = net.SplitHostPort(l.Addr().String())
	if err != nil {
		t.Fatal(err)
	}
	return port
}

func TestAServerGivesTheSameAnswersAndErrorsAsTheEngineInTheProcess(t *testing.T) {
	t.Parallel()
	at := net.JoinHostPort("localhost", serve(t))
	for _, args := range [][]string{
		usualFit,
		append(usualFit[:len(usualFit):len(usualFit)], "--json", "--explain"),
		{"fit", "--rx", "-425", "--k", "43 mm", "--json"},
		{"vertex", "-7.00 / -3.00 x 180", "--from", "12"},
		{"vertex", "-7.00 / -3.00 x 180"},
		{"combine", "-1.00", "-2.00 x 3"},
		{"cautions"},
		{"methods", "--json"},
	} {
		here := call(t, nil, "", args...)
		there := call(t, nil, "", append(args[:len(args):len(args)], "--server", at)...)
		if here != there {
			t.Errorf("%q: in the process\n%+v\nfrom the server\n%+v", args, here, there)
		}
	}
}

// 0.0.0.0 leads to this machine, and is not an address on it: the program must not trust it to be one.
func TestAServerElsewhereIsCalledWithTLSUnlessPlaintextIsAskedFor(t *testing.T) {
	t.Parallel()
	elsewhere := net.JoinHostPort("0.0.0.0", serve(t))
	got := call(t, nil, "", "methods", "--server", elsewhere, "--timeout", "5s")
	if got.code != exitFailed || got.out != "" || !strings.Contains(got.err, "no answer from "+elsewhere) || !strings.Contains(got.err, "--plaintext calls without") {
		t.Errorf("with TLS: %+v", got)
	}
	if got := call(t, nil, "", "methods", "--server", elsewhere, "--plaintext"); got.code != exitFine || !strings.HasPrefix(got.out, "Methods\n") {
		t.Errorf("with --plaintext: %+v", got)
	}
}

func TestAServerThatIsNotThereIsAFailure(t *testing.T) {
	t.Parallel()
	l, err := net.Listen("tcp", "127.0.0.1:0")
	if err != nil {
		t.Fatal(err)
	}
	nobody := l.Addr().String()
	if err := l.Close(); err != nil {
		t.Fatal(err)
	}
	got := call(t, nil, "", "methods", "--server", nobody)
	if got.code != exitFailed || got.out != "" || !strings.Contains(got.err, "no answer from "+nobody) || strings.Contains(got.err, "TLS") {
		t.Errorf("%+v", got)
	}
	withinTheWidth(t, "standard error", got.err)
}

func TestOnlyAddressesOfThisMachineAreLoopback(t *testing.T) {
	t.Parallel()
	for address, want := range map[string]bool{
		"127.0.0.1:7417": true, "127.8.8.8:1": true, "localhost:7417": true, "[::1]:7417": true,
		"0.0.0.0:7417": false, "[::]:7417": false, "192.0.2.7:7417": false, "localhost.example:7417": false, "example:7417": false,
		"127.0.0.1": false, "": false,
	} {
		if got := loopback(address); got != want {
			t.Errorf("%q: got %v", address, got)
		}
	}
}
