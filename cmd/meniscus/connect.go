package main

import (
	"context"
	"fmt"
	"net"
	"net/netip"

	"google.golang.org/grpc"
	"google.golang.org/grpc/credentials"
	"google.golang.org/grpc/credentials/insecure"
	"google.golang.org/protobuf/proto"

	"meniscus.example/server"
)

// refusal is an error that a call came back with.
type refusal struct {
	err error
	// flags says what on the command line the fields of the request come from.
	flags origins
}

func (r *refusal) Error() string { return r.err.Error() }

// ask makes a call through a connection to the server that was named, or to the engine in this process.
func ask[Response proto.Message](
	ctx context.Context, a *app, flags origins, call func(context.Context, grpc.ClientConnInterface) (Response, error),
) (Response, error) {
	ctx, cancel := context.WithTimeout(ctx, a.timeout)
	defer cancel()
	conn, closeConn, err := a.connect()
	if err != nil {
		var none Response
		return none, err
	}
	defer closeConn()
	res, err := call(ctx, conn)
	if err != nil {
		return res, &refusal{err, flags}
	}
	return res, nil
}

// checkConnection says what is wrong with the flags that say whom to ask.
func (a *app) checkConnection() error {
	host, port, err := net.SplitHostPort(a.server)
	switch {
	case a.timeout <= 0:
		return fmt.Errorf("--timeout is %v: a time above 0 is needed, such as 10s", a.timeout)
	case a.server == "" && a.openText:
		return fmt.Errorf("--plaintext says how to call a server: --server HOST:PORT is needed as well")
	case a.server != "" && (err != nil || host == "" || port == ""):
		return fmt.Errorf("--server is %q: HOST:PORT is needed, such as 127.0.0.1:7417", a.server)
	}
	return nil
}

// connect makes the connection, and what closes it.
func (a *app) connect() (grpc.ClientConnInterface, func(), error) {
	if a.server == "" {
		return a.engine(), func() {}, nil
	}
	secure := credentials.NewTLS(nil)
	if !a.encrypted() {
		secure = insecure.NewCredentials()
	}
	conn, err := grpc.NewClient("dns:///"+a.server, grpc.WithTransportCredentials(secure), grpc.WithUserAgent("meniscus/"+server.Version))
	if err != nil {
		return nil, nil, fmt.Errorf("--server is %q: %w", a.server, err)
	}
	return conn, func() { _ = conn.Close() }, nil
}

// encrypted reports whether the server is called with TLS: unless it is on this machine, or --plaintext says otherwise.
func (a *app) encrypted() bool { return !a.openText && !loopback(a.server) }

// loopback reports whether an address is on this machine.
func loopback(address string) bool {
	host, _, err := net.SplitHostPort(address)
	if err != nil {
		return false
	}
	ip, err := netip.ParseAddr(host)
	return host == "localhost" || err == nil && ip.IsLoopback()
}
