package embedded

import (
	"context"
	"fmt"

	"google.golang.org/grpc"
	"google.golang.org/grpc/codes"
	"google.golang.org/grpc/metadata"
	"google.golang.org/grpc/status"
	"google.golang.org/protobuf/proto"

	"meniscus.example/server"
)

// Conn is a connection to an engine in the process. It is safe for concurrent use, opens nothing and needs no closing.
type Conn struct{ server *server.Server }

var _ grpc.ClientConnInterface = (*Conn)(nil)

// New makes a connection to a new engine with the given options.
func New(o server.Options) *Conn { return &Conn{server.New(o)} }

// Invoke answers one rpc. Messages are copied in and out, so that neither side sees a change of the other's; outgoing metadata
// arrives as incoming metadata, and the call options Header and Trailer are filled. Errors are statuses.
func (c *Conn) Invoke(ctx context.Context, method string, args, reply any, opts ...grpc.CallOption) error {
	in, ok := args.(proto.Message)
	out, ok2 := reply.(proto.Message)
	if !ok || !ok2 {
		return status.Error(codes.Internal, fmt.Sprintf("embedded: %T and %T are not both protobuf messages", args, reply))
	}
	stream := &transport{method: method}
	// Also where there is none: what a handler that calls from here was sent itself does not go on, as it does not on a wire.
	md, _ := metadata.FromOutgoingContext(ctx)
	ctx = metadata.NewIncomingContext(ctx, md)
	ctx = grpc.NewContextWithServerTransportStream(ctx, stream)
	res, err := c.server.Call(ctx, method, func(request any) error {
		proto.Merge(request.(proto.Message), in)
		return nil
	})
	for _, o := range opts {
		switch o := o.(type) {
		case grpc.HeaderCallOption:
			*o.HeaderAddr = stream.header
		case grpc.TrailerCallOption:
			*o.TrailerAddr = stream.trailer
		}
	}
	if err != nil {
		return status.Convert(err).Err()
	}
	proto.Reset(out)
	proto.Merge(out, res.(proto.Message))
	return nil
}

// NewStream fails with UNIMPLEMENTED: the engine has no streams yet.
func (c *Conn) NewStream(_ context.Context, _ *grpc.StreamDesc, method string, _ ...grpc.CallOption) (grpc.ClientStream, error) {
	return nil, server.NotServed(method)
}

// transport keeps the header and trailer that a handler sets.
type transport struct {
	method          string
	header, trailer metadata.MD
}

func (t *transport) Method() string { return t.method }

func (t *transport) SetHeader(md metadata.MD) error {
	t.header = metadata.Join(t.header, md)
	return nil
}

func (t *transport) SendHeader(md metadata.MD) error { return t.SetHeader(md) }

func (t *transport) SetTrailer(md metadata.MD) error {
	t.trailer = metadata.Join(t.trailer, md)
	return nil
}
